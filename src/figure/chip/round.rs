//! Round corners that keep parallel lines parallel.
//!
//! All lines round one inner corner turn about one centre that lies deeper inside the region than any of them, so that
//! the line at depth d has the radius R − d. Outer corners are round already: the lines turn about the corner itself.

use std::collections::BTreeMap;

use crate::figure::chip::bit::Bit;
use crate::figure::chip::border::is_straight;
use crate::figure::chip::offset::half_turn;
use crate::figure::chip::pitches::Side;
use crate::figure::chip::vector::add;
use crate::figure::chip::vector::between;
use crate::figure::chip::vector::cross;
use crate::figure::chip::vector::dot;
use crate::figure::chip::vector::length;
use crate::figure::chip::vector::sub;
use crate::figure::chip::vector::times;
use crate::figure::scene::At;

/// How far the centre of a corner may lie beyond the deepest line, in pitches.
pub(super) const EASE: f64 = 0.8;

/// The straight stretches that meet at a corner: lines with the same key nest.
type Key = [(Side, usize); 2];

/// The depth of the centre of every corner, in mm inside the border.
#[derive(Default)]
pub(super) struct Centres(BTreeMap<Key, f64>);

/// A line whose corners are to be made round.
pub(super) struct Cornered<'a> {
    pub bits: &'a [Bit],
    /// Whether its region lies on the right hand.
    pub region_on_right: bool,
    /// Depth of the line in pitches at a bit, and of the deepest line there.
    pub depths: &'a dyn Fn(&Bit) -> (f64, f64),
    /// Whether a corner must stay clear of the joint between two bits.
    pub holds: &'a dyn Fn(&Bit, &Bit) -> bool,
}

impl Centres {
    /// Takes the corners of a line: where several lines share one, the tightest decides.
    pub fn take(&mut self, line: &Cornered<'_>) {
        for at in line.corners() {
            let (into, out) = (&line.bits[at - 1], &line.bits[at]);
            let (depth, deepest) = line.reach(at);
            let most = line.room(at) / half_turn(into.directions().1, out.directions().0);
            let centre = (depth + most).min(deepest);
            let held = self.0.entry(key(into, out)).or_insert(f64::INFINITY);
            *held = held.min(centre);
        }
    }

    /// The line with its corners made round.
    pub fn rounded(&self, line: &Cornered<'_>) -> Vec<Bit> {
        let mut done: Vec<Bit> = Vec::new();
        let mut rest: std::collections::VecDeque<Bit> = line.bits.iter().copied().collect();
        let corners = line.corners();
        let mut taken = 0;
        for at in corners {
            while taken < at {
                done.extend(rest.pop_front());
                taken += 1;
            }
            let (into, out) = (line.bits[at - 1], line.bits[at]);
            let (depth, _) = line.reach(at);
            let radius = (self.0.get(&key(&into, &out)).copied().unwrap_or(0.0) - depth).max(0.0);
            let (u, v) = (into.directions().1, out.directions().0);
            let reach = radius * half_turn(u, v);
            if reach < 1e-3 {
                continue;
            }
            shorten_end(&mut done, reach);
            taken += shorten_start(&mut rest, reach);
            let corner = out.from;
            let (begin, finish) = (sub(corner, times(u, reach)), add(corner, times(v, reach)));
            let bow = radius * handle(half_turn(u, v));
            let bend = Some((add(begin, times(u, bow)), sub(finish, times(v, bow))));
            let (first, second) = Bit { from: begin, to: finish, bend, ..into }.split(0.5);
            done.extend([first, Bit { part: out.part, pitch_mm: out.pitch_mm, origin: out.origin, ..second }]);
        }
        done.extend(rest);
        smoothed(&linked(done))
    }
}

impl Cornered<'_> {
    /// Numbers of the bits that begin at an inner corner between straight bits.
    fn corners(&self) -> Vec<usize> {
        let is_corner = |at: &usize| {
            let (into, out) = (&self.bits[at - 1], &self.bits[*at]);
            let turn = cross(into.directions().1, out.directions().0);
            let straight = into.bend.is_none() && out.bend.is_none();
            straight && is_turn(into, out) && (turn > 0.0) == self.region_on_right
        };
        (1..self.bits.len()).filter(is_corner).collect()
    }

    /// Depth of the line at a corner and of the centre it wishes for, in mm.
    fn reach(&self, at: usize) -> (f64, f64) {
        let (into, out) = (&self.bits[at - 1], &self.bits[at]);
        let ((a, deep), (b, deeper)) = ((self.depths)(into), (self.depths)(out));
        let pitch_mm = into.pitch_mm.min(out.pitch_mm);
        (pitch_mm * a.max(b), pitch_mm * (deep.max(deeper) + EASE))
    }

    /// Straight length on both sides of a corner that its arc may take.
    fn room(&self, at: usize) -> f64 {
        let back = self.run((0..at).rev());
        let on = self.run(at..self.bits.len());
        back.min(on)
    }

    /// Length of the straight run along bits; half of it where another corner follows.
    fn run(&self, numbers: impl Iterator<Item = usize>) -> f64 {
        let mut total = 0.0;
        let mut before: Option<&Bit> = None;
        for number in numbers {
            let bit = &self.bits[number];
            if let Some(before) = before {
                let (first, second) = if before.to == bit.from { (before, bit) } else { (bit, before) };
                if bit.bend.is_some() || (self.holds)(first, second) {
                    return total;
                }
                if is_turn(first, second) {
                    return total / 2.0;
                }
            }
            total += bit.length();
            before = Some(bit);
        }
        total
    }
}

fn is_turn(into: &Bit, out: &Bit) -> bool {
    !is_straight(into.directions().1, out.directions().0)
}

fn key(into: &Bit, out: &Bit) -> Key {
    [(into.origin.side, into.origin.straight), (out.origin.side, out.origin.straight)]
}

/// Takes a length off the end of straight bits.
fn shorten_end(bits: &mut Vec<Bit>, mut by_mm: f64) {
    while let Some(last) = bits.pop() {
        let length = last.length();
        if length > by_mm + 1e-9 {
            bits.push(last.split(1.0 - by_mm / length).0);
            return;
        }
        by_mm -= length;
    }
}

/// Takes a length off the beginning of straight bits; gives how many whole bits it took.
fn shorten_start(bits: &mut std::collections::VecDeque<Bit>, mut by_mm: f64) -> usize {
    let mut whole = 0;
    while let Some(first) = bits.pop_front() {
        let length = first.length();
        if length > by_mm + 1e-9 {
            bits.push_front(first.split(by_mm / length).1);
            return whole;
        }
        by_mm -= length;
        whole += 1;
    }
    whole
}

/// Every bit begins exactly where the one before ends.
fn linked(mut bits: Vec<Bit>) -> Vec<Bit> {
    for at in 1..bits.len() {
        bits[at].from = bits[at - 1].to;
    }
    bits.retain(|bit| bit.length() > 1e-9);
    bits
}

/// The line with every slight bend between straight bits drawn out into a curve from middle to middle, so that polygons
/// that stand for circles look round and lines drift apart without a kink.
fn smoothed(bits: &[Bit]) -> Vec<Bit> {
    // Cutting bits may move the end by a rounding error.
    let meet = |first: &Bit, last: &Bit| length(sub(first.from, last.to)) < 1e-9;
    let closed = bits.len() > 2 && bits.first().zip(bits.last()).is_some_and(|(first, last)| meet(first, last));
    let joint = |at: usize| {
        let (into, out) = (bits.get(at.checked_sub(1)?)?, bits.get(at)?);
        is_slight(into, out).then(|| into.length().min(out.length()) / 2.0)
    };
    let mut done = Vec::with_capacity(2 * bits.len());
    for (at, bit) in bits.iter().enumerate() {
        let (start, end) = (joint(at), joint(at + 1));
        let length = bit.length();
        let (first, rest) = bit.split(start.map_or(0.0, |reach| reach / length));
        let left = length - start.unwrap_or(0.0);
        let (middle, last) = rest.split(end.map_or(1.0, |reach| 1.0 - reach / left));
        if start.is_some() {
            done.extend(half_curve(&bits[at - 1], bit, first.to).map(|bend| Bit {
                bend: Some(bend.1),
                from: bend.0,
                ..first
            }));
        }
        if middle.length() > 1e-6 || (start.is_none() && end.is_none()) {
            done.push(middle);
        }
        if end.is_some() {
            let bend = half_curve(bit, &bits[at + 1], last.from);
            done.extend(bend.map(|(middle, bend)| Bit { bend: Some((bend.1, bend.0)), to: middle, ..last }));
        }
    }
    let mut linked = linked(done);
    if closed && let (Some(start), Some(last)) = (linked.first().map(|bit| bit.from), linked.last_mut()) {
        last.to = start;
    }
    linked
}

/// Half of the parabola that touches two straight bits at equal distances from their joint: its top, and the control
/// points of the half from the top to `far`, a point on either bit.
fn half_curve(into: &Bit, out: &Bit, far: At) -> Option<(At, (At, At))> {
    let corner = out.from;
    let reach = length(sub(far, corner));
    let (begin, finish) =
        (sub(corner, times(into.directions().1, reach)), add(corner, times(out.directions().0, reach)));
    let (first, second) = (between(begin, corner, 0.5), between(corner, finish, 0.5));
    let top = between(first, second, 0.5);
    let near = if length(sub(far, begin)) < length(sub(far, finish)) { first } else { second };
    (reach > 1e-9).then(|| (top, (between(top, near, 2.0 / 3.0), between(far, near, 2.0 / 3.0))))
}

/// Sine of the greatest angle that counts as a slight bend.
const SLIGHT: f64 = 0.5;

fn is_slight(into: &Bit, out: &Bit) -> bool {
    let (u, v) = (into.directions().1, out.directions().0);
    let turn = cross(u, v).abs();
    into.bend.is_none() && out.bend.is_none() && turn > 1e-3 && turn < SLIGHT && dot(u, v) > 0.0
}

/// Length of the handles of a cubic curve that stands for an arc, as a share of the radius: 4/3 tan(angle/4), which
/// makes the middle of the curve lie on the arc (common practice).
pub(super) fn handle(half_turn: f64) -> f64 {
    let quarter = half_turn / (1.0 + (1.0 + half_turn * half_turn).sqrt());
    4.0 / 3.0 * quarter
}
