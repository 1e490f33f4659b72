//! Devices written in code, for tests.

use crate::device::Contact;
use crate::device::ContactShape;
use crate::device::Device;
use crate::device::Drive;
use crate::device::Edge;
use crate::device::EdgeRules;
use crate::device::Ladder;
use crate::device::Layer;
use crate::device::Mesa;
use crate::device::MesaShape;
use crate::device::Mixing;
use crate::device::OperatingPoint;
use crate::device::Overlay;
use crate::device::OverlayIdx;
use crate::device::OverlayKind;
use crate::device::OverlayShape;
use crate::diagnostic::Place;
use crate::diagnostic::Source;
use crate::layout::Point;
use crate::number::Rational;
use crate::quantity::Nanometres;

/// A bar with nothing on it; lengths in µm, snap 10 nm.
pub(crate) fn bar(length_um: i64, width_um: i64) -> Device {
    let shape = MesaShape::Bar { length: um(length_um), width: um(width_um) };
    Device {
        id: "B-1".to_string(),
        title: String::new(),
        material: String::new(),
        ladder: Ladder::default(),
        layer: Layer::default(),
        mesa: Mesa { shape, snap: Nanometres(10), place: place(0) },
        edge: EdgeRules { rim: Mixing::None, interface: Mixing::None, opposite: Mixing::Full },
        groups: None,
        driven_by: Drive::Field,
        contacts: Vec::new(),
        overlays: Vec::new(),
        points: Vec::new(),
        readings: Vec::new(),
        bench: None,
    }
}

/// The bar of 600 µm × 100 µm with six contacts, arms of 60 µm under contacts 2, 3, 5 and 6, and a gate from 250 to 350 µm.
pub(crate) fn hall_bar() -> Device {
    bar(600, 100)
        .end("1", Edge::Left)
        .arm("2", (Edge::Top, 150), 60)
        .arm("3", (Edge::Top, 450), 60)
        .end("4", Edge::Right)
        .arm("5", (Edge::Bottom, 450), 60)
        .arm("6", (Edge::Bottom, 150), 60)
        .gate("TG", 250, 350)
}

impl Device {
    /// Adds a contact over a whole end.
    pub(crate) fn end(self, name: &str, edge: Edge) -> Self {
        self.contact(name, ContactShape::Edge { edge, centre: None, width: None, arm: um(0) })
    }

    /// Adds a contact of 20 µm on an edge at a centre in µm, with an arm of so many µm.
    pub(crate) fn arm(self, name: &str, (edge, centre_um): (Edge, i64), arm_um: i64) -> Self {
        self.contact(
            name,
            ContactShape::Edge { edge, centre: Some(um(centre_um)), width: Some(um(20)), arm: um(arm_um) },
        )
    }

    /// Adds a contact of any outline, in nm.
    pub(crate) fn outlined(self, name: &str, corners: &[Point]) -> Self {
        self.contact(
            name,
            ContactShape::Outline(corners.iter().map(|(x, y)| (Nanometres(*x), Nanometres(*y))).collect()),
        )
    }

    /// Adds a contact.
    pub(crate) fn contact(mut self, name: &str, shape: ContactShape) -> Self {
        self.contacts.push(Contact {
            name: name.to_string(),
            pin: None,
            pad: None,
            note: None,
            shape,
            transmission: vec![Rational::ONE],
            place: place(100 + self.contacts.len()),
        });
        self
    }

    /// Adds a gate across the bar, from and to in µm.
    pub(crate) fn gate(self, name: &str, from_um: i64, to_um: i64) -> Self {
        self.overlay(name, OverlayShape::Across { from: um(from_um), to: um(to_um) })
    }

    /// Adds a gate across the mesa, from and to in nm.
    pub(crate) fn strip(self, name: &str, from: Nanometres, to: Nanometres) -> Self {
        self.overlay(name, OverlayShape::Across { from, to })
    }

    /// Adds a gate of any outline, in nm.
    pub(crate) fn gate_outline(self, name: &str, corners: &[Point]) -> Self {
        let corners = corners.iter().map(|(x, y)| (Nanometres(*x), Nanometres(*y))).collect();
        self.overlay(name, OverlayShape::Outline(corners))
    }

    fn overlay(mut self, name: &str, shape: OverlayShape) -> Self {
        self.overlays.push(Overlay {
            name: name.to_string(),
            kind: OverlayKind::Gate,
            shape,
            mixing: None,
            density_per_m2_per_v: None,
            zero_v: None,
            limits_v: None,
            place: place(200 + self.overlays.len()),
        });
        self
    }

    /// Adds an operating point with these fillings by set of overlays.
    pub(crate) fn point(mut self, bulk: i64, fillings: &[(&[usize], i64)]) -> Self {
        let cover = |set: &[usize]| set.iter().map(|overlay| OverlayIdx(*overlay)).collect();
        self.points.push(OperatingPoint {
            name: format!("point {}", self.points.len() + 1),
            field_t: None,
            bulk: Rational::from(bulk),
            fillings: fillings.iter().map(|(set, filling)| (cover(set), Rational::from(*filling))).collect(),
            gates_v: Vec::new(),
            edge: self.edge.clone(),
            modes: None,
            parts: Vec::new(),
            place: place(300 + self.points.len()),
        });
        self
    }
}

/// Micrometres as a length.
pub(crate) fn um(um: i64) -> Nanometres {
    Nanometres(1000 * um)
}

/// A place that differs from others by its start.
pub(crate) fn place(start: usize) -> Place {
    Place { source: Source::new("device.toml", " ".repeat(400)), start, end: start + 1 }
}
