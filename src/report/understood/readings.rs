//! What is understood of a table of readings.

use std::collections::BTreeMap;
use std::collections::BTreeSet;

use crate::device::Device;
use crate::measured::MeasuredReading;
use crate::measured::Overview;
use crate::quantity::Polarity;
use crate::quantity::printed::uncertain_ohm;
use crate::report::Understood;
use crate::report::understood::count;

/// Most numbers of lines that are listed.
const MOST_LINES: usize = 8;

/// A table whose readings were read beside a device; `beside` names the files that give its words their meaning.
pub fn understood_readings(
    file: &str,
    overview: &Overview,
    (device, readings): (&Device, &[MeasuredReading]),
    beside: &str,
) -> Understood {
    let kind = format!("{} of {}, read beside {beside}", count(readings.len(), "reading", "no readings"), device.id);
    outside(Understood::new(file, kind), overview)
        .with("points", groups(device, readings))
        .saying("sets", sets(readings))
}

/// A table without a device, or one with faults: its outside, and `why` there is no more.
pub fn understood_table(file: &str, overview: &Overview, why: &str) -> Understood {
    let kind = format!("table of readings, {}, {why}", count(overview.rows, "row", "no rows"));
    outside(Understood::new(file, kind), overview)
}

fn outside(understood: Understood, overview: &Overview) -> Understood {
    let columns = overview.columns.iter().map(|column| vec![column.name().to_owned(), column.meaning().to_owned()]);
    let units: Vec<String> =
        overview.units.iter().map(|(unit, rows)| format!("{unit}: {}", count(*rows, "row", ""))).collect();
    understood
        .with("columns", columns.collect())
        .saying("written", vec![format!("columns separated by a {}, decimals with a point", overview.separator)])
        .saying("units", if units.is_empty() { units } else { vec![units.join("; ")] })
        .saying("left out", vec![left_out(overview)])
}

/// Nothing is left out but comments and empty lines: a row that cannot be read is a fault.
fn left_out(overview: &Overview) -> String {
    let comments = match overview.comments.len() {
        0 => None,
        many if many > MOST_LINES => Some(format!("{many} lines that begin with #")),
        _ => {
            let lines: Vec<String> = overview.comments.iter().map(usize::to_string).collect();
            let word = if lines.len() == 1 { "begins" } else { "begin" };
            let noun = if lines.len() == 1 { "line" } else { "lines" };
            Some(format!("{noun} {}, which {word} with #", lines.join(", ")))
        }
    };
    let empty = (overview.empty > 0).then(|| count(overview.empty, "empty line", ""));
    let parts: Vec<String> = comments.into_iter().chain(empty).collect();
    if parts.is_empty() { "nothing".to_owned() } else { parts.join("; ") }
}

/// One row per point and polarity: how many readings, from which value to which.
fn groups(device: &Device, readings: &[MeasuredReading]) -> Vec<Vec<String>> {
    let mut groups: BTreeMap<(usize, Polarity), Vec<&MeasuredReading>> = BTreeMap::new();
    for reading in readings {
        groups.entry((reading.point, reading.polarity)).or_default().push(reading);
    }
    groups.into_iter().map(|((point, polarity), group)| group_row(device, (point, polarity), &group)).collect()
}

fn group_row(device: &Device, (point, polarity): (usize, Polarity), group: &[&MeasuredReading]) -> Vec<String> {
    let name = device.points.get(point).map_or("", |point| point.name.as_str());
    let side = match polarity {
        Polarity::Toward => "+ toward you",
        Polarity::Away => "− away",
    };
    let low = group.iter().min_by(|a, b| a.value_ohm.value.total_cmp(&b.value_ohm.value));
    let high = group.iter().max_by(|a, b| a.value_ohm.value.total_cmp(&b.value_ohm.value));
    let range = low.zip(high).map(|(low, high)| match group.len() {
        1 => uncertain_ohm(low.value_ohm),
        _ => format!("{} to {}", uncertain_ohm(low.value_ohm), uncertain_ohm(high.value_ohm)),
    });
    let bare = group.iter().filter(|reading| reading.value_ohm.u.is_none()).count();
    let bare = (bare > 0).then(|| format!("{bare} without uncertainty, so not judged"));
    let meters: BTreeSet<&str> = group.iter().filter_map(|reading| reading.meter.as_deref()).collect();
    let meters = (!meters.is_empty()).then(|| format!("meter {}", meters.into_iter().collect::<Vec<_>>().join(", ")));
    let more: Vec<String> = range.into_iter().chain(bare).chain(meters).collect();
    vec![name.to_owned(), side.to_owned(), count(group.len(), "reading", ""), more.join("; ")]
}

fn sets(readings: &[MeasuredReading]) -> Vec<String> {
    let mut sets: BTreeMap<&str, usize> = BTreeMap::new();
    for set in readings.iter().filter_map(|reading| reading.set.as_deref()) {
        *sets.entry(set).or_default() += 1;
    }
    let alone = readings.iter().filter(|reading| reading.set.is_none()).count();
    let named =
        sets.iter().map(|(set, size)| format!("“{set}”: {} with all meters connected", count(*size, "reading", "")));
    let alone = (alone > 0).then(|| format!("{} taken alone", count(alone, "reading", "")));
    if readings.is_empty() { Vec::new() } else { named.chain(alone).collect() }
}
