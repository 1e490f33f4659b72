//! `[bench]`: several devices joined by wires, as one device.
//!
//! A bench is a device whose contacts, gates and steps are those of its parts, called `A:1` and `A:TG`, and whose
//! operating points hold one point of every part. What belongs to one chip alone (mesa, layer, ladder, edge) stays with the
//! parts.

use crate::diagnostic::Place;

use crate::device::Contact;
use crate::device::ContactIdx;
use crate::device::ContactShape;
use crate::device::Device;
use crate::device::OperatingPoint;
use crate::device::Overlay;
use crate::device::OverlayIdx;
use crate::number::Rational;

/// Devices and the wires between them.
#[derive(Clone, Debug, PartialEq)]
pub struct Bench {
    /// The devices, in the order of the file.
    pub parts: Vec<Part>,
    /// Binding posts: the last contacts of the bench, which lie on no chip.
    pub posts: usize,
    /// The wires, in the order of the file.
    pub links: Vec<Link>,
}

/// One device of a bench.
#[derive(Clone, Debug, PartialEq)]
pub struct Part {
    /// What the bench calls it: its id, unless the bench gives names.
    pub name: String,
    /// The device as its own file describes it.
    pub device: Device,
}

/// `[[link]]`: a wire between two contacts.
#[derive(Clone, Debug, PartialEq)]
pub struct Link {
    /// The contacts that it joins.
    pub ends: [ContactIdx; 2],
    /// Its resistance in Ω; at 0 the contacts are one.
    pub ohm: f64,
    /// Where the table stands.
    pub place: Place,
}

/// `A:1`: the name of a thing of a part.
pub fn joined_name(part: &str, name: &str) -> String {
    format!("{part}:{name}")
}

/// The contacts of all parts, then the posts.
pub(super) fn contacts(parts: &[Part], posts: &[(String, Place)]) -> Vec<Contact> {
    let of_part = |part: &Part| {
        let name = |contact: &Contact| joined_name(&part.name, &contact.name);
        part.device.contacts.iter().map(|contact| Contact { name: name(contact), ..contact.clone() }).collect()
    };
    let mut contacts: Vec<Contact> = parts.iter().flat_map::<Vec<Contact>, _>(of_part).collect();
    contacts.extend(posts.iter().map(|(name, place)| post(name, place)));
    contacts
}

/// A post has no place on a chip, so its outline has no corners.
fn post(name: &str, place: &Place) -> Contact {
    Contact {
        name: name.to_owned(),
        pin: None,
        pad: None,
        note: None,
        shape: ContactShape::Outline(Vec::new()),
        transmission: vec![Rational::ONE],
        place: place.clone(),
    }
}

/// The gates and steps of all parts.
pub(super) fn overlays(parts: &[Part]) -> Vec<Overlay> {
    let of_part = |part: &Part| {
        let name = |overlay: &Overlay| joined_name(&part.name, &overlay.name);
        part.device.overlays.iter().map(|overlay| Overlay { name: name(overlay), ..overlay.clone() }).collect()
    };
    parts.iter().flat_map::<Vec<Overlay>, _>(of_part).collect()
}

/// The point of this name of every part, as one; none where a part lacks it.
pub(super) fn point(parts: &[Part], name: &str) -> Option<OperatingPoint> {
    let of_part = |part: &Part| part.device.points.iter().find(|point| point.name == name).cloned();
    let points: Vec<OperatingPoint> = parts.iter().map(of_part).collect::<Option<_>>()?;
    let mut before = 0;
    let mut gates_v = Vec::new();
    for (part, point) in parts.iter().zip(&points) {
        gates_v.extend(point.gates_v.iter().map(|(gate, volt)| (OverlayIdx(before + gate.0), *volt)));
        before += part.device.overlays.len();
    }
    let first = points.first()?.clone();
    let field_t = points.iter().find_map(|point| point.field_t);
    Some(OperatingPoint { field_t, gates_v, fillings: Vec::new(), modes: None, parts: points, ..first })
}
