//! Devices by hand, and the circuit around them in short words.

use edgesheet::circuit::Chip;
use edgesheet::circuit::Circuit;
use edgesheet::circuit::Connection;
use edgesheet::circuit::Drive;
use edgesheet::circuit::Shown;
use edgesheet::circuit::Taken;
use edgesheet::conductance::Conductance;
use edgesheet::conductance::Solved;
use edgesheet::cooldown::Meter;
use edgesheet::cooldown::MeterInput;
use edgesheet::device::ContactIdx;
use edgesheet::number::Matrix;
use edgesheet::number::Rational;
use edgesheet::quantity::Polarity;

/// One rim with six contacts, numbered clockwise as on the six-contact bar. At `+` electrons run clockwise, so that a
/// contact is fed by the one before it: G = ν on the diagonal, −ν from the feeding contact (M. Büttiker, Phys. Rev. B 38,
/// 9375 (1988); value from memory).
pub fn bar(filling: i64, polarity: Polarity) -> Conductance {
    let feeding = |contact: usize| match polarity {
        Polarity::Toward => (contact + 5) % 6,
        Polarity::Away => (contact + 1) % 6,
    };
    let mut matrix = Matrix::zero(6, 6);
    for contact in 0..6 {
        matrix[(contact, contact)] = Rational::from(filling);
        matrix[(contact, feeding(contact))] = Rational::from(-filling);
    }
    Conductance::Exact(Solved { matrix, shares: Vec::new(), links: Vec::new() })
}

/// A circuit with nothing in it.
pub fn ideal() -> Circuit {
    Circuit::ideal(6)
}

/// A meter of unit gain.
pub fn meter(input: MeterInput, input_ohm: f64) -> Meter {
    Meter { name: "A".into(), input_ohm: Some(input_ohm), input, gain: 1.0, u_gain: None, phase_deg: 0.0 }
}

/// The ideal circuit with one kind of meter.
pub fn metered(input: MeterInput, input_ohm: f64) -> Circuit {
    Circuit { meters: vec![meter(input, input_ohm)], ..ideal() }
}

/// The ideal circuit with a voltage of 1 V behind a resistor.
pub fn through(series_ohm: f64) -> Circuit {
    Circuit { drive: Drive::Voltage { volt: 1.0, series_ohm }, ..ideal() }
}

/// The circuit with a line at a contact, named as on the bar from 1.
pub fn with_line(mut circuit: Circuit, name: usize, ohm: f64) -> Circuit {
    circuit.lines[name - 1].ohm = ohm;
    circuit
}

/// `14,26 35`: the current pair, then every voltage pair connected at the same time.
pub fn taken(text: &str) -> Taken {
    let pair = |text: &str| {
        let names: Vec<usize> = text.bytes().map(|name| usize::from(name - b'1')).collect();
        [ContactIdx(names[0]), ContactIdx(names[1])]
    };
    let (current, voltages) = text.split_once(',').expect("a comma");
    let connection = |voltage| Connection { voltage: pair(voltage), meter: None };
    Taken { current: pair(current), connections: voltages.split(' ').map(connection).collect() }
}

/// What the first meter of `taken` shows; none where it shows nothing.
pub fn first(conductance: &Conductance, circuit: &Circuit, reading: &str) -> Option<Shown> {
    edgesheet::circuit::shown(&Chip::of(conductance), circuit, &taken(reading)).remove(0)
}

/// Its part in phase, in Ω.
pub fn ohm(conductance: &Conductance, circuit: &Circuit, reading: &str) -> f64 {
    first(conductance, circuit, reading).unwrap_or_else(|| panic!("{reading} shows nothing")).ohm
}

/// Asserts that two values are equal to `relative` of the larger, or both below 1e-11.
pub fn near(value: f64, expected: f64, relative: f64) {
    let allowed = (relative * expected.abs()).max(1e-11);
    assert!((value - expected).abs() <= allowed, "{value} is not {expected}");
}
