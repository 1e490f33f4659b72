//! The border that a course follows: straight stretches on the drawing, with the depth of its nest along them.
//!
//! Line number n of a nest runs n + 1 pitches inside its border. Along a border where the outermost lines do not run the
//! nest is set back by as many pitches, so that the first line present lies next to the border.

use crate::figure::chip::courses::Part;
use crate::figure::chip::courses::Walked;
use crate::figure::chip::pitches::Pitches;
use crate::figure::chip::pitches::Place;
use crate::figure::chip::pitches::Side;
use crate::figure::chip::vector::add;
use crate::figure::chip::vector::cross;
use crate::figure::chip::vector::direction;
use crate::figure::chip::vector::dot;
use crate::figure::chip::vector::right_of;
use crate::figure::chip::vector::times;
use crate::figure::scene::At;

/// Where a part of a line has its place: knots of one side of a piece, all on one straight stretch.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) struct Origin {
    pub side: Side,
    /// Number of the straight stretch of the chain.
    pub straight: usize,
    /// Lowest and highest knot.
    pub knots: (usize, usize),
}

/// A straight stretch of a border.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Edge {
    pub from: At,
    pub to: At,
    /// Direction of the walk.
    pub along: At,
    /// Direction into the region.
    pub inward: At,
    pub part: Part,
    pub origin: Origin,
    /// Pitch in mm at both ends.
    pub pitch_mm: (f64, f64),
    /// Pitches by which the nest is set back at both ends.
    pub set_back: (f64, f64),
}

impl Edge {
    /// Depth of a line in mm at both ends.
    pub fn depth_mm(&self, number: usize) -> (f64, f64) {
        let depth = |pitch_mm: f64, set_back: f64| pitch_mm * (number as f64 + 1.0 - set_back);
        (depth(self.pitch_mm.0, self.set_back.0), depth(self.pitch_mm.1, self.set_back.1))
    }
}

/// A chain of stretches, each beginning where the one before ends; a closed one also joins its last to its first.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Border {
    pub edges: Vec<Edge>,
    pub closed: bool,
}

/// Sine of the angle below which two stretches count as one straight line.
pub(super) const STRAIGHT: f64 = 0.12;

impl Border {
    /// Walked pieces, each with the side on which the region lies.
    pub fn new(pitches: &Pitches, walked: impl Iterator<Item = (Walked, Side)>, closed: bool) -> Self {
        Self { edges: walked.flat_map(|(walked, side)| piece(pitches, walked, side)).collect(), closed }
    }

    /// The vertex before stretch `at` as the pair of stretches that meet there; none at the ends of an open chain.
    pub fn before(&self, at: usize) -> Option<(&Edge, &Edge)> {
        let count = self.edges.len();
        if self.closed {
            return Some((self.edges.get((at + count - 1) % count)?, self.edges.get(at % count)?));
        }
        Some((self.edges.get(at.checked_sub(1)?)?, self.edges.get(at)?))
    }
}

/// The stretches of one piece in the order of the walk; knots between which nothing changes are passed over.
fn piece(pitches: &Pitches, walked: Walked, side: Side) -> Vec<Edge> {
    let track = &pitches.tracks[side.piece];
    let count = track.knots.len();
    let knot = |at: usize| if walked.forward { at } else { count - 1 - at };
    let straight = |at: usize| track.straight[knot(at).min(knot(at + 1))];
    let nest = |at: usize| {
        let place = Place { side, knot: knot(at) };
        (pitches.at(place), pitches.set_back(place))
    };
    let mut edges = Vec::new();
    let mut start = 0;
    for at in 1..count {
        let goes_on = at + 1 < count && straight(at) == straight(at - 1);
        if goes_on && nest(at + 1) == nest(at) && nest(at) == nest(start) {
            continue;
        }
        let (from, to) = (track.knots[knot(start)], track.knots[knot(at)]);
        let along = direction(from, to);
        let knots = (knot(start).min(knot(at)), knot(start).max(knot(at)));
        let ((first, back), (last, end)) = (nest(start), nest(at));
        edges.push(Edge {
            from,
            to,
            along,
            inward: if side.on_right == walked.forward { right_of(along) } else { times(right_of(along), -1.0) },
            part: walked.part,
            origin: Origin { side, straight: straight(start), knots },
            pitch_mm: (first, last),
            set_back: (back, end),
        });
        start = at;
    }
    edges.retain(|edge| edge.along != (0.0, 0.0));
    edges
}

/// Whether the walk goes straight on from one direction to the next.
pub(super) fn is_straight(into: At, out: At) -> bool {
    cross(into, out).abs() < STRAIGHT && dot(into, out) > 0.0
}

/// Whether the border turns toward its region.
pub(super) fn turns_inward(into: &Edge, out: &Edge) -> bool {
    (cross(into.along, out.along) > 0.0) == (dot(right_of(into.along), into.inward) > 0.0)
}

/// The vector q with q·n = s for two unit vectors n and lengths s; for nearly parallel ones their mean.
pub(super) fn inset_meeting((n, s): (At, f64), (m, t): (At, f64)) -> At {
    let area = cross(n, m);
    if area.abs() < 1e-6 || (s == t && dot(n, m) > 0.0) {
        let sum = add(n, m);
        return times(sum, (s + t) / 2.0 / (1.0 + dot(n, m)).max(1e-3));
    }
    ((s * m.1 - t * n.1) / area, (n.0 * t - m.0 * s) / area)
}
