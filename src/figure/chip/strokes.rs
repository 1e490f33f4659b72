//! Channel lines as marks: cut where the potential changes or mixing begins and ends, with the areas of mixing.

use std::collections::BTreeMap;
use std::collections::BTreeSet;

use crate::figure::chip::ChipDrawing;
use crate::figure::chip::bit::Bit;
use crate::figure::chip::border::inset_meeting;
use crate::figure::chip::chains::Chains;
use crate::figure::chip::courses::Part;
use crate::figure::chip::courses::Walked;
use crate::figure::chip::courses::region_side;
use crate::figure::chip::fit::WIDEST_PITCH_MM;
use crate::figure::chip::lanes::Lane;
use crate::figure::chip::style;
use crate::figure::chip::vector::add;
use crate::figure::chip::vector::between;
use crate::figure::chip::vector::direction;
use crate::figure::chip::vector::dot;
use crate::figure::chip::vector::length;
use crate::figure::chip::vector::right_of;
use crate::figure::chip::vector::sub;
use crate::figure::chip::vector::times;
use crate::figure::scene::At;
use crate::figure::scene::Mark;
use crate::figure::scene::PathMark;
use crate::figure::scene::Role;
use crate::figure::scene::Segment;
use crate::layout::PieceIdx;
use crate::network::BundleIdx;
use crate::number::Number;

/// A stretch of a line that keeps its potential.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Reach<'a> {
    pub lane: &'a Lane,
    pub bits: Vec<Bit>,
    /// Potential between 0 (outlet) and 1 (inlet); none where nothing fixes it.
    pub potential: Option<&'a Number>,
    /// The bundle in which channels mix here.
    pub mixing: Option<BundleIdx>,
    /// Pitch of the nest here, in mm; pens and arrows follow it.
    pub pitch_mm: f64,
}

/// Pitches are drawn in steps of this factor, so that a line that narrows keeps its pen for a while.
const PEN_STEP: f64 = 0.86;

/// The nearest lower step of a pitch.
fn stepped(pitch_mm: f64) -> f64 {
    let mut step = WIDEST_PITCH_MM;
    while step > pitch_mm + 1e-6 && step > 0.003 {
        step *= PEN_STEP;
    }
    step
}

/// The lines cut into stretches. Neighbouring stretches of a line share their end point exactly.
pub(super) fn reaches<'a>(
    drawing: &'a ChipDrawing<'a>,
    lanes: &'a [Lane],
    mixing: &BTreeSet<BundleIdx>,
) -> Vec<Reach<'a>> {
    let mut all: Vec<Reach<'a>> = Vec::new();
    for lane in lanes {
        let first = all.len();
        for (bit, half) in &halved(drawing, lane) {
            let bundle = bundle_at(drawing, lane, (bit.part, *half));
            let potential = bundle.and_then(|bundle| drawing.potential(bundle));
            let mixing = bundle.filter(|bundle| mixing.contains(bundle));
            let goes_on = all.len() > first;
            let pitch_mm = stepped(bit.pitch_mm);
            let is_same = |held: &&mut Reach<'_>| {
                goes_on && held.potential == potential && held.mixing == mixing && held.pitch_mm == pitch_mm
            };
            match all.last_mut().filter(is_same) {
                Some(held) => held.bits.push(*bit),
                None => all.push(Reach { lane, bits: vec![*bit], potential, mixing, pitch_mm }),
            }
        }
    }
    all
}

/// Bundles in which channels of more than one course run.
pub(super) fn mixing_bundles(drawing: &ChipDrawing<'_>) -> BTreeSet<BundleIdx> {
    let mut courses: BTreeMap<BundleIdx, BTreeSet<usize>> = BTreeMap::new();
    for (at, course) in drawing.channels.courses.iter().enumerate() {
        for step in &course.steps {
            courses.entry(step.bundle).or_default().insert(at);
        }
    }
    courses.into_iter().filter(|(_, courses)| courses.len() > 1).map(|(bundle, _)| bundle).collect()
}

/// The halves of a border along which the potential changes; a border along which it does not has a first half alone.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Half {
    First,
    Second,
}

/// The bundle of a part of a course; beyond the ends that of the nearest step. Where the potential changes along a border
/// the first half of the line shows it on entering, the second on leaving.
fn bundle_at(drawing: &ChipDrawing<'_>, lane: &Lane, part: (Part, Half)) -> Option<BundleIdx> {
    let steps = &drawing.channels.courses[lane.course].steps;
    match part {
        (Part::Before, _) => steps.first().map(|step| step.bundle),
        (Part::Step(at), Half::First) => steps.get(at).map(|step| step.bundle),
        (Part::Step(at), Half::Second) => steps.get(at).map(|step| step.leaving),
        (Part::After, _) => steps.last().map(|step| step.leaving),
    }
}

/// The bits of a line, cut in the middle of every border along which the potential changes.
fn halved(drawing: &ChipDrawing<'_>, lane: &Lane) -> Vec<(Bit, Half)> {
    let steps = &drawing.channels.courses[lane.course].steps;
    let changed = |part: Part| matches!(part, Part::Step(at) if steps.get(at).is_some_and(|step| step.is_changed()));
    let runs = lane.bits.chunk_by(|one, next| one.part == next.part);
    let cut = |run: &[Bit]| match run.first() {
        Some(bit) if changed(bit.part) => cut_in_half(run),
        _ => run.iter().map(|bit| (*bit, Half::First)).collect(),
    };
    runs.flat_map(cut).collect()
}

/// A straight bit is cut where the middle lies, a round one belongs to the half that holds more of it.
fn cut_in_half(run: &[Bit]) -> Vec<(Bit, Half)> {
    let long = |bit: &Bit| length(sub(bit.to, bit.from));
    let middle = run.iter().map(long).sum::<f64>() / 2.0;
    let mut walked = 0.0;
    let mut halves = Vec::new();
    for bit in run {
        let (start, end) = (walked, walked + long(bit));
        walked = end;
        if bit.bend.is_none() && start < middle && middle < end {
            let at = between(bit.from, bit.to, (middle - start) / (end - start));
            halves.push((Bit { to: at, ..*bit }, Half::First));
            halves.push((Bit { from: at, ..*bit }, Half::Second));
        } else {
            halves.push((*bit, if (start + end) / 2.0 < middle { Half::First } else { Half::Second }));
        }
    }
    halves
}

/// The mark of a stretch.
pub(super) fn stroke(reach: &Reach<'_>) -> Mark {
    Mark::Path(PathMark {
        segments: segments(&reach.bits),
        stroke: Some(style::channel_pen(reach.potential, reach.pitch_mm)),
        fill: None,
        role: Role::Channel { weight: reach.lane.weight },
    })
}

fn segments(bits: &[Bit]) -> Vec<Segment> {
    let start = bits.first().map(|bit| Segment::Move(bit.from));
    let moves = bits.iter().map(|bit| match bit.bend {
        Some((first, second)) => Segment::Cubic(first, second, bit.to),
        None => Segment::Line(bit.to),
    });
    start.into_iter().chain(moves).collect()
}

/// The soft areas in which channels mix: ribbons of the lines of one bundle, which touch, and where lines run on both
/// sides of a border the strip between them.
pub(super) fn mixing_areas(drawing: &ChipDrawing<'_>, chains: &Chains, reaches: &[Reach<'_>]) -> Vec<Mark> {
    let mut bundles: BTreeMap<BundleIdx, [Vec<Segment>; 2]> = BTreeMap::new();
    let mut lay = |bundle: BundleIdx, line: &[At], half_mm: f64| {
        let [rim, area] = bundles.entry(bundle).or_default();
        rim.extend(ribbon(line.iter().copied(), half_mm + MIXING_RIM_MM));
        area.extend(ribbon(line.iter().copied(), half_mm));
    };
    for reach in reaches {
        let Some(bundle) = reach.mixing else { continue };
        let mut points: Vec<At> = reach.bits.iter().flat_map(Bit::straightened).map(|(from, _)| from).collect();
        points.extend(reach.bits.last().map(|bit| bit.to));
        lay(bundle, &points, reach.pitch_mm / PEN_STEP * RIBBON);
    }
    let drawn: BTreeSet<BundleIdx> = reaches.iter().filter_map(|reach| reach.mixing).collect();
    for bundle in drawn {
        for piece in two_sided(drawing, bundle) {
            lay(bundle, chains.of(piece), pitch_beside(reaches, drawing, piece));
        }
    }
    let mark = |segments, colour, role| Mark::Path(PathMark { segments, stroke: None, fill: Some(colour), role });
    let (rims, areas): (Vec<_>, Vec<_>) = bundles.into_values().map(|[rim, area]| (rim, area)).unzip();
    let rims = rims.into_iter().map(|rim| mark(rim, style::MIXING_RIM, Role::Scenery));
    rims.chain(areas.into_iter().map(|area| mark(area, style::MIXING, Role::MixingBand))).collect()
}

/// Width of the darker rim around an area in which channels mix, in mm.
const MIXING_RIM_MM: f64 = 0.16;

/// Pieces along which channels of one bundle have their regions on different sides.
fn two_sided(drawing: &ChipDrawing<'_>, bundle: BundleIdx) -> BTreeSet<PieceIdx> {
    let mut sides: BTreeSet<(PieceIdx, bool)> = BTreeSet::new();
    for course in &drawing.channels.courses {
        let own = course.steps.iter().filter(|step| step.bundle == bundle);
        sides.extend(own.map(|step| {
            let walked = Walked { piece: step.piece, forward: step.forward, part: Part::Before };
            (step.piece, region_side(drawing, course.band, walked).on_right)
        }));
    }
    sides.iter().filter(|(piece, right)| *right && sides.contains(&(*piece, false))).map(|(piece, _)| *piece).collect()
}

/// The widest pitch of lines along a piece.
fn pitch_beside(reaches: &[Reach<'_>], drawing: &ChipDrawing<'_>, piece: PieceIdx) -> f64 {
    let beside = |reach: &&Reach<'_>| {
        let steps = &drawing.channels.courses[reach.lane.course].steps;
        reach.bits.iter().any(|bit| matches!(bit.part, Part::Step(at) if steps[at].piece == piece))
    };
    reaches.iter().filter(beside).map(|reach| reach.pitch_mm / PEN_STEP).fold(0.0, f64::max)
}

/// Half width of a ribbon in pitches: a little over one half, so that ribbons side by side overlap.
const RIBBON: f64 = 0.53;

/// Outlines around a line, walked so that the line lies on their right: outlines that overlap fill their union. One
/// outline serves unless a turn is so tight that its inner side would run backward and cancel what it covers.
fn ribbon(points: impl Iterator<Item = At>, half_mm: f64) -> Vec<Segment> {
    let mut points: Vec<At> = points.collect();
    points.dedup();
    let sides: Vec<(At, At)> = (0..points.len()).map(|at| side_points(&points, at, half_mm)).collect();
    let runs_back = |at: usize| {
        let along = sub(points[at + 1], points[at]);
        dot(sub(sides[at + 1].0, sides[at].0), along) < 0.0 || dot(sub(sides[at + 1].1, sides[at].1), along) < 0.0
    };
    if (0..points.len().saturating_sub(1)).any(runs_back) {
        return points
            .windows(2)
            .flat_map(|pair| ring(&[plain_sides(pair, 0, half_mm), plain_sides(pair, 1, half_mm)]))
            .collect();
    }
    ring(&sides)
}

fn ring(sides: &[(At, At)]) -> Vec<Segment> {
    let points = sides.iter().rev().map(|side| side.0).chain(sides.iter().map(|side| side.1));
    let moves = points.enumerate();
    let drawn = moves.map(|(at, point)| if at == 0 { Segment::Move(point) } else { Segment::Line(point) });
    drawn.chain([Segment::Close]).collect()
}

/// The points on both sides of an end of a straight stretch, a little beyond it so that the next one overlaps.
fn plain_sides(pair: &[At], at: usize, half_mm: f64) -> (At, At) {
    let along = direction(pair[0], pair[1]);
    let end = add(pair[at], times(along, if at == 0 { -0.3 } else { 0.3 } * half_mm));
    let side = times(right_of(along), half_mm);
    (sub(end, side), add(end, side))
}

/// The points on both sides of a corner of a broken line.
fn side_points(points: &[At], at: usize, half_mm: f64) -> (At, At) {
    let into = direction(points[at.saturating_sub(1)], points[at]);
    let out = direction(points[at], points[(at + 1).min(points.len() - 1)]);
    let (into, out) = match at {
        0 => (out, out),
        at if at + 1 == points.len() => (into, into),
        _ => (into, out),
    };
    let reach = inset_meeting((right_of(into), half_mm), (right_of(out), half_mm));
    (add(points[at], times(reach, -1.0)), add(points[at], reach))
}
