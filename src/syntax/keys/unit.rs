//! Units as they stand at the end of a key.

/// A unit in a key.
#[derive(Debug, PartialEq, Eq)]
pub struct Unit {
    /// The end of the key, without the underscore before it.
    pub suffix: &'static str,
    /// In words, for messages.
    pub words: &'static str,
    /// What it measures; units of one quantity can be converted.
    pub quantity: &'static str,
    /// Power of ten to the SI unit (for litres: to the cubic metre).
    pub power: i32,
}

const fn unit(suffix: &'static str, words: &'static str, quantity: &'static str, power: i32) -> Unit {
    Unit { suffix, words, quantity, power }
}

/// Every unit that is known at the end of a key, right or wrong there; longer endings stand before shorter ones.
/// Factors: SI Brochure, 9th edition (2019); the gauss is 1e-4 T.
pub static UNITS: &[Unit] = &[
    unit("per_m2_per_V", "per square metre and volt", "density per voltage", 0),
    unit("per_cm2_per_V", "per square centimetre and volt", "density per voltage", 4),
    unit("per_m2", "per square metre", "density", 0),
    unit("per_cm2", "per square centimetre", "density", 4),
    unit("m2_per_Vs", "square metres per volt and second", "mobility", 0),
    unit("cm2_per_Vs", "square centimetres per volt and second", "mobility", -4),
    unit("nm", "nanometres", "length", -9),
    unit("um", "micrometres", "length", -6),
    unit("mm", "millimetres", "length", -3),
    unit("cm", "centimetres", "length", -2),
    unit("m", "metres", "length", 0),
    unit("T", "tesla", "field", 0),
    unit("mT", "millitesla", "field", -3),
    unit("G", "gauss", "field", -4),
    unit("kG", "kilogauss", "field", -1),
    unit("V", "volts", "voltage", 0),
    unit("mV", "millivolts", "voltage", -3),
    unit("uV", "microvolts", "voltage", -6),
    unit("A", "amperes", "current", 0),
    unit("mA", "milliamperes", "current", -3),
    unit("uA", "microamperes", "current", -6),
    unit("nA", "nanoamperes", "current", -9),
    unit("pA", "picoamperes", "current", -12),
    unit("ohm", "ohm", "resistance", 0),
    unit("kohm", "kiloohm", "resistance", 3),
    unit("Mohm", "megaohm", "resistance", 6),
    unit("Gohm", "gigaohm", "resistance", 9),
    unit("nF", "nanofarads", "capacitance", -9),
    unit("pF", "picofarads", "capacitance", -12),
    unit("uF", "microfarads", "capacitance", -6),
    unit("H", "henry", "inductance", 0),
    unit("mH", "millihenry", "inductance", -3),
    unit("Hz", "hertz", "frequency", 0),
    unit("kHz", "kilohertz", "frequency", 3),
    unit("mHz", "millihertz", "frequency", -3),
    unit("K", "kelvin", "temperature", 0),
    unit("mK", "millikelvin", "temperature", -3),
    unit("m3", "cubic metres", "volume", 0),
    unit("litre", "litres", "volume", -3),
    unit("deg", "degrees", "angle in degrees", 0),
    unit("rad", "radians", "angle in radians", 0),
];

/// The key without its unit, and the unit; none where the key does not end in a known unit.
pub fn split_unit(key: &str) -> Option<(&str, &'static Unit)> {
    UNITS.iter().find_map(|unit| {
        let stem = key.strip_suffix(unit.suffix)?;
        // `ohm` is a key on its own; everywhere else an underscore stands before the unit.
        let stem = if stem.is_empty() { stem } else { stem.strip_suffix('_')? };
        Some((stem, unit))
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_longest_unit_is_found() {
        for (key, stem, suffix) in [
            ("density_per_m2_per_V", "density", "per_m2_per_V"),
            ("density_per_m2", "density", "per_m2"),
            ("width_um", "width", "um"),
            ("ohm", "", "ohm"),
            ("series_kohm", "series", "kohm"),
            ("mobility_cm2_per_Vs", "mobility", "cm2_per_Vs"),
        ] {
            let (found_stem, unit) = split_unit(key).unwrap();
            assert_eq!((found_stem, unit.suffix), (stem, suffix));
        }
        assert_eq!(split_unit("system"), None);
    }

    /// Each factor against the prefix in its name: kilo 3, mega 6, giga 9, centi −2, milli −3, micro −6, nano −9,
    /// pico −12 (SI Brochure, 9th edition, table 7).
    #[test]
    fn powers_follow_the_prefixes() {
        let prefixes = [("kilo", 3), ("mega", 6), ("giga", 9), ("centi", -2), ("milli", -3)];
        let small = [("micro", -6), ("nano", -9), ("pico", -12)];
        let plain = UNITS.iter().filter(|unit| !unit.words.contains(' ') && !unit.words.contains("gauss"));
        for unit in plain.filter(|unit| unit.suffix != "litre") {
            let power = prefixes.iter().chain(&small).find(|(prefix, _)| unit.words.starts_with(prefix));
            assert_eq!(unit.power, power.map_or(0, |(_, power)| *power), "{}", unit.suffix);
        }
    }
}
