//! `verify`: sheets that are as they were, and sheets that were damaged in many ways.

use std::fs;
use std::path::Path;
use std::path::PathBuf;
use std::sync::OnceLock;

use lopdf::Document;
use lopdf::Object;
use lopdf::ObjectId;
use lopdf::StringFormat;
use md5::Digest;

use crate::program::Ran;
use crate::program::demos;
use crate::program::fresh;
use crate::program::program;
use crate::program::ran;
use crate::program::run;
use crate::program::with_demo;

const STEM: &str = "KR-0417_KR-0417-c3_r1";

/// The bytes of one sheet.
pub struct Sheet {
    pub pdf: Vec<u8>,
    pub json: String,
}

/// The sheet of a demo device as the program writes it, made once.
pub fn sheet() -> &'static Sheet {
    static MADE: OnceLock<Sheet> = OnceLock::new();
    MADE.get_or_init(|| made("verify/sheet", "top-gated-bar", STEM))
}

fn made(name: &str, demo: &str, stem: &str) -> Sheet {
    let folder = with_demo(name, demo);
    run(&folder, "sheet device.toml cooldown.toml -o out").answer();
    let read = |ending: &str| fs::read(folder.join(format!("out/{stem}.{ending}"))).unwrap();
    Sheet { pdf: read("pdf"), json: String::from_utf8(read("json")).unwrap() }
}

/// Verifies bytes under a name.
pub fn verify(name: &str, bytes: &[u8]) -> Ran {
    let folder = fresh(&format!("verify/{name}"));
    fs::write(folder.join("sheet"), bytes).unwrap();
    run(&folder, "verify sheet")
}

#[test]
fn every_sheet_verifies_as_it_was_written() {
    for demo in demos() {
        let demo = demo.file_name().unwrap().to_str().unwrap().to_owned();
        let folder = with_demo(&format!("verify/{demo}"), &demo);
        run(&folder, "sheet device.toml -o out").answer();
        run(&folder, "sheet device.toml cooldown.toml -o out --limit 2.5 --paper letter").answer();
        for (name, path) in crate::program::files(&folder.join("out")) {
            if name.ends_with(".html") {
                continue;
            }
            // Away from its inputs: the sheet alone is enough.
            let alone = fresh(&format!("verify/{demo}-alone"));
            fs::copy(&path, alone.join(&name)).unwrap();
            let said = run(&alone, &format!("verify {name}")).answer();
            assert!(said.starts_with(&format!("{name}: same\n")), "{said}");
            assert!(said.contains("byte for byte"), "{said}");
            assert!(crate::program::names(&alone) == [name], "verify wrote something");
        }
    }
}

/// Objects of the attachments: (name, specification, content).
fn attachments(document: &Document) -> Vec<(String, ObjectId, ObjectId)> {
    let specifications = document.catalog().unwrap().get(b"AF").unwrap().as_array().unwrap();
    let one = |object: &Object| {
        let id = object.as_reference().unwrap();
        let specification = document.get_dictionary(id).unwrap();
        let name = lopdf::decode_text_string(specification.get(b"UF").unwrap()).unwrap();
        let content = specification.get(b"EF").unwrap().as_dict().unwrap().get(b"F").unwrap().as_reference().unwrap();
        (name, id, content)
    };
    specifications.iter().map(one).collect()
}

fn content(document: &Document, name: &str) -> ObjectId {
    attachments(document).into_iter().find(|(known, ..)| known == name).unwrap().2
}

fn stream<'a>(document: &'a mut Document, name: &str) -> &'a mut lopdf::Stream {
    let id = content(document, name);
    let stream = document.get_object_mut(id).unwrap().as_stream_mut().unwrap();
    let _plain_already = stream.decompress();
    stream
}

/// A PDF changed by another program, which packs its objects in its own way.
fn changed(pdf: &[u8], change: impl Fn(&mut Document)) -> Vec<u8> {
    let mut document = Document::load_mem(pdf).unwrap();
    change(&mut document);
    let mut bytes = Vec::new();
    document.save_modern(&mut bytes).unwrap();
    bytes
}

/// The bytes of an attachment replaced, with size and MD5 renewed.
fn replaced(pdf: &[u8], name: &str, text: &[u8]) -> Vec<u8> {
    changed(pdf, |document| {
        let stream = stream(document, name);
        stream.set_plain_content(text.to_vec());
        let sum = Object::String(md5::Md5::digest(text).to_vec(), StringFormat::Hexadecimal);
        let parameters = stream.dict.get_mut(b"Params").unwrap().as_dict_mut().unwrap();
        parameters.set("Size", text.len() as i64);
        parameters.set("CheckSum", sum);
    })
}

/// A text in which a part is exchanged; it has to be there.
fn edited(text: &str, from: &str, to: &str) -> String {
    assert!(text.contains(from), "{from} is not there");
    text.replacen(from, to, 1)
}

/// The record with the sums of an input renewed after its text was changed.
fn renewed(json: &str, from: &str, to: &str) -> String {
    let mut record: serde_json::Value = serde_json::from_str(json).unwrap();
    for input in record["inputs"].as_array_mut().unwrap() {
        let text = input["text"].as_str().unwrap().replace(from, to);
        let sum: String = sha2::Sha256::digest(text.as_bytes()).iter().map(|byte| format!("{byte:02x}")).collect();
        input["bytes"] = text.len().into();
        input["sha256"] = sum.into();
        input["text"] = text.into();
    }
    serde_json::to_string_pretty(&record).unwrap()
}

fn without_text(json: &str, role: &str) -> String {
    let mut record: serde_json::Value = serde_json::from_str(json).unwrap();
    let inputs = record["inputs"].as_array_mut().unwrap();
    inputs.iter_mut().filter(|input| input["role"] == role).for_each(|input| {
        input.as_object_mut().unwrap().remove("text");
    });
    serde_json::to_string_pretty(&record).unwrap()
}

fn other_version(json: &str) -> String {
    let own = format!("\"version\": \"{}\"", env!("CARGO_PKG_VERSION"));
    edited(json, &own, "\"version\": \"0.1.99\"")
}

/// A case: what was done, the bytes, the exit code, and what is said on standard output or standard error.
type Case = (&'static str, Vec<u8>, i32, &'static [&'static str]);

fn pdf_cases() -> Vec<Case> {
    let Sheet { pdf, json } = sheet();
    let other = made("verify/other", "bipolar-graphene", "GR-77_GR-77-c1_r1");
    let number = edited(json, "\"exact\": \"2/3\"", "\"exact\": \"3/4\"");
    let title = |document: &mut Document| {
        let info = document.trailer.get(b"Info").unwrap().as_reference().unwrap();
        document.get_dictionary_mut(info).unwrap().set("Title", lopdf::text_string("Another sheet"));
    };
    let missing = |document: &mut Document| {
        let (_, specification, _) = attachments(document).into_iter().find(|one| one.0 == "readings.csv").unwrap();
        let names = document.catalog_mut().unwrap().get_mut(b"Names").unwrap().as_dict_mut().unwrap();
        let tree = names.get_mut(b"EmbeddedFiles").unwrap().as_dict_mut().unwrap();
        let names = tree.get_mut(b"Names").unwrap().as_array_mut().unwrap();
        let at = names.iter().position(|object| object.as_reference().is_ok_and(|id| id == specification)).unwrap();
        names.drain(at - 1..=at);
    };
    let page = |document: &mut Document| {
        let page = document.get_pages()[&2];
        let mut drawn = document.get_page_content(page);
        drawn.extend_from_slice(b"\n0 0 10 10 re f\n");
        document.change_page_content(page, drawn).unwrap();
    };
    vec![
        ("saved again by another program", changed(pdf, |_| {}), 0, &["sheet: same\n", "saved it again"]),
        (
            "a letter of an attached input",
            changed(pdf, |document| {
                let stream = stream(document, "device.toml");
                let plain = String::from_utf8(stream.content.clone()).unwrap().replace("TG = 1", "TG = 2");
                stream.set_plain_content(plain.into_bytes());
            }),
            1,
            &["device.toml, attached: its MD5", "not a file from which", "the file that went in is not attached"],
        ),
        ("a byte of a packed attachment", flipped(pdf), 1, &["cooldown.toml, attached"]),
        (
            "a number of the record, sums renewed",
            replaced(pdf, "record.json", number.as_bytes()),
            1,
            &["3 over 1, toward you, I 1→4, V 2−3, exact: archived “3/4”, computed again “2/3”"],
        ),
        (
            "a verdict",
            replaced(
                pdf,
                "record.json",
                edited(json, "\"result\": \"disagrees\"", "\"result\": \"agrees\"").as_bytes(),
            ),
            1,
            &["verdict, result: archived “agrees”, computed again “disagrees”"],
        ),
        (
            "a sentence",
            replaced(pdf, "record.json", edited(json, "13 of 14 readings agree", "14 of 14 readings agree").as_bytes()),
            1,
            &["printed, verdict, sentence: archived “14 of 14"],
        ),
        (
            "the record of another device",
            replaced(pdf, "record.json", other.json.as_bytes()),
            1,
            &["device.toml, attached: it is not a file from which this sheet was computed", "page 1 differs"],
        ),
        ("a missing attachment", changed(pdf, missing), 1, &["readings.csv: the file that went in is not attached"]),
        ("a page", changed(pdf, page), 1, &["page 2 differs from the page computed again"]),
        ("the title", changed(pdf, title), 1, &["title, bookmarks or other words"]),
        (
            "a wrong MD5",
            changed(pdf, |document| {
                let parameters =
                    stream(document, "readings.csv").dict.get_mut(b"Params").unwrap().as_dict_mut().unwrap();
                parameters.set("CheckSum", Object::String(vec![7; 16], StringFormat::Hexadecimal));
            }),
            1,
            &["readings.csv, attached: its MD5 in the PDF is not that of its bytes"],
        ),
        (
            "a wrong size",
            changed(pdf, |document| {
                stream(document, "readings.csv").dict.get_mut(b"Params").unwrap().as_dict_mut().unwrap().set("Size", 3);
            }),
            1,
            &["readings.csv, attached: its size in the PDF"],
        ),
        ("no record", replaced(pdf, "record.json", b"{}"), 2, &["has no `format`"]),
        ("cut", pdf[..pdf.len() * 2 / 3].to_vec(), 2, &["cannot be read"]),
        (
            "bytes behind the end",
            [pdf, &b"more\n"[..]].concat(),
            1,
            &["5 bytes were added behind the end of the sheet"],
        ),
        (
            "a record of another version",
            replaced(pdf, "record.json", other_version(json).as_bytes()),
            0,
            &[
                "sheet: same numbers, other program version\n",
                "written by version 0.1.99",
                "sentences and pages are not",
            ],
        ),
    ]
}

/// A bit turned in the packed bytes of an attachment, found by the words before them.
fn flipped(pdf: &[u8]) -> Vec<u8> {
    let document = Document::load_mem(pdf).unwrap();
    let packed = &document.get_object(content(&document, "cooldown.toml")).unwrap().as_stream().unwrap().content;
    let at = pdf.windows(packed.len()).position(|window| window == packed).unwrap();
    let mut bytes = pdf.to_vec();
    bytes[at + packed.len() / 2] ^= 4;
    bytes
}

fn record_cases() -> Vec<Case> {
    let Sheet { json, .. } = sheet();
    let old = other_version(json);
    let text = |text: String| text.into_bytes();
    vec![
        ("spaces only", text(json.replace('\n', "\n ")), 0, &["sheet: same\n", "another form"]),
        (
            "a digit",
            text(edited(json, "\"ohm\": 17208.538306203,", "\"ohm\": 17208.538306204,")),
            1,
            &["V 2−3, ohm: archived 17208.538306204, computed again 17208.538306203"],
        ),
        (
            "an input",
            text(edited(json, "mobility_m2_per_Vs = 95", "mobility_m2_per_Vs = 96")),
            1,
            &["device.toml: its text in the record has not the size and SHA-256"],
        ),
        (
            "an input with its sums renewed",
            text(renewed(json, "fillings = { TG = 1 }", "fillings = { TG = 2 }")),
            1,
            &["fillings, TG: archived “1”, computed again “2”"],
        ),
        (
            "an input that cannot be read",
            text(edited(json, "[mesa]", "[mess]")),
            1,
            &["nothing was computed again", "mess"],
        ),
        (
            "a key that stands twice",
            text(edited(json, "\"exact\": \"1\",", "\"exact\": \"7\", \"exact\": \"1\",")),
            1,
            &["a key of the record stands twice"],
        ),
        (
            "a key that no version has",
            text(edited(json, "\"device\": {", "\"device\": {\"colour\": 3, ")),
            1,
            &["device, colour"],
        ),
        (
            "a key that is gone",
            text(edited(json, "\"judged\": 14, ", "")),
            1,
            &["verdict, judged: archived nothing, computed again 14"],
        ),
        (
            "another format",
            text(edited(json, "\"format\": 1", "\"format\": 2")),
            2,
            &["in format 2", "edgesheet", "newer"],
        ),
        ("another paper", text(edited(json, "\"paper\": \"a4\"", "\"paper\": \"a5\"")), 2, &["there is no paper"]),
        (
            "an input that was not kept",
            text(without_text(json, "readings")),
            2,
            &["does not hold “readings.csv”", "--data DIR"],
        ),
        (
            "another version, a digit",
            text(edited(&old, "\"ohm\": 17208.538306203,", "\"ohm\": 17208.538307203,")),
            1,
            &["V 2−3, ohm: archived 17208.538307203"],
        ),
        (
            "another version, a word of judgement",
            text(edited(&old, "\"judgement\": \"agrees\"", "\"judgement\": \"wide\"")),
            1,
            &["judgement: archived “wide”, computed again “agrees”"],
        ),
        (
            "another version, a state",
            text(edited(&old, "\"state\": \"fine\"", "\"state\": \"floating\"")),
            1,
            &["state: archived “floating”"],
        ),
        (
            "another version, a sentence",
            text(edited(&old, "13 of 14 readings agree", "Nearly all readings agree")),
            0,
            &["same numbers, other program version"],
        ),
        (
            "another version, keys of its own",
            text(edited(&old, "\"device\": {", "\"device\": {\"colour\": 3, ")),
            0,
            &["not checked, as this version does not compute it: device, colour"],
        ),
        (
            "another version, the last digit of a float",
            text(edited(&old, "\"ohm\": 17208.538306203,", "\"ohm\": 17208.538306203005,")),
            0,
            &["same numbers, other program version"],
        ),
        ("an archive of another kind", b"PK\x03\x04 and more".to_vec(), 2, &["no PDF and no record"]),
        ("a web page", b"<!DOCTYPE html><title>x</title>".to_vec(), 2, &["a web page carries no record"]),
        ("nothing", Vec::new(), 2, &["no PDF and no record"]),
    ]
}

#[test]
fn every_damage_is_found_and_named() {
    for (what, bytes, code, words) in pdf_cases().into_iter().chain(record_cases()) {
        let ran = verify("damage", &bytes);
        let said = format!("{}{}", ran.out, ran.err);
        assert_eq!(ran.code, code, "{what}: {said}");
        for word in words {
            assert!(said.contains(word), "{what}: `{word}` is not in: {said}");
        }
        assert_eq!(ran.out.starts_with("sheet: not the same\n"), code == 1, "{what}: {said}");
    }
}

/// Originals from a folder stand in for what the sheet does not hold, and only the right ones.
#[test]
fn originals_are_taken_from_a_folder() {
    let folder = with_demo("verify/originals", "top-gated-bar");
    let json = without_text(&sheet().json, "readings");
    fs::write(folder.join("record.json"), json).unwrap();
    let said = run(&folder, "verify record.json --data .").answer();
    assert!(said.starts_with("record.json: same\n"), "{said}");
    fs::write(folder.join("readings.csv"), "point\n").unwrap();
    let ran = run(&folder, "verify record.json --data .");
    assert_eq!((ran.code, ran.err.contains("not the file that went into the sheet")), (2, true), "{}", ran.err);
    // A name in a record leads nowhere but into the folder.
    let escaping =
        without_text(&sheet().json, "readings").replace("\"name\": \"readings.csv\"", "\"name\": \"../device.toml\"");
    fs::create_dir(folder.join("below")).unwrap();
    fs::write(folder.join("record.json"), escaping).unwrap();
    assert_eq!(run(&folder, "verify record.json --data below").code, 2);
}

#[test]
fn what_is_no_file_is_told() {
    let folder = fresh("verify/none");
    for line in ["verify .", "verify no-such.pdf", "verify"] {
        let ran = run(&folder, line);
        assert_eq!((ran.code, ran.out.as_str()), (2, ""), "{line}");
    }
}

/// A pocket of sheets as every release wrote them: what they hold has to follow from their inputs for ever.
#[test]
fn kept_sheets_still_verify() {
    let kept: PathBuf = crate::program::repository().join("tests/kept");
    let mut count = 0;
    for (release, folder) in crate::program::files(&kept) {
        for (name, path) in crate::program::files(&folder) {
            let said = ran(&mut program(&kept, [Path::new("verify"), &path]));
            let own = release == env!("CARGO_PKG_VERSION");
            let advice =
                if own { "the program no longer writes what this version wrote: raise the version" } else { "" };
            assert_eq!(said.code, 0, "{release}/{name}: {}{} {advice}", said.out, said.err);
            count += 1;
        }
    }
    assert!(count >= 2, "{count}");
}
