//! From finished results to a report: the table of contents of a sheet.

use serde::Serialize;

use crate::compare::Row;
use crate::diagnostic::Diagnostic;
use crate::report::CautionLine;
use crate::report::PointReport;
use crate::report::PointSource;
use crate::report::Report;
use crate::report::Sources;
use crate::report::TableRow;
use crate::report::Texts;
use crate::report::Words;
use crate::report::alone;
use crate::report::budgets;
use crate::report::captions;
use crate::report::charted;
use crate::report::closed;
use crate::report::closing;
use crate::report::contacts;
use crate::report::effects;
use crate::report::identity;
use crate::report::instruments;
use crate::report::mixed;
use crate::report::names;
use crate::report::small_table::TableTexts;
use crate::report::table;
use crate::report::verdict;
use crate::safety;

/// The version of [`Report`]'s shape.
const FORMAT: u32 = 1;

/// Every table and sentence of a sheet. A fault means that a template part cannot be filled.
pub fn build(sources: &Sources) -> Result<Report, Diagnostic> {
    let driver = names::driver(sources.device);
    let (texts, words, tables) = (Texts::built_in(driver)?, Words::built_in(driver)?, TableTexts::built_in(driver)?);
    let points = sources.points.iter().enumerate();
    let points = points.map(|(index, point)| point_report(sources, (index, point), (&texts, &tables), &words));
    let points = points.collect::<Result<Vec<_>, _>>()?;
    Ok(Report {
        format: FORMAT,
        identity: identity::identity(sources),
        verdict: verdict::verdict_box(sources, &points, &texts)?,
        answer_point: answer_point(&points),
        points,
        field_words: captions::field_words(sources, &texts)?,
        contacts: contacts::contacts(sources),
        closure: closed::tables(sources, &tables),
        instruments: instruments::tables(sources, &tables),
        corrections: effects::tables(sources, &tables),
        budgets: budgets::tables(sources, &tables),
        rules: closing::rules(sources, &texts)?,
        limits: closing::limits(&texts)?,
        notices: closing::notices(sources.notices),
        cautions: cautions(sources),
        provenance: closing::provenance(sources, &texts)?,
        words,
    })
}

#[derive(Serialize)]
struct TableFields {
    rows: usize,
    measured: bool,
    states: bool,
    circuit: bool,
    repeated: bool,
    formless: bool,
    /// Path lengths enter at this point.
    lengths: bool,
    wires: bool,
    /// Edge modes stand in place of fillings.
    modes: bool,
}

fn point_report(
    sources: &Sources,
    (index, point): (usize, &PointSource),
    (texts, tables): (&Texts, &TableTexts),
    words: &Words,
) -> Result<PointReport, Diagnostic> {
    let all: &[Row] = sources.comparison.map_or(&[], |comparison| &comparison.rows);
    let measured: Vec<&Row> = all.iter().filter(|row| row.measured.point == index).collect();
    let with_circuit = sources.cooldown.is_some();
    let rows = table::rows(sources.device, point, &measured, words);
    let alone = alone::rules(sources, point, texts)?;
    let all = point.toward.expected.iter().chain(&point.away.expected).chain(measured.iter().map(|row| &row.expected));
    let circuit = all.into_iter().any(|expected| expected.shown_ohm != expected.ohm);
    let wires = point.toward.conductance.links().iter().any(|link| link.resistance > 0.0);
    let lengths = point.toward.conductance.exact().is_none() && !wires;
    let modes = point.point.modes.is_some();
    let fields = TableFields { circuit, lengths, wires, modes, ..table_fields(&rows) };
    let charts = if fields.measured { charted::ranges(rows.len()) } else { Vec::new() };
    let mut notes = texts.lines("table.txt", &fields)?.into_iter();
    Ok(PointReport {
        title: point.point.name.clone(),
        subtitle: captions::subtitle(sources.device, point, texts)?,
        drawings: captions::drawings(sources.device, point, texts)?,
        pens: captions::pens(sources.device, point, texts)?,
        mixing_key: captions::mixing_key(point, words),
        alone_lines: alone::lines(&alone, texts)?,
        alone_table: alone::table(&alone, tables),
        alone,
        mixing: mixed::table(sources.device, point, tables),
        chart_notes: charted::notes(&charts, rows.len(), texts)?,
        charts,
        circuit: with_circuit,
        key: captions::key(sources.device, point, texts)?,
        readings: notes.next().unwrap_or_default(),
        measured: fields.measured,
        rows,
        notes: notes.collect(),
    })
}

fn table_fields(rows: &[TableRow]) -> TableFields {
    let cells = || rows.iter().flat_map(|row| [&row.toward, &row.away]);
    TableFields {
        rows: rows.len(),
        measured: cells().any(|cell| cell.measured.is_some()),
        states: cells().any(|cell| cell.state.is_some()),
        circuit: false,
        repeated: rows.windows(2).any(|pair| pair[0].name == pair[1].name),
        formless: rows.iter().any(is_formless),
        lengths: false,
        wires: false,
        modes: false,
    }
}

/// Whether a row has a number and, at a polarity where it has one, no closed form.
fn is_formless(row: &TableRow) -> bool {
    let numbers = [&row.toward, &row.away].into_iter().any(|cell| cell.device.is_some());
    numbers && row.formula.as_ref().is_none_or(|formula| formula.contains('–'))
}

/// The point that the answer page shows: the one whose disagreement is largest, else the first.
fn answer_point(points: &[PointReport]) -> usize {
    let worst = |point: &PointReport| {
        let cells = point.rows.iter().flat_map(|row| [&row.toward, &row.away]);
        cells.filter(|cell| cell.odd).filter_map(|cell| cell.in_u.as_ref()).map(|u| u.value.abs()).fold(0.0, f64::max)
    };
    let larger = |best: (usize, f64), (index, point)| if worst(point) > best.1 { (index, worst(point)) } else { best };
    points.iter().enumerate().fold((0, 0.0), larger).0
}

fn cautions(sources: &Sources) -> Vec<CautionLine> {
    let cautions = safety::cautions(sources.device, sources.cooldown);
    cautions.into_iter().map(|caution| CautionLine { text: caution.text, source: caution.source.to_string() }).collect()
}
