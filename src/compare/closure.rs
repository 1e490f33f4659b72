//! Closure: voltages round a loop of contacts, read with one current pair, add up to nothing.
//!
//! No model is needed for it: whatever the device does, the voltages of one state of it have one potential per contact
//! behind them. Meters that draw current change the state from reading to reading; what that makes of the sum is expected,
//! and stands beside it.

use crate::compare::Row;
use crate::measured::ContactIdx;
use crate::quantity::Polarity;
use crate::quantity::Uncertain;

/// The measured voltages of one loop, over the current.
#[derive(Clone, Debug, PartialEq)]
pub struct Loop {
    /// Index of the operating point.
    pub point: usize,
    /// Polarity.
    pub polarity: Polarity,
    /// The current pair.
    pub current: [ContactIdx; 2],
    /// The contacts round which it goes; the last is followed by the first.
    pub contacts: Vec<ContactIdx>,
    /// Sum of the measured values round the loop in Ω; u in squares from the readings, where each has one.
    pub sum_ohm: Uncertain,
    /// The same sum of what the meters should show; none where the model gives no number for one of them.
    pub expected_ohm: Option<f64>,
}

/// Independent loops of all measured rows, in their order: per point, polarity and current pair as many as there are
/// readings beyond those that join the contacts, each as short as the readings before it allow.
pub fn loops(rows: &[Row]) -> Vec<Loop> {
    let mut groups: Vec<Vec<&Row>> = Vec::new();
    for row in rows {
        match groups.iter_mut().find(|group| same_current(group[0], row)) {
            Some(group) => group.push(row),
            None => groups.push(vec![row]),
        }
    }
    groups.iter().flat_map(|group| loops_of(group)).collect()
}

fn same_current(a: &Row, b: &Row) -> bool {
    let key = |row: &Row| (row.measured.point, row.measured.polarity, row.measured.current);
    key(a) == key(b)
}

/// A reading that joins two contacts which earlier ones join already closes a loop with the shortest way between them. A
/// pair that was read before is a repetition, no loop.
fn loops_of(group: &[&Row]) -> Vec<Loop> {
    let mut used: Vec<&Row> = Vec::new();
    let mut found = Vec::new();
    for row in group {
        let [from, to] = row.measured.voltage;
        if used.iter().any(|other| other.measured.voltage.contains(&from) && other.measured.voltage.contains(&to)) {
            continue;
        }
        found.extend(way(&used, to, from).map(|way| closed(row, &way)));
        used.push(row);
    }
    found
}

/// The shortest way from one contact to another along readings, each with the contact from which it is walked.
fn way<'a>(rows: &[&'a Row], from: ContactIdx, to: ContactIdx) -> Option<Vec<(ContactIdx, &'a Row)>> {
    let mut ways: Vec<(ContactIdx, Vec<(ContactIdx, &Row)>)> = vec![(from, Vec::new())];
    let mut at = 0;
    while let Some((here, steps)) = ways.get(at).cloned() {
        if here == to {
            return Some(steps);
        }
        for row in rows.iter().filter(|row| row.measured.voltage.contains(&here)) {
            let [a, b] = row.measured.voltage;
            let there = if a == here { b } else { a };
            if ways.iter().all(|(known, _)| *known != there) {
                ways.push((there, steps.iter().copied().chain([(here, *row)]).collect()));
            }
        }
        at += 1;
    }
    None
}

fn closed(row: &Row, way: &[(ContactIdx, &Row)]) -> Loop {
    let steps: Vec<(ContactIdx, &Row)> =
        std::iter::once((row.measured.voltage[0], row)).chain(way.iter().copied()).collect();
    let sign = |(from, row): &(ContactIdx, &Row)| if row.measured.voltage[0] == *from { 1.0 } else { -1.0 };
    let value = steps.iter().map(|step| sign(step) * step.1.measured.value_ohm.value).sum();
    let squares: Option<f64> = steps.iter().map(|(_, row)| row.measured.value_ohm.u.map(|u| u * u)).sum();
    let expected = |step: &(ContactIdx, &Row)| step.1.expected.shown_ohm.map(|ohm| sign(step) * ohm);
    Loop {
        point: row.measured.point,
        polarity: row.measured.polarity,
        current: row.measured.current,
        contacts: steps.iter().map(|(from, _)| *from).collect(),
        sum_ohm: Uncertain { value, u: squares.map(f64::sqrt) },
        expected_ohm: steps.iter().map(expected).sum(),
    }
}

/// Readings that were taken with exchanged pairs at the other polarity: R_ij,kl at `+` beside R_kl,ij at `−`, each pair in
/// either order. A two-terminal reading exchanges nothing.
pub fn exchanged_pairs(rows: &[Row]) -> usize {
    let sorted = |pair: [ContactIdx; 2]| if pair[0] <= pair[1] { pair } else { [pair[1], pair[0]] };
    let key = |row: &Row| (row.measured.point, sorted(row.measured.current), sorted(row.measured.voltage));
    let at = |polarity| rows.iter().filter(move |row| row.measured.polarity == polarity);
    let mirrored = |(point, current, voltage): (usize, [ContactIdx; 2], [ContactIdx; 2])| (point, voltage, current);
    let exchanged = |row: &&Row| at(Polarity::Away).any(|other| key(other) == mirrored(key(row)));
    let apart = |row: &&Row| key(row).1 != key(row).2;
    at(Polarity::Toward).filter(apart).filter(exchanged).count()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::compare::compare;
    use crate::diagnostic::Place;
    use crate::diagnostic::Source;
    use crate::measured::MeasuredReading;
    use crate::resistance::Expected;
    use crate::resistance::Reading;
    use crate::resistance::ReadingState;

    /// (current, voltage, polarity, value, u), contacts numbered from 1; what the meter should show is half the value.
    type Case = ([usize; 2], [usize; 2], Polarity, f64, Option<f64>);

    fn rows(cases: &[Case]) -> Vec<Row> {
        let pair = |pair: [usize; 2]| pair.map(|contact| ContactIdx(contact - 1));
        let row = |&(current, voltage, polarity, value, u): &Case| {
            let (current, voltage) = (pair(current), pair(voltage));
            let measured = MeasuredReading {
                point: 0,
                polarity,
                current,
                voltage,
                value_ohm: Uncertain { value, u },
                written: String::new(),
                meter: None,
                set: None,
                note: None,
                place: Place { source: Source::new("readings.csv", ""), start: 0, end: 0 },
            };
            let expected = Expected {
                reading: Reading::new(current, voltage),
                state: ReadingState::Fine,
                exact: None,
                h_per_e2: None,
                ohm: None,
                shown_ohm: Some(value / 2.0),
                shown_quadrature_ohm: None,
                formula: None,
            };
            (measured, expected, 0.0)
        };
        compare(cases.iter().map(row).collect(), None).rows
    }

    const UP: Polarity = Polarity::Toward;

    /// The loop of the four side contacts: R_14,23 + R_14,35 − R_14,65 − R_14,26 by hand, u by squares (3-4-12-84: 85).
    #[test]
    fn the_sides_of_a_bar_close_a_loop() {
        let cases = [
            ([1, 4], [2, 3], UP, 100.0, Some(3.0)),
            ([1, 4], [6, 5], UP, 103.0, Some(4.0)),
            ([1, 4], [2, 6], UP, 51.0, Some(12.0)),
            ([1, 4], [3, 5], UP, 50.0, Some(84.0)),
        ];
        let found = loops(&rows(&cases));
        assert_eq!(found.len(), 1);
        // Walked from 3: the last reading first.
        assert_eq!(found[0].contacts.iter().map(|contact| contact.0 + 1).collect::<Vec<_>>(), [3, 5, 6, 2]);
        // +50 − 103 − 51 + 100 = −4.
        assert_eq!((found[0].sum_ohm.value, found[0].sum_ohm.u), (-4.0, Some(85.0)));
        assert_eq!(found[0].expected_ohm, Some(-2.0));
    }

    #[test]
    fn loops_need_one_current_and_one_polarity() {
        let cases = [
            ([1, 4], [2, 3], UP, 1.0, None),
            ([1, 4], [3, 5], UP, 1.0, None),
            ([1, 4], [2, 5], Polarity::Away, 1.0, None),
            ([4, 1], [2, 5], UP, 1.0, None),
            ([1, 4], [3, 2], UP, 1.0, None),
        ];
        assert!(loops(&rows(&cases)).is_empty());
    }

    #[test]
    fn a_loop_without_an_uncertainty_has_none() {
        let cases = [
            ([1, 4], [2, 3], UP, 1.0, Some(1.0)),
            ([1, 4], [3, 5], UP, 2.0, None),
            ([1, 4], [5, 2], UP, -3.0, Some(1.0)),
        ];
        let found = loops(&rows(&cases));
        assert_eq!((found[0].sum_ohm.value, found[0].sum_ohm.u), (0.0, None));
    }

    #[test]
    fn pairs_count_as_exchanged_only_with_the_field_reversed() {
        let turned = Polarity::Away;
        for (current, voltage, polarity, count) in [
            ([2, 6], [1, 4], turned, 1),
            ([6, 2], [1, 4], turned, 1),
            ([2, 6], [1, 4], UP, 0),
            ([1, 4], [2, 6], turned, 0),
        ] {
            let cases = [([1, 4], [2, 6], UP, 1.0, None), (current, voltage, polarity, 1.0, None)];
            assert_eq!(exchanged_pairs(&rows(&cases)), count, "{current:?} {voltage:?}");
        }
        let whole = [([1, 4], [1, 4], UP, 1.0, None), ([1, 4], [1, 4], turned, 1.0, None)];
        assert_eq!(exchanged_pairs(&rows(&whole)), 0);
    }
}
