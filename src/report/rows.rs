//! One row of a table: a reading at both polarities, expected and measured.

use crate::compare::Judgement;
use crate::compare::Row;
use crate::device::Device;
use crate::report::Cell;
use crate::report::Printed;
use crate::report::Strip;
use crate::report::TableRow;
use crate::report::Words;
use crate::report::names;
use crate::resistance::Expected;
use crate::resistance::Reading;
use crate::resistance::ReadingState;

/// The strip beside a difference reaches from −3 u to +3 u.
const STRIP_REACH_U: f64 = 3.0;

/// Value in h/e² that only rounding makes.
const NOTHING: f64 = 1e-12;

/// One reading with what is known of it at one polarity.
#[derive(Clone, Copy, Debug, Default)]
pub struct Side<'a> {
    /// What is expected.
    pub expected: Option<&'a Expected>,
    /// What was measured, judged.
    pub row: Option<&'a Row>,
}

/// What holds for a whole table.
#[derive(Clone, Copy, Debug)]
pub struct Shape {
    /// Decimals of expected values in kΩ.
    pub decimals: usize,
    /// How many meters were used.
    pub meters: usize,
}

/// A reading at both polarities.
#[derive(Clone, Debug)]
pub struct Pair<'a> {
    /// The reading.
    pub reading: Reading,
    /// The name that the device file gives it.
    pub name: Option<String>,
    /// Field toward.
    pub toward: Side<'a>,
    /// Field away.
    pub away: Side<'a>,
}

impl Pair<'_> {
    /// Rank in the table: judged readings by falling |difference| in u, then other measured ones, then the rest.
    pub fn rank(&self) -> (u8, f64) {
        let rows = [self.toward.row, self.away.row].into_iter().flatten();
        let worst = rows.clone().filter(|row| is_judged(row)).filter_map(|row| row.difference_in_u).map(f64::abs);
        match (worst.reduce(f64::max), rows.count()) {
            (Some(worst), _) => (0, -worst),
            (None, 1..) => (1, 0.0),
            (None, 0) => (2, 0.0),
        }
    }

    /// The row as it is printed.
    pub fn printed(&self, device: &Device, words: &Words, shape: Shape) -> TableRow {
        TableRow {
            place: 0,
            name: names::reading_name(device, &self.reading),
            label: self.label(shape),
            formula: self.formula(),
            toward: cell(self.toward, words, shape.decimals),
            away: cell(self.away, words, shape.decimals),
        }
    }

    /// The given name, and the meters where the table has more than one: `toward | away` where they differ.
    fn label(&self, shape: Shape) -> Option<String> {
        let meter =
            |side: Side| side.row.and_then(|row| row.measured.meter.as_ref()).map(|name| format!("meter {name}"));
        let mut meters: Vec<String> = [self.toward, self.away].into_iter().filter_map(meter).collect();
        meters.dedup();
        meters.retain(|_| shape.meters > 1);
        let meters = (!meters.is_empty()).then(|| meters.join(" | "));
        let parts: Vec<String> = self.name.clone().into_iter().chain(meters).collect();
        (!parts.is_empty()).then(|| parts.join(", "))
    }

    /// One form where both polarities share it, else `toward | away`.
    fn formula(&self) -> Option<String> {
        let form = |side: Side| side.expected.and_then(|expected| expected.formula.as_deref()).map(names::formula);
        match (form(self.toward), form(self.away)) {
            (Some(toward), Some(away)) if toward == away => Some(toward),
            (None, None) => None,
            (toward, away) => {
                let shown = |form: Option<String>| form.unwrap_or_else(|| "–".to_string());
                Some(format!("{} | {}", shown(toward), shown(away)))
            }
        }
    }
}

/// Whether a row was judged.
pub fn is_judged(row: &Row) -> bool {
    matches!(row.judgement, Judgement::Agrees | Judgement::Wide | Judgement::Disagrees)
}

fn cell(side: Side, words: &Words, decimals: usize) -> Cell {
    let expected = side.row.map(|row| &row.expected).or(side.expected);
    let shown = expected.and_then(|expected| expected.shown_ohm.or(expected.ohm));
    Cell {
        exact: expected.and_then(Expected::number).as_ref().map(Printed::h_per_e2),
        device: expected.and_then(|expected| expected.ohm).map(|ohm| Printed::kilo_ohm(ohm, decimals)),
        quadrature: expected
            .and_then(|expected| expected.shown_quadrature_ohm)
            .and_then(|ohm| quadrature(ohm, decimals)),
        expected: shown.map(|ohm| Printed::kilo_ohm(ohm, decimals)),
        state: expected.and_then(|expected| state(expected.state, words)),
        ..side.row.map_or_else(Cell::default, |row| measured_cell(row, words))
    }
}

/// None where it prints as zero.
fn quadrature(ohm: f64, decimals: usize) -> Option<Printed> {
    let printed = Printed::kilo_ohm(ohm, decimals);
    printed.text.contains(|c: char| c.is_ascii_digit() && c != '0').then_some(printed)
}

fn measured_cell(row: &Row, words: &Words) -> Cell {
    Cell {
        measured: Some(Printed::measured_kilo_ohm(row.measured.value_ohm)),
        in_u: row.difference_in_u.map(Printed::in_u),
        // Of an expected zero only lines and meters are left: nothing to be relative to.
        in_1e6: row.difference_1e6.filter(|_| !is_zero(&row.expected)).map(Printed::in_1e6),
        judgement: Some(words.judgement(row.judgement).to_string()),
        odd: row.judgement == Judgement::Disagrees,
        strip: row.difference_in_u.map(strip),
        ..Cell::default()
    }
}

fn is_zero(expected: &Expected) -> bool {
    expected.h_per_e2.is_some_and(|value| value.abs() < NOTHING)
}

fn strip(difference_in_u: f64) -> Strip {
    let beyond = difference_in_u.abs() > STRIP_REACH_U;
    Strip {
        at: (difference_in_u / STRIP_REACH_U).clamp(-1.0, 1.0),
        beyond: beyond.then(|| Printed::in_whole_u(difference_in_u)),
    }
}

fn state(state: ReadingState, words: &Words) -> Option<String> {
    match state {
        ReadingState::Fine => None,
        ReadingState::NoPath => Some(words.no_path.clone()),
        ReadingState::Floating => Some(words.floating.clone()),
    }
}
