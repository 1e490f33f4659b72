//! The one rounding rule: every number that a person reads is made here.
//!
//! **How many digits an uncertainty has** follows the Particle Data Group (Review of Particle Physics, introduction,
//! section on rounding; from memory): of its three leading digits, 100 to 354 keep two digits, 355 to 949 keep one, 950 to
//! 999 become 1000 and keep two. The value ends at the same place. The bracket holds the standard uncertainty (k = 1) in
//! units of the last place, `12.906(4)`; where it reaches over the decimal point it is written out, `10.0(1.2)` (GUM,
//! JCGM 100:2008, 7.2.2).
//!
//! A number without uncertainty has a given count of decimals or digits. Rounding is half to even of the digits that the
//! float shows, the minus is U+2212, zero has no sign, and very large or small numbers carry a power of ten.

use crate::number::Number;
use crate::number::Rational;
use crate::quantity::Uncertain;
use crate::quantity::decimal::Decimal;

/// Digits of a value that has no uncertainty: as many as were given, at most this many.
const DIGITS_WITHOUT_U: i32 = 10;

/// More digits than a float holds.
const FLOAT_DIGITS: i32 = 17;

/// Leading digits at these powers of ten are written without a power of ten.
const PLAIN_POWERS: std::ops::RangeInclusive<i32> = -4..=6;

/// Prefixes of the ohm with their powers of ten.
const PREFIXES: [(&str, i32); 7] = [("n", -9), ("µ", -6), ("m", -3), ("", 0), ("k", 3), ("M", 6), ("G", 9)];

/// A value with its standard uncertainty, no unit: `12906.4(5)`. Without uncertainty: the digits given, at most ten.
pub fn uncertain(quantity: Uncertain) -> String {
    let Some((value, u)) = decimals_of(quantity) else { return unbounded(quantity.value) };
    let power = printed_magnitude(value, u);
    if PLAIN_POWERS.contains(&power) {
        return bracketed(value, u);
    }
    let text = bracketed(value.shifted(-power), u.map(|u| u.shifted(-power)));
    format!("{text} × 10{}", superscript(power))
}

/// A number that a file gives, as short as it can be written: `4.14`, `−0.25`.
pub fn as_given(value: f64) -> String {
    uncertain(Uncertain { value, u: None })
}

/// A resistance in Ω with its standard uncertainty and the unit prefix that fits: `12.906(4) kΩ`.
pub fn uncertain_ohm(ohm: Uncertain) -> String {
    let Some((value, u)) = decimals_of(ohm) else { return format!("{} Ω", unbounded(ohm.value)) };
    let power = printed_magnitude(value, u);
    match prefix_for(power) {
        Some((prefix, shift)) => {
            format!("{} {prefix}Ω", bracketed(value.shifted(-shift), u.map(|u| u.shifted(-shift))))
        }
        None => format!("{} Ω", uncertain(ohm)),
    }
}

/// A resistance in Ω as kΩ with four decimals, for table columns whose head names the unit: `25.8128`.
pub fn kilo_ohm(ohm: f64) -> String {
    match Decimal::of(ohm) {
        Some(digits) => digits.shifted(-3).text(-4),
        None => unbounded(ohm),
    }
}

/// A number with a fixed count of decimals: `0.50`, `−3.0`.
pub fn decimals(value: f64, count: usize) -> String {
    let place = -i32::try_from(count).unwrap_or(FLOAT_DIGITS);
    Decimal::of(value).map_or_else(|| unbounded(value), |digits| digits.text(place))
}

/// A number with a fixed count of digits: `25.81`, `1.20 × 10⁻⁷`.
pub fn significant(value: f64, count: usize) -> String {
    let Some(digits) = Decimal::of(value) else { return unbounded(value) };
    let more = i32::try_from(count.max(1)).map_or(FLOAT_DIGITS, |count| count.min(FLOAT_DIGITS)) - 1;
    let rounded = digits.rounded(digits.magnitude() - more);
    // A carry, as from 9.96 to 10.0, moves the last place; it is read off the rounded number.
    let power = rounded.magnitude();
    if PLAIN_POWERS.contains(&power) {
        return rounded.text(power - more);
    }
    format!("{} × 10{}", rounded.shifted(-power).text(-more), superscript(power))
}

/// An exact resistance in h/e², or any exact number: `1/2`, `−2/3`, `0`.
pub fn fraction(exact: &Rational) -> String {
    exact.to_string().replace('-', "−")
}

/// A share of the source voltage: `1/3`, or two decimals of a float.
pub fn share(share: &Number) -> String {
    match share {
        Number::Exact(exact) => fraction(exact),
        Number::Float(value) => decimals(*value, 2),
    }
}

/// A resistance in h/e² with five decimals, for table columns: `0.66667`.
pub fn h_per_e2(ratio: f64) -> String {
    decimals(ratio, 5)
}

/// A difference in units of its standard uncertainty, one decimal and a sign: `+1.3`, `−0.4`, `0.0`.
pub fn difference_in_u(difference: f64) -> String {
    match Decimal::of(difference) {
        Some(digits) if digits.magnitude() < 5 => with_plus(decimals(difference, 1)),
        _ => with_plus(significant(difference, 3)),
    }
}

/// A relative difference in 10⁻⁶, with a sign and three digits, nothing below 10⁻¹⁰ of the value: `+17.8`, `−0.0178`.
pub fn difference_1e6(difference: f64) -> String {
    let Some(digits) = Decimal::of(difference) else { return with_plus(unbounded(difference)) };
    let rounded = digits.rounded((digits.magnitude() - 2).max(-4));
    if rounded.is_zero() {
        return "0".to_string();
    }
    let power = rounded.magnitude();
    let text = if power <= 6 { rounded.text((power - 2).clamp(-4, 0)) } else { significant(difference, 3) };
    with_plus(text)
}

fn decimals_of(quantity: Uncertain) -> Option<(Decimal, Option<Decimal>)> {
    let u = quantity.u.filter(|u| u.is_finite());
    Some((Decimal::of(quantity.value)?, u.and_then(|u| Decimal::of(u.abs()))))
}

fn unbounded(value: f64) -> String {
    if value.is_nan() {
        return "not a number".to_string();
    }
    if value > 0.0 { "∞".to_string() } else { "−∞".to_string() }
}

/// Power of ten of the larger of value and uncertainty after rounding: a carry may move it.
fn printed_magnitude(value: Decimal, u: Option<Decimal>) -> i32 {
    let place = last_place(value, u);
    let rounded = [Some(value), u].into_iter().flatten().map(|part| part.rounded(place));
    rounded.filter(|part| !part.is_zero()).map(Decimal::magnitude).max().unwrap_or(0)
}

/// Value and bracket, ending at one place. A zero uncertainty, or one below what a float can hold, leaves all digits of
/// the value and writes `(0)`.
fn bracketed(value: Decimal, u: Option<Decimal>) -> String {
    let place = last_place(value, u);
    let digits = value.text(place);
    let Some(u) = u.map(|u| u.rounded(place)) else { return digits };
    let over_the_point = place < 0 && !u.is_zero() && u.magnitude() >= 0;
    let bracket = if over_the_point { u.text(place) } else { u.shifted(-place.min(0)).text(0) };
    format!("{digits}({bracket})")
}

fn last_place(value: Decimal, u: Option<Decimal>) -> i32 {
    let finest = value.magnitude() - FLOAT_DIGITS;
    match u {
        None => value.rounded(value.magnitude() - DIGITS_WITHOUT_U + 1).last_place().min(0),
        Some(u) if u.is_zero() || (!value.is_zero() && uncertainty_place(u) < finest) => value.last_place().min(0),
        Some(u) => uncertainty_place(u),
    }
}

/// Power of ten of the last digit that an uncertainty keeps: the rule at the head of this file. Between 950 and 999 the
/// carry gives the second digit by itself.
fn uncertainty_place(u: Decimal) -> i32 {
    if u.leading_three() < 355 { u.magnitude() - 1 } else { u.magnitude() }
}

fn prefix_for(power: i32) -> Option<(&'static str, i32)> {
    PREFIXES.into_iter().rev().find(|(_, shift)| power >= *shift).filter(|(_, shift)| power < shift + 3)
}

fn with_plus(text: String) -> String {
    let bare = text.starts_with('−') || !text.contains(|c: char| c.is_ascii_digit() && c != '0' || c == '∞');
    if bare { text } else { format!("+{text}") }
}

fn superscript(power: i32) -> String {
    power.to_string().chars().map(|c| c.to_digit(10).map_or('⁻', |d| SUPERSCRIPTS[d as usize])).collect()
}

const SUPERSCRIPTS: [char; 10] = ['⁰', '¹', '²', '³', '⁴', '⁵', '⁶', '⁷', '⁸', '⁹'];

#[cfg(test)]
mod tests {
    use super::*;

    fn pm(value: f64, u: f64) -> Uncertain {
        Uncertain { value, u: Some(u) }
    }

    // Expected texts in this module are worked by hand from the rule at the head of the file unless a line says more.

    #[test]
    fn an_uncertainty_keeps_one_or_two_digits() {
        // First two: the examples of the Particle Data Group's text, 0.827 ± 0.119 → 0.83 ± 0.12 and
        // 0.827 ± 0.367 → 0.8 ± 0.4 (values from memory).
        for (value, u, shown) in [
            (0.827, 0.119, "0.83(12)"),
            (0.827, 0.367, "0.8(4)"),
            (12.906_4, 0.003, "12.9064(30)"),
            (12.906_4, 0.003_6, "12.906(4)"),
            (1.0, 0.354, "1.00(35)"),
            (1.0, 0.355, "1.0(4)"),
            (1.0, 0.949, "1.0(9)"),
            (1.0, 0.95, "1.0(1.0)"),
            (1.0, 0.996, "1.0(1.0)"),
            (12_906.4, 300.0, "12910(300)"),
            (10.05, 1.2, "10.0(1.2)"),
            (10.15, 1.2, "10.2(1.2)"),
            (12_906.4, 25.0, "12906(25)"),
            (12_906.4, 36.0, "12910(40)"),
            (-12_906.4, 0.5, "−12906.4(5)"),
        ] {
            assert_eq!(uncertain(pm(value, u)), shown, "{value} {u}");
        }
    }

    #[test]
    fn edges_of_the_uncertain_form() {
        for (value, u, shown) in [
            (0.004, 1.2, "0.0(1.2)"),
            (-0.004, 1.2, "0.0(1.2)"),
            (-0.04, 40.0, "0(40)"),
            (9.96, 0.04, "9.96(4)"),
            (9.96, 0.4, "10.0(4)"),
            (12_906.403_7, 0.0, "12906.4037(0)"),
            (12_906.4, 1e-300, "12906.4(0)"),
            (1.29e20, 4e18, "1.29(4) × 10²⁰"),
            (-5.0e-9, 4e-10, "−5.0(4) × 10⁻⁹"),
            (0.0, 4e-10, "0(4) × 10⁻¹⁰"),
            (f64::MAX, 4e307, "1.8(4) × 10³⁰⁸"),
        ] {
            assert_eq!(uncertain(pm(value, u)), shown, "{value} {u}");
        }
        assert_eq!(uncertain(Uncertain { value: f64::NAN, u: Some(1.0) }), "not a number");
        assert_eq!(uncertain(Uncertain { value: f64::NEG_INFINITY, u: None }), "−∞");
    }

    #[test]
    fn numbers_of_a_file_come_back_as_they_were_written() {
        for (value, text) in [(4.14, "4.14"), (-0.25, "−0.25"), (0.3, "0.3"), (10.0, "10"), (0.0, "0")] {
            assert_eq!(as_given(value), text);
        }
    }

    #[test]
    fn the_prefix_of_the_ohm_follows_the_larger_of_value_and_uncertainty() {
        for (value, u, shown) in [
            (12_906.4, Some(4.0), "12.906(4) kΩ"),
            (12_906.403_729_652_3, None, "12.90640373 kΩ"),
            (12_906.0, None, "12.906 kΩ"),
            (0.1 + 0.2, None, "300 mΩ"),
            (0.003, Some(0.001), "3.0(1.0) mΩ"),
            (0.3e-3, Some(1.2), "0.0(1.2) Ω"),
            (999.96, Some(0.5), "1.0000(5) kΩ"),
            (0.4e-6, Some(0.96e-6), "0.4(1.0) µΩ"),
            (-6_453.2, Some(0.06), "−6.45320(6) kΩ"),
            (2.5e7, Some(5e5), "25.0(5) MΩ"),
            (4e-12, Some(5e-13), "4.0(5) × 10⁻¹² Ω"),
            (0.0, None, "0 Ω"),
        ] {
            assert_eq!(uncertain_ohm(Uncertain { value, u }), shown, "{value} {u:?}");
        }
    }

    #[test]
    fn fixed_decimals_round_half_to_even_as_the_reader_sees_it() {
        for (value, count, shown) in [
            (0.15, 1, "0.2"),
            (0.25, 1, "0.2"),
            (0.35, 1, "0.4"),
            (2.5, 0, "2"),
            (3.5, 0, "4"),
            (9.96, 1, "10.0"),
            (-0.04, 1, "0.0"),
            (-0.0, 2, "0.00"),
            (-3.0, 1, "−3.0"),
            (1e-300, 3, "0.000"),
            (1e22, 1, "10000000000000000000000.0"),
        ] {
            assert_eq!(decimals(value, count), shown, "{value} {count}");
        }
    }

    #[test]
    fn counted_digits_carry_and_change_to_a_power_of_ten() {
        for (value, count, shown) in [
            (9.96, 2, "10"),
            (9.96, 3, "9.96"),
            (25_812.807_459_304_5, 4, "25810"),
            (0.000_123_45, 3, "0.000123"),
            (1.2e-7, 3, "1.20 × 10⁻⁷"),
            (9.999e6, 2, "1.0 × 10⁷"),
            (0.0, 3, "0.00"),
            (f64::MIN_POSITIVE, 3, "2.23 × 10⁻³⁰⁸"),
        ] {
            assert_eq!(significant(value, count), shown, "{value} {count}");
        }
    }

    #[test]
    fn resistances_in_tables() {
        // h/e² and its fractions: check values from the exact h and e (see `constant`), cut to the digits shown.
        assert_eq!(kilo_ohm(25_812.807_459_304_5), "25.8128");
        assert_eq!(kilo_ohm(-12_906.403_729_652_3), "−12.9064");
        assert_eq!(kilo_ohm(-0.01), "0.0000");
        assert_eq!(h_per_e2(2.0 / 3.0), "0.66667");
        assert_eq!(fraction(&-Rational::fraction(2, 3).unwrap()), "−2/3");
        assert_eq!(fraction(&Rational::ZERO), "0");
    }

    #[test]
    fn differences_carry_a_sign_unless_they_are_zero() {
        for (value, shown) in [(1.26, "+1.3"), (-0.44, "−0.4"), (-0.04, "0.0"), (0.0, "0.0"), (1e7, "+1.00 × 10⁷")]
        {
            assert_eq!(difference_in_u(value), shown);
        }
        // +0.0178 is R_K/R_K-90 − 1 = 1.779 366 8e-8 (see `constant`).
        for (value, shown) in [
            (1.779_366_8e-2, "+0.0178"),
            (-17.83, "−17.8"),
            (-1e-5, "0"),
            (0.001_78, "+0.0018"),
            (9.996, "+10.0"),
            (12_345.0, "+12300"),
            (1e6, "+1000000"),
            (-2.5e9, "−2.50 × 10⁹"),
        ] {
            assert_eq!(difference_1e6(value), shown);
        }
        assert_eq!(difference_in_u(f64::INFINITY), "+∞");
    }
}
