//! Contacts on the straight edges of a bar and on the ends of a cross: which stretch of an edge they take, and the rules
//! for stretches.

use crate::device::Contact;
use crate::device::ContactIdx;
use crate::device::ContactShape;
use crate::device::Device;
use crate::device::Edge;
use crate::device::OverlayKind;
use crate::device::OverlayShape;
use crate::diagnostic::Diagnostic;
use crate::diagnostic::Findings;
use crate::layout::Point;
use crate::layout::grid::FARTHEST;
use crate::layout::owner::um;
use crate::layout::owner::um_digits;

/// The four straight edges of a bar or a cross, in nm.
#[derive(Clone, Copy, Debug)]
pub(super) struct Ends {
    /// Lower left and upper right corner of the rectangle round the mesa; the edges lie on its sides.
    pub(super) extent: (Point, Point),
    /// From where to where the top and bottom edges reach.
    pub(super) along_x: (i64, i64),
    /// From where to where the left and right edges reach.
    pub(super) along_y: (i64, i64),
}

/// The stretch of an edge that a contact takes, in nm along the edge, and the length of its arm.
#[derive(Clone, Copy, Debug)]
pub(super) struct Stretch {
    /// Which edge.
    pub(super) edge: Edge,
    /// Lower end.
    pub(super) low: i64,
    /// Upper end.
    pub(super) high: i64,
    /// How far outside the edge the contact begins.
    pub(super) arm: i64,
}

impl Ends {
    /// The rectangle beside an edge between two distances outward from it.
    pub(super) fn beside(self, stretch: Stretch, from: i64, to: i64) -> [Point; 4] {
        let Stretch { edge, low, high, .. } = stretch;
        let (lower, upper) = self.extent;
        match edge {
            Edge::Left => rectangle((lower.0 - to, low), (lower.0 - from, high)),
            Edge::Right => rectangle((upper.0 + from, low), (upper.0 + to, high)),
            Edge::Top => rectangle((low, upper.1 + from), (high, upper.1 + to)),
            Edge::Bottom => rectangle((low, lower.1 - to), (high, lower.1 - from)),
        }
    }

    fn along(self, edge: Edge) -> (i64, i64) {
        match edge {
            Edge::Left | Edge::Right => self.along_y,
            Edge::Top | Edge::Bottom => self.along_x,
        }
    }
}

/// The part of a mesa between two x, from its lowest to its highest y, and of the arms beyond it where their lengths
/// (left, right, top, bottom) are given.
pub(super) fn across((lower, upper): (Point, Point), (low, high): (i64, i64), arms: [i64; 4]) -> [Point; 4] {
    let [left, right, top, bottom] = arms;
    let low = if low == lower.0 { low - left } else { low };
    let high = if high == upper.0 { high + right } else { high };
    rectangle((low, lower.1 - bottom), (high, upper.1 + top))
}

/// The longest arm on the left, right, top and bottom edge.
pub(super) fn longest_arms(stretches: &[(ContactIdx, Stretch)]) -> [i64; 4] {
    [Edge::Left, Edge::Right, Edge::Top, Edge::Bottom].map(|edge| {
        let arms = stretches.iter().filter(|(_, stretch)| stretch.edge == edge).map(|(_, stretch)| stretch.arm);
        arms.max().unwrap_or(0)
    })
}

/// A rectangle from its lower left and upper right corners.
pub(super) fn rectangle(low: Point, high: Point) -> [Point; 4] {
    [low, (high.0, low.1), high, (low.0, high.1)]
}

/// The stretch of a contact on an edge; none for an outline, or with a finding where the stretch is not on the edge.
pub(super) fn stretch(ends: Ends, contact: &Contact, findings: &mut Findings) -> Option<Stretch> {
    let ContactShape::Edge { edge, centre, width, arm } = &contact.shape else { return None };
    let (start, end) = ends.along(*edge);
    let given = [centre.map(|l| l.0), width.map(|l| l.0), Some(arm.0)];
    let (low, high) = match (centre, width) {
        _ if given.into_iter().flatten().any(|nm| nm.saturating_abs() > FARTHEST.0) => {
            findings.push(too_far(&format!("contact \"{}\"", contact.name)).at(&contact.place));
            return None;
        }
        (None, None) => (start, end),
        (None, Some(width)) => {
            let low = (start + end - width.0).div_euclid(2);
            (low, low + width.0)
        }
        (Some(centre), Some(width)) => {
            let low = (2 * centre.0 - width.0).div_euclid(2);
            (low, low + width.0)
        }
        (Some(_), None) => {
            let message = format!("contact \"{}\" has a centre but no width", contact.name);
            findings.push(Diagnostic::fault("contact-width", message).at(&contact.place).hint("add width_um"));
            return None;
        }
    };
    let stretch = Stretch { edge: *edge, low, high, arm: arm.0 };
    let wrong = misplaced(contact, stretch, (start, end));
    let fine = wrong.is_none();
    findings.extend(wrong);
    fine.then_some(stretch)
}

/// The finding about a length beyond all chips.
pub(super) fn too_far(what: &str) -> Diagnostic {
    let message = format!("{what} has a length beyond one metre");
    Diagnostic::fault("too-far", message).hint("lengths are given in micrometres; check the unit")
}

fn misplaced(contact: &Contact, stretch: Stretch, (start, end): (i64, i64)) -> Option<Diagnostic> {
    let Stretch { edge, low, high, arm } = stretch;
    let (name, edge_name) = (&contact.name, edge_words(edge));
    let fault = |code, message: String| Some(Diagnostic::fault(code, message).at(&contact.place));
    if high <= low || arm < 0 {
        let message = format!("contact \"{name}\" has a width or an arm that is not a length");
        return fault("contact-width", message).map(|d| d.hint("width_um must be above 0, arm_um at least 0"));
    }
    if high <= start || low >= end {
        let message = format!(
            "contact \"{name}\" is not on the {edge_name} edge, which runs from {} to {}: it would reach from {} to {}",
            um_digits(start),
            um(end),
            um(low),
            um(high)
        );
        return fault("contact-off-mesa", message).map(|d| d.hint("correct its centre, or choose another edge"));
    }
    if low < start || high > end {
        let (reached, limit) = if low < start { (low, start) } else { (high, end) };
        let message = format!(
            "contact \"{name}\" reaches to {} on the {edge_name} edge, which ends at {}",
            um(reached),
            um(limit)
        );
        return fault("contact-beyond-edge", message).map(|d| d.hint("move its centre inward or make it narrower"));
    }
    None
}

fn edge_words(edge: Edge) -> &'static str {
    match edge {
        Edge::Left => "left",
        Edge::Top => "top",
        Edge::Right => "right",
        Edge::Bottom => "bottom",
    }
}

/// Two contacts on one edge whose stretches meet; `reach` gives a stretch's ends in whole pixels.
pub(super) fn meeting_stretches(
    device: &Device,
    stretches: &[(ContactIdx, Stretch)],
    reach: impl Fn(&Stretch) -> (i64, i64),
) -> Vec<Diagnostic> {
    let mut found = Vec::new();
    for (n, (one, first)) in stretches.iter().enumerate() {
        for (other, second) in stretches[n + 1..].iter().filter(|(_, second)| second.edge == first.edge) {
            let (a, b) = (reach(first), reach(second));
            if a.0 <= b.1 && b.0 <= a.1 {
                let apart = a.0 == b.1 || b.0 == a.1;
                let arms = first.arm > 0 && second.arm > 0;
                found.push(meeting(device, (*one, *other), MeetingKind { apart, arms }));
            }
        }
    }
    found
}

struct MeetingKind {
    apart: bool,
    arms: bool,
}

fn meeting(device: &Device, pair: (ContactIdx, ContactIdx), kind: MeetingKind) -> Diagnostic {
    let (one, other) = (&device.contacts[pair.0.0], &device.contacts[pair.1.0]);
    let (code, what) = match (kind.arms, kind.apart) {
        (true, false) => ("arms-overlap", "the arms of contacts overlap"),
        (true, true) => ("arms-overlap", "the arms of contacts touch"),
        (false, false) => ("contacts-overlap", "contacts overlap"),
        (false, true) => ("contacts-touch", "contacts touch"),
    };
    let message = format!("{what}: \"{}\" and \"{}\" on the {} edge", one.name, other.name, edge_of(one));
    Diagnostic::fault(code, message).at(&other.place).hint("leave a gap between them, or make them one contact")
}

fn edge_of(contact: &Contact) -> &'static str {
    match &contact.shape {
        ContactShape::Edge { edge, .. } => edge_words(*edge),
        _ => "same",
    }
}

/// A gate across the mesa covers its body and never the arm of a contact; where an arm begins under one, that is said.
pub(super) fn arms_under_overlays(device: &Device, ends: Ends, stretches: &[(ContactIdx, Stretch)]) -> Vec<Diagnostic> {
    let mut notices = Vec::new();
    for (contact, stretch) in stretches.iter().filter(|(_, stretch)| stretch.arm > 0) {
        let (low, high) = match stretch.edge {
            Edge::Left => (ends.extent.0.0, ends.extent.0.0 + 1),
            Edge::Right => (ends.extent.1.0 - 1, ends.extent.1.0),
            Edge::Top | Edge::Bottom => (stretch.low, stretch.high),
        };
        for overlay in &device.overlays {
            if let OverlayShape::Across { from, to } = &overlay.shape
                && overlay.kind == OverlayKind::Gate
                && from.0 < high
                && low < to.0
            {
                let name = &device.contacts[contact.0].name;
                let message = format!(
                    "the arm of contact \"{name}\" begins under \"{}\" and is taken as not covered by it",
                    overlay.name
                );
                let hint = "give the overlay an outline_um if it covers the arm too, or move one of them";
                notices.push(Diagnostic::notice("arm-under-overlay", message).at(&overlay.place).hint(hint));
            }
        }
    }
    notices
}
