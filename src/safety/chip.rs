//! What can harm the chip.

use crate::cooldown::Cooldown;
use crate::device::Device;
use crate::device::Overlay;
use crate::device::OverlayKind;
use crate::quantity::printed::as_given;
use crate::safety::Caution;

/// A person feels a discharge long after a thin gate has died of it.
pub fn discharge(device: &Device) -> Option<Caution> {
    device.overlays.iter().find(|overlay| overlay.kind == OverlayKind::Gate)?;
    Some(Caution {
        text: "Gates die of discharges that nobody feels (a person feels 2–3 kV; the usual programme protects parts that stand \
               100 V, thin gates stand less). Short all pins before anything is plugged or unplugged; wrist strap of about 1 MΩ."
            .to_string(),
        source: "IEC 61340-5-1:2024, ANSI/ESD S20.20-2021; common practice",
        key: "[[gate]]",
    })
}

/// The limits that the device file gives.
pub fn gate_limits(device: &Device) -> Option<Caution> {
    let limits = |overlay: &Overlay| {
        let (low, high) = overlay.limits_v?;
        Some(format!("{} {} … {} V", overlay.name, as_given(low), as_given(high)))
    };
    let limits: Vec<String> = device.overlays.iter().filter_map(limits).collect();
    (!limits.is_empty()).then(|| Caution {
        text: format!("Never beyond the gate limits of the device file: {}. Ramp, do not step.", limits.join("; ")),
        source: "device file",
        key: "[[gate]] limits_V",
    })
}

/// The current that was used, as the one to stay at.
pub fn current(cooldown: &Cooldown) -> Option<Caution> {
    let nanoampere = cooldown.source.current_na?;
    Some(Caution {
        text: format!(
            "Measured with {} nA. Before more is sent, check that no reading changes at half and at twice the current.",
            as_given(nanoampere)
        ),
        source: "cooldown file; common practice",
        key: "[source] current_nA",
    })
}
