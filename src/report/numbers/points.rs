//! The numbers of one operating point.

use schemars::JsonSchema;
use serde::Serialize;

use crate::circuit::Correction;
use crate::circuit::Part;
use crate::compare::Row;
use crate::device::ContactIdx;
use crate::device::Device;
use crate::device::Mixing;
use crate::device::OperatingPoint;
use crate::report::Beside;
use crate::report::PointSource;
use crate::report::Sources;
use crate::report::expect;
use crate::report::names;
use crate::report::numbers::Fillings;
use crate::report::numbers::measured;
use crate::report::numbers::measured::LoopNumbers;
use crate::report::numbers::measured::MeasuredNumbers;
use crate::report::numbers::measured::UncertaintyNumbers;
use crate::report::numbers::state_words;
use crate::report::numbers::whys;
use crate::report::numbers::whys::WhyNumbers;
use crate::resistance::Expected;
use crate::resistance::Prediction;

/// One operating point: a field magnitude and the fillings that it sets, solved at both polarities.
#[derive(Clone, Debug, PartialEq, Serialize, JsonSchema)]
pub struct PointNumbers {
    /// Name of the point.
    pub name: String,
    /// Magnitude of the field in T; null where none is given.
    #[serde(rename = "field_T")]
    pub field_t: Option<f64>,
    /// Filling of the ungated mesa, exact and signed.
    pub bulk: Option<String>,
    /// Fillings under gates and steps, exact and signed, by name; an overlap as `TG+BG`.
    pub fillings: Fillings,
    /// Mixing between channels that run side by side.
    pub mixing: MixingNumbers,
    /// The solutions, field toward first.
    pub polarities: Vec<PolarityNumbers>,
    /// Measured readings with what was expected of them, in the order of their table.
    pub measured: Vec<MeasuredNumbers>,
    /// Loops of measured voltages, which add up to what the meters' own currents leave.
    pub closure: Vec<LoopNumbers>,
}

/// Mixing between channels that run side by side.
#[derive(Clone, Debug, PartialEq, Serialize, JsonSchema)]
pub struct MixingNumbers {
    /// Along the rim.
    pub rim: MixingRule,
    /// Along borders between regions of one sign.
    pub interface: MixingRule,
    /// Along borders between opposite signs.
    pub opposite: MixingRule,
}

/// How far channels share their potentials.
#[derive(Clone, Debug, PartialEq, Serialize, JsonSchema)]
pub struct MixingRule {
    /// `none`, `full`, or `length`.
    pub kind: String,
    /// Length over which the departure from the mean falls to 1/e of itself, in µm; null unless the kind is `length`.
    pub length_um: Option<f64>,
}

/// The solution of one point at one polarity.
#[derive(Clone, Debug, PartialEq, Serialize, JsonSchema)]
pub struct PolarityNumbers {
    /// `+`: the field points out of the chip face, toward the reader; `-`: away.
    pub polarity: String,
    /// G[i][j] in e²/h, exact where they are fractions: current into the device at contact i per potential at contact j.
    pub conductance_e2_per_h: Vec<Vec<String>>,
    /// Expected readings, in the order asked.
    pub readings: Vec<ReadingNumbers>,
    /// For every region with a filling of its own but the bulk: the reading that shows it alone.
    pub alone: Vec<AloneNumbers>,
    /// Readings measured at the other polarity: what the same meters would show at this one.
    pub as_taken: Vec<AsTakenNumbers>,
    /// The first two-terminal reading with the uncertainty of what is expected of it; null where nothing is known of it.
    pub two_terminal: Option<TwoTerminalNumbers>,
}

/// What one reading should give. R_ij,kl = (V_k − V_l)/I with the current I in at i and out at j.
#[derive(Clone, Debug, PartialEq, Serialize, JsonSchema)]
pub struct ReadingNumbers {
    /// The name that the device file gives it, if any.
    pub name: Option<String>,
    /// Contacts at which the current enters and leaves.
    pub current: [String; 2],
    /// Contacts at the + and the − input of the meter.
    pub voltage: [String; 2],
    /// `fine`; `no path`: no current can flow; `floating`: a voltage contact is not held. Without `fine` there is no number.
    pub state: String,
    /// The device alone, exact, in h/e²; null where it is no fraction.
    pub exact: Option<String>,
    /// The device alone in h/e².
    pub h_per_e2: Option<f64>,
    /// The device alone in Ω.
    pub ohm: Option<f64>,
    /// What the first meter of the cooldown file shows, in Ω; the same as `ohm` without a cooldown.
    pub shown_ohm: Option<f64>,
    /// The part of it in quadrature in Ω, lagging negative; null at direct current.
    pub shown_quadrature_ohm: Option<f64>,
    /// Closed form in the fillings, in h/e²; null where there is none.
    pub formula: Option<String>,
    /// The device alone in Ω with the other mixing along the rim: full where none is in use, none where full is.
    pub other_mixing_ohm: Option<f64>,
    /// What each part of the circuit does alone.
    pub parts: Vec<PartNumbers>,
}

/// What one part of the circuit alone does to a shown value.
#[derive(Clone, Debug, PartialEq, Serialize, JsonSchema)]
pub struct PartNumbers {
    /// `source`, `lines`, `capacitance`, `contacts`, `meter input`, `gain` or `phase`.
    pub part: String,
    /// Shown with only this part real, minus ideal, in Ω.
    pub change_ohm: f64,
    /// The same in quadrature in Ω; null at direct current.
    pub change_quadrature_ohm: Option<f64>,
}

/// The reading that shows one region alone.
#[derive(Clone, Debug, PartialEq, Serialize, JsonSchema)]
pub struct AloneNumbers {
    /// Name of the region.
    pub region: String,
    /// The reading; null where none shows the region alone.
    pub reading: Option<ReadingNumbers>,
    /// Why it has its number; null without a reading.
    pub why: Option<WhyNumbers>,
}

/// A reading that was measured at the other polarity, as it was taken there.
#[derive(Clone, Debug, PartialEq, Serialize, JsonSchema)]
pub struct AsTakenNumbers {
    /// Contacts at which the current enters and leaves.
    pub current: [String; 2],
    /// Contacts at the + and the − input of the meter.
    pub voltage: [String; 2],
    /// The meter, as the cooldown file names it; null for the first.
    pub meter: Option<String>,
    /// What it would show in Ω; null where there is no number.
    pub shown_ohm: Option<f64>,
    /// The part of it in quadrature in Ω, lagging negative; null at direct current.
    pub shown_quadrature_ohm: Option<f64>,
}

/// A two-terminal reading with the uncertainty of what is expected of it.
#[derive(Clone, Debug, PartialEq, Serialize, JsonSchema)]
pub struct TwoTerminalNumbers {
    /// The reading.
    pub reading: ReadingNumbers,
    /// The uncertainty of its shown value.
    pub uncertainty: UncertaintyNumbers,
}

pub(super) fn point(sources: &Sources, (index, point): (usize, &PointSource)) -> PointNumbers {
    let device = sources.device;
    let rows: &[Row] = sources.comparison.map_or(&[], |comparison| &comparison.rows);
    let here = rows.iter().zip(sources.rows).filter(|(row, _)| row.measured.point == index);
    let rule = &point.point.edge;
    PointNumbers {
        name: point.point.name.clone(),
        field_t: point.point.field_t,
        bulk: Some(point.point.bulk.to_string()),
        fillings: fillings(device, point.point),
        mixing: MixingNumbers {
            rim: mixing(&rule.rim),
            interface: mixing(&rule.interface),
            opposite: mixing(&rule.opposite),
        },
        polarities: vec![
            polarity(sources, point, ("+", point.toward, point.beside[0])),
            polarity(sources, point, ("-", point.away, point.beside[1])),
        ],
        measured: here.map(|row| measured::measured(sources, row)).collect(),
        closure: measured::loops(device, rows, index),
    }
}

fn as_taken(sources: &Sources, beside: &Beside) -> Vec<AsTakenNumbers> {
    let meter = |at: usize| Some(sources.cooldown?.meters.get(at)?.name.clone());
    let one = |expected: &Expected| AsTakenNumbers {
        current: contact_names(sources.device, expected.reading.current),
        voltage: contact_names(sources.device, expected.reading.voltage),
        meter: expected.reading.meter.and_then(meter),
        shown_ohm: expected.shown_ohm,
        shown_quadrature_ohm: expected.shown_quadrature_ohm,
    };
    beside.as_taken.iter().map(one).collect()
}

fn mixing(rule: &Mixing) -> MixingRule {
    let (kind, length_um) = match rule {
        Mixing::None => ("none", None),
        Mixing::Full => ("full", None),
        Mixing::Over(length) => ("length", Some(length.to_um())),
    };
    MixingRule { kind: kind.to_owned(), length_um }
}

fn fillings(device: &Device, point: &OperatingPoint) -> Fillings {
    let named = point.fillings.iter().map(|(cover, value)| {
        let names: Vec<&str> =
            cover.iter().filter_map(|overlay| device.overlays.get(overlay.0)).map(|o| o.name.as_str()).collect();
        (names.join("+"), value.to_string())
    });
    named.collect()
}

fn polarity(
    sources: &Sources,
    point: &PointSource,
    (sign, solution, beside): (&str, &Prediction, &Beside),
) -> PolarityNumbers {
    let device = sources.device;
    let other = if point.point.edge.rim == Mixing::Full { &beside.unmixed } else { &beside.mixed };
    let named = solution.expected.iter().enumerate();
    let readings = named.map(|(at, expected)| ReadingNumbers {
        name: point.names.get(at).cloned().flatten(),
        other_mixing_ohm: other.get(at).and_then(|other| other.ohm),
        parts: beside.corrections.get(at).map_or_else(Vec::new, |found| parts(found)),
        ..reading(device, expected)
    });
    PolarityNumbers {
        polarity: sign.to_owned(),
        conductance_e2_per_h: expect::conductance_rows(solution),
        readings: readings.collect(),
        alone: beside
            .isolated
            .iter()
            .map(|region| AloneNumbers {
                region: region.name.clone(),
                reading: region.best.as_ref().map(|best| reading(device, best)),
                why: region.best.as_ref().zip(region.why.as_ref()).and_then(|(best, why)| whys::why(device, best, why)),
            })
            .collect(),
        as_taken: as_taken(sources, beside),
        two_terminal: beside.two_terminal.as_ref().map(|(expected, budget)| TwoTerminalNumbers {
            reading: reading(device, expected),
            uncertainty: measured::uncertainty(sources, budget),
        }),
    }
}

pub(super) fn contact_names(device: &Device, pair: [ContactIdx; 2]) -> [String; 2] {
    pair.map(|contact| names::contact_name(device, contact).to_owned())
}

fn reading(device: &Device, expected: &Expected) -> ReadingNumbers {
    ReadingNumbers {
        name: None,
        current: contact_names(device, expected.reading.current),
        voltage: contact_names(device, expected.reading.voltage),
        state: state_words(expected.state).to_owned(),
        exact: expected.exact.as_ref().map(ToString::to_string),
        h_per_e2: expected.h_per_e2,
        ohm: expected.ohm,
        shown_ohm: expected.shown_ohm,
        shown_quadrature_ohm: expected.shown_quadrature_ohm,
        formula: expected.formula.clone(),
        other_mixing_ohm: None,
        parts: Vec::new(),
    }
}

pub(super) fn parts(found: &[Correction]) -> Vec<PartNumbers> {
    let part = |one: &Correction| PartNumbers {
        part: part_word(one.part).to_owned(),
        change_ohm: one.change.ohm,
        change_quadrature_ohm: one.change.quadrature_ohm,
    };
    found.iter().map(part).collect()
}

fn part_word(part: Part) -> &'static str {
    match part {
        Part::Source => "source",
        Part::Lines => "lines",
        Part::Capacitance => "capacitance",
        Part::MeterInput => "meter input",
        Part::Gain => "gain",
        Part::Phase => "phase",
        Part::Contacts => "contacts",
    }
}
