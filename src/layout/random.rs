//! Random outlines and random bars, degenerate ones among them: every audit holds, and nothing panics.

use std::collections::BTreeSet;

use crate::device::Arc;
use crate::device::Circle;
use crate::device::ContactShape;
use crate::device::Device;
use crate::device::Edge;
use crate::device::MesaShape;
use crate::device::Outline;
use crate::layout::FaceLabel;
use crate::layout::Layout;
use crate::layout::Owner;
use crate::layout::audit::audit;
use crate::layout::dice::Dice;
use crate::layout::edges::Windings;
use crate::layout::edges::edges;
use crate::layout::fixture::bar;
use crate::layout::fixture::place;
use crate::layout::fixture::um;
use crate::layout::from_device::Outlines;
use crate::layout::grid::Cell;
use crate::layout::grid::Grid;
use crate::layout::label::Subdivision;
use crate::layout::layout;
use crate::layout::merge;
use crate::layout::outline;
use crate::layout::snap::Segment;
use crate::layout::snap::snap;
use crate::quantity::Nanometres;

/// Random shapes at each scale.
const SHAPES: u32 = 600;

fn arranged(rings: Vec<(Owner, Vec<Cell>)>) -> (Vec<Segment>, Subdivision, Vec<Windings>, Layout) {
    let grid = Grid { snap: 1 };
    let cut = snap(&Outlines { grid, rings, made: BTreeSet::new() }.segments());
    let (subdivision, windings) = Subdivision::new(edges(&cut));
    let layout = merge::layout(&subdivision.merged(), grid);
    (cut, subdivision, windings, layout)
}

#[test]
fn random_outlines_pass_every_audit() {
    for scale in [6, 12, 30, 200, 5_000, 2_000_000] {
        let mut dice = Dice(scale as u64);
        for _ in 0..800 {
            let rings = dice.outlines(scale);
            let (cut, subdivision, windings, layout) = arranged(rings.clone());
            audit(&layout);
            windings_change_across_every_edge(&subdivision, &windings);
            euler(&subdivision);
            for owner in rings.iter().map(|(owner, _)| *owner).collect::<BTreeSet<_>>() {
                area_is_that_of_the_chain(owner, &cut, &subdivision, &windings);
                area_is_near_that_of_the_rings(owner, &rings, &cut);
            }
        }
    }
}

fn windings_change_across_every_edge(subdivision: &Subdivision, windings: &[Windings]) {
    let winding = |face: usize, owner| windings[face].iter().find(|(other, _)| *other == owner).map_or(0, |(_, w)| *w);
    for (n, edge) in subdivision.edges.iter().enumerate() {
        let face = &subdivision.half_edges.face;
        for (owner, change) in &edge.change {
            assert_eq!(winding(face[2 * n], *owner) - winding(face[2 * n + 1], *owner), *change);
        }
    }
    for (owner, winding) in windings.iter().flatten() {
        assert!(*owner == Owner::Mesa || *winding == 1, "an outline was turned inside out: {owner:?}");
    }
}

/// V − E + F = 1 + C.
fn euler(subdivision: &Subdivision) {
    let half_edges = &subdivision.half_edges;
    let mut part: Vec<usize> = (0..half_edges.vertices.len()).collect();
    for edge in 0..subdivision.edges.len() {
        let (one, other) = (part[half_edges.origin[2 * edge]], part[half_edges.origin[2 * edge + 1]]);
        part.iter_mut().filter(|number| **number == one).for_each(|number| *number = other);
    }
    let parts = part.into_iter().collect::<BTreeSet<_>>().len();
    let faces = half_edges.doubled_areas.len();
    assert_eq!(half_edges.vertices.len() + faces, subdivision.edges.len() + 1 + parts);
}

fn shoelace(a: Cell, b: Cell) -> i128 {
    i128::from(a.0) * i128::from(b.1) - i128::from(a.1) * i128::from(b.0)
}

fn area_is_that_of_the_chain(owner: Owner, cut: &[Segment], subdivision: &Subdivision, windings: &[Windings]) {
    let own = cut.iter().filter(|segment| segment.owner == owner);
    let chain: i128 = own.map(|segment| shoelace(segment.a, segment.b)).sum();
    let faces = windings.iter().zip(&subdivision.half_edges.doubled_areas);
    let weighted = |(windings, area): (&Windings, &i128)| {
        windings
            .iter()
            .filter(|(other, _)| *other == owner)
            .map(|(_, winding)| i128::from(*winding) * area)
            .sum::<i128>()
    };
    assert_eq!(faces.map(weighted).sum::<i128>(), chain);
}

/// No point of a border moves by more than half the diagonal of a pixel, 0.7072.
fn area_is_near_that_of_the_rings(owner: Owner, rings: &[(Owner, Vec<Cell>)], cut: &[Segment]) {
    let own = || rings.iter().filter(|(other, _)| *other == owner).flat_map(|(_, ring)| outline::sides(ring));
    let before: i128 = own().map(|(a, b)| shoelace(a, b)).sum();
    let after: i128 = cut.iter().filter(|s| s.owner == owner).map(|s| shoelace(s.a, s.b)).sum();
    let perimeter: f64 = own().map(|(a, b)| libm::hypot((b.0 - a.0) as f64, (b.1 - a.1) as f64)).sum();
    assert!((after - before).abs() as f64 <= 2.0 * 0.7072 * perimeter, "{owner:?}: {before} {after}");
}

#[test]
fn a_shift_of_everything_shifts_the_layout() {
    let mut dice = Dice(7);
    for (dx, dy) in [(1, 0), (-7, 13), (10_000_000, -10_000_000)] {
        for scale in [12, 200, 5_000] {
            for _ in 0..100 {
                let rings = dice.outlines(scale);
                let shifted =
                    rings.iter().map(|(owner, ring)| (*owner, ring.iter().map(|p| (p.0 + dx, p.1 + dy)).collect()));
                let moved = arranged(shifted.collect()).3;
                let layout = arranged(rings).3;
                assert_eq!(moved.topology, layout.topology);
                assert_eq!(moved.positions.doubled_areas, layout.positions.doubled_areas);
                let there = |points: &[Cell]| points.iter().map(|p| (p.0 + dx, p.1 + dy)).collect::<Vec<_>>();
                let pieces: Vec<_> = layout.positions.pieces.iter().map(|piece| there(piece)).collect();
                assert_eq!(moved.positions.pieces, pieces);
                assert_eq!(moved.positions.vertices, there(&layout.positions.vertices));
            }
        }
    }
}

#[test]
fn the_order_of_outlines_and_of_their_corners_changes_nothing() {
    let mut dice = Dice(11);
    for scale in [12, 200, 5_000] {
        for _ in 0..200 {
            let rings = dice.outlines(scale);
            let mut turned = rings.clone();
            turned.iter_mut().for_each(|(_, ring)| ring.rotate_left(1));
            turned.reverse();
            assert_eq!(arranged(turned).3, arranged(rings).3);
        }
    }
}

fn random_bar(dice: &mut Dice) -> Device {
    let (length, width) = (50 + dice.below(500), 10 + dice.below(100));
    let mut device = bar(length, width);
    for n in 0..dice.below(9) {
        let edge = dice.pick(&[Edge::Left, Edge::Top, Edge::Right, Edge::Bottom]);
        let name = n.to_string();
        device = match dice.below(6) {
            0 => device.end(&name, edge),
            1 => {
                let x = 1000 * dice.below(length);
                device.outlined(&name, &[(x, -3_000), (x + 4_000, -3_007), (x + 5_000, 5_000), (x - 1_000, 4_000)])
            }
            _ => {
                let width = Some(um(1 + dice.below(20)));
                let centre = Some(um(dice.below(length.max(width.map_or(0, |w| w.0 / 1000)))));
                device.contact(&name, ContactShape::Edge { edge, centre, width, arm: um(dice.pick(&[0, 0, 30, 60])) })
            }
        };
    }
    for n in 0..dice.below(4) {
        let from = dice.below(length + 40) - 20;
        device = device.gate(&n.to_string(), from, from + dice.below(80));
    }
    device
}

#[test]
fn random_bars_are_laid_out_exactly_or_refused_with_reasons() {
    let mut dice = Dice(3);
    let mut drawn = 0;
    for _ in 0..4_000 {
        let device = random_bar(&mut dice);
        match layout(&device) {
            Err(faults) => assert!(faults.0.iter().any(|fault| fault.place.is_some() && fault.hint.is_some())),
            Ok(noted) => {
                audit(&noted.value);
                mesa_is_bar_and_arms(&device, &noted.value);
                drawn += 1;
            }
        }
    }
    assert!(drawn > 400, "only {drawn} of the random bars could be drawn");
}

/// Where all contacts sit on edges, they take nothing from the mesa.
fn mesa_is_bar_and_arms(device: &Device, layout: &Layout) {
    let MesaShape::Bar { length, width } = device.mesa.shape else { return };
    let mut expected = i128::from(length.0) * i128::from(width.0);
    for contact in &device.contacts {
        let ContactShape::Edge { edge, width: own, arm, .. } = &contact.shape else { return };
        let whole = if matches!(edge, Edge::Left | Edge::Right) { width } else { length };
        expected += i128::from(own.unwrap_or(whole).0) * i128::from(arm.0);
    }
    let mesa = layout.topology.faces.iter().zip(&layout.positions.doubled_areas);
    let area: i128 = mesa.filter(|(label, _)| matches!(label, FaceLabel::Mesa(_))).map(|(_, area)| area).sum();
    assert_eq!(area, 2 * expected);
}

fn corners(ring: &[Cell], snap: i64) -> Vec<(Nanometres, Nanometres)> {
    ring.iter().map(|(x, y)| (Nanometres(x * snap), Nanometres(y * snap))).collect()
}

/// A device of any shape: outlines as in [`Dice::outlines`], contacts on rims, strips across.
fn random_shape(dice: &mut Dice, scale: i64) -> Device {
    let snap = dice.pick(&[1, 10]);
    let rings = dice.outlines(scale);
    let of_mesa: Vec<Vec<Cell>> =
        rings.iter().filter(|(owner, _)| *owner == Owner::Mesa).map(|(_, ring)| ring.clone()).collect();
    let mut device = bar(1, 1);
    device.mesa.snap = Nanometres(snap);
    device.mesa.shape = random_mesa(dice, (&of_mesa, snap), snap * scale);
    let outlined = dice.below(3) == 0;
    for (owner, ring) in &rings {
        let ring: Vec<Cell> = ring.iter().map(|(x, y)| (x * snap, y * snap)).collect();
        device = match owner {
            Owner::Contact(n) if outlined => device.outlined(&format!("O{}", n.0), &ring),
            Owner::Overlay(n) => device.gate_outline(&n.0.to_string(), &ring),
            _ => device,
        };
    }
    for n in 0..dice.below(4) {
        let shape = random_seat(dice, (&of_mesa, snap), &device.mesa.shape);
        device = device.contact(&format!("R{n}"), shape);
    }
    if dice.below(4) == 0 {
        let from = snap * dice.below(scale);
        let to = from + snap * (1 + dice.below(scale));
        device = device.strip("strip", Nanometres(from), Nanometres(to));
    }
    device
}

fn random_mesa(dice: &mut Dice, (rings, snap): (&[Vec<Cell>], i64), size: i64) -> MesaShape {
    let outline = |ring: &Vec<Cell>| Outline { corners: corners(ring, snap), place: place(50) };
    match dice.below(8) {
        0 => {
            let outer = 2 * size.min(5_000);
            let inner = (1 + dice.below(outer)).min(outer - 1);
            MesaShape::Ring { outer_diameter: Nanometres(outer), inner_diameter: Nanometres(inner) }
        }
        1 => MesaShape::Cross {
            arm_length: Nanometres(1 + dice.below(size)),
            arm_width: Nanometres(1 + dice.below(size)),
        },
        _ => {
            let cutouts = rings[1..].iter().filter(|_| dice.below(2) == 0).map(outline).collect();
            MesaShape::Outline { outline: outline(&rings[0]), cutouts }
        }
    }
}

fn random_seat(dice: &mut Dice, (rings, snap): (&[Vec<Cell>], i64), mesa: &MesaShape) -> ContactShape {
    let ring = &rings[dice.below(rings.len() as i64) as usize];
    let n = dice.below(ring.len() as i64) as usize;
    let (a, b) = (ring[n], ring[(n + 1) % ring.len()]);
    let part = dice.below(9);
    let on = |a: i64, b: i64| Nanometres(snap * (a + (b - a) * part / 8));
    let width = Nanometres(snap * (1 + dice.below((b.0 - a.0).abs() + (b.1 - a.1).abs() + 2)));
    let edge = dice.pick(&[Edge::Left, Edge::Top, Edge::Right, Edge::Bottom]);
    match mesa {
        MesaShape::Bar { .. } | MesaShape::Cross { .. } => {
            ContactShape::Edge { edge, centre: None, width: None, arm: dice.pick(&[um(0), um(1)]) }
        }
        MesaShape::Ring { .. } => {
            let arc = Arc { angle_deg: dice.below(7200) as f64 / 10.0 - 360.0, width };
            let circle = dice.pick(&[Circle::Outer, Circle::Inner]);
            ContactShape::Round { circle, arc: (dice.below(6) > 0).then_some(arc) }
        }
        MesaShape::Outline { .. } => ContactShape::Rim { at: (on(a.0, b.0), on(a.1, b.1)), width },
    }
}

#[test]
fn random_shapes_are_laid_out_exactly_or_refused_with_reasons() {
    let mut drawn = 0;
    for scale in [6, 12, 30, 200, 5_000, 2_000_000] {
        let mut dice = Dice(scale as u64 + 5);
        for _ in 0..SHAPES {
            let device = random_shape(&mut dice, scale);
            match layout(&device) {
                Err(faults) => assert!(faults.0.iter().all(|fault| fault.place.is_some() && fault.hint.is_some())),
                Ok(noted) => {
                    audit(&noted.value);
                    contacts_on_rims_leave_the_mesa_its_area(&device, &noted.value);
                    drawn += 1;
                }
            }
        }
    }
    assert!(drawn > SHAPES / 2, "only {drawn} of {} random shapes could be drawn", 6 * SHAPES);
}

/// The area of the mesa is that of its outline without its cut-outs. Corners that ends of contacts and crossings put into
/// the rims lie within half the diagonal of a pixel, twice, and cut-outs may reach two pixels past the rim.
fn contacts_on_rims_leave_the_mesa_its_area(device: &Device, layout: &Layout) {
    let MesaShape::Outline { outline, cutouts } = &device.mesa.shape else { return };
    if device.contacts.iter().any(|contact| matches!(contact.shape, ContactShape::Outline(_))) {
        return;
    }
    let rings = || std::iter::once(outline).chain(cutouts).map(cells);
    let areas: Vec<i128> =
        rings().map(|ring| outline::sides(&ring).map(|(a, b)| shoelace(a, b)).sum::<i128>().abs()).collect();
    let expected = areas[0] - areas[1..].iter().sum::<i128>();
    let rims: f64 = rings().map(|ring| length(&ring)).sum();
    let mesa = layout.topology.faces.iter().zip(&layout.positions.doubled_areas);
    let area: i128 = mesa.filter(|(label, _)| matches!(label, FaceLabel::Mesa(_))).map(|(_, area)| area).sum();
    let slack = 2.0 * (2.0 * 0.7072 + 2.0) * device.mesa.snap.0 as f64 * rims;
    assert!((area - expected).abs() as f64 <= slack, "{area} {expected} {slack} {device:?}");
}

fn cells(outline: &Outline) -> Vec<Cell> {
    outline.corners.iter().map(|(x, y)| (x.0, y.0)).collect()
}

fn length(ring: &[Cell]) -> f64 {
    outline::sides(ring).map(|(a, b)| libm::hypot((b.0 - a.0) as f64, (b.1 - a.1) as f64)).sum()
}
