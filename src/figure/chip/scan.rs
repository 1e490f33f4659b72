//! Scan lines across the chip: which borders they meet, and which face lies between.

use crate::layout::FaceIdx;
use crate::layout::Layout;
use crate::layout::PieceIdx;
use crate::layout::Point;

/// Along x or along y.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub(super) enum Along {
    X,
    Y,
}

/// The distinct coordinates of a layout, in rising order: x, then y.
pub(super) fn coordinates(layout: &Layout) -> [Vec<i64>; 2] {
    [Along::X, Along::Y].map(|along| {
        let points = layout.positions.pieces.iter().flatten();
        let mut values: Vec<i64> = points.map(|&point| along.of(point)).collect();
        values.sort_unstable();
        values.dedup();
        values
    })
}

/// What a scan line finds between two neighbouring borders.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub(super) struct Gap {
    /// The face between them.
    pub face: FaceIdx,
    /// Their pieces, and whether the face is on the right hand of each.
    pub sides: [(PieceIdx, bool); 2],
    /// The direction of the scan.
    pub along: Along,
}

/// All gaps between borders that scan lines meet, with the numbers of the coordinates between which they lie. A gap that
/// closes within a slab counts from its narrowest place on and may have none.
pub(super) fn gaps(layout: &Layout, along: Along, coordinates: &[i64], slabs: &[i64]) -> Vec<(usize, usize, Gap)> {
    let borders = borders(layout);
    let number = |value: i64| coordinates.binary_search(&value).unwrap_or(0);
    let mut found = Vec::new();
    let mut below: Vec<Between> = Vec::new();
    for slab in slabs.windows(2) {
        let crossings = crossings(&borders, along, (slab[0], slab[1]));
        let here: Vec<Between> = crossings.windows(2).map(|pair| between(layout, along, pair)).collect();
        let necks: Vec<Between> =
            below.iter().flat_map(|gap| here.iter().filter_map(move |other| neck(gap, other))).collect();
        found.extend(
            here.iter().chain(&necks).map(|between| (number(between.ends.0), number(between.ends.1), between.gap)),
        );
        below = here;
    }
    found.sort_unstable();
    found.dedup();
    found
}

/// A gap with the coordinates between which it lies, where its borders do not lean.
#[derive(Clone, Copy)]
struct Between {
    ends: (i64, i64),
    upright: bool,
    gap: Gap,
}

fn between(layout: &Layout, along: Along, pair: &[Crossing]) -> Between {
    let upright = pair.iter().all(|crossing| crossing.low == crossing.high);
    Between { ends: (pair[0].high, pair[1].low), upright, gap: gap(layout, along, pair) }
}

/// The neck between two gaps of one face in neighbouring slabs, bounded by one border of each.
fn neck(below: &Between, above: &Between) -> Option<Between> {
    let is_neck = below.gap.face == above.gap.face && below.upright && above.upright;
    let (left, right) = (below.ends.0.max(above.ends.0), below.ends.1.min(above.ends.1));
    let of = |at: usize, from_below: bool| if from_below { below.gap.sides[at] } else { above.gap.sides[at] };
    let (left_below, right_below) = (left == below.ends.0, right == below.ends.1);
    let leans = below.ends.0 != above.ends.0 && below.ends.1 != above.ends.1 && left_below != right_below;
    let gap = Gap { sides: [of(0, left_below), of(1, right_below)], ..below.gap };
    (is_neck && leans && left < right).then_some(Between { ends: (left, right), upright: true, gap })
}

struct Border {
    piece: PieceIdx,
    ends: (Point, Point),
}

fn borders(layout: &Layout) -> Vec<Border> {
    let pieces = layout.positions.pieces.iter().enumerate();
    pieces
        .flat_map(|(piece, corners)| {
            corners.windows(2).map(move |pair| Border { piece: PieceIdx(piece), ends: (pair[0], pair[1]) })
        })
        .collect()
}

/// A border that crosses a slab.
struct Crossing {
    piece: PieceIdx,
    /// Whether it runs toward rising coordinates of the slab's axis.
    rising: bool,
    /// Lowest and highest coordinate along the scan within the slab's corners.
    low: i64,
    high: i64,
    /// Coordinate in the middle of the slab.
    middle: f64,
}

/// Borders that cross the slab from side to side, in the order in which the scan meets them.
fn crossings(borders: &[Border], along: Along, (bottom, top): (i64, i64)) -> Vec<Crossing> {
    let mut met: Vec<Crossing> = borders.iter().filter_map(|border| crossing(border, along, (bottom, top))).collect();
    met.sort_by(|a, b| a.middle.total_cmp(&b.middle));
    met
}

fn crossing(border: &Border, along: Along, (bottom, top): (i64, i64)) -> Option<Crossing> {
    let (a, b) = border.ends;
    let (start, end) = (along.other(a), along.other(b));
    if start.min(end) > bottom || start.max(end) < top {
        return None;
    }
    let (from, to) = (along.of(a), along.of(b));
    let share = ((bottom + top) as f64 / 2.0 - start as f64) / (end - start) as f64;
    Some(Crossing {
        piece: border.piece,
        rising: end > start,
        low: from.min(to),
        high: from.max(to),
        middle: from as f64 + share * (to - from) as f64,
    })
}

fn gap(layout: &Layout, along: Along, pair: &[Crossing]) -> Gap {
    // Going up, the right hand points to larger x; going to the right, it points to smaller y.
    let ahead_is_right = |crossing: &Crossing| crossing.rising == (along == Along::X);
    let first = (pair[0].piece, ahead_is_right(&pair[0]));
    let second = (pair[1].piece, !ahead_is_right(&pair[1]));
    let piece = layout.topology.pieces[first.0.0];
    Gap { face: if first.1 { piece.right } else { piece.left }, sides: [first, second], along }
}

impl Along {
    pub fn of(self, point: Point) -> i64 {
        match self {
            Self::X => point.0,
            Self::Y => point.1,
        }
    }

    pub fn other(self, point: Point) -> i64 {
        match self {
            Self::X => point.1,
            Self::Y => point.0,
        }
    }
}
