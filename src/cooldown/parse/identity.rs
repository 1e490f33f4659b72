//! `device`, `[cooldown]` and `[[note]]`.

use crate::device::Device;
use crate::diagnostic::Diagnostic;
use crate::syntax::Table;
use crate::syntax::quoted;

/// What `[cooldown]` says.
pub(super) struct Identity {
    pub id: String,
    pub date: Option<String>,
    pub revision: u32,
    pub temperature_k: Option<f64>,
    pub electron_temperature_k: Option<f64>,
    pub texts: Vec<(&'static str, String)>,
    pub coverage_factor: f64,
}

/// Keys of free texts, in the order in which a sheet prints them.
const TEXTS: [&str; 4] = ["illumination", "operator", "cryostat", "place"];

pub(super) fn read(root: &Table) -> Identity {
    let table = root.table("cooldown");
    let text = |key: &str| table.and_then(|table| table.text(key));
    let number = |key: &str| table.and_then(|table| table.number(key));
    let revision = table.and_then(|table| table.count("revision"));
    Identity {
        id: text("id").unwrap_or_else(|| "cooldown".to_owned()),
        date: table.and_then(|table| table.date("date")),
        revision: revision.and_then(|revision| u32::try_from(revision).ok()).unwrap_or(1),
        temperature_k: number("temperature_K"),
        electron_temperature_k: number("electron_temperature_K"),
        texts: TEXTS.into_iter().filter_map(|key| Some((key, text(key)?))).collect(),
        coverage_factor: number("coverage_factor").unwrap_or(1.0),
    }
}

/// The file of one device read beside another would give a sheet with wrong expectations.
pub(super) fn another_device(root: &Table, device: &Device) -> Option<Diagnostic> {
    let named = root.text("device").filter(|named| *named != device.id)?;
    let message =
        format!("this cooldown is of device {}, and the device file is {}", quoted(&named), quoted(&device.id));
    let fault = Diagnostic::fault("another-device", message).at(root.place_of("device"));
    Some(fault.hint("give the device file of that device, or correct `device`"))
}

pub(super) fn notes(root: &Table) -> Vec<(Option<String>, String)> {
    root.tables("note").into_iter().map(|note| (note.date("date"), note.text_or_empty("text"))).collect()
}
