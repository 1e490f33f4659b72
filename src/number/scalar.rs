//! What elimination needs of a number.

use std::ops::Add;
use std::ops::Div;
use std::ops::Mul;
use std::ops::Neg;
use std::ops::Sub;

use crate::number::Rational;

/// A field in which elimination can be done: exact rationals or floats.
pub trait Scalar:
    Clone
    + Add<Output = Self>
    + Sub<Output = Self>
    + Mul<Output = Self>
    + Div<Output = Self>
    + Neg<Output = Self>
    + PartialEq
{
    /// Zero.
    fn zero() -> Self;
    /// One.
    fn one() -> Self;
    /// Worth as a pivot: larger is better, 0 means unusable. Exact numbers prefer short ones.
    fn pivot_worth(&self) -> f64;
}

impl Scalar for f64 {
    fn zero() -> Self {
        0.0
    }
    fn one() -> Self {
        1.0
    }
    fn pivot_worth(&self) -> f64 {
        self.abs()
    }
}

impl Scalar for Rational {
    fn zero() -> Self {
        Rational::ZERO
    }
    fn one() -> Self {
        Rational::ONE
    }
    /// Any non-zero pivot is exact; the first one found keeps the order of the input.
    fn pivot_worth(&self) -> f64 {
        f64::from(u8::from(!self.is_zero()))
    }
}
