//! Decimals read from their text, exactly.

use crate::number::Rational;

/// A length in whole nanometres, and whether finer digits were rounded away.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct RoundedNanometres {
    /// Nearest whole nanometre; a half goes away from zero.
    pub nanometres: i64,
    /// Whether the text was finer.
    pub rounded: bool,
}

/// Reads `3`, `-2.50`, `7/3` or `6.0e-3` exactly; none for anything else and for more than 18 digits.
pub fn exact_decimal(text: &str) -> Option<Rational> {
    let text = text.replace('_', "");
    match text.split_once(['e', 'E']) {
        None => Rational::from_text(&text),
        Some((mantissa, exponent)) => Some(Rational::from_text(mantissa)? * power_of_ten(exponent.parse().ok()?)?),
    }
}

fn power_of_ten(exponent: i32) -> Option<Rational> {
    let power = 10_i64.checked_pow(exponent.unsigned_abs())?;
    if exponent < 0 { Rational::fraction(1, power) } else { Some(Rational::from(power)) }
}

/// Micrometres as decimal text to whole nanometres; none where it is no number or does not fit.
pub fn nanometres(micrometres: &str) -> Option<RoundedNanometres> {
    let exact = exact_decimal(micrometres)? * Rational::from(1000);
    let half = Rational::fraction(1, 2)?;
    let magnitude = (&exact.abs() + &half).floor();
    let nearest = if exact.is_negative() { -magnitude } else { magnitude };
    let (numerator, _) = nearest.parts();
    Some(RoundedNanometres { nanometres: numerator.parse().ok()?, rounded: nearest != exact })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn micrometres_become_whole_nanometres() {
        for (text, nanometres_expected, rounded_expected) in [
            ("600", 600_000, false),
            ("0.1", 100, false),
            ("-12.345", -12_345, false),
            ("1e2", 100_000, false),
            ("2.5E-1", 250, false),
            ("1_000.5", 1_000_500, false),
            ("0.0004", 0, true),
            ("0.0005", 1, true),
            ("-0.0005", -1, true),
            ("33.3333333", 33_333, true),
        ] {
            let found = nanometres(text).unwrap();
            assert_eq!((found.nanometres, found.rounded), (nanometres_expected, rounded_expected), "{text}");
        }
    }

    #[test]
    fn what_is_no_finite_decimal_is_none() {
        for text in ["nan", "inf", "-inf", "", "1e999", "1e", "9999999999999999999", "1,5"] {
            assert_eq!(nanometres(text), None, "{text}");
        }
    }
}
