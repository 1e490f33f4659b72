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
    /// The coordinates at which the scale may change, in rising order: none lies beside an oblique border, so that
    /// such borders stay straight.
    pub coordinates: Vec<i64>,
    /// Per coordinate: whether the stretch that ends there holds mesa and may be drawn longer than it must.
    pub elastic: Vec<bool>,
    /// All distinct coordinates of the layout.
    all: Vec<i64>,
    /// Ends of straight stretches of border.
    runs: Vec<(usize, usize)>,
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
        let runs = runs(layout, along, &coordinates);
        let free = free(layout, along, &coordinates);
        let elastic = elastic(layout, &gaps, coordinates.len());
        // A stretch between free coordinates gives way where any part of it does.
        let mut part = 0;
        let mut merged = Vec::new();
        for at in (0..coordinates.len()).filter(|&at| free[at]) {
            merged.push(elastic[part..=at].iter().any(|&elastic| elastic));
            part = at + 1;
        }
        let kept = coordinates.iter().zip(&free).filter(|(_, free)| **free).map(|(value, _)| *value).collect();
        Self { coordinates: kept, elastic: merged, all: coordinates, runs, gaps, doors }
    }

    /// The demands, when gaps and doors must be so wide and straight stretches so long.
    pub fn demands(&self, gap_mm: impl Fn(Gap) -> f64, door_mm: impl Fn(Door) -> f64, run_mm: f64) -> Vec<Demand> {
        let open = self.gaps.iter().filter(|(from, to, _)| from < to);
        let of_gaps = open.map(|&(from, to, gap)| self.demand((from, to), gap_mm(gap)));
        let of_doors = self.doors.iter().map(|&(from, to, door)| self.demand((from, to), door_mm(door)));
        let of_runs = self.runs.iter().map(|&ends| self.demand(ends, run_mm));
        of_gaps.chain(of_doors).chain(of_runs).collect()
    }

    /// Straight edges of contacts along this axis, with their length in nm.
    pub fn doors(&self) -> impl Iterator<Item = (i64, Door)> + '_ {
        self.doors.iter().map(|&(from, to, door)| (self.all[to] - self.all[from], door))
    }

    /// A demand between two coordinates as one between the free coordinates around them, in proportion, but not without
    /// bounds: lines crowd in a narrow place before the whole drawing does.
    fn demand(&self, (from, to): (usize, usize), mm: f64) -> Demand {
        let (low, high) = (self.all[from], self.all[to]);
        let from = self.coordinates.partition_point(|&free| free <= low).max(1) - 1;
        let to = self.coordinates.partition_point(|&free| free < high).min(self.coordinates.len() - 1);
        let share = (self.coordinates[to] - self.coordinates[from]) as f64 / (high - low) as f64;
        Demand { from, to, mm: mm * share.clamp(1.0, MOST_IN_PROPORTION) }
    }
}

/// By how much a demand may grow because an oblique border ties it to a longer stretch.
const MOST_IN_PROPORTION: f64 = 3.0;

/// A border whose extent along one axis is less than this share of that along the other may be drawn bent: nobody sees it.
const OBLIQUE: f64 = 0.02;

/// Whether the scale may change at each coordinate: no oblique border spans it.
fn free(layout: &Layout, along: Along, coordinates: &[i64]) -> Vec<bool> {
    let number = |value: i64| coordinates.binary_search(&value).unwrap_or(0);
    let mut free = vec![true; coordinates.len()];
    for pair in layout.positions.pieces.iter().flat_map(|corners| corners.windows(2)) {
        let (dx, dy) = ((pair[1].0 - pair[0].0).abs() as f64, (pair[1].1 - pair[0].1).abs() as f64);
        if dx.min(dy) > OBLIQUE * dx.max(dy) {
            let (a, b) = (number(along.of(pair[0])), number(along.of(pair[1])));
            free[a.min(b) + 1..a.max(b)].fill(false);
        }
    }
    free
}

fn elastic(layout: &Layout, gaps: &[(usize, usize, Gap)], count: usize) -> Vec<bool> {
    let is_mesa = |gap: &Gap| matches!(layout.topology.faces[gap.face.0], FaceLabel::Mesa(_));
    let mut elastic = vec![false; count];
    for (from, to, _) in gaps.iter().filter(|(from, to, gap)| from < to && is_mesa(gap)) {
        elastic[from + 1..=*to].fill(true);
    }
    elastic
}

/// The straight stretches of all borders along an axis.
fn runs(layout: &Layout, along: Along, coordinates: &[i64]) -> Vec<(usize, usize)> {
    let number = |value: i64| coordinates.binary_search(&value).unwrap_or(0);
    let pairs = layout.positions.pieces.iter().flat_map(|corners| corners.windows(2));
    let straight = pairs.filter(|pair| along.other(pair[0]) == along.other(pair[1]));
    let ends = straight.map(|pair| (along.of(pair[0]), along.of(pair[1])));
    let mut runs: Vec<(usize, usize)> = ends.map(|(a, b)| (number(a.min(b)), number(a.max(b)))).collect();
    runs.sort_unstable();
    runs.dedup();
    runs
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
