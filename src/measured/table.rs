//! A readings table: text or bytes in, readings in row order or all faults out.

use std::sync::Arc;

use crate::cooldown::MagnetSense;
use crate::cooldown::Names;
use crate::diagnostic::Diagnostic;
use crate::diagnostic::Faults;
use crate::diagnostic::Findings;
use crate::diagnostic::Outcome;
use crate::diagnostic::Place;
use crate::diagnostic::Source;
use crate::measured::MeasuredReading;
use crate::measured::columns::Column;
use crate::measured::columns::Header;
use crate::measured::row::Row;
use crate::measured::split::Line;
use crate::measured::split::lines;
use crate::syntax::is_noncharacter;

/// Largest table in bytes. Readings are typed or logged one by one; what is larger is a sweep.
const LARGEST: usize = 4_000_000;

/// Reads a table with the names that device and cooldown give.
///
/// `i_in`, `i_out`, `v_plus`, `v_minus`, `value` and one of `polarity` and `field_T` must be there, `point` unless the
/// device has exactly one; `unit`, `u`, `meter`, `set`, `note` may be missing. Gives readings in row order, or all
/// faults of the table. A table with a header and no rows gives none and a notice.
pub fn from_source(source: &Arc<Source>, names: &Names) -> Outcome<Vec<MeasuredReading>> {
    let mut findings = Findings::default();
    if source.text.len() > LARGEST {
        return Err(Faults(vec![too_large(source)]));
    }
    findings.extend(noncharacter(source));
    let all = lines(source, &mut findings);
    let Some((first, rows)) = all.split_first() else {
        if !findings.has_faults() {
            findings.push(no_header(source));
        }
        return Err(findings.into_faults());
    };
    let header = Header::read(first, names, &mut findings);
    findings.extend(unknown_sense(&header, first, names));
    if rows.is_empty() && !findings.has_faults() {
        let notice = Diagnostic::notice("no-readings", "the table has a header and no readings");
        findings.push(notice.at(&first.place).hint("add a row per reading"));
    }
    let readings =
        rows.iter().filter_map(|line| reading(Row { header: &header, names, line }, &mut findings)).collect();
    findings.finish(readings)
}

/// Texts of a sheet carry marks that are such codes.
fn noncharacter(source: &Arc<Source>) -> Option<Diagnostic> {
    let (start, sign) = source.text.char_indices().find(|(_, sign)| is_noncharacter(*sign))?;
    let message = format!("the table holds the code U+{:04X}, which is no character", u32::from(sign));
    let place = Place { source: Arc::clone(source), start, end: start + sign.len_utf8() };
    Some(Diagnostic::fault("no-character", message).at(&place).hint("take it out"))
}

/// The text of a table from its bytes: UTF-8, with or without a byte order mark.
pub fn source_from_bytes(name: &str, bytes: &[u8]) -> Result<Arc<Source>, Faults> {
    let error = match std::str::from_utf8(bytes) {
        Ok(text) => return Ok(Source::new(name, text)),
        Err(error) => error,
    };
    // Up to the first bad byte the lossy text is the same as the bytes, so the place is right.
    let start = error.valid_up_to();
    let place = Place { source: Source::new(name, String::from_utf8_lossy(bytes)), start, end: start + 1 };
    let utf_16 = bytes.starts_with(&[0xFF, 0xFE]) || bytes.starts_with(&[0xFE, 0xFF]);
    let message = if utf_16 { "the table is UTF-16, not UTF-8" } else { "the table is not UTF-8 from here on" };
    Err(Faults(vec![Diagnostic::fault("not-utf-8", message).at(&place).hint("save it again as text in UTF-8")]))
}

fn reading(row: Row, findings: &mut Findings) -> Option<MeasuredReading> {
    let line = row.line;
    if row.header.is_repeated_by(line) {
        let fault = Diagnostic::fault("repeated-header", "the header stands here once more");
        findings.push(fault.at(&line.place).hint("remove this line; a table has one header"));
        return None;
    }
    if line.cells.len() != row.header.width() {
        findings.push(ragged(line, row.header.width()));
        return None;
    }
    row.reading(findings)
}

fn ragged(line: &Line, width: usize) -> Diagnostic {
    let found = line.cells.len();
    let count = |n: usize| if n == 1 { "1 cell".to_string() } else { format!("{n} cells") };
    let hint = if found > width {
        "write decimals with a point, and put a text that holds a separator in quotes"
    } else {
        "leave a cell empty between separators where there is nothing to say"
    };
    Diagnostic::fault("ragged-row", format!("this row has {}, the header has {width}", count(found)))
        .at(&line.place)
        .hint(hint)
}

fn unknown_sense(header: &Header, line: &Line, names: &Names) -> Option<Diagnostic> {
    if !header.has(Column::Field) || names.magnet != MagnetSense::Unknown {
        return None;
    }
    let message = "`field_T` gives a sign, and it is not known where a positive field points";
    let hint =
        "write positive = \"toward\" or \"away\" under [magnet] in the cooldown file, or use a column `polarity`";
    Some(Diagnostic::fault("unknown-sense", message).at(header.place(line, Column::Field)).hint(hint))
}

fn too_large(source: &Arc<Source>) -> Diagnostic {
    let message = format!("the table has {} bytes, more than {LARGEST}", source.text.len());
    Diagnostic::fault("too-large", message)
        .at(&start_of(source))
        .hint("readings are single values; a long record belongs to the cooldown file as a [[sweep]]")
}

fn no_header(source: &Arc<Source>) -> Diagnostic {
    Diagnostic::fault("no-header", "the table is empty")
        .at(&start_of(source))
        .hint("begin with point,polarity,i_in,i_out,v_plus,v_minus,value,unit,u,meter,set,note")
}

fn start_of(source: &Arc<Source>) -> Place {
    Place { source: source.clone(), start: 0, end: 0 }
}
