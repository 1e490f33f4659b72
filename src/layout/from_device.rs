//! The outlines of a device: mesa with arms, contacts, gates and steps, rounded to the grid and checked one by one.

use std::collections::BTreeMap;

use crate::device::ContactIdx;
use crate::device::ContactShape;
use crate::device::Corner;
use crate::device::Device;
use crate::device::MesaShape;
use crate::device::OverlayIdx;
use crate::device::OverlayKind;
use crate::device::OverlayShape;
use crate::diagnostic::Diagnostic;
use crate::diagnostic::Findings;
use crate::layout::Owner;
use crate::layout::Point;
use crate::layout::bar;
use crate::layout::bar::Bar;
use crate::layout::bar::Stretch;
use crate::layout::bar::rectangle;
use crate::layout::grid::Cell;
use crate::layout::grid::FARTHEST;
use crate::layout::grid::Grid;
use crate::layout::outline;
use crate::layout::outline::Flaw;
use crate::layout::owner::at_um;
use crate::layout::owner::um;
use crate::layout::snap::Segment;

/// The outlines that could be drawn.
#[derive(Debug)]
pub(super) struct Outlines {
    /// Rounding.
    pub(super) grid: Grid,
    /// Owner and corners, anticlockwise. An owner whose outline has a fault is missing.
    pub(super) rings: Vec<(Owner, Vec<Cell>)>,
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
    let (bar, snap) = bar_and_snap(device, findings)?;
    let mut draughts =
        Draughts { device, findings, bar, grid: Grid { snap }, rings: Vec::new(), moved: BTreeMap::new() };
    if !draughts.add(Owner::Mesa, &rectangle((0, 0), (bar.length, bar.width))) {
        return None;
    }
    let stretches = draughts.contacts();
    draughts.overlays(&stretches);
    draughts.say_moves();
    let Draughts { grid, rings, .. } = draughts;
    findings.extend(bar::meeting_stretches(device, &stretches, |stretch| {
        (grid.cell((stretch.low, 0)).0, grid.cell((stretch.high, 0)).0)
    }));
    findings.extend(bar::arms_under_overlays(device, bar, &stretches));
    Some(Outlines { grid, rings })
}

fn bar_and_snap(device: &Device, findings: &mut Findings) -> Option<(Bar, i64)> {
    let MesaShape::Bar { length, width } = &device.mesa.shape;
    let (bar, snap) = (Bar { length: length.0, width: width.0 }, device.mesa.snap.0);
    let sizes = [bar.length, bar.width, snap];
    if sizes.iter().any(|nm| *nm > FARTHEST.0) {
        findings.push(bar::too_far("the mesa").at(&device.mesa.place));
        return None;
    }
    if sizes.iter().any(|nm| *nm < 1) {
        let message = "length, width and snap of the mesa must be above 0";
        let hint = "give length_um, width_um and snap_nm as positive numbers";
        findings.push(Diagnostic::fault("mesa-size", message).at(&device.mesa.place).hint(hint));
        return None;
    }
    Some((bar, snap))
}

struct Draughts<'a> {
    device: &'a Device,
    findings: &'a mut Findings,
    bar: Bar,
    grid: Grid,
    rings: Vec<(Owner, Vec<Cell>)>,
    /// By how many nm rounding moved a corner along x or y, at most.
    moved: BTreeMap<Owner, i64>,
}

impl Draughts<'_> {
    fn contacts(&mut self) -> Vec<(ContactIdx, Stretch)> {
        let mut stretches = Vec::new();
        for (n, contact) in self.device.contacts.iter().enumerate() {
            let owner = Owner::Contact(ContactIdx(n));
            if let ContactShape::Outline(corners) = &contact.shape {
                self.add_outline(owner, corners);
            } else if let Some(stretch) = bar::stretch(self.bar, contact, self.findings) {
                self.add_on_edge(owner, stretch);
                stretches.push((ContactIdx(n), stretch));
            }
        }
        stretches
    }

    /// The contact lies outside, flush with the end of its arm; the arm is one more part of the mesa, flush with the bar.
    fn add_on_edge(&mut self, owner: Owner, stretch: Stretch) {
        let drawn = self.bar.beside(stretch, stretch.arm, stretch.arm + self.depth(stretch));
        if self.add(owner, &drawn) && stretch.arm > 0 {
            let arm = self.bar.beside(stretch, 0, stretch.arm).map(|corner| self.grid.cell(corner));
            // An arm shorter than half a pixel has no area and is left out.
            self.rings.extend(outline::ring(&arm).ok().map(|ring| (Owner::Mesa, ring)));
        }
    }

    /// How far a contact reaches outward. Nothing depends on it, since contacts of one edge lie side by side and those of
    /// different edges point different ways; a fifth of the bar looks right, and eight pixels are never pinched.
    fn depth(&self, stretch: Stretch) -> i64 {
        let looks = (stretch.high - stretch.low).min(self.bar.width / 5);
        (looks / self.grid.snap).max(8) * self.grid.snap
    }

    /// A gate across the bar spans exactly the body of the bar, so that arms stay bare; a step is a property of the layer
    /// and reaches into the arms.
    fn overlays(&mut self, stretches: &[(ContactIdx, Stretch)]) {
        for (n, overlay) in self.device.overlays.iter().enumerate() {
            let owner = Owner::Overlay(OverlayIdx(n));
            match &overlay.shape {
                OverlayShape::Outline(corners) => self.add_outline(owner, corners),
                OverlayShape::Across { from, to } if from >= to => {
                    let message = format!("{} begins at {} and ends at {}", self.words(owner), um(from.0), um(to.0));
                    self.fault(owner, "overlay-order", message, "from_um must be below to_um");
                }
                OverlayShape::Across { from, to } if to.0 <= 0 || from.0 >= self.bar.length => {
                    let end = um(self.bar.length);
                    let message = format!("{} lies wholly outside the bar, which ends at {end}", self.words(owner));
                    self.fault(owner, "overlay-outside", message, "correct from_um and to_um, or leave it out");
                }
                OverlayShape::Across { from, to } => {
                    let span = (from.0.max(0), to.0.min(self.bar.length));
                    let arms = bar::longest_arms(stretches);
                    self.add(owner, &self.bar.across(span, (overlay.kind == OverlayKind::Step).then_some(arms)));
                }
            }
        }
    }

    fn add_outline(&mut self, owner: Owner, corners: &[Corner]) {
        let points: Vec<Point> = corners.iter().map(|(x, y)| (x.0, y.0)).collect();
        if points.iter().any(|(x, y)| x.saturating_abs().max(y.saturating_abs()) > FARTHEST.0) {
            self.findings.push(bar::too_far(&self.words(owner)).at(owner.place(self.device)));
        } else {
            self.add(owner, &points);
        }
    }

    /// Rounds and checks one outline; says whether it can be used.
    fn add(&mut self, owner: Owner, corners: &[Point]) -> bool {
        let cells: Vec<Cell> = corners.iter().map(|corner| self.grid.cell(*corner)).collect();
        let ring = outline::ring(&cells);
        let usable = ring.is_ok();
        match ring {
            Ok(ring) => {
                self.note_moves(owner, corners, &cells);
                self.rings.push((owner, ring));
            }
            Err(flaw) => self.say_flaw(owner, flaw),
        }
        usable
    }

    fn note_moves(&mut self, owner: Owner, corners: &[Point], cells: &[Cell]) {
        let shift = |corner: &Point, cell: &Cell| {
            let centre = self.grid.point(*cell);
            (centre.0 - corner.0).abs().max((centre.1 - corner.1).abs())
        };
        let most = corners.iter().zip(cells).map(|(corner, cell)| shift(corner, cell)).max().unwrap_or(0);
        let moved = self.moved.entry(owner).or_default();
        *moved = most.max(*moved);
    }

    fn say_moves(&mut self) {
        for (owner, most) in self.moved.iter().filter(|(_, most)| **most > 0) {
            let (who, snap) = (owner.words(self.device), self.grid.snap);
            let message = format!("corners of {who} were moved by up to {most} nm onto multiples of {snap} nm");
            let hint = "write lengths in multiples of snap_nm, or set a smaller snap_nm in [mesa]";
            self.findings.push(Diagnostic::notice("snapped", message).at(owner.place(self.device)).hint(hint));
        }
    }

    fn say_flaw(&mut self, owner: Owner, flaw: Flaw) {
        let (who, snap, grid) = (self.words(owner), self.grid.snap, self.grid);
        let (code, message, hint) = match flaw {
            Flaw::TooFew => {
                let message = format!("{who} has no area: fewer than three corners remain on the {snap} nm grid");
                ("outline-empty", message, "check its size and unit, or set a smaller snap_nm in [mesa]")
            }
            Flaw::Spike(at) => {
                let message = format!("the outline of {who} doubles back on itself at {}", at_um(grid, at));
                ("outline-spike", message, "list the corners once round, in order")
            }
            Flaw::Crossing(one, other, at) => {
                let side = |side: (Cell, Cell)| format!("{} – {}", at_um(grid, side.0), at_um(grid, side.1));
                let message = format!(
                    "the outline of {who} meets itself near {}: side {} and side {}",
                    at_um(grid, at),
                    side(one),
                    side(other)
                );
                ("outline-crossing", message, "list the corners once round, in order")
            }
        };
        self.fault(owner, code, message, hint);
    }

    fn words(&self, owner: Owner) -> String {
        owner.words(self.device)
    }

    fn fault(&mut self, owner: Owner, code: &'static str, message: String, hint: &str) {
        self.findings.push(Diagnostic::fault(code, message).at(owner.place(self.device)).hint(hint));
    }
}
