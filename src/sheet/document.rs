//! The PDF document around the pages: title, bookmarks, files carried inside.

use std::collections::BTreeSet;

use crate::diagnostic::Diagnostic;
use crate::figure::fonts::missing_in;
use crate::figure::scene::Scene;
use crate::report::Report;
use crate::sheet::compose::Pages;
use crate::sheet::pdf::Attachment;
use crate::sheet::pdf::PageLabel;
use crate::sheet::pdf::PdfDocument;
use crate::sheet::pdf::Relationship;
use crate::sheet::typeset::spoken;

/// The document of a sheet. `inputs` are (name, bytes) in the order in which they were read; `record` is the record's
/// bytes; `date` that of the cooldown, if it has one.
pub fn document(
    report: &Report,
    pages: Pages,
    date: Option<String>,
    (inputs, record): (&[(&str, &[u8])], &[u8]),
) -> PdfDocument {
    let mut attachments: Vec<Attachment> = inputs.iter().map(|(name, bytes)| input(name, bytes)).collect();
    attachments.push(Attachment {
        name: "record.json".to_owned(),
        mime: "application/json".to_owned(),
        description: format!("record of format {}: everything the sheet states, machine-readable", report.format),
        relationship: Relationship::Data,
        bytes: record.to_vec(),
    });
    PdfDocument {
        // The first page is page 1, as its foot says.
        page_labels: vec![PageLabel { first_page: 0, prefix: String::new(), first_number: 1 }],
        pages: pages.scenes,
        bookmarks: pages.bookmarks,
        links: pages.links,
        title: format!("{}: {}", report.identity.foot, report.words.kind),
        subject: spoken(&report.verdict.sentence),
        identifier: report.identity.foot.clone(),
        kind: report.words.kind.clone(),
        related: vec![format!("record.json, record of format {} of {}", report.format, report.provenance.program)],
        keywords: report.provenance.inputs.iter().map(|input| input.sha256.clone()).collect(),
        date,
        language: "en-GB".to_owned(),
        attachments,
    }
}

/// Characters named in one notice.
const MOST_NAMED: usize = 12;

/// What to tell a user whose names hold characters that the fonts of a sheet lack.
pub fn spelled(pages: &[Scene]) -> Option<Diagnostic> {
    let missing: BTreeSet<char> = pages.iter().flat_map(missing_in).collect();
    let named = missing.iter().take(MOST_NAMED).map(|sign| format!("{sign} (U+{:04X})", u32::from(*sign)));
    let named: Vec<String> = named.collect();
    (!missing.is_empty()).then(|| {
        Diagnostic::notice("spelled-characters", format!("the fonts of a sheet lack {}", named.join(", ")))
            .hint("its pages show their numbers; Latin and Greek letters are printed as they are")
    })
}

fn input(name: &str, bytes: &[u8]) -> Attachment {
    let mime = match name.rsplit('.').next() {
        Some("toml") => "application/toml",
        Some("csv") => "text/csv",
        _ => "application/octet-stream",
    };
    Attachment {
        name: name.to_owned(),
        mime: mime.to_owned(),
        description: "input of this sheet, byte for byte".to_owned(),
        relationship: Relationship::Source,
        bytes: bytes.to_vec(),
    }
}
