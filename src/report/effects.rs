//! What each part of the circuit does alone: which one matters.

use crate::circuit::Correction;
use crate::circuit::Part;
use crate::circuit::Shown;
use crate::quantity::Polarity;
use crate::quantity::printed;
use crate::report::PointSource;
use crate::report::Printed;
use crate::report::SmallCell;
use crate::report::SmallTable;
use crate::report::Sources;
use crate::report::names;
use crate::report::small_table::TableTexts;
use crate::report::table::reading_of;

/// Most readings for each part.
const MOST: usize = 3;
/// Decimals of a change in Ω; what they print as zero is left out.
const DECIMALS: usize = 2;

/// One table per point; none where no part changes anything.
pub fn tables(sources: &Sources, texts: &TableTexts) -> Vec<SmallTable> {
    let points = sources.points.iter().enumerate();
    let tables = points.map(|(index, point)| table(sources, (index, point), texts));
    let mut tables: Vec<SmallTable> = tables.filter(|table| !table.rows.is_empty()).collect();
    // The note stands once, under the last.
    let last = tables.len().saturating_sub(1);
    tables.iter_mut().take(last).for_each(|table| table.notes.clear());
    tables
}

/// The changes of one reading: at `+`, at `−`.
type Changes<'a> = (String, [&'a [Correction]; 2]);

fn table(sources: &Sources, (index, point): (usize, &PointSource), texts: &TableTexts) -> SmallTable {
    let changes = changes(sources, (index, point));
    let parts = Part::ALL.into_iter().flat_map(|part| {
        let in_phase = rows(&changes, (part, |shown| Some(shown.ohm)), part_name(part, texts));
        let name = format!("{}, {}", part_name(part, texts), texts.in_quadrature);
        let quadrature = rows(&changes, (part, |shown| shown.quadrature_ohm), name);
        in_phase.into_iter().chain(quadrature)
    });
    let mut table = texts.corrections.table(parts.collect());
    if sources.points.len() > 1 {
        table.heading = format!("{}: {}", table.heading, point.point.name);
    }
    table
}

/// Every reading with its changes; where it was measured, those of the meter that took it.
fn changes<'a>(sources: &'a Sources, (index, point): (usize, &'a PointSource)) -> Vec<Changes<'a>> {
    let mut all: Vec<Changes<'a>> = Vec::new();
    for (side, polarity) in Polarity::BOTH.into_iter().enumerate() {
        for (name, corrections) in side_changes(sources, (index, point), (side, polarity)) {
            match all.iter_mut().find(|(known, _)| *known == name) {
                Some((_, sides)) => sides[side] = corrections,
                None => {
                    let mut sides: [&[Correction]; 2] = [&[], &[]];
                    sides[side] = corrections;
                    all.push((name, sides));
                }
            }
        }
    }
    all
}

fn side_changes<'a>(
    sources: &'a Sources,
    (index, point): (usize, &'a PointSource),
    (side, polarity): (usize, Polarity),
) -> Vec<(String, &'a [Correction])> {
    let rows = sources.comparison.map_or(&[][..], |comparison| &comparison.rows);
    let here = rows.iter().zip(sources.rows);
    let here: Vec<_> =
        here.filter(|(row, _)| row.measured.point == index && row.measured.polarity == polarity).collect();
    let many = sources.cooldown.is_some_and(|cooldown| cooldown.meters.len() > 1);
    let measured = here.iter().map(|(row, source)| {
        let name = names::reading_name(sources.device, &reading_of(row));
        let meter = row.measured.meter.as_ref().filter(|_| many);
        (meter.map_or(name.clone(), |meter| format!("{name} on {meter}")), source.corrections.as_slice())
    });
    let prediction = if side == 0 { point.toward } else { point.away };
    let listed = prediction.expected.iter().zip(&point.beside[side].corrections);
    let unread = listed.filter(|(expected, _)| {
        let same = |row: &crate::compare::Row| {
            (row.measured.current, row.measured.voltage) == (expected.reading.current, expected.reading.voltage)
        };
        !here.iter().any(|(row, _)| same(row))
    });
    let unread = unread.map(|(expected, of)| (names::reading_name(sources.device, &expected.reading), of.as_slice()));
    measured.chain(unread).collect()
}

/// The readings that a part changes most.
fn rows(changes: &[Changes], (part, of): (Part, fn(Shown) -> Option<f64>), name: String) -> Vec<Vec<SmallCell>> {
    let change = |side: &[Correction]| side.iter().find(|one| one.part == part).and_then(|one| of(one.change));
    let size = |sides: &[Option<f64>; 2]| sides.iter().flatten().map(|ohm| ohm.abs()).fold(0.0, f64::max);
    let mut found: Vec<(&str, [Option<f64>; 2])> =
        changes.iter().map(|(name, sides)| (name.as_str(), sides.map(change))).collect();
    found.retain(|(_, sides)| sides.iter().flatten().any(|ohm| shows(*ohm)));
    found.sort_by(|a, b| size(&b.1).total_cmp(&size(&a.1)));
    let cell = |ohm: Option<f64>| SmallCell::number(ohm.map(signed));
    let row = |(reading, [toward, away]): &(&str, [Option<f64>; 2])| {
        vec![SmallCell::text(name.clone()), SmallCell::text(*reading), cell(*toward), cell(*away)]
    };
    found.iter().take(MOST).map(row).collect()
}

fn shows(ohm: f64) -> bool {
    printed::decimals(ohm.abs(), DECIMALS).contains(|c: char| c.is_ascii_digit() && c != '0')
}

fn signed(ohm: f64) -> Printed {
    let printed = Printed::number(ohm, DECIMALS, "Ω");
    let text = if ohm > 0.0 && shows(ohm) { format!("+{}", printed.text) } else { printed.text };
    Printed { text, ..printed }
}

fn part_name(part: Part, texts: &TableTexts) -> String {
    let parts = &texts.parts;
    let name = match part {
        Part::Source => &parts.source,
        Part::Lines => &parts.lines,
        Part::Capacitance => &parts.capacitance,
        Part::MeterInput => &parts.meter_input,
        Part::Gain => &parts.gain,
        Part::Phase => &parts.phase,
        Part::Contacts => &parts.contacts,
    };
    name.clone()
}
