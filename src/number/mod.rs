//! Exact and floating numbers, and elimination over either.
//!
//! Owns: [`Rational`], [`Number`], the small trait [`Scalar`], dense matrices and the elimination of a [`Balance`]. Takes
//! numbers, gives numbers. Must never contain units or text for users.

mod balance;
mod either;
mod matrix;
mod rational;
mod scalar;

pub use balance::Balance;
pub use balance::Singular;
pub use either::Number;
pub use matrix::Matrix;
pub use rational::Rational;
pub use scalar::Scalar;
