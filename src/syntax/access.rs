//! Typed values out of a checked table. A key that was refused is simply absent here: its fault has been said.

use crate::diagnostic::Place;

use crate::syntax::Entry;
use crate::syntax::Filling;
use crate::syntax::Length;
use crate::syntax::Node;
use crate::syntax::Table;
use crate::syntax::Value;

impl Table {
    /// The value of a key.
    pub fn node(&self, key: &str) -> Option<&Node> {
        self.entries.iter().find(|entry| entry.key == key).map(|entry| &entry.node)
    }

    /// Whether the user neither gave the key nor meant to.
    pub fn lacks(&self, key: &str) -> bool {
        self.node(key).is_none() && !self.refused.iter().any(|refused| refused == key)
    }

    /// Where the value of a key stands; the table itself where the key is absent.
    pub fn place_of(&self, key: &str) -> &Place {
        self.node(key).map_or(&self.place, |node| &node.place)
    }

    /// Where a key itself stands; the table where it is absent.
    pub fn key_place(&self, key: &str) -> &Place {
        self.entries.iter().find(|entry| entry.key == key).map_or(&self.place, |entry| &entry.key_place)
    }

    /// A text.
    pub fn text(&self, key: &str) -> Option<String> {
        self.node(key)?.text().map(str::to_owned)
    }

    /// A text, or nothing at all.
    pub fn text_or_empty(&self, key: &str) -> String {
        self.text(key).unwrap_or_default()
    }

    /// A number.
    pub fn number(&self, key: &str) -> Option<f64> {
        self.node(key)?.number()
    }

    /// A whole number.
    pub fn count(&self, key: &str) -> Option<i64> {
        self.node(key)?.count()
    }

    /// `true` or `false`.
    pub fn boolean(&self, key: &str) -> Option<bool> {
        match self.node(key)?.value {
            Value::Boolean(truth) => Some(truth),
            _ => None,
        }
    }

    /// A date as written.
    pub fn date(&self, key: &str) -> Option<String> {
        match &self.node(key)?.value {
            Value::Date(date) => Some(date.clone()),
            _ => None,
        }
    }

    /// A length in whole nanometres.
    pub fn length(&self, key: &str) -> Option<Length> {
        self.node(key)?.length(key).map(|length| length.nanometres)
    }

    /// The lower and the higher of two numbers.
    pub fn limits(&self, key: &str) -> Option<(f64, f64)> {
        match self.node(key)?.list()? {
            [low, high] => Some((low.number()?, high.number()?)),
            _ => None,
        }
    }

    /// One corner, in whole nanometres.
    pub fn corner(&self, key: &str) -> Option<(Length, Length)> {
        corner_of(self.node(key)?, key)
    }

    /// The corners of an outline, in whole nanometres.
    pub fn outline(&self, key: &str) -> Option<Vec<(Length, Length)>> {
        outline_of(self.node(key)?, key)
    }

    /// The corners of each outline of a list, with the place of each.
    pub fn outlines(&self, key: &str) -> Vec<(Vec<(Length, Length)>, &Place)> {
        self.list(key).iter().filter_map(|node| Some((outline_of(node, key)?, &node.place))).collect()
    }

    /// A filling factor.
    pub fn filling(&self, key: &str) -> Option<Filling> {
        self.node(key)?.filling()
    }

    /// The values of a list.
    pub fn list(&self, key: &str) -> &[Node] {
        self.node(key).and_then(Node::list).unwrap_or_default()
    }

    /// An inner table.
    pub fn table(&self, key: &str) -> Option<&Table> {
        match &self.node(key)?.value {
            Value::Table(table) => Some(table),
            _ => None,
        }
    }

    /// The entries of an inner table with keys of the user's choice.
    pub fn open_entries(&self, key: &str) -> &[Entry] {
        self.table(key).map_or(&[], |table| &table.entries)
    }

    /// The tables of a key in double brackets.
    pub fn tables(&self, key: &str) -> Vec<&Table> {
        self.list(key)
            .iter()
            .filter_map(|node| if let Value::Table(table) = &node.value { Some(table) } else { None })
            .collect()
    }
}

fn outline_of(node: &Node, key: &str) -> Option<Vec<(Length, Length)>> {
    node.list()?.iter().map(|corner| corner_of(corner, key)).collect()
}

fn corner_of(node: &Node, key: &str) -> Option<(Length, Length)> {
    match node.list()? {
        [x, y] => Some((x.length(key)?.nanometres, y.length(key)?.nanometres)),
        _ => None,
    }
}
