//! One judgement per reading, and the verdict.

use crate::compare::Comparison;
use crate::compare::Judgement;
use crate::compare::Row;
use crate::compare::Verdict;
use crate::compare::limit::z_n;
use crate::measured::MeasuredReading;
use crate::resistance::Expected;

/// Beyond this many u a reading is wide.
const WIDE_U: f64 = 2.0;

/// Sets every measured reading against what was expected of its meter, with the standard uncertainty of that in Ω.
///
/// The limit is z_n for the readings that can be judged, or `fixed_limit_u`. A difference of exactly the limit is within it.
pub fn compare(readings: Vec<(MeasuredReading, Expected, f64)>, fixed_limit_u: Option<f64>) -> Comparison {
    let mut rows: Vec<Row> = readings.into_iter().map(unjudged).collect();
    let judged = rows.iter().filter(|row| row.difference_in_u.is_some()).count();
    let limit_u = z_n(judged).map(|z| fixed_limit_u.unwrap_or(z));
    for row in &mut rows {
        row.judgement = judgement(row, limit_u);
    }
    let verdict = verdict(&rows, judged);
    Comparison { rows, judged, limit_u, limit_is_fixed: fixed_limit_u.is_some(), verdict }
}

/// The row with its differences. Of the state it says only what needs no limit.
fn unjudged((measured, expected, u_expected_ohm): (MeasuredReading, Expected, f64)) -> Row {
    let expected_ohm = expected.shown_ohm.or(expected.ohm);
    let difference_ohm = expected_ohm.map(|ohm| measured.value_ohm.value - ohm);
    let u_difference_ohm = measured.value_ohm.u.map(|u| libm::hypot(u, u_expected_ohm));
    Row {
        difference_in_u: difference_ohm.zip(u_difference_ohm).map(|(difference, u)| in_u(difference, u)),
        difference_1e6: difference_ohm
            .zip(expected_ohm)
            .filter(|(_, ohm)| u_difference_ohm.is_none_or(|u| ohm.abs() >= u))
            .and_then(|(difference, ohm)| in_1e6(difference, ohm)),
        judgement: Judgement::NoExpectation,
        measured,
        expected,
        u_expected_ohm,
        difference_ohm,
        u_difference_ohm,
    }
}

/// Without any uncertainty a difference is either nothing or beyond every limit.
fn in_u(difference: f64, u: f64) -> f64 {
    if difference == 0.0 { 0.0 } else { difference / u }
}

/// None where zero is expected, or so little beside the difference (below a thousandth) that a ratio says nothing: what a
/// circuit leaves of a zero is some 10⁻¹⁷ Ω. What is smaller than the uncertainty of the difference has none either.
fn in_1e6(difference: f64, expected: f64) -> Option<f64> {
    let telling = expected != 0.0 && expected.abs() >= 1e-3 * difference.abs();
    telling.then(|| difference / expected.abs() * 1e6)
}

fn judgement(row: &Row, limit_u: Option<f64>) -> Judgement {
    match (row.difference_ohm, row.difference_in_u.zip(limit_u)) {
        (None, _) => Judgement::NoExpectation,
        (Some(_), None) => Judgement::NoUncertainty,
        (Some(_), Some((difference, limit))) if difference.abs() > limit => Judgement::Disagrees,
        (Some(_), Some((difference, _))) if difference.abs() > WIDE_U => Judgement::Wide,
        _ => Judgement::Agrees,
    }
}

fn verdict(rows: &[Row], judged: usize) -> Verdict {
    let disagrees = rows.iter().any(|row| row.judgement == Judgement::Disagrees);
    match judged {
        0 => Verdict::NotTested,
        _ if disagrees => Verdict::Disagrees,
        _ => Verdict::Agrees,
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::device::ContactIdx;
    use crate::diagnostic::Place;
    use crate::diagnostic::Source;
    use crate::quantity::Polarity;
    use crate::quantity::Uncertain;
    use crate::resistance::Reading;
    use crate::resistance::ReadingState;

    fn measured(value: f64, u: Option<f64>) -> MeasuredReading {
        MeasuredReading {
            point: 0,
            polarity: Polarity::Toward,
            current: [ContactIdx(0), ContactIdx(3)],
            voltage: [ContactIdx(1), ContactIdx(5)],
            value_ohm: Uncertain { value, u },
            written: String::new(),
            meter: None,
            set: None,
            note: None,
            place: Place { source: Source::new("readings.csv", ""), start: 0, end: 0 },
        }
    }

    fn expected(shown_ohm: Option<f64>) -> Expected {
        Expected {
            reading: Reading::new([ContactIdx(0), ContactIdx(3)], [ContactIdx(1), ContactIdx(5)]),
            state: if shown_ohm.is_some() { ReadingState::Fine } else { ReadingState::NoPath },
            exact: None,
            h_per_e2: None,
            ohm: shown_ohm,
            shown_ohm,
            shown_quadrature_ohm: None,
            formula: None,
        }
    }

    /// (measured, u, expected, u of the expectation).
    type Case = (f64, Option<f64>, Option<f64>, f64);

    fn compared(cases: &[Case], limit: Option<f64>) -> Comparison {
        let rows = cases.iter().map(|&(value, u, ohm, u_ohm)| (measured(value, u), expected(ohm), u_ohm));
        compare(rows.collect(), limit)
    }

    fn judgements(cases: &[Case], limit: Option<f64>) -> Vec<Judgement> {
        compared(cases, limit).rows.into_iter().map(|row| row.judgement).collect()
    }

    #[test]
    fn a_difference_over_its_uncertainty_agrees_with_a_worked_comparison() {
        // The quotient of comparisons between laboratories (ISO 13528:2022): 12 905.9 with 0.6 against 12 906.403 73 with 0
        // gives −0.839 54; the quotient has the same form for standard and for expanded uncertainties.
        let row = compared(&[(12_905.9, Some(0.6), Some(12_906.403_73), 0.0)], None).rows.remove(0);
        // The published reference value is rounded at the fifth decimal.
        assert!((row.difference_in_u.unwrap() + 0.839_54).abs() < 2e-5, "{:?}", row.difference_in_u);
        // By hand: −0.50373/12906.40373 = −39.0295e-6.
        assert!((row.difference_1e6.unwrap() + 39.029_5).abs() < 1e-4);
    }

    #[test]
    fn uncertainties_of_reading_and_expectation_add_in_squares() {
        // 3-4-5 by hand.
        let row = compared(&[(110.0, Some(3.0), Some(100.0), 4.0)], None).rows.remove(0);
        assert_eq!((row.u_difference_ohm, row.difference_in_u, row.difference_1e6), (Some(5.0), Some(2.0), Some(1e5)));
        assert_eq!(row.judgement, Judgement::Agrees);
    }

    #[test]
    fn what_a_circuit_leaves_of_a_zero_has_no_relative_difference() {
        for (difference, expected, telling) in [(8600.0, -1e-17, false), (8600.0, 0.0, false), (1.4, 9.7, true)] {
            assert_eq!(in_1e6(difference, expected).is_some(), telling, "{difference} of {expected}");
        }
    }

    #[test]
    fn a_difference_of_exactly_a_limit_is_within_it() {
        let case = |value| (value, Some(1.0), Some(0.0), 0.0);
        let cases = [case(2.0), case(2.5), case(3.0), case(3.5), case(-3.0), case(-3.5)];
        use Judgement::*;
        assert_eq!(judgements(&cases, Some(3.0)), [Agrees, Wide, Wide, Disagrees, Wide, Disagrees]);
        // A fixed limit below 2 comes first.
        assert_eq!(judgements(&[case(1.5), case(1.0)], Some(1.0)), [Disagrees, Agrees]);
    }

    #[test]
    fn zeros_have_no_relative_difference() {
        let row = compared(&[(0.5, Some(1.0), Some(0.0), 0.0)], None).rows.remove(0);
        assert_eq!((row.difference_1e6, row.difference_in_u), (None, Some(0.5)));
    }

    #[test]
    fn a_reading_without_any_uncertainty_left_agrees_only_when_equal() {
        let cases = [(12_906.0, Some(0.0), Some(12_906.0), 0.0), (12_906.1, Some(0.0), Some(12_906.0), 0.0)];
        assert_eq!(judgements(&cases, None), [Judgement::Agrees, Judgement::Disagrees]);
    }

    #[test]
    fn what_cannot_be_judged_is_shown_and_not_counted() {
        let silent = [(12_906.0, None, Some(12_906.4), 0.1), (5.0, Some(1.0), None, 0.0)];
        let comparison = compared(&silent, None);
        assert_eq!((comparison.judged, comparison.limit_u, comparison.verdict), (0, None, Verdict::NotTested));
        let judgements: Vec<_> = comparison.rows.iter().map(|row| row.judgement).collect();
        assert_eq!(judgements, [Judgement::NoUncertainty, Judgement::NoExpectation]);
        assert!((comparison.rows[0].difference_ohm.unwrap() + 0.4).abs() < 1e-9);
        assert_eq!(compared(&[], Some(3.0)).verdict, Verdict::NotTested);
    }

    #[test]
    fn the_verdict_uses_the_limit_for_the_number_judged() {
        // z_7 = 3.19 and z_20 = 3.48 (computed independently): 3.3 u disagrees among 7 readings and is wide among 20.
        let sheet = |n: usize| {
            let mut cases = vec![(0.0, Some(1.0), Some(0.0), 0.0); n];
            cases[0].0 = 3.3;
            compared(&cases, None)
        };
        assert_eq!((sheet(7).verdict, sheet(7).limit_is_fixed), (Verdict::Disagrees, false));
        assert_eq!((sheet(20).verdict, sheet(20).rows[0].judgement), (Verdict::Agrees, Judgement::Wide));
    }
}
