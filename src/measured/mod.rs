//! Measured readings, as their table says them.
//!
//! Owns: [`MeasuredReading`] and the reading of numbers as a person writes them. Takes the text of `readings.csv` and the
//! [`Names`] that device and cooldown give (with magnet sense and coverage factor); gives readings in row order or all
//! faults with their lines. A row that cannot be read is a fault, never dropped. Must never contain theory.
//!
//! [`Names`]: crate::cooldown::Names

pub use crate::cooldown::ContactIdx;
use crate::diagnostic::Place;
use crate::quantity::Polarity;
use crate::quantity::Uncertain;

mod columns;
mod cursor;
mod number_text;
mod overview;
mod resistance;
mod row;
mod separators;
mod split;
mod table;
mod unit;

pub use columns::COLUMNS;
pub use columns::Column;
pub use overview::Overview;
pub use overview::is_table;
pub use overview::overview;
pub use table::from_source;
pub use table::source_from_bytes;

/// One row of `readings.csv`.
#[derive(Clone, Debug, PartialEq)]
pub struct MeasuredReading {
    /// Index of the operating point in the device file.
    pub point: usize,
    /// Polarity of the field.
    pub polarity: Polarity,
    /// Current in at the first, out at the second.
    pub current: [ContactIdx; 2],
    /// The meter's + input on the first.
    pub voltage: [ContactIdx; 2],
    /// Resistance in Ω with its standard uncertainty (k = 1) where one was written.
    pub value_ohm: Uncertain,
    /// The value as the user wrote it, with its unit.
    pub written: String,
    /// Name of the meter, as in the cooldown file.
    pub meter: Option<String>,
    /// Readings of one set were taken with all its meters connected.
    pub set: Option<String>,
    /// Free text.
    pub note: Option<String>,
    /// The row.
    pub place: Place,
}
