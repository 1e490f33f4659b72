//! The record of a sheet: written, read again and compared, for as long as sheets are kept.
//!
//! Owns the kept formats: [`record`] and its [`schema`], the files inside a PDF, and the comparison of what was archived
//! with what was computed again. Takes reports, numbers and bytes of strangers; gives bytes, texts and findings. Must never
//! solve anything: computing again is a sequence in `cli`.
//!
//! **The rule for the record.** Keys may be added; none is taken away or changes its meaning, its unit or its kind. A reader
//! passes over keys that it does not know. Another number under `format` is another format.

mod archived;
mod compare;
mod input;
mod opened;
mod pdf;
mod recognise;
mod record;
mod schema;
mod text;
mod verified;

pub use input::Kept;
pub use input::Role;
pub use opened::LARGEST_SHEET;
pub use opened::Needed;
pub use opened::Opened;
pub use opened::opened;
pub use recognise::Own;
pub use recognise::recognise;
pub use record::FORMAT;
pub use record::Options;
pub use record::Parts;
pub use record::record;
pub use schema::schema;
pub use verified::Again;
pub use verified::Verified;
pub use verified::verified;
pub use verified::verified_inputs;
