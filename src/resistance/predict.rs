//! The one way to numbers: from a setup to every reading.

use crate::circuit::Budget;
use crate::circuit::Chip;
use crate::circuit::Circuit;
use crate::circuit::Correction;
use crate::circuit::budget;
use crate::circuit::shown;
use crate::conductance::Conductance;
use crate::conductance::conductance;
use crate::device::ContactIdx;
use crate::network::Network;
use crate::network::channels;
use crate::number::Rational;
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
    let islands = Islands::of(&conductance);
    let mut expected: Vec<Expected> = readings.iter().map(|reading| expected(&islands, setup, reading)).collect();
    if let Some(circuit) = &setup.circuit {
        put_shown(&Chip::of(&conductance), circuit, &mut expected);
    }
    Prediction { channels, conductance, expected }
}

/// Potential of every bundle with the inlet at 1 and the outlet at 0.
pub(super) fn bundle_potentials(conductance: &Conductance, current: [ContactIdx; 2]) -> Option<Vec<Option<Rational>>> {
    let potentials = contact_potentials(&Islands::of(conductance), current)?;
    let mean = |share: &Vec<(usize, Rational)>| {
        share.iter().map(|(contact, part)| potentials[*contact].as_ref().map(|v| part * v)).sum::<Option<Rational>>()
    };
    Some(conductance.shares.iter().map(|share| share.as_ref().and_then(mean)).collect())
}

fn contact_potentials(islands: &Islands, [inlet, outlet]: [ContactIdx; 2]) -> Option<Vec<Option<Rational>>> {
    let whole = islands.resistance([inlet, outlet], [inlet, outlet])?;
    let potential = |contact| islands.resistance([inlet, outlet], [contact, outlet]).map(|r| &r / &whole);
    Some((0..islands.contacts()).map(|contact| potential(ContactIdx(contact))).collect())
}

fn expected(islands: &Islands, setup: &Setup, reading: &Reading) -> Expected {
    let state = state(islands, setup, reading);
    let exact = match state {
        ReadingState::Fine => islands.resistance(reading.current, reading.voltage),
        ReadingState::NoPath | ReadingState::Floating => None,
    };
    let ohm = exact.as_ref().map(|exact| exact.to_f64() * KLITZING.value);
    Expected { reading: reading.clone(), state, exact, ohm, shown_ohm: ohm, shown_quadrature_ohm: None, formula: None }
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
fn state(islands: &Islands, setup: &Setup, reading: &Reading) -> ReadingState {
    let usable = |contact: ContactIdx| !setup.is_open(contact) && islands.passes(contact);
    let [inlet, outlet] = reading.current;
    if !usable(inlet) || !usable(outlet) || !islands.together(inlet, outlet) {
        return ReadingState::NoPath;
    }
    let held = |contact: ContactIdx| usable(contact) && islands.together(inlet, contact);
    if reading.voltage.into_iter().all(held) { ReadingState::Fine } else { ReadingState::Floating }
}
