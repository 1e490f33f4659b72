//! What a written PDF must hold to, read back.

use lopdf::Document;

use super::*;
use crate::figure::fonts::Face;
use crate::figure::fonts::file;
use crate::figure::fonts::width_of;
use crate::figure::scene::Anchor;
use crate::figure::scene::Colour;
use crate::figure::scene::Level;
use crate::figure::scene::Mark;
use crate::figure::scene::PathMark;
use crate::figure::scene::Role;
use crate::figure::scene::Run;
use crate::figure::scene::Segment;
use crate::figure::scene::Stroke;
use crate::figure::scene::TextMark;

mod outlines;
mod reading;
mod whole;

use reading::Shown;
use reading::embedded;
use reading::shown_texts;

const INK: Colour = Colour(20, 20, 20);

fn text_mark(at: (f64, f64), face: Face, runs: &[(&str, Level)]) -> TextMark {
    let runs = runs.iter().map(|&(text, level)| Run { text: text.into(), level }).collect();
    TextMark { at, anchor: Anchor::Start, size_pt: 8.5, face, colour: INK, runs, role: Role::Plain }
}

fn page(width_mm: f64, height_mm: f64, marks: Vec<Mark>) -> Scene {
    Scene { width_mm, height_mm, marks }
}

fn a4(marks: Vec<Mark>) -> Scene {
    page(210.0, 297.0, marks)
}

fn ring(stroke: Option<Stroke>) -> Mark {
    let corners = |low: f64, high: f64| {
        let line = [(high, low), (high, high), (low, high)].map(Segment::Line);
        [vec![Segment::Move((low, low))], line.to_vec(), vec![Segment::Close]].concat()
    };
    let segments = [corners(20.0, 90.0), corners(40.0, 70.0)].concat();
    Mark::Path(PathMark { segments, stroke, fill: Some(Colour(240, 240, 238)), role: Role::Scenery })
}

/// Page with a table of 40 rows in all faces: what a sheet is mostly made of.
fn table_page() -> Scene {
    let faces = [Face::Bold, Face::Regular, Face::Italic, Face::BoldItalic];
    let cell = |row: usize, column: usize| {
        let value = format!("−{}.{:04}", row + column, (row * 7919 + column * 104_729) % 10_000);
        let at = (18.0 + 20.0 * column as f64, 40.0 + 5.0 * row as f64);
        let runs = [("R", Level::Normal), ("14,25", Level::Sub), (&value, Level::Normal), ("2", Level::Super)];
        Mark::Text(text_mark(at, faces[column % 4], &runs))
    };
    a4((0..40).flat_map(|row| (0..8).map(move |column| (row, column))).map(|(row, column)| cell(row, column)).collect())
}

fn document(pages: Vec<Scene>) -> PdfDocument {
    PdfDocument { pages, title: "KR-0417".into(), language: "en-GB".into(), ..Default::default() }
}

fn read(document: &PdfDocument) -> Document {
    Document::load_mem(&pdf(document)).expect("a PDF that can be read")
}

#[test]
fn fonts_are_embedded_and_cut() {
    let file_of =
        read(&document(vec![a4(vec![Mark::Text(text_mark((20.0, 20.0), Face::Bold, &[("kΩ", Level::Normal)]))])]));
    let embedded = embedded(&file_of);
    assert_eq!(embedded.len(), 1);
    let (tag, face) = embedded[0].name.split_once('+').expect("a tag");
    assert!(tag.len() == 6 && tag.bytes().all(|byte| byte.is_ascii_uppercase()), "{tag}");
    // Capitals of Noto Sans are 1462 of 2048 units high (read from the file with another tool).
    assert_eq!((face, embedded[0].cap_height), ("NotoSans-Bold", 714));
    let program = &embedded[0].program;
    assert!(program.len() < file(Face::Bold).len() / 20, "{} bytes", program.len());
    let cut = ttf_parser::Face::parse(program, 0).expect("a font");
    // The mark for missing characters, k and Ω.
    assert_eq!(cut.number_of_glyphs(), 3);
}

/// A digit drawn as another would be the worst fault of all: outlines are compared with those of the whole face, whose
/// own table of characters says which is which.
#[test]
fn every_character_is_drawn_as_itself() {
    for face in Face::ALL {
        let text = "0123456789+−±.,()/kΩνµ²½ÄéRTG";
        let page = a4(vec![Mark::Text(text_mark((20.0, 20.0), face, &[(text, Level::Normal)]))]);
        let file_of = read(&document(vec![page]));
        let cut = &embedded(&file_of)[0].program;
        let whole = ttf_parser::Face::parse(file(face), 0).expect("a font");
        let codes = reading::codes(&file_of);
        assert_eq!(codes.len(), text.chars().count());
        for (code, character) in codes {
            let glyph = character.chars().next().and_then(|character| whole.glyph_index(character)).expect("a glyph");
            let outline = outlines::outline_of(cut, code);
            assert!(
                !outline.is_empty() && outline == outlines::outline_of(file(face), glyph.0),
                "{face:?} {character}"
            );
        }
    }
}

#[test]
fn text_comes_out_in_reading_order_as_it_went_in() {
    let lines = [
        vec![("ν Ω − ± × · → ° µ ² ³ ½ ∞ ≤ ≥ ℓ φ Δ √ … ÄÖÜ", Level::Normal)],
        vec![
            ("= h/(ν", Level::Normal),
            ("TG", Level::Sub),
            (" e", Level::Normal),
            ("2", Level::Super),
            (") = 1", Level::Normal),
        ],
        vec![("(a) \\ 100 %", Level::Normal)],
    ];
    let marks = Face::ALL.into_iter().zip(lines.iter().cycle());
    let marks = marks.map(|(face, runs)| Mark::Text(text_mark((20.0, 20.0), face, runs))).collect();
    let shown = shown_texts(&read(&document(vec![a4(marks)])));
    let put_in = lines.iter().cycle().take(4).map(|runs| runs.iter().map(|run| run.0).collect::<String>());
    assert_eq!(shown.iter().map(|shown| shown.text.clone()).collect::<Vec<_>>(), put_in.collect::<Vec<_>>());
}

/// At 8.5 pt a subscript is 6.12 pt and 1.36 pt low, a superscript 2.89 pt high; the next line is level again.
#[test]
fn lowered_and_raised_text_stands_where_it_should() {
    let runs = [("ν", Level::Normal), ("TG", Level::Sub), ("2", Level::Super)];
    let lines = [text_mark((20.0, 20.0), Face::Regular, &runs), text_mark((20.0, 30.0), Face::Regular, &runs[..1])];
    let operators = reading::operators(&read(&document(vec![a4(lines.map(Mark::Text).to_vec())])));
    let rises: Vec<&String> = operators.iter().filter(|operator| operator.ends_with(" Ts")).collect();
    assert_eq!(rises, ["-1.36 Ts", "2.89 Ts", "0 Ts"]);
    let sizes =
        operators.iter().filter(|operator| operator.ends_with(" Tf")).map(|operator| operator.split(' ').nth(1));
    assert_eq!(sizes.collect::<Vec<_>>(), [Some("8.5"), Some("7"), Some("8.5")]);
}

/// Each level is told in the text that is copied: without it 10⁻⁶ would come out as 10−6.
#[test]
fn levels_are_told_to_whom_cannot_see_them() {
    let runs = [("R", Level::Normal), ("14,25", Level::Sub), (" 10", Level::Normal), ("−6", Level::Super)];
    let file = read(&document(vec![a4(vec![Mark::Text(text_mark((20.0, 20.0), Face::Regular, &runs))])]));
    assert_eq!(reading::spoken(&file), ["_14,25", "⁻⁶"]);
    let operators = reading::operators(&file);
    let count = |key: &str| operators.iter().filter(|operator| operator.ends_with(key)).count();
    assert_eq!((count("BDC"), count("EMC"), count("Tj")), (2, 2, 4));
}

#[test]
fn characters_without_a_glyph_are_spelled() {
    let mark = text_mark((20.0, 20.0), Face::Regular, &[("中 10⁻³ H₂O\u{1}", Level::Normal)]);
    let shown = shown_texts(&read(&document(vec![a4(vec![Mark::Text(mark)])])));
    assert_eq!(shown[0].text, "U+4E2D 10−3 H2OU+0001");
}

/// The viewer's pen goes by /W, the layout by `width_of`; the outlines by the advances in the embedded program.
#[test]
fn the_viewers_pen_ends_where_the_layout_ends() {
    for face in Face::ALL {
        let mut mark = text_mark(
            (192.0, 50.0),
            face,
            &[("R", Level::Normal), ("14,36", Level::Sub), (" −8.6043 kΩ", Level::Normal)],
        );
        mark.anchor = Anchor::End;
        let width_pt = width_of(&mark) / 25.4 * 72.0;
        let shown: Vec<Shown> = shown_texts(&read(&document(vec![a4(vec![Mark::Text(mark)])])));
        assert!((shown[0].width_pt - width_pt).abs() < 1e-3, "{face:?} {} {width_pt}", shown[0].width_pt);
        assert!((shown[0].start_pt.0 + width_pt - 192.0 / 25.4 * 72.0).abs() < 1e-3, "{face:?}");
        assert!((shown[0].start_pt.1 - (297.0 - 50.0) / 25.4 * 72.0).abs() < 1e-3, "{face:?}");
        assert!(shown[0].worst_advance_error <= 0.5, "{face:?} {}", shown[0].worst_advance_error);
    }
}

#[test]
fn pages_have_their_size_and_no_images() {
    let letter_mm = (8.5 * 25.4, 11.0 * 25.4);
    let file = read(&document(vec![a4(vec![ring(None)]), page(letter_mm.0, letter_mm.1, vec![])]));
    let pages: Vec<_> = file.get_pages().into_values().collect();
    // A4 is 210 mm × 297 mm (ISO 216), US Letter 8.5 in × 11 in; a point is 1/72 in.
    for (page, (width, height)) in pages.iter().zip([(595.276, 841.890), (612.0, 792.0)]) {
        let media = file.get_dictionary(*page).and_then(|page| page.get(b"MediaBox")).and_then(Object::as_array);
        let media: Vec<f32> = media.expect("a box").iter().map(|side| side.as_float().expect("a number")).collect();
        assert!(
            media[0] == 0.0 && media[1] == 0.0 && (media[2] - width).abs() < 1e-3 && (media[3] - height).abs() < 1e-3
        );
    }
    assert_eq!(pages.len(), 2);
    let is_image = |object: &Object| {
        let kind = object.as_stream().and_then(|stream| stream.dict.get(b"Subtype")).and_then(Object::as_name);
        kind.is_ok_and(|kind| kind == b"Image")
    };
    assert!(!file.objects.values().any(is_image));
}

#[test]
fn areas_with_holes_and_dashed_lines_are_drawn() {
    let stroke = Stroke { colour: INK, width_mm: 0.5, dash_mm: vec![1.0, 0.5] };
    let solid = Stroke { dash_mm: vec![0.0, 0.0], ..stroke.clone() };
    let operators = |stroke| reading::operators(&read(&document(vec![a4(vec![ring(Some(stroke))])])));
    let dashed = operators(stroke);
    assert!(dashed.contains(&"[2.835 1.417] 0 d".to_string()), "{dashed:?}");
    assert_eq!(dashed.iter().filter(|operator| operator.as_str() == "h").count(), 2);
    assert_eq!(dashed.last().map(String::as_str), Some("B*"));
    assert!(operators(solid).iter().all(|operator| !operator.ends_with(" d")));
}

#[test]
fn odd_scenes_still_give_a_sound_file() {
    let stroke = || Some(Stroke { colour: INK, width_mm: f64::NAN, dash_mm: vec![f64::INFINITY, -1.0] });
    let path = |segments| Mark::Path(PathMark { segments, stroke: stroke(), fill: None, role: Role::Plain });
    let marks = vec![
        path(vec![]),
        path(vec![Segment::Close, Segment::Line((f64::NAN, f64::NEG_INFINITY))]),
        path(vec![Segment::Cubic((1.0, 1.0), (2.0, 2.0), (3.0, 3.0))]),
        Mark::Text(text_mark((f64::NAN, 1e300), Face::Regular, &[("", Level::Normal), ("x", Level::Super)])),
        Mark::Text(text_mark((1.0, 1.0), Face::Bold, &[])),
    ];
    let file = read(&document(vec![a4(marks)]));
    assert!(reading::operators(&file).iter().all(|operator| !operator.contains("NaN") && !operator.contains("inf")));
    assert_eq!(read(&document(vec![])).get_pages().len(), 0);
}

/// The limit leaves room for the attachments of a sheet, whose own limit is 300 kB.
#[test]
fn two_full_pages_in_all_faces_stay_small() {
    let bytes = pdf(&document(vec![table_page(), table_page()])).len();
    assert!(bytes < 120_000, "{bytes} bytes");
}
