//! Lines that nearly meet: where the grid joined them, and where it did not.

use std::collections::BTreeMap;

use crate::diagnostic::Diagnostic;
use crate::layout::FaceLabel;
use crate::layout::Owner;
use crate::layout::checks::Drawn;
use crate::layout::edges::Edge;
use crate::layout::grid::Cell;
use crate::layout::grid::Grid;
use crate::layout::grid::cross;
use crate::layout::grid::dot;
use crate::layout::grid::side;
use crate::layout::grid::step;
use crate::layout::half_edges::HalfEdges;
use crate::layout::label::Subdivision;
use crate::layout::owner::at_um;
use crate::layout::snap::passed;

/// All notices of this kind, one for each pair of outlines.
pub(super) fn notices(drawn: &Drawn, merged: &Subdivision) -> Vec<Diagnostic> {
    let mut found = joined(drawn);
    found.extend(near_misses(drawn, merged));
    found
}

/// Sides that were led through a corner which lies in a pixel that they pass, but not on them.
fn joined(drawn: &Drawn) -> Vec<Diagnostic> {
    let segments = drawn.outlines.segments();
    let mut corners: BTreeMap<Cell, Owner> = BTreeMap::new();
    let written = segments.iter().filter(|segment| !drawn.outlines.made.contains(&segment.a));
    for segment in written {
        let foremost = corners.entry(segment.a).or_insert(segment.owner);
        *foremost = segment.owner.min(*foremost);
    }
    let places: Vec<Cell> = corners.keys().copied().collect();
    let mut found: BTreeMap<(Owner, Owner), Cell> = BTreeMap::new();
    for segment in &segments {
        for corner in passed(segment, &places).into_iter().filter(|corner| side(segment.a, segment.b, *corner) != 0) {
            found.entry((segment.owner, corners[&corner])).or_insert(corner);
        }
    }
    let (device, grid) = (drawn.device, drawn.outlines.grid);
    let notice = |((bent, fixed), at): (&(Owner, Owner), &Cell)| {
        let whose = if bent == fixed {
            "another of its own corners".to_string()
        } else {
            format!("a corner of {}", fixed.words(device))
        };
        let message = format!(
            "a side of {} was led through {whose} less than {} nm away, at {}",
            bent.words(device),
            grid.snap,
            at_um(grid, *at)
        );
        let hint = "they are taken as one line there; set a smaller snap_nm in [mesa] if they are apart";
        Diagnostic::notice("joined", message).at(bent.max(fixed).place(device)).hint(hint)
    };
    found.iter().map(notice).collect()
}

/// Strips of mesa thinner than two pixels: two lines that were probably meant to be one.
fn near_misses(drawn: &Drawn, merged: &Subdivision) -> Vec<Diagnostic> {
    let mut found: BTreeMap<(Owner, Owner), Cell> = BTreeMap::new();
    let vertices = &merged.half_edges.vertices;
    for (n, edge) in merged.edges.iter().enumerate() {
        let first = vertices.partition_point(|cell| cell.0 < edge.a.0 - 1);
        let beside = (first..vertices.len()).take_while(|v| vertices[*v].0 <= edge.b.0 + 1);
        let beside = beside.filter(|vertex| !is_beside_made_corner(drawn, edge, vertices[*vertex]));
        for vertex in beside.filter(|vertex| near(edge, vertices[*vertex]) && shares_mesa(merged, n, *vertex)) {
            let (one, other) = (foremost(&merged.edges[n]), foremost_at(merged, vertex));
            found.entry((one.max(other), one.min(other))).or_insert(vertices[vertex]);
        }
    }
    found.into_iter().map(|(owners, at)| near_miss(drawn, owners, at)).collect()
}

fn near_miss(drawn: &Drawn, (one, other): (Owner, Owner), at: Cell) -> Diagnostic {
    let (device, Grid { snap }) = (drawn.device, drawn.outlines.grid);
    let whom = if one == other { "itself".to_string() } else { other.words(device) };
    let message = format!(
        "{} comes within {} nm of {whom} without meeting it, near {}",
        one.words(device),
        2 * snap,
        at_um(drawn.outlines.grid, at)
    );
    let hint = "a strip of mesa remains between them; if none is meant, make them meet or raise snap_nm in [mesa]";
    Diagnostic::notice("near-miss", message).at(one.place(device)).hint(hint)
}

/// Whether a point off an edge lies nearer to it than two pixels.
fn near(edge: &Edge, p: Cell) -> bool {
    let (low, high) = (edge.a.1.min(edge.b.1), edge.a.1.max(edge.b.1));
    if p.1 < low - 1 || p.1 > high + 1 || p == edge.a || p == edge.b {
        return false;
    }
    let (along, offset) = (step(edge.a, edge.b), step(edge.a, p));
    let (square, projected) = (dot(along, along), dot(along, offset));
    if projected < 0 || projected > square {
        let beyond = step(edge.b, p);
        return dot(offset, offset).min(dot(beyond, beyond)) < 4;
    }
    // across² < 4·square, without the square that might not fit.
    cross(along, offset).abs() <= (4 * square - 1).isqrt()
}

/// Whether a point is near an edge only because that ends there in a corner that nobody wrote, as circles have many.
fn is_beside_made_corner(drawn: &Drawn, edge: &Edge, p: Cell) -> bool {
    let close = |end: Cell| dot(step(end, p), step(end, p)) < 4 && drawn.outlines.made.contains(&end);
    close(edge.a) || close(edge.b)
}

/// Whether the face between an edge and a vertex is a piece of mesa that both border.
fn shares_mesa(merged: &Subdivision, edge: usize, vertex: usize) -> bool {
    let HalfEdges { vertices, face, fans, .. } = &merged.half_edges;
    let Edge { a, b, .. } = &merged.edges[edge];
    let left = cross(step(*a, *b), step(*a, vertices[vertex])) >= 0;
    let between = face[2 * edge + usize::from(!left)];
    matches!(merged.labels[between], FaceLabel::Mesa(_)) && fans[vertex].iter().any(|spoke| face[*spoke] == between)
}

/// The overlay, else the contact, else the mesa whose outline an edge is.
fn foremost(edge: &Edge) -> Owner {
    edge.change.iter().map(|(owner, _)| *owner).max().unwrap_or(Owner::Mesa)
}

fn foremost_at(merged: &Subdivision, vertex: usize) -> Owner {
    let spokes = merged.half_edges.fans[vertex].iter();
    spokes.map(|spoke| foremost(&merged.edges[spoke / 2])).max().unwrap_or(Owner::Mesa)
}

#[cfg(test)]
mod tests {
    use crate::device::Edge;
    use crate::layout::Point;
    use crate::layout::fixture::bar;
    use crate::layout::layout;

    fn notices(gate: &[Point]) -> Vec<(&'static str, String)> {
        let device = bar(100, 40).end("1", Edge::Left).end("2", Edge::Right).gate_outline("A", gate);
        let noted = layout(&device).unwrap_or_else(|faults| panic!("{faults:?}"));
        noted.notices.into_iter().map(|notice| (notice.code, notice.message)).collect()
    }

    #[test]
    fn a_gate_one_pixel_short_of_the_rim_is_a_near_miss_and_two_pixels_short_is_not() {
        let to = |top| notices(&[(40_000, 0), (60_000, 0), (60_000, top), (40_000, top)]);
        assert_eq!(to(40_000), []);
        assert_eq!(to(39_980), []);
        let near = to(39_990);
        assert_eq!(near.len(), 1);
        assert_eq!(near[0].0, "near-miss");
        assert!(near[0].1.contains("gate \"A\" comes within 20 nm of the mesa"), "{near:?}");
    }

    #[test]
    fn an_oblique_side_led_through_a_corner_of_the_bar_is_named() {
        // The side from (90, 50) to (110, 30.01) µm passes the corner (100, 40) at a distance below 10 nm.
        let found = notices(&[(90_000, 50_000), (80_000, 5_000), (110_000, 30_010)]);
        assert_eq!(found.len(), 1, "{found:?}");
        assert_eq!(found[0].0, "joined");
        assert!(found[0].1.contains("gate \"A\" was led through a corner of the mesa"), "{found:?}");
    }
}
