//! What every face is: winding numbers from the unbounded face inward, and the label that they give.

use crate::layout::FaceLabel;
use crate::layout::Owner;
use crate::layout::edges::Edge;
use crate::layout::edges::Windings;
use crate::layout::edges::across;
use crate::layout::half_edges::HalfEdges;
use crate::layout::half_edges::twin;

/// Edges with their faces, and a label for every face.
#[derive(Clone, Debug)]
pub(super) struct Subdivision {
    /// Edges, sorted by their ends.
    pub(super) edges: Vec<Edge>,
    /// Who comes next.
    pub(super) half_edges: HalfEdges,
    /// One per face.
    pub(super) labels: Vec<FaceLabel>,
}

impl Subdivision {
    /// The subdivision by all edges, and the winding numbers of its faces.
    pub(super) fn new(edges: Vec<Edge>) -> (Self, Vec<Windings>) {
        let half_edges = HalfEdges::new(&edges);
        let windings = windings(&edges, &half_edges);
        let labels = windings.iter().map(label).collect();
        (Self { edges, half_edges, labels }, windings)
    }

    /// The same without the edges between faces of one label.
    pub(super) fn merged(&self) -> Self {
        let label = |half_edge: usize| &self.labels[self.half_edges.face[half_edge]];
        let kept: Vec<usize> = (0..self.edges.len()).filter(|edge| label(2 * edge) != label(2 * edge + 1)).collect();
        let edges: Vec<Edge> = kept.iter().map(|edge| self.edges[*edge].clone()).collect();
        let half_edges = HalfEdges::new(&edges);
        let mut labels = vec![FaceLabel::Vacuum; half_edges.doubled_areas.len()];
        for (new, old) in kept.iter().enumerate() {
            labels[half_edges.face[2 * new]] = label(2 * old).clone();
            labels[half_edges.face[2 * new + 1]] = label(2 * old + 1).clone();
        }
        Self { edges, half_edges, labels }
    }
}

fn windings(edges: &[Edge], half_edges: &HalfEdges) -> Vec<Windings> {
    let faces = half_edges.doubled_areas.len();
    let mut borders = vec![Vec::new(); faces];
    half_edges.face.iter().enumerate().for_each(|(half_edge, face)| borders[*face].push(half_edge));
    let mut found: Vec<Option<Windings>> = vec![None; faces];
    let mut waiting = vec![(0, Windings::new())];
    while let Some((face, windings)) = waiting.pop() {
        if found[face].is_some() {
            continue;
        }
        for half_edge in &borders[face] {
            let beyond = half_edges.face[twin(*half_edge)];
            if found[beyond].is_none() {
                let sign = if half_edge % 2 == 0 { -1 } else { 1 };
                waiting.push((beyond, across(&windings, &edges[half_edge / 2].change, sign)));
            }
        }
        found[face] = Some(windings);
    }
    found.into_iter().map(Option::unwrap_or_default).collect()
}

/// Whether a face lies on the mesa: where its parts add up to more than nothing and no cut-out takes it away.
pub(super) fn on_mesa(windings: &Windings) -> bool {
    let inside = || windings.iter().filter(|(_, winding)| *winding > 0).map(|(owner, _)| *owner);
    inside().any(|owner| owner == Owner::Mesa) && !inside().any(|owner| matches!(owner, Owner::Cutout(_)))
}

/// A contact is its whole outline, whatever lies under it; overlays count only on the mesa.
fn label(windings: &Windings) -> FaceLabel {
    let inside = || windings.iter().filter(|(_, winding)| *winding > 0).map(|(owner, _)| *owner);
    let contact = inside().find_map(|owner| match owner {
        Owner::Contact(contact) => Some(contact),
        _ => None,
    });
    let cover = inside().filter_map(|owner| match owner {
        Owner::Overlay(overlay) => Some(overlay),
        _ => None,
    });
    match contact {
        Some(contact) => FaceLabel::Contact(contact),
        None if on_mesa(windings) => FaceLabel::Mesa(cover.collect()),
        None => FaceLabel::Vacuum,
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::device::ContactIdx;
    use crate::device::OverlayIdx;
    use crate::layout::edges::edges;
    use crate::layout::grid::Cell;
    use crate::layout::snap::Segment;
    use crate::layout::snap::snap;

    /// Sorted labels of the bounded faces, with their areas, of squares given as (owner, low, high, cut-out).
    fn squares(squares: &[(Owner, i64, i64, bool)]) -> Vec<(i128, FaceLabel)> {
        let mut segments = Vec::new();
        for (owner, low, high, cutout) in squares {
            let mut ring: Vec<Cell> = vec![(*low, *low), (*high, *low), (*high, *high), (*low, *high)];
            if *cutout {
                ring.reverse();
            }
            segments.extend((0..4).map(|n| Segment { a: ring[n], b: ring[(n + 1) % 4], owner: *owner }));
        }
        let merged = Subdivision::new(edges(&snap(&segments))).0.merged();
        let areas = merged.half_edges.doubled_areas.iter().map(|area| area / 2);
        let mut labels: Vec<_> = areas.zip(merged.labels.clone()).skip(1).collect();
        labels.sort_by_key(|(area, _)| *area);
        labels
    }

    #[test]
    fn a_ring_of_mesa_with_an_island_in_its_cutout() {
        let parts = squares(&[(Owner::Mesa, 0, 9, false), (Owner::Mesa, 2, 7, true), (Owner::Mesa, 4, 5, false)]);
        let mesa = || FaceLabel::Mesa(Vec::new());
        assert_eq!(parts, [(1, mesa()), (24, FaceLabel::Vacuum), (56, mesa())]);
    }

    #[test]
    fn parts_of_the_mesa_add_up_and_a_cutout_outside_removes_nothing() {
        let parts = squares(&[(Owner::Mesa, 0, 4, false), (Owner::Mesa, 2, 6, false), (Owner::Mesa, 7, 9, true)]);
        assert_eq!(parts, [(28, FaceLabel::Mesa(Vec::new()))]);
    }

    #[test]
    fn contacts_go_before_everything_and_overlays_count_only_on_the_mesa() {
        let gate = OverlayIdx(0);
        let owners = [(Owner::Mesa, 0, 4, false), (Owner::Overlay(gate), 1, 6, false)];
        assert_eq!(squares(&owners), [(7, FaceLabel::Mesa(Vec::new())), (9, FaceLabel::Mesa(vec![gate]))]);
        let contact = ContactIdx(2);
        let with_contact = [owners[0], owners[1], (Owner::Contact(contact), 3, 5, false)];
        let labels = squares(&with_contact);
        assert_eq!(labels[0], (4, FaceLabel::Contact(contact)));
        assert_eq!(labels[2], (8, FaceLabel::Mesa(vec![gate])));
    }
}
