//! What is said of files that the program wrote itself.

use crate::report::Understood;

/// A record, a PDF sheet or its HTML twin; `foot` names device, cooldown and revision where the file says so.
pub fn understood_output(file: &str, what: &str, foot: Option<&str>) -> Understood {
    let kind = foot.map_or_else(|| what.to_owned(), |foot| format!("{what}: {foot}"));
    let line = "written by `edgesheet sheet`; `edgesheet verify` tells whether its inputs still give its numbers";
    Understood::new(file, kind).saying("sheet", vec![line.to_owned()])
}
