//! Rims of the mesa, measured along: the place nearest to a point, and stretches of rim.
//!
//! Positions along a rim are whole picometres from its first corner, so that they can be compared exactly; the stretch
//! between two positions bends with the rim and has the rim's own corners.

use std::collections::BTreeMap;

use crate::layout::Owner;
use crate::layout::Point;
use crate::layout::grid::Cell;
use crate::layout::grid::Grid;
use crate::layout::grid::dot;
use crate::layout::grid::rounded;
use crate::layout::grid::step;

/// Picometres in a nanometre.
pub(super) const PM: i128 = 1000;

/// A closed rim with the mesa on its left.
#[derive(Clone, Debug)]
pub(super) struct Rim {
    /// Whose outline it is.
    pub(super) owner: Owner,
    grid: Grid,
    corners: Vec<Point>,
    /// Position of every corner, and at the end the length of the whole.
    positions: Vec<i128>,
}

/// The place of a rim that is nearest to some point.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub(super) struct Foot {
    /// Square of the distance in nm².
    pub(super) distance_squared: i128,
    /// Position along the rim.
    pub(super) position: i128,
    /// Where it lies, rounded to whole nm.
    pub(super) point: Point,
}

/// A stretch of a rim.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) struct Reach {
    /// Start, from 0 to below the length of the rim.
    pub(super) low: i128,
    /// End; beyond the length of the rim where the stretch passes its first corner.
    pub(super) high: i128,
}

impl Rim {
    /// The rim of a ring of pixels.
    pub(super) fn new(owner: Owner, ring: &[Cell], grid: Grid) -> Self {
        let corners: Vec<Point> = ring.iter().map(|cell| grid.point(*cell)).collect();
        let mut positions = vec![0];
        for (n, corner) in corners.iter().enumerate() {
            positions.push(positions[n] + length_pm(*corner, corners[(n + 1) % corners.len()]));
        }
        Self { owner, grid, corners, positions }
    }

    /// Length of the whole rim in pm.
    pub(super) fn length(&self) -> i128 {
        self.positions[self.corners.len()]
    }

    /// The place nearest to a point; the first of several.
    pub(super) fn nearest(&self, point: Point) -> Option<Foot> {
        (0..self.corners.len()).map(|side| self.foot(side, point)).min()
    }

    fn foot(&self, side: usize, point: Point) -> Foot {
        let (a, b) = self.side(side);
        let (along, offset) = (step(a, b), step(a, point));
        let square = dot(along, along);
        let share = dot(along, offset).clamp(0, square);
        let foot = (a.0 + rounded(along.0 * share, square), a.1 + rounded(along.1 * share, square));
        let away = step(foot, point);
        // share/square of the side's own length.
        let position = self.positions[side] + share * (self.positions[side + 1] - self.positions[side]) / square;
        Foot { distance_squared: dot(away, away), position, point: foot }
    }

    /// The stretch of this width in nm with its middle at a position; none where it would take the whole rim. An end
    /// nearer than two pixels to a corner is that corner: no side of the rim is made shorter than that.
    pub(super) fn reach(&self, middle: i128, width: i64) -> Option<Reach> {
        let width = PM * i128::from(width);
        let (low, high) = (middle - width / 2, middle - width / 2 + width);
        let (low, high) = (low + self.to_corner(low), high + self.to_corner(high));
        let turns = low.div_euclid(self.length()) * self.length();
        (width < self.length()).then_some(Reach { low: low - turns, high: high - turns })
    }

    /// How far the nearest corner lies ahead, or behind with a minus; 0 where it is two pixels away or farther.
    fn to_corner(&self, position: i128) -> i128 {
        let position = position.rem_euclid(self.length());
        let next = self.positions.partition_point(|corner| *corner < position);
        let beside = self.positions[next.saturating_sub(1)..].iter().take(2).map(|corner| corner - position);
        let near = |away: &i128| away.abs() < 2 * PM * i128::from(self.grid.snap);
        beside.filter(near).min_by_key(|away| away.abs()).unwrap_or(0)
    }

    /// The pixels of a stretch: both ends, and the corners of the rim between them.
    pub(super) fn chain(&self, reach: Reach) -> Vec<Cell> {
        let inner = self.corners_between(reach);
        let mut chain = vec![self.cell(reach.low)];
        chain.extend(inner.map(|corner| self.grid.cell(corner)));
        chain.push(self.cell(reach.high));
        chain.dedup();
        chain
    }

    fn corners_between(&self, reach: Reach) -> impl Iterator<Item = Point> + '_ {
        let count = self.corners.len();
        let twice = (0..2 * count).map(move |n| (self.positions[n % count] + self.turns(n), self.corners[n % count]));
        twice.filter(move |(position, _)| reach.low < *position && *position < reach.high).map(|(_, corner)| corner)
    }

    fn turns(&self, corner: usize) -> i128 {
        if corner < self.corners.len() { 0 } else { self.length() }
    }

    /// The corner before a position, and the one behind it.
    pub(super) fn neighbours(&self, position: i128) -> (Cell, Cell) {
        let count = self.corners.len();
        let position = position.rem_euclid(self.length());
        let before = self.positions[..count].partition_point(|corner| *corner < position) + count - 1;
        let behind = self.positions[..count].partition_point(|corner| *corner <= position);
        (self.grid.cell(self.corners[before % count]), self.grid.cell(self.corners[behind % count]))
    }

    /// The ring with a pixel at each of these positions, so that what ends there ends in a corner of it.
    pub(super) fn with_corners_at(&self, positions: &[i128]) -> Vec<Cell> {
        let added = positions.iter().map(|position| (position.rem_euclid(self.length()), self.cell(*position)));
        let own = self.positions.iter().copied().zip(self.corners.iter().map(|corner| self.grid.cell(*corner)));
        let all: BTreeMap<i128, Cell> = added.chain(own).collect();
        let mut ring: Vec<Cell> = all.into_values().collect();
        ring.dedup();
        ring
    }

    /// The pixel at a position.
    pub(super) fn cell(&self, position: i128) -> Cell {
        let position = position.rem_euclid(self.length());
        let side = self.positions.partition_point(|corner| *corner <= position) - 1;
        let ((a, b), length) = (self.side(side), self.positions[side + 1] - self.positions[side]);
        let (along, share) = (step(a, b), position - self.positions[side]);
        self.grid.cell((a.0 + rounded(along.0 * share, length), a.1 + rounded(along.1 * share, length)))
    }

    fn side(&self, side: usize) -> (Point, Point) {
        (self.corners[side], self.corners[(side + 1) % self.corners.len()])
    }
}

/// Length of a side in pm, rounded down; at least 1, because corners of a ring differ.
fn length_pm(a: Point, b: Point) -> i128 {
    let along = step(a, b);
    (PM * PM * dot(along, along)).isqrt().max(1)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// A square of 30 µm turned by the angle of the 3-4-5 triangle, so that every length along it is whole.
    fn turned() -> Rim {
        let ring = [(0, 0), (2_400, 1_800), (600, 4_200), (-1_800, 2_400)];
        Rim::new(Owner::Mesa, &ring, Grid { snap: 10 })
    }

    #[test]
    fn the_nearest_place_is_found_off_and_on_the_rim() {
        let rim = turned();
        assert_eq!(rim.length(), 120_000 * PM);
        let on = rim.nearest((12_000, 9_000)).unwrap();
        assert_eq!((on.distance_squared, on.position), (0, 15_000 * PM));
        // 5 µm outward: (3, −4) µm.
        let off = rim.nearest((15_000, 5_000)).unwrap();
        assert_eq!((off.distance_squared, off.point), (5_000 * 5_000, (12_000, 9_000)));
        let corner = rim.nearest((100_000, 18_000)).unwrap();
        assert_eq!((corner.position, corner.point), (30_000 * PM, (24_000, 18_000)));
    }

    #[test]
    fn stretches_bend_round_corners_and_past_the_first() {
        let rim = turned();
        let round_corner = rim.reach(30_000 * PM, 10_000).unwrap();
        assert_eq!(rim.chain(round_corner), [(2_000, 1_500), (2_400, 1_800), (2_100, 2_200)]);
        let past = rim.reach(0, 10_000).unwrap();
        assert_eq!(rim.chain(past), [(-300, 400), (0, 0), (400, 300)]);
        assert_eq!(rim.reach(0, 120_000), None);
        let nearly = rim.reach(25_010 * PM, 10_000).unwrap();
        assert_eq!(rim.chain(nearly), [(1_601, 1_201), (2_400, 1_800)]);
        assert_eq!(rim.neighbours(0), ((-1_800, 2_400), (2_400, 1_800)));
        assert_eq!(rim.with_corners_at(&[115_000 * PM, 125_000 * PM]).len(), 6);
    }
}
