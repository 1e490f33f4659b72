//! The wires between the devices of a bench.

use crate::conductance::Link;
use crate::device::Device;
use crate::number::Number;
use crate::number::Rational;
use crate::quantity::KLITZING;

/// The wires of a bench in h/e²; a device by itself has none. A wire of 0 Ω stays exact.
pub fn links(device: &Device) -> Vec<Link<Number>> {
    let resistance = |ohm: f64| if ohm == 0.0 { Rational::ZERO.into() } else { Number::Float(ohm / KLITZING.value) };
    let links = device.bench.iter().flat_map(|bench| &bench.links);
    links.map(|link| Link { ends: link.ends, resistance: resistance(link.ohm) }).collect()
}
