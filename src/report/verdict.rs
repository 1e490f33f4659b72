//! The answer: one sentence, why, what next, and what may be used, needs care or was not tested.

use serde::Serialize;

use crate::compare::Judgement;
use crate::compare::Row;
use crate::compare::Verdict;
use crate::cooldown::ContactState;
use crate::cooldown::MagnetSense;
use crate::device::ContactIdx;
use crate::diagnostic::Diagnostic;
use crate::quantity::Polarity;
use crate::quantity::Uncertain;
use crate::quantity::printed;
use crate::quantity::printed::as_given;
use crate::report::NamedReading;
use crate::report::PointReport;
use crate::report::PointSource;
use crate::report::Printed;
use crate::report::Sources;
use crate::report::Texts;
use crate::report::VerdictBox;
use crate::report::names;
use crate::report::numbers::verdict_word;
use crate::report::rows::is_judged;
use crate::report::table::reading_of;

/// The verdict of all points together.
pub fn verdict_box(sources: &Sources, points: &[PointReport], texts: &Texts) -> Result<VerdictBox, Diagnostic> {
    let fields = Fields::of(sources);
    Ok(VerdictBox {
        result: verdict_word(sources.comparison.map_or(Verdict::NotTested, |comparison| comparison.verdict)),
        sentence: texts.lines("verdict.txt", &fields)?.join(" "),
        why: texts.lines("why.txt", &fields)?,
        usable: texts.lines("usable.txt", &fields)?,
        with_care: texts.lines("with-care.txt", &fields)?,
        not_tested: texts.lines("not-tested.txt", &fields)?,
        limit: sources.comparison.and_then(|comparison| comparison.limit_u).map(|limit| Printed::number(limit, 1, "u")),
        named: named(sources, points),
    })
}

/// Where the readings that the sentences may name stand: those that disagree, or the one that is off most.
fn named(sources: &Sources, points: &[PointReport]) -> Vec<NamedReading> {
    let rows: &[Row] = sources.comparison.map_or(&[], |comparison| &comparison.rows);
    let judged = by_size(rows).into_iter().enumerate();
    let told = judged.filter(|(rank, row)| *rank == 0 || row.judgement == Judgement::Disagrees);
    let place = |(_, row): (usize, &Row)| {
        let name = names::reading_name(sources.device, &reading_of(row));
        let point = row.measured.point;
        let row = points.get(point)?.rows.iter().position(|row| row.name == name)?;
        Some(NamedReading { name, point, row })
    };
    told.filter_map(place).collect()
}

/// What the parts of the verdict may say.
#[derive(Debug, Serialize)]
struct Fields {
    measured: usize,
    judged: usize,
    agreeing: usize,
    wide: usize,
    without_u: usize,
    without_expectation: usize,
    limit: Option<String>,
    odd: Vec<OddFields>,
    widest: Option<OddFields>,
    points: Vec<PointFields>,
    contacts_agreeing: String,
    contacts_untested: String,
    contact_states: Vec<String>,
    lines: Option<String>,
    meters: usize,
    magnet_unknown: bool,
    exchanged_pairs: usize,
    loops: usize,
    current: Option<String>,
    frequency: Option<String>,
    notices: usize,
}

/// One reading as a sentence names it.
#[derive(Clone, Debug, Serialize)]
struct OddFields {
    name: String,
    away: bool,
    point: Option<String>,
    fillings: String,
    expected: Option<String>,
    measured: String,
    in_u: String,
    by_u: String,
    percent: Option<String>,
    size: &'static str,
}

/// One operating point as a sentence names it.
#[derive(Debug, Serialize)]
struct PointFields {
    name: String,
    fillings: String,
    field: Option<String>,
    judged: usize,
    odd: usize,
    toward_tested: bool,
    away_tested: bool,
}

impl Fields {
    fn of(sources: &Sources) -> Self {
        let rows: &[Row] = sources.comparison.map_or(&[], |comparison| &comparison.rows);
        let count = |wanted: Judgement| rows.iter().filter(|row| row.judgement == wanted).count();
        let judged: Vec<&Row> = by_size(rows);
        let agreeing: Vec<&Row> = judged.iter().filter(|row| row.judgement != Judgement::Disagrees).copied().collect();
        let odd = judged.iter().filter(|row| row.judgement == Judgement::Disagrees);
        Self {
            measured: rows.len(),
            judged: judged.len(),
            agreeing: agreeing.len(),
            wide: count(Judgement::Wide),
            without_u: count(Judgement::NoUncertainty),
            without_expectation: count(Judgement::NoExpectation),
            limit: sources.comparison.and_then(|c| c.limit_u).map(|limit| printed::decimals(limit, 1)),
            odd: odd.map(|row| OddFields::of(sources, row)).collect(),
            widest: judged.first().map(|row| OddFields::of(sources, row)),
            points: sources.points.iter().enumerate().map(|point| PointFields::of(sources, &judged, point)).collect(),
            contacts_agreeing: names::contact_list(sources.device, &contacts_of(&agreeing)),
            contacts_untested: names::contact_list(sources.device, &untested(sources, &judged)),
            contact_states: contact_states(sources),
            lines: lines(sources),
            meters: sources.cooldown.map_or(0, |cooldown| cooldown.meters.len()),
            magnet_unknown: sources.cooldown.is_some_and(|c| c.magnet.positive == MagnetSense::Unknown),
            exchanged_pairs: crate::compare::exchanged_pairs(rows),
            loops: crate::compare::loops(rows).len(),
            current: sources.cooldown.and_then(|c| c.source.current_na).map(|value| format!("{} nA", as_given(value))),
            frequency: sources.cooldown.and_then(|c| c.source.frequency_hz).map(|hz| format!("{} Hz", as_given(hz))),
            notices: sources.notices.len(),
        }
    }
}

impl OddFields {
    fn of(sources: &Sources, row: &Row) -> Self {
        let expected = row.expected.shown_ohm.or(row.expected.ohm);
        let difference = row.difference_in_u.unwrap_or(0.0);
        let point = sources.device.points.get(row.measured.point);
        Self {
            name: names::reading_name(sources.device, &reading_of(row)),
            away: row.measured.polarity == Polarity::Away,
            point: point.filter(|_| sources.points.len() > 1).map(|point| point.name.clone()),
            fillings: point.map_or_else(String::new, |point| names::fillings(sources.device, point)),
            expected: expected.map(|ohm| Printed::kilo_ohm(ohm, 4).with_unit()),
            measured: Printed::measured_kilo_ohm(row.measured.value_ohm).with_unit(),
            in_u: signed_u(difference),
            by_u: signed_u(difference.abs()).trim_start_matches('+').to_owned(),
            percent: expected
                .filter(|_| row.difference_1e6.is_some())
                .and_then(|expected| percent(expected, row.measured.value_ohm)),
            size: expected
                .filter(|_| row.difference_1e6.is_some())
                .map_or("", |expected| size(expected, row.measured.value_ohm.value)),
        }
    }
}

/// Whole from 100 u on: tenths of so large a difference tell nobody more.
fn signed_u(difference: f64) -> String {
    let whole = difference.abs() >= 100.0;
    if whole { Printed::in_whole_u(difference).text } else { printed::difference_in_u(difference) }
}

/// Difference of the sizes over the expected size, in per cent with two digits; none where zero is expected or the signs
/// differ.
fn percent(expected_ohm: f64, measured: Uncertain) -> Option<String> {
    let share = (measured.value.abs() - expected_ohm.abs()).abs() / expected_ohm.abs();
    (expected_ohm * measured.value > 0.0).then(|| format!("{} %", printed::significant(share * 100.0, 2)))
}

fn size(expected_ohm: f64, measured_ohm: f64) -> &'static str {
    match expected_ohm * measured_ohm < 0.0 {
        true => "of the other sign",
        false if measured_ohm.abs() < expected_ohm.abs() => "low in size",
        false => "high in size",
    }
}

impl PointFields {
    fn of(sources: &Sources, judged: &[&Row], (index, source): (usize, &PointSource)) -> Self {
        let mine: Vec<&&Row> = judged.iter().filter(|row| row.measured.point == index).collect();
        let tested = |polarity| mine.iter().any(|row| row.measured.polarity == polarity);
        Self {
            name: source.point.name.clone(),
            fillings: names::fillings(sources.device, source.point),
            field: names::field(source.point),
            judged: mine.len(),
            odd: mine.iter().filter(|row| row.judgement == Judgement::Disagrees).count(),
            toward_tested: tested(Polarity::Toward),
            away_tested: tested(Polarity::Away),
        }
    }
}

/// Judged rows by falling |difference| in u.
fn by_size(rows: &[Row]) -> Vec<&Row> {
    let mut judged: Vec<&Row> = rows.iter().filter(|row| is_judged(row)).collect();
    let size = |row: &Row| row.difference_in_u.unwrap_or(0.0).abs();
    judged.sort_by(|a, b| size(b).total_cmp(&size(a)));
    judged
}

fn contacts_of(rows: &[&Row]) -> Vec<ContactIdx> {
    rows.iter().flat_map(|row| row.measured.current.into_iter().chain(row.measured.voltage)).collect()
}

fn untested(sources: &Sources, judged: &[&Row]) -> Vec<ContactIdx> {
    let tested = contacts_of(judged);
    (0..sources.device.contacts.len()).map(ContactIdx).filter(|contact| !tested.contains(contact)).collect()
}

fn contact_states(sources: &Sources) -> Vec<String> {
    let Some(cooldown) = sources.cooldown else { return Vec::new() };
    let name = |index: usize| names::contact_name(sources.device, ContactIdx(index));
    let states = cooldown.states.iter().enumerate().filter_map(|(index, state)| match state {
        ContactState::Live => None,
        ContactState::Open => Some(format!("contact {} is open", name(index))),
        ContactState::Grounded => Some(format!("contact {} is grounded", name(index))),
    });
    let joins = cooldown.joins.iter().map(|join| {
        let names: Vec<&str> = join.iter().map(|contact| name(contact.0)).collect();
        format!("contacts {} are joined", names.join(" and "))
    });
    states.chain(joins).collect()
}

/// The most that two lines add to a two-terminal value.
fn lines(sources: &Sources) -> Option<String> {
    let mut ohms: Vec<f64> = sources.cooldown?.lines.iter().map(|line| line.ohm).collect();
    ohms.sort_by(|a, b| b.total_cmp(a));
    let most: f64 = ohms.iter().take(2).sum();
    (most > 0.0).then(|| format!("{} Ω", printed::significant(most, 3)))
}
