//! The device file, checked: what was made, in the words of the field.
//!
//! Owns: [`Device`] and the checks on it, one function per rule. Takes the text of a device file (through `syntax`),
//! gives a [`Device`] or all faults at once. Must never contain a disk, a solution or anything of a later room:
//! whether contacts overlap or lie on the rim is found by `layout`, which has the places to say so.

use crate::diagnostic::Place;
use crate::number::Rational;
use crate::quantity::Nanometres;

mod bench;
mod ladder;
mod names;
mod parse;

pub use bench::Bench;
pub use bench::Link;
pub use bench::Part;
pub use bench::joined_name;
pub use ladder::Ladder;
pub use ladder::LadderPlace;
pub use names::Names;
pub use parse::Others;
pub use parse::drawing;
pub use parse::from_bytes;
pub use parse::from_source;
pub use parse::with_others;

/// Index of a contact, in the order of the device file.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct ContactIdx(pub usize);

/// Index of an overlay (a gate or a step): all gates in the order of the file, then all steps.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct OverlayIdx(pub usize);

/// A device: everything the device file says.
#[derive(Clone, Debug, PartialEq)]
pub struct Device {
    /// Identity, as `[device] id`.
    pub id: String,
    /// Title line, empty where none is given.
    pub title: String,
    /// Material, empty where none is given.
    pub material: String,
    /// The fillings at which this material shows plateaus.
    pub ladder: Ladder,
    /// The layer's density and mobility.
    pub layer: Layer,
    /// The shape of the mesa.
    pub mesa: Mesa,
    /// Mixing along rims and borders.
    pub edge: EdgeRules,
    /// Which ladder steps mix first; none where all mix alike.
    pub groups: Option<Groups>,
    /// What turns the channels.
    pub driven_by: Drive,
    /// All contacts, in the order of the file.
    pub contacts: Vec<Contact>,
    /// All gates, then all steps.
    pub overlays: Vec<Overlay>,
    /// Operating points, in the order of the file.
    pub points: Vec<OperatingPoint>,
    /// Readings that the file names; empty means that a standard set is chosen.
    pub readings: Vec<NamedReading>,
    /// The devices that this one is made of, where it is a bench. `mesa`, `ladder`, `layer` and `edge` above are then those
    /// of the first and mean nothing for the others.
    pub bench: Option<Bench>,
}

impl Device {
    /// Every device by itself with its part of a point: this one, or those on the bench with what the bench calls them.
    pub fn singles<'a>(&'a self, point: &'a OperatingPoint) -> Vec<(Option<&'a str>, &'a Device, &'a OperatingPoint)> {
        match &self.bench {
            None => vec![(None, self, point)],
            Some(bench) => bench
                .parts
                .iter()
                .zip(&point.parts)
                .map(|(part, point)| (Some(part.name.as_str()), &part.device, point))
                .collect(),
        }
    }
}

/// `[layer]`: what is known of the ungated layer.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Layer {
    /// Sheet density in 1/m².
    pub density_per_m2: Option<f64>,
    /// Mobility in m²/(V s).
    pub mobility_m2_per_vs: Option<f64>,
}

/// `[mesa]`: shape and the pixel of the exact arrangement.
#[derive(Clone, Debug, PartialEq)]
pub struct Mesa {
    /// The shape as written.
    pub shape: MesaShape,
    /// Corners and edges nearer than this are one.
    pub snap: Nanometres,
    /// Where the table stands.
    pub place: Place,
}

/// The shapes that are laid out.
#[derive(Clone, Debug, PartialEq)]
pub enum MesaShape {
    /// A rectangle with x from 0 at the left end and y from 0 at the lower edge; arms are added by contacts.
    Bar {
        /// Extent along x.
        length: Nanometres,
        /// Extent along y.
        width: Nanometres,
    },
    /// A square with an arm on each side; x from 0 at the end of the left arm, y from 0 at the end of the lower arm.
    Cross {
        /// From the square in the middle to the end of an arm.
        arm_length: Nanometres,
        /// Width of an arm, and side of the square in the middle.
        arm_width: Nanometres,
    },
    /// A disc with a round opening in its middle, which is the origin.
    Ring {
        /// Diameter of the outer rim.
        outer_diameter: Nanometres,
        /// Diameter of the opening, below the outer one.
        inner_diameter: Nanometres,
    },
    /// Any outline with any openings.
    Outline {
        /// The outer rim.
        outline: Outline,
        /// The openings.
        cutouts: Vec<Outline>,
    },
}

/// A corner of an outline: (x, y), x to the right, y up.
pub type Corner = (Nanometres, Nanometres);

/// A closed outline as written: at least three corners in either sense.
#[derive(Clone, Debug, PartialEq)]
pub struct Outline {
    /// Its corners in order.
    pub corners: Vec<Corner>,
    /// Where they stand in the file.
    pub place: Place,
}

/// Where a contact sits on the mesa.
#[derive(Clone, Debug, PartialEq)]
pub enum ContactShape {
    /// On one straight edge of a bar or end of a cross, at the end of an arm of length `arm` (0: on the edge itself).
    Edge {
        /// Which edge.
        edge: Edge,
        /// Centre along the edge (x for top and bottom, y for left and right); none means the whole end.
        centre: Option<Nanometres>,
        /// Width along the edge; none means the whole end.
        width: Option<Nanometres>,
        /// Length of the arm of mesa that carries the contact.
        arm: Nanometres,
    },
    /// On a rim of a ring.
    Round {
        /// Which rim.
        circle: Circle,
        /// Where on it; none means the whole rim.
        arc: Option<Arc>,
    },
    /// On any rim of an outline: the stretch of rim of this width, round corners too, whose middle is next to `at`.
    Rim {
        /// A point on the rim, or nearly.
        at: Corner,
        /// Length of the stretch along the rim.
        width: Nanometres,
    },
    /// Any outline.
    Outline(Vec<Corner>),
}

/// The rims of a ring.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Circle {
    /// The outer one.
    Outer,
    /// That of the opening.
    Inner,
}

/// A stretch of a round rim.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Arc {
    /// Direction of its middle from the centre, in degrees anticlockwise from the x axis.
    pub angle_deg: f64,
    /// Length along the rim.
    pub width: Nanometres,
}

/// The four edges of a bar, and the ends of the four arms of a cross.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Edge {
    /// At the lowest x.
    Left,
    /// At the highest y.
    Top,
    /// At the highest x.
    Right,
    /// At the lowest y.
    Bottom,
}

/// A contact.
#[derive(Clone, Debug, PartialEq)]
pub struct Contact {
    /// Name, unique among contacts.
    pub name: String,
    /// Carrier pin, if given; unique among pins.
    pub pin: Option<String>,
    /// Chip pad, if given.
    pub pad: Option<String>,
    /// Free text.
    pub note: Option<String>,
    /// Where it sits.
    pub shape: ContactShape,
    /// Share of each channel that it absorbs and emits, outermost ladder step first; the last value repeats. Not empty.
    pub transmission: Vec<Rational>,
    /// Where the table stands.
    pub place: Place,
}

/// Whether an overlay is a gate or an ungated density step.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum OverlayKind {
    /// A gate, with a voltage.
    Gate,
    /// A part of the layer with a filling of its own and no gate.
    Step,
}

/// A gate or a step.
#[derive(Clone, Debug, PartialEq)]
pub struct Overlay {
    /// Name, unique among gates and steps, never containing `+` and never `bulk`.
    pub name: String,
    /// Gate or step.
    pub kind: OverlayKind,
    /// Where it lies.
    pub shape: OverlayShape,
    /// Mixing along this overlay's own borders, if the file sets it.
    pub mixing: Option<Mixing>,
    /// Change of density per volt, in 1/(m² V).
    pub density_per_m2_per_v: Option<f64>,
    /// Gate voltage at which the gated density is the layer's, in V.
    pub zero_v: Option<f64>,
    /// Lowest and highest voltage allowed, in V.
    pub limits_v: Option<(f64, f64)>,
    /// Where the table stands.
    pub place: Place,
}

/// The extent of an overlay.
#[derive(Clone, Debug, PartialEq)]
pub enum OverlayShape {
    /// Across the whole mesa between two x.
    Across {
        /// Left border.
        from: Nanometres,
        /// Right border.
        to: Nanometres,
    },
    /// Any outline.
    Outline(Vec<Corner>),
}

/// How channels that run side by side share their potentials.
#[derive(Clone, Debug, PartialEq)]
pub enum Mixing {
    /// Each keeps its own (ℓ = ∞).
    None,
    /// All take the mean weighted by conductance (ℓ = 0).
    Full,
    /// Departures from that mean decay as exp(−L/ℓ) with this ℓ.
    Over(Nanometres),
}

impl Mixing {
    /// Whether the length of a piece enters.
    pub fn has_length(&self) -> bool {
        matches!(self, Self::Over(_))
    }
}

/// `[edge]`: mixing along rims, borders of one sign and borders between opposite signs.
#[derive(Clone, Debug, PartialEq)]
pub struct EdgeRules {
    /// Along the rim.
    pub rim: Mixing,
    /// Along borders between regions of one sign.
    pub interface: Mixing,
    /// Along borders between opposite signs.
    pub opposite: Mixing,
}

/// Ladder steps of one sign that mix with one another before they mix with the rest. They act along rims and along borders
/// between regions of one sign; between opposite signs all channels mix alike.
#[derive(Clone, Debug, PartialEq)]
pub struct Groups {
    /// Steps counted from 1 at the outermost channel; a step in no group is its own.
    pub steps: Vec<Vec<usize>>,
    /// Mixing between groups.
    pub between: Mixing,
}

/// What sets the sense of the channels.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Drive {
    /// The magnetic field; the sign of a filling is that of the carriers.
    #[default]
    Field,
    /// The magnetisation; the sign of a filling is the sense of its channels, positive clockwise round an outer rim at
    /// magnetisation toward the reader.
    Magnetisation,
}

/// `modes` of a point: numbers of edge modes that follow every rim, in place of fillings.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Modes {
    /// Clockwise round an outer rim at `+`.
    pub forward: i64,
    /// Against them.
    pub backward: i64,
    /// λ: a stretch of rim of length L between contacts is a resistor (h/e²)(1 + L/λ). Only for one mode each way.
    pub backscatter: Option<Nanometres>,
}

/// `[[point]]`: a field magnitude and the fillings that it sets.
#[derive(Clone, Debug, PartialEq)]
pub struct OperatingPoint {
    /// Name, unique among points.
    pub name: String,
    /// Field magnitude in T.
    pub field_t: Option<f64>,
    /// Filling of the ungated mesa, signed; zero where `modes` stand in its place.
    pub bulk: Rational,
    /// Fillings by set of overlays (sorted, no repeats): `TG`, `TG+BG`.
    pub fillings: Vec<(Vec<OverlayIdx>, Rational)>,
    /// Gate voltages in V.
    pub gates_v: Vec<(OverlayIdx, f64)>,
    /// Mixing rules in use at this point: `[edge]` with the point's own entries put in.
    pub edge: EdgeRules,
    /// Counter-running edge modes in place of fillings.
    pub modes: Option<Modes>,
    /// On a bench the point of every device, and `bulk`, `fillings` and `edge` above mean nothing; else empty.
    pub parts: Vec<OperatingPoint>,
    /// Where the table stands.
    pub place: Place,
}

impl OperatingPoint {
    /// The filling of the part of the mesa under exactly these overlays (sorted); none where an overlap has no entry.
    /// A gate that is not named has the bulk filling.
    pub fn filling(&self, cover: &[OverlayIdx]) -> Option<&Rational> {
        let entry = self.fillings.iter().find(|(under, _)| under == cover).map(|(_, filling)| filling);
        match cover.len() {
            0 | 1 => Some(entry.unwrap_or(&self.bulk)),
            _ => entry,
        }
    }
}

/// `[[reading]]`: a reading that the file asks for.
#[derive(Clone, Debug, PartialEq)]
pub struct NamedReading {
    /// Name, if given.
    pub name: Option<String>,
    /// Current in at the first, out at the second.
    pub current: [ContactIdx; 2],
    /// The meter's + input on the first, − on the second.
    pub voltage: [ContactIdx; 2],
}
