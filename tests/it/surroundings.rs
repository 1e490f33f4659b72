//! What surrounds the program changes nothing: folders, time zones, languages, pipes and terminals.

use std::fs;
use std::io::Read;
use std::path::Path;
use std::path::PathBuf;
use std::process::Command;
use std::process::Stdio;

use crate::program::copy_demo;
use crate::program::demos;
use crate::program::files;
use crate::program::fresh;
use crate::program::program;
use crate::program::ran;
use crate::program::repository;
use crate::program::run;
use crate::program::with_demo;

/// All bytes of a folder, by name.
fn bytes(folder: &Path) -> Vec<(String, Vec<u8>)> {
    files(folder).into_iter().map(|(name, path)| (name, fs::read(path).unwrap())).collect()
}

fn sheet(mut command: Command) -> Vec<(String, Vec<u8>)> {
    let out: PathBuf = command.get_args().last().unwrap().into();
    ran(&mut command).answer();
    let made = bytes(&out);
    assert_eq!(made.len(), 3);
    made
}

/// A bar whose files draw notices, so that places in them are printed.
fn with_notices(folder: &Path) {
    let device = crate::program::bar("2", "\"3/2\"", "").replace("length_um = 600\n", "length_um = 600.0001\n");
    fs::write(folder.join("device.toml"), device).unwrap();
    fs::write(folder.join("cooldown.toml"), "format = 1\ndevice = \"bar\"\n[cooldown]\nid = \"first\"\n").unwrap();
}

#[test]
fn the_same_inputs_give_the_same_bytes_anywhere() {
    let here = fresh("same/here");
    with_notices(&here);
    let first = sheet(program(
        &here,
        [Path::new("sheet"), "device.toml".as_ref(), "cooldown.toml".as_ref(), "-o".as_ref(), &here.join("out")],
    ));
    let record = String::from_utf8(first[1].1.clone()).unwrap();
    assert!(record.contains("device.toml:"), "no notice has a place; the test shows nothing");

    let [device, cooldown] = [fresh("same/zz"), fresh("same/aa/below")];
    fs::copy(here.join("device.toml"), device.join("device.toml")).unwrap();
    fs::copy(here.join("cooldown.toml"), cooldown.join("cooldown.toml")).unwrap();
    let away = repository();
    for (zone, language) in [("Pacific/Apia", "de_DE.UTF-8"), ("Asia/Kathmandu", "tr_TR.UTF-8"), ("", "C")] {
        let out = fresh("same/out");
        let inputs = [device.join("device.toml"), cooldown.join("cooldown.toml")];
        let mut command = program(&away, [Path::new("sheet"), &inputs[0], &inputs[1], "-o".as_ref(), &out]);
        command.env("TZ", zone).env("LC_ALL", language).env("LANG", language).env("COLUMNS", "40");
        assert!(sheet(command) == first, "other bytes with TZ={zone} LC_ALL={language}");
    }
}

#[test]
fn every_demo_gives_the_same_bytes_twice() {
    for demo in demos() {
        let demo = demo.file_name().unwrap().to_str().unwrap().to_owned();
        let twice = ["first", "second"].map(|time| {
            let folder = fresh(&format!("twice/{demo}/{time}"));
            copy_demo(&demo, &folder);
            let cooldown = if folder.join("cooldown.toml").exists() { "cooldown.toml" } else { "" };
            run(&folder, &format!("sheet device.toml {cooldown} -o out")).answer();
            bytes(&folder.join("out"))
        });
        assert!(twice[0] == twice[1], "{demo}");
    }
}

#[test]
fn no_colour_goes_where_no_terminal_is() {
    let folder = with_demo("colour", "top-gated-bar");
    fs::write(folder.join("bad.toml"), "format = 1\n[device]\nidd = 3\n").unwrap();
    for line in ["expect device.toml", "expect bad.toml", "isolate device.toml none", "--help", "sheet", "nonsense"] {
        let mut command = program(&folder, line.split(' '));
        let ran = ran(command.env("TERM", "xterm-256color").env_remove("NO_COLOR"));
        assert!(!ran.out.contains('\u{1b}') && !ran.err.contains('\u{1b}'), "{line}");
        assert!(!ran.out.is_empty() || !ran.err.is_empty(), "{line} says nothing");
        assert!(ran.out.is_empty() || ran.code == 0, "{line}: findings on standard output");
    }
}

/// Notices stand on standard error, so that standard output can be piped on as the answer.
#[test]
fn notices_do_not_mix_with_the_answer() {
    let folder = fresh("notices");
    with_notices(&folder);
    let ran = run(&folder, "expect device.toml --json");
    assert!(ran.err.contains("device.toml:"), "{}", ran.err);
    ran.json();
}

#[test]
fn a_reader_that_leaves_early_is_no_failure() {
    let folder = with_demo("pipe", "two-gates-and-step");
    let mut child = program(&folder, ["expect", "device.toml", "--all", "--json"])
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()
        .unwrap();
    drop(child.stdout.take());
    let mut said = String::new();
    child.stderr.take().unwrap().read_to_string(&mut said).unwrap();
    assert_eq!((child.wait().unwrap().code(), said.as_str()), (Some(0), ""));
}
