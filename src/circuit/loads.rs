//! What draws current from the rack nodes: meter inputs and capacitances.

use core::f64::consts::TAU;

use nalgebra::Complex;

use crate::circuit::Circuit;
use crate::circuit::Connection;
use crate::circuit::Taken;
use crate::cooldown::MeterInput;
use crate::quantity::KLITZING;

/// One admittance between a rack node and another, or the ground.
pub(super) struct Load {
    pub from: usize,
    /// None is the ground.
    pub to: Option<usize>,
    /// In e²/h.
    pub admittance: Complex<f64>,
}

/// All loads of one circuit, none of them zero.
pub(super) fn loads(circuit: &Circuit, taken: &Taken) -> Vec<Load> {
    let meters = taken.connections.iter().flat_map(|connection| meter_loads(circuit, connection));
    meters.chain(capacitances(circuit)).collect()
}

fn meter_loads(circuit: &Circuit, connection: &Connection) -> Vec<Load> {
    let meter = circuit.meter(connection.meter);
    let Some((meter, ohm)) = meter.and_then(|meter| Some((meter, meter.input_ohm?))) else { return Vec::new() };
    let admittance = Complex::from(KLITZING.value / ohm);
    let [plus, minus] = connection.voltage.map(|contact| contact.0);
    match meter.input {
        MeterInput::Across => vec![Load { from: plus, to: Some(minus), admittance }],
        MeterInput::Ground => [plus, minus].map(|from| Load { from, to: None, admittance }).into(),
    }
}

/// Y = iωC with the time factor e^{+iωt}.
fn capacitances(circuit: &Circuit) -> impl Iterator<Item = Load> {
    let omega = TAU * circuit.frequency_hz.unwrap_or(0.0);
    let susceptance = move |farad: f64| omega * farad * KLITZING.value;
    let lines = circuit.lines.iter().enumerate();
    lines
        .map(move |(from, line)| (from, susceptance(line.capacitance_farad)))
        .filter(|(_, part)| *part != 0.0)
        .map(|(from, susceptance)| Load { from, to: None, admittance: Complex::new(0.0, susceptance) })
}
