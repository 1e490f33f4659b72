//! Which way the field points.

/// Polarity of the field, seen from above the chip face.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Polarity {
    /// `+`: out of the drawing, toward the reader.
    Toward,
    /// `−`: into the drawing, away from the reader.
    Away,
}

impl Polarity {
    /// Both, `+` first.
    pub const BOTH: [Polarity; 2] = [Polarity::Toward, Polarity::Away];

    /// The other one.
    pub fn reversed(self) -> Self {
        match self {
            Self::Toward => Self::Away,
            Self::Away => Self::Toward,
        }
    }

    /// `+` or `-`, as machine output has it.
    pub fn sign(self) -> &'static str {
        match self {
            Self::Toward => "+",
            Self::Away => "-",
        }
    }
}
