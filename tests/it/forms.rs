//! Closed forms, read back: the printed text is evaluated by a small reader of its own, at the point and at other fillings
//! of the same ordering, and readings without a form are shown to have none.

use std::collections::BTreeMap;
use std::collections::BTreeSet;

use edgesheet::device::ContactIdx;
use edgesheet::number::Rational;
use edgesheet::quantity::Polarity;
use edgesheet::resistance::Candidates;
use edgesheet::resistance::ClosedForms;
use edgesheet::resistance::Reading;
use edgesheet::resistance::ReadingState;
use edgesheet::resistance::every_reading;
use edgesheet::resistance::filling_regions;
use edgesheet::resistance::isolating;
use nalgebra::DMatrix;
use nalgebra::DVector;

use crate::bar::BOTH;
use crate::bar::Made;
use crate::bar::make;
use crate::pixel_bar::PixelBar;
use crate::pixel_bar::UNIT;
use crate::random_bar::Dice;

/// Fillings in sixtieths by the name of a part of the bar.
type Named = BTreeMap<String, i64>;

/// The value of a text such as `1/ν(TG) − 1/(2ν(bulk))` or `−1/|ν(bulk)|`.
fn evaluate(text: &str, named: &Named) -> Rational {
    if text == "0" {
        return Rational::ZERO;
    }
    let spaced = text.strip_prefix('−').map_or_else(|| format!(" + {text}"), |rest| format!(" − {rest}"));
    let mut sum = Rational::ZERO;
    let mut rest = spaced.as_str();
    while !rest.is_empty() {
        let (sign, after) = (rest.starts_with(" − "), rest.trim_start_matches([' ', '+', '−']));
        let end = [" + ", " − "].iter().filter_map(|mark| after.find(mark)).min().unwrap_or(after.len());
        let value = term(&after[..end], named);
        sum = if sign { sum - value } else { sum + value };
        rest = &after[end..];
    }
    sum
}

fn term(text: &str, named: &Named) -> Rational {
    let (over, under) = text.split_once('/').unwrap_or_else(|| panic!("{text}"));
    let magnitude = under.contains("|ν(");
    let under = under.replace(['(', ')', '|'], " ");
    let (factor, name) = under.split_once('ν').unwrap_or_else(|| panic!("{text}"));
    let factor = match factor.trim() {
        "" => Rational::ONE,
        digits => Rational::from_text(digits).unwrap(),
    };
    // Tied parts have one filling, so the first name serves.
    let first = name.trim().split(", ").next().unwrap();
    let sixtieths = named.get(first).unwrap_or_else(|| panic!("{text} names a part that is not there: {named:?}"));
    let filling = Rational::fraction(if magnitude { sixtieths.abs() } else { *sixtieths }, UNIT).unwrap();
    &Rational::from_text(over).unwrap() / &(&factor * &filling)
}

/// The filling of everything that lies on the mesa, by name.
fn named(bar: &PixelBar) -> Named {
    let name = |cover: &Vec<usize>| match cover.as_slice() {
        [] => "bulk".to_owned(),
        some => some.iter().map(|&at| bar.overlays[at].name.as_str()).collect::<Vec<_>>().join("+"),
    };
    let filling = |cover: &Vec<usize>| bar.fillings.get(cover).copied().unwrap_or(bar.bulk);
    let mut all: Named = bar.covers().iter().map(|cover| (name(cover), filling(cover))).collect();
    all.insert("bulk".to_owned(), bar.bulk);
    all
}

/// The same bar with other fillings, whole numbers in the same order of |ν| within each sign; ties stay ties.
fn reordered(bar: &PixelBar, dice: &mut Dice) -> PixelBar {
    let used: BTreeSet<i64> = bar.fillings.values().copied().chain([bar.bulk]).collect();
    let mut changed: BTreeMap<i64, i64> = BTreeMap::from([(0, 0)]);
    for sign in [1, -1] {
        let mut sizes: Vec<i64> = used.iter().filter(|value| *value * sign > 0).map(|value| value.abs()).collect();
        sizes.sort_unstable();
        let mut to = 0;
        for size in sizes {
            to += (1 + dice.below(9) as i64) * UNIT;
            changed.insert(sign * size, sign * to);
        }
    }
    let mut other = bar.clone();
    other.bulk = changed[&bar.bulk];
    other.fillings.values_mut().for_each(|value| *value = changed[value]);
    let whole: Vec<i64> = (1..80).map(|step| step * UNIT).collect();
    other.ladder.word = "\"spin-split\"";
    other.ladder.steps = [whole.clone(), whole];
    other
}

fn forms(made: &Made, polarity: Polarity) -> ClosedForms {
    let point = &made.device.points[0];
    let operating = edgesheet::network::operating(&made.network, &made.device, point, polarity);
    ClosedForms::of(&made.network, &operating, filling_regions(&made.network, &made.device, point))
}

/// Readings with their closed form as printed, if any, where they have a number.
fn printed(made: &Made, polarity: Polarity, readings: &[Reading]) -> Vec<(Reading, Rational, Option<String>)> {
    let mut prediction = made.predict(0, polarity, readings);
    prediction.put_closed_forms(&forms(made, polarity));
    let fine = prediction.expected.into_iter().filter(|expected| expected.state == ReadingState::Fine);
    fine.map(|expected| (expected.reading, expected.exact.unwrap(), expected.formula)).collect()
}

fn exact(made: &Made, polarity: Polarity, readings: &[Reading]) -> Vec<Option<Rational>> {
    made.predict(0, polarity, readings).expected.into_iter().map(|expected| expected.exact).collect()
}

fn is_partial(bar: &PixelBar) -> bool {
    bar.fillings
        .values()
        .chain([&bar.bulk])
        .any(|value| *value != 0 && !bar.ladder.steps[usize::from(*value < 0)].contains(&value.abs()))
}

/// How many forms were checked, and how many readings had none and were shown to have none.
#[derive(Debug, Default)]
struct Count {
    forms: usize,
    none: usize,
}

fn check_forms(seed: u64, count: &mut Count) {
    let bar = PixelBar::new(seed);
    let made = make(&bar.text());
    let mut dice = Dice::new(seed ^ 0xF0F0);
    let parts = named(&bar).len();
    let others: Vec<PixelBar> = (0..3 * parts + 4).map(|_| reordered(&bar, &mut dice)).collect();
    let solved: Vec<(Named, Made)> = others.iter().map(|other| (named(other), make(&other.text()))).collect();
    let all = every_reading(bar.contacts.len().min(5));
    // Long lists are put together from entries, short ones fitted reading by reading.
    let long = seed.is_multiple_of(8);
    let short = (0..8).map(|_| all[dice.below(all.len() as u64) as usize].clone()).collect();
    let readings: Vec<Reading> = if long { all } else { short };
    for polarity in BOTH {
        let found = printed(&made, polarity, &readings);
        let asked: Vec<Reading> = found.iter().map(|(reading, ..)| reading.clone()).collect();
        let elsewhere: Vec<Vec<Option<Rational>>> =
            solved.iter().map(|(_, made)| exact(made, polarity, &asked)).collect();
        for (at, (reading, value, text)) in found.iter().enumerate() {
            let words = || format!("seed {seed} {polarity:?} {reading:?} {text:?}\n{}", bar.text());
            let values: Vec<Option<Rational>> = elsewhere.iter().map(|row| row[at].clone()).collect();
            match text {
                Some(text) => {
                    assert_eq!(evaluate(text, &named(&bar)), *value, "{}", words());
                    for ((named, _), value) in solved.iter().zip(&values) {
                        assert_eq!(Some(evaluate(text, named)), *value, "{named:?} {}", words());
                    }
                    count.forms += 1;
                }
                // Parts of one ladder step share a potential at a partial filling, so that there the point itself may
                // break the form that holds elsewhere.
                None if !is_partial(&bar) => {
                    assert!(no_sum_fits(&solved, &values), "a form is missing: {}", words());
                    count.none += 1;
                }
                None => {}
            }
        }
    }
}

/// Least squares of a/|ν| over all fillings that occur leave a rest (own algebra in floats).
fn no_sum_fits(solved: &[(Named, Made)], values: &[Option<Rational>]) -> bool {
    let Some(values) = values.iter().map(|value| value.as_ref().map(Rational::to_f64)).collect::<Option<Vec<f64>>>()
    else {
        return true;
    };
    let names: Vec<&String> = solved[0].0.iter().filter(|(_, value)| **value != 0).map(|(name, _)| name).collect();
    let matrix = DMatrix::from_fn(solved.len(), names.len(), |row, column| {
        UNIT as f64 / solved[row].0[names[column]].abs() as f64
    });
    let right = DVector::from_vec(values);
    let fitted = matrix.clone().svd(true, true).solve(&right, 1e-9).unwrap();
    (matrix * fitted - right).amax() > 1e-9
}

#[test]
fn printed_forms_hold_at_all_fillings_of_the_ordering() {
    let mut count = Count::default();
    (0..200).for_each(|seed| check_forms(seed, &mut count));
    assert!(count.forms > 500 && count.none > 20, "{count:?}");
}

/// Every reading that is said to show one part alone stays the same when any other part changes its filling in the same
/// ordering; values and signs are those of the table.
#[test]
fn isolating_readings_follow_one_part_alone() {
    let mut checked = 0;
    for seed in 0..80 {
        let bar = PixelBar::new(seed);
        let made = make(&bar.text());
        let mut dice = Dice::new(seed);
        let other = reordered(&bar, &mut dice);
        let (other_named, other_made) = (named(&other), make(&other.text()));
        for polarity in BOTH {
            let forms = forms(&made, polarity);
            let operating =
                edgesheet::network::operating(&made.network, &made.device, &made.device.points[0], polarity);
            let setup = edgesheet::resistance::Setup { operating, circuit: None };
            for region in 0..forms.regions().len() {
                let list = isolating(&made.network, &setup, &forms, (region, Candidates::Every));
                for entry in list.iter().take(2) {
                    let reading = std::slice::from_ref(&entry.reading);
                    assert_eq!(exact(&made, polarity, reading)[0].as_ref(), Some(&entry.exact), "seed {seed}");
                    let first = forms.regions()[region].name.split(", ").next().unwrap().to_owned();
                    let (_, factor) = &entry.form.terms[0];
                    let size = Rational::fraction(other_named[&first].abs(), UNIT).unwrap();
                    assert_eq!(exact(&other_made, polarity, reading)[0], Some(factor / &size), "seed {seed}");
                    checked += 1;
                }
            }
        }
    }
    assert!(checked > 100, "{checked}");
}

/// What is printed for a bar at 3 over 1, for two tied gates, for a gate at the filling of the bulk and for holes.
#[test]
fn forms_are_written_as_people_write_them() {
    let text = |made: &Made, polarity, reading: &str| {
        printed(made, polarity, &[made.reading(reading)]).remove(0).2.unwrap_or_default()
    };
    use Polarity::Away;
    use Polarity::Toward;
    let one = crate::bar::six("3", &[("TG", "gate", 250, 350, "1")], "");
    assert_eq!(text(&one, Toward, "14,23"), "1/ν(TG) − 1/ν(bulk)");
    assert_eq!(text(&one, Toward, "14,36"), "2/ν(bulk) − 1/ν(TG)");
    assert_eq!(text(&one, Away, "14,36"), "−1/ν(TG)");
    let tied = crate::bar::six("3", &[("A", "gate", 200, 250, "1"), ("B", "gate", 350, 400, "1")], "");
    assert_eq!(text(&tied, Toward, "14,14"), "1/ν(A, B)");
    // Of two gates with one filling a reading beyond the first names the second alone.
    let apart = crate::bar::six("3", &[("A", "gate", 20, 60, "1"), ("B", "gate", 250, 350, "1")], "");
    assert_eq!(text(&apart, Toward, "14,23"), "1/ν(B) − 1/ν(bulk)");
    assert_eq!(text(&apart, Toward, "14,14"), "1/ν(A) + 1/ν(B) − 1/ν(bulk)");
    let bulk = crate::bar::six("3", &[("A", "gate", 200, 250, "3")], "");
    assert_eq!(text(&bulk, Away, "14,26"), "−1/ν(bulk)");
    let holes = crate::bar::six("-3", &[("TG", "gate", 250, 350, "-1")], "");
    assert_eq!(text(&holes, Toward, "14,26"), "−1/|ν(bulk)|");
    assert_eq!(text(&holes, Away, "14,23"), "1/|ν(TG)| − 1/|ν(bulk)|");
}

/// The rule for 3 over 1: V 2−5 with the field toward the reader, V 3−6 with the field away, I 1→4 in both; the sign is
/// that of the table, 1 and −1 (own algebra).
#[test]
fn the_gate_of_a_bar_is_isolated_by_the_hot_diagonal() {
    let made = crate::bar::six("3", &[("TG", "gate", 250, 350, "1")], "");
    for (polarity, reading, value) in [(Polarity::Toward, "14,25", "1"), (Polarity::Away, "14,36", "-1")] {
        let forms = forms(&made, polarity);
        let operating = edgesheet::network::operating(&made.network, &made.device, &made.device.points[0], polarity);
        let setup = edgesheet::resistance::Setup { operating, circuit: None };
        let gate = forms.regions().iter().position(|region| region.name == "TG").unwrap();
        let best = isolating(&made.network, &setup, &forms, (gate, Candidates::Every)).remove(0);
        assert_eq!((best.reading, best.exact.to_string().as_str()), (made.reading(reading), value));
    }
}

/// A contact on no rim beside one that lies on a rim: the only reading there is has no path.
#[test]
fn a_single_contact_on_the_rim_has_one_reading_without_a_path() {
    let made = make(
        "format = 1\n[device]\nid = \"T\"\n[mesa]\nshape = \"bar\"\nlength_um = 600\nwidth_um = 100\n\
         [[contact]]\nname = \"1\"\nedge = \"left\"\n\
         [[contact]]\nname = \"2\"\noutline_um = [[300, 40], [320, 40], [320, 60], [300, 60]]\n\
         [[point]]\nname = \"p\"\nbulk = 2\n",
    );
    let readings = edgesheet::resistance::standard_readings(&made.network);
    assert_eq!(readings, [Reading::new([ContactIdx(0), ContactIdx(1)], [ContactIdx(0), ContactIdx(1)])]);
    assert_eq!(made.predict(0, Polarity::Toward, &readings).expected[0].state, ReadingState::NoPath);
}
