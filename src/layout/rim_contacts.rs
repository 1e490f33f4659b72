//! Contacts on the rims of rings and outlines: where on the rim each sits, and how it is drawn beside it.

use crate::device::Circle;
use crate::device::Contact;
use crate::device::ContactIdx;
use crate::device::ContactShape;
use crate::device::Corner;
use crate::device::MesaShape;
use crate::diagnostic::Diagnostic;
use crate::layout::Owner;
use crate::layout::Point;
use crate::layout::circle::circle;
use crate::layout::draughts::Draughts;
use crate::layout::draughts::too_far;
use crate::layout::grid::Cell;
use crate::layout::grid::FARTHEST;
use crate::layout::outline;
use crate::layout::owner::point_um;
use crate::layout::owner::um;
use crate::layout::rim::PM;
use crate::layout::rim::Reach;
use crate::layout::rim::Rim;
use crate::layout::strip;
use crate::layout::strip::Hold;

/// A point off the rim by no more than this part of the contact's width is moved onto it.
const TOLERANCE: i64 = 10;

/// A contact that takes a stretch of one rim.
struct Seat {
    contact: ContactIdx,
    rim: usize,
    reach: Reach,
    width: i64,
}

/// Adds the mesa with its cut-outs, whose rims get a corner wherever a contact ends, and the contacts on them.
pub(super) fn draw(draughts: &mut Draughts, body: Vec<(Owner, Vec<Cell>)>, rings: &mut Vec<(Owner, Vec<Cell>)>) {
    let rims: Vec<Rim> = body.iter().map(|(owner, ring)| rim(draughts, *owner, ring)).collect();
    let mut seats = Vec::new();
    for (n, contact) in draughts.device.contacts.iter().enumerate() {
        seats.extend(seat(draughts, &rims, (ContactIdx(n), contact)));
    }
    let drawn = drawn_rims(&rims, &seats);
    draughts.made.extend(seats.iter().flat_map(|seat| ends(&rims, seat)));
    let others: Vec<Vec<Cell>> = rings.iter().map(|(_, ring)| ring.clone()).collect();
    let holds: Vec<Hold> = seats.iter().map(|seat| hold(draughts, &rims, seat)).collect();
    for (seat, strip) in seats.iter().zip(strip::strips(&holds, &drawn, &others)) {
        match strip {
            Some(ring) => rings.push((Owner::Contact(seat.contact), ring)),
            None => no_room(draughts, seat.contact),
        }
    }
    rings.extend(whole_rims(draughts, &drawn));
    let anticlockwise = |(owner, mut ring): (Owner, Vec<Cell>)| {
        if owner != Owner::Mesa {
            ring.reverse();
        }
        (owner, ring)
    };
    rings.extend(rims.iter().map(|rim| rim.owner).zip(drawn).map(anticlockwise));
}

/// The rim along a ring that runs anticlockwise, with the mesa on its left: that of a cut-out runs the other way.
fn rim(draughts: &Draughts, owner: Owner, ring: &[Cell]) -> Rim {
    let mut ring = ring.to_vec();
    if owner != Owner::Mesa {
        ring.reverse();
    }
    Rim::new(owner, &ring, draughts.grid)
}

fn drawn_rims(rims: &[Rim], seats: &[Seat]) -> Vec<Vec<Cell>> {
    let marks = |n: usize| -> Vec<i128> {
        let own = seats.iter().filter(|seat| seat.rim == n);
        own.flat_map(|seat| [seat.reach.low, seat.reach.high]).collect()
    };
    rims.iter().enumerate().map(|(n, rim)| rim.with_corners_at(&marks(n))).collect()
}

fn ends(rims: &[Rim], seat: &Seat) -> [Cell; 2] {
    [seat.reach.low, seat.reach.high].map(|position| rims[seat.rim].cell(position))
}

fn hold(draughts: &Draughts, rims: &[Rim], seat: &Seat) -> Hold {
    let rim = &rims[seat.rim];
    let looks = seat.width.min(breadth(rims, draughts) / 5);
    Hold {
        chain: rim.chain(seat.reach),
        before: rim.neighbours(seat.reach.low).0,
        behind: rim.neighbours(seat.reach.high).1,
        depth: looks / draughts.grid.snap,
    }
}

/// The shorter side of the rectangle round the mesa, in nm.
fn breadth(rims: &[Rim], draughts: &Draughts) -> i64 {
    let cells = rims.first().map(|rim| rim.with_corners_at(&[])).unwrap_or_default();
    outline::extent(&cells).map_or(0, |(low, high)| (high.0 - low.0).min(high.1 - low.1) * draughts.grid.snap)
}

/// Where on which rim a contact sits; none for one that sits elsewhere, or with a finding.
fn seat(draughts: &mut Draughts, rims: &[Rim], (n, contact): (ContactIdx, &Contact)) -> Option<Seat> {
    match &contact.shape {
        ContactShape::Rim { at, width } => {
            let (rim, position) = at_point(draughts, rims, (n, (*at, width.0)))?;
            seated(
                draughts,
                rims,
                Seat { contact: n, rim, reach: Reach { low: position, high: position }, width: width.0 },
            )
        }
        ContactShape::Round { circle, arc: Some(arc) } => {
            let rim = usize::from(*circle == Circle::Inner);
            let position = rims.get(rim)?.nearest(at_angle(draughts, *circle, arc.angle_deg)?)?.position;
            let reach = Reach { low: position, high: position };
            seated(draughts, rims, Seat { contact: n, rim, reach, width: arc.width.0 })
        }
        _ => None,
    }
}

/// The stretch of rim with its middle where `reach` of the seat stands.
fn seated(draughts: &mut Draughts, rims: &[Rim], seat: Seat) -> Option<Seat> {
    let (owner, rim) = (Owner::Contact(seat.contact), &rims[seat.rim]);
    let reach = rim.reach(seat.reach.low, seat.width);
    if reach.is_none() {
        let length = um((rim.length() / PM) as i64);
        let message = format!("{} is as wide as its whole rim, which is {length} long", draughts.words(owner));
        let hint = match rim.owner {
            Owner::Cutout(_) => "correct `width_um`; for the whole rim of an opening give an outline that covers it",
            _ => "correct `width_um`",
        };
        draughts.fault(owner, "contact-width", (message, hint));
    }
    let reach = reach?;
    if rim.chain(reach).len() < 2 {
        let message = format!("{} is narrower than the grid of {} nm", draughts.words(owner), draughts.grid.snap);
        draughts.fault(owner, "contact-width", (message, "check `width_um`, or set a smaller snap_nm in [mesa]"));
        return None;
    }
    Some(Seat { reach, ..seat })
}

/// The rim and the position on it that are nearest to a point, which may lie slightly off.
fn at_point(
    draughts: &mut Draughts,
    rims: &[Rim],
    (n, ((x, y), width)): (ContactIdx, (Corner, i64)),
) -> Option<(usize, i128)> {
    let owner = Owner::Contact(n);
    if [x.0, y.0, width].iter().any(|nm| nm.saturating_abs() > FARTHEST.0) {
        draughts.findings.push(too_far(&draughts.words(owner)).at(owner.place(draughts.device)));
        return None;
    }
    let feet = rims.iter().enumerate().filter_map(|(n, rim)| Some((rim.nearest((x.0, y.0))?, n)));
    let (foot, rim) = feet.min_by_key(|(foot, n)| (foot.distance_squared, *n))?;
    let distance = foot.distance_squared.isqrt() as i64;
    let (who, of) = (draughts.words(owner), draughts.words(rims[rim].owner));
    let nearest = format!("the nearest point of the rim of {of} is {}", point_um(foot.point));
    let advice = format!("write `at_um = {}`", point_um(foot.point).replace('(', "[").replace(") µm", "]"));
    if distance > draughts.grid.snap.max(width / TOLERANCE) {
        let message = format!("`at_um` of {who} lies {} off the rim: {nearest}", um(distance));
        draughts.fault(owner, "contact-off-rim", (message, &format!("{advice}, or correct the outline")));
        return None;
    }
    if distance > draughts.grid.snap {
        let message = format!("`at_um` of {who} lies {} off the rim and was moved onto it: {nearest}", um(distance));
        draughts
            .findings
            .push(Diagnostic::notice("contact-moved", message).at(owner.place(draughts.device)).hint(advice));
    }
    Some((rim, foot.position))
}

/// The point of a round rim in a direction from its centre.
fn at_angle(draughts: &Draughts, circle: Circle, angle_deg: f64) -> Option<Point> {
    let MesaShape::Ring { outer_diameter, inner_diameter } = &draughts.device.mesa.shape else { return None };
    let diameter = if circle == Circle::Outer { outer_diameter } else { inner_diameter };
    let (sine, cosine) = libm::sincos(libm::fmod(angle_deg, 360.0).to_radians());
    let radius = diameter.0 as f64 / 2.0;
    Some((libm::round(radius * cosine) as i64, libm::round(radius * sine) as i64))
}

fn no_room(draughts: &mut Draughts, contact: ContactIdx) {
    let owner = Owner::Contact(contact);
    let message = format!("there is no room outside the rim for {}", draughts.words(owner));
    let hint = "the opening beside it is narrower than eight times snap_nm; set a smaller snap_nm or give `outline_um`";
    draughts.fault(owner, "contact-no-room", (message, hint));
}

/// Contacts that take a whole round rim: the opening itself, or a band round the ring.
fn whole_rims(draughts: &Draughts, drawn: &[Vec<Cell>]) -> Vec<(Owner, Vec<Cell>)> {
    let MesaShape::Ring { outer_diameter, inner_diameter } = &draughts.device.mesa.shape else { return Vec::new() };
    let depth = ((outer_diameter.0 - inner_diameter.0) / 10).max(16 * draughts.grid.snap);
    let band = circle(outer_diameter.0 + 2 * depth, draughts.grid);
    let mut found = Vec::new();
    for (n, contact) in draughts.device.contacts.iter().enumerate() {
        let owner = Owner::Contact(ContactIdx(n));
        let reversed = |rim: usize| drawn.get(rim).map(|ring| ring.iter().rev().copied().collect::<Vec<Cell>>());
        match &contact.shape {
            ContactShape::Round { circle: Circle::Inner, arc: None } => {
                found.extend(reversed(1).map(|ring| (owner, ring)))
            }
            ContactShape::Round { circle: Circle::Outer, arc: None } => {
                found.push((owner, band.clone()));
                found.extend(reversed(0).map(|ring| (owner, ring)));
            }
            _ => {}
        }
    }
    found
}
