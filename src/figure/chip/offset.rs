//! A line at its depth inside a border: every stretch is moved inward, gaps round outer corners are bridged by arcs, and
//! the loops that arise at inner corners are cut off where the line crosses itself.

use crate::figure::chip::bit::Bit;
use crate::figure::chip::bit::meeting;
use crate::figure::chip::border::Border;
use crate::figure::chip::border::Edge;
use crate::figure::chip::border::inset_meeting;
use crate::figure::chip::border::is_straight;
use crate::figure::chip::border::turns_inward;
use crate::figure::chip::courses::Part;
use crate::figure::chip::round::handle;
use crate::figure::chip::vector::add;
use crate::figure::chip::vector::cross;
use crate::figure::chip::vector::dot;
use crate::figure::chip::vector::length;
use crate::figure::chip::vector::right_of;
use crate::figure::chip::vector::sub;
use crate::figure::chip::vector::times;
use crate::figure::scene::At;

/// A line without loops, its corners still sharp, and the stretches that it passes over.
pub(super) struct Inset {
    pub bits: Vec<Bit>,
    /// Bits at which a longer way round was cut off, with the length of the border that the line does not follow there.
    pub skips: Vec<([Bit; 2], f64)>,
}

/// The line of a number inside a border. A closed line begins and ends in the middle of its longest straight bit.
pub(super) fn inset(border: &Border, number: usize) -> Inset {
    let bits = moved(border, number);
    let visible = |bit: &Bit| matches!(bit.part, Part::Step(_)) && bit.bend.is_none();
    let longest = |best: usize, next: usize| if bits[next].length() > bits[best].length() + 1e-9 { next } else { best };
    let Some(seed) = (0..bits.len()).filter(|&at| visible(&bits[at])).reduce(longest) else {
        return Inset { bits: Vec::new(), skips: Vec::new() };
    };
    let (early, late) = bits[seed].split(0.5);
    if border.closed {
        let around = std::iter::once(late).chain(bits[seed + 1..].iter().copied());
        let around: Vec<Bit> = around.chain(bits[..seed].iter().copied()).chain([early]).collect();
        return unlooped(&around);
    }
    let onward: Vec<Bit> = std::iter::once(late).chain(bits[seed + 1..].iter().copied()).collect();
    let backward: Vec<Bit> =
        std::iter::once(early).chain(bits[..seed].iter().rev().copied()).map(Bit::backward).collect();
    let (onward, backward) = (unlooped(&onward), unlooped(&backward));
    let mut whole: Vec<Bit> = backward.bits.into_iter().rev().map(Bit::backward).collect();
    let mut rest = onward.bits.into_iter();
    if let (Some(last), Some(first)) = (whole.last_mut(), rest.next()) {
        last.to = first.to;
    }
    whole.extend(rest);
    Inset { bits: whole, skips: backward.skips.into_iter().chain(onward.skips).collect() }
}

/// All stretches at their depth, with what joins them.
fn moved(border: &Border, number: usize) -> Vec<Bit> {
    let mut bits = Vec::new();
    let mut start = Joint::new(border, 0, number);
    if !border.closed {
        start.round.clear();
    }
    let first = start.round.clone();
    for (at, edge) in border.edges.iter().enumerate() {
        let end = Joint::new(border, at + 1, number);
        bits.extend(if at == 0 { Vec::new() } else { start.round });
        bits.push(bit(edge, start.out, end.into));
        start = end;
    }
    if border.closed {
        bits.extend(first);
    }
    bits
}

fn bit(edge: &Edge, from: At, to: At) -> Bit {
    let pitch_mm = edge.pitch_mm.0.min(edge.pitch_mm.1);
    Bit { from, to, bend: None, part: edge.part, pitch_mm, origin: edge.origin }
}

/// Where the stretch before a vertex ends, where the one after begins, and the arc between them.
struct Joint {
    into: At,
    out: At,
    round: Vec<Bit>,
}

impl Joint {
    fn new(border: &Border, at: usize, number: usize) -> Self {
        let end = |edge: &Edge| add(edge.to, times(edge.inward, edge.depth_mm(number).1));
        let start = |edge: &Edge| add(edge.from, times(edge.inward, edge.depth_mm(number).0));
        let Some((into, out)) = border.before(at) else {
            let alone = border.edges.get(at).map(start).or(border.edges.last().map(end)).unwrap_or_default();
            return Self { into: alone, out: alone, round: Vec::new() };
        };
        let (before, after) = (into.depth_mm(number).1, out.depth_mm(number).0);
        if is_straight(into.along, out.along) {
            let depth = (before + after) / 2.0;
            let point = add(out.from, inset_meeting((into.inward, depth), (out.inward, depth)));
            return Self { into: point, out: point, round: Vec::new() };
        }
        let round = if turns_inward(into, out) { Vec::new() } else { arc(into, out, (before, after)) };
        Self { into: end(into), out: start(out), round }
    }
}

/// From one depth to another round an outer corner, in one or two curves of at most a quarter turn each.
fn arc(into: &Edge, out: &Edge, (before, after): (f64, f64)) -> Vec<Bit> {
    let corner = out.from;
    let quarter = |edge: &Edge, (u, from): (At, f64), (v, to): (At, f64)| {
        let sign = dot(right_of(into.along), into.inward).signum();
        // The walk's direction at a normal: the normal turned back by a quarter.
        let along = |normal: At| times(right_of(normal), -sign);
        let reach = handle(half_turn(u, v));
        let (start, end) = (add(corner, times(u, from)), add(corner, times(v, to)));
        let bend = (add(start, times(along(u), reach * to)), sub(end, times(along(v), reach * from)));
        Bit { bend: Some(bend), ..bit(edge, start, end) }
    };
    let sum = add(into.inward, out.inward);
    let middle = if length(sum) > 1e-6 { times(sum, 1.0 / length(sum)) } else { into.along };
    let between = (before + after) / 2.0;
    vec![quarter(into, (into.inward, before), (middle, between)), quarter(out, (middle, between), (out.inward, after))]
}

/// Tangent of half the angle between two directions.
pub(super) fn half_turn(into: At, out: At) -> f64 {
    let cosine = dot(into, out).clamp(-0.999, 1.0);
    ((1.0 - cosine) / (1.0 + cosine)).sqrt()
}

/// Stretches that stand for bits, with the number of their bit and their share of it.
struct Chord {
    ends: (At, At),
    bit: usize,
    from: f64,
    step: f64,
}

fn chords(bits: &[Bit]) -> Vec<Chord> {
    let of_bit = |(number, bit): (usize, &Bit)| {
        let all = bit.straightened();
        let step = 1.0 / all.len() as f64;
        let each = all.into_iter().enumerate();
        each.map(move |(at, ends)| Chord { ends, bit: number, from: at as f64 * step, step }).collect::<Vec<_>>()
    };
    bits.iter().enumerate().flat_map(of_bit).collect()
}

/// Follows the bits from a sound beginning and goes over to a later bit where it is crossed first.
fn unlooped(bits: &[Bit]) -> Inset {
    let chords = chords(bits);
    let mut inset = Inset { bits: Vec::new(), skips: Vec::new() };
    let (mut at, mut from) = (0, 0.0);
    while at < bits.len() {
        let (done, left) = (from, bits[at].split(from).1);
        match first_crossing(&chords, at, from) {
            Some((t, next, s)) => {
                let share = ((t - done) / (1.0 - done)).clamp(0.0, 1.0);
                push(&mut inset.bits, left.split(share).0);
                let passed: f64 = bits[at + 1..next].iter().map(span).sum();
                if passed > 0.0 {
                    inset.skips.push(([bits[at], bits[next]], passed));
                }
                (at, from) = (next, s);
            }
            None => {
                push(&mut inset.bits, left);
                (at, from) = (at + 1, 0.0);
            }
        }
    }
    inset
}

/// Length of a bit as far as it follows its border: arcs round a corner follow nothing.
fn span(bit: &Bit) -> f64 {
    if bit.bend.is_none() { bit.length() } else { 0.0 }
}

/// Adds a bit that begins where the one before ended; a gap that nothing crosses is bridged straight.
fn push(bits: &mut Vec<Bit>, bit: Bit) {
    let Some(last) = bits.last() else { return bits.push(bit) };
    let gap = length(sub(bit.from, last.to));
    if gap > 1e-3 {
        let bridge = Bit { from: last.to, to: bit.from, bend: None, ..*last };
        bits.push(bridge);
        bits.push(bit);
    } else if bit.length() > 1e-9 {
        let from = last.to;
        bits.push(Bit { from, ..bit });
    }
}

/// The first crossing of bit `at` beyond a share of it with any later bit: both shares and the number of the other.
fn first_crossing(chords: &[Chord], at: usize, from: f64) -> Option<(f64, usize, f64)> {
    let start = chords.partition_point(|chord| chord.bit < at);
    let end = chords.partition_point(|chord| chord.bit <= at);
    for chord in chords[start..end].iter().filter(|chord| chord.from + chord.step > from) {
        let frame = bounds(chord.ends);
        let later = chords[end..].iter().filter(|other| overlap(frame, bounds(other.ends)));
        let met = later.filter_map(|other| {
            let (t, s) = meeting(chord.ends, other.ends)?;
            let (t, s) = (chord.from + t * chord.step, other.from + s * other.step);
            let joined = other.bit == at + 1 && t > 1.0 - 1e-7 && s < 1e-7;
            (t > from + 1e-9 && !joined).then_some((t, other.bit, s))
        });
        let first = met.reduce(|best, next| if next.0 < best.0 - 1e-9 { next } else { best });
        if first.is_some() {
            return first;
        }
    }
    None
}

type Box4 = [f64; 4];

fn bounds((a, b): (At, At)) -> Box4 {
    [a.0.min(b.0), a.1.min(b.1), a.0.max(b.0), a.1.max(b.1)]
}

fn overlap(a: Box4, b: Box4) -> bool {
    a[0] <= b[2] && b[0] <= a[2] && a[1] <= b[3] && b[1] <= a[3]
}

/// Whether a closed line turns in the sense of its border.
pub(super) fn keeps_sense(border: &Border, bits: &[Bit]) -> bool {
    let area = |points: &mut dyn Iterator<Item = (At, At)>| points.map(|(a, b)| cross(a, b)).sum::<f64>();
    let own = area(&mut border.edges.iter().map(|edge| (edge.from, edge.to)));
    let line = area(&mut bits.iter().map(|bit| (bit.from, bit.to)));
    own * line > 0.0
}
