//! The outlines of a device: mesa with arms and cut-outs, contacts, gates and steps, rounded to the grid.

use std::collections::BTreeSet;

use crate::device::ContactIdx;
use crate::device::ContactShape;
use crate::device::Device;
use crate::device::OverlayIdx;
use crate::device::OverlayKind;
use crate::device::OverlayShape;
use crate::diagnostic::Findings;
use crate::layout::Owner;
use crate::layout::Point;
use crate::layout::draughts::Draughts;
use crate::layout::draughts::points;
use crate::layout::ends;
use crate::layout::ends::Ends;
use crate::layout::ends::Stretch;
use crate::layout::grid::Cell;
use crate::layout::grid::Grid;
use crate::layout::mesa;
use crate::layout::outline;
use crate::layout::owner::um;
use crate::layout::owner::um_digits;
use crate::layout::rim_contacts;
use crate::layout::snap::Segment;

/// The outlines that could be drawn.
#[derive(Debug)]
pub(super) struct Outlines {
    /// Rounding.
    pub(super) grid: Grid,
    /// Owner and corners, the inside on the left: anticlockwise, but for an opening in an outline. An owner whose outline
    /// has a fault is missing.
    pub(super) rings: Vec<(Owner, Vec<Cell>)>,
    /// Corners that the user did not write.
    pub(super) made: BTreeSet<Cell>,
}

impl Outlines {
    /// All sides, with the inside on their left.
    pub(super) fn segments(&self) -> Vec<Segment> {
        let sides = self.rings.iter().flat_map(|(owner, ring)| outline::sides(ring).map(|side| (*owner, side)));
        sides.map(|(owner, (a, b))| Segment { a, b, owner }).collect()
    }

    /// Whether anything of this owner was drawn.
    pub(super) fn has(&self, owner: Owner) -> bool {
        self.rings.iter().any(|(other, _)| *other == owner)
    }
}

/// All outlines of a device; none without a mesa.
pub(super) fn outlines(device: &Device, findings: &mut Findings) -> Option<Outlines> {
    let mut draughts = Draughts::new(device, findings);
    let body = mesa::body(&mut draughts)?;
    let mut rings = Vec::new();
    let stretches = contacts_at_ends(&mut draughts, body.ends, &mut rings);
    outlined_contacts(&mut draughts, &mut rings);
    let (grid, extent, ends) = (draughts.grid, body.extent, body.ends);
    rim_contacts::draw(&mut draughts, body.rings, &mut rings);
    overlays(&mut draughts, (extent, &stretches), &mut rings);
    draughts.say_moves();
    let made = draughts.made;
    findings.extend(ends::meeting_stretches(device, &stretches, |stretch| {
        (grid.cell((stretch.low, 0)).0, grid.cell((stretch.high, 0)).0)
    }));
    findings.extend(ends.into_iter().flat_map(|ends| ends::arms_under_overlays(device, ends, &stretches)));
    Some(Outlines { grid, rings, made })
}

type Rings = Vec<(Owner, Vec<Cell>)>;

fn contacts_at_ends(draughts: &mut Draughts, ends: Option<Ends>, rings: &mut Rings) -> Vec<(ContactIdx, Stretch)> {
    let mut stretches = Vec::new();
    for (n, contact) in draughts.device.contacts.iter().enumerate() {
        let stretch = ends.and_then(|ends| Some((ends, ends::stretch(ends, contact, draughts.findings)?)));
        if let Some((ends, stretch)) = stretch {
            at_end(draughts, Owner::Contact(ContactIdx(n)), (ends, stretch), rings);
            stretches.push((ContactIdx(n), stretch));
        }
    }
    stretches
}

/// The contact lies outside, flush with the end of its arm; the arm is one more part of the mesa, flush with the edge.
fn at_end(draughts: &mut Draughts, owner: Owner, (ends, stretch): (Ends, Stretch), rings: &mut Rings) {
    let drawn = ends.beside(stretch, stretch.arm, stretch.arm + depth(ends, stretch, draughts.grid));
    let Some(ring) = draughts.ring(owner, &drawn) else { return };
    rings.push((owner, ring));
    if stretch.arm > 0 {
        let arm = ends.beside(stretch, 0, stretch.arm).map(|corner| draughts.grid.cell(corner));
        // An arm shorter than half a pixel has no area and is left out.
        rings.extend(outline::ring(&arm).ok().map(|ring| (Owner::Mesa, ring)));
    }
}

/// How far a contact reaches outward. Nothing depends on it, since contacts of one edge lie side by side and those of
/// different edges point different ways; a fifth of the mesa's width looks right, and eight pixels are never pinched.
fn depth(ends: Ends, stretch: Stretch, grid: Grid) -> i64 {
    let looks = (stretch.high - stretch.low).min((ends.along_y.1 - ends.along_y.0) / 5);
    (looks / grid.snap).max(8) * grid.snap
}

fn outlined_contacts(draughts: &mut Draughts, rings: &mut Rings) {
    for (n, contact) in draughts.device.contacts.iter().enumerate() {
        let owner = Owner::Contact(ContactIdx(n));
        if let ContactShape::Outline(corners) = &contact.shape {
            rings.extend(draughts.outline(owner, &points(corners)).map(|ring| (owner, ring)));
        }
    }
}

type Around<'a> = ((Point, Point), &'a [(ContactIdx, Stretch)]);

fn overlays(draughts: &mut Draughts, around: Around, rings: &mut Rings) {
    for (n, overlay) in draughts.device.overlays.iter().enumerate() {
        let owner = Owner::Overlay(OverlayIdx(n));
        let ring = match &overlay.shape {
            OverlayShape::Outline(corners) => draughts.outline(owner, &points(corners)),
            OverlayShape::Across { from, to } => across(draughts, owner, ((from.0, to.0), overlay.kind), around),
        };
        rings.extend(ring.map(|ring| (owner, ring)));
    }
}

/// A gate across the mesa spans exactly its body, so that the arms of contacts stay bare; a step is a property of the
/// layer and reaches into the arms.
fn across(
    draughts: &mut Draughts,
    owner: Owner,
    ((from, to), kind): ((i64, i64), OverlayKind),
    (extent, stretches): Around,
) -> Option<Vec<Cell>> {
    let (left, right) = (extent.0.0, extent.1.0);
    let who = draughts.words(owner);
    if from >= to {
        let message = format!("{who} begins at {} and ends at {}", um(from), um(to));
        draughts.fault(owner, "overlay-order", (message, "from_um must be below to_um"));
        return None;
    }
    if to <= left || from >= right {
        let (left, right) = (um_digits(left), um(right));
        let message = format!("{who} lies wholly outside the mesa, which reaches from x = {left} to {right}");
        draughts.fault(owner, "overlay-outside", (message, "correct from_um and to_um, or leave it out"));
        return None;
    }
    let arms = if kind == OverlayKind::Step { ends::longest_arms(stretches) } else { [0; 4] };
    draughts.ring(owner, &ends::across(extent, (from.max(left), to.min(right)), arms))
}
