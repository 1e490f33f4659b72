//! A value with its standard uncertainty.

/// A value and its standard uncertainty (k = 1), both in the unit that the name of the variable says.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Uncertain {
    /// The value.
    pub value: f64,
    /// Its standard uncertainty; none where none is stated.
    pub u: Option<f64>,
}
