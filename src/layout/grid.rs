//! The grid of pixels on which the arrangement lives, and exact products of its points.

use crate::layout::Point;
use crate::quantity::Nanometres;

/// A point in whole pixels: (x, y).
pub(super) type Cell = (i64, i64);

/// No length in a device file may be greater than this (one metre). Corners made from three of them, and products of
/// three such corners, then fit into 64 and 128 bits.
pub(super) const FARTHEST: Nanometres = Nanometres(1_000_000_000);

/// Square pixels of one snap length; a pixel owns its lower and left border.
#[derive(Clone, Copy, Debug)]
pub(super) struct Grid {
    /// Side of a pixel in nm, at least 1.
    pub(super) snap: i64,
}

impl Grid {
    /// The pixel in which a point lies.
    pub(super) fn cell(self, point: Point) -> Cell {
        (self.round(point.0), self.round(point.1))
    }

    /// The centre of a pixel, in nm.
    pub(super) fn point(self, cell: Cell) -> Point {
        (cell.0 * self.snap, cell.1 * self.snap)
    }

    fn round(self, nm: i64) -> i64 {
        (2 * nm + self.snap).div_euclid(2 * self.snap)
    }
}

/// The whole number of pixels nearest to a length in pixels.
pub(super) fn round_to_cell(pixels: f64) -> i64 {
    libm::round(pixels) as i64
}

/// `b − a`.
pub(super) fn step(a: Cell, b: Cell) -> (i128, i128) {
    (i128::from(b.0) - i128::from(a.0), i128::from(b.1) - i128::from(a.1))
}

/// Cross product of two vectors: positive when `v` points to the left of `u`.
pub(super) fn cross(u: (i128, i128), v: (i128, i128)) -> i128 {
    u.0 * v.1 - u.1 * v.0
}

/// Scalar product of two vectors.
pub(super) fn dot(u: (i128, i128), v: (i128, i128)) -> i128 {
    u.0 * v.0 + u.1 * v.1
}

/// Positive when `p` lies on the left of the line from `a` to `b`, zero when it lies on it.
pub(super) fn side(a: Cell, b: Cell, p: Cell) -> i128 {
    cross(step(a, b), step(a, p))
}

/// Twice the area inside a ring, positive when it runs anticlockwise.
pub(super) fn doubled_area(ring: &[Cell]) -> i128 {
    let next = ring.iter().cycle().skip(1);
    ring.iter().zip(next).map(|(a, b)| cross(step((0, 0), *a), step((0, 0), *b))).sum()
}

/// Whether `p`, known to lie on the line through `a` and `b`, lies between them (ends included).
pub(super) fn between(a: Cell, b: Cell, p: Cell) -> bool {
    dot(step(p, a), step(p, b)) <= 0
}

/// The pixel in which two segments cross; none where they are parallel or do not meet.
pub(super) fn crossing(a: (Cell, Cell), b: (Cell, Cell)) -> Option<Cell> {
    let (u, v, w) = (step(a.0, a.1), step(b.0, b.1), step(a.0, b.0));
    let denominator = cross(u, v);
    let sign = denominator.signum();
    // The crossing is a.0 + u·(along/span); `along` and `across` must both lie between 0 and `span`.
    let (span, along, across) = (sign * denominator, sign * cross(w, v), sign * cross(w, u));
    let inside = span > 0 && (0..=span).contains(&along) && (0..=span).contains(&across);
    let nearest = |start: i64, length: i128| start + rounded(length * along, span);
    inside.then(|| (nearest(a.0.0, u.0), nearest(a.0.1, u.1)))
}

/// The whole number nearest to `numerator / denominator`, halves upward. It fits where the result lies between
/// corners.
pub(super) fn rounded(numerator: i128, denominator: i128) -> i64 {
    (2 * numerator + denominator).div_euclid(2 * denominator) as i64
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_pixel_owns_its_lower_and_left_border() {
        let grid = Grid { snap: 10 };
        assert_eq!(grid.cell((-5, 4)), (0, 0));
        assert_eq!(grid.cell((5, -6)), (1, -1));
        assert_eq!(Grid { snap: 1 }.cell((-7, 3)), (-7, 3));
    }

    #[test]
    fn crossings_are_rounded_half_upward_in_either_order() {
        let rising = ((0, 0), (1, 1));
        let falling = ((0, 1), (1, 0));
        assert_eq!(crossing(rising, falling), Some((1, 1)));
        assert_eq!(crossing(falling, rising), Some((1, 1)));
        assert_eq!(crossing(((0, 0), (4, 0)), ((5, -1), (5, 1))), None);
        assert_eq!(crossing(((0, 0), (4, 0)), ((0, 0), (9, 0))), None);
    }

    #[test]
    fn the_farthest_corners_do_not_overflow() {
        let far = 3 * FARTHEST.0;
        let diagonals = (((-far, -far), (far, far)), ((-far, far), (far, -far + 1)));
        assert_eq!(crossing(diagonals.0, diagonals.1), Some((0, 0)));
        assert_eq!(doubled_area(&[(-far, -far), (far, -far), (far, far), (-far, far)]), 72_000_000_000_000_000_000);
    }
}
