//! Small tables: a heading, heads of columns, rows of texts and numbers.

use serde::Deserialize;
use serde::Serialize;

use crate::diagnostic::Diagnostic;
use crate::report::Printed;
use crate::report::marks::marked;

/// A small table as it is printed; numbers with their unrounded values.
#[derive(Clone, Debug, Default, PartialEq, Serialize)]
pub struct SmallTable {
    /// Heading; may be empty.
    pub heading: String,
    /// Heads of the columns.
    pub head: Vec<String>,
    /// As many cells as there are columns.
    pub rows: Vec<Vec<SmallCell>>,
    /// What holds for the whole table.
    pub notes: Vec<String>,
}

/// One cell.
#[derive(Clone, Debug, PartialEq, Serialize)]
#[serde(untagged)]
pub enum SmallCell {
    /// Nothing.
    Empty,
    /// Marked text.
    Text(String),
    /// A number.
    Number(Printed),
}

impl SmallCell {
    /// A text; an empty one is no text.
    pub fn text(text: impl Into<String>) -> Self {
        let text = text.into();
        if text.is_empty() { Self::Empty } else { Self::Text(text) }
    }

    /// A number, if there is one.
    pub fn number(printed: Option<Printed>) -> Self {
        printed.map_or(Self::Empty, Self::Number)
    }

    /// What is printed.
    pub fn printed(&self) -> &str {
        match self {
            Self::Empty => "",
            Self::Text(text) => text,
            Self::Number(number) => &number.text,
        }
    }
}

impl SmallTable {
    /// The table without the columns that are empty in every row.
    pub fn without_empty_columns(mut self) -> Self {
        let kept: Vec<bool> =
            (0..self.head.len()).map(|at| self.rows.iter().any(|row| row[at] != SmallCell::Empty)).collect();
        let keep = |at: usize| kept.get(at).copied().unwrap_or(true);
        self.head = self.head.into_iter().enumerate().filter(|(at, _)| keep(*at)).map(|(_, head)| head).collect();
        let row = |row: Vec<SmallCell>| row.into_iter().enumerate().filter(|(at, _)| keep(*at)).map(|(_, cell)| cell);
        self.rows = self.rows.into_iter().map(|cells| row(cells).collect()).collect();
        self
    }
}

/// Words of one small table.
#[derive(Clone, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct TableText {
    heading: String,
    head: Vec<String>,
    note: Option<String>,
}

impl TableText {
    /// The heading.
    pub fn heading(&self) -> &str {
        &self.heading
    }

    /// A table with these words.
    pub fn table(&self, rows: Vec<Vec<SmallCell>>) -> SmallTable {
        let notes = self.note.iter().cloned().collect();
        SmallTable { heading: self.heading.clone(), head: self.head.clone(), rows, notes }
    }
}

/// Words of all small tables, from the part `tables.toml`.
#[derive(Clone, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
#[allow(missing_docs, reason = "each field is named by what it heads")]
pub struct TableTexts {
    pub none: String,
    pub toward: String,
    pub away: String,
    pub no_reading: String,
    pub combined: String,
    pub reading: String,
    pub difference: String,
    pub in_quadrature: String,
    pub alone: TableText,
    pub mixing: TableText,
    pub closure: TableText,
    pub lines: TableText,
    pub source: TableText,
    pub meters: TableText,
    pub corrections: TableText,
    pub budget: TableText,
    pub parts: PartNames,
}

/// Names of the parts of a circuit.
#[derive(Clone, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
#[allow(missing_docs, reason = "each field is the part it names")]
pub struct PartNames {
    pub source: String,
    pub lines: String,
    pub capacitance: String,
    pub contacts: String,
    pub meter_input: String,
    pub gain: String,
    pub phase: String,
}

impl TableTexts {
    /// The built-in words for channels turned by `driver`: `field`, `magnetisation`. A fault means that the part is no valid TOML or lacks a word.
    pub fn built_in(driver: &str) -> Result<Self, Diagnostic> {
        toml::from_str(&marked(&include_str!("../../templates/tables.toml").replace("{driver}", driver)))
            .map_err(|error| Diagnostic::fault("template", format!("the part “tables.toml” cannot be read: {error}")))
    }
}
