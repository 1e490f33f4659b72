//! Areas of the chip on the drawing: outlines of faces, and whether a point lies inside.

use crate::figure::chip::chains::Chains;
use crate::figure::chip::stretch::Frame;
use crate::figure::scene::At;
use crate::figure::scene::Segment;
use crate::layout::FaceIdx;
use crate::layout::FaceLabel;
use crate::layout::Layout;

/// An area by its closed outlines; cut-outs are outlines too.
#[derive(Clone, Debug, Default, PartialEq)]
pub(super) struct Area {
    pub rings: Vec<Vec<At>>,
}

impl Area {
    /// The area of all faces that are wanted.
    pub fn of(layout: &Layout, chains: &Chains, wanted: impl Fn(FaceIdx, &FaceLabel) -> bool) -> Self {
        let inside = |face: FaceIdx| wanted(face, &layout.topology.faces[face.0]);
        let pieces = layout.topology.pieces.iter().zip(chains.all());
        let chains = pieces.filter_map(|(piece, chain)| {
            let chain = chain.clone();
            match (inside(piece.left), inside(piece.right)) {
                (true, false) => Some(chain),
                (false, true) => Some(chain.into_iter().rev().collect()),
                _ => None,
            }
        });
        Self { rings: joined(chains.collect()) }
    }

    /// Whether a point lies inside (even-odd rule).
    pub fn holds(&self, point: At) -> bool {
        let above = self.sides().filter(|(a, b)| (a.1 > point.1) != (b.1 > point.1));
        let right = above.filter(|(a, b)| point.0 < a.0 + (point.1 - a.1) / (b.1 - a.1) * (b.0 - a.0));
        right.count() % 2 == 1
    }

    /// The straight sides of all outlines.
    pub fn sides(&self) -> impl Iterator<Item = (At, At)> + '_ {
        self.rings.iter().flat_map(|ring| ring.iter().zip(ring.iter().cycle().skip(1)).map(|(a, b)| (*a, *b)))
    }

    /// Pen movements along all outlines.
    pub fn segments(&self) -> Vec<Segment> {
        let ring = |ring: &Vec<At>| {
            let moves = ring.iter().enumerate();
            let drawn = moves.map(|(at, point)| if at == 0 { Segment::Move(*point) } else { Segment::Line(*point) });
            drawn.chain([Segment::Close]).collect::<Vec<_>>()
        };
        self.rings.iter().flat_map(ring).collect()
    }

    /// The smallest box around the area.
    pub fn frame(&self) -> Option<Frame> {
        let mut points = self.rings.iter().flatten();
        let &(x, y) = points.next()?;
        let start = Frame { left: x, top: y, right: x, bottom: y };
        Some(points.fold(start, |frame, &(x, y)| Frame {
            left: frame.left.min(x),
            top: frame.top.min(y),
            right: frame.right.max(x),
            bottom: frame.bottom.max(y),
        }))
    }
}

/// Joins chains end to start into closed rings. Chains come from a planar subdivision, so every end has a start.
fn joined(mut chains: Vec<Vec<At>>) -> Vec<Vec<At>> {
    let mut rings = Vec::new();
    while let Some(mut ring) = chains.pop() {
        while ring.first() != ring.last() {
            let end = ring.last().copied();
            let Some(next) = chains.iter().position(|chain| chain.first().copied() == end) else { break };
            ring.extend(chains.swap_remove(next).into_iter().skip(1));
        }
        ring.pop();
        rings.push(ring);
    }
    rings
}
