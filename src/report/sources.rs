//! What a report is made from.

use serde::Serialize;

use crate::circuit::Budget;
use crate::circuit::Correction;
use crate::compare::Comparison;
use crate::cooldown::Cooldown;
use crate::device::ContactIdx;
use crate::device::Device;
use crate::device::OperatingPoint;
use crate::diagnostic::Diagnostic;
use crate::figure::scene::Scene;
use crate::network::Network;
use crate::resistance::ClosedForms;
use crate::resistance::Expected;
use crate::resistance::Isolating;
use crate::resistance::Prediction;
use crate::resistance::Reading;
use crate::resistance::Why;

/// Finished results, as the rooms before gave them.
#[derive(Clone, Debug)]
pub struct Sources<'a> {
    /// The device.
    pub device: &'a Device,
    /// Its network, for the names of borders.
    pub network: &'a Network,
    /// The cooldown; without one the sheet holds expected values only.
    pub cooldown: Option<&'a Cooldown>,
    /// One per operating point of the device, in its order.
    pub points: Vec<PointSource<'a>>,
    /// The comparison, where readings were measured.
    pub comparison: Option<&'a Comparison>,
    /// One per row of the comparison.
    pub rows: &'a [RowSource],
    /// Input files, in the order in which they were read.
    pub inputs: Vec<Input>,
    /// Notices of every step.
    pub notices: &'a [Diagnostic],
    /// Options in use, each as it was typed.
    pub options: Vec<String>,
    /// Version of the program.
    pub program_version: &'a str,
}

/// The solutions of one operating point. Both hold the same readings in the same order.
#[derive(Clone, Debug)]
pub struct PointSource<'a> {
    /// The operating point.
    pub point: &'a OperatingPoint,
    /// Solution with the field toward the reader.
    pub toward: &'a Prediction,
    /// Solution with the field away.
    pub away: &'a Prediction,
    /// One per reading: the name that the device file gives it.
    pub names: Vec<Option<String>>,
    /// Current leads for which the potentials are drawn.
    pub drawn_current: [ContactIdx; 2],
    /// The drawings, toward first, where they were made.
    pub drawings: Option<&'a [Scene; 2]>,
    /// What is known beside both solutions, toward first.
    pub beside: [&'a Beside; 2],
}

/// What the circuit does to a measured reading.
#[derive(Clone, Debug, Default)]
pub struct RowSource {
    /// Uncertainty of what is expected.
    pub budget: Option<Budget>,
    /// What each part of the circuit does alone.
    pub corrections: Vec<Correction>,
}

/// What is known of a point at one polarity beside its solution. `unmixed`, `mixed` and `corrections` hold one per
/// reading.
#[derive(Clone, Debug, Default)]
pub struct Beside {
    /// One per region with a filling of its own, the bulk left out, in the order of the closed forms.
    pub isolated: Vec<IsolatedRegion>,
    /// The readings without mixing along the rim.
    pub unmixed: Vec<Expected>,
    /// The same with full mixing along the rim.
    pub mixed: Vec<Expected>,
    /// What each part of the circuit does alone.
    pub corrections: Vec<Vec<Correction>>,
    /// Readings that were measured at the other polarity, as they were taken there: what their meters would show here.
    pub as_taken: Vec<Expected>,
    /// The first two-terminal reading with the uncertainty of what is expected of it.
    pub two_terminal: Option<(Expected, Budget)>,
}

/// The reading that shows one region alone.
#[derive(Clone, Debug)]
pub struct IsolatedRegion {
    /// Name of the region.
    pub name: String,
    /// The reading with its value, its closed form included; none where no reading shows the region alone.
    pub best: Option<Expected>,
    /// Why it has its number.
    pub why: Option<Why>,
}

/// The reading to use of a ranked list: the first that leaves the drawn current leads where they are and has four distinct
/// contacts, else the first, with its closed form in words.
pub fn preferred(forms: &ClosedForms, found: &[Isolating], drawn: [ContactIdx; 2]) -> Option<(Reading, String)> {
    let at_hand = |entry: &&Isolating| {
        entry.reading.current == drawn && !entry.reading.voltage.iter().any(|contact| drawn.contains(contact))
    };
    let best = found.iter().find(at_hand).or_else(|| found.first())?;
    Some((best.reading.clone(), forms.words(&best.form)))
}

/// An input file.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Input {
    /// Name as the user gave it.
    pub name: String,
    /// Size in bytes.
    pub bytes: u64,
    /// SHA-256, as 64 hexadecimal digits.
    pub sha256: String,
}
