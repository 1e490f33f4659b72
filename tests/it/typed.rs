//! What a user types is printed as it was typed, also where it looks like a mark of lowered or raised type.

use std::fs;
use std::path::Path;

use edgesheet::figure::scene::Level;
use edgesheet::figure::scene::Mark;
use edgesheet::figure::scene::Scene;

use crate::paper::Listed;
use crate::paper::make;
use crate::program::Ran;
use crate::program::demos;
use crate::program::files;
use crate::program::program;
use crate::program::ran;
use crate::program::run;
use crate::program::with_demo;

/// Every key that takes free text: where it goes in the demo's files, and the beginning of what is typed there.
const IN_DEVICE: [(&str, &str, &str); 4] = [
    ("title = \"Top-gated Hall bar\"", "title", "title"),
    ("material = \"GaAs/AlGaAs single interface, 90 nm deep\"", "material", "material"),
    ("pin = \"A3\"", "pad", "pin = \"A3\"\npad"),
    ("pin = \"A5\"", "note", "pin = \"A5\"\nnote"),
];
const IN_COOLDOWN: [(&str, &str, &str); 7] = [
    ("illumination = \"red light, 2 s at 4 K\"", "illumination", "illumination"),
    ("operator = \"night shift\"", "operator", "operator"),
    ("cryostat = \"helium-3 insert, bath of 50 L\"", "cryostat", "cryostat"),
    ("temperature_K = 0.30", "place", "temperature_K = 0.30\nplace"),
    ("frequency_Hz = 13", "current_from", "frequency_Hz = 13\ncurrent_from"),
    ("contact = \"1\"\n", "box", "contact = \"1\"\nbox"),
    ("[room]", "noted", "[[note]]\ntext"),
];

/// What `check` does not repeat.
const UNSAID: [&str; 3] = ["note_", "current_from_", "remark_"];

/// Lowered, raised, closed before it opens, one inside another.
fn typed(field: &str) -> String {
    format!("{field}_{{a}}^{{b}}}}_{{_{{c}}")
}

fn with_typed(text: &str, places: &[(&str, &str, &str)]) -> String {
    places.iter().fold(text.to_owned(), |text, (place, field, key)| {
        assert!(text.contains(place), "`{place}` is not in the demo");
        let rest = if *place == "[room]" { "\n[room]" } else { "\n" };
        text.replacen(place, &format!("{key} = \"{}\"{rest}", typed(field)), 1)
    })
}

fn fields() -> Vec<String> {
    let keys = IN_DEVICE.iter().chain(&IN_COOLDOWN).map(|(_, field, _)| typed(field));
    keys.chain([typed("remark")]).collect()
}

/// The three texts of the demo with such words in every place for free text.
fn texts(folder: &Path) -> [String; 3] {
    let read = |name: &str| fs::read_to_string(folder.join(name)).unwrap();
    let readings = read("readings.csv").replacen(",kΩ,,A,,\n", &format!(",kΩ,,A,,{}\n", typed("remark")), 1);
    [with_typed(&read("device.toml"), &IN_DEVICE), with_typed(&read("cooldown.toml"), &IN_COOLDOWN), readings]
}

#[test]
fn free_text_is_printed_as_typed_in_record_html_and_on_the_terminal() {
    let folder = with_demo("typed/text", "top-gated-bar");
    let [device, cooldown, readings] = texts(&folder);
    let names = ["dev_{x}.toml", "cool^{y}.toml", "read_{z}^{w}.csv"];
    fs::write(folder.join(names[0]), device).unwrap();
    fs::write(folder.join(names[1]), cooldown.replace("readings.csv", names[2])).unwrap();
    fs::write(folder.join(names[2]), readings).unwrap();
    let sheet = run(&folder, &format!("sheet {} {} -o out", names[0], names[1]));
    assert_eq!(sheet.code, 0, "{}", sheet.err);
    let made = |ending: &str| fs::read_to_string(folder.join(format!("out/KR-0417_KR-0417-c3_r1.{ending}"))).unwrap();
    let record: serde_json::Value = serde_json::from_str(&made("json")).unwrap();
    let (printed, html) = (record["printed"].to_string(), made("html"));
    for words in fields().iter().map(String::as_str).chain(names) {
        assert!(printed.contains(words), "the record does not print {words}");
        assert!(html.contains(words), "the page does not print {words}");
    }
    let said = run(&folder, &format!("check {} {}", names[0], names[1])).answer();
    let said: String = said.split_whitespace().collect::<Vec<_>>().join(" ");
    for words in fields().iter().filter(|words| !UNSAID.iter().any(|unsaid| words.starts_with(unsaid))) {
        assert!(said.contains(words.as_str()), "the terminal does not say {words}:\n{said}");
    }
    assert_eq!(run(&folder, "verify out/KR-0417_KR-0417-c3_r1.pdf").code, 0);
}

/// Every such text in one run at the level of the line.
#[test]
fn free_text_stands_on_the_pages_as_typed() {
    let [device, cooldown, readings] = texts(&with_demo("typed/pages", "top-gated-bar"));
    let pages = make(&device, Some((&cooldown, &readings)), Listed::Standard).pages();
    let level: Vec<&str> = pages.iter().flat_map(on_the_line).collect();
    for words in fields() {
        assert!(level.iter().any(|text| text.contains(&words)), "{words} is not on the pages as it was typed");
    }
}

fn on_the_line(page: &Scene) -> Vec<&str> {
    let texts = page.marks.iter().filter_map(|mark| match mark {
        Mark::Text(text) => Some(text),
        Mark::Path(_) => None,
    });
    let runs = texts.flat_map(|text| &text.runs).filter(|run| run.level == Level::Normal);
    runs.map(|run| run.text.as_str()).collect()
}

/// The codes that mark type stay inside the program, whatever it writes.
#[test]
fn no_code_of_a_mark_is_written() {
    let inside = |text: &str| text.contains(|sign| ('\u{FDD0}'..='\u{FDEF}').contains(&sign));
    for demo in demos() {
        let folder = with_demo("typed/marks", &demo.file_name().unwrap().to_string_lossy());
        let cooldown = if folder.join("cooldown.toml").exists() { "cooldown.toml" } else { "" };
        for line in ["expect", "expect --why", "expect --json --why", "check", "sheet -o out --figures"] {
            let arguments = line.split(' ').chain(["device.toml", cooldown]).filter(|word| !word.is_empty());
            let said = ran(&mut program(&folder, arguments));
            // A bench whose devices are joined by wires is not explained channel by channel.
            let refused = said.code == 2 && said.err.contains("why-across-wires");
            assert!([0, 1].contains(&said.code) || refused, "{line}: {}", said.err);
            assert!(!inside(&said.out) && !inside(&said.err), "{line} on {}", demo.display());
        }
        for (name, path) in files(&folder.join("out")) {
            // PDF and PNG are compressed; what the pages of a PDF say, the record and the HTML say too.
            if name.ends_with(".pdf") || name.ends_with(".png") {
                continue;
            }
            assert!(!inside(&fs::read_to_string(path).unwrap()), "{name}");
        }
    }
}

/// A text that holds such a code is refused, as an escape in TOML and as it is in a table.
#[test]
fn codes_of_no_character_are_refused() {
    let folder = with_demo("typed/codes", "top-gated-bar");
    let device = fs::read_to_string(folder.join("device.toml")).unwrap();
    fs::write(folder.join("coded.toml"), device.replace("Top-gated", "Top\\uFDD0gated")).unwrap();
    refused(&run(&folder, "check coded.toml"), "U+FDD0");
    refused(&run(&folder, "sheet coded.toml -o out"), "U+FDD0");
    let readings = fs::read_to_string(folder.join("readings.csv")).unwrap();
    fs::write(folder.join("readings.csv"), readings.replacen(",A,,\n", ",A,,a\u{FDD2}b\n", 1)).unwrap();
    refused(&run(&folder, "check device.toml cooldown.toml"), "U+FDD2");
    refused(&run(&folder, "sheet device.toml cooldown.toml -o out"), "U+FDD2");
    assert!(!folder.join("out").exists());
}

fn refused(ran: &Ran, code: &str) {
    let said = format!("{}{}", ran.out, ran.err);
    assert!(ran.code == 2 && said.contains("no-character") && said.contains(code), "{said}");
}
