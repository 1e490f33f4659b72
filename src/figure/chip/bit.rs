//! Bits of lines: straight and round ones, cut and crossed.

use crate::figure::chip::border::Origin;
use crate::figure::chip::courses::Part;
use crate::figure::chip::vector::between;
use crate::figure::chip::vector::cross;
use crate::figure::chip::vector::direction;
use crate::figure::chip::vector::length;
use crate::figure::chip::vector::sub;
use crate::figure::scene::At;

/// A straight or round bit of a line.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Bit {
    pub from: At,
    pub to: At,
    /// Control points of a round bit.
    pub bend: Option<(At, At)>,
    pub part: Part,
    /// Pitch of the nest here, in mm.
    pub pitch_mm: f64,
    /// The place of the border that the bit follows.
    pub origin: Origin,
}

/// Chords that stand for a round bit: off by less than 0.1 % of the radius for a quarter turn.
const CHORDS: usize = 8;

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

    /// Straight stretches that stand for the bit.
    pub fn straightened(&self) -> Vec<(At, At)> {
        if self.bend.is_none() {
            return vec![(self.from, self.to)];
        }
        let points: Vec<At> = (0..=CHORDS).map(|at| self.at(at as f64 / CHORDS as f64)).collect();
        points.windows(2).map(|pair| (pair[0], pair[1])).collect()
    }

    /// Directions at the beginning and at the end.
    pub fn directions(&self) -> (At, At) {
        let (first, second) = self.bend.unwrap_or((self.to, self.from));
        (direction(self.from, first), direction(second, self.to))
    }

    /// Length of its chord.
    pub fn length(&self) -> f64 {
        length(sub(self.to, self.from))
    }
}

/// Shares of the ways along two straight stretches at which they cross.
pub(super) fn meeting((a, b): (At, At), (c, d): (At, At)) -> Option<(f64, f64)> {
    let turn = cross(sub(b, a), sub(d, c));
    let t = cross(sub(c, a), sub(d, c)) / turn;
    let s = cross(sub(c, a), sub(b, a)) / turn;
    (turn != 0.0 && (0.0..=1.0).contains(&t) && (0.0..=1.0).contains(&s)).then_some((t, s))
}
