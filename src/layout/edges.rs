//! Edges of the arrangement: coincident pieces of outlines added up, with the change of every winding number across.

use crate::layout::Owner;
use crate::layout::grid::Cell;
use crate::layout::snap::Segment;

/// Winding numbers that are not zero, by owner, sorted.
pub(super) type Windings = Vec<(Owner, i32)>;

/// An edge between two points, `a < b`.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(super) struct Edge {
    /// Lower end in the order (x, y).
    pub(super) a: Cell,
    /// Upper end.
    pub(super) b: Cell,
    /// Winding numbers on the left of a → b minus those on its right.
    pub(super) change: Windings,
}

/// All edges across which some winding number changes, sorted by their ends.
pub(super) fn edges(segments: &[Segment]) -> Vec<Edge> {
    let mut directed: Vec<_> = segments.iter().map(sorted_ends).collect();
    directed.sort_unstable();
    let coincident = directed.chunk_by(|one, other| (one.0, one.1) == (other.0, other.1));
    let edges =
        coincident.map(|all| Edge { a: all[0].0, b: all[0].1, change: sum(all.iter().map(|one| (one.2, one.3))) });
    edges.filter(|edge| !edge.change.is_empty()).collect()
}

fn sorted_ends(segment: &Segment) -> (Cell, Cell, Owner, i32) {
    let Segment { a, b, owner } = *segment;
    if a < b { (a, b, owner, 1) } else { (b, a, owner, -1) }
}

/// Winding numbers on the other side of an edge: `windings + sign·change`.
pub(super) fn across(windings: &Windings, change: &Windings, sign: i32) -> Windings {
    let mut terms: Windings =
        windings.iter().copied().chain(change.iter().map(|(owner, by)| (*owner, sign * by))).collect();
    terms.sort_unstable();
    sum(terms.into_iter())
}

/// Adds up terms that are sorted by owner and leaves out zeros.
fn sum(terms: impl Iterator<Item = (Owner, i32)>) -> Windings {
    let mut total: Windings = Vec::new();
    for (owner, by) in terms {
        match total.last_mut() {
            Some(last) if last.0 == owner => last.1 += by,
            _ => total.push((owner, by)),
        }
    }
    total.retain(|(_, winding)| *winding != 0);
    total
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn sides_that_two_parts_of_the_mesa_share_vanish() {
        let side = |a, b| Segment { a, b, owner: Owner::Mesa };
        assert_eq!(edges(&[side((0, 0), (1, 0)), side((1, 0), (0, 0))]), []);
        let doubled = edges(&[side((1, 0), (0, 0)), side((1, 0), (0, 0))]);
        assert_eq!(doubled, [Edge { a: (0, 0), b: (1, 0), change: vec![(Owner::Mesa, -2)] }]);
    }

    #[test]
    fn windings_across_an_edge_and_back_are_the_same() {
        let start = vec![(Owner::Mesa, 1)];
        let change = vec![(Owner::Mesa, -1), (Owner::Contact(crate::device::ContactIdx(0)), 1)];
        let over = across(&start, &change, 1);
        assert_eq!(over, [change[1]]);
        assert_eq!(across(&over, &change, -1), start);
    }
}
