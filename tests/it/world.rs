//! Faults of the world: full and forbidden places, interrupted and simultaneous runs, odd names, links, devices.

use std::ffi::OsStr;
use std::fs;
use std::path::Path;
use std::path::PathBuf;
use std::process::Command;
use std::process::Stdio;

use crate::program::Ran;
use crate::program::copy_demo;
use crate::program::fresh;
use crate::program::names;
use crate::program::program;
use crate::program::ran;
use crate::program::run;
use crate::program::with_demo;

const STEM: &str = "KR-0417_KR-0417-c3_r1";
const SHEET: &str = "sheet device.toml cooldown.toml";

fn demo(name: &str) -> PathBuf {
    with_demo(&format!("world/{name}"), "top-gated-bar")
}

fn three() -> Vec<String> {
    ["html", "json", "pdf"].map(|ending| format!("{STEM}.{ending}")).to_vec()
}

fn refused(ran: &Ran, code: i32, words: &[&str]) {
    assert_eq!((ran.code, ran.out.as_str()), (code, ""), "{}", ran.err);
    for word in words {
        assert!(ran.err.contains(word), "`{word}` is not in: {}", ran.err);
    }
    assert!(ran.err.contains("hint"), "nothing says what to do: {}", ran.err);
}

/// The program in a shell that first says something, as a limit.
fn in_shell(folder: &Path, first: &str, line: &str) -> Ran {
    let script = format!("{first}; exec \"$0\" {line}");
    let mut command = Command::new("sh");
    command.current_dir(folder).args(["-c", &script, env!("CARGO_BIN_EXE_edgesheet")]).stdin(Stdio::null());
    ran(&mut command)
}

/// A limit on the size of files stops a write half-way, also for the superuser: `ulimit -f` counts 512 bytes in POSIX
/// shells and 1024 in others, and the signal is ignored so that the write is told instead (setrlimit(2)).
#[test]
fn a_file_that_cannot_be_written_whole_is_not_written() {
    let folder = demo("cut");
    for blocks in [1, 20, 60] {
        let first = format!("trap '' XFSZ; ulimit -f {blocks}");
        refused(&in_shell(&folder, &first, &format!("{SHEET} -o out")), 3, &["cannot write", STEM]);
        assert_eq!(names(&folder.join("out")), [""; 0], "{blocks} blocks");
    }
    run(&folder, &format!("{SHEET} -o out")).answer();
    let before = bytes(&folder.join("out"));
    let first = "trap '' XFSZ; ulimit -f 20";
    refused(&in_shell(&folder, first, &format!("{SHEET} -o out --replace")), 3, &["cannot write"]);
    assert!(bytes(&folder.join("out")) == before);
}

/// What runs of this and of the first release leave when they are killed does not hinder the next.
#[test]
fn leftovers_of_a_killed_run_are_cleared() {
    let folder = demo("killed");
    let out = folder.join("out");
    fs::create_dir_all(out.join(format!(".{STEM}.pdf.4711.partial/new"))).unwrap();
    fs::write(out.join(format!(".{STEM}.pdf.4711.partial/new/{STEM}.pdf")), "%PDF-1.7 and no m").unwrap();
    fs::write(out.join(format!(".{STEM}.json.partial")), "{").unwrap();
    fs::write(out.join(".edgesheet-probe.partial"), "").unwrap();
    run(&folder, &format!("{SHEET} -o out")).answer();
    assert_eq!(names(&out), three());
}

/// A run that was stopped between two moves left one new file; the old ones come back, also when nothing new is written.
#[test]
fn a_replacement_that_was_stopped_half_way_is_undone() {
    let folder = demo("half-way");
    let out = folder.join("out");
    fs::create_dir_all(&out).unwrap();
    let publishing = out.join(format!(".{STEM}.pdf.4711.publishing"));
    for part in ["new", "previous"] {
        fs::create_dir_all(publishing.join(part)).unwrap();
    }
    for name in three() {
        fs::write(publishing.join("previous").join(&name), "old").unwrap();
        let new = if name.ends_with("json") { out.join(&name) } else { publishing.join("new").join(&name) };
        fs::write(new, "new").unwrap();
        if !name.ends_with("json") {
            fs::write(out.join(&name), "old").unwrap();
        }
    }
    refused(&run(&folder, &format!("{SHEET} -o out")), 3, &["not replaced", "--replace"]);
    assert_eq!(names(&out), three());
    assert!(three().iter().all(|name| fs::read_to_string(out.join(name)).unwrap() == "old"));
}

/// Ten runs at once, of two papers: without `--replace` one of them writes and the others find its sheet; with it all
/// write, and what stands there in the end is all of one of them.
#[test]
fn runs_at_the_same_time_do_not_mix() {
    let folder = demo("at-once");
    let start = |paper: &str, out: &str, more: &str| {
        let line = format!("{SHEET} -o {out} --paper {paper} {more}");
        let mut command = program(&folder, line.split_whitespace());
        command.stdout(Stdio::null()).stderr(Stdio::null()).spawn().unwrap()
    };
    let papers = ["a4", "letter"].into_iter().cycle().take(10);
    let codes = |more: &str| -> Vec<Option<i32>> {
        let running: Vec<_> = papers.clone().map(|paper| start(paper, "out", more)).collect();
        running.into_iter().map(|mut child| child.wait().unwrap().code()).collect()
    };
    let first = codes("");
    assert_eq!(first.iter().filter(|code| **code == Some(0)).count(), 1, "{first:?}");
    assert_eq!(first.iter().filter(|code| **code == Some(3)).count(), 9, "{first:?}");
    assert_eq!(codes("--replace"), [Some(0); 10]);
    assert_eq!(names(&folder.join("out")), three());
    for paper in ["a4", "letter"] {
        start(paper, paper, "").wait().unwrap();
    }
    let left = bytes(&folder.join("out"));
    assert!(
        ["a4", "letter"].iter().any(|paper| left == bytes(&folder.join(paper))),
        "the three files are not of one run"
    );
}

/// A sheet never writes through a link: the link is replaced, what it points to stays.
#[test]
#[cfg(unix)]
fn links_are_replaced_and_not_followed() {
    let folder = demo("links");
    let (out, elsewhere) = (folder.join("out"), folder.join("elsewhere"));
    fs::create_dir_all(&out).unwrap();
    fs::write(&elsewhere, "precious").unwrap();
    let link = |to: &Path, name: &str| std::os::unix::fs::symlink(to, out.join(format!("{STEM}.{name}"))).unwrap();
    link(&elsewhere, "pdf");
    link(Path::new("/nowhere/at/all"), "json");
    refused(&run(&folder, &format!("{SHEET} -o out")), 3, &["not replaced", ".pdf", ".json", "--replace"]);
    run(&folder, &format!("{SHEET} -o out --replace")).answer();
    assert_eq!(fs::read_to_string(&elsewhere).unwrap(), "precious");
    assert_eq!(names(&out), three());
    assert!(three().iter().all(|name| out.join(name).symlink_metadata().unwrap().is_file()));

    std::os::unix::fs::symlink(&out, folder.join("to-out")).unwrap();
    run(&folder, &format!("{SHEET} -o to-out --replace")).answer();
    std::os::unix::fs::symlink("nowhere", folder.join("dangling")).unwrap();
    refused(&run(&folder, &format!("{SHEET} -o dangling")), 3, &["cannot write dangling"]);
    assert!(!folder.join("nowhere").exists());
}

/// Inputs are files: a folder, a pipe that nobody fills, and a device without an end are told and not waited for.
#[test]
#[cfg(target_os = "linux")]
fn inputs_that_are_no_files_are_told() {
    let folder = demo("inputs");
    fs::create_dir(folder.join("folder.toml")).unwrap();
    let made = Command::new("mkfifo").arg(folder.join("pipe.toml")).status().unwrap();
    assert!(made.success());
    fs::write(folder.join("empty.toml"), "").unwrap();
    let huge = fs::File::create(folder.join("huge.toml")).unwrap();
    huge.set_len(1 << 40).unwrap();
    for (input, words) in [
        ("folder.toml", "is a folder"),
        ("pipe.toml", "is a pipe or a device"),
        ("/dev/zero", "is a pipe or a device"),
        ("/dev/null", "is a pipe or a device"),
        ("-", "standard input is not read"),
        ("huge.toml", "is larger than"),
        ("empty.toml", "empty.toml"),
        ("device.toml/below", "cannot read device.toml/below"),
    ] {
        refused(&run(&folder, &format!("sheet {input} -o out")), 2, &[words]);
        refused(&run(&folder, &format!("sheet device.toml {input} -o out")), 2, &[words]);
    }
    assert!(!folder.join("out").exists());
}

/// Names with spaces, quotes, a leading dash, line ends, terminal codes, very long ones, of other scripts and of none.
#[test]
#[cfg(target_os = "linux")]
fn names_of_inputs_may_be_odd() {
    use std::os::unix::ffi::OsStrExt;
    let long = "l".repeat(250) + ".toml";
    let odd: [&[u8]; 9] = [
        b"two words.toml",
        b"it's \"quoted\".toml",
        b"-o",
        b"line\nend.toml",
        b"\x1b[31mred.toml",
        long.as_bytes(),
        "試料 ν.toml".as_bytes(),
        b"caf\xe9.toml",
        b"con.toml",
    ];
    for (index, name) in odd.into_iter().enumerate() {
        let folder = fresh(&format!("world/odd/{index}"));
        copy_demo("top-gated-bar", &folder);
        let name = OsStr::from_bytes(name);
        fs::rename(folder.join("device.toml"), folder.join(name)).unwrap();
        let arguments =
            [OsStr::new("sheet"), "-o".as_ref(), "out".as_ref(), "--".as_ref(), name, "cooldown.toml".as_ref()];
        ran(&mut program(&folder, arguments)).answer();
        assert_eq!(names(&folder.join("out")), three(), "{name:?}");
        let pdf = lopdf::Document::load(folder.join(format!("out/{STEM}.pdf"))).unwrap();
        assert!(!pdf.get_pages().is_empty());

        let text = fs::read_to_string(folder.join(name)).unwrap();
        fs::write(folder.join(name), text.replace("width_um", "width_nm")).unwrap();
        let faulty = ran(&mut program(&folder, ["expect".as_ref(), "--".as_ref(), name]));
        assert_eq!(faulty.code, 2);
        let told = faulty.err.lines().find(|line| line.contains("-->")).unwrap();
        assert!(!faulty.err.contains('\u{1b}') && told.contains(":"), "{}", faulty.err);
    }
}

/// `/dev/full` refuses every byte (full(4)): help and answers that are cut short are failures.
#[test]
#[cfg(target_os = "linux")]
fn standard_output_that_is_full_is_told() {
    let folder = demo("full");
    for line in ["expect device.toml", "expect device.toml --json", "isolate device.toml TG", "--help", "--version"] {
        let full = fs::OpenOptions::new().write(true).open("/dev/full").unwrap();
        let output = program(&folder, line.split(' ')).stdout(full).output().unwrap();
        let said = String::from_utf8(output.stderr).unwrap();
        assert_eq!(output.status.code(), Some(3), "{line}: {said}");
        assert!(said.contains("cannot write the answer") && said.contains("hint"), "{line}: {said}");
    }
}

/// The runtime opens `/dev/null` for standard streams that are closed, so that no file of a sheet gets their numbers and
/// with them the words meant for the terminal (POSIX.1-2017, open(): the lowest number that is free is given).
#[test]
#[cfg(unix)]
fn standard_streams_that_are_closed_spoil_no_file() {
    let folder = demo("closed");
    run(&folder, &format!("{SHEET} -o open")).answer();
    for (out, closed) in [("one", ">&-"), ("all", "<&- >&- 2>&-")] {
        let ran = in_shell(&folder, ":", &format!("{SHEET} -o {out} {closed}"));
        assert_eq!((ran.code, ran.out.as_str(), ran.err.as_str()), (0, "", ""), "{closed}");
        assert!(bytes(&folder.join(out)) == bytes(&folder.join("open")), "{closed}: other bytes");
    }
}

fn bytes(folder: &Path) -> Vec<Vec<u8>> {
    assert_eq!(names(folder), three());
    three().iter().map(|name| fs::read(folder.join(name)).unwrap()).collect()
}

/// A picture is one more file of the group: whatever stands in the way of any of them, none is written.
#[test]
fn a_picture_that_is_blocked_leaves_nothing_written() {
    let folder = demo("pictures");
    let line = format!("{SHEET} --figures");
    run(&folder, &format!("{line} -o all")).answer();
    let all = names(&folder.join("all"));
    let pictures: Vec<&String> = all.iter().filter(|name| !three().contains(name)).collect();
    assert!(pictures.len() >= 6, "{all:?}");
    for (at, picture) in pictures.iter().enumerate() {
        let out = folder.join(format!("folder-{at}"));
        fs::create_dir_all(out.join(picture)).unwrap();
        refused(&run(&folder, &format!("{line} -o folder-{at} --replace")), 3, &["folder of this name", picture]);
        assert_eq!(names(&out), [picture.as_str()]);

        let out = folder.join(format!("file-{at}"));
        fs::create_dir_all(&out).unwrap();
        fs::write(out.join(picture), "mine").unwrap();
        refused(&run(&folder, &format!("{line} -o file-{at}")), 3, &["not replaced", picture]);
        assert_eq!(names(&out), [picture.as_str()]);
        assert_eq!(fs::read_to_string(out.join(picture)).unwrap(), "mine");
    }
    let first = "trap '' XFSZ; ulimit -f 20";
    refused(&in_shell(&folder, first, &format!("{line} -o cut")), 3, &["cannot write"]);
    assert_eq!(names(&folder.join("cut")), [""; 0]);
    run(&folder, &format!("{line} -o all --replace --paper letter")).answer();
    assert_eq!(names(&folder.join("all")), all);
}

/// Runs that replace a sheet are killed at moments spread over the whole run, and over the time in which they write; the
/// next run, though refused, leaves all three files of one of the two.
#[test]
#[cfg(unix)]
fn a_run_that_is_killed_mixes_and_loses_nothing() {
    let folder = demo("kill");
    let start = std::time::Instant::now();
    for paper in ["a4", "letter"] {
        run(&folder, &format!("{SHEET} -o {paper} --paper {paper}")).answer();
    }
    let whole = start.elapsed() / 2;
    let known = ["a4", "letter"].map(|paper| bytes(&folder.join(paper)));
    run(&folder, &format!("{SHEET} -o out --paper a4")).answer();
    let out = folder.join("out");
    let (mut killed, mut unfinished) = (0, 0);
    for turn in 0..60_u32 {
        let paper = if turn % 2 == 0 { "letter" } else { "a4" };
        let line = format!("{SHEET} -o out --replace --paper {paper}");
        let mut child = program(&folder, line.split(' ')).stdout(Stdio::null()).stderr(Stdio::null()).spawn().unwrap();
        if turn < 30 {
            std::thread::sleep(whole * turn / 30);
        } else {
            while names(&out) == three() && child.try_wait().unwrap().is_none() {}
            std::thread::sleep(std::time::Duration::from_micros(150) * (turn - 30));
        }
        child.kill().unwrap();
        killed += u32::from(!child.wait().unwrap().success());
        unfinished += u32::from(names(&out) != three());
        refused(&run(&folder, &format!("{SHEET} -o out")), 3, &["not replaced"]);
        assert!(known.contains(&bytes(&out)), "turn {turn}: the three files are not of one run");
    }
    println!("{killed} of 60 runs were killed, {unfinished} of them while they wrote");
    assert!(killed > 0);
}
