//! The planar subdivision: regions, border pieces and contacts on exact coordinates.
//!
//! Owns: the arrangement (one pass of hot-pixel snap rounding) and the [`Layout`] made from it. Takes a `Device`, gives
//! a [`Layout`] or faults with places: contacts off the rim, overlapping or touching; overlays outside the mesa; overlaps
//! without an entry. Topology and positions are kept apart. Must never contain filling physics, drawing, or a comparison
//! of floats.

use crate::device::ContactIdx;
use crate::device::Device;
use crate::device::OverlayIdx;
use crate::diagnostic::Diagnostic;
use crate::diagnostic::Findings;
use crate::diagnostic::Outcome;
use crate::diagnostic::Severity;

mod checks;
mod circle;
mod cutouts;
mod draughts;
mod edges;
mod ends;
mod from_device;
mod grid;
mod half_edges;
mod joined;
mod label;
mod merge;
mod mesa;
mod nearness;
mod notices;
mod outline;
mod owner;
mod rim;
mod rim_contacts;
mod snap;
mod strip;
mod transmissions;

#[cfg(test)]
pub(crate) mod fixture;

#[cfg(test)]
mod audit;

#[cfg(test)]
mod dice;

#[cfg(test)]
mod random;

#[cfg(test)]
mod tests;

use label::Subdivision;
use owner::Owner;

/// The subdivision of a device, or every fault of its drawing.
pub fn layout(device: &Device) -> Outcome<Layout> {
    device.bench.as_ref().map_or_else(|| of_one(device), joined::layout)
}

fn of_one(device: &Device) -> Outcome<Layout> {
    let mut findings = Findings::default();
    let Some(outlines) = from_device::outlines(device, &mut findings) else { return Err(findings.into_faults()) };
    let edges = edges::edges(&snap::snap(&outlines.segments()));
    let (arrangement, windings) = Subdivision::new(edges);
    let merged = arrangement.merged();
    let layout = merge::layout(&merged, outlines.grid);
    let drawn = checks::Drawn { device, outlines: &outlines, layout: &layout, windings: &windings };
    findings.extend(cutouts::checks(&drawn, &arrangement));
    findings.extend(checks::checks(&drawn));
    if !findings.has_faults() {
        findings.extend(notices::notices(&drawn));
        findings.extend(nearness::notices(&drawn, &merged));
    }
    findings.finish(layout)
}

/// The faults of a drawing that is not whole, because other parts of its file have faults; notices could be untrue.
pub fn faults(device: &Device) -> Vec<Diagnostic> {
    let Err(found) = layout(device) else { return Vec::new() };
    found.0.into_iter().filter(|finding| finding.severity == Severity::Fault).collect()
}

/// Index of a face of the subdivision. Face 0 is the unbounded one.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct FaceIdx(pub usize);

/// Index of a vertex where pieces meet.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct VertexIdx(pub usize);

/// Index of a border piece.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct PieceIdx(pub usize);

/// What a face is.
#[derive(Clone, Debug, PartialEq, Eq, Hash)]
pub enum FaceLabel {
    /// Outside the mesa, or in a cut-out.
    Vacuum,
    /// A piece of mesa under exactly these overlays (sorted; empty means bulk).
    Mesa(Vec<OverlayIdx>),
    /// A contact, also where it reaches beyond the mesa.
    Contact(ContactIdx),
}

/// A point of the subdivision in whole nanometres (a multiple of the snap): (x, y).
pub type Point = (i64, i64);

/// A maximal border between two faces with different labels: a chain without a branching.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Piece {
    /// Face on the left hand going from the first to the last point.
    pub left: FaceIdx,
    /// Face on the right hand.
    pub right: FaceIdx,
    /// First and last vertex; none for a closed curve.
    pub ends: Option<(VertexIdx, VertexIdx)>,
}

/// One end of a piece, as seen from a vertex looking outward.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Spoke {
    /// The piece.
    pub piece: PieceIdx,
    /// True when the piece starts at this vertex (looking outward is looking along the piece).
    pub outward: bool,
}

/// Which piece lies beside which face: no coordinates.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Topology {
    /// Labels of the faces; face 0 is the unbounded one.
    pub faces: Vec<FaceLabel>,
    /// Border pieces.
    pub pieces: Vec<Piece>,
    /// For every vertex its spokes in anticlockwise order (y up). Between spoke n and spoke n + 1 lies one face:
    /// the one on the left hand of spoke n looking outward.
    pub fans: Vec<Vec<Spoke>>,
}

/// Where everything lies.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Positions {
    /// The corners of every piece from first to last; a closed piece repeats its first point at the end.
    pub pieces: Vec<Vec<Point>>,
    /// Position of every vertex.
    pub vertices: Vec<Point>,
    /// Twice the area of every bounded face in nm² (face 0: 0).
    pub doubled_areas: Vec<i128>,
}

/// The subdivision of a device. The order of faces, pieces and vertices depends on the geometry alone.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Layout {
    /// Ids only.
    pub topology: Topology,
    /// Coordinates only.
    pub positions: Positions,
    /// On a bench the layout of every device by itself, else empty. Above, their faces follow one another (the unbounded
    /// one in common), and so do pieces and vertices; contacts and overlays are counted over the whole bench.
    pub parts: Vec<Layout>,
}

impl Layout {
    /// Which device of a bench a piece belongs to; 0 for a device by itself.
    pub fn part_of(&self, piece: PieceIdx) -> usize {
        let ends = self.parts.iter().scan(0, |end, part| {
            *end += part.topology.pieces.len();
            Some(*end)
        });
        ends.take_while(|end| *end <= piece.0).count()
    }
}

impl Topology {
    /// The face between a spoke and the next one of its fan.
    pub fn face_after(&self, vertex: VertexIdx, spoke: usize) -> FaceIdx {
        let spoke = self.fans[vertex.0][spoke];
        let piece = &self.pieces[spoke.piece.0];
        if spoke.outward { piece.left } else { piece.right }
    }

    /// The vertex at an end of a piece and the place of that end in the vertex's fan; none for a closed piece.
    /// `outward`: the end where the piece starts.
    pub fn spoke_of(&self, piece: PieceIdx, outward: bool) -> Option<(VertexIdx, usize)> {
        let (start, end) = self.pieces[piece.0].ends?;
        let vertex = if outward { start } else { end };
        let place = self.fans[vertex.0].iter().position(|spoke| *spoke == Spoke { piece, outward })?;
        Some((vertex, place))
    }
}

impl Positions {
    /// Length of a piece in µm.
    pub fn length_um(&self, piece: PieceIdx) -> f64 {
        let sides = self.pieces[piece.0].windows(2);
        sides.map(|ends| libm::hypot((ends[1].0 - ends[0].0) as f64, (ends[1].1 - ends[0].1) as f64) / 1000.0).sum()
    }
}
