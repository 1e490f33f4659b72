//! Measured readings against what was expected of them, unrounded.

use schemars::JsonSchema;
use serde::Serialize;

use crate::circuit::Budget;
use crate::circuit::BudgetTerm;
use crate::circuit::Cause;
use crate::compare::Comparison;
use crate::compare::Judgement;
use crate::compare::Row;
use crate::compare::Verdict;
use crate::device::Device;
use crate::report::RowSource;
use crate::report::Sources;
use crate::report::names;
use crate::report::numbers::VerdictNumbers;
use crate::report::numbers::points::PartNumbers;
use crate::report::numbers::points::contact_names;
use crate::report::numbers::points::parts;
use crate::report::numbers::state_words;

/// One measured reading. All uncertainties are standard uncertainties (k = 1).
#[derive(Clone, Debug, PartialEq, Serialize, JsonSchema)]
pub struct MeasuredNumbers {
    /// `+` or `-`.
    pub polarity: String,
    /// Contacts at which the current entered and left.
    pub current: [String; 2],
    /// Contacts at the + and the − input of the meter.
    pub voltage: [String; 2],
    /// Name of the meter; null means the first.
    pub meter: Option<String>,
    /// Readings of one set were taken with all its meters connected; null means alone.
    pub set: Option<String>,
    /// What the user wrote down, with its unit.
    pub written: String,
    /// What was written, in Ω.
    pub ohm: f64,
    /// Its uncertainty in Ω; null where none was written.
    pub u_ohm: Option<f64>,
    /// `fine`, `no path` or `floating`.
    pub state: String,
    /// The device alone, exact, in h/e².
    pub exact: Option<String>,
    /// What this meter should show, in Ω.
    pub expected_ohm: Option<f64>,
    /// The part of it in quadrature in Ω.
    pub expected_quadrature_ohm: Option<f64>,
    /// Uncertainty of what is expected, in Ω.
    pub u_expected_ohm: f64,
    /// Measured minus expected in Ω.
    pub difference_ohm: Option<f64>,
    /// Uncertainty of the difference in Ω.
    pub u_difference_ohm: Option<f64>,
    /// Difference in units of its uncertainty.
    pub difference_in_u: Option<f64>,
    /// Difference over the size of the expected value, in 10⁻⁶.
    pub difference_1e6: Option<f64>,
    /// `agrees`: within 2 u; `wide`: beyond, within the limit; `disagrees`: beyond the limit; `no uncertainty` and
    /// `no expectation`: not judged.
    pub judgement: String,
    /// Where the uncertainty of what is expected comes from; null where nothing is known of it.
    pub uncertainty: Option<UncertaintyNumbers>,
    /// What each part of the circuit does alone.
    pub parts: Vec<PartNumbers>,
}

/// Where the uncertainty of an expected value comes from.
#[derive(Clone, Debug, PartialEq, Serialize, JsonSchema)]
pub struct UncertaintyNumbers {
    /// Root of the sum of squares of the contributions, in Ω.
    pub u_ohm: f64,
    /// The contributions.
    pub terms: Vec<TermNumbers>,
}

/// One contribution to an uncertainty.
#[derive(Clone, Debug, PartialEq, Serialize, JsonSchema)]
pub struct TermNumbers {
    /// `line`, `gain` or `current`.
    pub cause: String,
    /// The contact of the line, or the name of the meter.
    pub of: Option<String>,
    /// Uncertainty of the cause, in `unit`.
    pub u: f64,
    /// Unit of the cause: `Ω`, `1` or `A`.
    pub unit: String,
    /// Size of the change of the shown value that goes with it, in Ω.
    pub contribution_ohm: f64,
}

/// Measured voltages round a loop of contacts, over the current. They add up to zero, but for what the currents of the
/// meters change from reading to reading.
#[derive(Clone, Debug, PartialEq, Serialize, JsonSchema)]
pub struct LoopNumbers {
    /// `+` or `-`.
    pub polarity: String,
    /// Contacts at which the current entered and left.
    pub current: [String; 2],
    /// The contacts round which it goes; the last is followed by the first.
    pub contacts: Vec<String>,
    /// The sum in Ω.
    pub sum_ohm: f64,
    /// Its uncertainty in Ω; null where a reading has none.
    pub u_ohm: Option<f64>,
    /// What the meters should show, in Ω.
    pub expected_ohm: Option<f64>,
}

pub(super) fn verdict(comparison: Option<&Comparison>) -> VerdictNumbers {
    let rows = comparison.map_or(&[][..], |comparison| &comparison.rows);
    VerdictNumbers {
        result: verdict_word(comparison.map_or(Verdict::NotTested, |comparison| comparison.verdict)).to_owned(),
        measured: rows.len(),
        judged: comparison.map_or(0, |comparison| comparison.judged),
        disagreeing: rows.iter().filter(|row| row.judgement == Judgement::Disagrees).count(),
        limit_in_u: comparison.and_then(|comparison| comparison.limit_u),
    }
}

/// The words for a verdict, as machine output has them.
pub fn verdict_word(verdict: Verdict) -> &'static str {
    match verdict {
        Verdict::Agrees => "agrees",
        Verdict::Disagrees => "disagrees",
        Verdict::NotTested => "not tested",
    }
}

pub(super) fn measured(sources: &Sources, (row, source): (&Row, &RowSource)) -> MeasuredNumbers {
    let (device, taken, expected) = (sources.device, &row.measured, &row.expected);
    MeasuredNumbers {
        polarity: taken.polarity.sign().to_owned(),
        current: contact_names(device, taken.current),
        voltage: contact_names(device, taken.voltage),
        meter: taken.meter.clone(),
        set: taken.set.clone(),
        written: taken.written.clone(),
        ohm: taken.value_ohm.value,
        u_ohm: taken.value_ohm.u,
        state: state_words(expected.state).to_owned(),
        exact: expected.exact.as_ref().map(ToString::to_string),
        expected_ohm: expected.shown_ohm.or(expected.ohm),
        expected_quadrature_ohm: expected.shown_quadrature_ohm,
        u_expected_ohm: row.u_expected_ohm,
        difference_ohm: row.difference_ohm,
        u_difference_ohm: row.u_difference_ohm,
        difference_in_u: row.difference_in_u,
        difference_1e6: row.difference_1e6,
        judgement: judgement_word(row.judgement).to_owned(),
        uncertainty: source.budget.as_ref().map(|budget| uncertainty(sources, budget)),
        parts: parts(&source.corrections),
    }
}

fn judgement_word(judgement: Judgement) -> &'static str {
    match judgement {
        Judgement::Agrees => "agrees",
        Judgement::Wide => "wide",
        Judgement::Disagrees => "disagrees",
        Judgement::NoUncertainty => "no uncertainty",
        Judgement::NoExpectation => "no expectation",
    }
}

pub(super) fn uncertainty(sources: &Sources, budget: &Budget) -> UncertaintyNumbers {
    UncertaintyNumbers { u_ohm: budget.u_ohm, terms: budget.terms.iter().map(|one| term(sources, one)).collect() }
}

fn term(sources: &Sources, term: &BudgetTerm) -> TermNumbers {
    let meter = |at: usize| sources.cooldown.and_then(|cooldown| cooldown.meters.get(at));
    let (cause, of, unit) = match term.cause {
        Cause::Line(contact) => ("line", Some(names::contact_name(sources.device, contact).to_owned()), "Ω"),
        Cause::Gain(at) => ("gain", meter(at).map(|meter| meter.name.clone()), "1"),
        Cause::Current => ("current", None, "A"),
    };
    TermNumbers {
        cause: cause.to_owned(),
        of,
        u: term.u,
        unit: unit.to_owned(),
        contribution_ohm: term.contribution_ohm,
    }
}

pub(super) fn loops(device: &Device, rows: &[Row], point: usize) -> Vec<LoopNumbers> {
    let here = crate::compare::loops(rows).into_iter().filter(|one| one.point == point);
    let numbers = here.map(|one| LoopNumbers {
        polarity: one.polarity.sign().to_owned(),
        current: contact_names(device, one.current),
        contacts: one.contacts.iter().map(|contact| names::contact_name(device, *contact).to_owned()).collect(),
        sum_ohm: one.sum_ohm.value,
        u_ohm: one.sum_ohm.u,
        expected_ohm: one.expected_ohm,
    });
    numbers.collect()
}
