//! `sheet` as a user runs it: which files it writes, when it writes nothing, and how it ends.

use std::fs;
use std::path::Path;
use std::time::SystemTime;

use crate::program::Ran;
use crate::program::files;
use crate::program::fresh;
use crate::program::names;
use crate::program::program;
use crate::program::ran;
use crate::program::run;
use crate::program::with_demo;

const STEM: &str = "KR-0417_KR-0417-c3_r1";
const SHEET: &str = "sheet device.toml cooldown.toml";

fn demo(name: &str) -> std::path::PathBuf {
    with_demo(name, "top-gated-bar")
}

fn three(stem: &str) -> Vec<String> {
    ["html", "json", "pdf"].map(|ending| format!("{stem}.{ending}")).to_vec()
}

/// Names, bytes and times of change of everything in a folder.
fn state(folder: &Path) -> Vec<(String, Vec<u8>, SystemTime)> {
    let read = |(name, path)| -> (String, Vec<u8>, SystemTime) {
        let path: std::path::PathBuf = path;
        (name, fs::read(&path).unwrap_or_default(), fs::metadata(&path).unwrap().modified().unwrap())
    };
    files(folder).into_iter().map(read).collect()
}

fn refused(ran: &Ran, code: i32, words: &[&str]) {
    assert_eq!(ran.code, code, "{}", ran.err);
    assert_eq!(ran.out, "", "nothing but an answer belongs on standard output");
    for word in words {
        assert!(ran.err.contains(word), "`{word}` is not in: {}", ran.err);
    }
}

#[test]
fn a_sheet_is_three_files() {
    let folder = demo("three-files");
    let said = run(&folder, &format!("{SHEET} -o out/deep")).answer();
    assert_eq!(names(&folder.join("out/deep")), three(STEM));
    assert_eq!(said.lines().filter(|line| line.starts_with("wrote ")).count(), 3);
    run(&folder, "sheet device.toml -o expected").answer();
    assert_eq!(names(&folder.join("expected")), three("KR-0417_expected_r1"));
}

#[test]
fn the_revision_of_the_cooldown_names_the_sheet() {
    let folder = demo("revision");
    let cooldown = fs::read_to_string(folder.join("cooldown.toml")).unwrap();
    fs::write(folder.join("cooldown.toml"), cooldown.replace("[cooldown]\n", "[cooldown]\nrevision = 4\n")).unwrap();
    run(&folder, &format!("{SHEET} -o out")).answer();
    assert_eq!(names(&folder.join("out")), three("KR-0417_KR-0417-c3_r4"));
    refused(&run(&folder, &format!("{SHEET} -o out")), 3, &["revision = 5", "--replace"]);
}

#[test]
fn a_sheet_that_exists_stays_unless_told_otherwise() {
    let folder = demo("stays");
    run(&folder, &format!("{SHEET} -o out")).answer();
    let before = state(&folder.join("out"));
    refused(&run(&folder, &format!("{SHEET} -o out")), 3, &[STEM, "revision = 2", "--replace"]);
    assert!(state(&folder.join("out")) == before, "something changed");

    fs::write(folder.join(format!("out/{STEM}.pdf")), "spoilt").unwrap();
    fs::remove_file(folder.join(format!("out/{STEM}.html"))).unwrap();
    refused(&run(&folder, &format!("{SHEET} -o out")), 3, &[".pdf", ".json"]);
    run(&folder, &format!("{SHEET} -o out --replace")).answer();
    let bytes = |list: Vec<(String, Vec<u8>, SystemTime)>| list.into_iter().map(|(n, b, _)| (n, b)).collect::<Vec<_>>();
    assert!(bytes(state(&folder.join("out"))) == bytes(before), "the sheet is not the one it was");
}

#[test]
fn impossible_targets_leave_nothing_behind() {
    let folder = demo("impossible");
    fs::write(folder.join("plain"), "a file").unwrap();
    fs::create_dir_all(folder.join(format!("taken/{STEM}.pdf"))).unwrap();
    let before = state(&folder);
    for target in ["plain", "plain/below", "plain/far/below", "taken --replace", "taken"] {
        let ran = run(&folder, &format!("{SHEET} -o {target}"));
        refused(&ran, 3, &["fault", target.split(' ').next().unwrap()]);
        assert!(state(&folder) == before, "{target} left something behind");
        assert_eq!(names(&folder.join("taken")), [format!("{STEM}.pdf")], "{target}");
    }
}

/// `/proc` takes no new files, not even from the superuser (common practice).
#[test]
#[cfg(target_os = "linux")]
fn a_folder_that_takes_no_files_is_found_before_the_work() {
    let folder = demo("takes-none");
    refused(&run(&folder, &format!("{SHEET} -o /proc")), 3, &["cannot write /proc"]);
    refused(&run(&folder, &format!("{SHEET} -o /proc/new")), 3, &["cannot write /proc/new"]);
}

/// An answer that a full disk cuts short must not pass for a whole one. `/dev/full` refuses every byte (full(4)).
#[test]
#[cfg(target_os = "linux")]
fn an_answer_cut_short_is_a_failure() {
    let folder = demo("cut-short");
    let full = fs::OpenOptions::new().write(true).open("/dev/full").unwrap();
    let status = program(&folder, ["expect", "device.toml"]).stdout(full).stderr(std::process::Stdio::null()).status();
    assert_eq!(status.unwrap().code(), Some(3));
}

#[test]
fn faults_of_all_files_come_at_once_and_nothing_is_written() {
    let folder = demo("faults");
    let change = |name: &str, from: &str, to: &str| {
        let text = fs::read_to_string(folder.join(name)).unwrap();
        assert!(text.contains(from));
        fs::write(folder.join(name), text.replace(from, to)).unwrap();
    };
    change("cooldown.toml", "current_nA = 10", "current_mA = 10");
    change("cooldown.toml", "volume_m3", "volume_l");
    change("readings.csv", "25.8135(22),kΩ", "25,8135,kΩ");
    let ran = run(&folder, &format!("{SHEET} -o out"));
    refused(&ran, 2, &["cooldown.toml:", "current_mA", "volume_l"]);
    change("device.toml", "width_um = 100", "width_nm = 100");
    refused(&run(&folder, &format!("{SHEET} -o out")), 2, &["device.toml:", "width_nm"]);
    assert!(!folder.join("out").exists());
    assert_eq!(names(&folder), ["cooldown.toml", "device.toml", "readings.csv"]);
}

#[test]
fn missing_files_are_named() {
    let folder = demo("missing");
    fs::remove_file(folder.join("readings.csv")).unwrap();
    refused(&run(&folder, &format!("{SHEET} -o out")), 2, &["readings.csv"]);
    refused(&run(&folder, "expect no-such.toml"), 2, &["no-such.toml"]);
    refused(&run(&folder, "expect ."), 2, &["is a folder"]);
    assert!(!folder.join("out").exists());
}

#[test]
fn a_limit_is_a_number_that_a_difference_can_exceed() {
    let folder = demo("limits");
    for limit in ["0", "-1", "nan", "inf", "-inf", "three", "", "1e999"] {
        let ran = run(&folder, &format!("{SHEET} -o out --limit={limit}"));
        refused(&ran, 2, &["limit"]);
    }
    assert!(!folder.join("out").exists());
    for limit in ["3", "0.5", "2e1"] {
        run(&folder, &format!("{SHEET} -o out --replace --limit {limit}")).answer();
        let record = fs::read_to_string(folder.join(format!("out/{STEM}.json"))).unwrap();
        assert!(record.contains("--limit "), "the sheet does not say that the limit was fixed");
    }
}

/// The last reading of the demo, 25.5056(38) kΩ, lies far from h/e²; all others lie within 2 u of their values.
#[test]
fn only_a_judging_run_ends_with_one() {
    let folder = demo("judging");
    let code = |options: &str| run(&folder, &format!("{SHEET} -o out --replace {options}")).code;
    assert_eq!(code(""), 0);
    assert_eq!(code("--judge"), 1);
    assert_eq!(names(&folder.join("out")), three(STEM), "the sheet is written all the same");
    assert_eq!(code("--judge --limit 1000"), 0);
    assert_eq!(run(&folder, "sheet device.toml -o out --judge").code, 0);
}

#[test]
fn names_of_folders_and_files_may_be_anything() {
    let folder = fresh("names/Probe Ω, 試料 2");
    crate::program::copy_demo("top-gated-bar", &folder);
    fs::rename(folder.join("readings.csv"), folder.join("Messung Süd 1.csv")).unwrap();
    let cooldown = fs::read_to_string(folder.join("cooldown.toml")).unwrap();
    fs::write(folder.join("Kühlung 3.toml"), cooldown.replace("\"readings.csv\"", "\"Messung Süd 1.csv\"")).unwrap();
    let arguments = ["sheet", "device.toml", "Kühlung 3.toml", "-o", "Blätter für 試料"];
    ran(&mut program(&folder, arguments)).answer();
    assert_eq!(names(&folder.join("Blätter für 試料")), three(STEM));
    let record = fs::read_to_string(folder.join(format!("Blätter für 試料/{STEM}.json"))).unwrap();
    assert!(record.contains("Messung Süd 1.csv") && record.contains("Kühlung 3.toml"));
}

/// A4 is 210 × 297 mm (ISO 216), letter 8.5 × 11 inches (ANSI/ASME Y14.1); a point is 1/72 inch.
#[test]
fn the_paper_can_be_chosen() {
    let folder = demo("paper");
    for (options, width, height) in [("", 595.28, 841.89), ("--paper letter", 612.0, 792.0)] {
        run(&folder, &format!("{SHEET} -o out --replace {options}")).answer();
        let pdf = lopdf::Document::load(folder.join(format!("out/{STEM}.pdf"))).unwrap();
        let pages = pdf.get_pages();
        assert!(!pages.is_empty());
        for page in pages.into_values() {
            let media = pdf.get_dictionary(page).unwrap().get(b"MediaBox").unwrap().as_array().unwrap().clone();
            let media: Vec<f32> = media.iter().map(|side| side.as_float().unwrap()).collect();
            assert!((media[2] - width).abs() < 0.01 && (media[3] - height).abs() < 0.01, "{media:?}");
        }
    }
    assert_eq!(run(&folder, &format!("{SHEET} -o out --paper a5")).code, 2);
}
