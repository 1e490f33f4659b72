//! Bad files must fail with the findings that are written inside them, and with no other fault.
//!
//! A line `#! 12:5 unknown-key "wdth_um" "width_um"` expects a finding at line 12, column 5 with that code, whose message
//! or hint holds the quoted words. Notices may be expected too; a notice that is not expected is no failure.

use std::path::Path;

use edgesheet::diagnostic::Diagnostic;
use edgesheet::diagnostic::Faults;
use edgesheet::diagnostic::Severity;
use edgesheet::diagnostic::Source;

use crate::good::DEVICE;

struct Expected {
    place: String,
    code: String,
    words: Vec<String>,
}

impl Expected {
    fn from_line(line: &str) -> Self {
        let mut parts = line.splitn(3, ' ');
        let place = parts.next().unwrap().to_owned();
        let code = parts.next().unwrap_or_else(|| panic!("no code in: {line}")).to_owned();
        let words = parts.next().unwrap_or_default().split('"').skip(1).step_by(2).map(str::to_owned).collect();
        Self { place, code, words }
    }

    fn fits(&self, finding: &Diagnostic) -> bool {
        let said = format!("{} {}", finding.message, finding.hint.as_deref().unwrap_or_default());
        place_of(finding) == self.place
            && finding.code == self.code
            && self.words.iter().all(|word| said.contains(word.as_str()))
    }
}

fn place_of(finding: &Diagnostic) -> String {
    finding.place.as_ref().map(|place| format!("{}:{}", place.line(), place.column())).unwrap_or_default()
}

fn expectations(bytes: &[u8]) -> Vec<Expected> {
    let text = String::from_utf8_lossy(bytes);
    text.lines().filter_map(|line| line.strip_prefix("#! ")).map(Expected::from_line).collect()
}

/// Findings of a file that must fail, as it is read or as it is laid out; files of cooldowns are read beside the good device,
/// benches with the files they name.
fn findings(name: &str, bytes: &[u8]) -> Vec<Diagnostic> {
    let faults = if name.starts_with("cooldown") {
        let device = edgesheet::device::from_bytes("bar.toml", DEVICE).unwrap().value;
        edgesheet::cooldown::from_bytes(name, bytes, &device).err()
    } else if name.starts_with("bench") {
        let beside = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/bad");
        let read = |name: &str| edgesheet::syntax::from_bytes(name, &std::fs::read(beside.join(name)).unwrap());
        let source = edgesheet::syntax::from_bytes(name, bytes).unwrap();
        edgesheet::device::with_others(&source, &mut |name, _| read(name)).err()
    } else {
        device_faults(name, bytes)
    };
    faults.unwrap_or_else(|| panic!("{name} was accepted")).0
}

/// What is wrong with the text of a device file and with what can be drawn of it.
fn device_faults(name: &str, bytes: &[u8]) -> Option<Faults> {
    match edgesheet::device::from_bytes(name, bytes) {
        Ok(noted) => edgesheet::layout::layout(&noted.value).err(),
        Err(Faults(mut found)) => {
            let drawing =
                std::str::from_utf8(bytes).ok().and_then(|text| edgesheet::device::drawing(&Source::new(name, text)));
            found.extend(drawing.iter().flat_map(edgesheet::layout::faults));
            Some(Faults(found))
        }
    }
}

/// What is wrong with the findings of one file, in words.
fn differences(name: &str, bytes: &[u8]) -> Vec<String> {
    let expected = expectations(bytes);
    let mut found = findings(name, bytes);
    let mut problems = Vec::new();
    for one in &expected {
        match found.iter().position(|finding| one.fits(finding)) {
            Some(at) => drop(found.remove(at)),
            None => problems.push(format!("{name}: missed {} {} {:?}", one.place, one.code, one.words)),
        }
    }
    let extra = found.iter().filter(|finding| finding.severity == Severity::Fault);
    problems.extend(extra.map(|finding| format!("{name}: not expected: {} {finding:?}", place_of(finding))));
    problems.extend(expected.is_empty().then(|| format!("{name}: expects nothing")));
    problems
}

/// All bad device and cooldown files: name and bytes.
fn files() -> Vec<(String, Vec<u8>)> {
    let directory = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/bad");
    let paths = std::fs::read_dir(directory).unwrap().map(|entry| entry.unwrap().path());
    let mut paths: Vec<_> = paths.filter(|path| path.extension().is_some_and(|end| end == "toml")).collect();
    paths.sort();
    let named = |path: &Path| path.file_name().unwrap().to_str().unwrap().to_owned();
    paths.iter().map(|path| (named(path), std::fs::read(path).unwrap())).collect()
}

#[test]
fn every_bad_file_fails_as_it_says() {
    let files = files();
    assert!(files.len() >= 45, "{} files", files.len());
    let problems: Vec<String> = files.iter().flat_map(|(name, bytes)| differences(name, bytes)).collect();
    assert!(problems.is_empty(), "\n{}", problems.join("\n"));
}

#[test]
fn every_fault_says_what_to_do_in_one_line() {
    for finding in files().iter().flat_map(|(name, bytes)| findings(name, bytes)) {
        assert!(finding.hint.is_some() && finding.place.is_some(), "{finding:?}");
        assert!(!finding.message.ends_with('.') && !finding.message.contains('\n'), "{finding:?}");
    }
}

#[test]
fn a_file_over_four_megabytes_is_not_read() {
    let long = "# padding\n".repeat(400_001);
    let found = findings("device.toml", long.as_bytes());
    assert_eq!((found.len(), found[0].code), (1, "too-long"));
    assert!(found[0].place.is_some());
}
