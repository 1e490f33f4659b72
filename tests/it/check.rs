//! `check` as a user runs it: what it says of every kind of file, and that all faults come at once.

use std::fs;
use std::path::Path;

use crate::program::demos;
use crate::program::fresh;
use crate::program::names;
use crate::program::repository;
use crate::program::run;
use crate::program::with_demo;

fn says(text: &str, parts: &[&str]) {
    for part in parts {
        assert!(text.contains(part), "`{part}` is not in\n{text}");
    }
}

fn change(path: &Path, from: &str, to: &str) {
    let text = fs::read_to_string(path).unwrap();
    assert!(text.contains(from), "{from}");
    fs::write(path, text.replacen(from, to, 1)).unwrap();
}

/// The numbers stand in the device file, 80 lines further up: gate from 250 to 350 µm, probes 20 µm wide at 150 µm.
#[test]
fn a_device_is_told_in_words() {
    let folder = with_demo("check/device", "top-gated-bar");
    let said = run(&folder, "check device.toml").answer();
    says(
        &said,
        &[
            "device.toml: device file of KR-0417",
            "bar, 600 × 100 µm",
            "2  top edge, x 140 to 160 µm, on an arm of 40 µm",
            "pin A5",
            "clockwise: 1, 2, 3, 4, 5, 6",
            "TG  x 250 to 350 µm, across the mesa  −0.8 to 0.2 V",
            "3 over 1  4.14 T  filling 3 with 1 under TG; TG at −0.333 V",
            "no fault",
        ],
    );
}

#[test]
fn a_cooldown_finds_its_device_and_its_readings() {
    let folder = with_demo("check/cooldown", "top-gated-bar");
    for line in ["check cooldown.toml", "check cooldown.toml device.toml", "check readings.csv cooldown.toml"] {
        let said = run(&folder, line).answer();
        says(
            &said,
            &[
                "cooldown file KR-0417-c3 of KR-0417, revision 1, read beside device.toml",
                "10 nA at 13 Hz",
                "1  134.0(2.0) Ω",
                "positive on the console is toward you, polarity +",
                "readings.csv: 14 readings of KR-0417, read beside cooldown.toml, which names it",
                "separated by a comma",
                "kΩ: 14 rows",
                "3 over 1  + toward you  7 readings  −8.6045(9) kΩ to 26.0812(30) kΩ; meter A",
                "3 over 1  − away        7 readings  −25.506(4) kΩ to 26.0797(30) kΩ; meter A, B",
            ],
        );
        assert_eq!(said.matches("14 readings of").count(), 1, "{said}");
    }
}

#[test]
fn a_cooldown_without_its_device_is_checked_as_far_as_it_goes() {
    let folder = with_demo("check/alone", "top-gated-bar");
    fs::remove_file(folder.join("device.toml")).unwrap();
    let said = run(&folder, "check cooldown.toml readings.csv").answer();
    says(
        &said,
        &[
            "without its device",
            "[source]",
            "current_nA = 10",
            "not checked",
            "readings.csv: table of readings, 14 rows",
        ],
    );
    change(&folder.join("cooldown.toml"), "current_nA", "curent_nA");
    let ran = run(&folder, "check cooldown.toml");
    assert_eq!(ran.code, 2);
    says(&ran.err, &["unknown-key", "current_nA"]);
}

#[test]
fn readings_beside_a_device_alone_are_read() {
    let folder = with_demo("check/readings", "top-gated-bar");
    fs::remove_file(folder.join("cooldown.toml")).unwrap();
    let said = run(&folder, "check readings.csv device.toml").answer();
    says(&said, &["readings.csv: 14 readings of KR-0417, read beside device.toml"]);
    says(&run(&folder, "check readings.csv").answer(), &["14 rows", "no cooldown file here names it"]);
}

#[test]
fn a_gate_that_a_point_forgets_is_said() {
    let folder = with_demo("check/forgotten", "top-gated-bar");
    change(&folder.join("device.toml"), "fillings = { TG = 1 }\n", "");
    change(&folder.join("device.toml"), "gates_V = { TG = -0.333 }", "");
    says(&run(&folder, "check device.toml").answer(), &["TG has the bulk filling 3 at “3 over 1”: not named there"]);
}

/// Faults of the layout, of all files and of the table come in one run.
#[test]
fn faults_of_all_files_come_at_once() {
    let folder = with_demo("check/faults", "top-gated-bar");
    change(&folder.join("device.toml"), "x_um = 150", "x_um = 445");
    change(&folder.join("cooldown.toml"), "positive = \"toward\"", "positive = \"up\"");
    fs::write(folder.join("other.txt"), "a letter").unwrap();
    let ran = run(&folder, "check device.toml cooldown.toml readings.csv other.txt missing.toml");
    assert_eq!(ran.code, 2);
    says(
        &ran.err,
        &["device.toml:", "cooldown.toml:", "`positive` cannot be `up`", "other.txt is no device", "missing.toml"],
    );
    change(&folder.join("cooldown.toml"), "positive = \"up\"", "positive = \"away\"");
    change(&folder.join("readings.csv"), "25.8135(22),kΩ", "25.8135(22),");
    let ran = run(&folder, "check cooldown.toml device.toml");
    assert_eq!(ran.code, 2);
    says(&ran.err, &["missing-unit", "readings.csv:7:"]);
    assert_eq!(names(&folder), ["cooldown.toml", "device.toml", "other.txt", "readings.csv"], "check writes nothing");
}

#[test]
fn what_the_program_wrote_is_recognised_by_its_content() {
    let folder = with_demo("check/written", "top-gated-bar");
    run(&folder, "sheet device.toml cooldown.toml -o out").answer();
    for (ending, what) in [("pdf", "sheet (PDF)"), ("json", "record of a sheet"), ("html", "HTML twin of a sheet")] {
        fs::copy(folder.join(format!("out/KR-0417_KR-0417-c3_r1.{ending}")), folder.join("nameless")).unwrap();
        let said = run(&folder, "check nameless").answer();
        says(&said, &[&format!("nameless: {what}: KR-0417 · KR-0417-c3 · revision 1"), "edgesheet verify"]);
    }
    for (from, to) in [("device.toml", "d"), ("readings.csv", "r"), ("cooldown.toml", "c")] {
        fs::copy(folder.join(from), folder.join(to)).unwrap();
    }
    says(
        &run(&folder, "check c d r").answer(),
        &["d: device file", "c: cooldown file", "r: 14 readings of KR-0417, read beside d"],
    );
}

#[test]
fn every_demo_passes_and_no_line_is_wide() {
    for demo in demos() {
        let said = run(&demo, "check device.toml cooldown.toml readings.csv").answer();
        says(&said, &["no fault"]);
        assert!(said.lines().all(|line| line.chars().count() <= 100), "{said}");
    }
}

/// None of these is of ours: a manifest that has a table of a name that we know, prose that shows device files, a picture,
/// a lock file, nothing at all.
#[test]
fn files_of_other_programs_are_refused() {
    for name in
        ["Cargo.toml", "README.md", "demo-devices/pictures/answer-page.png", "Cargo.lock", "tests/bad/empty.csv"]
    {
        let ran = run(&repository(), &format!("check {name}"));
        assert_eq!((ran.code, ran.out.as_str()), (2, "1 fault\n"), "{name}");
        says(&ran.err, &["unknown-file", name]);
    }
}

#[test]
fn every_bad_file_is_refused() {
    let folder = repository().join("tests/bad");
    let bad = names(&folder).into_iter().filter(|name| name.ends_with(".toml") && !name.starts_with("cooldown"));
    let bad: Vec<String> = bad.collect();
    assert!(bad.len() > 40);
    for name in bad {
        assert_eq!(run(&folder, &format!("check {name}")).code, 2, "{name}");
    }
}

#[test]
fn a_file_must_be_named() {
    assert_eq!(run(&fresh("check/none"), "check").code, 2);
}
