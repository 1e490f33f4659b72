//! Outlines on the way to the grid: rounded, checked one by one, and every fault and rounding said.

use std::collections::BTreeMap;
use std::collections::BTreeSet;

use crate::device::Corner;
use crate::device::Device;
use crate::diagnostic::Diagnostic;
use crate::diagnostic::Findings;
use crate::layout::Owner;
use crate::layout::Point;
use crate::layout::grid::Cell;
use crate::layout::grid::FARTHEST;
use crate::layout::grid::Grid;
use crate::layout::outline;
use crate::layout::outline::Flaw;
use crate::layout::owner::at_um;

/// Where outlines are rounded and checked.
#[derive(Debug)]
pub(super) struct Draughts<'a> {
    /// What the user wrote.
    pub(super) device: &'a Device,
    /// What was found.
    pub(super) findings: &'a mut Findings,
    /// Rounding.
    pub(super) grid: Grid,
    /// Corners that the user did not write: those of circles, and where contacts on a rim end.
    pub(super) made: BTreeSet<Cell>,
    /// By how many nm rounding moved a corner along x or y, at most.
    moved: BTreeMap<Owner, i64>,
}

/// The corners of an outline in nm.
pub(super) fn points(corners: &[Corner]) -> Vec<Point> {
    corners.iter().map(|(x, y)| (x.0, y.0)).collect()
}

/// The finding about a length beyond all chips.
pub(super) fn too_far(what: &str) -> Diagnostic {
    let message = format!("{what} has a length beyond one metre");
    Diagnostic::fault("too-far", message).hint("lengths are given in micrometres; check the unit")
}

impl<'a> Draughts<'a> {
    /// Nothing drawn yet.
    pub(super) fn new(device: &'a Device, findings: &'a mut Findings) -> Self {
        let grid = Grid { snap: device.mesa.snap.0.max(1) };
        Self { device, findings, grid, made: BTreeSet::new(), moved: BTreeMap::new() }
    }

    /// An outline as the user wrote it, which may lie too far away.
    pub(super) fn outline(&mut self, owner: Owner, points: &[Point]) -> Option<Vec<Cell>> {
        if points.iter().any(|(x, y)| x.saturating_abs().max(y.saturating_abs()) > FARTHEST.0) {
            self.findings.push(too_far(&self.words(owner)).at(owner.place(self.device)));
            return None;
        }
        self.ring(owner, points)
    }

    /// Rounds and checks one outline; none where it cannot be used.
    pub(super) fn ring(&mut self, owner: Owner, corners: &[Point]) -> Option<Vec<Cell>> {
        let cells: Vec<Cell> = corners.iter().map(|corner| self.grid.cell(*corner)).collect();
        let ring = self.ring_of_cells(owner, &cells)?;
        self.note_moves(owner, corners, &cells);
        Some(ring)
    }

    /// Checks an outline that is on the grid.
    pub(super) fn ring_of_cells(&mut self, owner: Owner, cells: &[Cell]) -> Option<Vec<Cell>> {
        outline::ring(cells).map_err(|flaw| self.say_flaw(owner, flaw)).ok()
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

    /// Says by how much corners were moved.
    pub(super) fn say_moves(&mut self) {
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
        self.fault(owner, code, (message, hint));
    }

    /// The user's words for an owner.
    pub(super) fn words(&self, owner: Owner) -> String {
        owner.words(self.device)
    }

    /// Notes a fault with its hint.
    pub(super) fn fault(&mut self, owner: Owner, code: &'static str, (message, hint): (String, &str)) {
        self.findings.push(Diagnostic::fault(code, message).at(owner.place(self.device)).hint(hint));
    }
}
