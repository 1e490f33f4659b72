//! Independent audits of a layout: they use its corners and fans only, and none of the room's own geometry.

use std::collections::BTreeMap;
use std::collections::BTreeSet;

use crate::layout::FaceIdx;
use crate::layout::FaceLabel;
use crate::layout::Layout;
use crate::layout::PieceIdx;
use crate::layout::Point;
use crate::layout::VertexIdx;

/// All audits.
pub(super) fn audit(layout: &Layout) {
    sides_differ(layout);
    fans_hold_every_end_once(layout);
    fans_run_anticlockwise(layout);
    faces_agree_round_every_vertex(layout);
    pieces_meet_only_at_vertices(layout);
    euler(layout);
    areas_are_those_inside_the_borders(layout);
}

fn cross(o: Point, a: Point, b: Point) -> i128 {
    let d = |p: Point| (i128::from(p.0 - o.0), i128::from(p.1 - o.1));
    d(a).0 * d(b).1 - d(a).1 * d(b).0
}

fn sides_differ(layout: &Layout) {
    let faces = &layout.topology.faces;
    assert_eq!(faces[0], FaceLabel::Vacuum);
    for piece in &layout.topology.pieces {
        assert_ne!(faces[piece.left.0], faces[piece.right.0]);
    }
    assert_eq!(faces.len(), layout.positions.doubled_areas.len());
    let bordered: BTreeSet<FaceIdx> = layout.topology.pieces.iter().flat_map(|p| [p.left, p.right]).collect();
    assert!(faces.len() == 1 || bordered.len() == faces.len(), "every face has a border");
}

fn fans_hold_every_end_once(layout: &Layout) {
    let (topology, positions) = (&layout.topology, &layout.positions);
    let mut ends = 0;
    for (n, piece) in topology.pieces.iter().enumerate() {
        let corners = &positions.pieces[n];
        let places = [true, false].map(|outward| topology.spoke_of(PieceIdx(n), outward));
        match piece.ends {
            None => {
                assert_eq!(corners.first(), corners.last());
                assert_eq!(places, [None, None]);
            }
            Some((start, end)) => {
                assert_eq!(corners[0], positions.vertices[start.0]);
                assert_eq!(corners[corners.len() - 1], positions.vertices[end.0]);
                assert_eq!(places.map(|place| place.unwrap().0), [start, end]);
                ends += 2;
            }
        }
    }
    assert_eq!(ends, topology.fans.iter().map(Vec::len).sum::<usize>());
    assert!(topology.fans.iter().all(|fan| fan.len() > 2));
}

/// From each spoke to the next one turns left by less than a full turn, and once round in all.
fn fans_run_anticlockwise(layout: &Layout) {
    for (vertex, fan) in layout.topology.fans.iter().enumerate() {
        let centre = layout.positions.vertices[vertex];
        let tips: Vec<Point> = fan
            .iter()
            .map(|spoke| {
                let corners = &layout.positions.pieces[spoke.piece.0];
                if spoke.outward { corners[1] } else { corners[corners.len() - 2] }
            })
            .collect();
        // Whether the ray straight up lies in the turn from one spoke (excluded) to the next (included).
        let up = (centre.0, centre.1 + 1);
        let passes = (0..tips.len()).filter(|n| {
            let (a, b) = (tips[*n], tips[(n + 1) % tips.len()]);
            assert!(cross(centre, a, b) != 0 || dot(centre, a, b) < 0, "spokes in one direction");
            turn_holds(centre, (a, b), up)
        });
        assert_eq!(passes.count(), 1, "fan {vertex} goes round more than once");
    }
}

fn dot(o: Point, a: Point, b: Point) -> i128 {
    i128::from(a.0 - o.0) * i128::from(b.0 - o.0) + i128::from(a.1 - o.1) * i128::from(b.1 - o.1)
}

fn turn_holds(o: Point, (a, b): (Point, Point), ray: Point) -> bool {
    let at = |tip: Point| cross(o, tip, ray) == 0 && dot(o, tip, ray) > 0;
    if at(a) || at(b) {
        return at(b);
    }
    let (left_of_a, right_of_b) = (cross(o, a, ray) > 0, cross(o, ray, b) > 0);
    let wide = cross(o, a, b) <= 0;
    let straight_behind_a = cross(o, a, ray) == 0;
    if wide { left_of_a || right_of_b || straight_behind_a && cross(o, a, b) < 0 } else { left_of_a && right_of_b }
}

/// The face on the left of a spoke is the face on the right of the next.
fn faces_agree_round_every_vertex(layout: &Layout) {
    let topology = &layout.topology;
    for (vertex, fan) in topology.fans.iter().enumerate() {
        for n in 0..fan.len() {
            let next = fan[(n + 1) % fan.len()];
            let piece = &topology.pieces[next.piece.0];
            let right = if next.outward { piece.right } else { piece.left };
            assert_eq!(topology.face_after(VertexIdx(vertex), n), right);
        }
    }
}

fn pieces_meet_only_at_vertices(layout: &Layout) {
    let vertices: BTreeSet<Point> = layout.positions.vertices.iter().copied().collect();
    let mut sides = Vec::new();
    for (n, corners) in layout.positions.pieces.iter().enumerate() {
        sides.extend(corners.windows(2).enumerate().map(|(place, ends)| ((n, place), ends[0], ends[1])));
    }
    for (n, one) in sides.iter().enumerate() {
        for other in &sides[n + 1..] {
            let shared: Vec<Point> = [one.1, one.2].into_iter().filter(|p| *p == other.1 || *p == other.2).collect();
            let neighbours = one.0.0 == other.0.0;
            assert!(shared.iter().all(|p| neighbours || vertices.contains(p)), "{one:?} {other:?}");
            assert!(shared.len() < 2, "{one:?} {other:?}");
            let parallel_back = |p: &Point| {
                let far = |side: &((usize, usize), Point, Point)| if side.1 == *p { side.2 } else { side.1 };
                cross(*p, far(one), far(other)) == 0 && dot(*p, far(one), far(other)) > 0
            };
            match shared.first() {
                Some(p) => assert!(!parallel_back(p), "{one:?} {other:?}"),
                None => assert!(!meet((one.1, one.2), (other.1, other.2)), "{one:?} {other:?}"),
            }
        }
    }
}

fn meet(one: (Point, Point), other: (Point, Point)) -> bool {
    let ranges = |a: (i64, i64), b: (i64, i64)| a.0.min(a.1) <= b.0.max(b.1) && b.0.min(b.1) <= a.0.max(a.1);
    let boxes =
        ranges((one.0.0, one.1.0), (other.0.0, other.1.0)) && ranges((one.0.1, one.1.1), (other.0.1, other.1.1));
    let sides = |line: (Point, Point), p: (Point, Point)| {
        cross(line.0, line.1, p.0).signum() * cross(line.0, line.1, p.1).signum() <= 0
    };
    boxes && sides(one, other) && sides(other, one)
}

/// V − E + F = 1 + C; a closed piece counts as one vertex and one edge.
fn euler(layout: &Layout) {
    let topology = &layout.topology;
    let closed = topology.pieces.iter().filter(|piece| piece.ends.is_none()).count();
    let mut part: Vec<usize> = (0..topology.fans.len()).collect();
    for (start, end) in topology.pieces.iter().filter_map(|piece| piece.ends) {
        let (one, other) = (part[start.0], part[end.0]);
        part.iter_mut().filter(|number| **number == one).for_each(|number| *number = other);
    }
    let parts = part.into_iter().collect::<BTreeSet<_>>().len() + closed;
    assert_eq!(topology.fans.len() + closed + topology.faces.len(), topology.pieces.len() + 1 + parts);
}

/// The shoelace sum over a face's own borders is its area; over face 0 it is the whole with the sign turned.
fn areas_are_those_inside_the_borders(layout: &Layout) {
    let mut areas: BTreeMap<FaceIdx, i128> = BTreeMap::new();
    for (piece, corners) in layout.topology.pieces.iter().zip(&layout.positions.pieces) {
        let area: i128 = corners.windows(2).map(|ends| cross((0, 0), ends[0], ends[1])).sum();
        *areas.entry(piece.left).or_default() += area;
        *areas.entry(piece.right).or_default() -= area;
    }
    let whole = areas.remove(&FaceIdx(0)).unwrap_or_default();
    assert_eq!(layout.positions.doubled_areas[0], 0);
    assert_eq!(-whole, layout.positions.doubled_areas.iter().sum::<i128>());
    for (face, area) in areas {
        assert!(area > 0);
        assert_eq!(area, layout.positions.doubled_areas[face.0]);
    }
}
