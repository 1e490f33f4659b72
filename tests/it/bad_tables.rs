//! Every table in `tests/bad` has exactly the faults that its own comment lines name, and damage never panics.
//!
//! A comment line `#! 3:25 comma-in-number "12.906 or 12906"` names line, column, code and words of message or hint.
//! `#! with magnet-toward` reads the table with that fact. Files that cannot hold comments have theirs in a file of the
//! same name ending in `.txt`.

use std::fs;
use std::path::Path;
use std::path::PathBuf;

use edgesheet::cooldown::ContactNames;
use edgesheet::cooldown::MagnetSense;
use edgesheet::cooldown::Names;
use edgesheet::device::ContactIdx;
use edgesheet::device::Drive;
use edgesheet::diagnostic::Diagnostic;
use edgesheet::diagnostic::Faults;
use edgesheet::diagnostic::Noted;
use edgesheet::diagnostic::Outcome;
use edgesheet::diagnostic::Source;
use edgesheet::measured::MeasuredReading;
use edgesheet::measured::from_source;
use edgesheet::measured::source_from_bytes;
use edgesheet::quantity::Polarity;

/// A bar whose contacts have names, pins and plugs; `B1` is the pin of one and the plug of another.
fn names() -> Names {
    let contact = |name: &str, pin: &str, plug: &str| ContactNames {
        name: name.to_string(),
        pin: Some(pin.to_string()),
        plug: Some(plug.to_string()),
    };
    Names {
        contacts: vec![
            contact("1", "A1", "source"),
            contact("2", "A2", "P2"),
            contact("3", "A3", "B1"),
            contact("4", "A4", "drain"),
            contact("5", "B1", "P5"),
            contact("6", "B2", "P6"),
        ],
        points: vec!["4 over 2".to_string(), "3 over 1".to_string()],
        meters: Some(vec!["A".to_string(), "lock-in".to_string()]),
        magnet: MagnetSense::Unknown,
        driven_by: Drive::Field,
        coverage_factor: 1.0,
    }
}

fn read(text: &str, names: &Names) -> Outcome<Vec<MeasuredReading>> {
    from_source(&Source::new("table.csv", text), names)
}

fn faults(outcome: Outcome<Vec<MeasuredReading>>) -> Vec<Diagnostic> {
    outcome.map_or_else(|Faults(list)| list, |_| Vec::new())
}

fn bad_tables() -> Vec<PathBuf> {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/bad");
    let mut paths: Vec<_> = fs::read_dir(folder).unwrap().map(|entry| entry.unwrap().path()).collect();
    paths.retain(|path| path.extension().is_some_and(|end| end == "csv"));
    paths.sort();
    paths
}

/// (place, code, words) as the comment lines have them, and the names to read with.
fn expectations(text: &str) -> (Vec<(String, String, String)>, Names) {
    let mut names = names();
    let mut expected = Vec::new();
    for line in text.lines().filter_map(|line| line.strip_prefix("#! ")) {
        match line {
            "with magnet-toward" => names.magnet = MagnetSense::Toward,
            "with magnetisation" => (names.magnet, names.driven_by) = (MagnetSense::Toward, Drive::Magnetisation),
            "with magnet-away" => names.magnet = MagnetSense::Away,
            _ => {
                let (head, words) = line.split_once(" \"").unwrap();
                let (place, code) = head.split_once(' ').unwrap();
                let words = words.trim_end().strip_suffix('"').unwrap();
                expected.push((place.to_string(), code.to_string(), words.to_string()));
            }
        }
    }
    (expected, names)
}

fn said(fault: &Diagnostic) -> String {
    format!("{} — {}", fault.message, fault.hint.as_deref().unwrap_or_default())
}

#[test]
fn every_bad_table_has_exactly_the_faults_it_names() {
    let paths = bad_tables();
    assert!(paths.len() >= 25, "{} bad tables", paths.len());
    let wrong: Vec<String> = paths.iter().filter_map(|path| mismatch(path)).collect();
    assert!(wrong.is_empty(), "\n{}", wrong.join("\n"));
}

fn mismatch(path: &Path) -> Option<String> {
    let bytes = fs::read(path).unwrap();
    let beside = fs::read_to_string(path.with_extension("txt")).unwrap_or_default();
    let (expected, names) = expectations(&format!("{}\n{beside}", String::from_utf8_lossy(&bytes)));
    let found = match source_from_bytes("table.csv", &bytes) {
        Ok(source) => faults(from_source(&source, &names)),
        Err(Faults(list)) => list,
    };
    let fits = |fault: &Diagnostic, (place, code, words): &(String, String, String)| {
        let at = fault.place.as_ref().map(|at| format!("{}:{}", at.line(), at.column()));
        at.as_ref() == Some(place) && fault.code == code && said(fault).contains(words.as_str())
    };
    let same = found.len() == expected.len() && found.iter().zip(&expected).all(|(f, e)| fits(f, e));
    let listed: Vec<String> = found.iter().map(line_of).collect();
    (!same || expected.is_empty()).then(|| format!("{}\n{}", path.display(), listed.join("\n")))
}

fn line_of(fault: &Diagnostic) -> String {
    let at = fault.place.as_ref().map_or("nowhere".to_string(), |at| format!("{}:{}", at.line(), at.column()));
    format!("#! {at} {} \"{}\"", fault.code, said(fault))
}

const GOOD: &str = "\u{FEFF}# taken at 0.3 K\r
set,point,polarity,i_in,i_out,v_plus,v_minus,value,u,unit,meter,note\r
\r
a,4 over 2,+,1,drain,A2,P6,12.906(4) kΩ,,,A,\"said \"\"fine\"\", twice\"\r
a,4 over 2,−,1,4,2,6,12906 ± 3,,Ω,,\r
,,,,,,,,,,,\r
,3 over 1,toward,1,4,2,5,0.5,0.001,h/e2,lock-in,\r
,3 over 1,away,1,4,3,6,-1.29064e4,4 mΩ,ohm,,\r
,3 over 1,-,1,4,2,3,12.906 kOhm ± 3 Ohm,,,,\r
,3 over 1,+,1,4,2,3,(12.9 ± 0.3) MΩ,,,,\r
,3 over 1,+,1,4,2,3,0.003,,mohm,,";

#[test]
fn a_good_table_is_read_as_it_is_written() {
    let readings = match read(GOOD, &names()) {
        Ok(Noted { value, .. }) => value,
        Err(Faults(list)) => panic!("{list:?}"),
    };
    // Values and uncertainties in Ω by hand; h/e² is 25 812.807 459 304 507 Ω (BIPM, SI Brochure, 9th edition, 2019).
    let klitzing = 25_812.807_459_304_507;
    let found: Vec<_> = readings.iter().map(|reading| (reading.value_ohm.value, reading.value_ohm.u)).collect();
    let expected = [
        (12_906.0, Some(4.0)),
        (12_906.0, Some(3.0)),
        (0.5 * klitzing, Some(0.001 * klitzing)),
        (-12_906.4, Some(0.004)),
        (12_906.0, Some(3.0)),
        (12.9e6, Some(0.3e6)),
        (3e-6, None),
    ];
    assert_eq!(found, expected);
    let first = &readings[0];
    assert_eq!(first.current, [ContactIdx(0), ContactIdx(3)]);
    assert_eq!(first.voltage, [ContactIdx(1), ContactIdx(5)]);
    assert_eq!((first.point, first.polarity, first.place.line()), (0, Polarity::Toward, 4));
    assert_eq!((first.written.as_str(), first.set.as_deref()), ("12.906(4) kΩ", Some("a")));
    assert_eq!((first.meter.as_deref(), first.note.as_deref()), (Some("A"), Some("said \"fine\", twice")));
    assert_eq!((readings[2].written.as_str(), readings[2].set.as_deref(), readings[2].point), ("0.5 h/e2", None, 1));
    let polarities: String = readings.iter().map(|reading| reading.polarity.sign()).collect();
    assert_eq!(polarities, "+-+--++");
}

#[test]
fn a_signed_field_is_read_through_the_sense_of_the_magnet() {
    let text = "field_T,i_in,i_out,v_plus,v_minus,value\n3.1,1,4,2,6,1 Ω\n-3.1 T,1,4,2,6,1 Ω\n−0.5,1,4,2,6,1 Ω";
    let signs = |magnet| {
        let names = Names { magnet, points: vec!["only".to_string()], ..names() };
        let readings = read(text, &names).map(|noted| noted.value).unwrap();
        readings.iter().map(|reading| reading.polarity.sign()).collect::<String>()
    };
    assert_eq!((signs(MagnetSense::Toward), signs(MagnetSense::Away)), ("+--".to_string(), "-++".to_string()));
}

#[test]
fn written_uncertainties_are_divided_by_the_coverage_factor() {
    let names = Names { coverage_factor: 2.0, ..names() };
    let text = "point,polarity,i_in,i_out,v_plus,v_minus,value,u\n4 over 2,+,1,4,2,6,12.906(4) kΩ,\n\
                4 over 2,+,1,4,2,6,12906 Ω,3\n";
    let u: Vec<_> = read(text, &names).unwrap().value.iter().map(|reading| reading.value_ohm.u).collect();
    assert_eq!(u, [Some(2.0), Some(1.5)]);
}

#[test]
fn tables_with_semicolons_and_tabs_are_read_and_an_empty_one_is_noticed() {
    let header = "point,polarity,i_in,i_out,v_plus,v_minus,value";
    for separator in [",", ";", "\t"] {
        let text = format!("{header}\n4 over 2,+,1,4,2,6,12.906 kΩ").replace(',', separator);
        assert_eq!(read(&text, &names()).unwrap().value[0].value_ohm.value, 12_906.0);
    }
    let noted = read(header, &names()).unwrap();
    assert_eq!((noted.value.len(), noted.notices[0].code), (0, "no-readings"));
}

#[test]
fn a_table_over_the_largest_size_is_refused_with_advice() {
    let text = format!("{}\n{}", GOOD, "#".repeat(4_000_000));
    let found = faults(read(&text, &names()));
    assert_eq!((found.len(), found[0].code), (1, "too-large"));
    assert!(found[0].place.is_some() && said(&found[0]).contains("[[sweep]]"));
}

/// Deterministic steps, so that a failure can be seen again: a linear congruence modulo 2⁶⁴ (multiplier of Knuth's MMIX,
/// from memory); the upper bits are used.
struct Steps(u64);

impl Steps {
    fn below(&mut self, limit: usize) -> usize {
        self.0 = self.0.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
        (self.0 >> 33) as usize % limit
    }
}

fn damaged(steps: &mut Steps) -> Vec<u8> {
    const JUNK: [&str; 16] = [
        "\"",
        ",",
        ";",
        "\t",
        "\r",
        "\n",
        "\0",
        "#",
        "(",
        ")",
        "±",
        "e9",
        "nan",
        "−",
        "9999999999999999999999",
        "\u{202E}",
    ];
    let mut bytes = GOOD.as_bytes().to_vec();
    for _ in 0..=steps.below(3) {
        let (at, to) = (steps.below(bytes.len()), steps.below(40));
        let end = (at + to).min(bytes.len());
        match steps.below(5) {
            0 => drop(bytes.drain(at..end)),
            1 => bytes.truncate(at.max(1)),
            2 => bytes[at] = steps.below(256) as u8,
            3 => {
                let piece = bytes[at..end].to_vec();
                let into = steps.below(bytes.len());
                bytes.splice(into..into, piece);
            }
            _ => drop(bytes.splice(at..at, JUNK[steps.below(JUNK.len())].bytes())),
        }
    }
    bytes
}

#[test]
fn damage_never_panics_and_every_fault_has_a_place() {
    let mut steps = Steps(7);
    let mut refused = 0;
    for round in 0..300 {
        let bytes = damaged(&mut steps);
        let found = match source_from_bytes("table.csv", &bytes) {
            Ok(source) => faults(from_source(&source, &names())),
            Err(Faults(list)) => list,
        };
        refused += usize::from(!found.is_empty());
        for fault in found {
            let place = fault.place.as_ref().unwrap_or_else(|| panic!("round {round}: {fault:?}"));
            let inside = place.start <= place.end && place.end <= place.source.text.len();
            assert!(inside && fault.hint.is_some(), "round {round}: {fault:?}");
            assert!(place.line() >= 1 && place.column() >= 1);
        }
    }
    // Most damage must be seen; what falls into comments, notes or digits cannot be.
    assert!(refused > 150, "{refused} of 300");
}
