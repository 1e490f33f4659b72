//! Texts, words, dates and mixings.

use crate::diagnostic::Diagnostic;

use crate::syntax::Node;
use crate::syntax::Value;
use crate::syntax::did_you_mean;
use crate::syntax::keys::Range;
use crate::syntax::kind::number;
use crate::syntax::kind::wrong_kind;
use crate::syntax::quoted;

/// Longest name in characters: it has to fit into tables of a sheet.
const LONGEST_NAME: usize = 60;

pub(super) fn text(key: &str, node: &Node) -> Vec<Diagnostic> {
    match &node.value {
        Value::Text(text) => noncharacter(key, text, node).into_iter().collect(),
        Value::Whole(number) | Value::Decimal(number) => {
            vec![wrong_kind(key, "a text", node).hint(format!("put it in quotes: \"{number}\""))]
        }
        _ => vec![wrong_kind(key, "a text", node).hint("write a text in double quotes")],
    }
}

pub(super) fn name(key: &str, node: &Node) -> Vec<Diagnostic> {
    let Some(name) = node.text() else { return text(key, node) };
    let fault = |message: String, hint: &str| vec![Diagnostic::fault("bad-name", message).at(&node.place).hint(hint)];
    if name.trim().is_empty() {
        fault(format!("`{key}` is empty"), "write a name")
    } else if name.trim() != name || name.chars().any(char::is_control) {
        fault(format!("`{key}` has blanks at an end, a tab or a line break: {}", quoted(name)), "take them out")
    } else if name.contains(['{', '}']) {
        // The record writes names of contacts as `R_{14,25}`, so a name with such brackets could not be told from its neighbours.
        fault(format!("`{key}` has curly brackets: {}", quoted(name)), "take them out, or write round ones")
    } else if name.chars().count() > LONGEST_NAME {
        fault(
            format!("`{key}` is longer than {LONGEST_NAME} characters"),
            "choose a shorter one; `note` takes long texts",
        )
    } else {
        text(key, node)
    }
}

/// Texts of a sheet carry marks that are such codes.
fn noncharacter(key: &str, text: &str, node: &Node) -> Option<Diagnostic> {
    let found = text.chars().find(|sign| is_noncharacter(*sign))?;
    let message = format!("`{key}` holds the code U+{:04X}, which is no character", u32::from(found));
    Some(Diagnostic::fault("no-character", message).at(&node.place).hint("take it out"))
}

/// One of the 32 noncharacters that Unicode sets aside in one row, for use inside programs.
pub fn is_noncharacter(sign: char) -> bool {
    ('\u{FDD0}'..='\u{FDEF}').contains(&sign)
}

/// A file name or the header of a column: any one line.
pub(super) fn line(key: &str, node: &Node) -> Vec<Diagnostic> {
    let Some(line) = node.text() else { return text(key, node) };
    let message = match line {
        _ if line.trim().is_empty() => format!("`{key}` is empty"),
        _ if line.chars().any(|c| c.is_control() && c != '\t') => format!("`{key}` has a line break: {}", quoted(line)),
        _ => return text(key, node),
    };
    vec![Diagnostic::fault("bad-name", message).at(&node.place).hint("write one line, as the file or column is called")]
}

pub(super) fn boolean(key: &str, node: &Node) -> Vec<Diagnostic> {
    match &node.value {
        Value::Boolean(_) => Vec::new(),
        _ => vec![wrong_kind(key, "`true` or `false`", node).hint("write true or false without quotes")],
    }
}

pub(super) fn date(key: &str, node: &Node) -> Vec<Diagnostic> {
    match &node.value {
        Value::Date(date) if date.len() == "2026-03-14".len() && !date.contains(':') => Vec::new(),
        Value::Date(_) => vec![wrong_kind(key, "a day without a time", node).hint("write year-month-day, 2026-03-14")],
        Value::Text(_) => vec![wrong_kind(key, "a date", node).hint("write it without quotes: 2026-03-14")],
        _ => vec![wrong_kind(key, "a date", node).hint("write year-month-day without quotes: 2026-03-14")],
    }
}

pub(super) fn one_of(words: &[&str], key: &str, node: &Node) -> Vec<Diagnostic> {
    let list = words.iter().map(|word| format!("\"{word}\"")).collect::<Vec<_>>().join(", ");
    let Some(text) = node.text() else {
        return vec![wrong_kind(key, "a word", node).hint(format!("write one of {list}"))];
    };
    if words.contains(&text) {
        return Vec::new();
    }
    let hint = match did_you_mean(text, words.iter().copied()) {
        Some(meant) => format!("did you mean \"{meant}\"? Possible are {list}"),
        None => format!("possible are {list}"),
    };
    vec![
        Diagnostic::fault("unknown-word", format!("{} cannot be {}", quoted(key), quoted(text)))
            .at(&node.place)
            .hint(hint),
    ]
}

/// `"none"`, `"full"` or a table with a length alone.
pub(super) fn mixing(key: &str, node: &Node) -> Vec<Diagnostic> {
    let Value::Table(table) = &node.value else { return one_of(&["none", "full"], key, node) };
    match table.node(LENGTH).filter(|_| table.entries.len() == 1) {
        Some(length) => number::length(Range::Positive, LENGTH, length),
        None => {
            let wanted = "\"none\", \"full\" or { length_um = 150 }";
            vec![
                wrong_kind(key, wanted, node)
                    .hint("write \"none\", \"full\" or { length_um = … } with nothing beside it"),
            ]
        }
    }
}

/// The key of a mixing length.
const LENGTH: &str = "length_um";
