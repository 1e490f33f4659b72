//! A sheet of a stranger: what it holds, before anything is computed.

use crate::archive::archived::Archived;
use crate::archive::archived::ArchivedInput;
use crate::archive::archived::archived;
use crate::archive::input::Kept;
use crate::archive::pdf;
use crate::archive::pdf::Attached;
use crate::archive::pdf::PdfFile;
use crate::diagnostic::Diagnostic;

/// Most bytes of a sheet that is verified.
pub const LARGEST_SHEET: u64 = 16 << 20;

/// A PDF sheet or a record, opened.
#[derive(Debug)]
pub struct Opened {
    /// The bytes of the file.
    pub(super) bytes: Vec<u8>,
    /// What is attached to a PDF; none for a record by itself.
    pub(super) attached: Option<Vec<Attached>>,
    /// The bytes of the record.
    pub(super) record_bytes: Vec<u8>,
    /// The record.
    pub(super) record: Archived,
}

/// A file that is needed to compute again.
#[derive(Debug)]
pub enum Needed<'a> {
    /// The record or the PDF holds it.
    Here(Kept),
    /// It has to come from elsewhere; its name without folders.
    Elsewhere(&'a str),
}

/// Opens the bytes of a PDF or a record. A fault says why this is no sheet.
pub fn opened(bytes: Vec<u8>) -> Result<Opened, Diagnostic> {
    let start = bytes.strip_prefix(b"\xEF\xBB\xBF").unwrap_or(&bytes);
    match start.iter().find(|byte| !byte.is_ascii_whitespace()) {
        Some(b'%') if bytes.starts_with(b"%PDF-") => from_pdf(bytes),
        Some(b'{') => {
            let record_bytes = start.to_vec();
            Ok(Opened { record: archived(&record_bytes)?, bytes, attached: None, record_bytes })
        }
        Some(b'<') => Err(no_sheet("this is no PDF and no record")
            .hint("a web page carries no record: give the PDF or the JSON file of the same sheet")),
        _ => {
            Err(no_sheet("this is no PDF and no record")
                .hint("give the PDF or the JSON file that `edgesheet sheet` wrote"))
        }
    }
}

fn from_pdf(bytes: Vec<u8>) -> Result<Opened, Diagnostic> {
    let damaged = |reason: String| {
        no_sheet(&format!("this PDF cannot be read: {reason}"))
            .hint("take another copy; its record by itself, the JSON file of the same name, can be verified too")
    };
    let attached = PdfFile::of(&bytes).and_then(|mut file| pdf::attached(&mut file)).map_err(damaged)?;
    let is_record = |one: &&Attached| one.relationship == "Data" && one.name.ends_with(".json");
    let mut records = attached.iter().filter(is_record);
    let (Some(one), None) = (records.next(), records.next()) else {
        let many = attached.iter().filter(is_record).count();
        return Err(no_sheet(&format!(
            "this PDF carries {} records of a sheet",
            if many == 0 { "no".to_owned() } else { many.to_string() }
        ))
        .hint("give the PDF that `edgesheet sheet` wrote, with what is attached to it"));
    };
    let record_bytes = one.bytes.clone().map_err(|reason| damaged(format!("its record: {reason}")))?;
    Ok(Opened { record: archived(&record_bytes)?, record_bytes, attached: Some(attached), bytes })
}

fn no_sheet(message: &str) -> Diagnostic {
    Diagnostic::fault("no-sheet", message)
}

impl Opened {
    /// The options with which the sheet was computed.
    pub fn options(&self) -> &crate::archive::Options {
        &self.record.options
    }

    /// The files that it takes to compute again, in the order in which they were read.
    pub fn needed(&self) -> Vec<Needed<'_>> {
        self.record
            .inputs
            .iter()
            .map(|input| self.here(input).map_or(Needed::Elsewhere(&input.name), Needed::Here))
            .collect()
    }

    /// A file from elsewhere in its place; a fault where it is not the one that went in.
    pub fn original(&self, name: &str, bytes: Vec<u8>) -> Result<Kept, Diagnostic> {
        let input = self.record.inputs.iter().find(|input| input.name == name && input.is(&bytes));
        let kept = input.map(|input| Kept { role: input.role, name: input.name.clone(), bytes });
        kept.ok_or_else(|| {
            Diagnostic::fault(
                "other-input",
                format!("{name} is not the file that went into the sheet: size or SHA-256 differ"),
            )
            .hint("look for the file as it was when the sheet was written")
        })
    }

    fn here(&self, input: &ArchivedInput) -> Option<Kept> {
        let mut attached = self.attached.iter().flatten().filter_map(|one| one.bytes.as_ref().ok());
        let copy = attached.find(|bytes| input.is(bytes));
        let copy = copy.map(|bytes| Kept { role: input.role, name: input.name.clone(), bytes: bytes.clone() });
        input.kept().or(copy)
    }
}
