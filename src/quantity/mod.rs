//! Units as newtypes, constants with their source, values with uncertainty and the one rounding rule.
//!
//! Takes numbers, gives quantities and their printed form. Must never contain data or know a later room.

mod constant;
mod decimal;
mod length;
mod polarity;
pub mod printed;
mod uncertain;

pub use constant::Constant;
pub use constant::ELEMENTARY_CHARGE;
pub use constant::KLITZING;
pub use constant::KLITZING_1990;
pub use length::Nanometres;
pub use polarity::Polarity;
pub use uncertain::Uncertain;
