//! What is understood of a device file.

use crate::device::Circle;
use crate::device::Contact;
use crate::device::ContactIdx;
use crate::device::ContactShape;
use crate::device::Corner;
use crate::device::Device;
use crate::device::Drive;
use crate::device::Edge;
use crate::device::EdgeRules;
use crate::device::Groups;
use crate::device::Ladder;
use crate::device::MesaShape;
use crate::device::Mixing;
use crate::device::OperatingPoint;
use crate::device::Overlay;
use crate::device::OverlayIdx;
use crate::device::OverlayKind;
use crate::device::OverlayShape;
use crate::quantity::Nanometres;
use crate::quantity::printed::as_given;
use crate::quantity::printed::fraction;
use crate::report::Understood;
use crate::report::names;
use crate::report::printed::filling;
use crate::report::understood::bench::understood_bench;

/// A device, and where it could be laid out, its contacts rim by rim, clockwise.
pub fn understood_device(file: &str, device: &Device, rims: Option<&[Vec<ContactIdx>]>) -> Understood {
    if let Some(bench) = &device.bench {
        return understood_bench(file, (device, bench), rims);
    }
    let overlays = |kind| device.overlays.iter().filter(move |overlay| overlay.kind == kind).map(overlay_row).collect();
    let kind = format!("device file of {}", device.id);
    Understood::new(file, kind)
        .saying("about", about(device))
        .saying("layer", layer(device))
        .saying("mesa", vec![mesa(&device.mesa.shape)])
        .with("contacts", device.contacts.iter().map(contact_row).collect())
        .saying("rim", rims.map(|rims| rim_lines(device, rims)).unwrap_or_default())
        .with("gates", overlays(OverlayKind::Gate))
        .with("steps", overlays(OverlayKind::Step))
        .saying("plateaus", vec![ladder(&device.ladder)])
        .saying("mixing", std::iter::once(mixing(&device.edge)).chain(device.groups.as_ref().map(groups)).collect())
        .saying("driven by", driver(device))
        .with("points", device.points.iter().map(|point| point_row(device, point)).collect())
        .saying("assumed", unnamed_gates(device))
        .saying("readings", vec![readings(device)])
}

/// Title and material.
pub(super) fn about(device: &Device) -> Vec<String> {
    let about: Vec<&str> =
        [device.title.as_str(), device.material.as_str()].into_iter().filter(|text| !text.is_empty()).collect();
    if about.is_empty() { Vec::new() } else { vec![about.join("; ")] }
}

fn layer(device: &Device) -> Vec<String> {
    let density = device.layer.density_per_m2.map(|value| format!("density {} m⁻²", as_given(value)));
    let mobility = device.layer.mobility_m2_per_vs.map(|value| format!("mobility {} m²/(V s)", as_given(value)));
    let parts: Vec<String> = density.into_iter().chain(mobility).collect();
    if parts.is_empty() { parts } else { vec![parts.join(", ")] }
}

fn mesa(shape: &MesaShape) -> String {
    match shape {
        MesaShape::Bar { length, width } => {
            format!("bar, {} × {} µm: x from 0 at the left end, y from 0 at the lower edge", um(*length), um(*width))
        }
        MesaShape::Cross { arm_length, arm_width } => format!(
            "cross, arms {} µm long and {} µm wide: x and y from 0 at the ends of the left and the lower arm",
            um(*arm_length),
            um(*arm_width)
        ),
        MesaShape::Ring { outer_diameter, inner_diameter } => format!(
            "ring, diameters {} µm and {} µm: x and y from 0 in the centre",
            um(*outer_diameter),
            um(*inner_diameter)
        ),
        MesaShape::Outline { outline: rim, cutouts } => {
            let openings: String =
                cutouts.iter().map(|cutout| format!("; cut-out: {}", outline(&cutout.corners))).collect();
            format!("{}{openings}", outline(&rim.corners))
        }
    }
}

fn um(length: Nanometres) -> String {
    as_given(length.to_um())
}

fn contact_row(contact: &Contact) -> Vec<String> {
    let pad = contact.pad.as_ref().map(|pad| format!("pad {pad}"));
    let pin = contact.pin.as_ref().map(|pin| format!("pin {pin}"));
    let more: Vec<String> = [pin, pad, transmission(contact)].into_iter().flatten().collect();
    vec![contact.name.clone(), contact_place(&contact.shape), more.join(", ")]
}

fn transmission(contact: &Contact) -> Option<String> {
    let perfect = contact.transmission.iter().all(|share| *share == crate::number::Rational::ONE);
    let shares: Vec<String> = contact.transmission.iter().map(fraction).collect();
    (!perfect).then(|| format!("transmission {}", shares.join(", ")))
}

fn contact_place(shape: &ContactShape) -> String {
    match shape {
        ContactShape::Edge { edge, centre, width, arm } => {
            let (edge, along) = match edge {
                Edge::Left => ("left end", "y"),
                Edge::Top => ("top edge", "x"),
                Edge::Right => ("right end", "y"),
                Edge::Bottom => ("bottom edge", "x"),
            };
            let stretch = match centre.zip(*width) {
                Some((centre, width)) => format!("{along} {}", between(centre, width)),
                None => "whole".to_owned(),
            };
            let arm = if arm.0 == 0 { String::new() } else { format!(", on an arm of {} µm", um(*arm)) };
            format!("{edge}, {stretch}{arm}")
        }
        ContactShape::Round { circle, arc } => {
            let rim = if *circle == Circle::Outer { "outer rim" } else { "inner rim" };
            match arc {
                Some(arc) => format!("{rim}, {} µm wide at {}°", um(arc.width), as_given(arc.angle_deg)),
                None => format!("{rim}, whole"),
            }
        }
        ContactShape::Rim { at: (x, y), width } => {
            format!("rim, {} µm wide at ({}, {}) µm", um(*width), um(*x), um(*y))
        }
        ContactShape::Outline(corners) => outline(corners),
    }
}

/// The stretch of this width round a centre: `140 to 160 µm`.
fn between(centre: Nanometres, width: Nanometres) -> String {
    let side = width.to_um() / 2.0;
    format!("{} to {} µm", as_given(centre.to_um() - side), as_given(centre.to_um() + side))
}

fn outline(corners: &[Corner]) -> String {
    let range = |values: &mut dyn Iterator<Item = Nanometres>| {
        let values: Vec<Nanometres> = values.collect();
        let ends = values.iter().min().zip(values.iter().max());
        ends.map_or_else(String::new, |(low, high)| format!("{} to {} µm", um(*low), um(*high)))
    };
    let x = range(&mut corners.iter().map(|corner| corner.0));
    let y = range(&mut corners.iter().map(|corner| corner.1));
    format!("outline of {} corners, x {x}, y {y}", corners.len())
}

pub(super) fn rim_lines(device: &Device, rims: &[Vec<ContactIdx>]) -> Vec<String> {
    let line = |(at, rim): (usize, &Vec<ContactIdx>)| {
        let contacts: Vec<&str> = rim.iter().map(|contact| names::contact_name(device, *contact)).collect();
        // Round an opening the mesa lies on the other side: there the same order runs anticlockwise.
        let order =
            if rims.len() == 1 { "clockwise".to_owned() } else { format!("rim {}, the mesa on the right", at + 1) };
        format!("{order}: {}", contacts.join(", "))
    };
    rims.iter().enumerate().map(line).collect()
}

fn overlay_row(overlay: &Overlay) -> Vec<String> {
    let place = match &overlay.shape {
        OverlayShape::Across { from, to } => format!("x {} to {} µm, across the mesa", um(*from), um(*to)),
        OverlayShape::Outline(corners) => outline(corners),
    };
    let limits = overlay.limits_v.map(|(low, high)| format!("{} to {} V", as_given(low), as_given(high)));
    let lever = overlay.density_per_m2_per_v.map(|value| format!("{} m⁻² per V", as_given(value)));
    let mixing = overlay.mixing.as_ref().map(|mixing| format!("mixing along its borders: {}", rule(mixing)));
    let more: Vec<String> = [limits, lever, mixing].into_iter().flatten().collect();
    vec![overlay.name.clone(), place, more.join(", ")]
}

fn ladder(ladder: &Ladder) -> String {
    match ladder {
        Ladder::SpinSplit => "spin-split: at every integer".to_owned(),
        Ladder::SpinDegenerate => "spin-degenerate: at 2, 4, 6, … of either sign".to_owned(),
        Ladder::Graphene => "graphene: at 2, 6, 10, … of either sign".to_owned(),
        Ladder::BilayerGraphene => "bilayer-graphene: at 4, 8, 12, … of either sign".to_owned(),
        Ladder::Own(steps) => format!("at {}", steps.iter().map(filling).collect::<Vec<_>>().join(", ")),
    }
}

fn rule(mixing: &Mixing) -> String {
    match mixing {
        Mixing::None => "none".to_owned(),
        Mixing::Full => "full".to_owned(),
        Mixing::Over(length) => format!("over {} µm", um(*length)),
    }
}

fn mixing(edge: &EdgeRules) -> String {
    let [rim, interface, opposite] = [&edge.rim, &edge.interface, &edge.opposite].map(rule);
    format!("rim {rim}; borders between regions of one sign {interface}; between opposite signs {opposite}")
}

fn groups(groups: &Groups) -> String {
    let steps = |group: &Vec<usize>| group.iter().map(usize::to_string).collect::<Vec<_>>().join(" with ");
    let all: Vec<String> = groups.steps.iter().map(steps).collect();
    format!("ladder steps in groups, 1 outermost: {}; between groups {}", all.join(", "), rule(&groups.between))
}

/// Said where it is not the field.
fn driver(device: &Device) -> Vec<String> {
    match device.driven_by {
        Drive::Field => Vec::new(),
        Drive::Magnetisation => {
            vec!["magnetisation: the polarity is its, positive fillings run clockwise at +".to_owned()]
        }
    }
}

pub(super) fn point_row(device: &Device, point: &OperatingPoint) -> Vec<String> {
    let volts = point.gates_v.iter().map(|(gate, volts)| {
        let name = device.overlays.get(gate.0).map_or("", |overlay| overlay.name.as_str());
        format!("{name} at {} V", as_given(*volts))
    });
    let own = (device.bench.is_none() && point.edge != device.edge).then(|| format!("mixing: {}", mixing(&point.edge)));
    let more = std::iter::once(names::fillings(device, point)).chain(volts).chain(own);
    vec![point.name.clone(), names::field(point).unwrap_or_default(), more.collect::<Vec<_>>().join("; ")]
}

/// A gate that a point does not name could as well have been forgotten.
pub(super) fn unnamed_gates(device: &Device) -> Vec<String> {
    let gates = || device.overlays.iter().enumerate().filter(|(_, overlay)| overlay.kind == OverlayKind::Gate);
    let named = |point: &OperatingPoint, at: usize| point.fillings.iter().any(|(cover, _)| cover == &[OverlayIdx(at)]);
    let line = |point: &OperatingPoint| {
        let unnamed: Vec<&str> =
            gates().filter(|(at, _)| !named(point, *at)).map(|(_, gate)| gate.name.as_str()).collect();
        let names = unnamed.join(", ");
        let verb = if unnamed.len() == 1 { "has" } else { "have" };
        let filling = filling(&point.bulk);
        (!unnamed.is_empty())
            .then(|| format!("{names} {verb} the bulk filling {filling} at “{}”: not named there", point.name))
    };
    device.points.iter().filter(|point| point.modes.is_none()).filter_map(line).collect()
}

pub(super) fn readings(device: &Device) -> String {
    match device.readings.len() {
        0 => "the standard set, as none is named".to_owned(),
        1 => "1, as named".to_owned(),
        count => format!("{count}, as named"),
    }
}
