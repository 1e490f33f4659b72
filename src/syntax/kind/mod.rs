//! Whether a value is what its key asks for: one file per family of kinds.

mod list;
mod number;
mod word;

pub use word::is_noncharacter;

use crate::diagnostic::Diagnostic;
use crate::number::Rational;

use crate::syntax::Node;
use crate::syntax::Value;
use crate::syntax::keys::Kind;
use crate::syntax::quoted;

/// All findings on a value; without a fault it is of the kind. Tables with keys of their own are judged by `check`.
pub(super) fn judge(kind: &Kind, key: &str, node: &Node) -> Vec<Diagnostic> {
    match kind {
        Kind::Text => word::text(key, node),
        Kind::Name => word::name(key, node),
        Kind::Line => word::line(key, node),
        Kind::Boolean => word::boolean(key, node),
        Kind::Date => word::date(key, node),
        Kind::Word(words) => word::one_of(words, key, node),
        Kind::Mixing => word::mixing(key, node),
        Kind::Count(from) => number::count(*from, key, node),
        Kind::Number(range) => number::number(*range, key, node),
        Kind::Length(range) => number::length(*range, key, node),
        Kind::Filling => number::filling(key, node),
        Kind::Shares => list::shares(key, node),
        Kind::WordOrFillings(words) => list::ladder(words, key, node),
        Kind::Limits => list::limits(key, node),
        Kind::NamePair => list::name_pair(key, node),
        Kind::NameList => list::name_list(key, node),
        Kind::Corner => list::corner(key, node),
        Kind::Outline => list::outline(key, node),
        Kind::Outlines => list::each(key, node, list::outline),
        Kind::Groups => list::groups(key, node),
        Kind::Names => list::each(key, node, word::name),
        Kind::Texts => list::each(key, node, word::text),
        Kind::Open(_) | Kind::One(_) | Kind::Many(_) => Vec::new(),
    }
}

fn wrong_kind(key: &str, wanted: &str, node: &Node) -> Diagnostic {
    let message = format!("{} takes {wanted}, not {}", quoted(key), described(node));
    Diagnostic::fault("wrong-kind", message).at(&node.place)
}

fn described(node: &Node) -> String {
    match &node.value {
        Value::Text(text) => format!("the text {}", quoted(text)),
        Value::Whole(number) | Value::Decimal(number) => format!("the number {}", quoted(number)),
        Value::Boolean(truth) => format!("{truth}"),
        Value::Date(date) => format!("the date {date}"),
        Value::List(list) if matches!(list.first().map(|node| &node.value), Some(Value::Table(_))) => "tables".into(),
        Value::List(list) if list.len() == 1 => "a list of one value".into(),
        Value::List(list) => format!("a list of {} values", list.len()),
        Value::Table(_) => "a table".into(),
    }
}

/// The number inside a text, where somebody put quotes round it.
fn number_in_quotes(node: &Node) -> Option<Rational> {
    matches!(node.value, Value::Text(_)).then(|| node.exact()).flatten()
}
