//! The mesa of every shape: its rims on the grid, and what contacts and strips across it are placed by.

use crate::device::MesaShape;
use crate::device::Outline;
use crate::diagnostic::Diagnostic;
use crate::layout::Owner;
use crate::layout::Point;
use crate::layout::circle::circle;
use crate::layout::draughts::Draughts;
use crate::layout::draughts::points;
use crate::layout::draughts::too_far;
use crate::layout::ends::Ends;
use crate::layout::ends::rectangle;
use crate::layout::grid::Cell;
use crate::layout::grid::FARTHEST;
use crate::layout::outline;

/// A mesa on the grid.
#[derive(Clone, Debug)]
pub(super) struct Body {
    /// Outlines, each anticlockwise: the mesa, then its cut-outs.
    pub(super) rings: Vec<(Owner, Vec<Cell>)>,
    /// Lower left and upper right corner of the rectangle round it, in nm.
    pub(super) extent: (Point, Point),
    /// Straight edges that contacts can name.
    pub(super) ends: Option<Ends>,
}

/// The mesa; none where its outline has a fault.
pub(super) fn body(draughts: &mut Draughts) -> Option<Body> {
    sizes(draughts)?;
    match &draughts.device.mesa.shape {
        MesaShape::Bar { length, width } => {
            let extent = ((0, 0), (length.0, width.0));
            let ends = Ends { extent, along_x: (0, length.0), along_y: (0, width.0) };
            straight(draughts, ends, &rectangle(extent.0, extent.1))
        }
        MesaShape::Cross { arm_length, arm_width } => {
            let arm = (arm_length.0, arm_length.0 + arm_width.0);
            let extent = ((0, 0), (arm.0 + arm.1, arm.0 + arm.1));
            straight(draughts, Ends { extent, along_x: arm, along_y: arm }, &cross(arm))
        }
        MesaShape::Ring { outer_diameter, inner_diameter } => ring(draughts, (outer_diameter.0, inner_diameter.0)),
        MesaShape::Outline { outline, cutouts } => outlined(draughts, outline, cutouts),
    }
}

/// No size beyond all chips, none that is not a length.
fn sizes(draughts: &mut Draughts) -> Option<()> {
    let mesa = &draughts.device.mesa;
    let sizes = match &mesa.shape {
        MesaShape::Bar { length, width } => vec![length.0, width.0, mesa.snap.0],
        MesaShape::Cross { arm_length, arm_width } => vec![arm_length.0, arm_width.0, mesa.snap.0],
        MesaShape::Ring { outer_diameter, inner_diameter } => vec![outer_diameter.0, inner_diameter.0, mesa.snap.0],
        MesaShape::Outline { .. } => vec![mesa.snap.0],
    };
    if sizes.iter().any(|nm| *nm > FARTHEST.0) {
        draughts.findings.push(too_far("the mesa").at(&mesa.place));
        return None;
    }
    if sizes.iter().any(|nm| *nm < 1) {
        let message = "the sizes and the snap of the mesa must be above 0";
        let hint = "give its lengths and snap_nm as positive numbers";
        draughts.findings.push(Diagnostic::fault("mesa-size", message).at(&mesa.place).hint(hint));
        return None;
    }
    Some(())
}

fn straight(draughts: &mut Draughts, ends: Ends, corners: &[Point]) -> Option<Body> {
    let ring = draughts.ring(Owner::Mesa, corners)?;
    Some(Body { rings: vec![(Owner::Mesa, ring)], extent: ends.extent, ends: Some(ends) })
}

/// Twelve corners; `low` and `high` are the borders of the square in the middle, along x and along y alike.
fn cross((low, high): (i64, i64)) -> [Point; 12] {
    let end = low + high;
    [
        (0, low),
        (low, low),
        (low, 0),
        (high, 0),
        (high, low),
        (end, low),
        (end, high),
        (high, high),
        (high, end),
        (low, end),
        (low, high),
        (0, high),
    ]
}

fn ring(draughts: &mut Draughts, (outer, inner): (i64, i64)) -> Option<Body> {
    let outer = draughts.ring_of_cells(Owner::Mesa, &circle(outer, draughts.grid))?;
    let inner = draughts.ring_of_cells(Owner::Cutout(0), &circle(inner, draughts.grid))?;
    draughts.made.extend(outer.iter().chain(&inner));
    body_of(draughts, vec![(Owner::Mesa, outer), (Owner::Cutout(0), inner)])
}

fn outlined(draughts: &mut Draughts, outline: &Outline, cutouts: &[Outline]) -> Option<Body> {
    let mut rings = vec![(Owner::Mesa, draughts.outline(Owner::Mesa, &points(&outline.corners))?)];
    for (n, cutout) in cutouts.iter().enumerate() {
        let owner = Owner::Cutout(n);
        rings.extend(draughts.outline(owner, &points(&cutout.corners)).map(|ring| (owner, ring)));
    }
    body_of(draughts, rings)
}

fn body_of(draughts: &Draughts, rings: Vec<(Owner, Vec<Cell>)>) -> Option<Body> {
    let (low, high) = outline::extent(&rings.first()?.1)?;
    let extent = (draughts.grid.point(low), draughts.grid.point(high));
    Some(Body { rings, extent, ends: None })
}
