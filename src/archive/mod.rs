//! The record: the machine-readable twin of a sheet.
//!
//! Takes a report, gives the bytes of its record; recognises the files that the program wrote. Must never solve anything.

mod recognise;

pub use recognise::Own;
pub use recognise::recognise;

use crate::diagnostic::Diagnostic;
use crate::report::Report;

/// The record as JSON text: everything the sheet states, keys in a fixed order, one line end at the end.
pub fn record(report: &Report) -> Result<Vec<u8>, Diagnostic> {
    let fault =
        |error: serde_json::Error| Diagnostic::fault("record", format!("the record cannot be written: {error}"));
    let mut bytes = serde_json::to_vec_pretty(report).map_err(fault)?;
    bytes.push(b'\n');
    Ok(bytes)
}
