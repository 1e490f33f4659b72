//! Readings: what every pair of leads should show.
//!
//! Owns: [`predict`], the one way to numbers, the state of a reading and the potentials that drawings show. Takes a
//! `Network`, a [`Setup`] and readings; gives [`Prediction`]. Must never see a layout or data.

use crate::circuit::Budget;
use crate::circuit::Circuit;
use crate::circuit::Correction;
use crate::conductance::Conductance;
use crate::device::ContactIdx;
use crate::network::Channels;
use crate::network::Operating;
use crate::number::Number;
use crate::number::Rational;

mod closed_form;
mod islands;
mod isolate;
mod nodes;
mod predict;
mod reading_set;
mod taking;
mod why;

pub use closed_form::ClosedForm;
pub use closed_form::ClosedForms;
pub use closed_form::FillingRegion;
pub use closed_form::RegionKind;
pub use closed_form::filling_regions;
pub use isolate::Candidates;
pub use isolate::Isolating;
pub use isolate::isolating;
pub use predict::predict;
pub use reading_set::every_reading;
pub use reading_set::readings_with;
pub use reading_set::standard_readings;
pub use taking::Taking;
pub use taking::takings;
pub use why::Arrival;
pub use why::CurrentBalance;
pub use why::Explanation;
pub use why::MixturePlace;
pub use why::NoNumber;
pub use why::Origin;
pub use why::Strand;
pub use why::Stretch;
pub use why::Why;
pub use why::WhyStep;
pub use why::why;

/// All that physics sees.
#[derive(Clone, Debug, PartialEq)]
pub struct Setup {
    /// Fillings, mixing, transmissions, polarity.
    pub operating: Operating,
    /// The circuit around the device with the states of its contacts; none means ideal meters on live contacts.
    pub circuit: Option<Circuit>,
}

impl Setup {
    /// Whether the lead of a contact is broken (the contact still equilibrates).
    pub fn is_open(&self, contact: ContactIdx) -> bool {
        self.circuit.as_ref().is_some_and(|circuit| circuit.is_open(contact))
    }
}

/// A reading: current leads and voltage leads, and with what it is taken.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Reading {
    /// Current in at the first, out at the second.
    pub current: [ContactIdx; 2],
    /// The meter's + input on the first.
    pub voltage: [ContactIdx; 2],
    /// Which meter of the cooldown file; none means the first, if there is one.
    pub meter: Option<usize>,
    /// Readings with one set number were taken with all their meters connected; without one it was taken alone.
    pub set: Option<usize>,
}

impl Reading {
    /// A reading taken alone with the first meter.
    pub fn new(current: [ContactIdx; 2], voltage: [ContactIdx; 2]) -> Self {
        Self { current, voltage, meter: None, set: None }
    }
}

/// Whether a reading has a number.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum ReadingState {
    /// It has.
    Fine,
    /// No current can flow between the current contacts.
    NoPath,
    /// A voltage contact is not held by the current path.
    Floating,
}

/// What a reading should give.
#[derive(Clone, Debug, PartialEq)]
pub struct Expected {
    /// The reading.
    pub reading: Reading,
    /// Its state; all numbers are none unless it is fine.
    pub state: ReadingState,
    /// Resistance in h/e², exact; none where it has no number or that is a float.
    pub exact: Option<Rational>,
    /// The same as a float, which it has wherever it has a number.
    pub h_per_e2: Option<f64>,
    /// The same in Ω.
    pub ohm: Option<f64>,
    /// What the meter shows, in Ω; `ohm` where there is no circuit, none where no current is there to divide by.
    pub shown_ohm: Option<f64>,
    /// The part of it in quadrature, in Ω, where a frequency is given.
    pub shown_quadrature_ohm: Option<f64>,
    /// Closed form in the fillings, where there is one.
    pub formula: Option<String>,
}

impl Expected {
    /// Its value in h/e², exact where it is.
    pub fn number(&self) -> Option<Number> {
        self.exact.clone().map(Number::Exact).or(self.h_per_e2.map(Number::Float))
    }
}

/// The solution of one setup with all readings asked for.
#[derive(Clone, Debug, PartialEq)]
pub struct Prediction {
    /// The channels that were solved; drawings draw these.
    pub channels: Channels,
    /// The device seen from its contacts.
    pub conductance: Conductance,
    /// One answer per reading, in the order asked.
    pub expected: Vec<Expected>,
}

impl Prediction {
    /// Potential of every bundle with current leads `current`, scaled so that the inlet is at 1 and the outlet at 0;
    /// none where nothing fixes it. None altogether when there is no path between them.
    pub fn bundle_potentials(&self, current: [ContactIdx; 2]) -> Option<Vec<Option<Number>>> {
        predict::bundle_potentials(&self.conductance, current)
    }

    /// Potential of every contact with current leads `current`, on the same scale; none where nothing fixes it. None
    /// altogether when there is no path between them.
    pub fn contact_potentials(&self, current: [ContactIdx; 2]) -> Option<Vec<Option<Number>>> {
        predict::contact_numbers(&self.conductance, current)
    }

    /// Puts the closed form beside every reading that has a number and a form.
    pub fn put_closed_forms(&mut self, forms: &ClosedForms) {
        let fine = |expected: &&mut Expected| expected.state == ReadingState::Fine;
        let readings: Vec<&Reading> =
            self.expected.iter().filter(|e| e.state == ReadingState::Fine).map(|e| &e.reading).collect();
        let found = forms.forms(&readings, self.conductance.contacts());
        for (expected, form) in self.expected.iter_mut().filter(fine).zip(found) {
            expected.formula = form.map(|form| forms.words(&form));
        }
    }

    /// What is known of the uncertainty of every shown value, in the order of the readings; none where nothing is shown
    /// or no circuit is given.
    pub fn budgets(&self, setup: &Setup) -> Vec<Option<Budget>> {
        predict::budgets(&self.conductance, setup, &self.expected)
    }

    /// What each part of the circuit alone does to every shown value, in the order of the readings; empty where nothing
    /// is shown or no circuit is given.
    pub fn corrections(&self, setup: &Setup) -> Vec<Vec<Correction>> {
        predict::corrections(&self.conductance, setup, &self.expected)
    }
}
