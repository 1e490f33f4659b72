//! Sheets along the whole path: what the pages print and what the record holds are the same.

use std::collections::BTreeSet;

use edgesheet::figure::fonts;
use edgesheet::figure::fonts::Face;
use edgesheet::figure::scene::Mark;
use edgesheet::figure::scene::Scene;
use edgesheet::figure::scene::TextMark;
use edgesheet::report;
use edgesheet::report::spelled;
use edgesheet::sheet;
use edgesheet::sheet::Paper;
use edgesheet::sheet::pdf::Bookmark;
use serde_json::Value;

use crate::paper::Listed;
use crate::paper::Made;
use crate::paper::make;

const DEVICE: &str = include_str!("../../demo-devices/top-gated-bar/device.toml");
const COOLDOWN: &str = include_str!("../../demo-devices/top-gated-bar/cooldown.toml");
const READINGS: &str = include_str!("../../demo-devices/top-gated-bar/readings.csv");

/// A bar with two gates, names of twenty letters and points of both signs, one of them without a path.
fn two_gates() -> String {
    let ends = [("source-left-end-east", "left"), ("drain-right-end-west", "right")];
    let sides = [("probe-top-first-left", "top", 150), ("probe-top-second-mid", "top", 400)];
    let below = [("probe-bottom-second-m", "bottom", 400), ("probe-bottom-first-lt", "bottom", 150)];
    let mut text =
        "format = 1\n[device]\nid = \"two-gates\"\n[mesa]\nshape = \"bar\"\nlength_um = 800\nwidth_um = 100\n"
            .to_string();
    let [left, right] = ends.map(|(name, edge)| format!("[[contact]]\nname = \"{name}\"\nedge = \"{edge}\"\n"));
    let side = |(name, edge, x): &(&str, &str, u32)| {
        format!("[[contact]]\nname = \"{name}\"\nedge = \"{edge}\"\nx_um = {x}\nwidth_um = 20\narm_um = 40\n")
    };
    text +=
        &(left + &sides.iter().map(side).collect::<String>() + &right + &below.iter().map(side).collect::<String>());
    text += "[[gate]]\nname = \"TG\"\nfrom_um = 250\nto_um = 330\n[[gate]]\nname = \"right gate\"\nfrom_um = 500\nto_um = 560\n";
    for [bulk, one, two] in [[3, 1, 1], [4, 2, 1], [2, 1, 2], [-2, 1, -1], [6, 2, 4], [3, 0, 2]] {
        text += &format!(
            "[[point]]\nname = \"{bulk} over {one} and {two}\"\nbulk = {bulk}\nfillings = {{ TG = {one}, \"right gate\" = {two} }}\n"
        );
    }
    text
}

fn demo() -> Made {
    make(DEVICE, Some((COOLDOWN, READINGS)), Listed::Standard)
}

fn all() -> Vec<Made> {
    let device = two_gates();
    vec![
        demo(),
        make(DEVICE, None, Listed::Standard),
        make(DEVICE, None, Listed::First(200)),
        make(&device, None, Listed::Standard),
    ]
}

fn texts(page: &Scene) -> Vec<String> {
    let text = |mark: &Mark| match mark {
        Mark::Text(text) => Some(text.runs.iter().map(|run| run.text.as_str()).collect()),
        Mark::Path(_) => None,
    };
    page.marks.iter().filter_map(text).collect()
}

/// Digits with decimal points, as a reader sees them.
fn numbers(text: &str) -> BTreeSet<String> {
    let parts = text.split(|c: char| !c.is_ascii_digit() && c != '.').map(|part| part.trim_matches('.'));
    parts.filter(|part| !part.is_empty()).map(str::to_string).collect()
}

fn strings(value: &Value, found: &mut Vec<String>) {
    match value {
        Value::String(text) => found.push(bare(text)),
        Value::Array(list) => list.iter().for_each(|value| strings(value, found)),
        Value::Object(fields) => fields.values().for_each(|value| strings(value, found)),
        Value::Number(number) => found.push(number.to_string()),
        Value::Null | Value::Bool(_) => {}
    }
}

#[test]
fn every_number_on_the_pages_stands_in_the_record() {
    for made in all() {
        let mut record = Vec::new();
        strings(&serde_json::to_value(&made.report).unwrap(), &mut record);
        let known: BTreeSet<String> = record.iter().flat_map(|text| numbers(text)).collect();
        for (index, page) in made.pages().iter().enumerate() {
            let own = format!("page {} of", index + 1);
            for text in texts(page).iter().filter(|text| !text.starts_with(&own)) {
                for number in numbers(text) {
                    assert!(known.contains(&number), "page {}: {number} in “{text}” is not in the record", index + 1);
                }
            }
        }
    }
}

/// The first bold text of a page below a height, for those that tell where a link leads.
fn first_below(page: &Scene, y_mm: f64) -> String {
    let bold = page.marks.iter().filter_map(|mark| match mark {
        Mark::Text(text) if text.face == Face::Bold && text.at.1 > y_mm => Some(text),
        _ => None,
    });
    let place = |text: &&TextMark| (text.at.1, text.at.0);
    let first = bold.min_by(|a, b| place(a).partial_cmp(&place(b)).unwrap());
    first.unwrap().runs.iter().map(|run| run.text.as_str()).collect()
}

/// The name in the sentence leads to the row that begins with it, and every row of the answer table to its own.
#[test]
fn links_to_readings_lead_to_their_rows() {
    for made in all() {
        let pages = made.guided(Paper::A4);
        let point = &made.report.points[made.report.answer_point];
        let named = point.rows.iter().map(|row| (sheet::spoken(&row.name), bare(&row.name)));
        let mut followed = 0;
        for (spoken, printed) in named {
            for link in pages.links.iter().filter(|link| link.page == 0 && link.words == spoken) {
                assert_eq!(first_below(&pages.scenes[link.to_page], link.to_y_mm), printed);
                followed += 1;
            }
        }
        assert!(followed >= made.report.verdict.named.len(), "{followed}");
    }
    let links = demo().guided(Paper::A4).links;
    assert_eq!(links.iter().filter(|link| link.page == 0 && link.words == "R_14,36").count(), 3, "{links:?}");
}

/// Links and bookmarks lie on pages, the bookmarks in reading order and each at a heading of its words.
#[test]
fn the_ways_through_a_sheet_end_where_they_say() {
    for (made, paper) in all().into_iter().flat_map(|made| [(made, Paper::A4)]) {
        let pages = made.guided(paper);
        let number = pages.scenes.len();
        for link in &pages.links {
            let [left, top, right, bottom] = link.sides_mm;
            assert!(left < right && top < bottom && right < paper.width_mm() && bottom < paper.height_mm(), "{link:?}");
            assert!(link.to_page < number && (0.0..paper.height_mm()).contains(&link.to_y_mm), "{link:?}");
        }
        let mut flat = Vec::new();
        flatten(&pages.bookmarks, &mut flat);
        assert!(flat.is_sorted_by_key(|bookmark| bookmark.page), "{flat:?}");
        let own = [&made.report.words.drawings, &made.report.words.chart];
        for bookmark in flat.iter().filter(|bookmark| bookmark.page > 0 && !own.contains(&&bookmark.title)) {
            let page = &pages.scenes[bookmark.page];
            let there = page.marks.iter().any(|mark| match mark {
                Mark::Text(text) => {
                    let words: String = text.runs.iter().map(|run| fonts::spoken(&run.text, run.level)).collect();
                    (0.0..12.0).contains(&(text.at.1 - bookmark.y_mm)) && bookmark.title.starts_with(&words)
                }
                Mark::Path(_) => false,
            });
            assert!(there || bookmark.title.starts_with("Expected"), "{bookmark:?}");
        }
        let titles: Vec<&str> = pages.bookmarks.iter().map(|bookmark| bookmark.title.as_str()).collect();
        for wanted in made.report.points.iter().map(|point| &point.title).chain([&made.report.words.provenance]) {
            assert!(titles.contains(&wanted.as_str()), "{titles:?}");
        }
    }
}

fn flatten<'a>(bookmarks: &'a [Bookmark], flat: &mut Vec<&'a Bookmark>) {
    for bookmark in bookmarks {
        flat.push(bookmark);
        flatten(&bookmark.children, flat);
    }
}

/// A text without its marks.
fn bare(marked: &str) -> String {
    marked.replace([report::LOWERED, report::RAISED, report::CLOSED], "")
}

/// What is left of the last page is for remarks: the sign-off stands at its foot.
#[test]
fn the_last_page_is_filled() {
    for made in all() {
        let pages = made.pages();
        let texts = pages.last().unwrap().marks.iter().filter_map(|mark| match mark {
            Mark::Text(text) => Some((text.at.1, text.runs.iter().map(|run| run.text.as_str()).collect::<String>())),
            Mark::Path(_) => None,
        });
        let sign_off = texts.filter(|(_, text)| *text == made.report.words.sign_off).map(|(y_mm, _)| y_mm);
        let foot = sign_off.fold(0.0, f64::max);
        assert!((240.0..260.0).contains(&foot), "{foot}");
    }
}

#[test]
fn every_number_of_the_tables_stands_on_the_pages_and_in_the_twin() {
    for made in all() {
        let printed: BTreeSet<String> = made.pages().iter().flat_map(texts).collect();
        let together: String = made.pages().iter().flat_map(texts).collect::<Vec<_>>().join(" ");
        let twin = sheet::html(&made.report, &[]).unwrap();
        for row in made.report.points.iter().flat_map(|point| &point.rows) {
            for cell in [&row.toward, &row.away] {
                for number in [&cell.expected, &cell.measured, &cell.in_u, &cell.in_1e6].into_iter().flatten() {
                    assert!(printed.contains(&number.text), "{} is not printed", number.text);
                    assert!(twin.contains(&number.text), "{} is not in the twin", number.text);
                }
                assert!(cell.exact.as_ref().is_none_or(|exact| together.contains(&exact.text)));
            }
        }
    }
}

/// h/e² = 25 812.807 459… Ω; a bar at 3 with 1 under its gate, signs as for electrons that run clockwise with the field
/// toward the reader: R_14,25 is 1/ν_g and 1/ν_g − 2/ν_b, R_14,36 is 2/ν_b − 1/ν_g and −1/ν_g.
#[test]
fn the_demo_says_what_a_tired_person_needs() {
    let report = demo().report;
    assert_eq!(
        spelled(&report.verdict.sentence),
        "13 of 14 readings agree. One does not: R_{14,36} with the field away."
    );
    assert_eq!(report.verdict.result, "disagrees");
    let worst = &report.points[0].rows[0];
    assert_eq!(spelled(&worst.name), "R_{14,36}");
    let text = |number: &Option<edgesheet::report::Printed>| number.as_ref().map(|number| number.text.clone());
    assert_eq!(text(&worst.toward.expected).as_deref(), Some("−8.6043"));
    assert_eq!(text(&worst.away.expected).as_deref(), Some("−25.8128"));
    assert_eq!(text(&worst.away.exact).as_deref(), Some("−1"));
    assert!(worst.away.odd && !worst.toward.odd);
    let captions: Vec<&str> = report.points[0].drawings.iter().map(|drawing| drawing.leads.as_str()).collect();
    assert_eq!(captions, ["I 1→4, V 2−5", "I 1→4, V 3−6"]);
    assert!(report.field_words.iter().any(|line| line.contains("V 2−6") && line.contains("it is positive")));
    assert!(report.verdict.not_tested.iter().any(|line| line.contains("reciprocity")));
}

#[test]
fn names_of_one_character_are_lowered_and_longer_ones_written_out() {
    let report = make(&two_gates(), None, Listed::Standard).report;
    assert!(report.points[0].rows[0].name.starts_with("R(source-left-end-east–"));
    assert_eq!(demo().report.points[0].rows.len(), 7);
}

#[test]
fn without_a_cooldown_nothing_is_called_usable_or_dated() {
    let report = make(DEVICE, None, Listed::Standard).report;
    assert_eq!(report.verdict.result, "not tested");
    assert!(report.verdict.sentence.starts_with("Expected values only"));
    assert_eq!(report.verdict.usable, ["nothing is shown to be usable yet"]);
    assert_eq!(report.identity.lines, ["expected values, no cooldown"]);
    let cells = report.points.iter().flat_map(|point| &point.rows).flat_map(|row| [&row.toward, &row.away]);
    assert!(cells.clone().all(|cell| cell.measured.is_none() && cell.judgement.is_none()));
    assert!(cells.count() > 0);
}

#[test]
fn the_twin_is_whole_and_fetches_nothing() {
    let twin = sheet::html(&demo().report, &[["<svg/>".to_string(), "<svg/>".to_string()]]).unwrap();
    assert!(twin.starts_with("<!DOCTYPE html>") && twin.trim_end().ends_with("</html>"));
    assert!(["src=", "href=", "url(", "@import", "<script"].iter().all(|word| !twin.contains(word)));
    assert_eq!(twin.matches("<svg/>").count(), 2);
    assert!(twin.contains("One does not: R<sub>14,36</sub> with the field away."));
}

#[test]
fn user_text_is_escaped_in_the_twin() {
    let device = DEVICE.replace("Top-gated Hall bar", "<b>bold</b> & co");
    let twin = sheet::html(&make(&device, None, Listed::Standard).report, &[]).unwrap();
    assert!(twin.contains("&lt;b&gt;bold&lt;") && !twin.contains("<b>bold"));
}

#[test]
fn the_same_inputs_give_the_same_pages() {
    assert!(demo().pages() == demo().pages());
    let record = || serde_json::to_string(&demo().report).unwrap();
    assert_eq!(record(), record());
}
