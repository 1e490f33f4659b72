//! Which readings were taken at the same time.

use std::collections::BTreeMap;

use crate::circuit::Circuit;
use crate::circuit::Connection;
use crate::circuit::Taken;
use crate::device::ContactIdx;
use crate::resistance::Reading;

/// One solution of the circuit, and the readings that it answers.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Taking {
    /// The current pair and all meters connected.
    pub taken: Taken,
    /// Place of a reading in the list asked, with its place among the connections.
    pub rows: Vec<(usize, usize)>,
}

/// What was connected together.
#[derive(PartialEq, Eq, PartialOrd, Ord)]
enum Together {
    Set(usize),
    Alone(usize),
    /// Meters that draw no current disturb nothing: one solution serves all readings of a current pair.
    Unloaded([ContactIdx; 2]),
}

/// Groups readings: all meters of a set are connected while any of its readings is taken; without a set each was taken
/// alone.
pub fn takings(circuit: &Circuit, readings: &[Reading]) -> Vec<Taking> {
    let mut groups: BTreeMap<Together, Vec<usize>> = BTreeMap::new();
    for (row, reading) in readings.iter().enumerate() {
        groups.entry(together(circuit, row, reading)).or_default().push(row);
    }
    groups.values().flat_map(|rows| by_current(readings, rows)).collect()
}

fn together(circuit: &Circuit, row: usize, reading: &Reading) -> Together {
    match reading.set {
        Some(set) => Together::Set(set),
        None if circuit.draws(reading.meter) => Together::Alone(row),
        None => Together::Unloaded(reading.current),
    }
}

fn by_current(readings: &[Reading], rows: &[usize]) -> Vec<Taking> {
    let connection = |row: &usize| Connection { voltage: readings[*row].voltage, meter: readings[*row].meter };
    let connections: Vec<Connection> = rows.iter().map(connection).collect();
    let mut currents: BTreeMap<[ContactIdx; 2], Vec<(usize, usize)>> = BTreeMap::new();
    for (place, &row) in rows.iter().enumerate() {
        currents.entry(readings[row].current).or_default().push((row, place));
    }
    let taking = |(current, rows)| Taking { taken: Taken { current, connections: connections.clone() }, rows };
    currents.into_iter().map(taking).collect()
}
