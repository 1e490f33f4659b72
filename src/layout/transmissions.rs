//! Lists of transmissions against the channels that a contact meets where it lies.

use crate::device::Contact;
use crate::device::ContactIdx;
use crate::device::Device;
use crate::device::OperatingPoint;
use crate::diagnostic::Diagnostic;
use crate::layout::FaceLabel;
use crate::layout::Topology;
use crate::number::Rational;

/// Faults of contacts with more than one transmission; none where no point could be read, nor beside edge modes, which take
/// one number wherever a contact lies.
pub(super) fn checks(device: &Device, topology: &Topology) -> Vec<Diagnostic> {
    if device.points.is_empty() || device.points.iter().any(|point| point.modes.is_some()) {
        return Vec::new();
    }
    let contacts = device.contacts.iter().enumerate().filter(|(_, contact)| contact.transmission.len() > 1);
    contacts.filter_map(|(at, contact)| check(device, (contact, &met(topology, ContactIdx(at), device)))).collect()
}

/// Per point the fillings of the regions that a contact borders.
fn met(topology: &Topology, contact: ContactIdx, device: &Device) -> Vec<Vec<Rational>> {
    let own = |face: usize| topology.faces[face] == FaceLabel::Contact(contact);
    let beside = topology.pieces.iter().filter_map(|piece| match (own(piece.left.0), own(piece.right.0)) {
        (true, false) => Some(piece.right),
        (false, true) => Some(piece.left),
        _ => None,
    });
    let labels: Vec<&FaceLabel> = beside.map(|face| &topology.faces[face.0]).collect();
    let at = |point: &OperatingPoint| labels.iter().filter_map(|label| filling(label, point)).collect();
    device.points.iter().map(at).collect()
}

fn filling(label: &FaceLabel, point: &OperatingPoint) -> Option<Rational> {
    match label {
        FaceLabel::Mesa(cover) => point.filling(cover).cloned(),
        _ => None,
    }
}

fn check(device: &Device, (contact, met): (&Contact, &[Vec<Rational>])) -> Option<Diagnostic> {
    let both = met
        .iter()
        .zip(&device.points)
        .find(|(met, _)| met.iter().any(Rational::is_negative) && met.iter().any(|filling| *filling > Rational::ZERO));
    if let Some((_, point)) = both {
        return Some(of_both_signs(contact, point));
    }
    let most = met.iter().flatten().map(|filling| device.ladder.steps_up_to(filling)).max().unwrap_or(0);
    (contact.transmission.len() > most.max(1)).then(|| too_many(contact, most))
}

fn of_both_signs(contact: &Contact, point: &OperatingPoint) -> Diagnostic {
    let message = format!(
        "contact \"{}\" lists transmissions and borders regions of both signs at the point \"{}\"",
        contact.name, point.name
    );
    Diagnostic::fault("both-signs", message)
        .at(&contact.place)
        .hint("write one number: which of the channels is the outermost would not be clear")
}

fn too_many(contact: &Contact, most: usize) -> Diagnostic {
    let channels = if most == 1 { "1 channel".to_owned() } else { format!("{most} channels") };
    let message = format!(
        "contact \"{}\" lists {} transmissions and meets at most {channels}",
        contact.name,
        contact.transmission.len()
    );
    Diagnostic::fault("too-many-values", message).at(&contact.place).hint("write one per ladder step, outermost first")
}
