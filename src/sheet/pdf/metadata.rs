//! What a file says of itself: title and date, once as dictionary and once as XMP (ISO 32000-1, 14.3), language.
//!
//! A date is written to the day, as it was given; there is no time in it that nobody knows.

use lopdf::Object;
use lopdf::Stream;
use lopdf::text_string;

use crate::sheet::pdf::Entries;
use crate::sheet::pdf::PdfDocument;
use crate::sheet::pdf::dictionary;
use crate::sheet::pdf::name;

/// The program, as it is named in files.
const PRODUCER: &str = concat!("edgesheet ", env!("CARGO_PKG_VERSION"));

/// Catalog entries on the document as a whole; the information dictionary is replaced on the way.
pub(super) fn entries(document: &PdfDocument, file: &mut lopdf::Document) -> Entries {
    let information = file.add_object(information(document));
    file.trailer.set("Info", information);
    let preferences = dictionary([("DisplayDocTitle", true.into())]);
    let mut entries = vec![("ViewerPreferences", preferences.into())];
    if !document.language.is_empty() {
        entries.push(("Lang", text_string(&document.language)));
    }
    if let Some(packet) = xmp(document) {
        let header = dictionary([("Type", name("Metadata")), ("Subtype", name("XML"))]);
        // Left readable, for programs that look for it without knowing PDF.
        let stream = Stream::new(header, packet.into_bytes()).with_compression(false);
        entries.push(("Metadata", file.add_object(stream).into()));
    }
    entries
}

/// The document's date as PDF writes it, to the day; nothing when it has none or it is no date.
pub(super) fn pdf_date(document: &PdfDocument) -> Option<Object> {
    let date = day(document)?;
    Some(Object::string_literal(format!("D:{}", date.replace('-', ""))))
}

fn information(document: &PdfDocument) -> lopdf::Dictionary {
    let mut information = dictionary([
        ("Title", text_string(&plain(&document.title))),
        ("Subject", text_string(&plain(&document.subject))),
        ("Keywords", text_string(&keywords(document).join(", "))),
        ("Creator", text_string(PRODUCER)),
        ("Producer", text_string(PRODUCER)),
    ]);
    if let Some(date) = pdf_date(document) {
        information.set("CreationDate", date.clone());
        information.set("ModDate", date);
    }
    information
}

/// The date, if it begins like `2026-03-14`.
fn day(document: &PdfDocument) -> Option<&str> {
    let day = document.date.as_deref()?.get(..10)?;
    let is_date = day.bytes().enumerate().all(|(place, byte)| match place {
        4 | 7 => byte == b'-',
        _ => byte.is_ascii_digit(),
    });
    is_date.then_some(day)
}

/// The XMP packet; nothing only if the template were broken, which a test excludes.
fn xmp(document: &PdfDocument) -> Option<String> {
    let mut context = tera::Context::new();
    context.insert("title", &plain(&document.title));
    context.insert("subject", &plain(&document.subject));
    context.insert("identifier", &plain(&document.identifier));
    context.insert("kind", &plain(&document.kind));
    context.insert("related", &document.related.iter().map(|text| plain(text)).collect::<Vec<_>>());
    context.insert("keywords", &keywords(document));
    context.insert("keyword_line", &keywords(document).join(", "));
    context.insert("language", &document.language);
    context.insert("producer", PRODUCER);
    context.insert("date", &day(document));
    tera::Tera::one_off(include_str!("../../../templates/metadata.xml"), &context, true).ok()
}

fn keywords(document: &PdfDocument) -> Vec<String> {
    document.keywords.iter().map(|word| plain(word)).collect()
}

/// The text without controls, which XML 1.0 cannot hold; both forms of the metadata must say the same.
fn plain(text: &str) -> String {
    text.chars().map(|c| if c.is_control() || matches!(c, '\u{FFFE}' | '\u{FFFF}') { ' ' } else { c }).collect()
}
