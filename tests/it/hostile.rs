//! Files made to harm: `verify` refuses them soon, in little memory, and never crashes.

use std::io::Write;
use std::path::Path;
use std::process::Command;
use std::process::Stdio;

use edgesheet::archive;
use edgesheet::archive::Again;

use crate::program::fresh;
use crate::verify::sheet;

/// A PDF of objects, numbered from 1; the first is its root.
fn pdf(objects: &[Vec<u8>], more: &str) -> Vec<u8> {
    let mut bytes = b"%PDF-1.7\n".to_vec();
    let mut places = Vec::new();
    for (index, object) in objects.iter().enumerate() {
        places.push(bytes.len());
        bytes.extend(format!("{} 0 obj\n", index + 1).into_bytes());
        bytes.extend(object);
        bytes.extend(b"\nendobj\n");
    }
    let table = bytes.len();
    bytes.extend(format!("xref\n0 {}\n0000000000 65535 f \n", objects.len() + 1).into_bytes());
    for place in places {
        bytes.extend(format!("{place:010} 00000 n \n").into_bytes());
    }
    bytes.extend(format!("trailer\n<</Root 1 0 R /Size 3 {more}>>\nstartxref\n{table}\n%%EOF\n").into_bytes());
    bytes
}

fn stream(entries: &str, bytes: &[u8]) -> Vec<u8> {
    let head = format!("<<{entries} /Length {}>>\nstream\n", bytes.len());
    [head.as_bytes(), bytes, b"\nendstream"].concat()
}

/// Zeros, packed a thousand to one.
fn bomb(megabytes: usize) -> Vec<u8> {
    let mut packed = flate2::write::ZlibEncoder::new(Vec::new(), flate2::Compression::fast());
    for _ in 0..megabytes {
        packed.write_all(&vec![b' '; 1 << 20]).unwrap();
    }
    packed.finish().unwrap()
}

/// A PDF with one attachment that passes for a record.
fn carrying(content: Vec<u8>) -> Vec<u8> {
    let root = b"<</Names <</EmbeddedFiles <</Names [(record.json) 2 0 R]>>>>>>".to_vec();
    let specification = b"<</UF (../../record.json) /AFRelationship /Data /EF <</F 3 0 R>>>>".to_vec();
    pdf(&[root, specification, content], "")
}

fn names(count: usize) -> Vec<u8> {
    let one = "(record.json) 2 0 R ".repeat(count);
    let root = format!("<</Names <</EmbeddedFiles <</Names [{one}]>>>>>>").into_bytes();
    pdf(&[root, b"<</UF (record.json) /AFRelationship /Data /EF <</F 3 0 R>>>>".to_vec(), stream("", b"{}")], "")
}

fn tables(entries: usize) -> Vec<u8> {
    let head = format!("%PDF-1.7\nxref\n0 {entries}\n");
    let rows = "0000000009 00000 n \n".repeat(entries);
    format!("{head}{rows}trailer\n<</Root 1 0 R>>\nstartxref\n9\n%%EOF\n").into_bytes()
}

fn looped() -> Vec<u8> {
    b"%PDF-1.7\nxref\n0 0\ntrailer\n<</Root 1 0 R /Prev 9>>\nstartxref\n9\n%%EOF\n".to_vec()
}

/// What was made, and the bytes.
fn cases() -> Vec<(&'static str, Vec<u8>)> {
    let text = |text: &str| text.as_bytes().to_vec();
    let flate = "/Filter /FlateDecode";
    let packed_table = |entries: &str, bytes: &[u8]| {
        let mut file = b"%PDF-1.7\n1 0 obj\n".to_vec();
        file.extend(stream(&format!("/Type /XRef /Root 1 0 R {entries}"), bytes));
        file.extend(b"\nendobj\nstartxref\n9\n%%EOF\n");
        file
    };
    vec![
        ("a packed record of 300 MB", carrying(stream(flate, &bomb(300)))),
        ("a packed table of 300 MB", packed_table(&format!("/W [1 8 8] /Size 900000000 {flate}"), &bomb(300))),
        ("an object in 300 MB of others", {
            let objects = stream(&format!("/Type /ObjStm /N 9000000 /First 20 {flate}"), &bomb(300));
            let mut file = b"%PDF-1.7\n9 0 obj\n".to_vec();
            file.extend(objects);
            file.extend(b"\nendobj\n");
            let table = file.len();
            file.extend(b"10 0 obj\n");
            // Object 1 is the first in stream 9, which stands at byte 9.
            let rows = [[2, 0, 9, 0, 0], [1, 0, 9, 0, 0]].concat();
            file.extend(stream("/Type /XRef /Root 1 0 R /W [1 2 2] /Index [1 1 9 1] /Size 10", &rows));
            file.extend(format!("\nendobj\nstartxref\n{table}\n%%EOF\n").into_bytes());
            file
        }),
        ("packed twice", carrying(stream("/Filter [/FlateDecode /FlateDecode]", &bomb(1)))),
        ("another packing", carrying(stream("/Filter /LZWDecode", b"abc"))),
        (
            "rows of a negative width",
            carrying(stream(&format!("{flate} /DecodeParms <</Predictor 12 /Columns -5>>"), &bomb(1))),
        ),
        (
            "rows of a huge width",
            carrying(stream(
                &format!("{flate} /DecodeParms <</Predictor 15 /Columns 999999999999999999 /Colors 9>>"),
                &bomb(1),
            )),
        ),
        ("a table of impossible widths", packed_table("/W [9 9 9] /Size 1", b"")),
        ("a table of no widths", packed_table("/W [0 0 0] /Size 1000000000000", b"")),
        ("a table of negative numbers", packed_table("/W [1 2 2] /Index [-5 10] /Size 5", &[1; 50])),
        (
            "a table that says more than it holds",
            packed_table("/W [1 2 2] /Index [0 9223372036854775807] /Size 5", &[1; 50]),
        ),
        ("tables in a circle", looped()),
        ("half a million objects", tables(500_000)),
        ("an object that is itself", pdf(&[text("1 0 R")], "")),
        ("two objects that are one another", pdf(&[text("2 0 R"), text("1 0 R")], "")),
        ("names in a circle", pdf(&[text("<</Names <</EmbeddedFiles 2 0 R>>>>"), text("<</Kids [2 0 R 2 0 R]>>")], "")),
        (
            "names without end",
            pdf(&[text(&format!("<</Names <</EmbeddedFiles <</Kids [{}]>>>>>>", "<</Kids []>> ".repeat(20_000)))], ""),
        ),
        ("sixty attachments of one name", names(60)),
        ("a thousand attachments", names(1000)),
        ("a longer stream than it is", carrying(text("<</Length 99999999999999>>\nstream\n{}\nendstream"))),
        ("a shorter stream than it is", carrying(text("<</Length 1>>\nstream\n{\"format\": 1}\nendstream"))),
        ("a negative stream", carrying(text("<</Length -1>>\nstream\n{}\nendstream"))),
        ("a length that is the stream", carrying(text("<</Length 3 0 R>>\nstream\n{}\nendstream"))),
        ("a stream without end", carrying(text("<</Length 2>>\nstream\n{}"))),
        ("deep lists", pdf(&[text(&"[".repeat(1_000_000))], "")),
        ("deep tables", pdf(&[text(&"<</A ".repeat(1_000_000))], "")),
        ("a long list", pdf(&[text(&format!("[{}]", "0 ".repeat(5_000_000)))], "")),
        ("many tables", pdf(&[text(&format!("[{}]", "<</A 1>>".repeat(1_500_000)))], "")),
        ("many blanks", pdf(&[text(&" ".repeat(10_000_000))], "")),
        ("a text without end", pdf(&[text(&"(".repeat(1_000_000))], "")),
        ("a locked file", pdf(&[text("<<>>")], "/Encrypt <</Filter /Standard>>")),
        ("a head alone", text("%PDF-")),
        ("a place outside", text("%PDF-1.7\nstartxref\n99999999999\n%%EOF")),
        ("a negative place", text("%PDF-1.7\nstartxref\n-9\n%%EOF")),
        ("deep JSON", carrying(stream("", "[".repeat(1_000_000).as_bytes()))),
        ("a deep record", text(&"{\"a\":".repeat(1_000_000))),
        ("a record of many values", text(&format!("{{\"format\": 1, \"a\": [{}0]}}", "{\"a\":0},".repeat(1_000_000)))),
        ("a record of one long text", text(&format!("{{\"format\": 1, \"a\": \"{}\"}}", "x".repeat(14_000_000)))),
        (
            "a record of other kinds",
            text("{\"format\": 1, \"program\": {\"name\": 3, \"version\": []}, \"options\": 0, \"inputs\": {}}"),
        ),
        ("a record of a huge number", text("{\"format\": 1e999, \"inputs\": []}")),
        (
            "a record of escapes",
            text("{\"format\": 2, \"program\": {\"name\": \"\\u001b[31m\\n\\n\", \"version\": \"\\u0000\"}}"),
        ),
        ("more than any sheet", vec![b'%'; 20 << 20]),
    ]
}

/// Less than a tenth of the memory of a small computer, and five seconds of its time at the most, whatever else it does.
/// The limits are those of the shell (`ulimit`, POSIX.1-2017); its memory counts addresses, of which more are kept than
/// used.
#[test]
#[cfg(target_os = "linux")]
fn hostile_files_are_refused() {
    let folder = fresh("hostile");
    for (what, bytes) in cases() {
        std::fs::write(folder.join("sheet"), bytes).unwrap();
        let (code, out, err) = limited(&folder);
        assert_eq!((code, out.as_str()), (Some(2), ""), "{what}: {err}");
        assert!(err.starts_with("fault[") && err.contains("hint"), "{what}: {err}");
        assert!(!err.contains('\u{1b}') && err.len() < 2000, "{what}: {err}");
    }
    assert_eq!(crate::program::names(&folder), ["sheet"]);
}

#[cfg(target_os = "linux")]
fn limited(folder: &Path) -> (Option<i32>, String, String) {
    let line = format!("ulimit -v 250000; ulimit -t 5; exec '{}' verify sheet", env!("CARGO_BIN_EXE_edgesheet"));
    let output = Command::new("sh").args(["-c", &line]).current_dir(folder).stdin(Stdio::null()).output().unwrap();
    let text = |bytes: &[u8]| String::from_utf8_lossy(bytes).into_owned();
    (output.status.code(), text(&output.stdout), text(&output.stderr))
}

/// A small generator (Numerical Recipes' linear congruence, 1664525 and 1013904223: value from memory).
struct Dice(u32);

impl Dice {
    fn below(&mut self, limit: usize) -> usize {
        self.0 = self.0.wrapping_mul(1_664_525).wrapping_add(1_013_904_223);
        (self.0 >> 8) as usize % limit.max(1)
    }
}

/// Whatever happens to the bytes of a sheet, it is refused or said not to be the same. What is not seen at all is a
/// change between its objects, which no reader sees either; the bytes tell.
#[test]
fn a_damaged_sheet_is_never_the_same() {
    let good = sheet();
    let mut dice = Dice(4711);
    let (mut refused, mut other) = (0, 0);
    for kind in 0..400 {
        let source: &[u8] = if kind % 4 == 0 { good.json.as_bytes() } else { &good.pdf };
        let mut bytes = source.to_vec();
        let (at, length) = (dice.below(bytes.len()), 1 + dice.below(40));
        match kind % 7 {
            0 => bytes.truncate(at),
            1 => drop(bytes.drain(at..(at + length).min(source.len()))),
            2 => bytes.splice(at..at, source[..length].iter().copied()).for_each(drop),
            3 => bytes[at] = b"[]<>()/ 0R"[dice.below(10)],
            _ => bytes[at] ^= 1 << dice.below(8),
        }
        if bytes == source {
            continue;
        }
        let Ok(opened) = archive::opened(bytes) else {
            refused += 1;
            continue;
        };
        let again = Again { record: good.json.as_bytes(), pdf: &good.pdf, version: env!("CARGO_PKG_VERSION") };
        let verified = archive::verified(&opened, &[], again);
        let told = !verified.is_same()
            || verified.text("x").contains("form")
            || verified.text("x").contains("other program version");
        assert!(told, "kind {kind} at {at}: {}", verified.text("x"));
        other += 1;
    }
    assert!(refused > 30 && other > 100, "{refused} {other}");
}
