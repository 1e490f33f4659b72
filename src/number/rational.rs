//! Exact rational numbers of any size.

use std::fmt;
use std::iter::Sum;
use std::ops::Add;
use std::ops::AddAssign;
use std::ops::Div;
use std::ops::Mul;
use std::ops::Neg;
use std::ops::Sub;
use std::ops::SubAssign;

use dashu_int::IBig;
use dashu_int::UBig;
use dashu_ratio::RBig;

/// An exact fraction in lowest terms. Small values are kept without allocation.
#[derive(Clone, Debug, Default, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Rational(RBig);

impl Rational {
    /// Zero.
    pub const ZERO: Self = Self(RBig::ZERO);
    /// One.
    pub const ONE: Self = Self(RBig::ONE);

    /// `numerator / denominator`; none when the denominator is zero.
    pub fn fraction(numerator: i64, denominator: i64) -> Option<Self> {
        let sign = denominator.signum();
        (sign != 0)
            .then(|| Self(RBig::from_parts(IBig::from(numerator) * sign, UBig::from(denominator.unsigned_abs()))))
    }

    /// Reads `3`, `-2.50` or `7/3`, exactly and with at most 18 digits a part; none for anything else.
    pub fn from_text(text: &str) -> Option<Self> {
        match text.split_once('/') {
            Some((numerator, denominator)) => {
                let (n, d) = (integer(numerator.trim())?, integer(denominator.trim())?);
                Self::fraction(n, d)
            }
            None => decimal(text.trim()),
        }
    }

    /// Nearest float.
    pub fn to_f64(&self) -> f64 {
        self.0.to_f64().value()
    }

    /// Absolute value.
    pub fn abs(&self) -> Self {
        if self.is_negative() { -self.clone() } else { self.clone() }
    }

    /// Whether it is below zero.
    pub fn is_negative(&self) -> bool {
        *self < Self::ZERO
    }

    /// Whether it is zero.
    pub fn is_zero(&self) -> bool {
        *self == Self::ZERO
    }

    /// Largest whole number that is not above it.
    pub fn floor(&self) -> Self {
        Self(RBig::from(self.0.floor()))
    }

    /// Numerator (with the sign) and denominator, as text.
    pub fn parts(&self) -> (String, String) {
        (self.0.numerator().to_string(), self.0.denominator().to_string())
    }
}

fn integer(text: &str) -> Option<i64> {
    let digits = text.strip_prefix(['-', '+']).unwrap_or(text);
    let plain = !digits.is_empty() && digits.len() <= 18 && digits.bytes().all(|b| b.is_ascii_digit());
    plain.then(|| text.parse().ok()).flatten()
}

/// A decimal is read from its digits, so `0.98` is exactly 49/50.
fn decimal(text: &str) -> Option<Rational> {
    let (whole, fraction) = text.split_once('.').unwrap_or((text, "0"));
    let digits = format!("{whole}{fraction}");
    let plain = !fraction.is_empty() && fraction.bytes().all(|b| b.is_ascii_digit());
    let numerator = if plain && integer(whole).is_some() { integer(&digits)? } else { return None };
    Rational::fraction(numerator, 10_i64.checked_pow(fraction.len() as u32)?)
}

impl From<i64> for Rational {
    fn from(value: i64) -> Self {
        Self(RBig::from(value))
    }
}

/// `1/2`, `-3`.
impl fmt::Display for Rational {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        fmt::Display::fmt(&self.0, f)
    }
}

macro_rules! operator {
    ($trait:ident, $method:ident, $op:tt) => {
        impl $trait for Rational {
            type Output = Rational;
            fn $method(self, other: Rational) -> Rational {
                Rational(self.0 $op other.0)
            }
        }
        impl $trait<&Rational> for &Rational {
            type Output = Rational;
            fn $method(self, other: &Rational) -> Rational {
                Rational(&self.0 $op &other.0)
            }
        }
    };
}

operator!(Add, add, +);
operator!(Sub, sub, -);
operator!(Mul, mul, *);
operator!(Div, div, /);

impl Neg for Rational {
    type Output = Rational;
    fn neg(self) -> Rational {
        Rational(-self.0)
    }
}

impl AddAssign<&Rational> for Rational {
    fn add_assign(&mut self, other: &Rational) {
        self.0 += &other.0;
    }
}

impl SubAssign<&Rational> for Rational {
    fn sub_assign(&mut self, other: &Rational) {
        self.0 -= &other.0;
    }
}

impl Sum for Rational {
    fn sum<I: Iterator<Item = Rational>>(terms: I) -> Rational {
        terms.fold(Rational::ZERO, |sum, term| sum + term)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn text_is_read_exactly() {
        for (text, shown) in
            [("0.98", "49/50"), ("-2.50", "-5/2"), ("7/3", "7/3"), ("-0.5", "-1/2"), ("4", "4"), ("+3", "3")]
        {
            assert_eq!(Rational::from_text(text).unwrap().to_string(), shown);
        }
    }

    #[test]
    fn anything_else_is_no_number() {
        for text in ["", ".", "1/0", "1,5", "nan", "inf", "1e3", "1/2/3", "--1", "1.", "½", "1234567890123456789012"] {
            assert_eq!(Rational::from_text(text), None, "{text}");
        }
    }
}
