//! Units of resistance in a table.

use crate::quantity::KLITZING;

/// A unit of resistance: `factor` × 10^`power` Ω.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Unit {
    /// Power of ten, kept apart so that digits become a float only once.
    pub power: i32,
    /// The rest: 1 for ohms, the von Klitzing constant in Ω for h/e².
    pub factor: f64,
}

/// Prefixes as they are typed; both characters for micro, and `u`.
const PREFIXES: [(&str, i32); 9] =
    [("", 0), ("n", -9), ("µ", -6), ("μ", -6), ("u", -6), ("m", -3), ("k", 3), ("M", 6), ("G", 9)];

/// h/e² as it is typed.
const KLITZING_NAMES: [&str; 3] = ["h/e2", "h/e²", "h/e^2"];

impl Unit {
    /// The ohm.
    pub const OHM: Self = Self { power: 0, factor: 1.0 };

    /// Reads `kΩ`, `mOhm`, `h/e2`; else the hint that helps most.
    pub fn from_text(text: &str) -> Result<Self, String> {
        let compact: String = text.split_whitespace().collect();
        if KLITZING_NAMES.contains(&compact.as_str()) {
            return Ok(Self { power: 0, factor: KLITZING.value });
        }
        let prefix = without_ohm(&compact);
        let power = prefix.and_then(|prefix| PREFIXES.iter().find(|(name, _)| *name == prefix));
        power.map(|(_, power)| Self { power: *power, factor: 1.0 }).ok_or_else(|| hint(&compact))
    }
}

/// What stands before the ohm: the Greek letter, the ohm sign, or the word in any case.
fn without_ohm(text: &str) -> Option<&str> {
    let word = ["ohms", "ohm"].iter().find_map(|word| {
        let start = text.len().checked_sub(word.len())?;
        text.get(start..).filter(|end| end.eq_ignore_ascii_case(word)).map(|_| &text[..start])
    });
    word.or_else(|| text.strip_suffix(['\u{03A9}', '\u{2126}']))
}

fn hint(text: &str) -> String {
    match text {
        "k" | "K" | "kilo" | "KΩ" | "Kohm" | "KOhm" | "KOHM" => "if kilohm is meant, write kΩ or kohm".to_string(),
        "m" | "M" | "u" | "µ" | "G" | "n" => format!("if ohms are meant, write {text}Ω or {text}ohm"),
        "e2/h" | "e²/h" | "e^2/h" | "S" | "mS" | "µS" | "uS" => {
            "write the resistance, not the conductance".to_string()
        }
        "V" | "mV" | "µV" | "uV" | "nV" => "write the resistance: voltage over current".to_string(),
        "%" | "ppm" | "ppb" => "write it in ohm".to_string(),
        _ => "write Ω, mΩ, kΩ, MΩ, ohm, kohm, … or h/e2".to_string(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    // Prefixes: BIPM, SI Brochure, 9th edition, SI prefixes (from memory).
    #[test]
    fn every_spelling_has_its_power_of_ten() {
        for (text, power) in [
            ("Ω", 0),
            ("\u{2126}", 0),
            ("ohm", 0),
            ("Ohms", 0),
            ("kΩ", 3),
            ("k ohm", 3),
            ("kOhm", 3),
            ("mΩ", -3),
            ("mohm", -3),
            ("MΩ", 6),
            ("MOHM", 6),
            ("GΩ", 9),
            ("uohm", -6),
            ("\u{B5}Ω", -6),
            ("\u{3BC}Ω", -6),
            ("nΩ", -9),
        ] {
            assert_eq!(Unit::from_text(text), Ok(Unit { power, factor: 1.0 }), "{text}");
        }
    }

    #[test]
    fn h_over_e_squared_is_a_unit_of_resistance() {
        // CODATA 2018: 25 812.807 45… Ω.
        for text in ["h/e2", "h/e²", "h/e^2", "h / e2"] {
            assert!((Unit::from_text(text).unwrap().factor - 25_812.807_45).abs() < 1e-5);
        }
    }

    #[test]
    fn other_words_are_refused_with_advice() {
        for (text, advice) in [
            ("k", "kΩ"),
            ("K", "kΩ"),
            ("Kohm", "kΩ"),
            ("e2/h", "conductance"),
            ("mV", "voltage over current"),
            ("%", "in ohm"),
            ("furlong", "h/e2"),
            ("", "h/e2"),
        ] {
            assert!(Unit::from_text(text).unwrap_err().contains(advice), "{text}");
        }
    }
}
