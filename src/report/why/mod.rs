//! Why a reading has its number, in numbered sentences.

mod names;
mod output;
mod phrases;
mod short;
mod text;

pub use names::names;
pub use output::WhyOutput;
pub use output::output;
pub use short::short;
pub use text::plain;
pub use text::text;

use serde::Serialize;

use crate::device::Device;
use crate::device::Drive;
use crate::device::OperatingPoint;
use crate::diagnostic::Diagnostic;
use crate::network::Network;
use crate::number::Number;
use crate::quantity::Polarity;
use crate::report::Printed;
use crate::report::Texts;
use crate::report::names::reading_name;
use crate::report::why::phrases::Phrases;
use crate::report::why::phrases::number;
use crate::resistance::Arrival;
use crate::resistance::CurrentBalance;
use crate::resistance::Expected;
use crate::resistance::Explanation;
use crate::resistance::NoNumber;
use crate::resistance::Origin;
use crate::resistance::Stretch;
use crate::resistance::Why;
use crate::resistance::WhyStep;

/// What is explained, and where.
#[derive(Clone, Copy)]
pub struct WhySource<'a> {
    /// The device.
    pub device: &'a Device,
    /// Its network, for the names of borders.
    pub network: &'a Network,
    /// The operating point.
    pub point: &'a OperatingPoint,
    /// The polarity.
    pub polarity: Polarity,
}

/// One sentence per step, the number last. Names carry marks.
pub fn sentences(source: WhySource, expected: &Expected, why: &Why, texts: &Texts) -> Result<Vec<String>, Diagnostic> {
    texts.lines("reading-why.txt", &fields(source, expected, why))
}

/// Steps follow channels alone, so they are not told across wires.
pub fn needs_no_wires(device: &Device) -> Result<(), Diagnostic> {
    if device.bench.as_ref().is_none_or(|bench| bench.links.is_empty()) {
        return Ok(());
    }
    let message = "`--why` follows channels, and on this bench wires join the devices";
    Err(Diagnostic::fault("why-across-wires", message).hint("ask it of a device's own file, or leave `--why` out"))
}

#[derive(Serialize)]
struct Fields {
    away: bool,
    electrons: bool,
    holes: bool,
    modes: bool,
    cut_out: bool,
    name: String,
    inlet: String,
    outlet: String,
    plus: String,
    minus: String,
    floating: bool,
    lost: Option<LostFields>,
    steps: Vec<StepFields>,
    number: Option<NumberFields>,
}

#[derive(Serialize)]
struct LostFields {
    reason: &'static str,
    contact: String,
    reached: String,
    alone: bool,
}

#[derive(Default, Serialize)]
struct StepFields {
    kind: &'static str,
    subject: String,
    one: bool,
    departures: String,
    from: String,
    arrivals: String,
    mean: Option<String>,
    share: String,
}

#[derive(Serialize)]
struct NumberFields {
    shares: [String; 2],
    at_inlet: bool,
    emitted: String,
    arrivals: String,
    balance: String,
    current: String,
    divisor: String,
    exact: String,
    kilo_ohm: String,
    formula: Option<String>,
    shown: Option<String>,
}

fn fields(source: WhySource, expected: &Expected, why: &Why) -> Fields {
    let WhySource { device, network, point, polarity } = source;
    let [electrons, holes] = signs_at(point);
    let mixtures = mixtures(why);
    let phrases = Phrases { device, network, signs: spoken_signs(device, point), mixtures: &mixtures };
    let [inlet, outlet] = expected.reading.current.map(|contact| phrases.contact(contact));
    let [plus, minus] = expected.reading.voltage.map(|contact| phrases.contact(contact));
    let (explanation, lost) = match why {
        Why::Number(explanation) => (Some(explanation.as_ref()), None),
        Why::NoPath(lost) | Why::Floating(lost) => (None, Some(lost)),
    };
    let strands = || explanation.into_iter().flat_map(Explanation::strands);
    Fields {
        away: polarity == Polarity::Away,
        electrons,
        holes,
        modes: point.modes.is_some(),
        cut_out: strands().flat_map(|strand| &strand.route).any(|stretch| matches!(stretch, Stretch::CutOut(_))),
        name: reading_name(device, &expected.reading),
        inlet,
        outlet,
        plus,
        minus,
        floating: matches!(why, Why::Floating(_)),
        lost: lost.map(|lost| lost_fields(lost, phrases)),
        steps: explanation
            .map_or_else(Vec::new, |found| found.steps.iter().map(|step| step_fields(step, phrases)).collect()),
        number: explanation.map(|found| number_fields(expected, found, phrases)),
    }
}

fn mixtures(why: &Why) -> Vec<Origin> {
    let Why::Number(explanation) = why else { return Vec::new() };
    let told = explanation.steps.iter().filter_map(|step| match step {
        WhyStep::Mean { at: at @ Origin::Mixture(_), .. } => Some(*at),
        _ => None,
    });
    told.collect()
}

/// Whether any region of the point has carriers of one sign.
fn carries(point: &OperatingPoint, negative: bool) -> bool {
    let fillings = std::iter::once(&point.bulk).chain(point.fillings.iter().map(|(_, filling)| filling));
    fillings.filter(|filling| !filling.is_zero()).any(|filling| filling.is_negative() == negative)
}

/// Whether there are electrons, and whether there are holes.
fn signs_at(point: &OperatingPoint) -> [bool; 2] {
    [false, true].map(|negative| carries(point, negative))
}

/// Words for channels of either sense, where both run.
fn spoken_signs(device: &Device, point: &OperatingPoint) -> Option<[&'static str; 2]> {
    let both_signs = signs_at(point) == [true, true];
    match (point.modes, device.driven_by) {
        (Some(modes), _) => (modes.forward > 0 && modes.backward > 0).then_some(["forward ", "backward "]),
        (None, Drive::Magnetisation) => both_signs.then_some(["positive ", "negative "]),
        (None, Drive::Field) => both_signs.then_some(["electron ", "hole "]),
    }
}

fn lost_fields(lost: &NoNumber, phrases: Phrases) -> LostFields {
    let (reason, contact, reached) = match lost {
        NoNumber::Open(contact) => ("open", contact, &[] as &[_]),
        NoNumber::PassesNothing(contact) => ("passes nothing", contact, &[] as &[_]),
        NoNumber::Apart { contact, reached } => ("apart", contact, &reached[1..]),
    };
    let list = format!("{} {}", if reached.len() == 1 { "contact" } else { "contacts" }, phrases.contacts(reached));
    LostFields { reason, contact: phrases.contact(*contact), reached: list, alone: reached.is_empty() }
}

fn step_fields(step: &WhyStep, phrases: Phrases) -> StepFields {
    match step {
        WhyStep::Leaves { contact, share, departures } => StepFields {
            kind: "leaves",
            subject: phrases.contact(*contact),
            share: number(share),
            departures: phrases.departures(departures),
            ..Default::default()
        },
        WhyStep::HandedOn { from, contacts, share, departures, .. } => StepFields {
            kind: "handed on",
            subject: phrases.contacts(contacts),
            one: contacts.len() == 1,
            from: phrases.from(*from),
            share: number(share),
            departures: phrases.departures(departures),
            ..Default::default()
        },
        WhyStep::Mean { at, place, arrivals, share, departures } => StepFields {
            kind: match at {
                Origin::Contact(_) => "contact",
                Origin::Mixture(_) => "mixture",
            },
            subject: match at {
                Origin::Contact(contact) => phrases.contact(*contact),
                Origin::Mixture(_) => format!("{}, {}", phrases.end(*at), phrases.mixing_place(*place)),
            },
            arrivals: phrases.arrivals(arrivals),
            mean: mean(arrivals),
            share: number(share),
            departures: phrases.departures(departures),
            ..Default::default()
        },
    }
}

/// `(2 × 1 + 1 × 0)/3`; none where all that arrives has one share.
fn mean(arrivals: &[Arrival]) -> Option<String> {
    let first = &arrivals.first()?.share;
    let total: Number = arrivals.iter().map(|arrival| arrival.strand.weight.clone()).sum();
    let differs = arrivals.iter().any(|arrival| arrival.share != *first);
    differs.then(|| format!("({})/{}", sum(arrivals, " + "), bracketed(&total)))
}

/// `2 × 1 + 1 × 0`.
fn sum(arrivals: &[Arrival], sign: &str) -> String {
    let term = |arrival: &Arrival| format!("{} × {}", number(&arrival.strand.weight), number(&arrival.share));
    arrivals.iter().map(term).collect::<Vec<_>>().join(sign)
}

/// A divisor: fractions in brackets.
fn bracketed(value: &Number) -> String {
    let text = number(value);
    if text.contains('/') { format!("({text})") } else { text }
}

fn number_fields(expected: &Expected, found: &Explanation, phrases: Phrases) -> NumberFields {
    let CurrentBalance { at, emitted, arrivals, current } = &found.balance;
    let at_inlet = *at == expected.reading.current[0];
    let terms = sum(arrivals, if at_inlet { " − " } else { " + " });
    let printed = |ohm: f64| Printed::kilo_ohm(ohm, 4).with_unit();
    let kilo_ohm = expected.ohm.map(printed).unwrap_or_default();
    NumberFields {
        shares: [0, 1].map(|side| number(&found.voltage[side])),
        at_inlet,
        emitted: phrases.channels(emitted, None),
        arrivals: phrases.arrivals(arrivals),
        balance: if at_inlet { format!("{} − {terms}", number(emitted)) } else { terms },
        current: number(current),
        divisor: bracketed(current),
        exact: number(&found.h_per_e2),
        formula: expected.formula.clone(),
        shown: expected.shown_ohm.map(printed).filter(|shown| *shown != kilo_ohm),
        kilo_ohm,
    }
}
