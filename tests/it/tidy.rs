//! The rules of the house: who may import whom, how long things are, who touches the disk and who prints.

use std::collections::BTreeSet;
use std::fs;
use std::path::Path;
use std::path::PathBuf;

const BASE: &[&str] = &["diagnostic", "number", "quantity", "statistics", "syntax"];

/// Every room with the rooms it may import; `base` stands for all of [`BASE`].
const IMPORTS: &[(&str, &str)] = &[
    ("main", "cli"),
    ("diagnostic", ""),
    ("number", ""),
    ("quantity", "number"),
    ("statistics", "quantity"),
    ("syntax", "diagnostic number"),
    ("device", "base"),
    ("cooldown", "base device"),
    ("layout", "base device"),
    ("network", "base device layout"),
    ("conductance", "base network"),
    ("circuit", "base device cooldown conductance"),
    ("resistance", "base device network conductance circuit"),
    ("measured", "base cooldown"),
    ("analysis", "base measured"),
    ("compare", "base resistance measured analysis"),
    ("explain", "base device cooldown network conductance circuit resistance measured analysis compare"),
    ("safety", "base device cooldown"),
    ("figure", "base layout network conductance circuit resistance measured analysis compare explain"),
    (
        "report",
        "base device cooldown layout network conductance circuit resistance measured analysis compare explain safety \
         figure",
    ),
    ("sheet", "diagnostic quantity figure report"),
    ("archive", "base report"),
    ("guide", "base measured"),
    ("files", "diagnostic"),
];

fn sources() -> Vec<(PathBuf, String)> {
    let mut found = Vec::new();
    collect(&Path::new(env!("CARGO_MANIFEST_DIR")).join("src"), &mut found);
    found.sort();
    assert!(found.len() > 40, "only {} source files found", found.len());
    found
}

fn collect(folder: &Path, found: &mut Vec<(PathBuf, String)>) {
    for entry in fs::read_dir(folder).unwrap() {
        let path = entry.unwrap().path();
        if path.is_dir() {
            collect(&path, found);
        } else if path.extension().is_some_and(|extension| extension == "rs") {
            found.push((path.clone(), fs::read_to_string(&path).unwrap()));
        }
    }
}

fn room(path: &Path) -> String {
    let inside = path.strip_prefix(Path::new(env!("CARGO_MANIFEST_DIR")).join("src")).unwrap();
    let first = inside.components().next().unwrap().as_os_str().to_str().unwrap();
    first.trim_end_matches(".rs").to_owned()
}

/// Rooms named anywhere in the code as `crate::room` or `edgesheet::room`; comments and unit tests do not count.
fn imported(text: &str) -> BTreeSet<String> {
    let shipped = text.split("#[cfg(test)]").next().unwrap();
    let code = shipped.lines().filter(|line| !line.trim_start().starts_with("//")).collect::<Vec<_>>().join("\n");
    let mut rooms = BTreeSet::new();
    for prefix in ["crate::", "edgesheet::"] {
        for (at, _) in code.match_indices(prefix) {
            let rest = &code[at + prefix.len()..];
            rooms.insert(rest.chars().take_while(|c| c.is_alphanumeric() || *c == '_').collect());
        }
    }
    rooms
}

#[test]
fn every_room_imports_only_what_its_table_allows() {
    let mut wrong = Vec::new();
    for (path, text) in sources() {
        let room = room(&path);
        let is_test = path.components().any(|part| part.as_os_str() == "tests") || path.ends_with("tests.rs");
        if room == "lib" || room == "cli" || is_test {
            continue;
        }
        let (_, allowed) = IMPORTS.iter().find(|(name, _)| *name == room).unwrap_or_else(|| panic!("no room {room}"));
        let may = |other: &str| {
            other == room
                || allowed.split_whitespace().any(|name| name == other || (name == "base" && BASE.contains(&other)))
        };
        wrong.extend(imported(&text).into_iter().filter(|other| !may(other)).map(|other| format!("{path:?}: {other}")));
    }
    assert!(wrong.is_empty(), "{wrong:#?}");
}

#[test]
fn no_path_leaves_a_room_through_super() {
    for (path, text) in sources() {
        assert!(!text.contains("super::super"), "{path:?}");
        if path.file_name().is_some_and(|name| name == "mod.rs") {
            let outside_tests = text.split("#[cfg(test)]").next().unwrap();
            assert!(!outside_tests.contains("use super::"), "{path:?} leaves its room");
        }
    }
}

#[test]
fn only_files_touches_the_disk_and_only_cli_prints() {
    for (path, text) in sources() {
        let code = text.split("#[cfg(test)]").next().unwrap();
        let room = room(&path);
        for word in ["std::fs", "File::open", "File::create", "std::env::", "SystemTime", "Instant::now"] {
            let allowed = room == "files" || (word == "std::env::" && matches!(room.as_str(), "cli" | "main"));
            assert!(allowed || !code.contains(word), "{path:?} holds {word}");
        }
        for word in ["println!", "eprintln!", "print!(", "dbg!", "std::io::stdout", "std::io::stderr"] {
            assert!(room == "cli" || !code.contains(word), "{path:?} holds {word}");
        }
    }
}

#[test]
fn main_is_short_and_no_file_is_long() {
    for (path, text) in sources() {
        let limit = if path.file_name().is_some_and(|name| name == "main.rs") { 60 } else { 600 };
        assert!(text.lines().count() <= limit, "{path:?} has {} lines", text.lines().count());
    }
}

#[test]
fn every_room_says_what_it_is() {
    for (path, text) in sources() {
        assert!(text.starts_with("//! "), "{path:?} does not begin by saying what it owns");
    }
}

#[test]
fn every_constant_of_nature_names_its_source() {
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("src/quantity/constant.rs");
    let text = fs::read_to_string(path).unwrap();
    let constants = text.matches(": Constant = Constant {").count();
    assert!(constants >= 2);
    for part in text.split(": Constant = Constant {").skip(1) {
        let source = part.split("source: \"").nth(1).unwrap().split('"').next().unwrap();
        assert!(source.len() > 20, "{source}");
    }
}

#[test]
fn transcendental_functions_are_the_same_on_every_machine() {
    for (path, text) in sources() {
        let code = text.split("#[cfg(test)]").next().unwrap();
        for word in
            [".sin()", ".cos()", ".tan()", ".exp()", ".ln()", ".log10()", ".powf(", ".atan2(", ".hypot(", ".acos()"]
        {
            assert!(!code.contains(word), "{path:?} uses {word}; take it from libm");
        }
    }
}

/// A user's mistake never panics: shipped code asks no value to be there that may be missing.
#[test]
fn shipped_code_does_not_panic_on_purpose() {
    for (path, text) in sources() {
        let only_tests = ["tests.rs", "sample.rs", "audit.rs", "fixture.rs", "overlap.rs", "random.rs"];
        let is_test =
            only_tests.iter().any(|name| path.ends_with(name)) || path.components().any(|p| p.as_os_str() == "tests");
        let shipped = text.split("#[cfg(test)]").next().unwrap();
        let code: Vec<&str> = shipped.lines().filter(|line| !line.trim_start().starts_with("//")).collect();
        for word in [".unwrap()", ".expect(", "panic!(", "unreachable!(", "todo!(", "unimplemented!("] {
            assert!(is_test || !code.iter().any(|line| line.contains(word)), "{path:?} holds {word}");
        }
    }
}
