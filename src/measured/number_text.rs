//! A measured number as a person writes it: `12.906(4) kΩ`, `12906 ± 3`, `0.5 h/e2`.
//!
//! What is ambiguous is a fault that asks: a comma may be a decimal or a thousands comma, a bare `k` has no unit. Digits are
//! turned into a float once, with the power of ten of unit and bracket put in, so that 12.906 kΩ is exactly the float 12906.

use std::ops::Range;

use crate::measured::cursor::Cursor;
use crate::measured::cursor::Decimal;
use crate::measured::unit::Unit;

/// What a cell says.
#[derive(Clone, Debug, PartialEq)]
pub struct NumberText {
    value: Decimal,
    u: Option<Uncertainty>,
    /// The unit, where the cell names one.
    pub unit: Option<Unit>,
}

/// Why a cell cannot be read, and which of its bytes are meant.
#[derive(Clone, Debug, PartialEq)]
pub struct NumberFault {
    /// Stable code.
    pub code: &'static str,
    /// What is wrong.
    pub message: String,
    /// What to do.
    pub hint: String,
    /// Bytes of the cell.
    pub bytes: Range<usize>,
}

#[derive(Clone, Debug, PartialEq)]
struct Uncertainty {
    size: Decimal,
    unit: Option<Unit>,
}

impl NumberText {
    /// The value in Ω, with `unit` where the cell names none.
    pub fn ohm(&self, unit: Unit) -> f64 {
        self.value.times(self.unit.unwrap_or(unit))
    }

    /// The standard or expanded uncertainty in Ω as written; none where none is.
    pub fn u_ohm(&self, unit: Unit) -> Option<f64> {
        self.u.as_ref().map(|u| u.size.times(u.unit.or(self.unit).unwrap_or(unit)))
    }

    /// The uncertainty as the number it is written with, of which only the sign has a meaning before its unit is known.
    pub fn bare_u(&self) -> Option<f64> {
        self.u.as_ref().map(|u| u.size.times(Unit::OHM))
    }

    /// Whether it is a number with neither unit nor uncertainty.
    pub fn is_bare(&self) -> bool {
        self.unit.is_none() && self.u.is_none()
    }

    /// The bare number, where no unit is expected.
    pub fn bare(&self) -> f64 {
        self.value.times(Unit::OHM)
    }
}

/// Reads one cell.
pub fn parse(cell: &str) -> Result<NumberText, NumberFault> {
    refuse_markers(cell)?;
    let mut cursor = Cursor::new(cell);
    let grouped = cursor.take("(");
    let mut value = cursor.decimal()?;
    let mut u = cursor.bracket(&value)?;
    cursor.power(&mut value, u.as_mut())?;
    let first_unit = if grouped { None } else { cursor.unit()? };
    if let Some(start) = cursor.plus_minus() {
        let size = cursor.exponential()?;
        if u.is_some() {
            return Err(two_uncertainties(cell, start..cursor.at));
        }
        u = Some(size);
    }
    if grouped {
        cursor.close()?;
        cursor.power(&mut value, u.as_mut())?;
    }
    let last_unit = cursor.unit()?;
    cursor.end()?;
    Ok(NumberText {
        value,
        unit: first_unit.or(last_unit),
        u: u.map(|size| Uncertainty { size, unit: last_unit.or(first_unit) }),
    })
}

/// Words that instruments and spreadsheets write in place of a number (common practice).
fn refuse_markers(cell: &str) -> Result<(), NumberFault> {
    let word = cell.trim().trim_start_matches(['+', '-', '−']).to_lowercase();
    let marks = |marker: &&str| word.strip_prefix(*marker).is_some_and(|rest| !rest.starts_with(char::is_alphabetic));
    if !MARKERS.iter().any(marks) {
        return Ok(());
    }
    Err(NumberFault {
        code: "not-a-reading",
        message: format!("`{}` is no reading", shortened(cell)),
        hint: LEAVE_OUT.to_string(),
        bytes: 0..cell.len(),
    })
}

const MARKERS: [&str; 13] =
    ["nan", "inf", "infinity", "∞", "ol", "ovld", "over", "overload", "overflow", "n/a", "#n/a", "null", "none"];

fn two_uncertainties(cell: &str, bytes: Range<usize>) -> NumberFault {
    NumberFault {
        code: "two-uncertainties",
        message: format!("`{}` gives its uncertainty in brackets and again after ±", shortened(cell)),
        hint: "keep one of them".to_string(),
        bytes,
    }
}

/// What to do with a row whose instrument gave no number.
pub const LEAVE_OUT: &str = "put # before the row; the reason can stand in a comment line";

/// A cell as it is quoted in messages: whole, or its first 40 characters.
pub fn shortened(text: &str) -> String {
    match text.char_indices().nth(40) {
        Some((end, _)) => format!("{}…", &text[..end]),
        None => text.to_string(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::quantity::Uncertain;
    use crate::quantity::printed;
    use proptest::prelude::*;
    use proptest::test_runner::RngSeed;

    // Values by hand from what is written.
    #[test]
    fn numbers_are_read_as_people_write_them() {
        for (text, ohm, u_ohm) in [
            ("12.906(3) kΩ", 12_906.0, Some(3.0)),
            ("12.906(12)kΩ", 12_906.0, Some(12.0)),
            ("12906 ± 3 Ω", 12_906.0, Some(3.0)),
            ("12906 +/- 3 Ohm", 12_906.0, Some(3.0)),
            ("12906 +- 3 Ohm", 12_906.0, Some(3.0)),
            ("1.29064e4 ohm", 12_906.4, None),
            ("12.906 kOhm", 12_906.0, None),
            ("12.906 kΩ ± 3 Ω", 12_906.0, Some(3.0)),
            ("12.906 kΩ ± 0.003", 12_906.0, Some(3.0)),
            ("(12.906 ± 0.003) kΩ", 12_906.0, Some(3.0)),
            ("(1.2906 ± 0.0003) × 10⁴ Ω", 12_906.0, Some(3.0)),
            ("10.0(1.2) Ω", 10.0, Some(1.2)),
            ("1.2906(3)e4 Ω", 12_906.0, Some(3.0)),
            ("1.29(4) × 10²⁰ Ω", 1.29e20, Some(4e18)),
            ("1.5x10^-3 Ω", 0.001_5, None),
            ("−12.906 kΩ", -12_906.0, None),
            ("+.5 Ω", 0.5, None),
            ("12910(30) Ω", 12_910.0, Some(30.0)),
            ("3 mΩ", 0.003, None),
            ("3 MΩ", 3e6, None),
            ("0 Ω", 0.0, None),
        ] {
            let number = parse(text).unwrap();
            assert!(number.unit.is_some(), "{text}");
            assert_eq!((number.ohm(Unit::OHM), number.u_ohm(Unit::OHM)), (ohm, u_ohm), "{text}");
        }
    }

    #[test]
    fn a_unit_from_elsewhere_counts_for_value_and_uncertainty() {
        let kilo = Unit::from_text("kΩ").unwrap();
        let number = parse("12.906(3)").unwrap();
        assert_eq!((number.ohm(kilo), number.u_ohm(kilo)), (12_906.0, Some(3.0)));
    }

    #[test]
    fn what_is_no_number_is_refused_at_its_bytes() {
        for (text, code, bytes) in [
            ("", "bad-number", 0..0),
            ("12,906 Ω", "comma-in-number", 0..6),
            ("1 ± 0,5 Ω", "comma-in-number", 5..8),
            ("12.9(0,4) Ω", "comma-in-number", 5..8),
            ("12 906 Ω", "bad-number", 0..6),
            ("1'000 Ω", "bad-number", 0..5),
            ("5 Ω Ω", "unknown-unit", 2..7),
            ("5 ± 1 ± 1 Ω", "bad-number", 7..14),
            ("5(1", "bad-number", 3..3),
            ("(5 ± 1", "bad-number", 7..7),
            ("5 ±", "bad-number", 4..4),
            ("5e99999 Ω", "bad-number", 7..10),
            ("0x1F Ω", "unknown-unit", 1..7),
            ("nan(1)", "not-a-reading", 0..6),
        ] {
            let fault = parse(text).unwrap_err();
            assert_eq!((fault.code, fault.bytes), (code, bytes), "{text}");
        }
    }

    proptest! {
        #![proptest_config(ProptestConfig { rng_seed: RngSeed::Fixed(1), cases: 4000, ..ProptestConfig::default() })]

        /// What the rounding rule prints is read back as exactly what it says: printed again it is the same text, and the
        /// value is off by half of its last place at most, which is below half of the uncertainty.
        #[test]
        fn printed_values_are_read_back(sign in prop::bool::ANY, size in -14.0..14.0_f64, ratio in -9.0..2.0_f64) {
            let magnitude = libm::exp10(size);
            let value = if sign { -magnitude } else { magnitude };
            let u = magnitude * libm::exp10(ratio);
            let text = printed::uncertain_ohm(Uncertain { value, u: Some(u) });
            let number = parse(&text).unwrap();
            let back = Uncertain { value: number.ohm(Unit::OHM), u: number.u_ohm(Unit::OHM) };
            prop_assert!((back.value - value).abs() <= 0.51 * u, "{value} {u} {text}");
            // Largest step of the rule: 0.355 becomes 0.4 and 0.95 becomes 1.0.
            prop_assert!((back.u.unwrap() / u - 1.0).abs() < 0.13, "{u} {text}");
            prop_assert_eq!(printed::uncertain_ohm(back), text);
        }

        #[test]
        fn any_text_is_read_or_refused_within_itself(text in "[0-9.,()±+−e×^ kΩ/h2²⁴\"a-z-]{0,16}") {
            if let Err(fault) = parse(&text) {
                prop_assert!(fault.bytes.start <= fault.bytes.end && fault.bytes.end <= text.len());
                prop_assert!(text.get(fault.bytes).is_some());
            }
        }
    }
}
