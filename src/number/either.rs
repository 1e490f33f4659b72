//! A number that is exact where all that made it was.

use std::fmt;

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

/// `1/2`, or a decimal number with all digits of the float, `0.4323323583816936`.
impl fmt::Display for Number {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Exact(exact) => exact.fmt(f),
            Self::Float(value) => value.fmt(f),
        }
    }
}
