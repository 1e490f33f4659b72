//! Uncertainty budgets of single expected values.

use crate::circuit::Budget;
use crate::circuit::BudgetTerm;
use crate::circuit::Cause;
use crate::compare::Judgement;
use crate::compare::Row;
use crate::quantity::Polarity;
use crate::quantity::printed;
use crate::report::Printed;
use crate::report::SmallCell;
use crate::report::SmallTable;
use crate::report::Sources;
use crate::report::names;
use crate::report::names::contact_name;
use crate::report::small_table::TableTexts;
use crate::report::table::reading_of;
use crate::resistance::Reading;

/// A term below this prints as nothing.
const LEAST_OHM: f64 = 0.000_5;

/// The budget of the reading that disagrees most, and that of the first two-terminal one, each where it has a term.
pub fn tables(sources: &Sources, texts: &TableTexts) -> Vec<SmallTable> {
    let mut tables: Vec<SmallTable> = Vec::new();
    let odd = worst(sources).and_then(|(row, budget)| measured(sources, row, budget, texts));
    let whole = two_terminal(sources, texts);
    for table in odd.into_iter().chain(whole) {
        if !tables.iter().any(|known| known.heading == table.heading) {
            tables.push(table);
        }
    }
    // The general note stands once, under the last.
    let before = tables.len().saturating_sub(1);
    tables.iter_mut().take(before).for_each(|table| {
        table.notes.pop();
    });
    tables
}

fn worst<'a>(sources: &Sources<'a>) -> Option<(&'a Row, &'a Budget)> {
    let size = |row: &Row| row.difference_in_u.unwrap_or(0.0).abs();
    let odd = rows(sources).filter(|(row, _)| row.judgement == Judgement::Disagrees);
    odd.max_by(|a, b| size(a.0).total_cmp(&size(b.0)))
}

fn rows<'a>(sources: &Sources<'a>) -> impl Iterator<Item = (&'a Row, &'a Budget)> + use<'a> {
    let rows = sources.comparison.map_or(&[][..], |comparison| &comparison.rows);
    rows.iter().zip(sources.rows).filter_map(|(row, source)| Some((row, source.budget.as_ref()?)))
}

/// Of a measured reading if one was measured, else of the first one listed.
fn two_terminal(sources: &Sources, texts: &TableTexts) -> Option<SmallTable> {
    let whole = |reading: &Reading| reading.voltage.iter().all(|contact| reading.current.contains(contact));
    if let Some((row, budget)) = rows(sources).find(|(row, _)| whole(&reading_of(row))) {
        return measured(sources, row, budget, texts);
    }
    let point = sources.points.first()?;
    let (expected, budget) = point.beside[0].two_terminal.as_ref()?;
    let heading = heading(sources, &expected.reading, (0, Polarity::Toward));
    table(sources, (heading, budget), Vec::new(), texts)
}

fn measured(sources: &Sources, row: &Row, budget: &Budget, texts: &TableTexts) -> Option<SmallTable> {
    let heading = heading(sources, &reading_of(row), (row.measured.point, row.measured.polarity));
    let own = row.measured.value_ohm.u.map(|u| sum_row(&texts.reading, u));
    let difference = row.u_difference_ohm.map(|u| sum_row(&texts.difference, u));
    table(sources, (heading, budget), own.into_iter().chain(difference).collect(), texts)
}

fn heading(sources: &Sources, reading: &Reading, (point, polarity): (usize, Polarity)) -> String {
    let side = names::side(sources.device, polarity);
    let point = sources.points.get(point).filter(|_| sources.points.len() > 1);
    let point = point.map(|point| format!(", {}", point.point.name)).unwrap_or_default();
    format!("{}, {side}{point}", names::reading_name(sources.device, reading))
}

fn table(
    sources: &Sources,
    (heading, budget): (String, &Budget),
    below: Vec<Vec<SmallCell>>,
    texts: &TableTexts,
) -> Option<SmallTable> {
    let (counting, small): (Vec<_>, Vec<_>) = budget.terms.iter().partition(|term| term.contribution_ohm >= LEAST_OHM);
    let mut rows: Vec<Vec<SmallCell>> = counting.into_iter().map(|term| term_row(sources, term)).collect();
    rows.push(sum_row(&texts.combined, budget.u_ohm));
    rows.extend(below);
    let mut table = texts.budget.table(rows);
    if !small.is_empty() {
        let note = match small.len() {
            1 => "1 stated uncertainty contributes less than 0.0005 Ω.".to_string(),
            many => format!("{many} stated uncertainties contribute less than 0.0005 Ω each."),
        };
        table.notes.insert(0, note);
    }
    let heading = format!("{} {heading}", texts.budget.heading());
    (!budget.terms.is_empty()).then_some(SmallTable { heading, ..table })
}

fn term_row(sources: &Sources, term: &BudgetTerm) -> Vec<SmallCell> {
    let meter = |at: usize| sources.cooldown.and_then(|cooldown| cooldown.meters.get(at));
    let (cause, unit) = match term.cause {
        Cause::Line(contact) => (format!("line of {}", contact_name(sources.device, contact)), "Ω"),
        Cause::Gain(at) => (format!("gain of {}", meter(at).map_or("", |meter| meter.name.as_str())), "1"),
        Cause::Current => ("current".to_string(), "A"),
    };
    vec![
        SmallCell::text(cause),
        SmallCell::Number(significant(term.u, unit)),
        SmallCell::text(unit),
        SmallCell::Number(significant(term.sensitivity, "Ω per unit")),
        SmallCell::Number(ohm(term.contribution_ohm)),
    ]
}

fn sum_row(name: &str, u_ohm: f64) -> Vec<SmallCell> {
    let empty = || SmallCell::Empty;
    vec![SmallCell::text(name), empty(), empty(), empty(), SmallCell::Number(ohm(u_ohm))]
}

/// Three digits; a sensitivity that is only rounding prints as zero.
fn significant(value: f64, unit: &'static str) -> Printed {
    let shown = if value.abs() < 1e-9 && unit != "A" { 0.0 } else { value };
    let text = if shown == 0.0 { "0".to_string() } else { printed::significant(shown, 3) };
    Printed { text, value, u: None, unit }
}

fn ohm(value: f64) -> Printed {
    Printed::number(value, 3, "Ω")
}
