//! The cooldown file, checked: how the device was cooled and what it was measured with.
//!
//! Owns: [`Cooldown`]. Takes the text of a cooldown file and the [`Device`](crate::device::Device) it belongs to (names
//! of contacts are looked up there), gives a [`Cooldown`] or all faults at once. Must never solve anything.

pub use crate::device::ContactIdx;
use crate::diagnostic::Place;

mod names;
mod parse;

pub use names::ContactNames;
pub use names::Names;
pub use parse::from_bytes;
pub use parse::from_source;
pub use parse::without_device;

/// Everything the cooldown file says.
#[derive(Clone, Debug, PartialEq)]
pub struct Cooldown {
    /// Identity, as `[cooldown] id`; `cooldown` where none is given.
    pub id: String,
    /// Name of the readings file, relative to the cooldown file.
    pub readings_file: Option<String>,
    /// Where that name stands.
    pub readings_place: Option<Place>,
    /// Date as written, `YYYY-MM-DD`.
    pub date: Option<String>,
    /// Revision of the sheet, 1 where none is given.
    pub revision: u32,
    /// Temperature in K.
    pub temperature_k: Option<f64>,
    /// Electron temperature in K.
    pub electron_temperature_k: Option<f64>,
    /// Illumination, operator, cryostat, place: free texts in this order of keys, only those given.
    pub texts: Vec<(&'static str, String)>,
    /// Divides every written uncertainty; 1 where none is given.
    pub coverage_factor: f64,
    /// Dated notes: (date as written, text).
    pub notes: Vec<(Option<String>, String)>,
    /// The excitation.
    pub source: Excitation,
    /// Lines from contacts to the rack.
    pub lines: Vec<Line>,
    /// Meters; the first is meant where a reading names none.
    pub meters: Vec<Meter>,
    /// State of every contact, in the order of the device file.
    pub states: Vec<ContactState>,
    /// Contacts that share one potential on the chip.
    pub joins: Vec<Vec<ContactIdx>>,
    /// The magnet.
    pub magnet: Magnet,
    /// The room.
    pub room: Room,
}

impl Cooldown {
    /// The standard uncertainty (k = 1) where the file states `stated`.
    pub fn standard(&self, stated: f64) -> f64 {
        stated / self.coverage_factor
    }
}

/// `[source]`: what drives the current.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Excitation {
    /// Ideal current in nA.
    pub current_na: Option<f64>,
    /// Standard uncertainty of the current in nA.
    pub u_current_na: Option<f64>,
    /// Source voltage in V.
    pub voltage_v: Option<f64>,
    /// Series resistor in Ω.
    pub series_ohm: Option<f64>,
    /// Ammeter between the outlet's rack node and ground, in Ω.
    pub ammeter_ohm: Option<f64>,
    /// Which current divides the voltages.
    pub divisor: CurrentDivisor,
    /// Frequency in Hz.
    pub frequency_hz: Option<f64>,
    /// Where the current was got from the data, as written.
    pub current_from: Option<String>,
}

/// Which current a shown resistance is divided by.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum CurrentDivisor {
    /// The nominal one.
    #[default]
    Nominal,
    /// The one measured where the current enters.
    Inlet,
    /// The one measured where the current leaves.
    Outlet,
}

/// `[[line]]`: wire and filter from a contact to the rack.
#[derive(Clone, Debug, PartialEq)]
pub struct Line {
    /// The contact.
    pub contact: ContactIdx,
    /// Resistance in Ω.
    pub ohm: f64,
    /// Its standard uncertainty in Ω.
    pub u_ohm: Option<f64>,
    /// Capacitance from rack node to ground in nF.
    pub capacitance_nf: Option<f64>,
    /// Plug at the rack.
    pub plug: Option<String>,
    /// Box.
    pub breakout: Option<String>,
}

/// How a meter's input resistance is connected.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum MeterInput {
    /// From each input to ground.
    Ground,
    /// Between the two inputs.
    Across,
}

/// `[[meter]]`: a voltmeter.
#[derive(Clone, Debug, PartialEq)]
pub struct Meter {
    /// Name, unique among meters.
    pub name: String,
    /// Input resistance in Ω; none means no current flows into it.
    pub input_ohm: Option<f64>,
    /// Where the input resistance sits.
    pub input: MeterInput,
    /// Shown over true.
    pub gain: f64,
    /// Standard uncertainty of the gain.
    pub u_gain: Option<f64>,
    /// Phase in degrees.
    pub phase_deg: f64,
}

/// State of a contact in this cooldown.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum ContactState {
    /// Connected.
    #[default]
    Live,
    /// The lead is broken; the contact still equilibrates.
    Open,
    /// The rack node is the ground too, unless the current enters there.
    Grounded,
}

/// `[magnet]`: where the field points and what the magnet stores.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Magnet {
    /// Where the field points, seen from the chip face, when the console reads positive.
    pub positive: MagnetSense,
    /// Highest field in T.
    pub max_field_t: Option<f64>,
    /// Current in A at the highest field.
    pub current_a: Option<f64>,
    /// Inductance in H.
    pub inductance_h: Option<f64>,
    /// Remanent field in mT.
    pub remanence_mt: Option<f64>,
}

/// Sense of a positive console field.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum MagnetSense {
    /// Out of the chip face: polarity `+`.
    Toward,
    /// Into the chip face: polarity `−`.
    Away,
    /// Not stated.
    #[default]
    Unknown,
}

/// `[room]`: what a caution on oxygen needs.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Room {
    /// Volume in m³.
    pub volume_m3: Option<f64>,
    /// Liquid helium in litre.
    pub helium_litre: Option<f64>,
    /// Liquid nitrogen in litre.
    pub nitrogen_litre: Option<f64>,
    /// Whether an oxygen alarm is fitted.
    pub oxygen_alarm: Option<bool>,
}
