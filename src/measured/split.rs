//! A text cut into lines and cells, each with its place.

use std::sync::Arc;

use crate::diagnostic::Diagnostic;
use crate::diagnostic::Findings;
use crate::diagnostic::Place;
use crate::diagnostic::Source;

/// A line with at least one cell that is not empty.
#[derive(Clone, Debug)]
pub struct Line {
    /// Cells from left to right, trimmed.
    pub cells: Vec<Cell>,
    /// The whole line.
    pub place: Place,
}

/// A trimmed cell.
#[derive(Clone, Debug)]
pub struct Cell {
    /// Its text, without quotes.
    pub text: String,
    /// Where it stands.
    pub place: Place,
}

/// Lines in order, without comment lines (first character `#`) and empty ones. A byte order mark is passed over.
///
/// The first line decides what separates cells: a comma, or where it has none a semicolon or a tab. That cannot be misread
/// because the names of columns hold none of the three. A line that mixes them is a fault.
pub fn lines(source: &Arc<Source>, findings: &mut Findings) -> Vec<Line> {
    let Some((_, header)) = written_lines(&source.text).next() else { return Vec::new() };
    let separators: Vec<char> = [',', ';', '\t'].into_iter().filter(|mark| header.contains(*mark)).collect();
    let separator = separators.first().copied().unwrap_or(',');
    let mut lines = Vec::new();
    for (start, text) in written_lines(&source.text) {
        let place = Place { source: source.clone(), start, end: start + text.len() };
        if separators.len() > 1 {
            findings.push(mixed_separators(&place));
            return Vec::new();
        }
        match cells(text, separator, &place) {
            Ok(cells) if cells.iter().all(|cell| cell.text.is_empty()) => {}
            Ok(cells) => lines.push(Line { cells, place }),
            Err(fault) => findings.push(fault),
        }
    }
    lines
}

/// (first byte, text) of every line that is neither empty nor a comment, without line ends.
fn written_lines(text: &str) -> impl Iterator<Item = (usize, &str)> {
    let after_mark = if text.starts_with('\u{FEFF}') { '\u{FEFF}'.len_utf8() } else { 0 };
    let mut start = after_mark;
    text[after_mark..].split('\n').filter_map(move |line| {
        let at = start;
        start += line.len() + 1;
        let line = line.strip_suffix('\r').unwrap_or(line);
        let inside = line.trim();
        (!inside.is_empty() && !inside.starts_with('#')).then_some((at, line))
    })
}

fn lone_return(place: &Place) -> Diagnostic {
    Diagnostic::fault("line-ends", "a carriage return stands alone in this line")
        .at(place)
        .hint("save the table with line ends LF or CRLF")
}

fn mixed_separators(header: &Place) -> Diagnostic {
    Diagnostic::fault("mixed-separators", "the header separates its columns in more than one way")
        .at(header)
        .hint("use commas throughout, or semicolons, or tabs")
}

fn cells(line: &str, separator: char, place: &Place) -> Result<Vec<Cell>, Diagnostic> {
    if line.contains('\r') {
        return Err(lone_return(place));
    }
    let open = || {
        let hint = "close the quote in the same line, or leave quotes out";
        Diagnostic::fault("open-quote", "a quote opens in this line and does not close").at(place).hint(hint)
    };
    // A quote that stays open swallows the line end added here.
    let text = format!("{line}\n");
    let mut reader = csv::ReaderBuilder::new()
        .has_headers(false)
        .flexible(true)
        .delimiter(separator as u8)
        .buffer_capacity(text.len())
        .from_reader(text.as_bytes());
    let mut record = csv::StringRecord::new();
    match reader.read_record(&mut record) {
        Ok(_) if !record.iter().any(|cell| cell.contains('\n')) => Ok(placed(&record, line, place)),
        _ => Err(open()),
    }
}

/// Finds every cell of the record in its line: quotes, and quotes doubled inside them, lengthen what was written.
fn placed(record: &csv::StringRecord, line: &str, place: &Place) -> Vec<Cell> {
    let mut at = 0;
    let mut cells = Vec::new();
    for text in record {
        let quoted = line.get(at..).is_some_and(|rest| rest.starts_with('"'));
        let quote = usize::from(quoted);
        let inner = text.trim();
        let lead = at + quote + (text.len() - text.trim_start().len());
        let start = (place.start + lead).min(place.end);
        let end = (start + inner.len()).min(place.end);
        cells.push(Cell { text: inner.to_string(), place: Place { source: place.source.clone(), start, end } });
        at += text.len() + quote * (2 + text.matches('"').count()) + 1;
    }
    cells
}
