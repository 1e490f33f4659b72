//! Cold surfaces and dewars.

use crate::cooldown::Cooldown;
use crate::safety::Caution;

/// Skin sticks to metal well below the freezing point; a chip that was cooled to less than this was reached with a cryogen
/// or a cold head (common practice).
const COLD_K: f64 = 200.0;

/// Any cryogen or cold chip calls for it.
pub fn burns(cooldown: &Cooldown) -> Option<Caution> {
    let key = if cooldown.room.helium_litre.is_some() {
        "[room] helium_litre"
    } else if cooldown.room.nitrogen_litre.is_some() {
        "[room] nitrogen_litre"
    } else if cooldown.temperature_k.is_some_and(|kelvin| kelvin < COLD_K) {
        "[cooldown] temperature_K"
    } else {
        return None;
    };
    Some(Caution {
        text: "Cold burns: loose insulated gloves and a face shield. If skin is hurt: tepid water, not above 40 °C, no rubbing, \
               do not tear off frozen clothing, see a doctor."
            .to_string(),
        source: "common practice in cryogen safety notes",
        key,
    })
}

/// Any liquid cryogen calls for it.
pub fn dewars(cooldown: &Cooldown) -> Option<Caution> {
    let helium = cooldown.room.helium_litre.map(|_| "[room] helium_litre");
    let key = helium.or(cooldown.room.nitrogen_litre.map(|_| "[room] nitrogen_litre"))?;
    Some(Caution {
        text: "Nobody rides in a lift with a dewar above 5 L; many sites: with any. Surfaces colder than about 80 K condense air \
               with up to 50 % oxygen: no oil, grease or tar there. No closed volumes: relief devices are sized by the maker."
            .to_string(),
        source: "condensed air: CERN and KIT notes; relief: EN 17527:2021, ISO 21013-3:2016",
        key,
    })
}
