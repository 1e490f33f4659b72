//! The stretched plane: x and y of the chip are mapped to millimetres separately, each by a rising broken line.
//!
//! Every stretch between two neighbouring coordinates becomes wide enough for the channel lines that run in it, and long
//! ones are compressed. What lies beside what stays as it is.

use crate::figure::chip::demand::Demand;
use crate::figure::chip::demand::Needs;
use crate::figure::scene::At;
use crate::layout::Layout;
use crate::layout::Point;

/// A box in mm.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Frame {
    pub left: f64,
    pub top: f64,
    pub right: f64,
    pub bottom: f64,
}

/// Millimetres per unit of length^¾ may be this many times larger across a bar than along it.
const TALLEST: f64 = 1.9;

/// The map from nanometres to millimetres.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Plane {
    x: Axis,
    y: Axis,
    /// The scale, where it is the same everywhere.
    pub(super) mm_per_nm: Option<f64>,
}

impl Plane {
    /// A map of all coordinates into a frame that meets all demands; none where the frame is too small.
    /// The picture may end above the lower edge of the frame.
    pub(super) fn new(needs: &[Needs; 2], demands: [Vec<Demand>; 2], frame: Frame) -> Option<Self> {
        let [for_x, for_y] = demands;
        let x = Spread::new(&needs[0], for_x);
        let y = Spread::new(&needs[1], for_y);
        let across = x.filling(frame.right - frame.left, f64::INFINITY)?;
        let up = y.filling(frame.bottom - frame.top, TALLEST * x.natural(frame.right - frame.left))?;
        let height = y.total(up);
        Some(Self {
            x: Axis::new(&needs[0].coordinates, x.positions(across).into_iter().map(|mm| frame.left + mm)),
            y: Axis::new(&needs[1].coordinates, y.positions(up).into_iter().map(|mm| frame.top + height - mm)),
            mm_per_nm: None,
        })
    }

    /// One scale for both axes, as large as a frame allows, centred along x and at the top along y.
    pub(super) fn to_scale(layout: &Layout, frame: Frame) -> Option<Self> {
        let ends = |of: fn(&Point) -> i64| {
            let values = || layout.positions.pieces.iter().flatten().map(of);
            Some((values().min()?, values().max()?))
        };
        let ((left, right), (bottom, top)) = (ends(|point| point.0)?, ends(|point| point.1)?);
        let (wide, high) = ((right - left) as f64, (top - bottom) as f64);
        let scale = ((frame.right - frame.left) / wide).min((frame.bottom - frame.top) / high);
        let start = (frame.left + frame.right - scale * wide) / 2.0;
        let x = Axis::new(&[left, right], [start, start + scale * wide].into_iter());
        let y = Axis::new(&[bottom, top], [frame.top + scale * high, frame.top].into_iter());
        (scale.is_finite() && scale > 0.0).then_some(Self { x, y, mm_per_nm: Some(scale) })
    }

    /// Where a point of the chip lies on the drawing.
    pub(super) fn place(&self, (x, y): (f64, f64)) -> At {
        (self.x.place(x), self.y.place(y))
    }

    /// Where a chain of corners lies: straight on the chip, broken on the drawing wherever the map is.
    pub(super) fn chain(&self, corners: &[Point]) -> Vec<At> {
        let corners: Vec<(f64, f64)> = corners.iter().map(|&(x, y)| (x as f64, y as f64)).collect();
        let mut placed: Vec<At> = corners.first().map(|&first| self.place(first)).into_iter().collect();
        for pair in corners.windows(2) {
            let cuts = self.cuts(pair[0], pair[1]);
            placed.extend(cuts.into_iter().map(|t| {
                let along = |from: f64, to: f64| from + (to - from) * t;
                self.place((along(pair[0].0, pair[1].0), along(pair[0].1, pair[1].1)))
            }));
        }
        placed
    }

    /// Shares of the way from `a` to `b` at which the map breaks, ending with 1.
    fn cuts(&self, a: (f64, f64), b: (f64, f64)) -> Vec<f64> {
        if a.0 == b.0 || a.1 == b.1 {
            return vec![1.0];
        }
        let on_x = self.x.from.iter().map(|x| (x - a.0) / (b.0 - a.0));
        let on_y = self.y.from.iter().map(|y| (y - a.1) / (b.1 - a.1));
        let mut cuts: Vec<f64> = on_x.chain(on_y).filter(|t| *t > 1e-9 && *t < 1.0 - 1e-9).collect();
        cuts.push(1.0);
        cuts.sort_by(f64::total_cmp);
        cuts.dedup_by(|late, early| *late - *early < 1e-9);
        cuts
    }

    /// The part of the drawing that the mapped coordinates cover.
    pub(super) fn covered(&self) -> Frame {
        let ends = |mm: &[f64]| (mm.first().copied().unwrap_or(0.0), mm.last().copied().unwrap_or(0.0));
        let ((left, right), (bottom, top)) = (ends(&self.x.mm), ends(&self.y.mm));
        Frame { left, top, right, bottom }
    }
}

#[derive(Clone, Debug, PartialEq)]
struct Axis {
    from: Vec<f64>,
    mm: Vec<f64>,
}

impl Axis {
    fn new(coordinates: &[i64], mm: impl Iterator<Item = f64>) -> Self {
        Self { from: coordinates.iter().map(|&value| value as f64).collect(), mm: mm.collect() }
    }

    fn place(&self, value: f64) -> f64 {
        let after = self.from.partition_point(|&from| from < value);
        if self.from.get(after) == Some(&value) || self.from.len() < 2 {
            return self.mm.get(after).copied().unwrap_or(0.0);
        }
        let high = after.clamp(1, self.from.len() - 1);
        let share = (value - self.from[high - 1]) / (self.from[high] - self.from[high - 1]);
        self.mm[high - 1] + share * (self.mm[high] - self.mm[high - 1])
    }
}

/// Growth of stretches without mesa: contacts stay small.
const STIFF: f64 = 0.05;

/// Steps of halving when the scale is sought; 60 exhaust a float.
const HALVINGS: usize = 60;

/// A problem along one axis: place coordinates so that every demand is met and the rest is shared out by length.
struct Spread<'a> {
    needs: &'a Needs,
    /// In the order of their ends.
    demands: Vec<Demand>,
}

impl<'a> Spread<'a> {
    fn new(needs: &'a Needs, mut demands: Vec<Demand>) -> Self {
        demands.sort_by_key(|demand| (demand.to, demand.from));
        Self { needs, demands }
    }

    /// The largest scale, at most `limit`, at which everything fits into `room_mm`.
    fn filling(&self, room_mm: f64, limit: f64) -> Option<f64> {
        if self.total(0.0) > room_mm {
            return None;
        }
        let mut low = 0.0;
        let mut high = 1.0;
        while high < 1e9 && self.total(high) <= room_mm {
            high *= 2.0;
        }
        for _ in 0..HALVINGS {
            let middle = (low + high) / 2.0;
            if self.total(middle) <= room_mm { low = middle } else { high = middle }
        }
        Some(low.min(limit))
    }

    /// The scale at which the stretches would fill the room if there were no demands.
    fn natural(&self, room_mm: f64) -> f64 {
        let shares: f64 = (1..self.needs.coordinates.len()).map(|to| self.share(to)).sum();
        if shares > 0.0 { room_mm / shares } else { 0.0 }
    }

    fn total(&self, scale: f64) -> f64 {
        self.pushed(scale).last().copied().unwrap_or(0.0)
    }

    /// The mean of the solutions pushed to the left and to the right: it meets every demand too, and a symmetric chip
    /// stays symmetric.
    fn positions(&self, scale: f64) -> Vec<f64> {
        let left = self.pushed(scale);
        let right = self.pulled(scale, left.last().copied().unwrap_or(0.0));
        left.iter().zip(right).map(|(left, right)| (left + right) / 2.0).collect()
    }

    /// Every coordinate as far to the left as its demands allow.
    fn pushed(&self, scale: f64) -> Vec<f64> {
        let mut at = vec![0.0; self.needs.coordinates.len()];
        let mut waiting = self.demands.iter().peekable();
        for to in 1..at.len() {
            at[to] = at[to - 1] + scale * self.share(to);
            while let Some(demand) = waiting.next_if(|demand| demand.to == to) {
                at[to] = at[to].max(at[demand.from] + demand.mm);
            }
        }
        at
    }

    fn pulled(&self, scale: f64, total: f64) -> Vec<f64> {
        let mut at = vec![total; self.needs.coordinates.len()];
        for from in (0..at.len().saturating_sub(1)).rev() {
            let plain = at[from + 1] - scale * self.share(from + 1);
            let starting = self.demands.iter().filter(|demand| demand.from == from);
            at[from] = starting.map(|demand| at[demand.to] - demand.mm).fold(plain, f64::min);
        }
        at
    }

    /// Length^¾ in µm of the stretch that ends at a coordinate: a 20 times longer one is drawn 9.5 times longer.
    fn share(&self, to: usize) -> f64 {
        let root = ((self.needs.coordinates[to] - self.needs.coordinates[to - 1]) as f64 / 1000.0).sqrt();
        if self.needs.elastic[to] { root * root.sqrt() } else { STIFF * root * root.sqrt() }
    }
}
