//! What a closed outline must be: at least three corners, no doubling back, no side that meets another.

use crate::layout::grid::Cell;
use crate::layout::grid::between;
use crate::layout::grid::cross;
use crate::layout::grid::crossing;
use crate::layout::grid::dot;
use crate::layout::grid::doubled_area;
use crate::layout::grid::side;
use crate::layout::grid::step;

/// A side of an outline: start and end.
pub(super) type Side = (Cell, Cell);

/// Why a list of corners encloses no area of its own.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Flaw {
    /// Fewer than three different corners are left.
    TooFew,
    /// The outline runs back on itself at this corner.
    Spike(Cell),
    /// Two sides that are not neighbours meet at a point.
    Crossing(Side, Side, Cell),
}

/// The ring without repeated and straight corners, anticlockwise.
///
/// Crossings are looked for before the area is used: a symmetric bow-tie has none.
pub(super) fn ring(corners: &[Cell]) -> Result<Vec<Cell>, Flaw> {
    let corners = without_repeats(corners);
    if corners.len() < 3 {
        return Err(Flaw::TooFew);
    }
    let mut ring = without_straight(&corners)?;
    if let Some((one, other, at)) = first_crossing(&ring) {
        return Err(Flaw::Crossing(one, other, at));
    }
    if doubled_area(&ring) < 0 {
        ring.reverse();
    }
    Ok(ring)
}

/// The sides of a ring in order.
pub(super) fn sides(ring: &[Cell]) -> impl Iterator<Item = Side> + '_ {
    ring.iter().copied().zip(ring.iter().copied().cycle().skip(1))
}

/// The lower left and the upper right corner of the rectangle round some pixels; none round none.
pub(super) fn extent(cells: &[Cell]) -> Option<(Cell, Cell)> {
    let first = *cells.first()?;
    let wider = |(low, high): (Cell, Cell), cell: &Cell| {
        ((low.0.min(cell.0), low.1.min(cell.1)), (high.0.max(cell.0), high.1.max(cell.1)))
    };
    Some(cells.iter().fold((first, first), wider))
}

fn without_repeats(corners: &[Cell]) -> Vec<Cell> {
    let mut kept = corners.to_vec();
    kept.dedup();
    while kept.len() > 1 && kept.first() == kept.last() {
        kept.pop();
    }
    kept
}

fn without_straight(corners: &[Cell]) -> Result<Vec<Cell>, Flaw> {
    let mut kept = Vec::with_capacity(corners.len());
    for (n, corner) in corners.iter().enumerate() {
        let before = corners[(n + corners.len() - 1) % corners.len()];
        let arriving = step(before, *corner);
        let leaving = step(*corner, corners[(n + 1) % corners.len()]);
        match (cross(arriving, leaving) == 0, dot(arriving, leaving) > 0) {
            (true, false) => return Err(Flaw::Spike(*corner)),
            (true, true) => {}
            _ => kept.push(*corner),
        }
    }
    Ok(kept)
}

fn first_crossing(ring: &[Cell]) -> Option<(Side, Side, Cell)> {
    let sides: Vec<Side> = sides(ring).collect();
    let last = sides.len() - 1;
    for (n, one) in sides.iter().enumerate() {
        let end = if n == 0 { last } else { last + 1 };
        let distant = sides.iter().take(end).skip(n + 2);
        let met = distant.filter_map(|other| meeting(*one, *other).map(|at| (*one, *other, at))).next();
        if met.is_some() {
            return met;
        }
    }
    None
}

/// A point that two sides have in common.
pub(super) fn meeting(one: Side, other: Side) -> Option<Cell> {
    let on = |line: Side, p: Cell| side(line.0, line.1, p) == 0 && between(line.0, line.1, p);
    let ends = [(other, one.0), (other, one.1), (one, other.0), (one, other.1)];
    let touching = || ends.into_iter().find(|(line, p)| on(*line, *p)).map(|(_, p)| p);
    crossing(one, other).or_else(touching)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_clean_ring_runs_anticlockwise_through_its_true_corners() {
        let square = [(0, 0), (0, 4), (0, 4), (4, 4), (4, 0), (2, 0), (0, 0)];
        let ring = ring(&square).unwrap();
        assert_eq!((ring.len(), doubled_area(&ring)), (4, 32));
    }

    #[test]
    fn a_symmetric_bow_tie_crosses_itself_though_it_has_no_area() {
        let tie = [(0, 0), (10, 10), (10, 0), (0, 10)];
        assert_eq!(doubled_area(&tie), 0);
        assert_eq!(ring(&tie), Err(Flaw::Crossing(((0, 0), (10, 10)), ((10, 0), (0, 10)), (5, 5))));
    }

    #[test]
    fn doubling_back_and_touching_are_flaws() {
        assert_eq!(ring(&[(0, 0), (5, 0), (9, 0)]), Err(Flaw::Spike((0, 0))));
        assert_eq!(ring(&[(0, 0), (9, 0), (0, 0)]), Err(Flaw::TooFew));
        let touching = [(0, 0), (8, 0), (8, 8), (4, 0), (0, 8)];
        assert!(matches!(ring(&touching), Err(Flaw::Crossing(_, _, (4, 0)))));
        let shared_side = [(0, 0), (8, 0), (8, 4), (6, 4), (6, 0), (2, 0), (2, 4), (0, 4)];
        assert!(matches!(ring(&shared_side), Err(Flaw::Crossing(..))));
    }
}
