//! Everything around the device as one linear circuit: what a meter shows.
//!
//! Owns: [`Circuit`] (lines, meters, source, states and joins, made once from a cooldown) and [`shown`], with its single
//! [`corrections`] and the uncertainty [`budget`] of what is expected. Takes the [`Chip`] (the device's conductance
//! matrix) and what was connected at the same time ([`Taken`]); gives resistances in Ω. Must never contain geometry, nor
//! decide whether a reading has a number: that is the state of a reading, which no meter and no ground mends.

use crate::cooldown::ContactState;
use crate::cooldown::Cooldown;
use crate::cooldown::CurrentDivisor;
use crate::cooldown::Excitation;
use crate::cooldown::Meter;
use crate::device::ContactIdx;

mod budget;
mod chip;
mod corrections;
mod equations;
mod links;
mod loads;
mod shown;
mod solution;
mod unknowns;

pub use budget::Budget;
pub use budget::BudgetTerm;
pub use budget::Cause;
pub use budget::budget;
pub use chip::Chip;
pub use corrections::Correction;
pub use corrections::Part;
pub use corrections::corrections;
pub use links::links;
pub use shown::Shown;
pub use shown::shown;

/// The circuit around a device, in SI units. All lists run in the order of the device file unless they say otherwise.
#[derive(Clone, Debug, PartialEq)]
pub struct Circuit {
    /// The line of every contact.
    pub lines: Vec<Line>,
    /// The state of every contact.
    pub states: Vec<ContactState>,
    /// Contacts that share one potential on the chip.
    pub joins: Vec<Vec<ContactIdx>>,
    /// The meters, in the order of the cooldown file; the first is meant where a connection names none.
    pub meters: Vec<Meter>,
    /// What drives the current.
    pub drive: Drive,
    /// Which current a shown resistance is divided by.
    pub divisor: CurrentDivisor,
    /// Standard uncertainty of that current in A.
    pub u_current_ampere: Option<f64>,
    /// Between the outlet's rack node and ground, in Ω.
    pub ammeter_ohm: f64,
    /// Frequency in Hz; none at dc.
    pub frequency_hz: Option<f64>,
}

/// Wire and filter from a contact to its rack node.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Line {
    /// Resistance in Ω; 0 is as good as any other value.
    pub ohm: f64,
    /// Its standard uncertainty in Ω.
    pub u_ohm: Option<f64>,
    /// Capacitance from the rack node to ground in F.
    pub capacitance_farad: f64,
}

/// What drives the current into the rack node of the inlet.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Drive {
    /// An ideal current, in A where it is stated.
    Current {
        /// The current.
        ampere: Option<f64>,
    },
    /// A voltage through a series resistor.
    Voltage {
        /// The voltage in V.
        volt: f64,
        /// The resistor in Ω; at 0 only a measured current can divide.
        series_ohm: f64,
    },
}

/// What was connected at the same time.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Taken {
    /// Current in at the first, out at the second.
    pub current: [ContactIdx; 2],
    /// Every meter that hung on the device: one for a reading taken alone, all rows of a set otherwise.
    pub connections: Vec<Connection>,
}

/// One meter on two rack nodes.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Connection {
    /// The meter's + input on the first.
    pub voltage: [ContactIdx; 2],
    /// Place of its kind in [`Circuit::meters`]; none means the first, if there is one.
    pub meter: Option<usize>,
}

impl Circuit {
    /// The circuit that a cooldown file describes; its uncertainties, divided by the coverage factor, are standard ones.
    pub fn of(cooldown: &Cooldown) -> Self {
        let source = &cooldown.source;
        let standard = |stated: f64| cooldown.standard(stated);
        let meter = |meter: &Meter| Meter { u_gain: meter.u_gain.map(standard), ..meter.clone() };
        Self {
            lines: lines(cooldown),
            states: cooldown.states.clone(),
            joins: cooldown.joins.clone(),
            meters: cooldown.meters.iter().map(meter).collect(),
            drive: drive(source),
            divisor: source.divisor,
            u_current_ampere: source.u_current_na.map(|u| standard(u) * 1e-9),
            ammeter_ohm: source.ammeter_ohm.unwrap_or(0.0),
            frequency_hz: source.frequency_hz,
        }
    }

    /// Ideal current, ideal meters, no lines: every reading shows the device itself.
    pub fn ideal(contacts: usize) -> Self {
        Self {
            lines: vec![Line::default(); contacts],
            states: vec![ContactState::Live; contacts],
            joins: Vec::new(),
            meters: Vec::new(),
            drive: Drive::Current { ampere: None },
            divisor: CurrentDivisor::Nominal,
            u_current_ampere: None,
            ammeter_ohm: 0.0,
            frequency_hz: None,
        }
    }

    /// Whether the lead of a contact is broken.
    pub fn is_open(&self, contact: ContactIdx) -> bool {
        self.states[contact.0] == ContactState::Open
    }

    /// The kind of meter that is meant; none is an ideal one.
    pub fn meter(&self, named: Option<usize>) -> Option<&Meter> {
        self.meters.get(named.unwrap_or(0))
    }

    /// Whether a current flows into that meter.
    pub fn draws(&self, named: Option<usize>) -> bool {
        self.meter(named).is_some_and(|meter| meter.input_ohm.is_some())
    }
}

fn lines(cooldown: &Cooldown) -> Vec<Line> {
    let mut lines = vec![Line::default(); cooldown.states.len()];
    for line in &cooldown.lines {
        let capacitance_farad = line.capacitance_nf.unwrap_or(0.0) * 1e-9;
        let u_ohm = line.u_ohm.map(|stated| cooldown.standard(stated));
        lines[line.contact.0] = Line { ohm: line.ohm, u_ohm, capacitance_farad };
    }
    lines
}

fn drive(source: &Excitation) -> Drive {
    match (source.current_na, source.voltage_v) {
        (None, Some(volt)) => Drive::Voltage { volt, series_ohm: source.series_ohm.unwrap_or(0.0) },
        (current_na, _) => Drive::Current { ampere: current_na.map(|current| current * 1e-9) },
    }
}
