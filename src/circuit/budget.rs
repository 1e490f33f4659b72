//! The uncertainty of what is expected, from what is stated of lines, meter and current.

use crate::circuit::Chip;
use crate::circuit::Circuit;
use crate::circuit::Taken;
use crate::circuit::shown::one;
use crate::circuit::solution::Solution;
use crate::device::ContactIdx;

/// Where a term comes from.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Cause {
    /// Resistance of a line: u in Ω.
    Line(ContactIdx),
    /// Gain of the meter at this place of the list: u as a plain number.
    Gain(usize),
    /// The current that divides: u in A.
    Current,
}

/// One line of the budget.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct BudgetTerm {
    /// Where it comes from.
    pub cause: Cause,
    /// Standard uncertainty of the cause, in its unit.
    pub u: f64,
    /// Change of the shown value with the cause, in Ω per its unit.
    pub sensitivity: f64,
    /// |sensitivity × u|, in Ω.
    pub contribution_ohm: f64,
}

/// What is known of the uncertainty of one expected value.
#[derive(Clone, Debug, PartialEq)]
pub struct Budget {
    /// Root of the sum of squares of the contributions, in Ω; the causes count as independent.
    pub u_ohm: f64,
    /// The terms: lines in the order of the device file, gain, current. Only those with a stated u.
    pub terms: Vec<BudgetTerm>,
}

/// The budget of the part in phase that the connection at `row` of `taken` shows; none where it shows nothing.
///
/// A line's sensitivity is \[f(x + u) − f(x − u)\]/2u, the finite form that JCGM 100:2008, 5.1.3, note 2 allows: it
/// includes the loading exactly. Gain and current enter as a factor and a divisor: ∂R/∂g = R/g, ∂R/∂I = −R/I.
pub fn budget(chip: &Chip, circuit: &Circuit, taken: &Taken, row: usize) -> Option<Budget> {
    let solution = Solution::of(chip, circuit, taken)?;
    let ohm = one(circuit, &solution, taken.connections.get(row)?)?.ohm;
    let mut terms = line_terms(chip, circuit, taken, row);
    terms.extend(gain_term(circuit, taken, row, ohm));
    terms.extend(current_term(circuit, &solution, ohm));
    let variance: f64 = terms.iter().map(|term| term.contribution_ohm * term.contribution_ohm).sum();
    Some(Budget { u_ohm: variance.sqrt(), terms })
}

fn term(cause: Cause, u: f64, sensitivity: f64) -> BudgetTerm {
    BudgetTerm { cause, u, sensitivity, contribution_ohm: (sensitivity * u).abs() }
}

fn line_terms(chip: &Chip, circuit: &Circuit, taken: &Taken, row: usize) -> Vec<BudgetTerm> {
    let moved = |contact: usize, by: f64| {
        let mut circuit = circuit.clone();
        circuit.lines[contact].ohm += by;
        one(&circuit, &Solution::of(chip, &circuit, taken)?, &taken.connections[row]).map(|shown| shown.ohm)
    };
    let of = |contact: usize| {
        let u = circuit.lines[contact].u_ohm.filter(|u| *u > 0.0)?;
        let sensitivity = (moved(contact, u)? - moved(contact, -u)?) / (2.0 * u);
        Some(term(Cause::Line(ContactIdx(contact)), u, sensitivity))
    };
    (0..circuit.lines.len()).filter_map(of).collect()
}

fn gain_term(circuit: &Circuit, taken: &Taken, row: usize, ohm: f64) -> Option<BudgetTerm> {
    let named = taken.connections[row].meter;
    let meter = circuit.meter(named)?;
    let u = meter.u_gain.filter(|u| *u > 0.0)?;
    Some(term(Cause::Gain(named.unwrap_or(0)), u, ohm / meter.gain))
}

fn current_term(circuit: &Circuit, solution: &Solution, ohm: f64) -> Option<BudgetTerm> {
    let u = circuit.u_current_ampere.filter(|u| *u > 0.0)?;
    Some(term(Cause::Current, u, -ohm / solution.divisor_ampere(circuit)?))
}
