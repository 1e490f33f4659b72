//! A number as it is printed, beside the number that it stands for.

use serde::Serialize;

use crate::number::Number;
use crate::number::Rational;
use crate::quantity::Uncertain;
use crate::quantity::printed;

/// A printed number. `text` is exactly what the sheet shows, without the unit, which stands in the heading.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Printed {
    /// What is printed.
    pub text: String,
    /// The unrounded value in `unit`.
    pub value: f64,
    /// Its standard uncertainty (k = 1) in `unit`, where one is stated.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub u: Option<f64>,
    /// Unit; `1` for a pure number.
    pub unit: &'static str,
}

impl Printed {
    /// An exact value in h/e².
    pub fn exact(value: &Rational) -> Self {
        Self { text: printed::fraction(value), value: value.to_f64(), u: None, unit: "h/e²" }
    }

    /// A value in h/e²: exact, or with five decimals.
    pub fn h_per_e2(value: &Number) -> Self {
        match value {
            Number::Exact(exact) => Self::exact(exact),
            Number::Float(value) => Self { text: printed::h_per_e2(*value), value: *value, u: None, unit: "h/e²" },
        }
    }

    /// A resistance in Ω, printed in kΩ with so many decimals.
    pub fn kilo_ohm(ohm: f64, decimals: usize) -> Self {
        let value = ohm / OHM_PER_KILO_OHM;
        Self { text: printed::decimals(value, decimals), value, u: None, unit: "kΩ" }
    }

    /// A measured resistance in Ω, printed in kΩ with its u in brackets.
    pub fn measured_kilo_ohm(ohm: Uncertain) -> Self {
        let kilo_ohm = Uncertain { value: ohm.value / OHM_PER_KILO_OHM, u: ohm.u.map(|u| u / OHM_PER_KILO_OHM) };
        Self { text: printed::uncertain(kilo_ohm), value: kilo_ohm.value, u: kilo_ohm.u, unit: "kΩ" }
    }

    /// A difference in units of its standard uncertainty.
    pub fn in_u(difference: f64) -> Self {
        Self { text: printed::difference_in_u(difference), value: difference, u: None, unit: "u" }
    }

    /// The same with as few digits as a mark beside a strip can carry: whole from 10 u on.
    pub fn in_whole_u(difference: f64) -> Self {
        let one = Self::in_u(difference);
        let whole = printed::difference_in_u(difference.round());
        let text = if difference.abs() < 10.0 { one.text } else { whole.trim_end_matches(".0").to_string() };
        Self { text, ..one }
    }

    /// A relative difference in 10⁻⁶.
    pub fn in_1e6(difference: f64) -> Self {
        Self { text: printed::difference_1e6(difference), value: difference, u: None, unit: "10⁻⁶" }
    }

    /// A pure number with so many decimals.
    pub fn number(value: f64, decimals: usize, unit: &'static str) -> Self {
        Self { text: printed::decimals(value, decimals), value, u: None, unit }
    }

    /// The text followed by its unit.
    pub fn with_unit(&self) -> String {
        format!("{} {}", self.text, self.unit)
    }
}

const OHM_PER_KILO_OHM: f64 = 1000.0;

/// A filling or transmission, `−` in true form.
pub fn filling(value: &Rational) -> String {
    printed::fraction(value)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// h/e² of the SI of 2019; 37 is rounded to one digit by the rule in `quantity::printed`, the bracket is that of NIST TN 1297.
    #[test]
    fn a_measured_resistance_shows_its_uncertainty_in_the_last_place() {
        let shown = Printed::measured_kilo_ohm(Uncertain { value: -25_477.3, u: Some(37.0) });
        assert_eq!((shown.text.as_str(), shown.unit), ("−25.48(4)", "kΩ"));
        assert_eq!(Printed::kilo_ohm(25_812.807_459_304_5, 4).with_unit(), "25.8128 kΩ");
    }

    #[test]
    fn a_strip_carries_few_digits() {
        for (difference, text) in [(9.13, "+9.1"), (-3.04, "−3.0"), (89.5, "+90"), (-120.2, "−120")] {
            assert_eq!(Printed::in_whole_u(difference).text, text);
        }
    }
}
