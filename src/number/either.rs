//! A number that is exact where all that made it was.

use std::fmt;
use std::iter::Sum;
use std::ops::Add;
use std::ops::Div;
use std::ops::Mul;
use std::ops::Sub;

use crate::number::Rational;

/// Exact, or a float where something entered that is no fraction.
#[derive(Clone, Debug, PartialEq)]
pub enum Number {
    /// A fraction.
    Exact(Rational),
    /// A float.
    Float(f64),
}

impl Number {
    /// Nearest float.
    pub fn to_f64(&self) -> f64 {
        match self {
            Self::Exact(exact) => exact.to_f64(),
            Self::Float(value) => *value,
        }
    }

    /// The fraction, where it is one.
    pub fn exact(&self) -> Option<&Rational> {
        match self {
            Self::Exact(exact) => Some(exact),
            Self::Float(_) => None,
        }
    }
}

impl From<Rational> for Number {
    fn from(exact: Rational) -> Self {
        Self::Exact(exact)
    }
}

impl From<f64> for Number {
    fn from(value: f64) -> Self {
        Self::Float(value)
    }
}

/// Exact where both are; the operation is given once for each kind.
macro_rules! operation {
    ($trait:ident, $function:ident) => {
        impl $trait for &Number {
            type Output = Number;
            fn $function(self, other: &Number) -> Number {
                match (self, other) {
                    (Number::Exact(a), Number::Exact(b)) => Number::Exact($trait::$function(a, b)),
                    _ => Number::Float($trait::$function(self.to_f64(), other.to_f64())),
                }
            }
        }
    };
}

operation!(Add, add);
operation!(Sub, sub);
operation!(Mul, mul);
operation!(Div, div);

impl Sum for Number {
    fn sum<I: Iterator<Item = Self>>(numbers: I) -> Self {
        numbers.fold(Self::Exact(Rational::ZERO), |sum, number| &sum + &number)
    }
}

/// `1/2`, or a decimal number with all digits of the float, `0.4323323583816936`.
impl fmt::Display for Number {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Exact(exact) => exact.fmt(f),
            Self::Float(value) => value.fmt(f),
        }
    }
}
