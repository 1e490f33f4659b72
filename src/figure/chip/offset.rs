//! A line at a depth inside its border: straight bits and round corners, cut where it leaves and enters contacts.

use crate::figure::chip::area::Area;
use crate::figure::chip::border::Border;
use crate::figure::chip::border::Edge;
use crate::figure::chip::border::inset_meeting;
use crate::figure::chip::border::is_straight;
use crate::figure::chip::courses::Part;
use crate::figure::chip::round::Centres;
use crate::figure::chip::round::half_turn;
use crate::figure::chip::round::handle;
use crate::figure::chip::vector::add;
use crate::figure::chip::vector::between;
use crate::figure::chip::vector::cross;
use crate::figure::chip::vector::dot;
use crate::figure::chip::vector::length;
use crate::figure::chip::vector::sub;
use crate::figure::chip::vector::times;
use crate::figure::scene::At;

/// A straight or round bit of a line.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Bit {
    pub from: At,
    pub to: At,
    /// Control points of a round bit.
    pub bend: Option<(At, At)>,
    pub part: Part,
    /// The bit runs against its border: there was no room for the line.
    pub reversed: bool,
}

/// The line at a depth inside a border.
pub(super) fn inset(border: &Border, depth_mm: f64, centres: &Centres) -> Vec<Bit> {
    let mut turns: Vec<Turn> = (0..=border.edges.len()).map(|at| turn(border, at, depth_mm, centres)).collect();
    keep_between_corners(border, &mut turns);
    let mut bits = Vec::new();
    for (at, edge) in border.edges.iter().enumerate() {
        let (start, end) = (&turns[at], &turns[at + 1]);
        bits.extend(start.second.map(|bit| Bit { part: edge.part, ..bit }));
        let reversed = dot(sub(end.begin, start.finish), edge.along) < -1e-9;
        if start.finish != end.begin {
            bits.push(Bit { from: start.finish, to: end.begin, bend: None, part: edge.part, reversed });
        }
        bits.extend(end.first.map(|bit| Bit { part: edge.part, ..bit }));
    }
    bits
}

/// Where a border goes straight on, its parts meet beside their common point, unless a corner nearby has already carried
/// the line past it: then they meet at the end of that corner.
fn keep_between_corners(border: &Border, turns: &mut [Turn]) {
    let last = border.edges.len();
    let is_open =
        |at: usize| at > 0 && at < last && border.before(at).is_some_and(|(into, out)| is_straight(into, out));
    for at in (0..=last).filter(|&at| is_open(at)) {
        if dot(sub(turns[at].begin, turns[at - 1].finish), border.edges[at - 1].along) < 0.0 {
            turns[at] = Turn::sharp(turns[at - 1].finish);
        }
    }
    for at in (0..=last).rev().filter(|&at| is_open(at)) {
        if dot(sub(turns[at + 1].begin, turns[at].finish), border.edges[at].along) < 0.0 {
            turns[at] = Turn::sharp(turns[at + 1].begin);
        }
    }
}

/// A corner of a line: where it begins and ends, and the two halves of its curve.
struct Turn {
    begin: At,
    finish: At,
    first: Option<Bit>,
    second: Option<Bit>,
}

impl Turn {
    fn sharp(at: At) -> Self {
        Self { begin: at, finish: at, first: None, second: None }
    }
}

fn turn(border: &Border, at: usize, depth_mm: f64, centres: &Centres) -> Turn {
    let last = border.edges.len();
    let Some((into, out)) =
        border.before(if at == last && border.closed { 0 } else { at }).filter(|_| at < last || border.closed)
    else {
        let end = |edge: &Edge, point: At| add(point, times(edge.inward, depth_mm));
        let first = border.edges.first().filter(|_| at == 0).map(|edge| end(edge, edge.from));
        let point = first.or(border.edges.last().map(|edge| end(edge, edge.to)));
        return Turn::sharp(point.unwrap_or((0.0, 0.0)));
    };
    let corner = add(out.from, inset_meeting((into.inward, depth_mm), (out.inward, depth_mm)));
    let radius = if is_straight(into, out) { 0.0 } else { centres.radius(into, out, depth_mm) };
    if radius > 1e-9 { curve(into, out, (corner, radius)) } else { Turn::sharp(corner) }
}

fn curve(into: &Edge, out: &Edge, (corner, radius): (At, f64)) -> Turn {
    let half = half_turn(into, out);
    let begin = sub(corner, times(into.along, radius * half));
    let finish = add(corner, times(out.along, radius * half));
    let reach = radius * handle(half);
    let bend = (add(begin, times(into.along, reach)), sub(finish, times(out.along, reach)));
    let whole = Bit { from: begin, to: finish, bend: Some(bend), part: Part::Before, reversed: false };
    let (first, second) = whole.split(0.5);
    Turn { begin, finish, first: Some(first), second: Some(second) }
}

impl Bit {
    /// The point at a share of the way.
    pub fn at(&self, t: f64) -> At {
        self.split(t).0.to
    }

    /// Both sides of a cut; a curve is cut by repeated linear division (de Casteljau).
    pub fn split(self, t: f64) -> (Bit, Bit) {
        let Some((first, second)) = self.bend else {
            let middle = between(self.from, self.to, t);
            return (Bit { to: middle, ..self }, Bit { from: middle, ..self });
        };
        let (a, b, c) = (between(self.from, first, t), between(first, second, t), between(second, self.to, t));
        let (d, e) = (between(a, b, t), between(b, c, t));
        let middle = between(d, e, t);
        (Bit { to: middle, bend: Some((a, d)), ..self }, Bit { from: middle, bend: Some((e, c)), ..self })
    }

    /// Walked the other way.
    pub fn backward(self) -> Bit {
        Bit { from: self.to, to: self.from, bend: self.bend.map(|(a, b)| (b, a)), ..self }
    }

    /// Straight stretches that stand for the bit: 8 for a curve, which is off by less than 0.1 % of the radius for half
    /// a quarter turn.
    pub fn straightened(&self) -> Vec<(At, At)> {
        let count = if self.bend.is_some() { 8 } else { 1 };
        let points: Vec<At> = (0..=count).map(|at| self.at(at as f64 / count as f64)).collect();
        points.windows(2).map(|pair| (pair[0], pair[1])).collect()
    }
}

/// How far a line is drawn on inside a contact, in pitches: less than the depth at which it might turn there.
pub(super) const HIDDEN: f64 = 0.4;

/// And not further than this, in mm, so that it stays clear of the name.
pub(super) const HIDDEN_MM: f64 = 0.2;

/// Cuts a line a little inside the contacts at its ends; none where it does not reach one of them.
pub(super) fn cut(bits: Vec<Bit>, hidden_mm: f64, (from, to): (&Area, &Area)) -> Option<Vec<Bit>> {
    let steps: Vec<usize> = (0..bits.len()).filter(|&at| matches!(bits[at].part, Part::Step(_))).collect();
    let middle = *steps.get(steps.len() / 2)?;
    let (early, late) = bits[middle].split(0.5);
    let backward: Vec<Bit> =
        std::iter::once(early).chain(bits[..middle].iter().rev().copied()).map(Bit::backward).collect();
    let forward: Vec<Bit> = std::iter::once(late).chain(bits[middle + 1..].iter().copied()).collect();
    let back = ended(&backward, hidden_mm, from)?;
    let on = ended(&forward, hidden_mm, to)?;
    let mut whole: Vec<Bit> = back.into_iter().rev().map(Bit::backward).collect();
    let joined = whole.pop()?;
    let first = on.first()?;
    match joined.bend.or(first.bend) {
        None => whole.push(Bit { to: first.to, ..joined }),
        Some(_) => whole.extend([joined, *first]),
    }
    whole.extend(on.into_iter().skip(1));
    Some(whole)
}

/// The line up to a little beyond where it first comes inside, but never out again.
fn ended(bits: &[Bit], hidden_mm: f64, contact: &Area) -> Option<Vec<Bit>> {
    let mut kept: Vec<Bit> = Vec::new();
    let mut left_mm = None;
    for bit in bits {
        let span_mm = length(sub(bit.to, bit.from)).max(1e-12);
        let start = if left_mm.is_some() { Some(0.0) } else { contact.entry(bit) };
        let Some(start) = start else {
            kept.push(*bit);
            continue;
        };
        let wanted_mm: f64 = left_mm.unwrap_or(hidden_mm);
        let end = start + wanted_mm / span_mm;
        let exit = contact.exit(bit, start);
        if end <= 1.0 || exit < 1.0 {
            kept.push(bit.split(end.min((start + exit) / 2.0)).0);
            return Some(kept);
        }
        left_mm = Some(wanted_mm - (1.0 - start) * span_mm);
        kept.push(*bit);
    }
    left_mm.map(|_| kept)
}

impl Area {
    /// Share of the way at which a bit first comes inside.
    fn entry(&self, bit: &Bit) -> Option<f64> {
        let changes = self.changes(bit);
        changes.windows(2).find(|pair| self.holds(bit.at((pair[0] + pair[1]) / 2.0))).map(|pair| pair[0])
    }

    /// Share of the way at which a bit that is inside at `start` goes out; 1 when it does not.
    fn exit(&self, bit: &Bit, start: f64) -> f64 {
        let changes = self.changes(bit);
        let outside = |pair: &&[f64]| pair[0] >= start && !self.holds(bit.at((pair[0] + pair[1]) / 2.0));
        changes.windows(2).find(outside).map_or(1.0, |pair| pair[0])
    }

    /// Shares of the way at which a bit meets the outlines, from 0 to 1.
    fn changes(&self, bit: &Bit) -> Vec<f64> {
        let chords = bit.straightened();
        let count = chords.len() as f64;
        let met = chords.iter().enumerate().flat_map(|(at, chord)| {
            self.sides().filter_map(move |side| meeting(*chord, side)).map(move |t| (at as f64 + t) / count)
        });
        let mut changes: Vec<f64> = met.chain([0.0, 1.0]).collect();
        changes.sort_by(f64::total_cmp);
        changes.dedup_by(|late, early| *late - *early < 1e-9);
        changes
    }
}

/// Share of the way along the first stretch at which it crosses the second.
fn meeting((a, b): (At, At), (c, d): (At, At)) -> Option<f64> {
    let turn = cross(sub(b, a), sub(d, c));
    let t = cross(sub(c, a), sub(d, c)) / turn;
    let s = cross(sub(c, a), sub(b, a)) / turn;
    (turn != 0.0 && (0.0..=1.0).contains(&t) && (0.0..=1.0).contains(&s)).then_some(t)
}
