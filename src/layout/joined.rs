//! The layouts of several devices as one: one below the other, in the order of the bench.

use std::ops::Range;

use crate::device::Bench;
use crate::device::ContactIdx;
use crate::device::OverlayIdx;
use crate::diagnostic::Findings;
use crate::diagnostic::Outcome;
use crate::layout::FaceIdx;
use crate::layout::FaceLabel;
use crate::layout::Layout;
use crate::layout::Piece;
use crate::layout::PieceIdx;
use crate::layout::Point;
use crate::layout::Positions;
use crate::layout::Spoke;
use crate::layout::Topology;
use crate::layout::VertexIdx;

/// Lays out every device and puts them together.
pub(super) fn layout(bench: &Bench) -> Outcome<Layout> {
    let mut findings = Findings::default();
    let parts: Vec<Option<Layout>> =
        bench.parts.iter().map(|part| findings.take(crate::layout::layout(&part.device))).collect();
    match parts.into_iter().collect::<Option<Vec<Layout>>>() {
        Some(parts) => findings.finish(joined(bench, parts)),
        None => Err(findings.into_faults()),
    }
}

fn joined(bench: &Bench, parts: Vec<Layout>) -> Layout {
    let topology = Topology { faces: vec![FaceLabel::Vacuum], pieces: Vec::new(), fans: Vec::new() };
    let positions = Positions { pieces: Vec::new(), vertices: Vec::new(), doubled_areas: vec![0] };
    let mut whole = Layout { topology, positions, parts: Vec::new() };
    let mut before = Before::default();
    let gap = parts
        .iter()
        .map(|part| {
            let y = extent(part, |point| point.1);
            y.end - y.start
        })
        .max()
        .unwrap_or(0)
        / 2;
    let mut top = 0;
    for (part, on_bench) in parts.iter().zip(&bench.parts) {
        let (left, y) = (extent(part, |point| point.0).start, extent(part, |point| point.1));
        before.place(&mut whole, part, (-left, top - y.end));
        before.add(part, (on_bench.device.contacts.len(), on_bench.device.overlays.len()));
        top -= y.end - y.start + gap;
    }
    whole.parts = parts;
    whole
}

fn extent(layout: &Layout, along: fn(&Point) -> i64) -> Range<i64> {
    let points = || layout.positions.pieces.iter().flatten().map(along);
    points().min().unwrap_or(0)..points().max().unwrap_or(0)
}

/// How many of everything come before a part. The unbounded face is common to all parts.
#[derive(Default)]
struct Before {
    faces: usize,
    pieces: usize,
    vertices: usize,
    contacts: usize,
    overlays: usize,
}

impl Before {
    fn add(&mut self, part: &Layout, (contacts, overlays): (usize, usize)) {
        self.faces += part.topology.faces.len() - 1;
        self.pieces += part.topology.pieces.len();
        self.vertices += part.topology.fans.len();
        self.contacts += contacts;
        self.overlays += overlays;
    }

    fn place(&self, whole: &mut Layout, part: &Layout, by: (i64, i64)) {
        let Topology { faces, pieces, fans } = &part.topology;
        whole.topology.faces.extend(faces.iter().skip(1).map(|label| self.label(label)));
        whole.topology.pieces.extend(pieces.iter().map(|piece| self.piece(piece)));
        whole.topology.fans.extend(fans.iter().map(|fan| fan.iter().map(|spoke| self.spoke(*spoke)).collect()));
        let shifted = |point: &Point| (point.0 + by.0, point.1 + by.1);
        let Positions { pieces, vertices, doubled_areas } = &part.positions;
        whole.positions.pieces.extend(pieces.iter().map(|corners| corners.iter().map(shifted).collect()));
        whole.positions.vertices.extend(vertices.iter().map(shifted));
        whole.positions.doubled_areas.extend(doubled_areas.iter().skip(1));
    }

    fn label(&self, label: &FaceLabel) -> FaceLabel {
        match label {
            FaceLabel::Vacuum => FaceLabel::Vacuum,
            FaceLabel::Mesa(cover) => {
                FaceLabel::Mesa(cover.iter().map(|overlay| OverlayIdx(self.overlays + overlay.0)).collect())
            }
            FaceLabel::Contact(contact) => FaceLabel::Contact(ContactIdx(self.contacts + contact.0)),
        }
    }

    fn piece(&self, piece: &Piece) -> Piece {
        let face = |face: FaceIdx| if face.0 == 0 { face } else { FaceIdx(self.faces + face.0) };
        let vertex = |vertex: VertexIdx| VertexIdx(self.vertices + vertex.0);
        let ends = piece.ends.map(|(first, last)| (vertex(first), vertex(last)));
        Piece { left: face(piece.left), right: face(piece.right), ends }
    }

    fn spoke(&self, spoke: Spoke) -> Spoke {
        Spoke { piece: PieceIdx(self.pieces + spoke.piece.0), ..spoke }
    }
}
