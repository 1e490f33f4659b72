//! Loops of measured voltages as a table.

use crate::compare::Loop;
use crate::device::ContactIdx;
use crate::quantity::Polarity;
use crate::quantity::Uncertain;
use crate::report::Printed;
use crate::report::SmallCell;
use crate::report::SmallTable;
use crate::report::Sources;
use crate::report::names::contact_name;
use crate::report::small_table::TableTexts;

/// Most loops that are printed for a point: those that are worst closed.
const MOST: usize = 8;

/// The loops that the readings close, one table per point, worst first.
pub fn tables(sources: &Sources, texts: &TableTexts) -> Vec<SmallTable> {
    let mut loops = crate::compare::loops(sources.comparison.map_or(&[], |comparison| &comparison.rows));
    loops.sort_by(|a, b| badness(b).total_cmp(&badness(a)));
    let of_point = |at: usize| loops.iter().filter(|one| one.point == at).collect::<Vec<_>>();
    let tables = (0..sources.points.len()).filter_map(|at| table(sources, (at, &of_point(at)), texts));
    let mut tables: Vec<SmallTable> = tables.collect();
    // The general note stands once, under the last.
    let before = tables.len().saturating_sub(1);
    tables.iter_mut().take(before).for_each(|table| {
        table.notes.pop();
    });
    tables
}

fn table(sources: &Sources, (point, loops): (usize, &[&Loop]), texts: &TableTexts) -> Option<SmallTable> {
    let left = loops.len().saturating_sub(MOST);
    let rows = loops.iter().take(MOST).map(|one| row(sources, one, texts)).collect();
    let mut table = texts.closure.table(rows);
    if left > 0 {
        table.notes.insert(0, format!("{left} more loops are closed at least as well."));
    }
    if let Some(point) = sources.points.get(point).filter(|_| sources.points.len() > 1) {
        table.heading = format!("{}: {}", table.heading, point.point.name);
    }
    (!loops.is_empty()).then_some(table)
}

/// How far a loop is from closing, in its u; without u it comes last.
fn badness(one: &Loop) -> f64 {
    let away = one.expected_ohm.map(|expected| (one.sum_ohm.value - expected).abs());
    match (away, one.sum_ohm.u) {
        (Some(away), Some(u)) if u > 0.0 => away / u,
        _ => -1.0,
    }
}

fn row(sources: &Sources, one: &Loop, texts: &TableTexts) -> Vec<SmallCell> {
    let name = |contact: &ContactIdx| contact_name(sources.device, *contact).to_string();
    let ring: Vec<String> = one.contacts.iter().chain(one.contacts.first()).map(name).collect();
    vec![
        SmallCell::text(format!("{}→{}", name(&one.current[0]), name(&one.current[1]))),
        SmallCell::text(side(one.polarity, texts)),
        SmallCell::text(ring.join("→")),
        SmallCell::Number(Printed::uncertain(one.sum_ohm, "Ω")),
        SmallCell::number(one.expected_ohm.map(|ohm| Printed::number(ohm, 1, "Ω"))),
    ]
}

/// The word for a polarity in a narrow column.
pub fn side(polarity: Polarity, texts: &TableTexts) -> String {
    match polarity {
        Polarity::Toward => texts.toward.clone(),
        Polarity::Away => texts.away.clone(),
    }
}

impl Printed {
    /// A number with its standard uncertainty in brackets.
    pub fn uncertain(quantity: Uncertain, unit: &'static str) -> Self {
        let text = crate::quantity::printed::uncertain(quantity);
        Self { text, value: quantity.value, u: quantity.u, unit }
    }
}
