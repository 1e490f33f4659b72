//! What the meters show.

use nalgebra::Complex;

use crate::circuit::Chip;
use crate::circuit::Circuit;
use crate::circuit::Connection;
use crate::circuit::Taken;
use crate::circuit::solution::Solution;
use crate::cooldown::Meter;
use crate::quantity::KLITZING;

/// What one meter shows, divided by the current.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Shown {
    /// The part in phase with the current, in Ω.
    pub ohm: f64,
    /// The part in quadrature, lagging negative, in Ω; none at dc.
    pub quadrature_ohm: Option<f64>,
}

/// What every connection of `taken` shows, in its order; none for a meter on a node that hangs free, and for all where no
/// current enters or none is there to divide by.
///
/// Shown = gain × e^{−iφ} × (W_k − W_l)/I, with the potentials W of the rack nodes; at dc there is no phase.
pub fn shown(chip: &Chip, circuit: &Circuit, taken: &Taken) -> Vec<Option<Shown>> {
    let solution = Solution::of(chip, circuit, taken);
    let one = |connection| one(circuit, solution.as_ref()?, connection);
    taken.connections.iter().map(one).collect()
}

pub(super) fn one(circuit: &Circuit, solution: &Solution, connection: &Connection) -> Option<Shown> {
    let [plus, minus] = connection.voltage.map(|contact| solution.rack[contact.0]);
    let ratio = (plus? - minus?) * solution.over_divisor(circuit)? * KLITZING.value;
    let value = ratio * response(circuit.meter(connection.meter), circuit.frequency_hz);
    // Adding 0 turns −0 into 0.
    let ohm = value.re + 0.0;
    let quadrature_ohm = circuit.frequency_hz.map(|_| value.im + 0.0);
    value.is_finite().then_some(Shown { ohm, quadrature_ohm })
}

/// gain × e^{−iφ}.
fn response(meter: Option<&Meter>, frequency_hz: Option<f64>) -> Complex<f64> {
    let Some(meter) = meter else { return Complex::ONE };
    let phase = frequency_hz.map_or(Complex::ONE, |_| turned_back(meter.phase_deg));
    phase * meter.gain
}

/// e^{−iφ}, exact at every multiple of 90°: a meter set a quarter turn off shows no stray part of the other phase.
fn turned_back(phase_deg: f64) -> Complex<f64> {
    let quarters = libm::round(phase_deg / 90.0);
    let (sin, cos) = libm::sincos((phase_deg - 90.0 * quarters).to_radians());
    let rest = Complex::new(cos, -sin);
    match quarters.rem_euclid(4.0) {
        1.0 => rest * -Complex::I,
        2.0 => -rest,
        3.0 => rest * Complex::I,
        _ => rest,
    }
}
