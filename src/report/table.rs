//! The table of one operating point: all readings at both polarities, worst first.

use crate::compare::Row;
use crate::device::Device;
use crate::quantity::Polarity;
use crate::report::Beside;
use crate::report::PointSource;
use crate::report::Printed;
use crate::report::TableRow;
use crate::report::Words;
use crate::report::rows::Pair;
use crate::report::rows::Shape;
use crate::report::rows::Side;
use crate::resistance::Expected;
use crate::resistance::Prediction;
use crate::resistance::Reading;

/// Expected values show 0.1 Ω, and as many digits as the finest measured one, up to the 1 µΩ that a float resolves.
const DECIMALS: std::ops::RangeInclusive<usize> = 4..=9;

/// All rows of a point, worst first. `measured` holds the comparison's rows of this point.
pub fn rows(device: &Device, point: &PointSource, measured: &[&Row], words: &Words) -> Vec<TableRow> {
    let mut pairs = pairs(point, measured);
    pairs.sort_by(|a, b| a.rank().partial_cmp(&b.rank()).unwrap_or(std::cmp::Ordering::Equal));
    let mut meters: Vec<&str> = measured.iter().filter_map(|row| row.measured.meter.as_deref()).collect();
    meters.sort_unstable();
    meters.dedup();
    let shape = Shape { decimals: expected_decimals(measured), meters: meters.len() };
    let rows = pairs.iter().enumerate();
    rows.map(|(at, pair)| TableRow { place: at + 1, ..pair.printed(device, words, shape) }).collect()
}

/// The readings asked for in their order, then measured ones beyond them; a reading taken twice has two rows.
fn pairs<'a>(point: &PointSource<'a>, measured: &[&'a Row]) -> Vec<Pair<'a>> {
    let mut readings: Vec<(Reading, Option<String>)> = Vec::new();
    let asked = point.toward.expected.iter().zip(point.names.iter().cloned().chain(std::iter::repeat(None)));
    let asked = asked.map(|(expected, name)| (Reading::new(expected.reading.current, expected.reading.voltage), name));
    for (reading, name) in asked.chain(measured.iter().map(|row| (reading_of(row), None))) {
        if !readings.iter().any(|(known, _)| *known == reading) {
            readings.push((reading, name));
        }
    }
    readings.into_iter().flat_map(|(reading, name)| pairs_of(point, measured, reading, name)).collect()
}

fn pairs_of<'a>(
    point: &PointSource<'a>,
    measured: &[&'a Row],
    reading: Reading,
    name: Option<String>,
) -> Vec<Pair<'a>> {
    let taken = |polarity: Polarity| -> Vec<&'a Row> {
        let mine = |row: &&&Row| row.measured.polarity == polarity && reading_of(row) == reading;
        measured.iter().filter(mine).copied().collect()
    };
    let (toward, away) = (taken(Polarity::Toward), taken(Polarity::Away));
    let side = |(prediction, beside): (&'a Prediction, &'a Beside), [mine, other]: [&[&'a Row]; 2], at: usize| Side {
        expected: other.get(at).and_then(|row| as_taken(beside, row)).or_else(|| expected_of(prediction, &reading)),
        row: mine.get(at).copied(),
    };
    let [toward_beside, away_beside] = point.beside;
    let count = toward.len().max(away.len()).max(1);
    let pair = |at| Pair {
        reading: reading.clone(),
        name: name.clone(),
        toward: side((point.toward, toward_beside), [&toward, &away], at),
        away: side((point.away, away_beside), [&away, &toward], at),
    };
    (0..count).map(pair).collect()
}

fn expected_of<'a>(prediction: &'a Prediction, reading: &Reading) -> Option<&'a Expected> {
    let leads = |reading: &Reading| (reading.current, reading.voltage);
    prediction.expected.iter().find(|expected| leads(&expected.reading) == leads(reading))
}

/// What would be shown where a row of the other polarity has no partner: by the meter that the row names.
fn as_taken<'a>(beside: &'a Beside, row: &Row) -> Option<&'a Expected> {
    beside.as_taken.iter().find(|expected| expected.reading == row.expected.reading)
}

/// The reading that a row is of.
pub fn reading_of(row: &Row) -> Reading {
    Reading::new(row.measured.current, row.measured.voltage)
}

fn expected_decimals(measured: &[&Row]) -> usize {
    let with_u = measured.iter().map(|row| row.measured.value_ohm).filter(|value| value.u.is_some());
    let finest = with_u.map(|value| decimals(&Printed::measured_kilo_ohm(value).text)).max();
    finest.unwrap_or(0).clamp(*DECIMALS.start(), *DECIMALS.end())
}

/// Digits between the decimal point and the bracket.
fn decimals(text: &str) -> usize {
    text.split_once('.').map_or(0, |(_, after)| after.chars().take_while(char::is_ascii_digit).count())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn decimals_are_counted_before_the_bracket() {
        for (text, count) in [("12.9064(3)", 4), ("−25.477(37)", 3), ("13", 0), ("10.0(1.2)", 1)] {
            assert_eq!(decimals(text), count, "{text}");
        }
    }
}
