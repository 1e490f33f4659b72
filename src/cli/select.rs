//! Which readings a command prints.

use crate::cli::load::Loaded;
use crate::cli::point::Asked;
use crate::device::ContactIdx;
use crate::device::Device;
use crate::device::OperatingPoint;
use crate::diagnostic::Diagnostic;
use crate::diagnostic::Faults;
use crate::diagnostic::Findings;
use crate::measured::MeasuredReading;
use crate::quantity::Polarity;
use crate::resistance::Reading;

/// The readings that the device file names, or else the standard set.
pub fn listed(loaded: &Loaded) -> Asked {
    if loaded.device.readings.is_empty() {
        return unnamed(crate::resistance::standard_readings(&loaded.network));
    }
    let named = &loaded.device.readings;
    let readings = named.iter().map(|reading| Reading::new(reading.current, reading.voltage)).collect();
    Asked { readings, names: named.iter().map(|reading| reading.name.clone()).collect() }
}

/// What a sheet lists at a point: the listed readings, then every other one that was measured there at either polarity.
pub fn for_sheet(loaded: &Loaded, point: usize) -> Asked {
    let mut asked = listed(loaded);
    for row in loaded.measured.iter().filter(|row| row.point == point) {
        let reading = Reading::new(row.current, row.voltage);
        if !asked.readings.contains(&reading) {
            asked.readings.push(reading);
            asked.names.push(None);
        }
    }
    asked
}

/// The readings of a point that were measured at the other polarity than this one, with their meters and sets.
pub fn taken_elsewhere(loaded: &Loaded, point: &OperatingPoint, polarity: Polarity) -> Vec<Reading> {
    let is_here = |row: &MeasuredReading| loaded.device.points.get(row.point) == Some(point);
    let rows = loaded.measured.iter().filter(|row| is_here(row) && row.polarity != polarity);
    crate::compare::readings(&rows.collect::<Vec<_>>(), &meter_names(loaded))
}

/// The meters of the cooldown file, in its order.
pub fn meter_names(loaded: &Loaded) -> Vec<String> {
    loaded.cooldown.iter().flat_map(|cooldown| &cooldown.meters).map(|meter| meter.name.clone()).collect()
}

/// Readings without names.
pub fn unnamed(readings: Vec<Reading>) -> Asked {
    Asked { names: vec![None; readings.len()], readings }
}

/// Readings written as `1-4,2-5`; all faults at once.
pub fn written(device: &Device, texts: &[String]) -> Result<Vec<Reading>, Faults> {
    let mut findings = Findings::default();
    let mut readings = Vec::new();
    for text in texts {
        match reading(device, text) {
            Ok(reading) => readings.push(reading),
            Err(fault) => findings.push(fault),
        }
    }
    findings.finish(readings).map(|noted| noted.value)
}

fn reading(device: &Device, text: &str) -> Result<Reading, Diagnostic> {
    let pairs =
        text.split_once(',').and_then(|(current, voltage)| Some((pair(device, current)?, pair(device, voltage)?)));
    match pairs {
        Some((current, voltage)) if current[0] != current[1] && voltage[0] != voltage[1] => {
            Ok(Reading::new(current, voltage))
        }
        _ => Err(Diagnostic::fault("unknown-reading", format!("`{text}` is no reading of this device"))
            .hint(format!("write current pair, voltage pair, such as 1-4,2-5; contacts: {}", names(device)))),
    }
}

/// Names may hold a hyphen: the split that gives two contacts counts.
fn pair(device: &Device, text: &str) -> Option<[ContactIdx; 2]> {
    let splits = text.match_indices('-').map(|(at, _)| (&text[..at], &text[at + 1..]));
    splits.into_iter().find_map(|(from, to)| Some([contact(device, from)?, contact(device, to)?]))
}

fn contact(device: &Device, name: &str) -> Option<ContactIdx> {
    device.contacts.iter().position(|contact| contact.name == name.trim()).map(ContactIdx)
}

fn names(device: &Device) -> String {
    device.contacts.iter().map(|contact| contact.name.as_str()).collect::<Vec<_>>().join(", ")
}
