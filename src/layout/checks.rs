//! Faults that show only once everything lies in one picture, and notices about contacts and parts of the mesa.

use std::collections::BTreeMap;
use std::collections::BTreeSet;

use crate::device::ContactIdx;
use crate::device::ContactShape;
use crate::device::Device;
use crate::device::OperatingPoint;
use crate::device::OverlayIdx;
use crate::diagnostic::Diagnostic;
use crate::layout::FaceIdx;
use crate::layout::FaceLabel;
use crate::layout::Layout;
use crate::layout::Owner;
use crate::layout::Piece;
use crate::layout::Topology;
use crate::layout::VertexIdx;
use crate::layout::edges::Windings;
use crate::layout::from_device::Outlines;
use crate::layout::label::on_mesa;
use crate::layout::transmissions;

/// A device and all that was made of it.
#[derive(Clone, Copy, Debug)]
pub(super) struct Drawn<'a> {
    /// What the user wrote.
    pub(super) device: &'a Device,
    /// Outlines on the grid.
    pub(super) outlines: &'a Outlines,
    /// The result.
    pub(super) layout: &'a Layout,
    /// Winding numbers of the faces before merging.
    pub(super) windings: &'a [Windings],
}

/// How two contacts meet, the worst last.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
enum Meeting {
    Point,
    Side,
    Area,
}

type Pair = (ContactIdx, ContactIdx);

/// All findings about contacts and overlays.
pub(super) fn checks(drawn: &Drawn) -> Vec<Diagnostic> {
    let meetings = meetings(drawn);
    let mut found: Vec<Diagnostic> =
        meetings.iter().filter_map(|(pair, kind)| meeting(drawn.device, *pair, *kind)).collect();
    let meets = |contact| meetings.keys().any(|(one, other)| *one == contact || *other == contact);
    let contacts = (0..drawn.device.contacts.len()).map(ContactIdx).filter(|c| drawn.outlines.has(Owner::Contact(*c)));
    found.extend(contacts.filter(|contact| !meets(*contact)).filter_map(|contact| reach(drawn, contact)));
    let overlays = (0..drawn.device.overlays.len()).map(OverlayIdx).filter(|o| drawn.outlines.has(Owner::Overlay(*o)));
    found.extend(overlays.filter_map(|overlay| presence(drawn, overlay)));
    found.extend(drawn.device.points.iter().flat_map(|point| overlap_entries(drawn, point)));
    found.extend(transmissions::checks(drawn.device, &drawn.layout.topology));
    found
}

/// All pairs of contacts that have something in common, in the worst way they do. Contacts never come close enough in
/// the corners of a piece alone: a shared point is always a vertex where pieces meet.
fn meetings(drawn: &Drawn) -> BTreeMap<Pair, Meeting> {
    let mut found: BTreeMap<Pair, Meeting> = BTreeMap::new();
    let mut note = |contacts: BTreeSet<ContactIdx>, kind: Meeting| {
        for one in &contacts {
            for other in contacts.iter().filter(|other| *other > one) {
                let worst = found.entry((*one, *other)).or_insert(kind);
                *worst = kind.max(*worst);
            }
        }
    };
    let topology = &drawn.layout.topology;
    let contact = |face: FaceIdx| match &topology.faces[face.0] {
        FaceLabel::Contact(contact) => Some(*contact),
        _ => None,
    };
    for windings in drawn.windings {
        note(windings.iter().filter_map(contact_inside).collect(), Meeting::Area);
    }
    for piece in &topology.pieces {
        note([piece.left, piece.right].into_iter().filter_map(contact).collect(), Meeting::Side);
    }
    for (vertex, fan) in topology.fans.iter().enumerate() {
        let faces = (0..fan.len()).map(|n| topology.face_after(VertexIdx(vertex), n));
        note(faces.filter_map(contact).collect(), Meeting::Point);
    }
    found
}

fn contact_inside(winding: &(Owner, i32)) -> Option<ContactIdx> {
    match winding {
        (Owner::Contact(contact), 1..) => Some(*contact),
        _ => None,
    }
}

/// Contacts on one edge of a bar were compared by their stretches already.
fn meeting(device: &Device, pair: Pair, kind: Meeting) -> Option<Diagnostic> {
    let (one, other) = (&device.contacts[pair.0.0], &device.contacts[pair.1.0]);
    if let (ContactShape::Edge { edge: a, .. }, ContactShape::Edge { edge: b, .. }) = (&one.shape, &other.shape)
        && a == b
    {
        return None;
    }
    let (code, what) = match kind {
        Meeting::Area => ("contacts-overlap", "overlap"),
        Meeting::Side => ("contacts-touch", "share a side"),
        Meeting::Point => ("contacts-touch", "touch in a point"),
    };
    let message = format!("contacts \"{}\" and \"{}\" {what}", one.name, other.name);
    Some(Diagnostic::fault(code, message).at(&other.place).hint("leave a gap between them, or make them one contact"))
}

/// A contact needs an edge in common with the mesa; one at which no other border ends is never reached.
fn reach(drawn: &Drawn, contact: ContactIdx) -> Option<Diagnostic> {
    let topology = &drawn.layout.topology;
    let Topology { faces, pieces, .. } = topology;
    let own = |face: FaceIdx| faces[face.0] == FaceLabel::Contact(contact);
    let neighbours: BTreeSet<FaceIdx> = pieces
        .iter()
        .filter_map(|piece| match (own(piece.left), own(piece.right)) {
            (true, _) => Some(piece.right),
            (_, true) => Some(piece.left),
            _ => None,
        })
        .collect();
    let on_mesa = neighbours.iter().any(|face| matches!(faces[face.0], FaceLabel::Mesa(_)));
    let Device { contacts, .. } = drawn.device;
    let (name, place) = (&contacts[contact.0].name, &contacts[contact.0].place);
    if !on_mesa {
        let message = format!("contact \"{name}\" has no edge in common with the mesa");
        let hint = "move it so that it covers or borders a stretch of the rim";
        return Some(Diagnostic::fault("contact-off-mesa", message).at(place).hint(hint));
    }
    (!meets_a_border(topology, own)).then(|| {
        let message = format!("contact \"{name}\" meets no border: on a plateau no edge channel reaches it");
        Diagnostic::notice("contact-isolated", message)
            .at(place)
            .hint("it must meet the rim, or the border of a gate or step, if it is meant to be measured")
    })
}

/// Whether a piece that is none of a contact's own sides ends at it.
fn meets_a_border(topology: &Topology, own: impl Fn(FaceIdx) -> bool) -> bool {
    topology.fans.iter().any(|fan| {
        let sides = fan.iter().map(|spoke| &topology.pieces[spoke.piece.0]);
        let is_own = |piece: &&Piece| own(piece.left) || own(piece.right);
        sides.clone().any(|piece| is_own(&piece)) && sides.clone().any(|piece| !is_own(&piece))
    })
}

fn presence(drawn: &Drawn, overlay: OverlayIdx) -> Option<Diagnostic> {
    let over = |label: &FaceLabel| matches!(label, FaceLabel::Mesa(cover) if cover.contains(&overlay));
    if drawn.layout.topology.faces.iter().any(over) {
        return None;
    }
    let owner = Owner::Overlay(overlay);
    let inside = |windings: &Windings| windings.iter().any(|(other, winding)| *other == owner && *winding > 0);
    let hidden = |windings: &&Windings| inside(windings) && on_mesa(windings);
    let (words, place) = (owner.words(drawn.device), owner.place(drawn.device));
    if drawn.windings.iter().any(|windings| hidden(&windings)) {
        let message = format!("{words} lies wholly under contacts and changes nothing");
        return Some(Diagnostic::notice("overlay-hidden", message).at(place).hint("move it, or leave it out"));
    }
    let message = format!("{words} lies wholly outside the mesa");
    Some(Diagnostic::fault("overlay-outside", message).at(place).hint("correct its outline, or leave it out"))
}

/// Where overlays overlap on the mesa, every operating point needs a filling of its own for the overlap.
fn overlap_entries(drawn: &Drawn, point: &OperatingPoint) -> Vec<Diagnostic> {
    let faces = &drawn.layout.topology.faces;
    let covers: BTreeSet<&Vec<OverlayIdx>> = faces.iter().filter_map(cover).filter(|cover| cover.len() > 1).collect();
    let names = |cover: &[OverlayIdx]| {
        let names: Vec<&str> = cover.iter().map(|overlay| drawn.device.overlays[overlay.0].name.as_str()).collect();
        names.join("+")
    };
    let missing = covers.iter().filter(|cover| point.filling(cover).is_none()).map(|cover| {
        let message = format!("point \"{}\" has no filling for the overlap \"{}\"", point.name, names(cover));
        let hint = format!("add \"{}\" = … to its fillings", names(cover));
        Diagnostic::fault("overlap-filling", message).at(&point.place).hint(hint)
    });
    let drawn_all = |cover: &[OverlayIdx]| cover.iter().all(|overlay| drawn.outlines.has(Owner::Overlay(*overlay)));
    let entries = point.fillings.iter().map(|(cover, _)| cover).filter(|cover| cover.len() > 1 && drawn_all(cover));
    let unused = entries.filter(|cover| !covers.contains(cover)).map(|cover| {
        let message = format!(
            "point \"{}\" has a filling for \"{}\", but nowhere on the mesa do exactly these overlap",
            point.name,
            names(cover)
        );
        let hint = "leave the entry out, or correct the extent of these gates and steps";
        Diagnostic::notice("overlap-unused", message).at(&point.place).hint(hint)
    });
    missing.chain(unused).collect()
}

fn cover(label: &FaceLabel) -> Option<&Vec<OverlayIdx>> {
    match label {
        FaceLabel::Mesa(cover) => Some(cover),
        _ => None,
    }
}
