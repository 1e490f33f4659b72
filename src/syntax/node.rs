//! The tree of a file: every key and value with its place.

use std::sync::Arc;

use toml::de::DeArray;
use toml::de::DeInteger;
use toml::de::DeTable;
use toml::de::DeValue;

use crate::diagnostic::Place;
use crate::diagnostic::Source;

/// A value and where it stands.
#[derive(Clone, Debug, PartialEq)]
pub struct Node {
    /// The value.
    pub value: Value,
    /// Where it stands; for a table with a header, the header.
    pub place: Place,
}

/// What a user can write after `=`.
#[derive(Clone, Debug, PartialEq)]
pub enum Value {
    /// A text in quotes.
    Text(String),
    /// A whole number, as decimal text.
    Whole(String),
    /// A number with a point or an exponent (or `nan`, `inf`), as its text.
    Decimal(String),
    /// `true` or `false`.
    Boolean(bool),
    /// A date or time without quotes, as written.
    Date(String),
    /// Values in square brackets, or tables with double brackets.
    List(Vec<Node>),
    /// A table.
    Table(Table),
}

/// Keys and values in the order of the file.
#[derive(Clone, Debug, PartialEq)]
pub struct Table {
    /// The header, or the braces.
    pub place: Place,
    /// The entries.
    pub entries: Vec<Entry>,
    /// Keys that the user meant to give but that were refused; they do not count as missing.
    pub(super) refused: Vec<String>,
}

/// A key with its value.
#[derive(Clone, Debug, PartialEq)]
pub struct Entry {
    /// The key.
    pub key: String,
    /// Where the key stands.
    pub key_place: Place,
    /// The value.
    pub node: Node,
}

/// The whole file as a tree.
pub(super) fn root(table: &DeTable<'_>, source: &Arc<Source>) -> Table {
    let first_line = source.text.find(['\r', '\n']).unwrap_or(source.text.len());
    to_table(table, place(source, 0..first_line))
}

fn to_table(table: &DeTable<'_>, at: Place) -> Table {
    let mut entries: Vec<Entry> = table.iter().map(|(key, value)| entry(key, value, &at.source)).collect();
    entries.sort_by_key(|entry| entry.key_place.start);
    Table { place: at, entries, refused: Vec::new() }
}

fn entry(
    key: &toml::Spanned<toml::de::DeString<'_>>,
    value: &toml::Spanned<DeValue<'_>>,
    source: &Arc<Source>,
) -> Entry {
    Entry { key: key.get_ref().to_string(), key_place: place(source, key.span()), node: node(value, source) }
}

fn node(value: &toml::Spanned<DeValue<'_>>, source: &Arc<Source>) -> Node {
    let at = place(source, value.span());
    let value = match value.get_ref() {
        DeValue::String(text) => Value::Text(text.to_string()),
        DeValue::Integer(whole) => Value::Whole(decimal_text(whole)),
        DeValue::Float(float) => Value::Decimal(float.as_str().to_owned()),
        DeValue::Boolean(truth) => Value::Boolean(*truth),
        DeValue::Datetime(date) => Value::Date(date.to_string()),
        DeValue::Array(list) => Value::List(nodes(list, source)),
        DeValue::Table(table) => Value::Table(to_table(table, at.clone())),
    };
    Node { value, place: at }
}

fn nodes(list: &DeArray<'_>, source: &Arc<Source>) -> Vec<Node> {
    list.iter().map(|value| node(value, source)).collect()
}

/// `0x1F` and its kin become decimal; what does not fit keeps its text and is refused as a number later.
fn decimal_text(whole: &DeInteger<'_>) -> String {
    match whole.radix() {
        10 => whole.as_str().to_owned(),
        radix => i64::from_str_radix(whole.as_str(), radix).map_or_else(|_| whole.to_string(), |n| n.to_string()),
    }
}

fn place(source: &Arc<Source>, span: std::ops::Range<usize>) -> Place {
    Place { source: Arc::clone(source), start: span.start, end: span.end }
}
