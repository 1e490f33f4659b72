//! Expected against measured: differences, their uncertainty, and the verdict.
//!
//! Owns: [`Comparison`]. Takes measured readings each with what was expected for it; gives rows in the order of the
//! table, the limit in use and the verdict. Must never contain drawing or files.

use crate::measured::MeasuredReading;
use crate::resistance::Expected;

mod closure;
mod judge;
mod limit;
mod taken;

pub use closure::Loop;
pub use closure::exchanged_pairs;
pub use closure::loops;
pub use judge::compare;
pub use limit::z_n;
pub use taken::readings;

/// All measured readings against their expectation.
#[derive(Clone, Debug, PartialEq)]
pub struct Comparison {
    /// One row per measured reading, in the order of the table.
    pub rows: Vec<Row>,
    /// How many rows were judged.
    pub judged: usize,
    /// The limit in u beyond which a reading disagrees; none where nothing was judged.
    pub limit_u: Option<f64>,
    /// Whether the limit was set by the user.
    pub limit_is_fixed: bool,
    /// The verdict.
    pub verdict: Verdict,
}

/// One measured reading against its expectation.
#[derive(Clone, Debug, PartialEq)]
pub struct Row {
    /// What was measured.
    pub measured: MeasuredReading,
    /// What was expected of the meter.
    pub expected: Expected,
    /// Standard uncertainty of the expectation in Ω.
    pub u_expected_ohm: f64,
    /// Measured − expected, in Ω; none where nothing is expected.
    pub difference_ohm: Option<f64>,
    /// Standard uncertainty of the difference in Ω; none where the reading has none.
    pub u_difference_ohm: Option<f64>,
    /// Difference in units of its standard uncertainty.
    pub difference_in_u: Option<f64>,
    /// Difference over the size of the expected value, in 10⁻⁶; none where the expected value is zero or
    /// next to nothing.
    pub difference_1e6: Option<f64>,
    /// What follows.
    pub judgement: Judgement,
}

/// What follows from one row.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Judgement {
    /// Within 2 u.
    Agrees,
    /// Beyond 2 u, within the limit.
    Wide,
    /// Beyond the limit.
    Disagrees,
    /// Shown, never judged: no uncertainty is stated.
    NoUncertainty,
    /// Shown, never judged: the model gives no number (no path, floating).
    NoExpectation,
}

/// What follows from all rows.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Verdict {
    /// Every judged reading agrees or is wide.
    Agrees,
    /// At least one disagrees.
    Disagrees,
    /// Nothing was judged.
    NotTested,
}
