//! The columns that a table of readings can have, and what a row says in each.

use crate::report::Cell;
use crate::report::PointReport;
use crate::report::Printed;
use crate::report::TableRow;
use crate::report::Words;

/// Which side of the table.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Half {
    /// Field toward.
    Toward,
    /// Field away.
    Away,
}

/// A column.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Column {
    /// Name of the reading.
    Name,
    /// Closed form.
    Formula,
    /// Exact value in h/e².
    Exact(Half),
    /// The device alone in kΩ.
    Device(Half),
    /// Expected value in kΩ.
    Expected(Half),
    /// What the meter shows in kΩ; the same number under another head.
    Shown(Half),
    /// Its part in quadrature in kΩ.
    Quadrature(Half),
    /// Measured value in kΩ.
    Measured(Half),
    /// Difference in u.
    InU(Half),
    /// Difference in 10⁻⁶.
    In1e6(Half),
    /// Judgement.
    Judged(Half),
    /// The strip.
    Strip(Half),
}

/// How the entries of a column stand under one another.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Align {
    /// By their left ends.
    Left,
    /// By their decimal points.
    Point,
    /// By their middles.
    Middle,
}

/// An entry.
#[derive(Clone, Debug, PartialEq)]
pub struct Entry {
    /// Marked text.
    pub text: String,
    /// Printed heavy.
    pub bold: bool,
    /// Printed grey: there is no number.
    pub grey: bool,
}

impl Column {
    /// The half that the column belongs to.
    pub fn half(self) -> Option<Half> {
        match self {
            Self::Name | Self::Formula => None,
            Self::Exact(half) | Self::Expected(half) | Self::Measured(half) | Self::Strip(half) => Some(half),
            Self::Device(half) | Self::Shown(half) | Self::Quadrature(half) => Some(half),
            Self::InU(half) | Self::In1e6(half) | Self::Judged(half) => Some(half),
        }
    }

    /// The head.
    pub fn head(self, words: &Words) -> String {
        match self {
            Self::Name => words.reading.clone(),
            Self::Formula => words.closed_form.clone(),
            Self::Exact(_) => words.exact.clone(),
            Self::Expected(_) => words.expected.clone(),
            Self::Device(_) => words.device_value.clone(),
            Self::Shown(_) => words.shown.clone(),
            Self::Quadrature(_) => words.quadrature.clone(),
            Self::Measured(_) => words.measured.clone(),
            Self::InU(_) => words.in_u.clone(),
            Self::In1e6(_) => words.in_1e6.clone(),
            Self::Judged(_) => words.judgement_head.clone(),
            Self::Strip(_) => String::new(),
        }
    }

    /// How the entries stand.
    pub fn align(self) -> Align {
        match self {
            Self::Name | Self::Formula | Self::Judged(_) => Align::Left,
            Self::Strip(_) => Align::Middle,
            _ => Align::Point,
        }
    }

    /// What a row says here.
    pub fn entry(self, row: &TableRow) -> Option<Entry> {
        let plain = |text: String| Entry { text, bold: false, grey: false };
        let number = |printed: &Option<Printed>| printed.as_ref().map(|printed| plain(printed.text.clone()));
        match self {
            Self::Name => Some(Entry { bold: true, ..plain(row.name.clone()) }),
            Self::Formula => row.formula.clone().map(plain),
            Self::Strip(_) => None,
            Self::Exact(half) => number(&cell(row, half).exact),
            Self::Expected(half) | Self::Shown(half) => expected(cell(row, half)),
            Self::Device(half) => number(&cell(row, half).device),
            Self::Quadrature(half) => number(&cell(row, half).quadrature),
            Self::Measured(half) => number(&cell(row, half).measured).map(|entry| odd(entry, cell(row, half))),
            Self::InU(half) => number(&cell(row, half).in_u).map(|entry| odd(entry, cell(row, half))),
            Self::In1e6(half) => number(&cell(row, half).in_1e6),
            Self::Judged(half) => cell(row, half).judgement.clone().map(|text| odd(plain(text), cell(row, half))),
        }
    }
}

/// The cell of one half.
pub fn cell(row: &TableRow, half: Half) -> &Cell {
    match half {
        Half::Toward => &row.toward,
        Half::Away => &row.away,
    }
}

/// The sets of columns of a whole table, the richest first; what a set lacks goes into a second line of the row.
pub fn full_sets(point: &PointReport) -> Vec<Vec<Column>> {
    let judged = |half| vec![Column::Measured(half), Column::InU(half), Column::In1e6(half), Column::Judged(half)];
    let measured = |half| if point.measured { judged(half) } else { Vec::new() };
    let cells = point.rows.iter().flat_map(|row| [&row.toward, &row.away]);
    let quadrature = cells.into_iter().any(|cell| cell.quadrature.is_some());
    let shown = |half| {
        let part = quadrature.then_some(Column::Quadrature(half));
        values(point, half).into_iter().chain(part).collect::<Vec<_>>()
    };
    let rich = |half| [vec![Column::Exact(half)], shown(half), measured(half)].concat();
    let exact = |half| [vec![Column::Exact(half)], values(point, half), measured(half)].concat();
    let plain = |half| [values(point, half), measured(half)].concat();
    let forms = point.rows.iter().any(|row| row.formula.is_some());
    let with_form = forms.then(|| both(&[Column::Name, Column::Formula], rich));
    let name = [Column::Name];
    with_form.into_iter().chain([both(&name, rich), both(&name, exact), both(&name, plain)]).collect()
}

/// The device's own value beside what the meter shows, where there is a circuit.
fn values(point: &PointReport, half: Half) -> Vec<Column> {
    if point.circuit { vec![Column::Device(half), Column::Shown(half)] } else { vec![Column::Expected(half)] }
}

/// The sets of columns of the answer table, the richest first.
pub fn answer_sets(point: &PointReport) -> Vec<Vec<Column>> {
    let strip = |half| if point.measured { vec![Column::Measured(half), Column::Strip(half)] } else { Vec::new() };
    let exact = |half| if point.measured { Vec::new() } else { vec![Column::Exact(half)] };
    let columns = |half| [exact(half), values(point, half), strip(half)].concat();
    let lean = |half| [values(point, half), strip(half)].concat();
    let forms = point.rows.iter().any(|row| row.formula.is_some());
    let with_form = forms.then(|| both(&[Column::Name, Column::Formula], columns));
    with_form.into_iter().chain([both(&[Column::Name], columns), both(&[Column::Name], lean)]).collect()
}

/// How many columns either half of the twin's table has.
pub fn twin_columns(point: &PointReport) -> usize {
    let values = if point.circuit { 3 } else { 2 };
    values + if point.measured { 4 } else { 0 }
}

fn both(first: &[Column], half: impl Fn(Half) -> Vec<Column>) -> Vec<Column> {
    [first.to_vec(), half(Half::Toward), half(Half::Away)].concat()
}

fn expected(cell: &Cell) -> Option<Entry> {
    let number = cell.expected.as_ref().map(|printed| Entry { text: printed.text.clone(), bold: false, grey: false });
    number.or_else(|| cell.state.clone().map(|text| Entry { text, bold: false, grey: true }))
}

fn odd(entry: Entry, cell: &Cell) -> Entry {
    Entry { bold: cell.odd, ..entry }
}
