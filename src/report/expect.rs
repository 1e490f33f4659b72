//! Expected readings as machine output and as a terminal table.

use serde::Serialize;

use crate::device::Device;
use crate::device::OperatingPoint;
use crate::quantity::KLITZING;
use crate::quantity::Polarity;
use crate::report::why;
use crate::report::why::WhyOutput;
use crate::resistance::Expected;
use crate::resistance::Prediction;
use crate::resistance::ReadingState;
use crate::resistance::Why;

/// One operating point at one polarity, solved.
#[derive(Clone, Debug)]
pub struct SolvedPoint<'a> {
    /// The operating point.
    pub point: &'a OperatingPoint,
    /// The polarity.
    pub polarity: Polarity,
    /// The solution, with the readings asked for.
    pub prediction: Prediction,
    /// The name of every reading, if it has one.
    pub names: Vec<Option<String>>,
    /// Why every reading is what it is, where that was asked for; else empty.
    pub why: Vec<Option<ReadingWhy>>,
}

/// Why a reading has its number.
#[derive(Clone, Debug)]
pub struct ReadingWhy {
    /// The explanation.
    pub why: Why,
    /// The same in sentences, with marks.
    pub sentences: Vec<String>,
}

/// The machine output of `expect`. Keys and their order are fixed; more may be added.
#[derive(Debug, Serialize)]
pub struct ExpectedOutput<'a> {
    format: u32,
    device: &'a str,
    klitzing_ohm: f64,
    points: Vec<PointOutput<'a>>,
    /// The wires of a bench, which the conductance matrices are without.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    links: Vec<LinkOutput<'a>>,
}

#[derive(Debug, Serialize)]
struct LinkOutput<'a> {
    from: &'a str,
    to: &'a str,
    ohm: f64,
}

#[derive(Debug, Serialize)]
struct PointOutput<'a> {
    name: &'a str,
    polarity: &'static str,
    contacts: Vec<&'a str>,
    conductance: Vec<Vec<String>>,
    readings: Vec<ReadingOutput<'a>>,
}

#[derive(Debug, Serialize)]
struct ReadingOutput<'a> {
    name: Option<&'a str>,
    current: [&'a str; 2],
    voltage: [&'a str; 2],
    exact: Option<String>,
    h_per_e2: Option<f64>,
    ohm: Option<f64>,
    shown_ohm: Option<f64>,
    shown_quadrature_ohm: Option<f64>,
    formula: Option<&'a str>,
    state: &'static str,
    #[serde(skip_serializing_if = "Option::is_none")]
    why: Option<WhyOutput>,
}

/// The machine output for a device and its solved points.
pub fn expected_output<'a>(device: &'a Device, solved: &'a [SolvedPoint<'a>]) -> ExpectedOutput<'a> {
    let points = solved.iter().map(|point| point_output(device, point)).collect();
    let name = |end: crate::device::ContactIdx| device.contacts[end.0].name.as_str();
    let links = device.bench.iter().flat_map(|bench| &bench.links);
    let links = links.map(|link| LinkOutput { from: name(link.ends[0]), to: name(link.ends[1]), ohm: link.ohm });
    ExpectedOutput { format: 1, device: &device.id, klitzing_ohm: KLITZING.value, points, links: links.collect() }
}

fn point_output<'a>(device: &'a Device, solved: &'a SolvedPoint<'a>) -> PointOutput<'a> {
    let readings = solved.prediction.expected.iter().zip(&solved.names).enumerate();
    let output = |(at, (expected, name)): (usize, (&'a Expected, &'a Option<String>))| {
        let found = solved.why.get(at).and_then(Option::as_ref);
        let why = found.map(|one| why::output(device, &one.why, why::plain(&one.sentences)));
        ReadingOutput { why, ..reading_output(device, expected, name.as_deref()) }
    };
    PointOutput {
        name: &solved.point.name,
        polarity: solved.polarity.sign(),
        contacts: device.contacts.iter().map(|contact| contact.name.as_str()).collect(),
        conductance: conductance_rows(&solved.prediction),
        readings: readings.map(output).collect(),
    }
}

/// The conductance matrix in e²/h, row by row.
pub fn conductance_rows(prediction: &Prediction) -> Vec<Vec<String>> {
    let conductance = &prediction.conductance;
    let contacts = conductance.contacts();
    let row = |row: usize| (0..contacts).map(|column| conductance.entry(row, column).to_string()).collect();
    (0..contacts).map(row).collect()
}

fn reading_output<'a>(device: &'a Device, expected: &'a Expected, name: Option<&'a str>) -> ReadingOutput<'a> {
    let names = |pair: [crate::device::ContactIdx; 2]| pair.map(|at| device.contacts[at.0].name.as_str());
    ReadingOutput {
        name,
        current: names(expected.reading.current),
        voltage: names(expected.reading.voltage),
        exact: expected.exact.as_ref().map(ToString::to_string),
        h_per_e2: expected.h_per_e2,
        ohm: expected.ohm,
        shown_ohm: expected.shown_ohm,
        shown_quadrature_ohm: expected.shown_quadrature_ohm,
        formula: expected.formula.as_deref(),
        state: state_words(expected.state),
        why: None,
    }
}

/// The words for a state, as machine output and tables have them.
pub fn state_words(state: ReadingState) -> &'static str {
    match state {
        ReadingState::Fine => "fine",
        ReadingState::NoPath => "no path",
        ReadingState::Floating => "floating",
    }
}
