//! A text to a checked tree.

use std::sync::Arc;

use toml::de::DeTable;

use crate::diagnostic::Diagnostic;
use crate::diagnostic::Faults;
use crate::diagnostic::Findings;
use crate::diagnostic::Place;
use crate::diagnostic::Source;

use crate::syntax::FileSpec;
use crate::syntax::Table;
use crate::syntax::check;
use crate::syntax::node;
use crate::syntax::quoted;
use crate::syntax::toml_fault;
use crate::syntax::toml_fault::Spoiled;

/// Largest file that is read. A device file is a few kilobytes; more is a table given by mistake.
const LARGEST: usize = 4_000_000;
/// After so many lines without `=` the file is not TOML at all, and the rest stays unread.
const MOST_BLANKED: usize = 20;
/// The version of both file formats.
const FORMAT: i64 = 1;

/// A file in which every value is of the kind that its key asks for, and what was found on the way.
#[derive(Debug)]
pub struct Checked {
    /// The tree, without what was refused.
    pub root: Table,
    /// Faults and notices so far.
    pub findings: Findings,
    /// False where faults of syntax hide parts of the file: what is absent may have been meant.
    pub whole: bool,
}

/// Reads a text against its table of keys. Fails outright only when the text is too long.
pub fn read(source: &Arc<Source>, file: &'static FileSpec) -> Result<Checked, Faults> {
    refuse_long(&source.name, source.text.len())?;
    let (tree, errors) = parse(source);
    let syntax = toml_fault::faults(source, &errors);
    let mut findings = Findings::default();
    let root = check::root(&tree, &check::Context { file, spoiled: &Spoiled::by(&syntax) }, &mut findings);
    findings.extend(format_fault(&root));
    let whole = syntax.is_empty();
    findings.extend(syntax);
    Ok(Checked { root, findings, whole })
}

/// The tree and all faults of syntax. At a line without `=` the parser leaves the rest of the file unread, so such a line
/// is blanked, byte by byte to keep every place, and the text parsed again. What stands below a header that is not closed
/// stays unread until the header is mended.
pub(super) fn parse(source: &Arc<Source>) -> (Table, Vec<toml::de::Error>) {
    let mut text = source.text.clone();
    let mut blanked = Vec::new();
    loop {
        let (tree, mut errors) = DeTable::parse_recoverable(&text);
        let stopped = errors.iter().find(|error| error.message().starts_with("key with no value")).cloned();
        let span = stopped.as_ref().and_then(toml::de::Error::span).filter(|_| blanked.len() < MOST_BLANKED);
        let Some((error, span)) = stopped.zip(span) else {
            errors.extend(blanked);
            errors.sort_by_key(|error| error.span().map(|span| span.start));
            return (node::root(tree.get_ref(), source), errors);
        };
        blanked.push(error);
        text = without_line(&text, span.start);
    }
}

/// The text with the line at this byte made blank.
fn without_line(text: &str, at: usize) -> String {
    let at = text.floor_char_boundary(at);
    let start = text[..at].rfind('\n').map_or(0, |newline| newline + 1);
    let end = text[at..].find('\n').map_or(text.len(), |newline| at + newline);
    format!("{}{}{}", &text[..start], " ".repeat(end - start), &text[end..])
}

/// The text of a file's bytes: UTF-8 and not too long.
pub fn from_bytes(name: &str, bytes: &[u8]) -> Result<Arc<Source>, Faults> {
    refuse_long(name, bytes.len())?;
    match std::str::from_utf8(bytes) {
        Ok(text) => Ok(Source::new(name, text)),
        Err(error) => Err(Faults(vec![not_utf8(name, bytes, error.valid_up_to())])),
    }
}

fn refuse_long(name: &str, length: usize) -> Result<(), Faults> {
    if length <= LARGEST {
        return Ok(());
    }
    let message = format!("{} is longer than 4 MB and was not read", quoted(name));
    let fault = Diagnostic::fault("too-long", message)
        .at(&Place { source: Source::new(name, ""), start: 0, end: 0 })
        .hint("give the device or cooldown file here; measured tables are named inside the cooldown file");
    Err(Faults(vec![fault]))
}

fn not_utf8(name: &str, bytes: &[u8], at: usize) -> Diagnostic {
    // Up to `at` the bytes are UTF-8, so the place is the same in the text with replacement signs.
    let source = Source::new(name, String::from_utf8_lossy(bytes));
    let wide = bytes.starts_with(&[0xFF, 0xFE]) || bytes.starts_with(&[0xFE, 0xFF]);
    let hint = if wide { "it looks like UTF-16: save it as UTF-8" } else { "save the file as UTF-8 in your editor" };
    Diagnostic::fault("not-utf-8", format!("byte {} is not UTF-8 text", at + 1))
        .at(&Place { source, start: at, end: at })
        .hint(hint)
}

fn format_fault(root: &Table) -> Option<Diagnostic> {
    let format = root.count("format").filter(|format| *format != FORMAT)?;
    let fault =
        Diagnostic::fault("wrong-format", format!("`format` is {format}, and this program reads format {FORMAT}"));
    Some(fault.at(root.place_of("format")).hint("use the program version that wrote this file, or write `format = 1`"))
}
