//! Measured rows as readings that can be predicted.

use crate::measured::MeasuredReading;
use crate::resistance::Reading;

/// One reading per row, with the meter's place among `meters` (names in the order of the cooldown file) and sets
/// numbered as they first appear.
pub fn readings(rows: &[&MeasuredReading], meters: &[String]) -> Vec<Reading> {
    let mut sets = Vec::new();
    let reading = |row: &&MeasuredReading| Reading {
        current: row.current,
        voltage: row.voltage,
        meter: row.meter.as_ref().and_then(|name| meters.iter().position(|meter| meter == name)),
        set: row.set.as_ref().map(|name| number(&mut sets, name)),
    };
    rows.iter().map(reading).collect()
}

fn number(sets: &mut Vec<String>, name: &str) -> usize {
    sets.iter().position(|known| known == name).unwrap_or_else(|| {
        sets.push(name.to_owned());
        sets.len() - 1
    })
}
