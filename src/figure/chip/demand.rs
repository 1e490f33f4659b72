//! How wide each stretch of the drawing must be.
//!
//! Between two neighbouring borders on a scan line lies a face, and in it run the channel lines of both; through an edge
//! of a contact lines come and go. Each gives one demand on the distance of two coordinates.

use crate::figure::chip::scan::Along;
use crate::figure::chip::scan::Gap;
use crate::figure::chip::scan::coordinates;
use crate::figure::chip::scan::gaps;
use crate::layout::FaceIdx;
use crate::layout::FaceLabel;
use crate::layout::Layout;
use crate::layout::Piece;
use crate::layout::PieceIdx;
use crate::layout::VertexIdx;

/// Coordinates number `from` and `to` must lie at least so far apart.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Demand {
    pub from: usize,
    pub to: usize,
    pub mm: f64,
}

/// A straight edge of a contact along one axis, through which lines of one face come and go.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) struct Door {
    /// The sides of the pieces next to it that border the same face.
    pub sides: [Option<(PieceIdx, bool)>; 2],
}

/// All that asks for room along one axis.
pub(super) struct Needs {
    /// The distinct coordinates, in rising order.
    pub coordinates: Vec<i64>,
    /// Per coordinate: whether the stretch that ends there holds mesa and may be drawn longer than it must.
    pub elastic: Vec<bool>,
    gaps: Vec<(usize, usize, Gap)>,
    doors: Vec<(usize, usize, Door)>,
}

impl Needs {
    /// What a layout needs along one axis.
    pub fn new(layout: &Layout, along: Along) -> Self {
        let [xs, ys] = coordinates(layout);
        let (coordinates, slabs) = match along {
            Along::X => (xs, ys),
            Along::Y => (ys, xs),
        };
        let gaps = gaps(layout, along, &coordinates, &slabs);
        let doors = doors(layout, along, &coordinates);
        Self { elastic: elastic(layout, &gaps, coordinates.len()), gaps, doors, coordinates }
    }

    /// The demands, when gaps and doors must be so wide.
    pub fn demands(&self, gap_mm: impl Fn(Gap) -> f64, door_mm: impl Fn(Door) -> f64) -> Vec<Demand> {
        let open = self.gaps.iter().filter(|(from, to, _)| from < to);
        let of_gaps = open.map(|&(from, to, gap)| Demand { from, to, mm: gap_mm(gap) });
        let of_doors = self.doors.iter().map(|&(from, to, door)| Demand { from, to, mm: door_mm(door) });
        of_gaps.chain(of_doors).collect()
    }
}

fn elastic(layout: &Layout, gaps: &[(usize, usize, Gap)], count: usize) -> Vec<bool> {
    let is_mesa = |gap: &Gap| matches!(layout.topology.faces[gap.face.0], FaceLabel::Mesa(_));
    let mut elastic = vec![false; count];
    for (from, to, _) in gaps.iter().filter(|(from, to, gap)| from < to && is_mesa(gap)) {
        elastic[from + 1..=*to].fill(true);
    }
    elastic
}

/// The straight edges of contacts along an axis, with the numbers of the coordinates at their ends.
fn doors(layout: &Layout, along: Along, coordinates: &[i64]) -> Vec<(usize, usize, Door)> {
    let number = |value: i64| coordinates.binary_search(&value).unwrap_or(0);
    let pieces = layout.topology.pieces.iter().zip(&layout.positions.pieces);
    let doors = pieces.enumerate().filter_map(|(index, (piece, corners))| {
        let on_right = mesa_side(layout, piece)?;
        let [a, b] = corners[..] else { return None };
        let (from, to) = (number(along.of(a).min(along.of(b))), number(along.of(a).max(along.of(b))));
        let (start, end) = piece.ends?;
        let face = if on_right { piece.right } else { piece.left };
        let sides = [start, end].map(|vertex| next_border(layout, vertex, (PieceIdx(index), face)));
        (from < to && along.other(a) == along.other(b)).then_some((from, to, Door { sides }))
    });
    doors.collect()
}

/// Whether mesa lies on the right hand of a piece and a contact on the other; none for other pieces.
fn mesa_side(layout: &Layout, piece: &Piece) -> Option<bool> {
    let label = |face: FaceIdx| &layout.topology.faces[face.0];
    match (label(piece.left), label(piece.right)) {
        (FaceLabel::Contact(_), FaceLabel::Mesa(_)) => Some(true),
        (FaceLabel::Mesa(_), FaceLabel::Contact(_)) => Some(false),
        _ => None,
    }
}

/// The other piece at a vertex that borders a face, and whether the face is on its right hand.
fn next_border(layout: &Layout, vertex: VertexIdx, (own, face): (PieceIdx, FaceIdx)) -> Option<(PieceIdx, bool)> {
    layout.topology.fans[vertex.0].iter().filter(|spoke| spoke.piece != own).find_map(|spoke| {
        let piece = layout.topology.pieces[spoke.piece.0];
        (piece.right == face || piece.left == face).then_some((spoke.piece, piece.right == face))
    })
}
