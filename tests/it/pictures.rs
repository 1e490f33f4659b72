//! Drawings and charts as files of their own: read back with readers that are not the writers.

use std::collections::BTreeMap;
use std::fs;
use std::path::Path;

use crate::program::bar;
use crate::program::fresh;
use crate::program::names;
use crate::program::run;
use crate::program::with_demo;

/// The chunks of a PNG file by name, each checked (ISO/IEC 15948, 5.3 and annex D: length, name, data, CRC-32 of name
/// and data).
fn chunks(png: &[u8]) -> Vec<(String, Vec<u8>)> {
    assert_eq!(&png[..8], b"\x89PNG\r\n\x1a\n");
    let mut rest = &png[8..];
    let mut found = Vec::new();
    while !rest.is_empty() {
        let number = |at: usize| u32::from_be_bytes(rest[at..at + 4].try_into().unwrap());
        let length = number(0) as usize;
        assert_eq!(number(8 + length), crc(&rest[4..8 + length]));
        let name = String::from_utf8(rest[4..8].to_vec()).unwrap();
        found.push((name, rest[8..8 + length].to_vec()));
        rest = &rest[12 + length..];
    }
    found
}

/// CRC-32 bit by bit, polynomial 0xEDB88320 (ISO/IEC 15948, annex D).
fn crc(bytes: &[u8]) -> u32 {
    !bytes.iter().fold(u32::MAX, |crc, byte| {
        (0..8).fold(crc ^ u32::from(*byte), |crc, _| if crc & 1 == 1 { crc >> 1 ^ 0xEDB8_8320 } else { crc >> 1 })
    })
}

/// Texts of iTXt chunks: keyword, two flags, language, translated keyword, each but the last ended by a zero.
fn texts(chunks: &[(String, Vec<u8>)]) -> BTreeMap<String, String> {
    let text = |data: &Vec<u8>| {
        let keyword = data.split(|byte| *byte == 0).next().unwrap();
        assert_eq!(data[keyword.len() + 1], 0, "not compressed");
        let after: Vec<&[u8]> = data[keyword.len() + 3..].splitn(3, |byte| *byte == 0).collect();
        (String::from_utf8(keyword.to_vec()).unwrap(), String::from_utf8(after[2].to_vec()).unwrap())
    };
    chunks.iter().filter(|(name, _)| name == "iTXt").map(|(_, data)| text(data)).collect()
}

fn read(folder: &Path, name: &str) -> Vec<u8> {
    fs::read(folder.join(name)).unwrap_or_else(|_| panic!("no {name} in {:?}", names(folder)))
}

fn sum(folder: &Path, name: &str) -> String {
    use sha2::Digest;
    sha2::Sha256::digest(read(folder, name)).iter().map(|byte| format!("{byte:02x}")).collect()
}

#[test]
fn a_sheet_writes_every_drawing_and_chart_with_its_origin() {
    let folder = with_demo("pictures", "top-gated-bar");
    run(&folder, "sheet device.toml cooldown.toml -o out --figures").answer();
    let figures = folder.join("out");
    let written = names(&figures);
    for end in ["channels_toward", "channels_away", "chart_1", "why_1-4-2-5_toward", "why_1-4-3-6_away"] {
        for kind in ["svg", "png"] {
            let name = format!("KR-0417_KR-0417-c3_r1_1_3-over-1_{end}.{kind}");
            assert!(written.contains(&name), "{name} in {written:?}");
        }
    }
    let source = format!(
        "device.toml SHA-256 {}\ncooldown.toml SHA-256 {}",
        sum(&folder, "device.toml"),
        sum(&folder, "cooldown.toml")
    );
    let version = format!("edgesheet {}", env!("CARGO_PKG_VERSION"));
    let png = chunks(&read(&figures, "KR-0417_KR-0417-c3_r1_1_3-over-1_why_1-4-2-5_toward.png"));
    let said = texts(&png);
    assert!(said["Title"].starts_with("KR-0417 · KR-0417-c3 · revision"), "{said:?}");
    assert!(said["Title"].contains("3 over 1") && said["Title"].contains("field toward you"), "{said:?}");
    assert!(said["Source"].starts_with(&source) && said["Software"] == version, "{said:?}");
    assert!(said["Description"].contains("contact 2 reads share 1"), "{said:?}");
    let (_, resolution) = png.iter().find(|(name, _)| name == "pHYs").expect("a resolution");
    // 300 dots to the inch of 25.4 mm are 11811 to the metre; unit 1 is the metre.
    assert_eq!(
        resolution,
        &[[0, 0, 0x2e, 0x23], [0, 0, 0x2e, 0x23]].concat().into_iter().chain([1]).collect::<Vec<u8>>()
    );
    let svg = String::from_utf8(read(&figures, "KR-0417_KR-0417-c3_r1_1_3-over-1_why_1-4-2-5_toward.svg")).unwrap();
    assert!(svg.contains(&format!("<title>{}</title>", said["Title"])), "{svg}");
    assert!(svg.contains(&source) && svg.contains(&version));
    assert!(!svg.contains("<text") && !svg.contains("font"), "letters are shapes");
}

#[test]
fn pictures_are_the_same_every_time_and_never_replaced_unasked() {
    let folder = with_demo("pictures-again", "top-gated-bar");
    let line = "sheet device.toml -o out --figures";
    run(&folder, line).answer();
    let figures = folder.join("out");
    let all = |folder: &Path| -> Vec<Vec<u8>> { names(folder).iter().map(|name| read(folder, name)).collect() };
    let first = all(&figures);
    assert!(first.len() >= 3 + 8);
    for end in ["pdf", "html", "json"] {
        fs::remove_file(figures.join(format!("KR-0417_expected_r1.{end}"))).unwrap();
    }
    let left = names(&figures);
    assert_eq!(run(&folder, line).code, 3);
    assert_eq!(names(&figures), left);
    run(&folder, &format!("{line} --replace")).answer();
    assert_eq!(all(&figures), first);
}

#[test]
fn one_reading_can_be_drawn_alone() {
    let folder = fresh("pictures-why");
    fs::write(folder.join("bar.toml"), bar("3", "1", "")).unwrap();
    let line = "expect bar.toml --reading 1-4,2-5 --why -o out";
    let ran = run(&folder, line);
    assert_eq!(ran.code, 0, "{}", ran.err);
    assert!(ran.err.contains("wrote out/") && ran.out.contains("contact 2"), "{}", ran.err);
    let drawn = ["away.png", "away.svg", "toward.png", "toward.svg"];
    assert_eq!(names(&folder.join("out")), drawn.map(|end| format!("1_point_why_1-4-2-5_{end}")));
    assert_eq!(run(&folder, line).code, 3);
    assert_eq!(run(&folder, &format!("{line} --replace")).code, 0);
    assert_eq!(run(&folder, "expect bar.toml -o out").code, 2);
}
