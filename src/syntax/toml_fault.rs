//! Faults of syntax, with a hint made from the line as the user wrote it.

use std::collections::BTreeSet;
use std::sync::Arc;

use crate::diagnostic::Diagnostic;
use crate::diagnostic::Place;
use crate::diagnostic::Source;

use crate::syntax::quoted;

/// One fault per line: the parser's later complaints about a line mostly follow from its first one.
pub(super) fn faults(source: &Arc<Source>, errors: &[toml::de::Error]) -> Vec<Diagnostic> {
    let mut lines = BTreeSet::new();
    let places = errors.iter().map(|error| (error, place(source, error)));
    places.filter(|(_, at)| lines.insert(line_start(at))).map(|(error, at)| fault(error, &at)).collect()
}

/// The stretches of a text that faults of syntax spoil: rising, apart from one another.
#[derive(Debug)]
pub(super) struct Spoiled(Vec<(usize, usize)>);

impl Spoiled {
    /// What these faults spoil.
    pub(super) fn by(faults: &[Diagnostic]) -> Self {
        let mut stretches: Vec<(usize, usize)> =
            faults.iter().filter_map(|fault| fault.place.as_ref()).map(stretch).collect();
        stretches.sort();
        let mut merged: Vec<(usize, usize)> = Vec::new();
        for (start, end) in stretches {
            match merged.last_mut() {
                Some(last) if start <= last.1 => last.1 = last.1.max(end),
                _ => merged.push((start, end)),
            }
        }
        Self(merged)
    }

    /// Whether nothing is spoiled.
    pub(super) fn is_empty(&self) -> bool {
        self.0.is_empty()
    }

    /// Whether a place touches a spoiled stretch.
    pub(super) fn touches(&self, place: &Place) -> bool {
        let before = self.0.partition_point(|(start, _)| *start <= place.end);
        before > 0 && self.0[before - 1].1 >= place.start
    }
}

/// The line of a fault; below a spoiled header also all lines up to the next header, since their table is unknown.
fn stretch(at: &Place) -> (usize, usize) {
    let start = line_start(at);
    let rest = at.source.text.get(start..).unwrap_or_default();
    let header = rest.trim_start().starts_with('[');
    let length = if header { rest.find("\n[") } else { rest.find('\n') };
    (start, start + length.unwrap_or(rest.len()))
}

fn place(source: &Arc<Source>, error: &toml::de::Error) -> Place {
    let length = source.text.len();
    let span = error.span().unwrap_or(0..0);
    Place { source: Arc::clone(source), start: span.start.min(length), end: span.end.min(length) }
}

fn fault(error: &toml::de::Error, at: &Place) -> Diagnostic {
    let word = at.source.text.get(at.start..at.end).unwrap_or_default();
    if error.message() == "duplicate key" {
        return Diagnostic::fault("doubled-key", format!("{} is given twice", quoted(word)))
            .at(at)
            .hint("keep one of the two; several contacts, gates or points stand under double brackets, `[[contact]]`");
    }
    let (message, hint) = explain(line(at)).unwrap_or_else(|| plain(error.message()));
    Diagnostic::fault("syntax", message).at(at).hint(hint)
}

/// The parser's complaints that need other words: how they begin, what to say, what to do.
const PLAIN: &[(&str, &str, &str)] = &[
    (
        "string values must be quoted",
        "this is neither a number nor a text in quotes",
        "a line reads `key = value`; texts stand in double quotes",
    ),
    ("invalid basic string", "the text is not closed", "write a double quote at its end, on the same line"),
    ("invalid literal string", "the text is not closed", "write a single quote at its end, on the same line"),
    (
        "missing escaped value",
        "a backslash starts a special sign, and this one is unknown",
        "write two backslashes for one, or put the text in single quotes",
    ),
    (
        "unexpected key or value",
        "more stands on this line than one value",
        "write one `key = value` on a line; a remark starts with #",
    ),
    ("key with no value", "this line has no `=`", "a line reads `key = value`, and a remark starts with #"),
    ("missing comma", "a comma is missing in this list", "values in a list stand between commas"),
    ("unclosed array table", "the header is not closed", "write `]]` at its end"),
    ("unclosed table", "the header is not closed", "write `]` at its end"),
    ("unclosed array", "the list is not closed", "write `]` at its end"),
    ("unclosed inline table", "the braces are not closed", "write `}` at their end"),
    ("invalid float", NO_NUMBER, NUMBERS),
    ("invalid integer", NO_NUMBER, NUMBERS),
    ("invalid fraction", NO_NUMBER, NUMBERS),
    ("invalid mantissa", NO_NUMBER, NUMBERS),
    ("unexpected leading zero", "a number starts with a zero too many", "take the zero away"),
    ("recursion limit", "brackets or dots are nested too deeply", "no table of this file is nested so deeply"),
    ("carriage return", "the line ends in a sign that is no line end", "save the file with usual line ends"),
];
const NO_NUMBER: &str = "this is no number";
const NUMBERS: &str = "a decimal has digits on both sides of its point, 0.5; a date reads 2026-03-14";

fn plain(message: &str) -> (String, &'static str) {
    match PLAIN.iter().find(|(start, _, _)| message.starts_with(start)) {
        Some((_, words, hint)) => ((*words).to_owned(), hint),
        None => (message.to_owned(), "a line reads `key = value`; texts stand in double quotes"),
    }
}

/// The slips that are common enough to be named.
fn explain(line: &str) -> Option<(String, &'static str)> {
    let code = line.split('#').next().unwrap_or(line);
    let value = code.split_once('=').map(|(_, value)| value.trim());
    let written = quoted(value.unwrap_or(code.trim()));
    let found = if code.contains(['“', '”', '„', '‘', '’', '«', '»']) {
        (
            format!("{written} stands in quotes that are not the plain ones"),
            "write \"…\" with the quotes of the keyboard",
        )
    } else if value == Some("") {
        ("nothing stands after `=`".to_owned(), "write a value, or leave the key out")
    } else if value.is_some_and(comma_decimal) {
        (format!("{written} has a decimal comma"), "write a decimal point: 0.5")
    } else if value.is_some_and(unit_behind) {
        (format!("{written} has something behind the number"), "the unit stands in the key, not behind the value")
    } else if value.is_none() && code.contains(':') && !code.contains('[') {
        (format!("{written} has a colon in place of `=`"), "write `key = value`")
    } else if code.contains('+') && value.is_some_and(|value| value.starts_with('{')) {
        (format!("{written} has a name with + without quotes"), "put the name in quotes: `\"TG+BG\" = 2`")
    } else if value.is_some_and(second_key) {
        (format!("{written} holds a second `=`"), "write one `key = value` on a line")
    } else if value.is_some_and(plain_word) {
        (format!("{written} is neither a number nor a text in quotes"), "texts stand in double quotes: \"…\"")
    } else {
        return None;
    };
    Some(found)
}

/// `100 width_um = 20`.
fn second_key(value: &str) -> bool {
    value.contains('=') && !value.contains(['"', '\'', '{'])
}

/// `KR-4`: a text that lacks its quotes.
fn plain_word(value: &str) -> bool {
    value.starts_with(char::is_alphabetic) && !value.contains(['"', '\'', '[', '{'])
}

/// `0,5` and nothing else.
fn comma_decimal(value: &str) -> bool {
    let digits = |text: &str| !text.is_empty() && text.bytes().all(|b| b.is_ascii_digit());
    value.split_once(',').is_some_and(|(whole, rest)| digits(whole.trim_start_matches(['-', '+'])) && digits(rest))
}

/// `3.1 T`, `20um`.
fn unit_behind(value: &str) -> bool {
    let number = value.trim_start_matches(|c: char| c.is_ascii_digit() || "+-.eE".contains(c));
    number.len() < value.len() && value.starts_with(|c: char| c.is_ascii_digit() || c == '-') && {
        let unit = number.trim();
        !unit.is_empty() && unit.chars().all(|c| c.is_alphabetic() || "/²Ωµ".contains(c))
    }
}

fn line_start(at: &Place) -> usize {
    let before = at.source.text.get(..at.start).unwrap_or_default();
    before.rfind('\n').map_or(0, |newline| newline + 1)
}

fn line(at: &Place) -> &str {
    let rest = at.source.text.get(line_start(at)..).unwrap_or_default();
    rest.split('\n').next().unwrap_or_default()
}
