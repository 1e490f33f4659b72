//! From layout and device to a network, a setting and its channels.

use crate::device::Device;
use crate::device::EdgeRules;
use crate::device::Ladder;
use crate::device::LadderPlace;
use crate::device::Mixing;
use crate::device::Modes;
use crate::device::OperatingPoint;
use crate::device::OverlayIdx;
use crate::device::Part;
use crate::layout::FaceLabel;
use crate::layout::Layout;
use crate::layout::Piece;
use crate::layout::PieceIdx;
use crate::layout::Topology;
use crate::network::Arithmetic;
use crate::network::BandIdx;
use crate::network::Channels;
use crate::network::Coupling;
use crate::network::Link;
use crate::network::Network;
use crate::network::Operating;
use crate::network::bands::bands;
use crate::network::bundles::assemble;
use crate::network::bundles::junctions;
use crate::network::courses::append_paths;
use crate::network::joined::Assembled;
use crate::network::joined::assembled;
use crate::network::joined::joined;
use crate::number::Number;
use crate::number::Rational;
use crate::quantity::Polarity;

/// What is beside what, with lengths in place of coordinates.
pub fn network(layout: &Layout, contacts: usize) -> Network {
    let lengths_um =
        (0..layout.topology.pieces.len()).map(|piece| layout.positions.length_um(PieceIdx(piece))).collect();
    Network { topology: layout.topology.clone(), lengths_um, contacts, parts: Vec::new(), links: Vec::new() }
}

/// The same for a device, or for a bench whose devices are joined by these wires.
pub fn of_device(layout: &Layout, device: &Device, links: Vec<Link<Number>>) -> Network {
    let whole = Network { links, ..network(layout, device.contacts.len()) };
    let Some(bench) = &device.bench else { return whole };
    let parts = layout.parts.iter().zip(&bench.parts);
    let part = |(layout, part): (&Layout, &Part)| network(layout, part.device.contacts.len());
    Network { parts: parts.map(part).collect(), ..whole }
}

/// The setting of one operating point at one polarity. Every overlap must have an entry (the layout has checked it).
pub fn operating(network: &Network, device: &Device, point: &OperatingPoint, polarity: Polarity) -> Operating {
    if let Some(bench) = &device.bench {
        return joined(network, bench, point, polarity);
    }
    let faces = &network.topology.faces;
    let fillings: Vec<Rational> = faces.iter().map(|label| filling(label, point)).collect();
    let groups = device.groups.as_ref().filter(|_| point.modes.is_none());
    let backward = |modes: Modes| faces.iter().map(|label| modes_of(label, modes.backward)).collect();
    Operating {
        enclosing: match point.modes {
            Some(_) => vec![None; fillings.len()],
            None => fillings.iter().map(|filling| enclosing(&device.ladder, filling)).collect(),
        },
        ladder: device.ladder.clone(),
        coupling: network
            .topology
            .pieces
            .iter()
            .map(|piece| coupling(piece, network, device, (point, &fillings)))
            .collect(),
        groups: groups.map_or_else(Vec::new, |groups| groups.steps.clone()),
        backward: point.modes.map_or_else(Vec::new, backward),
        transmission: device.contacts.iter().map(|contact| contact.transmission.clone()).collect(),
        fillings,
        polarity,
        arithmetic: Arithmetic::Exact,
        parts: Vec::new(),
    }
}

/// All channels of a setting.
pub fn channels(network: &Network, operating: &Operating) -> Channels {
    let mut whole = match network.parts.as_slice() {
        [] => of_one(network, operating),
        _ => assembled(network, operating, of_one),
    };
    whole.wires.links = network.links.clone();
    let Assembled { bands, courses, wires } = whole;
    Channels { bands, courses, junctions: junctions(wires, operating.arithmetic) }
}

fn of_one(network: &Network, operating: &Operating) -> Assembled {
    let bands = bands(operating);
    let mut paths = Vec::new();
    for (at, band) in bands.iter().enumerate() {
        append_paths(&mut paths, &network.topology, operating, (BandIdx(at), band));
    }
    assemble(bands, paths, (network, operating))
}

fn modes_of(label: &FaceLabel, modes: i64) -> Rational {
    match label {
        FaceLabel::Mesa(_) => Rational::from(modes),
        FaceLabel::Vacuum | FaceLabel::Contact(_) => Rational::ZERO,
    }
}

fn filling(label: &FaceLabel, point: &OperatingPoint) -> Rational {
    if let Some(modes) = point.modes {
        return modes_of(label, modes.forward);
    }
    match label {
        FaceLabel::Mesa(cover) => point.filling(cover).unwrap_or(&point.bulk).clone(),
        FaceLabel::Vacuum | FaceLabel::Contact(_) => Rational::ZERO,
    }
}

fn enclosing(ladder: &Ladder, filling: &Rational) -> Option<(Rational, Rational)> {
    match ladder.place(filling) {
        LadderPlace::Between { lower, upper } => Some((lower, upper)),
        LadderPlace::Step | LadderPlace::Beyond => None,
    }
}

fn coupling(
    piece: &Piece,
    network: &Network,
    device: &Device,
    (point, fillings): (&OperatingPoint, &[Rational]),
) -> Coupling {
    if let Some(modes) = point.modes {
        return modes.backscatter.map_or(Coupling::Alike(Mixing::None), Coupling::Backscatter);
    }
    let EdgeRules { rim, interface, opposite } = &point.edge;
    let (left, right) = (&fillings[piece.left.0], &fillings[piece.right.0]);
    let own = own_mixing(piece, &network.topology, device);
    let is_one_sign = !(left * right).is_negative();
    let rule = match border(piece, &network.topology) {
        Border::Rim => rim,
        Border::Inner if !is_one_sign => own.unwrap_or(opposite),
        Border::Inner => own.unwrap_or(interface),
        Border::Contact => return Coupling::Alike(Mixing::None),
    };
    match (&device.groups, is_one_sign) {
        (Some(groups), true) => Coupling::Grouped { within: rule.clone(), between: groups.between.clone() },
        _ => Coupling::Alike(rule.clone()),
    }
}

enum Border {
    Rim,
    Inner,
    Contact,
}

fn border(piece: &Piece, topology: &Topology) -> Border {
    match (&topology.faces[piece.left.0], &topology.faces[piece.right.0]) {
        (FaceLabel::Contact(_), _) | (_, FaceLabel::Contact(_)) => Border::Contact,
        (FaceLabel::Mesa(_), FaceLabel::Mesa(_)) => Border::Inner,
        _ => Border::Rim,
    }
}

/// The rule of the gate or step whose own border this is. Where borders of several coincide, the first that states a
/// rule counts (gates before steps, in the order of the file), whichever side it lies on.
fn own_mixing<'a>(piece: &Piece, topology: &Topology, device: &'a Device) -> Option<&'a Mixing> {
    let (FaceLabel::Mesa(left), FaceLabel::Mesa(right)) =
        (&topology.faces[piece.left.0], &topology.faces[piece.right.0])
    else {
        return None;
    };
    let mut overlays = device.overlays.iter().enumerate();
    overlays.find_map(|(at, overlay)| {
        let ends_here = left.contains(&OverlayIdx(at)) != right.contains(&OverlayIdx(at));
        overlay.mixing.as_ref().filter(|_| ends_here)
    })
}
