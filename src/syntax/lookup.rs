//! What an unknown key was meant to be.

use crate::diagnostic::Diagnostic;
use crate::number::Rational;

use crate::syntax::Entry;
use crate::syntax::FileSpec;
use crate::syntax::decimal::exact_decimal;
use crate::syntax::did_you_mean;
use crate::syntax::keys::Key;
use crate::syntax::keys::Kind;
use crate::syntax::keys::TableSpec;
use crate::syntax::keys::split_unit;
use crate::syntax::quoted;

/// A table with the words by which a message calls it.
#[derive(Clone, Copy)]
pub(super) struct Here<'a> {
    /// Its keys.
    pub table: &'static TableSpec,
    /// `[mesa]`, `[[contact]]` or `the top level`.
    pub header: &'a str,
}

/// The fault for an unknown key, and the key of this table that was meant, if one was.
pub(super) fn unknown(entry: &Entry, here: Here<'_>, file: &'static FileSpec) -> (Diagnostic, Option<&'static str>) {
    let found = wrong_unit(entry, here)
        .or_else(|| below_a_table(entry, here, file).map(|fault| (fault, None)))
        .or_else(|| of_another_table(entry, here, file).map(|fault| (fault, None)));
    let (fault, meant) = found.unwrap_or_else(|| misspelt(entry, here));
    (fault.at(&entry.key_place), meant)
}

/// `width_mm` where `width_um` is meant, or no unit at all.
fn wrong_unit(entry: &Entry, here: Here<'_>) -> Option<(Diagnostic, Option<&'static str>)> {
    let (stem, written) = split_unit(&entry.key).map_or((entry.key.as_str(), None), |(stem, unit)| (stem, Some(unit)));
    let same_stem = |key: &&Key| split_unit(key.name).is_some_and(|(other, _)| other == stem);
    let key = here.table.keys.iter().find(same_stem)?;
    let unit = key.unit()?;
    let word = quoted(&entry.key);
    let message = match written {
        Some(written) => format!("{word} has the unit {}: {} takes {}", written.words, here.header, unit.words),
        None => format!("{word} has no unit: {} takes it in {}", here.header, unit.words),
    };
    let power = written.filter(|written| written.quantity == unit.quantity).map(|written| written.power - unit.power);
    let value = power.and_then(|power| converted(entry, power));
    let hint = value.map_or_else(|| format!("write `{}`", key.name), |value| format!("write `{} = {value}`", key.name));
    Some((Diagnostic::fault("wrong-unit", message).hint(hint), Some(key.name)))
}

fn converted(entry: &Entry, power: i32) -> Option<String> {
    let text = entry.node.number_text()?;
    let factor = exact_decimal(&format!("1e{power}"))?;
    let value: Rational = exact_decimal(text)? * factor;
    let value = value.to_f64();
    let plain = value == 0.0 || (1e-4..1e6).contains(&value.abs());
    Some(if plain { format!("{value}") } else { format!("{value:e}") })
}

/// `format` below `[device]`: TOML takes it for a key of that table.
fn below_a_table(entry: &Entry, here: Here<'_>, file: &'static FileSpec) -> Option<Diagnostic> {
    let key = file.root.key(&entry.key).filter(|key| !here.table.name.is_empty() && is_plain(key))?;
    Some(below(key.name, here.header))
}

/// The fault for a key of the top level below a header.
pub(super) fn below(key: &str, header: &str) -> Diagnostic {
    let message = format!("`{key}` stands below {header}, and so belongs to it");
    Diagnostic::fault("below-a-table", message).hint("move it above the first [table]")
}

/// Whether a key of the top level is a plain value.
pub(super) fn is_plain(key: &Key) -> bool {
    !matches!(key.kind, Kind::One(_) | Kind::Many(_) | Kind::Open(_))
}

fn of_another_table(entry: &Entry, here: Here<'_>, file: &'static FileSpec) -> Option<Diagnostic> {
    let mut headers = Vec::new();
    headers_with(&entry.key, file.root, &mut headers);
    let own = file.root.key(&entry.key).filter(|key| !is_plain(key) && !here.table.name.is_empty());
    let hint = match own {
        Some(key) => format!("it is a table of its own: write {}", header(key, "")),
        None if headers.is_empty() => return None,
        None => format!("it belongs in {}", headers.join(" or ")),
    };
    let message = format!("{} is no key of {}", quoted(&entry.key), here.header);
    Some(Diagnostic::fault("other-table", message).hint(hint))
}

/// Headers of all tables that have a key of this name.
fn headers_with(name: &str, table: &'static TableSpec, headers: &mut Vec<String>) {
    for key in table.keys {
        let Some(inner) = key.table() else { continue };
        if inner.key(name).is_some() {
            headers.push(header(key, table.name));
        }
        headers_with(name, inner, headers);
    }
}

/// `[mesa]` or `[[contact]]`.
pub(super) fn header(key: &Key, around: &str) -> String {
    let dot = if around.is_empty() { "" } else { "." };
    match key.kind {
        Kind::Many(_) => format!("[[{around}{dot}{}]]", key.name),
        _ => format!("[{around}{dot}{}]", key.name),
    }
}

fn misspelt(entry: &Entry, here: Here<'_>) -> (Diagnostic, Option<&'static str>) {
    let meant = did_you_mean(&entry.key, here.table.names());
    let hint = match meant {
        Some(meant) => format!("did you mean `{meant}`?"),
        None => format!("{} takes: {}", here.header, here.table.names().collect::<Vec<_>>().join(", ")),
    };
    let message = format!("{} is no key of {}", quoted(&entry.key), here.header);
    (Diagnostic::fault("unknown-key", message).hint(hint), meant)
}
