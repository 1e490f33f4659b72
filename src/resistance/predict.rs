//! The one way to numbers: from a setup to every reading.

use crate::circuit::Budget;
use crate::circuit::Chip;
use crate::circuit::Circuit;
use crate::circuit::Correction;
use crate::circuit::budget;
use crate::circuit::shown;
use crate::conductance::Conductance;
use crate::conductance::Solved;
use crate::conductance::conductance;
use crate::device::ContactIdx;
use crate::network::Network;
use crate::network::channels;
use crate::number::Number;
use crate::number::Scalar;
use crate::quantity::KLITZING;
use crate::resistance::Expected;
use crate::resistance::Prediction;
use crate::resistance::Reading;
use crate::resistance::ReadingState;
use crate::resistance::Setup;
use crate::resistance::islands::Islands;
use crate::resistance::takings;

/// What every reading should give: the device is solved once, each reading is four look-ups.
///
/// R_ij,kl = (V_k − V_l)/I with the current I in at i and out at j. What the meters show is then the circuit's answer, one
/// solution for all that was connected at the same time.
pub fn predict(network: &Network, setup: &Setup, readings: &[Reading]) -> Prediction {
    let channels = channels(network, &setup.operating);
    let conductance = conductance(&channels);
    let mut expected = match &conductance {
        Conductance::Exact(solved) => all_expected(&Islands::of(solved), setup, readings),
        Conductance::Float(solved) => all_expected(&Islands::of(solved), setup, readings),
    };
    if let Some(circuit) = &setup.circuit {
        put_shown(&Chip::of(&conductance), circuit, &mut expected);
    }
    Prediction { channels, conductance, expected }
}

/// Potential of every bundle with the inlet at 1 and the outlet at 0.
pub(super) fn bundle_potentials(conductance: &Conductance, current: [ContactIdx; 2]) -> Option<Vec<Option<Number>>> {
    match conductance {
        Conductance::Exact(solved) => potentials(solved, current, Number::Exact),
        Conductance::Float(solved) => potentials(solved, current, drawn),
    }
}

/// Decimals of a potential that a drawing tells apart.
const DRAWN: f64 = 1e9;

/// What differs by rounding alone is one potential.
fn drawn(potential: f64) -> Number {
    Number::Float((potential * DRAWN).round() / DRAWN)
}

fn potentials<S: Scalar>(
    solved: &Solved<S>,
    current: [ContactIdx; 2],
    number: impl Fn(S) -> Number,
) -> Option<Vec<Option<Number>>> {
    let of_contacts = contact_potentials(&Islands::of(solved), current)?;
    let mean = |share: &Vec<(usize, S)>| {
        let parts = share.iter().map(|(contact, part)| Some(part.clone() * of_contacts[*contact].clone()?));
        parts.reduce(|sum, part| Some(sum? + part?)).flatten()
    };
    Some(solved.shares.iter().map(|share| share.as_ref().and_then(mean).map(&number)).collect())
}

/// Potential of every contact with the inlet at 1 and the outlet at 0.
pub(super) fn contact_numbers(conductance: &Conductance, current: [ContactIdx; 2]) -> Option<Vec<Option<Number>>> {
    match conductance {
        Conductance::Exact(solved) => numbers(contact_potentials(&Islands::of(solved), current)?, Number::Exact),
        Conductance::Float(solved) => numbers(contact_potentials(&Islands::of(solved), current)?, drawn),
    }
}

fn numbers<S: Scalar>(potentials: Vec<Option<S>>, number: impl Fn(S) -> Number) -> Option<Vec<Option<Number>>> {
    Some(potentials.into_iter().map(|potential| potential.map(&number)).collect())
}

fn contact_potentials<S: Scalar>(islands: &Islands<S>, [inlet, outlet]: [ContactIdx; 2]) -> Option<Vec<Option<S>>> {
    let whole = islands.resistance([inlet, outlet], [inlet, outlet])?;
    let potential = |contact| islands.resistance([inlet, outlet], [contact, outlet]).map(|r: S| r / whole.clone());
    Some((0..islands.contacts()).map(|contact| potential(ContactIdx(contact))).collect())
}

fn all_expected<S: Scalar>(islands: &Islands<S>, setup: &Setup, readings: &[Reading]) -> Vec<Expected> {
    readings.iter().map(|reading| expected(islands, setup, reading)).collect()
}

fn expected<S: Scalar>(islands: &Islands<S>, setup: &Setup, reading: &Reading) -> Expected {
    let state = state(islands, setup, reading);
    let number: Option<Number> = match state {
        ReadingState::Fine => islands.resistance(reading.current, reading.voltage).map(S::into),
        ReadingState::NoPath | ReadingState::Floating => None,
    };
    let h_per_e2 = number.as_ref().map(Number::to_f64);
    let ohm = h_per_e2.map(|h_per_e2| h_per_e2 * KLITZING.value);
    Expected {
        reading: reading.clone(),
        state,
        exact: number.as_ref().and_then(Number::exact).cloned(),
        h_per_e2,
        ohm,
        shown_ohm: ohm,
        shown_quadrature_ohm: None,
        formula: None,
    }
}

/// The state of a reading is that of the device and its leads: no meter and no ground mends it.
fn put_shown(chip: &Chip, circuit: &Circuit, expected: &mut [Expected]) {
    let readings: Vec<Reading> = expected.iter().map(|expected| expected.reading.clone()).collect();
    for taking in takings(circuit, &readings) {
        let shown = shown(chip, circuit, &taking.taken);
        for (row, place) in taking.rows {
            let shown = shown[place].filter(|_| expected[row].state == ReadingState::Fine);
            expected[row].shown_ohm = shown.map(|shown| shown.ohm);
            expected[row].shown_quadrature_ohm = shown.and_then(|shown| shown.quadrature_ohm);
        }
    }
}

/// The budget of every shown value.
pub(super) fn budgets(conductance: &Conductance, setup: &Setup, expected: &[Expected]) -> Vec<Option<Budget>> {
    let mut budgets = vec![None; expected.len()];
    let Some(circuit) = &setup.circuit else { return budgets };
    let chip = Chip::of(conductance);
    let readings: Vec<Reading> = expected.iter().map(|expected| expected.reading.clone()).collect();
    for taking in takings(circuit, &readings) {
        for (row, place) in taking.rows.iter().filter(|(row, _)| expected[*row].shown_ohm.is_some()) {
            budgets[*row] = budget(&chip, circuit, &taking.taken, *place);
        }
    }
    budgets
}

/// The single corrections of every shown value.
pub(super) fn corrections(conductance: &Conductance, setup: &Setup, expected: &[Expected]) -> Vec<Vec<Correction>> {
    let mut found = vec![Vec::new(); expected.len()];
    let Some(circuit) = &setup.circuit else { return found };
    let chip = Chip::of(conductance);
    let readings: Vec<Reading> = expected.iter().map(|expected| expected.reading.clone()).collect();
    for taking in takings(circuit, &readings) {
        let mut of_taking = crate::circuit::corrections(&chip, circuit, &taking.taken);
        for (row, place) in taking.rows.iter().filter(|(row, _)| expected[*row].shown_ohm.is_some()) {
            found[*row] = std::mem::take(&mut of_taking[*place]);
        }
    }
    found
}

/// `no path` wins over `floating`; a contact that is open, or passes nothing, can carry no current and hold no voltage.
fn state<S: Scalar>(islands: &Islands<S>, setup: &Setup, reading: &Reading) -> ReadingState {
    let usable = |contact: ContactIdx| !setup.is_open(contact) && islands.passes(contact);
    let [inlet, outlet] = reading.current;
    if !usable(inlet) || !usable(outlet) || !islands.together(inlet, outlet) {
        return ReadingState::NoPath;
    }
    let held = |contact: ContactIdx| usable(contact) && islands.together(inlet, contact);
    if reading.voltage.into_iter().all(held) { ReadingState::Fine } else { ReadingState::Floating }
}
