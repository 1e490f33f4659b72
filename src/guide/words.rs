//! Keys in words: what a value must be, whether it is needed, what holds without it.

use crate::syntax::keys::Key;
use crate::syntax::keys::Kind;
use crate::syntax::keys::Range;
use crate::syntax::keys::Status;
use crate::syntax::keys::Unit;

/// `length or coordinate in micrometres, above zero`.
pub fn takes(kind: &Kind, unit: Option<&Unit>) -> String {
    let unit = unit.map(|unit| match unit.words.starts_with("per ") {
        true => format!(" {}", unit.words),
        false => format!(" in {}", unit.words),
    });
    let unit = unit.unwrap_or_default();
    match kind {
        Kind::Text => "a text".to_owned(),
        Kind::Name => "a name: one line, at most 60 characters".to_owned(),
        Kind::Line => "a text on one line".to_owned(),
        Kind::Count(from) => format!("a whole number from {from}"),
        Kind::Boolean => "true or false".to_owned(),
        Kind::Date => "a date without quotes, 2026-03-14".to_owned(),
        Kind::Word(words) => format!("one of {}", quoted(words)),
        Kind::Number(range) => format!("a number{unit}{}", limits(*range)),
        Kind::Limits => format!("two numbers{unit}, the lower first"),
        Kind::Length(range) => format!("a length{unit}{}", limits(*range)),
        Kind::Filling => "a filling factor: 2, -1, 2.5 or \"7/3\"".to_owned(),
        Kind::WordOrFillings(words) => format!("one of {}, or a list of fillings in rising order", quoted(words)),
        Kind::Shares => "a number from 0 to 1, or a list of them".to_owned(),
        Kind::Mixing => "\"none\", \"full\" or { length_um = 150 }".to_owned(),
        Kind::NamePair => "two names in a list, [\"1\", \"4\"]".to_owned(),
        Kind::NameList => "at least two names in a list".to_owned(),
        Kind::Corner => format!("a corner [x, y]{unit}"),
        Kind::Outline => format!("at least three corners [x, y]{unit}"),
        Kind::Outlines => format!("a list of outlines{unit}"),
        Kind::Groups => "a list of lists of fillings".to_owned(),
        Kind::Names => "a list of names".to_owned(),
        Kind::Texts => "a list of texts".to_owned(),
        Kind::Open(inner) => format!("a table of names, each with {}{unit}", takes(inner, None)),
        Kind::One(table) => format!("a table [{}]", table.name),
        Kind::Many(table) => format!("tables [[{}]]", table.name),
    }
}

fn quoted(words: &[&str]) -> String {
    words.iter().map(|word| format!("\"{word}\"")).collect::<Vec<_>>().join(", ")
}

fn limits(range: Range) -> &'static str {
    match range {
        Range::Any => "",
        Range::Positive | Range::Magnitude => ", above zero",
        Range::NotNegative => ", zero or above",
        Range::NotZero => ", not zero",
    }
}

/// Whether a key is needed, what holds without it, and what the program does not do with it yet.
pub fn remark(key: &Key) -> Option<String> {
    let presence = match (key.required, key.default) {
        (true, _) if key.alone => Some("Needed, except on a bench".to_owned()),
        (true, _) => Some("Needed".to_owned()),
        (false, "") => None,
        (false, default) => Some(format!("Without it: {default}")),
    };
    let status = match key.status {
        Status::Applied => None,
        Status::Stated => Some("Checked, and not applied yet".to_owned()),
        Status::NotYet(possible) => Some(format!("Not computed yet: {possible}")),
    };
    let parts: Vec<String> = presence.into_iter().chain(status).collect();
    (!parts.is_empty()).then(|| parts.join(". "))
}

/// The sentence with a capital letter.
pub fn capital(text: &str) -> String {
    let mut letters = text.chars();
    letters.next().map_or_else(String::new, |first| first.to_uppercase().collect::<String>() + letters.as_str())
}
