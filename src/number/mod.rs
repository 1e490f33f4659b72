//! Exact and floating numbers, and elimination over either.
//!
//! Owns: [`Rational`], the small trait [`Scalar`], dense matrices and elimination. Takes numbers, gives numbers.
//! Must never contain units or text for users.

mod elimination;
mod rational;
mod scalar;

pub use elimination::Matrix;
pub use elimination::Singular;
pub use elimination::solve;
pub use rational::Rational;
pub use scalar::Scalar;
