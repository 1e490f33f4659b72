//! Walks along the border of a set of faces, with the set kept on one hand.

use std::collections::BTreeSet;

use crate::layout::FaceIdx;
use crate::layout::PieceIdx;
use crate::layout::Spoke;
use crate::layout::Topology;
use crate::layout::VertexIdx;

/// The hand on which the set lies while walking.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Hand {
    Left,
    Right,
}

/// A piece walked in a direction: `forward` from its first to its last point.
pub(super) type Walk = (PieceIdx, bool);

/// Walks round a set of faces. Where two parts of the set meet in a point only, each walk stays with its own part.
pub(super) struct Walker<'a, F: Fn(FaceIdx) -> bool> {
    pub topology: &'a Topology,
    pub inside: F,
    pub hand: Hand,
}

impl<F: Fn(FaceIdx) -> bool> Walker<'_, F> {
    /// Every closed walk round the set, in the order of their lowest pieces.
    pub fn loops(&self) -> Vec<Vec<Walk>> {
        let mut walked = BTreeSet::new();
        let mut loops = Vec::new();
        for start in self.border() {
            if !walked.contains(&start) {
                let walk = self.walk_from(start);
                walked.extend(walk.iter().copied());
                loops.push(walk);
            }
        }
        loops
    }

    /// The walk that follows `walk`, with the vertex between them; none after a closed piece.
    pub fn next(&self, (piece, forward): Walk) -> Option<(VertexIdx, Walk)> {
        let (vertex, spoke) = self.spoke_at(piece, !forward)?;
        let spoke = self.sweep(vertex, spoke, self.hand);
        let Spoke { piece, outward } = self.topology.fans[vertex.0][spoke];
        Some((vertex, (piece, outward)))
    }

    /// The walk that comes before `walk`, with the vertex between them; none before a closed piece.
    pub fn previous(&self, (piece, forward): Walk) -> Option<(VertexIdx, Walk)> {
        let (vertex, spoke) = self.spoke_at(piece, forward)?;
        let spoke = self.sweep(vertex, spoke, self.hand.other());
        let Spoke { piece, outward } = self.topology.fans[vertex.0][spoke];
        Some((vertex, (piece, !outward)))
    }

    /// The face on the other hand: the one outside the set.
    pub fn outside(&self, (piece, forward): Walk) -> FaceIdx {
        let piece = &self.topology.pieces[piece.0];
        if forward == (self.hand == Hand::Right) { piece.left } else { piece.right }
    }

    fn border(&self) -> impl Iterator<Item = Walk> {
        let walks = (0..self.topology.pieces.len()).flat_map(|at| [(PieceIdx(at), true), (PieceIdx(at), false)]);
        walks.filter(|&walk| !(self.inside)(self.outside(walk)) && (self.inside)(self.outside((walk.0, !walk.1))))
    }

    fn walk_from(&self, start: Walk) -> Vec<Walk> {
        let mut walk = vec![start];
        let mut at = start;
        while let Some((_, next)) = self.next(at).filter(|(_, next)| *next != start) {
            walk.push(next);
            at = next;
        }
        walk
    }

    fn spoke_at(&self, piece: PieceIdx, outward: bool) -> Option<(VertexIdx, usize)> {
        let (first, last) = self.topology.pieces[piece.0].ends?;
        let vertex = if outward { first } else { last };
        let spoke = self.topology.fans[vertex.0].iter().position(|s| *s == Spoke { piece, outward })?;
        Some((vertex, spoke))
    }

    /// Turns round a vertex from `spoke` through the faces of the set, to the spoke where the set ends.
    ///
    /// Arriving with the set on the right hand, the set is on the left hand of the spoke seen from the vertex outward:
    /// the sweep goes anticlockwise. With the set on the left it goes clockwise.
    fn sweep(&self, vertex: VertexIdx, spoke: usize, arriving: Hand) -> usize {
        let fan = &self.topology.fans[vertex.0];
        let turn = |at: usize| match arriving {
            Hand::Right => (at + 1) % fan.len(),
            Hand::Left => (at + fan.len() - 1) % fan.len(),
        };
        let ahead = |at: usize| match arriving {
            Hand::Right => self.face_after(fan[at]),
            Hand::Left => self.face_after(fan[turn(at)]),
        };
        let mut at = turn(spoke);
        while at != spoke && (self.inside)(ahead(at)) {
            at = turn(at);
        }
        at
    }

    /// The face on the left hand of a spoke looking outward.
    fn face_after(&self, Spoke { piece, outward }: Spoke) -> FaceIdx {
        let piece = &self.topology.pieces[piece.0];
        if outward { piece.left } else { piece.right }
    }
}

impl Hand {
    fn other(self) -> Self {
        match self {
            Self::Left => Self::Right,
            Self::Right => Self::Left,
        }
    }
}
