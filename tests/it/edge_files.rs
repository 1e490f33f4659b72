//! Mixing lengths, edge modes and magnetisation through the real program: tables, machine output, sheets.

use std::fs;

use serde_json::Value;

use crate::program::run;
use crate::program::with_demo;

fn readings(answer: &Value, point: usize) -> Vec<Value> {
    answer["points"][point]["readings"].as_array().unwrap().clone()
}

/// The contract: with floats `exact` is null, the conductance strings are decimals, and the rest stays as it is.
#[test]
fn machine_output_of_floats_has_decimals_and_no_fractions() {
    let folder = with_demo("floats", "fractional-bar");
    let answer = run(&folder, "expect device.toml cooldown.toml --json").json();
    let row: Vec<f64> = answer["points"][0]["conductance"][0]
        .as_array()
        .unwrap()
        .iter()
        .map(|entry| entry.as_str().unwrap().parse().unwrap())
        .collect();
    assert!(row.iter().sum::<f64>().abs() < 1e-12, "{row:?}");
    for reading in readings(&answer, 0) {
        assert!(reading["exact"].is_null() && reading["h_per_e2"].is_number() && reading["ohm"].is_number());
        let ohm = reading["h_per_e2"].as_f64().unwrap() * 25812.8074593045;
        assert!((ohm - reading["ohm"].as_f64().unwrap()).abs() < 1e-6);
    }
    // Two gates of one of two channels: with m = (1 − exp(−L/ℓ))/2 the bar shows (2 − m)/(2(1 − m)) in units of 1/ν of one
    // channel, here 3; the gates are 120 µm apart and ℓ is 150 µm (own algebra, the case of partial equilibration).
    let m = (1.0 - (-120.0_f64 / 150.0).exp()) / 2.0;
    let whole = readings(&answer, 0)[0]["h_per_e2"].as_f64().unwrap();
    assert!((whole - 3.0 * (2.0 - m) / (2.0 * (1.0 - m))).abs() < 1e-9, "{whole}");
}

/// A reading into which no length enters keeps its closed form, and with it the answer of `isolate`.
#[test]
fn forms_stay_where_no_length_enters() {
    let folder = with_demo("kept-forms", "fractional-bar");
    let answer = run(&folder, "expect device.toml --json").json();
    let one_gate = readings(&answer, 2);
    assert!(one_gate.iter().all(|reading| reading["formula"].is_string()), "{one_gate:#?}");
    let table = run(&folder, "expect device.toml").answer();
    assert!(table.contains("the reading depends on path lengths"), "{table}");
    let alone = run(&folder, "isolate device.toml QA").answer();
    assert!(alone.contains("QA alone: field toward you: I 1→4, V 2−5"), "{alone}");
}

#[test]
fn edge_modes_are_told_and_gates_change_nothing() {
    let folder = with_demo("modes", "helical-bar");
    let table = run(&folder, "expect device.toml").answer();
    assert!(table.contains("edge modes: 1 forward, 1 backward, backscattering over 25 µm"), "{table}");
    let gateless = fs::read_to_string(folder.join("device.toml")).unwrap();
    let (before, after) = gateless.split_once("[[gate]]").unwrap();
    let point = &after[after.find("[[point]]").unwrap()..];
    fs::write(folder.join("gateless.toml"), format!("{before}{point}").replace("gates_V = { TG = -0.4 }\n", ""))
        .unwrap();
    let with = run(&folder, "expect device.toml --json").json();
    let without = run(&folder, "expect gateless.toml --json").json();
    for (a, b) in readings(&with, 0).iter().zip(&readings(&without, 0)) {
        assert!((a["h_per_e2"].as_f64().unwrap() - b["h_per_e2"].as_f64().unwrap()).abs() < 1e-12);
    }
    let alone = run(&folder, "isolate device.toml TG").answer();
    assert!(alone.contains("TG has no filling at this point: edge modes follow the rim alone"), "{alone}");
    assert_eq!(run(&folder, "isolate device.toml XG").code, 2);
}

/// Nothing on the sheet of a device that a magnetisation drives speaks of a field toward or away, or of carriers.
#[test]
fn the_sheet_of_a_magnetised_film_speaks_of_its_magnetisation() {
    let folder = with_demo("magnetised", "anomalous-film");
    run(&folder, "sheet device.toml cooldown.toml -o out").answer();
    let record: Value = serde_json::from_slice(&fs::read(folder.join("out/AF-31_AF-31-c2_r1.json")).unwrap()).unwrap();
    let record = record["printed"].to_string();
    let page = fs::read_to_string(folder.join("out/AF-31_AF-31-c2_r1.html")).unwrap();
    for text in [&record, &page] {
        for wrong in ["field toward", "field away", "Field toward", "Field away", "electrons run", "holes run"] {
            assert!(!text.contains(wrong), "{wrong}");
        }
        assert!(text.contains("Magnetisation toward you") && text.contains("magnetisation away"));
    }
    let table = run(&folder, "expect device.toml").answer();
    assert!(table.contains("Magnetisation +: out of the chip face"), "{table}");
}

/// The sheet prints the rule, the lengths and the factor of two.
#[test]
fn the_sheet_prints_the_rule_of_mixing() {
    let folder = with_demo("rule", "selective-contacts");
    run(&folder, "sheet device.toml cooldown.toml -o out").answer();
    let record: Value =
        serde_json::from_slice(&fs::read(folder.join("out/KR-0610_KR-0610-c1_r1.json")).unwrap()).unwrap();
    let rules: Vec<&str> =
        record["printed"]["rules"].as_array().unwrap().iter().map(|rule| rule.as_str().unwrap()).collect();
    let all = rules.join("\n");
    for part in ["over ℓ = 60 µm", "1 with 3, 2 with 4", "over ℓ = 900 µm", "exp(−L/ℓ)", "twice this ℓ"] {
        assert!(all.contains(part), "{part} is not in\n{all}");
    }
}
