//! The machine output of `expect`, checked against its contract and against published values.

use std::fs;

use serde_json::Value;

use crate::program::bar;
use crate::program::fresh;
use crate::program::run;
use crate::program::with_demo;

/// h/e² with the exact h and e of the SI Brochure (9th edition, 2019): 6.626 070 15e-34 / (1.602 176 634e-19)².
const KLITZING_OHM: f64 = 6.626_070_15e-34 / (1.602_176_634e-19 * 1.602_176_634e-19);

fn keys(value: &Value) -> Vec<&str> {
    value.as_object().unwrap().keys().map(String::as_str).collect()
}

fn strings(value: &Value) -> Vec<&str> {
    value.as_array().unwrap().iter().map(|entry| entry.as_str().unwrap()).collect()
}

fn points(answer: &Value) -> &[Value] {
    answer["points"].as_array().unwrap()
}

fn readings(point: &Value) -> &[Value] {
    point["readings"].as_array().unwrap()
}

/// A fraction in lowest terms as it stands in the output.
fn fraction(text: &str) -> (i128, i128) {
    let (over, under) = text.split_once('/').unwrap_or((text, "1"));
    let (over, under) = (over.parse::<i128>().unwrap(), under.parse::<i128>().unwrap());
    assert!(under > 0 && gcd(over.abs(), under) == 1 && (under > 1) == text.contains('/'), "{text}");
    (over, under)
}

fn gcd(a: i128, b: i128) -> i128 {
    if b == 0 { a } else { gcd(b, a % b) }
}

fn sum<'a>(texts: impl Iterator<Item = &'a str>) -> (i128, i128) {
    texts.map(fraction).fold((0, 1), |(a, b), (c, d)| {
        let (over, under) = (a * d + c * b, b * d);
        let common = gcd(over.abs(), under);
        (over / common, under / common)
    })
}

/// The value of one reading: polarity, then the four contacts.
fn value<'a>(answer: &'a Value, polarity: &str, [i, j, k, l]: [&str; 4]) -> &'a Value {
    let point = points(answer).iter().find(|point| point["polarity"] == polarity).unwrap();
    let is = |reading: &&Value| strings(&reading["current"]) == [i, j] && strings(&reading["voltage"]) == [k, l];
    readings(point).iter().find(is).unwrap()
}

fn check_reading(reading: &Value, contacts: &[&str]) {
    let wanted = [
        "current",
        "exact",
        "formula",
        "h_per_e2",
        "name",
        "ohm",
        "shown_ohm",
        "shown_quadrature_ohm",
        "state",
        "voltage",
    ];
    let mut found = keys(reading);
    found.sort_unstable();
    assert_eq!(found, wanted);
    for pair in [strings(&reading["current"]), strings(&reading["voltage"])] {
        assert!(pair.len() == 2 && pair[0] != pair[1] && pair.iter().all(|name| contacts.contains(name)), "{pair:?}");
    }
    assert!(reading["name"].is_null() || reading["name"].is_string());
    assert!(reading["formula"].is_null() || reading["formula"].is_string());
    let numbers = ["exact", "h_per_e2", "ohm", "shown_ohm", "shown_quadrature_ohm"];
    if reading["state"] != "fine" {
        assert!(reading["state"] == "no path" || reading["state"] == "floating", "{reading}");
        assert!(numbers.iter().chain(&["formula"]).all(|key| reading[key].is_null()), "{reading}");
        return;
    }
    let (over, under) = fraction(reading["exact"].as_str().unwrap());
    let near = |key: &str, wanted: f64| {
        let found = reading[key].as_f64().unwrap();
        assert!((found - wanted).abs() <= 1e-12 * wanted.abs(), "{key}: {found} is not {wanted}");
    };
    near("h_per_e2", over as f64 / under as f64);
    near("ohm", over as f64 / under as f64 * KLITZING_OHM);
}

#[test]
fn every_key_has_its_kind_and_every_list_its_order() {
    let folder = with_demo("contract", "two-gates-and-step");
    for line in
        ["expect device.toml --json", "expect device.toml cooldown.toml --json", "expect device.toml --all --json"]
    {
        let answer = run(&folder, line).json();
        assert_eq!(keys(&answer).len(), 4, "{:?}", keys(&answer));
        assert_eq!((answer["format"].as_u64(), answer["device"].as_str()), (Some(1), Some("WL-2208")));
        assert!((answer["klitzing_ohm"].as_f64().unwrap() / KLITZING_OHM - 1.0).abs() < 1e-13);
        let order: Vec<_> =
            points(&answer).iter().map(|p| (p["name"].as_str().unwrap(), p["polarity"].as_str().unwrap())).collect();
        let [one, two] = ["4 over 2, thin end 3", "both gates"];
        assert_eq!(order, [(one, "+"), (one, "-"), (two, "+"), (two, "-")]);
        for point in points(&answer) {
            let contacts = strings(&point["contacts"]);
            assert_eq!(contacts, ["S", "a", "b", "c", "D", "z", "y", "x"]);
            assert_eq!(keys(point).len(), 5);
            readings(point).iter().for_each(|reading| check_reading(reading, &contacts));
            if line.contains("--all") {
                assert_eq!(readings(point).len(), (8 * 7 / 2_usize).pow(2));
            }
            let shows_quadrature = readings(point).iter().any(|reading| reading["shown_quadrature_ohm"].is_number());
            assert_eq!(shows_quadrature, line.contains("cooldown"), "a frequency stands in the cooldown file only");
        }
    }
}

/// Every unordered current pair with every unordered voltage pair, once.
#[test]
fn all_readings_are_all_of_them() {
    let folder = with_demo("all", "top-gated-bar");
    let answer = run(&folder, "expect device.toml --all --json").json();
    for point in points(&answer) {
        let unordered = |pair: &Value| {
            let mut pair = strings(pair);
            pair.sort_unstable();
            pair.join(" ")
        };
        let found: std::collections::BTreeSet<_> = readings(point)
            .iter()
            .map(|reading| (unordered(&reading["current"]), unordered(&reading["voltage"])))
            .collect();
        assert_eq!((found.len(), readings(point).len()), (225, 225));
    }
}

/// Rows: equal potentials drive no current; columns: charge is conserved (M. Büttiker, Phys. Rev. Lett. 57, 1761 (1986)).
/// Reversal of the field transposes the matrix (H. B. G. Casimir, Rev. Mod. Phys. 17, 343 (1945)).
#[test]
fn rows_and_columns_of_the_conductance_sum_to_zero_exactly() {
    for demo in [
        "top-gated-bar",
        "two-gates-and-step",
        "bipolar-graphene",
        "triple-series",
        "corbino-ring",
        "antidot-bar",
        "cross",
    ] {
        let answer = run(&with_demo(&format!("sums/{demo}"), demo), "expect device.toml --json").json();
        for pair in points(&answer).chunks(2) {
            let [toward, away] =
                [0, 1].map(|at| pair[at]["conductance"].as_array().unwrap().iter().map(strings).collect::<Vec<_>>());
            let contacts = strings(&pair[0]["contacts"]).len();
            assert_eq!(toward.len(), contacts);
            for at in 0..contacts {
                assert_eq!(sum(toward[at].iter().copied()), (0, 1));
                assert_eq!(sum(toward.iter().map(|row| row[at])), (0, 1));
                assert_eq!(toward[at], away.iter().map(|row| row[at]).collect::<Vec<_>>());
            }
        }
    }
}

/// Longitudinal 1/ν_g − 1/ν_b: R. J. Haug et al., Phys. Rev. Lett. 61, 2797 (1988); diagonals 1/ν_g and 2/ν_b − 1/ν_g:
/// C. W. J. Beenakker and H. van Houten, Solid State Phys. 44, 1 (1991), sections III.B and IV (formulas from memory,
/// algebra verified independently with exact fractions). The signs are those of electrons that run clockwise with the
/// field toward the reader.
#[test]
fn a_gated_bar_has_the_published_values() {
    let folder = fresh("published");
    for (bulk, gated, two_terminal, along, hall, diagonal) in [
        ("2", "1", "1", "1/2", "1/2", ["1", "0"]),
        ("3", "2", "1/2", "1/6", "1/3", ["1/2", "-1/6"]),
        ("4", "2", "1/2", "1/4", "1/4", ["1/2", "0"]),
        ("3", "1", "1", "2/3", "1/3", ["1", "1/3"]),
        ("3", "\"5/2\"", "2/5", "1/15", "1/3", ["2/5", "-4/15"]),
    ] {
        fs::write(folder.join("device.toml"), bar(bulk, gated, "")).unwrap();
        let answer = run(&folder, "expect device.toml --all --json").json();
        let negative = |text: &str| match text.strip_prefix('-') {
            Some(positive) => positive.to_owned(),
            None if text == "0" => text.to_owned(),
            None => format!("-{text}"),
        };
        for (polarity, hall, d25, d36) in [
            ("+", hall.to_owned(), diagonal[0].to_owned(), negative(diagonal[1])),
            ("-", negative(hall), diagonal[1].to_owned(), negative(diagonal[0])),
        ] {
            let is = |voltage: [&str; 2], wanted: &str| {
                let found = value(&answer, polarity, ["1", "4", voltage[0], voltage[1]]);
                assert_eq!(found["exact"], wanted, "{bulk} over {gated} at {polarity}: {voltage:?}");
            };
            is(["1", "4"], two_terminal);
            is(["2", "3"], along);
            is(["5", "6"], &negative(along));
            is(["2", "6"], &hall);
            is(["3", "5"], &hall);
            is(["2", "5"], &d25);
            is(["3", "6"], &d36);
        }
    }
}

/// R_K/ν in Ω to twelve digits, from the exact quotient.
#[test]
fn ohms_are_those_of_the_si() {
    let folder = with_demo("ohms", "top-gated-bar");
    let answer = run(&folder, "expect device.toml --json").json();
    for (voltage, wanted) in [(["2", "5"], 25_812.807_459_304_5), (["2", "6"], 8_604.269_153_101_5)] {
        let found = value(&answer, "+", ["1", "4", voltage[0], voltage[1]])["ohm"].as_f64().unwrap();
        assert!((found / wanted - 1.0).abs() < 1e-13, "{found}");
    }
}

/// Filling 0 under the gate cuts the bar: no current passes, and what lies beyond the gate floats.
#[test]
fn a_bar_cut_in_two_has_no_path_and_floating_leads() {
    let folder = fresh("cut");
    fs::write(folder.join("device.toml"), bar("2", "0", "")).unwrap();
    let answer = run(&folder, "expect device.toml --all --json").json();
    for polarity in ["+", "-"] {
        let state = |reading| value(&answer, polarity, reading)["state"].as_str().unwrap().to_owned();
        assert_eq!(state(["1", "4", "2", "3"]), "no path");
        assert_eq!(state(["1", "2", "1", "3"]), "floating");
        assert_eq!(state(["1", "2", "3", "4"]), "floating");
        assert_eq!(state(["1", "2", "1", "6"]), "fine");
    }
    for point in points(&answer) {
        readings(point).iter().for_each(|reading| check_reading(reading, &["1", "2", "3", "4", "5", "6"]));
    }
    assert!(run(&folder, "expect device.toml").answer().contains("no path"));
}

/// A broken lead carries no current and shows no voltage; the ideal device behind it does not change. `no path` wins.
#[test]
fn an_open_contact_and_one_that_passes_nothing_give_states_without_numbers() {
    let folder = fresh("dead");
    let passes_nothing = bar("2", "1", "").replace("name = \"5\"\n", "name = \"5\"\ntransmission = 0\n");
    fs::write(folder.join("device.toml"), passes_nothing).unwrap();
    let cooldown = "format = 1\ndevice = \"bar\"\n[cooldown]\nid = \"c\"\n[contacts]\n\"3\" = \"open\"\n";
    fs::write(folder.join("cooldown.toml"), cooldown).unwrap();
    let answer = run(&folder, "expect device.toml cooldown.toml --all --json").json();
    let state = |reading| value(&answer, "+", reading)["state"].as_str().unwrap().to_owned();
    assert_eq!(state(["1", "3", "2", "6"]), "no path");
    assert_eq!(state(["1", "5", "2", "6"]), "no path");
    assert_eq!(state(["1", "5", "2", "3"]), "no path");
    assert_eq!(state(["1", "4", "2", "3"]), "floating");
    assert_eq!(state(["1", "4", "2", "5"]), "floating");
    assert_eq!(state(["1", "4", "3", "5"]), "floating");
    let fine = value(&answer, "+", ["1", "4", "2", "6"]);
    assert_eq!((&fine["state"], &fine["exact"]), (&"fine".into(), &"1/2".into()));
    for point in points(&answer) {
        readings(point).iter().for_each(|reading| check_reading(reading, &["1", "2", "3", "4", "5", "6"]));
    }
}

#[test]
fn named_readings_keep_their_names_and_order() {
    let folder = fresh("named");
    let named = "[[reading]]\nname = \"diagonal\"\ncurrent = [\"1\", \"4\"]\nvoltage = [\"5\", \"2\"]\n\
                 [[reading]]\nname = \"ends\"\ncurrent = [\"4\", \"1\"]\nvoltage = [\"4\", \"1\"]\n";
    fs::write(folder.join("device.toml"), bar("2", "1", named)).unwrap();
    let answer = run(&folder, "expect device.toml --json").json();
    for point in points(&answer) {
        let names: Vec<&Value> = readings(point).iter().map(|reading| &reading["name"]).collect();
        assert_eq!(names, ["diagonal", "ends"]);
    }
    assert_eq!(value(&answer, "+", ["1", "4", "5", "2"])["exact"], "-1");
    assert_eq!(value(&answer, "+", ["4", "1", "4", "1"])["exact"], "1");
}
