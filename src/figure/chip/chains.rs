//! Where every border piece lies on the drawing: chains of corners in millimetres.

use crate::figure::chip::stretch::Plane;
use crate::figure::chip::vector::distance;
use crate::figure::scene::At;
use crate::layout::Layout;
use crate::layout::PieceIdx;

/// Corners nearer than this to the straight way past them are left out, in mm: no printer shows them.
const VISIBLE_MM: f64 = 0.012;

/// The chains of all pieces, in the order of the layout. Ends are never moved, so the drawing hangs together.
pub(super) struct Chains(Vec<Vec<At>>);

impl Chains {
    /// All pieces on a plane.
    pub fn new(layout: &Layout, plane: &Plane) -> Self {
        Self(layout.positions.pieces.iter().map(|corners| simplified(&plane.chain(corners))).collect())
    }

    /// The chain of a piece.
    pub fn of(&self, piece: PieceIdx) -> &[At] {
        &self.0[piece.0]
    }

    /// All chains.
    pub fn all(&self) -> &[Vec<At>] {
        &self.0
    }
}

/// A chain without corners that nobody would see: the farthest corner of every part is kept while it is farther off than
/// the eye resolves (Douglas and Peucker, Cartographica 10 (1973) 112). A closed chain is first halved at its farthest.
fn simplified(chain: &[At]) -> Vec<At> {
    let last = chain.len().saturating_sub(1);
    let mut kept = vec![false; chain.len()];
    let mut parts = vec![(0, last)];
    while let Some((from, to)) = parts.pop() {
        kept[from] = true;
        kept[to] = true;
        let far = |at: usize| distance(chain[at], (chain[from], chain[to]));
        let farthest = (from + 1..to).reduce(|best, next| if far(next) > far(best) { next } else { best });
        if let Some(at) = farthest.filter(|&at| far(at) > VISIBLE_MM) {
            parts.extend([(from, at), (at, to)]);
        }
    }
    chain.iter().zip(kept).filter(|(_, kept)| *kept).map(|(point, _)| *point).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn corners_that_nobody_sees_are_left_out() {
        let bent = [(0.0, 0.0), (5.0, 0.01), (10.0, 0.0), (10.0, 4.0)];
        assert_eq!(simplified(&bent), [bent[0], bent[2], bent[3]]);
        let closed = [(0.0, 0.0), (3.0, 0.0), (6.0, 0.0), (6.0, 6.0), (0.0, 0.0)];
        assert_eq!(simplified(&closed), [closed[0], closed[2], closed[3], closed[4]]);
    }
}
