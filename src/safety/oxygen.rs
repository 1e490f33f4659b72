//! What is left of the oxygen if a whole vessel boils off into its room.

use crate::cooldown::Cooldown;
use crate::quantity::printed;
use crate::quantity::printed::as_given;
use crate::safety::Caution;

/// Oxygen in air by volume, in per cent (as in the calculation note named below).
const OXYGEN_IN_AIR_PERCENT: f64 = 20.95;

/// Litres of gas at 21 °C and 1 atm per litre of liquid helium and nitrogen (property tables named below).
const HELIUM_EXPANSION: f64 = 755.0;
const NITROGEN_EXPANSION: f64 = 695.0;

const LITRE_PER_M3: f64 = 1000.0;

const SOURCE: &str = "method: University of Nottingham cryogen calculation note; expansion: University of Wisconsin property \
                      tables; 19.5 %: OSHA interpretation 2007-04-02, EIGA Doc 44/18";

/// Helium collects under the ceiling.
pub fn helium(cooldown: &Cooldown) -> Option<Caution> {
    let gas = Gas { name: "helium", expansion: HELIUM_EXPANSION, place: "it collects under the ceiling: leave low" };
    Some(caution(cooldown, cooldown.room.helium_litre?, &gas, "[room] helium_litre"))
}

/// Nitrogen collects near the floor.
pub fn nitrogen(cooldown: &Cooldown) -> Option<Caution> {
    let gas = Gas {
        name: "nitrogen",
        expansion: NITROGEN_EXPANSION,
        place: "cold, it collects near the floor: do not kneel",
    };
    Some(caution(cooldown, cooldown.room.nitrogen_litre?, &gas, "[room] nitrogen_litre"))
}

struct Gas {
    name: &'static str,
    expansion: f64,
    place: &'static str,
}

fn caution(cooldown: &Cooldown, litre: f64, gas: &Gas, key: &'static str) -> Caution {
    let estimate = match cooldown.room.volume_m3.filter(|volume| *volume > 0.0) {
        Some(volume) => estimate(litre, volume, gas),
        None => {
            format!(
                "{} L of liquid {}: without the room's volume no oxygen estimate is made",
                as_given(litre),
                gas.name
            )
        }
    };
    let alarm = match cooldown.room.oxygen_alarm {
        Some(true) => "Leave at the first alarm",
        Some(false) => "No oxygen alarm is fitted: carry one, leave when it sounds",
        None => "Carry or fit an oxygen alarm, leave when it sounds",
    };
    Caution { text: format!("{estimate}; {}. Enter only above 19.5 %. {alarm}.", gas.place), source: SOURCE, key }
}

fn estimate(litre: f64, volume_m3: f64, gas: &Gas) -> String {
    let [displaced, mixed] = oxygen_percent(litre * gas.expansion / LITRE_PER_M3 / volume_m3);
    format!(
        "{} L of liquid {} boiling off into {} m³ leave {} % of oxygen if the gas displaces air, {} % if it mixes \
         ({} L of gas per litre at 21 °C)",
        as_given(litre),
        gas.name,
        as_given(volume_m3),
        printed::decimals(displaced, 1),
        printed::decimals(mixed, 1),
        as_given(gas.expansion),
    )
}

/// Oxygen in per cent for a gas volume of `ratio` rooms: displaced, 20.95 (1 − r), not below zero; mixed while it flows
/// in, 20.95 exp(−r).
fn oxygen_percent(ratio: f64) -> [f64; 2] {
    [(1.0 - ratio).max(0.0), libm::exp(-ratio)].map(|share| OXYGEN_IN_AIR_PERCENT * share)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Worked examples of the calculation note's method, in per cent: displaced beside mixed.
    #[test]
    fn worked_rooms_come_out() {
        for (litre, volume, displaced, mixed) in
            [(10.0, 30.0, 15.7, 16.3), (50.0, 60.0, 7.8, 11.2), (100.0, 150.0, 10.4, 12.7), (250.0, 150.0, 0.0, 6.0)]
        {
            let [low, high] = oxygen_percent(litre * HELIUM_EXPANSION / LITRE_PER_M3 / volume);
            assert!(
                (low - displaced).abs() < 0.05 && (high - mixed).abs() < 0.05,
                "{litre} L in {volume} m³: {low}, {high}"
            );
        }
    }

    /// 8.8 % displaced; 11.8 % mixed was worked out for gas at 20 °C, which is 0.4 % less gas.
    #[test]
    fn fifty_litres_of_nitrogen_in_sixty_cubic_metres() {
        let [low, high] = oxygen_percent(50.0 * NITROGEN_EXPANSION / LITRE_PER_M3 / 60.0);
        assert!((low - 8.8).abs() < 0.05 && (high - 11.8).abs() < 0.1, "{low}, {high}");
    }
}
