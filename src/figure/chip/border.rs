//! The border that a course follows, as a chain on the drawing, set back where outer lines are absent.
//!
//! Line number n of a nest runs n + 1 pitches inside its border. Along a border where the outermost lines do not run the
//! border itself is set back by as many pitches, so that the first line present lies next to the true border. All lines
//! of a nest then share one chain and stay parallel.

use crate::figure::chip::courses::Part;
use crate::figure::chip::vector::add;
use crate::figure::chip::vector::cross;
use crate::figure::chip::vector::direction;
use crate::figure::chip::vector::dot;
use crate::figure::chip::vector::length;
use crate::figure::chip::vector::right_of;
use crate::figure::chip::vector::sub;
use crate::figure::chip::vector::times;
use crate::figure::scene::At;

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
    /// Pitches by which the border is set back.
    pub base: usize,
    /// Lines in the nest here, counted from the outermost of all.
    pub deepest: usize,
    /// Whether mesa lies on both sides.
    pub inside_mesa: bool,
    /// Whether channels mix here.
    pub mixing: bool,
}

/// A chain of stretches, each beginning where the one before ends; a closed one also joins its last to its first.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Border {
    pub edges: Vec<Edge>,
    pub closed: bool,
}

/// Sine of the angle below which two stretches count as one straight line.
pub(super) const STRAIGHT: f64 = 0.12;

/// Stretches of a chain of corners; repeated corners are dropped.
pub(super) fn edges(corners: &[At], on_right: bool, make: impl Fn(At, At) -> Edge) -> Vec<Edge> {
    let pairs = corners.windows(2).filter(|pair| length(sub(pair[1], pair[0])) > 1e-9);
    pairs
        .map(|pair| {
            let along = direction(pair[0], pair[1]);
            let right = right_of(along);
            Edge { along, inward: if on_right { right } else { times(right, -1.0) }, ..make(pair[0], pair[1]) }
        })
        .collect()
}

impl Border {
    /// The vertex before stretch `at` as the pair of stretches that meet there; none at the beginning of an open chain.
    pub fn before(&self, at: usize) -> Option<(&Edge, &Edge)> {
        match at {
            0 if self.closed => Some((self.edges.last()?, self.edges.first()?)),
            0 => None,
            _ => Some((self.edges.get(at - 1)?, self.edges.get(at)?)),
        }
    }

    /// The same border with every stretch set back by its base.
    pub fn set_back(&self, pitch_mm: f64) -> Self {
        let mut moved = Vec::new();
        let mut start = self.joint(0, pitch_mm);
        for at in 0..self.edges.len() {
            let end = self.joint(at + 1, pitch_mm);
            let edge = self.edges[at];
            let corners: Vec<At> = start.out.iter().chain(&end.into).copied().collect();
            moved.extend(corners.windows(2).map(|pair| Edge {
                from: pair[0],
                to: pair[1],
                along: safe_direction(pair[0], pair[1], edge),
                inward: turned_inward(pair[0], pair[1], edge),
                ..edge
            }));
            start = end;
        }
        Self { edges: moved, closed: self.closed }
    }

    fn joint(&self, at: usize, pitch_mm: f64) -> Joint {
        let at = if at == self.edges.len() && self.closed { 0 } else { at };
        let back = |edge: &Edge| times(edge.inward, -(edge.base as f64) * pitch_mm);
        let Some((into, out)) = self.before(at) else {
            let end = if at == 0 { self.edges.first() } else { self.edges.last() };
            let point = end.map_or((0.0, 0.0), |edge| add(if at == 0 { edge.from } else { edge.to }, back(edge)));
            return Joint { into: vec![point], out: vec![point] };
        };
        let corner = out.from;
        if !is_straight(into, out) || into.base == out.base {
            let point = add(corner, meeting(into, out, pitch_mm));
            return Joint { into: vec![point], out: vec![point] };
        }
        self.jog(at, pitch_mm)
    }

    /// Where a straight border is set back by different amounts, the step between them is taken on the side with fewer
    /// lines, beyond the lines that turn off here.
    fn jog(&self, at: usize, pitch_mm: f64) -> Joint {
        let Some((into, out)) = self.before(at) else { return Joint { into: vec![], out: vec![] } };
        let lift = (out.base.abs_diff(into.base)) as f64 * pitch_mm;
        let level = |edge: &Edge| add(out.from, times(edge.inward, -(edge.base as f64) * pitch_mm));
        let reach = |edge: &Edge| {
            let room = length(sub(edge.to, edge.from));
            ((lift + 0.6 * pitch_mm).min(0.4 * room), (2.0 * lift + 0.6 * pitch_mm).min(0.8 * room))
        };
        if out.base > into.base {
            let (near, far) = reach(out);
            let near = add(level(into), times(out.along, near));
            let far = add(level(out), times(out.along, far));
            Joint { into: vec![level(into)], out: vec![level(into), near, far] }
        } else {
            let (near, far) = reach(into);
            let near = add(level(out), times(into.along, -near));
            let far = add(level(into), times(into.along, -far));
            Joint { into: vec![far, near, level(out)], out: vec![level(out)] }
        }
    }
}

/// Corners of the moved border around a vertex: those that end the stretch before, and those that begin the next.
struct Joint {
    into: Vec<At>,
    out: Vec<At>,
}

fn safe_direction(from: At, to: At, edge: Edge) -> At {
    let along = direction(from, to);
    if along == (0.0, 0.0) { edge.along } else { along }
}

fn turned_inward(from: At, to: At, edge: Edge) -> At {
    let right = right_of(safe_direction(from, to, edge));
    if dot(right, edge.inward) > 0.0 { right } else { times(right, -1.0) }
}

/// Whether the walk goes straight on from one stretch to the next.
pub(super) fn is_straight(into: &Edge, out: &Edge) -> bool {
    cross(into.along, out.along).abs() < STRAIGHT && dot(into.along, out.along) > 0.0
}

/// From a vertex to where the two stretches meet after each is moved out of the region by its base.
fn meeting(into: &Edge, out: &Edge, pitch_mm: f64) -> At {
    let (first, second) = (-(into.base as f64) * pitch_mm, -(out.base as f64) * pitch_mm);
    inset_meeting((into.inward, first), (out.inward, second))
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
