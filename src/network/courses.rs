//! Courses: where every channel runs, from contact to contact.

use crate::device::ContactIdx;
use crate::layout::FaceIdx;
use crate::layout::FaceLabel;
use crate::layout::Topology;
use crate::network::Band;
use crate::network::BandIdx;
use crate::network::Carrier;
use crate::network::CourseEnds;
use crate::network::Operating;
use crate::network::bands::level;
use crate::network::boundary::Hand;
use crate::network::boundary::Walk;
use crate::network::boundary::Walker;
use crate::quantity::Polarity;

/// A course before its pieces are put into bundles.
pub(super) struct Path {
    pub band: BandIdx,
    pub ends: Option<CourseEnds>,
    pub walks: Vec<Walk>,
    /// The path (by index) from which carriers come that the contact at the beginning does not absorb.
    pub previous: usize,
}

/// All paths of a band, appended to `paths`.
pub(super) fn append_paths(paths: &mut Vec<Path>, topology: &Topology, operating: &Operating, band: (BandIdx, &Band)) {
    let (index, band) = band;
    let holds = |face: FaceIdx| level(operating, face, band.carrier) >= band.to;
    let hand = hand(band.carrier, operating.polarity);
    let walker = Walker { topology, inside: holds, hand };
    let with_contacts = Walker { topology, inside: |face| holds(face) || contact(topology, face).is_some(), hand };
    for walk in walker.loops() {
        let stretches = stretches(&walk, |step| contact(topology, walker.outside(step)));
        let first = paths.len();
        let count = stretches.len();
        for (at, stretch) in stretches.into_iter().enumerate() {
            let previous = first + (at + count - 1) % count;
            let ends = stretch.contacts.and_then(|contacts| ends(&with_contacts, &stretch.walks, contacts));
            paths.push(Path { band: index, ends, walks: stretch.walks, previous });
        }
    }
}

/// At `+` an electron channel has the higher |ν| on its right hand, a hole channel on its left; at `−` all turn.
fn hand(carrier: Carrier, polarity: Polarity) -> Hand {
    match (carrier, polarity) {
        (Carrier::Electron, Polarity::Toward) | (Carrier::Hole, Polarity::Away) => Hand::Right,
        _ => Hand::Left,
    }
}

fn contact(topology: &Topology, face: FaceIdx) -> Option<ContactIdx> {
    match topology.faces[face.0] {
        FaceLabel::Contact(contact) => Some(contact),
        _ => None,
    }
}

struct Stretch {
    contacts: Option<(ContactIdx, ContactIdx)>,
    walks: Vec<Walk>,
}

/// Cuts a closed walk at the contacts it passes. A walk that meets no contact is one closed stretch; a walk along
/// contacts only carries nothing.
fn stretches(walk: &[Walk], contact_at: impl Fn(Walk) -> Option<ContactIdx>) -> Vec<Stretch> {
    let Some(start) = walk.iter().position(|&step| contact_at(step).is_some()) else {
        return vec![Stretch { contacts: None, walks: walk.to_vec() }];
    };
    let mut found = Vec::new();
    let mut open: Option<(ContactIdx, Vec<Walk>)> = None;
    for at in 0..=walk.len() {
        let step = walk[(start + at) % walk.len()];
        match (contact_at(step), open.take()) {
            (Some(to), Some((from, walks))) if !walks.is_empty() => {
                found.push(Stretch { contacts: Some((from, to)), walks });
                open = Some((to, Vec::new()));
            }
            (Some(to), _) => open = Some((to, Vec::new())),
            (None, Some((from, mut walks))) => {
                walks.push(step);
                open = Some((from, walks));
            }
            (None, None) => {}
        }
    }
    found
}

fn ends<F: Fn(FaceIdx) -> bool>(
    border: &Walker<'_, F>,
    walks: &[Walk],
    (from, to): (ContactIdx, ContactIdx),
) -> Option<CourseEnds> {
    let (start, before) = border.previous(*walks.first()?)?;
    let (end, after) = border.next(*walks.last()?)?;
    Some(CourseEnds { from, to, before: (start, before.0, before.1), after: (end, after.0, after.1) })
}
