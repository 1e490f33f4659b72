//! The words round the drawings, and which way the field points.

use serde::Serialize;

use crate::cooldown::MagnetSense;
use crate::device::Device;
use crate::device::OperatingPoint;
use crate::diagnostic::Diagnostic;
use crate::figure::scene::Mark;
use crate::figure::scene::Role;
use crate::figure::scene::Scene;
use crate::number::Number;
use crate::number::Rational;
use crate::quantity::Polarity;
use crate::quantity::printed;
use crate::report::DrawingWords;
use crate::report::PointSource;
use crate::report::Printed;
use crate::report::Sources;
use crate::report::Texts;
use crate::report::Words;
use crate::report::alone;
use crate::report::names;
use crate::resistance::Expected;
use crate::resistance::Prediction;
use crate::resistance::ReadingState;

/// Fillings and field of a point, and where it has one region to read alone, how the field chooses the reading.
pub fn subtitle(device: &Device, point: &PointSource, texts: &Texts) -> Result<String, Diagnostic> {
    let [toward, away] = point.beside.map(|beside| match beside.isolated.as_slice() {
        [only] => only.best.as_ref().map(|best| (only.name.clone(), best.reading.voltage)),
        _ => None,
    });
    let both = toward.zip(away);
    let fields = PointFields {
        fillings: names::fillings(device, point.point),
        field: names::field(point.point),
        one_pair: both.as_ref().is_some_and(|((_, toward), (_, away))| toward == away),
        alone: both.map(|((name, _), _)| name),
    };
    Ok(texts.lines("point.txt", &fields)?.join(" "))
}

/// What an area in which channels mix stands for, where a drawing has one.
pub fn mixing_key(point: &PointSource, words: &Words) -> Option<String> {
    let band = |mark: &Mark| matches!(mark, Mark::Path(path) if path.role == Role::MixingBand);
    let drawn = point.drawings.into_iter().flatten().any(|scene| scene.marks.iter().any(band));
    drawn.then(|| words.mixing_band.clone())
}

/// The words of both drawings of a point, toward first.
pub fn drawings(device: &Device, point: &PointSource, texts: &Texts) -> Result<Vec<DrawingWords>, Diagnostic> {
    Polarity::BOTH.into_iter().map(|polarity| drawing(device, point, polarity, texts)).collect()
}

/// What the three pens of the drawings stand for.
pub fn pens(device: &Device, point: &PointSource, texts: &Texts) -> Result<Vec<String>, Diagnostic> {
    texts.lines("pens.txt", &PenFields::of(device, point))
}

/// What else stands under both drawings.
pub fn key(device: &Device, point: &PointSource, texts: &Texts) -> Result<Vec<String>, Diagnostic> {
    texts.lines("key.txt", &PenFields::of(device, point))
}

/// Which way the field points, and how to check it with one Hall reading.
pub fn field_words(sources: &Sources, texts: &Texts) -> Result<Vec<String>, Diagnostic> {
    let check = sources.points.iter().find_map(|point| hall_check(sources.device, point));
    let magnet = sources.cooldown.map(|cooldown| match cooldown.magnet.positive {
        MagnetSense::Toward => "toward",
        MagnetSense::Away => "away",
        MagnetSense::Unknown => "unknown",
    });
    let only_modes = sources.device.points.iter().all(|point| point.modes.is_some());
    texts.lines("field.txt", &FieldFields { check, magnet, only_modes })
}

#[derive(Serialize)]
struct PointFields {
    fillings: String,
    field: Option<String>,
    alone: Option<String>,
    one_pair: bool,
}

#[derive(Serialize)]
struct PenFields<'a> {
    inlet: &'a str,
    outlet: &'a str,
    path: bool,
    parallel: bool,
    /// Potentials change along some border.
    along: bool,
    /// Gates are drawn beside edge modes.
    idle_gates: bool,
    wires: Option<String>,
}

impl<'a> PenFields<'a> {
    fn of(device: &'a Device, point: &PointSource) -> Self {
        let [inlet, outlet] = point.drawn_current.map(|contact| names::contact_name(device, contact));
        let path = point.toward.bundle_potentials(point.drawn_current).is_some();
        let along = point.toward.channels.courses.iter().flat_map(|course| &course.steps).any(|step| step.is_changed());
        let idle_gates = point.point.modes.is_some() && !device.overlays.is_empty();
        Self { inlet, outlet, path, parallel: stands_for_many(point), along, idle_gates, wires: names::wires(device) }
    }
}

/// Whether a drawing counts channels with a `×` beside their line.
fn stands_for_many(point: &PointSource) -> bool {
    let counts = |mark: &Mark| match mark {
        Mark::Text(text) => text.runs.first().is_some_and(|run| run.text.starts_with('×')),
        Mark::Path(_) => false,
    };
    point.drawings.iter().flat_map(|pair| pair.iter()).any(|scene| scene.marks.iter().any(counts))
}

#[derive(Serialize)]
struct FieldFields {
    check: Option<CheckFields>,
    magnet: Option<&'static str>,
    /// No point has fillings.
    only_modes: bool,
}

#[derive(Serialize)]
struct CheckFields {
    point: String,
    current: [String; 2],
    voltage: [String; 2],
    positive_toward: bool,
    kilo_ohm: String,
}

#[derive(Serialize)]
struct DrawingFields {
    away: bool,
    electrons: bool,
    holes: bool,
    modes: bool,
    forward: bool,
    backward: bool,
    alone: Option<String>,
}

fn drawing(
    device: &Device,
    point: &PointSource,
    polarity: Polarity,
    texts: &Texts,
) -> Result<DrawingWords, Diagnostic> {
    let prediction = prediction(point, polarity);
    let rule = isolated(point, polarity);
    let named = rule.map(|(_, best)| best).or_else(|| largest(point, prediction));
    let fields = DrawingFields {
        away: polarity == Polarity::Away,
        electrons: carries(point.point, Rational::is_negative, false),
        holes: carries(point.point, Rational::is_negative, true),
        modes: point.point.modes.is_some(),
        forward: point.point.modes.is_some_and(|modes| modes.forward > 0),
        backward: point.point.modes.is_some_and(|modes| modes.backward > 0),
        alone: rule.map(|(name, _)| name.to_string()),
    };
    let mut lines = texts.lines("drawing.txt", &fields)?.into_iter();
    Ok(DrawingWords {
        polarity: polarity.sign(),
        heading: lines.next().unwrap_or_default(),
        sense: lines.next().unwrap_or_default(),
        leads: named.map_or_else(String::new, |named| names::leads(device, &named.reading)),
        value: named.map_or_else(String::new, alone::value),
        expected: named.and_then(|named| named.ohm).map(|ohm| Printed::kilo_ohm(ohm, 4)),
        remark: lines.next().unwrap_or_default(),
        shares: shares(point, prediction),
        drawn: point.drawings.map_or_else(Vec::new, |drawings| drawn(side(drawings, polarity))),
    })
}

fn prediction<'a>(point: &PointSource<'a>, polarity: Polarity) -> &'a Prediction {
    match polarity {
        Polarity::Toward => point.toward,
        Polarity::Away => point.away,
    }
}

fn side(drawings: &[Scene; 2], polarity: Polarity) -> &Scene {
    match polarity {
        Polarity::Toward => &drawings[0],
        Polarity::Away => &drawings[1],
    }
}

/// Every text of a drawing.
fn drawn(scene: &Scene) -> Vec<String> {
    let text = |mark: &Mark| match mark {
        Mark::Text(text) => Some(text.runs.iter().map(|run| run.text.as_str()).collect()),
        Mark::Path(_) => None,
    };
    scene.marks.iter().filter_map(text).collect()
}

/// Whether any region of the point has carriers of one sign.
fn carries(point: &OperatingPoint, is_negative: fn(&Rational) -> bool, wanted: bool) -> bool {
    if !point.parts.is_empty() {
        return point.parts.iter().any(|part| carries(part, is_negative, wanted));
    }
    let fillings = std::iter::once(&point.bulk).chain(point.fillings.iter().map(|(_, filling)| filling));
    fillings.filter(|filling| !filling.is_zero()).any(|filling| is_negative(filling) == wanted)
}

/// The first region that is read alone with the drawn current, and the reading to copy into the logbook.
fn isolated<'a>(point: &PointSource<'a>, polarity: Polarity) -> Option<(&'a str, &'a Expected)> {
    let beside = match polarity {
        Polarity::Toward => point.beside[0],
        Polarity::Away => point.beside[1],
    };
    let best = beside.isolated.iter().filter_map(|region| Some((region.name.as_str(), region.best.as_ref()?)));
    best.into_iter().find(|(_, best)| best.reading.current == point.drawn_current)
}

/// Where no region is read alone with the drawn current: the largest reading with it and four distinct contacts.
fn largest<'a>(point: &PointSource, prediction: &'a Prediction) -> Option<&'a Expected> {
    let apart = |e: &&Expected| e.reading.voltage.iter().all(|contact| !e.reading.current.contains(contact));
    let drawn = |e: &&Expected| e.state == ReadingState::Fine && e.reading.current == point.drawn_current;
    let size = |e: &Expected| e.ohm.unwrap_or(0.0).abs();
    let larger = |best: &'a Expected, next: &'a Expected| if size(next) > size(best) { next } else { best };
    prediction.expected.iter().filter(drawn).filter(apart).reduce(larger)
}

/// Distinct potentials strictly between outlet and inlet, highest first.
fn shares(point: &PointSource, prediction: &Prediction) -> Vec<String> {
    let potentials = prediction.bundle_potentials(point.drawn_current).unwrap_or_default();
    let mut between: Vec<Number> = potentials.into_iter().flatten().collect();
    between.retain(|share| share.to_f64() > 0.0 && share.to_f64() < 1.0);
    between.sort_by(|a, b| b.to_f64().total_cmp(&a.to_f64()));
    let mut texts: Vec<String> = between.iter().map(printed::share).collect();
    texts.dedup();
    texts
}

/// Size in h/e², and relative difference, that only rounding makes.
const ROUNDING: f64 = 1e-9;

/// A reading with four distinct contacts whose two polarities differ in sign only.
fn hall_check(device: &Device, point: &PointSource) -> Option<CheckFields> {
    let both = point.toward.expected.iter().zip(&point.away.expected);
    let opposite = |(toward, away): &(&Expected, &Expected)| match (toward.h_per_e2, away.h_per_e2) {
        (Some(toward), Some(away)) => toward.abs() > ROUNDING && (toward + away).abs() < ROUNDING * toward.abs(),
        _ => false,
    };
    let apart = |e: &Expected| e.reading.voltage.iter().all(|contact| !e.reading.current.contains(contact));
    let (toward, _) = both.filter(opposite).find(|(toward, _)| apart(toward))?;
    let name = |contact| names::contact_name(device, contact).to_string();
    let ohm = toward.ohm?;
    Some(CheckFields {
        point: point.point.name.clone(),
        current: toward.reading.current.map(name),
        voltage: toward.reading.voltage.map(name),
        positive_toward: ohm > 0.0,
        kilo_ohm: Printed::kilo_ohm(ohm.abs(), 4).with_unit(),
    })
}
