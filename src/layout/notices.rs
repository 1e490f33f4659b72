//! What is worth knowing about a layout that can be used: separate parts, and regions that meet in a single point.

use std::collections::BTreeMap;

use crate::diagnostic::Diagnostic;
use crate::layout::FaceIdx;
use crate::layout::FaceLabel;
use crate::layout::Owner;
use crate::layout::Point;
use crate::layout::VertexIdx;
use crate::layout::checks::Drawn;
use crate::layout::outline;
use crate::layout::owner::at_um;
use crate::layout::owner::point_um;

/// All notices of this kind.
pub(super) fn notices(drawn: &Drawn) -> Vec<Diagnostic> {
    let mut found = parts(drawn);
    found.extend(points(drawn));
    found
}

/// Connected parts of mesa and contacts.
fn parts(drawn: &Drawn) -> Vec<Diagnostic> {
    let topology = &drawn.layout.topology;
    let solid = |face: usize| topology.faces[face] != FaceLabel::Vacuum;
    let mut part: Vec<usize> = (0..topology.faces.len()).collect();
    for piece in topology.pieces.iter().filter(|piece| solid(piece.left.0) && solid(piece.right.0)) {
        let (one, other) = (part[piece.left.0], part[piece.right.0]);
        part.iter_mut().filter(|number| **number == one).for_each(|number| *number = other);
    }
    // For every part with mesa: whether it has a contact, and the rectangle round it.
    let mut reached: BTreeMap<usize, (bool, Option<Extent>)> = BTreeMap::new();
    for (face, _) in topology.faces.iter().enumerate().filter(|(_, label)| matches!(label, FaceLabel::Mesa(_))) {
        let (_, extent) = reached.entry(part[face]).or_insert((false, None));
        *extent = joined(*extent, extent_of(drawn, FaceIdx(face)));
    }
    for (face, _) in topology.faces.iter().enumerate().filter(|(_, label)| matches!(label, FaceLabel::Contact(_))) {
        reached.entry(part[face]).and_modify(|(has, _)| *has = true);
    }
    let place = &drawn.device.mesa.place;
    let several = (reached.len() > 1).then(|| {
        let message = format!("the mesa falls into {} separate parts", reached.len());
        Diagnostic::notice("mesa-parts", message).at(place).hint("no current passes from one part to another")
    });
    let bare = reached.values().filter(|(has, _)| !has).filter_map(|(_, extent)| *extent);
    several.into_iter().chain(bare.map(|extent| unreached(drawn, extent))).collect()
}

/// Lower left and upper right corner.
type Extent = (Point, Point);

fn extent_of(drawn: &Drawn, face: FaceIdx) -> Option<Extent> {
    let borders = drawn.layout.topology.pieces.iter().zip(&drawn.layout.positions.pieces);
    let own = borders.filter(|(piece, _)| piece.left == face || piece.right == face);
    outline::extent(&own.flat_map(|(_, corners)| corners.iter().copied()).collect::<Vec<Point>>())
}

fn joined(one: Option<Extent>, other: Option<Extent>) -> Option<Extent> {
    let corners: Vec<Point> = one.into_iter().chain(other).flat_map(|(low, high)| [low, high]).collect();
    outline::extent(&corners)
}

fn unreached(drawn: &Drawn, (low, high): Extent) -> Diagnostic {
    let message = format!("the part of the mesa from {} to {} has no contact", point_um(low), point_um(high));
    let hint = "add a contact, or leave that part out";
    Diagnostic::notice("mesa-unreached", message).at(&drawn.device.mesa.place).hint(hint)
}

/// Vertices where the same kind of mesa lies on two sides and something else between, or where the mesa narrows to
/// nothing. The layout keeps pieces that only touch apart.
fn points(drawn: &Drawn) -> Vec<Diagnostic> {
    let topology = &drawn.layout.topology;
    let mut found = Vec::new();
    for (vertex, fan) in topology.fans.iter().enumerate() {
        let sectors = (0..fan.len()).map(|n| &topology.faces[topology.face_after(VertexIdx(vertex), n).0]);
        let sectors: Vec<&FaceLabel> = sectors.collect();
        if is_constriction(&sectors) {
            found.push(constriction(drawn, vertex, &sectors));
        }
    }
    found
}

fn is_constriction(sectors: &[&FaceLabel]) -> bool {
    let mesa = |label: &FaceLabel| matches!(label, FaceLabel::Mesa(_));
    let twice = |label: &FaceLabel| sectors.iter().filter(|other| **other == label).count() > 1;
    let open = sectors.iter().any(|label| !mesa(label) && **label != FaceLabel::Vacuum);
    let others = |label: &FaceLabel| sectors.iter().any(|s| *s != label && !matches!(s, FaceLabel::Contact(_)));
    let same = sectors.iter().any(|label| mesa(label) && twice(label) && others(label));
    let neck = !open && twice(&FaceLabel::Vacuum) && sectors.iter().filter(|label| mesa(label)).count() > 1;
    same || neck
}

fn constriction(drawn: &Drawn, vertex: usize, sectors: &[&FaceLabel]) -> Diagnostic {
    let overlays = sectors.iter().filter_map(|label| match label {
        FaceLabel::Mesa(cover) => cover.first(),
        _ => None,
    });
    let mut owners: Vec<Owner> = overlays.map(|overlay| Owner::Overlay(*overlay)).collect();
    owners.sort_unstable();
    owners.dedup();
    let place = owners.last().map_or(&drawn.device.mesa.place, |owner| owner.place(drawn.device));
    let names: Vec<String> = owners.iter().map(|owner| owner.words(drawn.device)).collect();
    let who = if names.is_empty() { String::new() } else { format!(" ({})", names.join(", ")) };
    let grid = drawn.outlines.grid;
    let at = at_um(grid, grid.cell(drawn.layout.positions.vertices[vertex]));
    let message = format!("regions meet in a single point at {at}{who}: the real device has a point contact there");
    let hint = "they are taken as just not joined; let them overlap or leave a gap to say which is meant";
    Diagnostic::notice("point-contact", message).at(place).hint(hint)
}

#[cfg(test)]
mod tests {
    use crate::device::Device;
    use crate::device::Edge;
    use crate::layout::Point;
    use crate::layout::fixture::bar;
    use crate::layout::layout;

    fn ended() -> Device {
        bar(100, 40).end("1", Edge::Left).end("2", Edge::Right)
    }

    fn square(x: i64, y: i64, side: i64) -> [Point; 4] {
        [(x, y), (x + side, y), (x + side, y + side), (x, y + side)]
    }

    fn notices(device: &Device) -> Vec<&'static str> {
        let noted = layout(device).unwrap_or_else(|faults| panic!("{faults:?}"));
        noted.notices.iter().map(|notice| notice.code).collect()
    }

    #[test]
    fn gates_that_meet_in_a_corner_are_a_point_contact() {
        let lower = ended().gate_outline("A", &square(30_000, 0, 20_000));
        assert_eq!(notices(&lower.clone().gate_outline("B", &square(50_000, 20_000, 20_000))), ["point-contact"]);
        assert_eq!(notices(&lower.gate_outline("B", &square(50_000, 10_000, 20_000))), [""; 0]);
    }

    #[test]
    fn a_gate_whose_corner_touches_the_rim_pinches_the_mesa_beside_it() {
        let touching = [(40_000, 20_000), (60_000, 20_000), (50_000, 40_000)];
        assert_eq!(notices(&ended().gate_outline("A", &touching)), ["point-contact"]);
    }

    #[test]
    fn a_contact_across_the_bar_keeps_it_one_part() {
        let across = [(40_000, -1_000), (50_000, -1_000), (50_000, 41_000), (40_000, 41_000)];
        assert_eq!(notices(&ended().outlined("3", &across)), [""; 0]);
    }

    #[test]
    fn a_contact_inside_one_region_is_isolated_and_one_under_a_gate_edge_is_not() {
        let device = ended().outlined("3", &square(40_000, 10_000, 10_000));
        assert_eq!(notices(&device), ["contact-isolated"]);
        assert_eq!(notices(&device.gate("A", 30, 45)), [""; 0]);
    }

    #[test]
    fn a_gate_under_a_contact_changes_nothing() {
        let device =
            ended().outlined("3", &square(40_000, -5_000, 10_000)).gate_outline("A", &square(42_000, -2_000, 5_000));
        assert_eq!(notices(&device), ["overlay-hidden"]);
    }
}
