//! Contacts that sit on a rim are drawn as strips outside it, as deep as looks right and there is room for.
//!
//! Nothing depends on the depth: a strip has its stretch of rim in common with the mesa and meets it nowhere else.

use crate::layout::grid::Cell;
use crate::layout::grid::cross;
use crate::layout::grid::dot;
use crate::layout::grid::rounded;
use crate::layout::grid::step;
use crate::layout::outline;
use crate::layout::outline::meeting;

/// Strips no deeper than this many pixels are not made thinner: eight are never pinched.
const LEAST_DEPTH: i64 = 8;

/// A stretch of rim that a contact takes.
#[derive(Clone, Debug)]
pub(super) struct Hold {
    /// The pixels of the stretch, the mesa on the left; at least two.
    pub(super) chain: Vec<Cell>,
    /// The corner of the rim before the stretch.
    pub(super) before: Cell,
    /// The corner behind it.
    pub(super) behind: Cell,
    /// Depth in pixels that would look right.
    pub(super) depth: i64,
}

type Vector = (i128, i128);

/// The outline of every strip, anticlockwise; none where there is no room. `rims` are all rims of the mesa with corners
/// where the stretches end, `others` outlines that the strips keep clear of if they can.
pub(super) fn strips(holds: &[Hold], rims: &[Vec<Cell>], others: &[Vec<Cell>]) -> Vec<Option<Vec<Cell>>> {
    let mut depths: Vec<i64> = holds.iter().map(|hold| hold.depth.max(LEAST_DEPTH)).collect();
    let mut strips: Vec<Option<Vec<Cell>>> =
        holds.iter().zip(&mut depths).map(|(hold, depth)| deepest(hold, depth, rims)).collect();
    while let Some(crowded) = crowded(&strips, &depths, others) {
        depths[crowded] = (depths[crowded] / 2).max(LEAST_DEPTH);
        strips[crowded] = deepest(&holds[crowded], &mut depths[crowded], rims);
    }
    strips
}

/// The deepest strip that meets no rim beside its own stretch, from `depth` in pixels down; `depth` becomes its depth.
fn deepest(hold: &Hold, depth: &mut i64, rims: &[Vec<Cell>]) -> Option<Vec<Cell>> {
    loop {
        let path = outer_path(hold, *depth);
        if is_clear(hold, &path, rims) {
            let ring: Vec<Cell> = hold.chain.iter().rev().chain(&path).copied().collect();
            if let Ok(ring) = outline::ring(&ring) {
                return Some(ring);
            }
        }
        if *depth <= LEAST_DEPTH {
            return None;
        }
        *depth = (*depth / 2).max(LEAST_DEPTH);
    }
}

/// The deepest strip that meets another or an outline and can still be made thinner.
fn crowded(strips: &[Option<Vec<Cell>>], depths: &[i64], others: &[Vec<Cell>]) -> Option<usize> {
    let meets = |n: usize, strip: &[Cell]| {
        let neighbours = strips.iter().enumerate().filter(|(m, _)| *m != n).filter_map(|(_, other)| other.as_ref());
        neighbours.chain(others).any(|other| rings_meet(strip, other))
    };
    let thick = (0..strips.len()).filter(|n| depths[*n] > LEAST_DEPTH);
    let meeting = thick.filter(|n| strips[*n].as_ref().is_some_and(|strip| meets(*n, strip)));
    meeting.max_by_key(|n| (depths[*n], std::cmp::Reverse(*n)))
}

fn rings_meet(one: &[Cell], other: &[Cell]) -> bool {
    apart(one, other) == Some(false)
        && outline::sides(one).any(|side| outline::sides(other).any(|beside| meeting(side, beside).is_some()))
}

/// Whether the rectangles round two rings have nothing in common.
fn apart(one: &[Cell], other: &[Cell]) -> Option<bool> {
    let (a, b) = (outline::extent(one)?, outline::extent(other)?);
    Some(a.1.0 < b.0.0 || b.1.0 < a.0.0 || a.1.1 < b.0.1 || b.1.1 < a.0.1)
}

/// Whether the way outside meets the rims at both ends of the stretch alone.
fn is_clear(hold: &Hold, path: &[Cell], rims: &[Vec<Cell>]) -> bool {
    let (first, last) = (hold.chain[0], hold.chain[hold.chain.len() - 1]);
    let way: Vec<Cell> = [first].iter().chain(path).chain(&[last]).copied().collect();
    let clear = |side: (Cell, Cell), rim: (Cell, Cell)| match shared(side, rim).filter(|at| [first, last].contains(at))
    {
        Some(at) => {
            let far = |ends: (Cell, Cell)| if ends.0 == at { ends.1 } else { ends.0 };
            let (u, v) = (step(at, far(side)), step(at, far(rim)));
            cross(u, v) != 0 || dot(u, v) < 0
        }
        None => meeting(side, rim).is_none(),
    };
    let mut ways = way.windows(2).map(|ends| (ends[0], ends[1]));
    ways.all(|side| rims.iter().all(|rim| outline::sides(rim).all(|beside| clear(side, beside))))
}

fn shared(one: (Cell, Cell), other: (Cell, Cell)) -> Option<Cell> {
    [one.0, one.1].into_iter().find(|end| *end == other.0 || *end == other.1)
}

/// From outside the first pixel of the stretch to outside its last.
fn outer_path(hold: &Hold, depth: i64) -> Vec<Cell> {
    let chain = &hold.chain;
    let last = chain.len() - 1;
    let mut path = vec![moved(chain[0], first_cap(hold, depth))];
    for n in 1..last {
        let (arriving, leaving) = (step(chain[n - 1], chain[n]), step(chain[n], chain[n + 1]));
        path.extend(corner_offsets(arriving, leaving, depth).into_iter().map(|by| moved(chain[n], by)));
    }
    path.push(moved(chain[last], last_cap(hold, depth)));
    path
}

fn moved(cell: Cell, by: Vector) -> Cell {
    (cell.0 + by.0 as i64, cell.1 + by.1 as i64)
}

/// Straight out; between two sides of the mesa that meet in a right or an acute notch, halfway between them.
fn first_cap(hold: &Hold, depth: i64) -> Vector {
    let (along, arriving) = (step(hold.chain[0], hold.chain[1]), step(hold.before, hold.chain[0]));
    if in_notch(arriving, along) { halfway(along, (-arriving.0, -arriving.1), depth) } else { outward(along, depth) }
}

fn last_cap(hold: &Hold, depth: i64) -> Vector {
    let last = hold.chain.len() - 1;
    let (along, leaving) = (step(hold.chain[last - 1], hold.chain[last]), step(hold.chain[last], hold.behind));
    if in_notch(along, leaving) { halfway((-along.0, -along.1), leaving, depth) } else { outward(along, depth) }
}

/// Whether a rim turns right by a right angle or more, so that the mesa leaves an opening of a right angle or less.
fn in_notch(arriving: Vector, leaving: Vector) -> bool {
    cross(arriving, leaving) < 0 && dot(arriving, leaving) <= 0
}

fn halfway(one: Vector, other: Vector, depth: i64) -> Vector {
    let (u, v) = (scaled(one, depth), scaled(other, depth));
    ((u.0 + v.0) / 2, (u.1 + v.1) / 2)
}

/// Where the way outside bends, seen from a corner of the stretch: in one point where the rim turns by a right angle at
/// most or to the right, in two where it turns sharply to the left.
fn corner_offsets(arriving: Vector, leaving: Vector, depth: i64) -> Vec<Vector> {
    let (one, other) = (outward(arriving, depth), outward(leaving, depth));
    let square = i128::from(depth) * i128::from(depth);
    // The point at the distance d from both sides lies at d (u + v)/(1 + u·v) for unit normals u and v (geometry).
    let (sum, below) = ((one.0 + other.0, one.1 + other.1), square + dot(one, other));
    let blunt = dot(arriving, leaving) >= 0;
    if below <= 0 || !blunt && cross(arriving, leaving) > 0 {
        return vec![one, other];
    }
    let part = |part: i128| i128::from(rounded(part * square, below));
    vec![(part(sum.0), part(sum.1))]
}

/// To the right of a direction, where the mesa is not.
fn outward(along: Vector, depth: i64) -> Vector {
    scaled((along.1, -along.0), depth)
}

/// A vector of the same direction with the length `depth`, rounded to whole pixels.
fn scaled(vector: Vector, depth: i64) -> Vector {
    const FINE: i128 = 1 << 20;
    let length = (FINE * FINE * dot(vector, vector)).isqrt().max(1);
    let part = |part: i128| i128::from(rounded(part * FINE * i128::from(depth), length));
    (part(vector.0), part(vector.1))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::layout::grid::doubled_area;

    fn hold(chain: &[Cell], before: Cell, behind: Cell, depth: i64) -> Hold {
        Hold { chain: chain.to_vec(), before, behind, depth }
    }

    /// Twice the areas of the strips on one rim.
    fn areas(rim: &[Cell], holds: &[Hold]) -> Vec<Option<i128>> {
        let strips = strips(holds, &[rim.to_vec()], &[]);
        strips.iter().map(|strip| strip.as_ref().map(|ring| doubled_area(ring))).collect()
    }

    #[test]
    fn a_strip_on_a_straight_side_is_a_rectangle_and_round_a_corner_an_angle() {
        let square = [(0, 0), (400, 0), (1_000, 0), (1_000, 1_000), (0, 1_000)];
        let straight = hold(&[(0, 0), (400, 0)], (0, 1_000), (1_000, 0), 50);
        assert_eq!(areas(&square, &[straight]), [Some(2 * 400 * 50)]);
        let cornered = [(0, 0), (400, 0), (1_000, 0), (1_000, 300), (1_000, 1_000), (0, 1_000)];
        let angle = hold(&[(400, 0), (1_000, 0), (1_000, 300)], (0, 0), (1_000, 1_000), 50);
        assert_eq!(areas(&cornered, &[angle]), [Some(2 * (650 * 50 + 300 * 50))]);
    }

    #[test]
    fn a_strip_in_a_slit_is_made_thin_enough() {
        // A slit 40 wide: the strips on both its sides share the room.
        let slit = [
            [(0, 0), (500, 0), (500, 200), (500, 700), (500, 900)],
            [(540, 900), (540, 700), (540, 200), (540, 0), (1_000, 0)],
        ];
        let slit = [&slit.concat()[..], &[(1_000, 1_000), (0, 1_000)]].concat();
        let one = hold(&[(500, 200), (500, 700)], (500, 0), (500, 900), 300);
        let other = hold(&[(540, 700), (540, 200)], (540, 900), (540, 0), 300);
        let found = areas(&slit, &[one.clone(), other]);
        assert!(
            found.iter().all(|area| area.is_some_and(|area| (2 * 500 * 8..2 * 500 * 40).contains(&area))),
            "{found:?}"
        );
        let narrow: Vec<Cell> = slit.iter().map(|(x, y)| (if *x == 540 { 506 } else { *x }, *y)).collect();
        assert_eq!(areas(&narrow, &[one]), [None]);
    }

    #[test]
    fn a_strip_that_ends_in_a_notch_does_not_run_along_its_other_side() {
        let notched = [(0, 0), (500, 0), (500, 500), (800, 500), (800, 0), (1_000, 0), (1_000, 1_000), (0, 1_000)];
        let whole = hold(&[(500, 500), (800, 500)], (500, 0), (800, 0), 100);
        // A trapezium: its outer side is shorter by half the depth at either end.
        assert_eq!(areas(&notched, &[whole]), [Some((300 + 200) * 50)]);
    }
}
