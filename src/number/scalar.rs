//! What elimination needs of a number.

use std::ops::Add;
use std::ops::Div;
use std::ops::Mul;
use std::ops::Neg;
use std::ops::Sub;

use crate::number::Number;
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
    + Into<Number>
{
    /// Zero.
    fn zero() -> Self;
    /// One.
    fn one() -> Self;
    /// The nearest number of this kind.
    fn nearest(exact: &Rational) -> Self;
    /// `self − other`; zero where floats agree in all digits that they can have after a few operations.
    fn less(&self, other: &Self) -> Self;
    /// Whether it is zero.
    fn is_zero(&self) -> bool {
        *self == Self::zero()
    }
    /// Adds a number in place.
    fn increase(&mut self, other: &Self) {
        if !other.is_zero() {
            *self = self.clone() + other.clone();
        }
    }
}

/// Relative difference below which two floats are one number: some hundred units in the last place.
const SAME_FLOAT: f64 = 1e-13;

impl Scalar for f64 {
    fn zero() -> Self {
        0.0
    }
    fn one() -> Self {
        1.0
    }
    fn nearest(exact: &Rational) -> Self {
        exact.to_f64()
    }
    fn less(&self, other: &Self) -> Self {
        let difference = self - other;
        if difference.abs() <= SAME_FLOAT * self.abs().max(other.abs()) { 0.0 } else { difference }
    }
}

impl Scalar for Rational {
    fn zero() -> Self {
        Rational::ZERO
    }
    fn one() -> Self {
        Rational::ONE
    }
    fn nearest(exact: &Rational) -> Self {
        exact.clone()
    }
    fn less(&self, other: &Self) -> Self {
        self - other
    }
    fn is_zero(&self) -> bool {
        self.is_zero()
    }
    fn increase(&mut self, other: &Self) {
        *self += other;
    }
}
