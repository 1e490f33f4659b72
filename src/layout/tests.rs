//! Whole devices laid out.

use std::collections::BTreeMap;

use crate::device::ContactIdx;
use crate::device::ContactShape;
use crate::device::Device;
use crate::device::Edge;
use crate::device::MesaShape;
use crate::device::OverlayIdx;
use crate::diagnostic::Noted;
use crate::layout::FaceLabel;
use crate::layout::Layout;
use crate::layout::PieceIdx;
use crate::layout::audit::audit;
use crate::layout::fixture::bar;
use crate::layout::fixture::hall_bar;
use crate::layout::fixture::um;
use crate::layout::layout;
use crate::quantity::Nanometres;

fn laid_out(device: &Device) -> (Layout, Vec<&'static str>) {
    let Noted { value, notices } = layout(device).unwrap_or_else(|faults| panic!("{faults:?}"));
    audit(&value);
    (value, notices.iter().map(|notice| notice.code).collect())
}

fn codes(device: &Device) -> Vec<&'static str> {
    layout(device).expect_err("a fault").0.iter().map(|finding| finding.code).collect()
}

/// How many faces have each label, and their doubled areas in µm² together.
fn census(layout: &Layout) -> BTreeMap<String, (usize, i128)> {
    let mut census: BTreeMap<String, (usize, i128)> = BTreeMap::new();
    for (label, area) in layout.topology.faces.iter().zip(&layout.positions.doubled_areas) {
        let entry = census.entry(format!("{label:?}")).or_default();
        *entry = (entry.0 + 1, entry.1 + area / 1_000_000);
    }
    census
}

fn mesa(cover: &[usize]) -> String {
    format!("{:?}", FaceLabel::Mesa(cover.iter().map(|overlay| OverlayIdx(*overlay)).collect()))
}

#[test]
fn a_hall_bar_has_two_bulk_regions_and_one_under_the_gate() {
    let (layout, notices) = laid_out(&hall_bar());
    assert_eq!(notices, [""; 0]);
    let census = census(&layout);
    // Each side: 250 µm × 100 µm and two arms of 20 µm × 60 µm.
    assert_eq!(census[&mesa(&[])], (2, 2 * 2 * (250 * 100 + 2 * 20 * 60)));
    assert_eq!(census[&mesa(&[0])], (1, 2 * 100 * 100));
    assert_eq!(layout.topology.faces.len(), 1 + 3 + 6);
    // Six contacts have two corners on the rim each, the gate has four.
    assert_eq!(layout.topology.fans.len(), 16);
    // Rim: 16 pieces between those (6 of them under contacts), 6 outer sides of contacts, 2 borders of the gate.
    assert_eq!(layout.topology.pieces.len(), 24);
}

#[test]
fn lengths_of_pieces_are_those_of_the_drawing() {
    let (layout, _) = laid_out(&hall_bar());
    let mut lengths: Vec<i64> =
        (0..24).map(|n| (layout.positions.length_um(PieceIdx(n)) * 10.0).round() as i64).collect();
    lengths.sort_unstable();
    // Contacts 20 µm deep: outer sides 20 + 2·20 and 100 + 2·20. Rim from an arm to the end and to the gate: 60 + 140 and
    // 60 + 90; gate borders and ends 100, gate along the rim 100, arm ends 20.
    let expected = [vec![200; 4], vec![600; 4], vec![1000; 6], vec![1400; 2], vec![1500; 4], vec![2000; 4]].concat();
    assert_eq!(lengths, expected);
}

#[test]
fn a_whole_end_and_a_contact_in_the_corner_touch() {
    let device = bar(100, 40).end("1", Edge::Left).arm("2", (Edge::Top, 10), 0).end("3", Edge::Right);
    assert_eq!(codes(&device), ["contacts-touch"]);
    let apart = bar(100, 40).end("1", Edge::Left).arm("2", (Edge::Top, 11), 0).end("3", Edge::Right);
    laid_out(&apart);
}

#[test]
fn contacts_outside_touch_the_mesa_only_along_their_edge() {
    let device = bar(100, 400).end("1", Edge::Left).arm("2", (Edge::Top, 11), 500).end("3", Edge::Right);
    let (layout, _) = laid_out(&device);
    assert_eq!(layout.topology.faces.len(), 1 + 1 + 3);
}

#[test]
fn every_wrong_contact_of_a_bar_is_named_at_once() {
    let device = bar(600, 100)
        .end("1", Edge::Left)
        .arm("2", (Edge::Top, 595), 0)
        .arm("3", (Edge::Top, 700), 0)
        .arm("4", (Edge::Bottom, 100), 60)
        .arm("5", (Edge::Bottom, 110), 60)
        .arm("6", (Edge::Bottom, 300), 0)
        .arm("7", (Edge::Bottom, 320), 0)
        .outlined("8", &[(700_000, 0), (710_000, 0), (710_000, 10_000)])
        .contact("9", ContactShape::Edge { edge: Edge::Top, centre: Some(um(300)), width: None, arm: um(0) })
        .gate("TG", 300, 250)
        .gate("BG", 700, 750);
    let expected = [
        "contact-beyond-edge",
        "contact-off-mesa",
        "arms-overlap",
        "contacts-touch",
        "contact-off-mesa",
        "contact-width",
        "overlay-order",
        "overlay-outside",
    ];
    assert_eq!(codes(&device), expected);
}

#[test]
fn a_bow_tie_is_named_by_its_crossing() {
    let device = bar(100, 40).gate_outline("TG", &[(10_000, 0), (50_000, 40_000), (50_000, 0), (10_000, 40_000)]);
    let faults = layout(&device).unwrap_err().0;
    assert_eq!(faults[0].code, "outline-crossing");
    assert!(faults[0].message.contains("near (30, 20) µm"), "{}", faults[0].message);
}

#[test]
fn outlined_contacts_that_touch_share_a_side_or_overlap_are_faults() {
    let first = bar(100, 40).outlined("1", &[(-5_000, 10_000), (5_000, 10_000), (5_000, 30_000), (-5_000, 30_000)]);
    let second =
        |low, high| first.clone().outlined("2", &[(low, 12_000), (high, 12_000), (high, 20_000), (low, 20_000)]);
    assert_eq!(codes(&second(5_000, 9_000)), ["contacts-touch"]);
    assert_eq!(codes(&second(4_000, 9_000)), ["contacts-overlap"]);
    let corner = first.clone().outlined("2", &[(5_000, 30_000), (9_000, 30_000), (9_000, 45_000), (5_000, 45_000)]);
    assert_eq!(codes(&corner), ["contacts-touch"]);
    laid_out(&first.outlined("2", &[(5_010, 12_000), (9_000, 50_000), (5_010, 50_000)]));
}

#[test]
fn overlapping_gates_need_a_filling_for_the_overlap() {
    let device = hall_bar().gate("BG", 300, 400);
    assert_eq!(codes(&device.clone().point(4, &[(&[0], 2), (&[1], 3)])), ["overlap-filling"]);
    let (layout, notices) = laid_out(&device.point(4, &[(&[0, 1], 1)]));
    assert_eq!(notices, [""; 0]);
    assert_eq!(census(&layout)[&mesa(&[0, 1])], (1, 2 * 50 * 100));
    let apart = hall_bar().gate("BG", 350, 400).point(4, &[(&[0, 1], 1)]);
    assert_eq!(laid_out(&apart).1, ["overlap-unused"]);
}

#[test]
fn an_arm_that_begins_under_a_gate_stays_bare() {
    let device = bar(600, 100).end("1", Edge::Left).arm("2", (Edge::Top, 300), 60).gate("TG", 250, 350);
    let (layout, notices) = laid_out(&device);
    assert_eq!(notices, ["arm-under-overlay"]);
    assert_eq!(census(&layout)[&mesa(&[0])], (1, 2 * 100 * 100));
    assert_eq!(census(&layout)[&mesa(&[])].0, 3);
}

#[test]
fn rounding_to_the_grid_is_said_with_its_amount() {
    let mut device = hall_bar();
    device.contacts[1].shape =
        ContactShape::Edge { edge: Edge::Top, centre: Some(um(150)), width: Some(Nanometres(20_008)), arm: um(60) };
    let noted = layout(&device).unwrap();
    assert_eq!(noted.notices.len(), 1);
    assert!(noted.notices[0].message.contains("by up to 4 nm onto multiples of 10 nm"));
}

#[test]
fn sizes_that_make_no_bar_are_faults_and_never_overflow() {
    let sized = |length, width, snap| {
        let mut device = hall_bar();
        device.mesa.shape = MesaShape::Bar { length: Nanometres(length), width: Nanometres(width) };
        device.mesa.snap = Nanometres(snap);
        codes(&device)
    };
    assert_eq!(sized(0, 100, 10), ["mesa-size"]);
    assert_eq!(sized(100, 100, 0), ["mesa-size"]);
    assert_eq!(sized(i64::MAX, 100, 10), ["too-far"]);
    assert_eq!(sized(100, 3, 10), ["outline-empty"]);
    let far = [(i64::MIN, 0), (i64::MAX, 0), (0, i64::MAX)];
    let device = hall_bar().outlined("7", &far).gate_outline("BG", &far).arm("8", (Edge::Top, i64::MAX / 1000), 0);
    assert_eq!(codes(&device), ["too-far", "too-far", "too-far"]);
}

#[test]
fn an_oblique_gate_flush_with_both_sides_of_its_bar_leaves_no_strip() {
    use crate::layout::Owner;
    use crate::layout::tests::arrangement::pieces_of;
    let mesa = [(0, 0), (46_670, -88_440), (82_050, -69_770), (35_380, 18_670)];
    let gate = [(18_670, -35_380), (28_000, -53_060), (63_380, -34_400), (54_040, -16_710)];
    let rings = [(Owner::Mesa, mesa), (Owner::Overlay(OverlayIdx(0)), gate)];
    let regions = |snap| pieces_of(&rings, snap).topology.faces.len() - 1;
    assert_eq!(regions(10), 3);
    // At 1 nm the corners, rounded to 10 nm, stand off the oblique sides: a strip joins both ends.
    assert_ne!(regions(1), 3);
}

#[test]
fn a_contact_pinched_by_rounding_keeps_one_label_on_both_its_faces() {
    use crate::layout::Owner;
    use crate::layout::tests::arrangement::pieces_of;
    let mesa = [(0, 0), (30, 0), (30, 31), (0, 31)];
    let gate = [(14, 8), (21, 8), (21, 30), (14, 30)];
    let contact = [(16, 5), (22, 12), (21, 12), (16, 5)];
    let rings = [(Owner::Mesa, mesa), (Owner::Overlay(OverlayIdx(0)), gate), (Owner::Contact(ContactIdx(0)), contact)];
    let layout = pieces_of(&rings, 1);
    let contacts = layout.topology.faces.iter().filter(|face| **face == FaceLabel::Contact(ContactIdx(0))).count();
    assert!(contacts > 1, "{layout:?}");
}

/// Outlines without a device.
mod arrangement {
    use crate::layout::Layout;
    use crate::layout::Owner;
    use crate::layout::Point;
    use crate::layout::audit::audit;
    use crate::layout::edges::edges;
    use crate::layout::from_device::Outlines;
    use crate::layout::grid::Grid;
    use crate::layout::label::Subdivision;
    use crate::layout::merge;
    use crate::layout::outline;
    use crate::layout::snap::snap;
    use std::collections::BTreeSet;

    /// The audited layout of outlines that are clean by themselves.
    pub(super) fn pieces_of<const N: usize>(rings: &[(Owner, [Point; N])], snap_nm: i64) -> Layout {
        let grid = Grid { snap: snap_nm };
        let on_grid = |ring: &[Point]| ring.iter().map(|corner| grid.cell(*corner)).collect::<Vec<_>>();
        let rings = rings.iter().map(|(owner, ring)| (*owner, outline::ring(&on_grid(ring)).unwrap())).collect();
        let edges = edges(&snap(&Outlines { grid, rings, made: BTreeSet::new() }.segments()));
        let layout = merge::layout(&Subdivision::new(edges).0.merged(), grid);
        audit(&layout);
        layout
    }
}
