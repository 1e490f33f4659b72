//! What a magnet stores, pulls and does to implants.

use crate::cooldown::Cooldown;
use crate::device::Device;
use crate::quantity::printed;
use crate::quantity::printed::as_given;
use crate::safety::Caution;

/// Latent heat of helium in kJ per litre of liquid: 20.75 kJ/kg at 125 kg/m³ (University of Wisconsin property tables).
const HELIUM_KJ_PER_LITRE: f64 = 2.6;

/// Cubic metres of gas at 21 °C per litre of liquid helium (the same tables).
const HELIUM_M3_PER_LITRE: f64 = 0.755;

/// E = ½LI², and how much helium that boils.
pub fn stored_energy(cooldown: &Cooldown) -> Option<Caution> {
    let (inductance_h, current_a) = (cooldown.magnet.inductance_h?, cooldown.magnet.current_a?);
    let kilojoule = inductance_h * current_a * current_a / 2.0 / 1000.0;
    // Gas is taken from the litres as printed, so that a reader who checks the line finds it right.
    let litre = (kilojoule / HELIUM_KJ_PER_LITRE).round();
    let text = format!(
        "The magnet stores ½LI² = {} kJ at {} A ({} H): enough to boil {} L of helium into {} m³ of gas. De-energise, isolate, \
         lock and verify before its leads are opened.",
        printed::significant(kilojoule, 2),
        as_given(current_a),
        as_given(inductance_h),
        as_given(litre),
        printed::decimals(litre * HELIUM_M3_PER_LITRE, 0),
    );
    let source = "latent heat and expansion: University of Wisconsin property tables; lock-out: 29 CFR 1910.147 as an example of \
                  a law";
    Some(Caution { text, source, key: "[magnet] inductance_H, current_A" })
}

/// A superconducting magnet is meant wherever an inductance is given.
pub fn quench(cooldown: &Cooldown) -> Option<Caution> {
    cooldown.magnet.inductance_h?;
    Some(Caution {
        text: "A quench cannot be stopped: leave, stay low, do not come back until the room is cleared; the field may not be \
               gone."
            .to_string(),
        source: "common practice",
        key: "[magnet] inductance_H",
    })
}

/// Limits for people in a static field.
pub fn static_field(cooldown: &Cooldown) -> Option<Caution> {
    let tesla = cooldown.magnet.max_field_t?;
    Some(Caution {
        text: format!(
            "The magnet reaches {} T. At work at most 2 T for head and trunk, 8 T for limbs; the public 400 mT. Loose iron is \
             pulled in from a few mT on: check pockets and tools.",
            as_given(tesla)
        ),
        source: "ICNIRP 2009, Health Phys. 96, 504",
        key: "[magnet] max_field_T",
    })
}

/// Any field in use calls for it, also where no magnet is described.
pub fn implants(device: &Device, cooldown: Option<&Cooldown>) -> Option<Caution> {
    let key = if cooldown.is_some_and(|cooldown| cooldown.magnet.max_field_t.is_some()) {
        "[magnet] max_field_T"
    } else if device.points.iter().any(|point| point.field_t.is_some()) {
        "[[point]] field_T"
    } else {
        return None;
    };
    Some(Caution {
        text: "Persons with pacemakers or other implants stay outside the 0.5 mT line unless cleared; where another line is \
               marked, the local rule decides."
            .to_string(),
        source: "common practice; the MR equipment standard IEC 60601-2-33:2022 uses 0.9 mT",
        key,
    })
}
