//! `start` as a user runs it: the starter files are accepted as they stand, and nothing is ever replaced.

use std::fs;

use crate::program::fresh;
use crate::program::names;
use crate::program::program;
use crate::program::ran;
use crate::program::run;

const FILES: [&str; 3] = ["cooldown.toml", "device.toml", "readings.csv"];

/// From an empty folder to a sheet with the commands that `start` itself names, in that order.
#[test]
fn the_commands_that_it_names_lead_to_a_sheet() {
    let folder = fresh("start/path");
    let said = run(&folder, "start mine").answer();
    assert_eq!(names(&folder.join("mine")), FILES);
    let next: Vec<&str> =
        said.lines().filter_map(|line| line.split_once(" edgesheet ")).map(|(_, next)| next).collect();
    assert_eq!(next.iter().filter_map(|line| line.split(' ').next()).collect::<Vec<_>>(), ["check", "sheet"]);
    let checked = run(&folder, next[0]);
    assert_eq!((checked.code, checked.err.as_str()), (0, ""), "the starter files are without a notice");
    assert!(run(&folder, next[1]).answer().starts_with("All 14 readings that were judged agree."));
    assert_eq!(names(&folder.join("mine/sheets")).len(), 3);
}

#[test]
fn files_that_exist_are_never_replaced() {
    for name in FILES {
        let folder = fresh("start/keeps");
        fs::write(folder.join(name), "mine").unwrap();
        let ran = run(&folder, "start .");
        assert_eq!((ran.code, ran.out.as_str()), (3, ""));
        assert!(ran.err.contains(name) && ran.err.contains("name a folder"), "{}", ran.err);
        assert_eq!(names(&folder), [name], "something was written");
        assert_eq!(fs::read_to_string(folder.join(name)).unwrap(), "mine");
    }
}

#[test]
fn a_folder_that_cannot_be_made_leaves_nothing() {
    let folder = fresh("start/impossible");
    fs::write(folder.join("plain"), "a file").unwrap();
    assert_eq!(run(&folder, "start plain/below").code, 3);
    assert_eq!(names(&folder), ["plain"]);
    assert_eq!(run(&folder, "start").code, 2);
}

#[test]
fn names_with_blanks_can_be_pasted() {
    let folder = fresh("start/blanks");
    let said = ran(&mut program(&folder, ["start", "my lab"])).answer();
    assert!(said.contains("check 'my lab/device.toml' 'my lab/cooldown.toml'"), "{said}");
}

/// Every reading of the starter lies within 3 u of what its circuit shows; the values without a circuit are those of a
/// bar of filling 3 with 1 under the gate: 1, 2/3, 1/3 and −1/3 of h/e² = 25 812.807 Ω (SI, 2019).
#[test]
fn signs_show_in_the_starter() {
    let folder = fresh("start/signs");
    run(&folder, "start .").answer();
    let table = run(&folder, "expect device.toml").answer();
    let row =
        |name: &str| table.lines().find(|line| line.starts_with(name)).unwrap().split_whitespace().collect::<Vec<_>>();
    assert_eq!(row("R_14,25")[1..5], ["1", "25.8128", "1/3", "8.6043"]);
    assert_eq!(row("R_14,36")[1..5], ["−1/3", "−8.6043", "−1", "−25.8128"]);
}
