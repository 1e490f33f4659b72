//! The single effects of the circuit, each alone, so that a user sees which one matters.

use crate::circuit::Chip;
use crate::circuit::Circuit;
use crate::circuit::Line;
use crate::circuit::Shown;
use crate::circuit::Taken;
use crate::circuit::shown;
use crate::cooldown::Meter;
use crate::cooldown::MeterInput;

/// One part of the circuit.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Part {
    /// Series resistor, ammeter and the current that divides.
    Source,
    /// Resistance of the lines.
    Lines,
    /// Capacitance of the lines.
    Capacitance,
    /// Input resistance of the meters.
    MeterInput,
    /// Gain of the meters.
    Gain,
    /// Phase of the meters.
    Phase,
    /// Contacts that are open, grounded or joined.
    Contacts,
}

impl Part {
    /// All parts, from the source to the meter.
    pub const ALL: [Self; 7] =
        [Self::Source, Self::Lines, Self::Capacitance, Self::Contacts, Self::MeterInput, Self::Gain, Self::Phase];
}

/// What one part alone does to a reading.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Correction {
    /// Which part.
    pub part: Part,
    /// Shown with only this part real, minus ideal.
    pub change: Shown,
}

/// For every connection of `taken`, in its order, the change that each part makes alone; parts that the circuit does not
/// have, and connections that show nothing, are left out. The changes do not add up to the whole: effects multiply.
pub fn corrections(chip: &Chip, circuit: &Circuit, taken: &Taken) -> Vec<Vec<Correction>> {
    let bare = bare(circuit);
    let ideal = shown(chip, &bare, taken);
    let mut found = vec![Vec::new(); taken.connections.len()];
    for part in Part::ALL {
        let only = with_part(&bare, circuit, part);
        if only == bare {
            continue;
        }
        for (row, (real, ideal)) in shown(chip, &only, taken).iter().zip(&ideal).enumerate() {
            found[row].extend(difference(*real, *ideal).map(|change| Correction { part, change }));
        }
    }
    found
}

fn difference(real: Option<Shown>, ideal: Option<Shown>) -> Option<Shown> {
    let (real, ideal) = (real?, ideal?);
    let quadrature_ohm = real.quadrature_ohm.zip(ideal.quadrature_ohm).map(|(real, ideal)| real - ideal);
    Some(Shown { ohm: real.ohm - ideal.ohm, quadrature_ohm })
}

/// As many ideal meters as the circuit has, at its frequency.
fn bare(circuit: &Circuit) -> Circuit {
    let meters = circuit.meters.iter().map(ideal_meter).collect();
    Circuit { meters, frequency_hz: circuit.frequency_hz, ..Circuit::ideal(circuit.lines.len()) }
}

fn ideal_meter(meter: &Meter) -> Meter {
    let name = meter.name.clone();
    Meter { name, input_ohm: None, input: MeterInput::Across, gain: 1.0, u_gain: None, phase_deg: 0.0 }
}

fn with_part(bare: &Circuit, circuit: &Circuit, part: Part) -> Circuit {
    let mut only = bare.clone();
    match part {
        Part::Source => {
            (only.drive, only.divisor) = (circuit.drive, circuit.divisor);
            only.ammeter_ohm = circuit.ammeter_ohm;
        }
        Part::Lines => {
            only.lines = circuit.lines.iter().map(|line| Line { ohm: line.ohm, ..Line::default() }).collect();
        }
        Part::Capacitance if circuit.frequency_hz.is_some() => {
            let line = |line: &Line| Line { capacitance_farad: line.capacitance_farad, ..Line::default() };
            only.lines = circuit.lines.iter().map(line).collect();
        }
        Part::Contacts => {
            only.states.clone_from(&circuit.states);
            only.joins.clone_from(&circuit.joins);
        }
        Part::MeterInput => each_meter(&mut only, circuit, |only, real| {
            (only.input_ohm, only.input) = (real.input_ohm, real.input);
        }),
        Part::Gain => each_meter(&mut only, circuit, |only, real| only.gain = real.gain),
        Part::Phase if circuit.frequency_hz.is_some() => {
            each_meter(&mut only, circuit, |only, real| only.phase_deg = real.phase_deg);
        }
        // Neither acts at dc.
        Part::Capacitance | Part::Phase => {}
    }
    only
}

fn each_meter(only: &mut Circuit, circuit: &Circuit, set: impl Fn(&mut Meter, &Meter)) {
    only.meters.iter_mut().zip(&circuit.meters).for_each(|(only, real)| set(only, real));
}
