//! Lengths on the chip: whole nanometres.

/// A length or coordinate in whole nanometres.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Nanometres(pub i64);

impl Nanometres {
    /// The same in micrometres.
    pub fn to_um(self) -> f64 {
        self.0 as f64 / 1000.0
    }
}
