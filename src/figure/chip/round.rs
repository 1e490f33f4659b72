//! Round corners that keep parallel lines parallel.
//!
//! All lines round one corner turn about one centre: it lies inside the region where the border turns toward it, so that
//! line at depth d has the radius R − d, and beyond the border where it turns away, with r + d.

use std::collections::BTreeMap;

use crate::figure::chip::border::Border;
use crate::figure::chip::border::Edge;
use crate::figure::chip::border::is_straight;
use crate::figure::chip::courses::Part;
use crate::figure::chip::vector::cross;
use crate::figure::chip::vector::dot;
use crate::figure::chip::vector::length;
use crate::figure::chip::vector::right_of;
use crate::figure::chip::vector::sub;
use crate::figure::scene::At;

/// How far the centre of a corner may lie from the border at most, beyond the deepest line, in pitches.
const EASE: f64 = 0.8;

/// The depth of the centre of every corner: positive inside the region, measured from the set-back border.
#[derive(Default)]
pub(super) struct Centres(BTreeMap<Key, f64>);

/// A corner in micrometres of the drawing and its two directions in thousandths: lines with the same key nest.
type Key = [i64; 6];

fn key(into: &Edge, out: &Edge) -> Key {
    let whole = |value: f64| (value * 1000.0).round() as i64;
    [out.from.0, out.from.1, into.along.0, into.along.1, out.along.0, out.along.1].map(whole)
}

impl Centres {
    /// Takes the corners of a border: where several borders share one, the tightest decides.
    pub fn take(&mut self, border: &Border, pitch_mm: f64) {
        for at in 0..border.edges.len() {
            let Some((into, out)) = border.before(at) else { continue };
            if is_straight(into, out) {
                continue;
            }
            let room = straight_length(border, at, Way::Back).min(straight_length(border, at, Way::On)) / 2.0;
            let most = room / half_turn(into, out);
            let wished = if turns_inward(into, out) {
                (into.deepest.max(out.deepest) as f64 + EASE) * pitch_mm
            } else {
                EASE * pitch_mm
            };
            let held = self.0.entry(key(into, out)).or_insert(f64::INFINITY);
            *held = held.min(wished.min(most));
        }
    }

    /// Radius of the turn between two stretches for a line at a depth; 0 is a sharp corner.
    pub fn radius(&self, into: &Edge, out: &Edge, depth_mm: f64) -> f64 {
        let centre = self.0.get(&key(into, out)).copied().unwrap_or(0.0);
        match (turns_inward(into, out), enters_contact(into, out)) {
            (true, _) => (centre - depth_mm).max(0.0),
            (false, true) => 0.0,
            (false, false) => centre + depth_mm,
        }
    }
}

/// Whether a border between two regions meets the border along a contact here. Where that turns away the line goes
/// straight on into the contact: lines of both regions come in side by side, and rounded ones would cross inside.
fn enters_contact(into: &Edge, out: &Edge) -> bool {
    let is_step = |edge: &Edge| matches!(edge.part, Part::Step(_));
    is_step(into) != is_step(out) && (into.inside_mesa || out.inside_mesa)
}

/// Whether the border turns toward its region.
pub(super) fn turns_inward(into: &Edge, out: &Edge) -> bool {
    (cross(into.along, out.along) > 0.0) == (dot(right_of(into.along), into.inward) > 0.0)
}

/// Tangent of half the angle by which the walk turns.
pub(super) fn half_turn(into: &Edge, out: &Edge) -> f64 {
    let cosine = dot(into.along, out.along).clamp(-0.999, 1.0);
    ((1.0 - cosine) / (1.0 + cosine)).sqrt()
}

/// Length of the handles of a cubic curve that stands for an arc, as a share of the radius: 4/3 tan(angle/4), which
/// makes the middle of the curve lie on the arc (common practice).
pub(super) fn handle(half_turn: f64) -> f64 {
    let quarter = half_turn / (1.0 + (1.0 + half_turn * half_turn).sqrt());
    4.0 / 3.0 * quarter
}

#[derive(Clone, Copy, PartialEq)]
enum Way {
    Back,
    On,
}

/// Length of the straight run that ends, or begins, before stretch `at`. A run up to the open end of a chain counts
/// double: no other corner shares it.
fn straight_length(border: &Border, at: usize, way: Way) -> f64 {
    let count = border.edges.len();
    let mut total = 0.0;
    let mut here = at;
    for _ in 0..count {
        let edge = match way {
            Way::On => &border.edges[here],
            Way::Back => &border.edges[(here + count - 1) % count],
        };
        total += run(edge.from, edge.to);
        here = match way {
            Way::On => (here + 1) % count,
            Way::Back => (here + count - 1) % count,
        };
        match border.before(here) {
            None => return 2.0 * total,
            Some((into, out)) if !is_straight(into, out) => return total,
            // A corner must not swallow the place where mixing begins or ends.
            Some((into, out)) if into.part != out.part && (into.mixing || out.mixing) => return 2.0 * total,
            Some(_) => {}
        }
    }
    total
}

fn run(from: At, to: At) -> f64 {
    length(sub(to, from))
}
