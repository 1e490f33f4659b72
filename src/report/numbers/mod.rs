//! The numbers of a sheet as its record holds them: unrounded, with their unit in the name of the key.
//!
//! Keys are kept for ever: new ones may be added, none changes its meaning, its unit or its kind. What a value is stands
//! in the comment above it, which is also its description in the schema.

use std::collections::BTreeMap;

use schemars::JsonSchema;
use serde::Serialize;

use crate::diagnostic::Diagnostic;
use crate::report::Sources;
use crate::report::expect::state_words;
use crate::report::numbers::points::PointNumbers;

mod measured;
mod points;
mod whys;

pub use measured::verdict_word;

/// Everything that was computed and compared.
#[derive(Clone, Debug, PartialEq, Serialize, JsonSchema)]
pub struct Numbers {
    /// The device.
    pub device: DeviceNumbers,
    /// The cooldown; null where the sheet holds expected values only.
    pub cooldown: Option<CooldownNumbers>,
    /// What the data say of the device as described.
    pub verdict: VerdictNumbers,
    /// One per operating point, in the order of the device file.
    pub points: Vec<PointNumbers>,
    /// What was noticed in the inputs, in the order of their places.
    pub notices: Vec<NoticeNumbers>,
}

/// What is read of the device file beside the operating points.
#[derive(Clone, Debug, PartialEq, Serialize, JsonSchema)]
pub struct DeviceNumbers {
    /// Identity, as `[device] id`.
    pub id: String,
    /// Title; may be empty.
    pub title: String,
    /// Material; may be empty.
    pub material: String,
    /// Names of the contacts in the order of the device file: that of rows and columns of every conductance matrix.
    pub contacts: Vec<String>,
}

/// What is read of the cooldown file beside the circuit.
#[derive(Clone, Debug, PartialEq, Serialize, JsonSchema)]
pub struct CooldownNumbers {
    /// Identity, as `[cooldown] id`.
    pub id: String,
    /// Revision of the sheet.
    pub revision: u32,
    /// Date, `YYYY-MM-DD`; null where none is given.
    pub date: Option<String>,
    /// Temperature in K; null where none is given.
    #[serde(rename = "temperature_K")]
    pub temperature_k: Option<f64>,
    /// What the written uncertainties were divided by to be standard uncertainties (k = 1).
    pub coverage_factor: f64,
}

/// What the data say.
#[derive(Clone, Debug, PartialEq, Serialize, JsonSchema)]
pub struct VerdictNumbers {
    /// `agrees`, `disagrees` or `not tested`.
    pub result: String,
    /// Number of measured readings.
    pub measured: usize,
    /// Number of those that were judged: they have an uncertainty and an expected value.
    pub judged: usize,
    /// Number of judged readings beyond the limit.
    pub disagreeing: usize,
    /// Greatest difference, in units of its standard uncertainty, that still agrees; null where nothing was judged.
    pub limit_in_u: Option<f64>,
}

/// A notice: an input is used, and this is worth knowing.
#[derive(Clone, Debug, PartialEq, Serialize, JsonSchema)]
pub struct NoticeNumbers {
    /// Stable short name of the kind of notice.
    pub code: String,
    /// Name of the input that it points into; null where it points nowhere.
    pub input: Option<String>,
    /// Line in that input, from 1.
    pub line: Option<usize>,
}

/// The numbers of a sheet.
pub fn numbers(sources: &Sources) -> Numbers {
    let device = sources.device;
    Numbers {
        device: DeviceNumbers {
            id: device.id.clone(),
            title: device.title.clone(),
            material: device.material.clone(),
            contacts: device.contacts.iter().map(|contact| contact.name.clone()).collect(),
        },
        cooldown: sources.cooldown.map(|cooldown| CooldownNumbers {
            id: cooldown.id.clone(),
            revision: cooldown.revision,
            date: cooldown.date.clone(),
            temperature_k: cooldown.temperature_k,
            coverage_factor: cooldown.coverage_factor,
        }),
        verdict: measured::verdict(sources.comparison),
        points: sources.points.iter().enumerate().map(|point| points::point(sources, point)).collect(),
        notices: crate::report::closing::ordered(sources.notices).into_iter().map(notice).collect(),
    }
}

fn notice(notice: &Diagnostic) -> NoticeNumbers {
    let place = notice.place.as_ref();
    NoticeNumbers {
        code: notice.code.to_owned(),
        input: place.map(|place| crate::report::closing::file_name(place).to_owned()),
        line: place.map(|place| place.line()),
    }
}

/// Fillings by the name of their region: `TG`, overlaps as `TG+BG`.
type Fillings = BTreeMap<String, String>;
