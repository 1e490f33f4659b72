//! Hot-pixel snap rounding in one pass.
//!
//! Every corner and every rounded crossing makes its pixel hot; every segment is replaced by the chain of the centres of
//! the hot pixels that it passes. The chains meet only at their corners, and no corner moves by more than half the
//! diagonal of a pixel (Hobby, "Practical segment intersection with finite precision output", Comput. Geom. 13 (1999)
//! 199). A second pass could move corners again, so it is never repeated: the user's outlines stay the source.

use crate::layout::Owner;
use crate::layout::grid::Cell;
use crate::layout::grid::cross;
use crate::layout::grid::crossing;
use crate::layout::grid::dot;
use crate::layout::grid::step;

/// A straight side of an outline, with the inside on its left.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) struct Segment {
    /// Start.
    pub(super) a: Cell,
    /// End.
    pub(super) b: Cell,
    /// Whose outline it belongs to.
    pub(super) owner: Owner,
}

impl Segment {
    fn x_range(&self) -> (i64, i64) {
        (self.a.0.min(self.b.0), self.a.0.max(self.b.0))
    }

    fn y_range(&self) -> (i64, i64) {
        (self.a.1.min(self.b.1), self.a.1.max(self.b.1))
    }
}

/// The segments cut and moved so that they meet only at their ends (or coincide).
pub(super) fn snap(segments: &[Segment]) -> Vec<Segment> {
    let hot = hot_pixels(segments);
    let mut cut = Vec::with_capacity(2 * segments.len());
    for segment in segments {
        let chain = passed(segment, &hot);
        cut.extend(chain.windows(2).map(|ends| Segment { a: ends[0], b: ends[1], owner: segment.owner }));
    }
    cut
}

/// Corners and rounded crossings, sorted, each once.
fn hot_pixels(segments: &[Segment]) -> Vec<Cell> {
    let mut hot: Vec<Cell> = segments.iter().flat_map(|segment| [segment.a, segment.b]).collect();
    let mut order: Vec<&Segment> = segments.iter().collect();
    order.sort_by_key(|segment| segment.x_range());
    for (n, one) in order.iter().enumerate() {
        let (bottom, top) = one.y_range();
        let near = order[n + 1..].iter().take_while(|other| other.x_range().0 <= one.x_range().1);
        let beside = near.filter(|other| other.y_range().0 <= top && other.y_range().1 >= bottom);
        hot.extend(beside.filter_map(|other| crossing((one.a, one.b), (other.a, other.b))));
    }
    hot.sort_unstable();
    hot.dedup();
    hot
}

/// The hot pixels (sorted) that a segment passes, from its start to its end.
pub(super) fn passed(segment: &Segment, hot: &[Cell]) -> Vec<Cell> {
    let (left, right) = segment.x_range();
    let (bottom, top) = segment.y_range();
    let first = hot.partition_point(|pixel| pixel.0 < left);
    let near = hot[first..].iter().take_while(|pixel| pixel.0 <= right);
    let beside = near.filter(|pixel| bottom <= pixel.1 && pixel.1 <= top);
    let mut chain: Vec<Cell> = beside.filter(|pixel| passes(segment, **pixel)).copied().collect();
    let along = step(segment.a, segment.b);
    chain.sort_by_key(|pixel| dot(along, step(segment.a, *pixel)));
    chain
}

/// Whether a segment passes a pixel whose centre lies in the segment's bounding box.
///
/// Doubled, the line's side function at a corner of the pixel differs from its value at the centre by at most
/// |dx| + |dy|. The two corners where that is reached belong to the pixel only if one of them is the lower left one,
/// which is so for a falling line. Within the bounding box the line inside the pixel is the segment, because the
/// segment ends in centres of pixels.
fn passes(segment: &Segment, pixel: Cell) -> bool {
    let (a, b) = if segment.a < segment.b { (segment.a, segment.b) } else { (segment.b, segment.a) };
    let along = step(a, b);
    let reach = along.0.abs() + along.1.abs();
    let value = 2 * cross(along, step(a, pixel));
    let falling = along.1 <= 0;
    -reach < value && (value < reach || falling && value == reach)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn segment(a: Cell, b: Cell) -> Segment {
        Segment { a, b, owner: Owner::Mesa }
    }

    /// The same question by clipping: 2p − 1 ≤ 2(a + t·d) < 2p + 1 for x and y and some t in 0..=1, with exact fractions.
    fn passes_by_clipping(segment: &Segment, pixel: Cell) -> bool {
        let d = step(segment.a, segment.b);
        let offset = step(segment.a, pixel);
        // Bounds on t as (numerator, positive denominator, closed).
        let (mut low, mut high) = ((0, 1, true), (1, 1, true));
        for (d, offset) in [(d.0, offset.0), (d.1, offset.1)] {
            let (closed, open) = (2 * offset - 1, 2 * offset + 1);
            if d == 0 {
                if closed > 0 || open <= 0 {
                    return false;
                }
                continue;
            }
            let (lower, upper) = if d > 0 {
                ((closed, 2 * d, true), (open, 2 * d, false))
            } else {
                ((-open, -2 * d, false), (-closed, -2 * d, true))
            };
            if tighter(lower, low, 1) {
                low = lower;
            }
            if tighter(upper, high, -1) {
                high = upper;
            }
        }
        let gap = high.0 * low.1 - low.0 * high.1;
        gap > 0 || gap == 0 && low.2 && high.2
    }

    fn tighter(new: (i128, i128, bool), old: (i128, i128, bool), sign: i128) -> bool {
        let more = sign * (new.0 * old.1 - old.0 * new.1);
        more > 0 || more == 0 && !new.2
    }

    #[test]
    fn pixels_passed_agree_with_clipping() {
        for (dx, dy) in (-5..=5).flat_map(|dx| (-5..=5).map(move |dy| (dx, dy))).filter(|d| *d != (0, 0)) {
            let side = segment((0, 0), (dx, dy));
            for pixel in (-6..=6).flat_map(|x| (-6..=6).map(move |y| (x, y))) {
                let boxed = (dx.min(0)..=dx.max(0)).contains(&pixel.0) && (dy.min(0)..=dy.max(0)).contains(&pixel.1);
                assert_eq!(boxed && passes(&side, pixel), passes_by_clipping(&side, pixel), "{side:?} {pixel:?}");
            }
        }
    }

    #[test]
    fn a_corner_on_the_way_becomes_a_corner_of_the_chain() {
        let cut = snap(&[segment((0, 0), (10, 1)), segment((5, 1), (5, 9))]);
        let chain: Vec<_> = cut.iter().filter(|piece| piece.a.0 != piece.b.0).map(|piece| (piece.a, piece.b)).collect();
        assert_eq!(chain, [((0, 0), (5, 1)), ((5, 1), (10, 1))]);
    }
}
