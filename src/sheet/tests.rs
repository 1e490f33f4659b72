//! Pages composed from hand-made reports.

use crate::figure::scene::Scene;
use crate::sheet::Paper;
use crate::sheet::compose;
use crate::sheet::grid;
use crate::sheet::overlap;
use crate::sheet::sample::Sample;
use crate::sheet::typeset;

const SAMPLES: [Sample; 9] = [
    Sample::PLAIN,
    Sample { points: 6, readings: 400, ..Sample::PLAIN },
    Sample { name_letters: 20, ..Sample::PLAIN },
    Sample { points: 6, readings: 40, name_letters: 20, formulas: false, ..Sample::PLAIN },
    Sample { measured: false, ..Sample::PLAIN },
    Sample { measured: false, readings: 400, formulas: false, ..Sample::PLAIN },
    Sample { measured: false, readings: 90, name_letters: 20, points: 6, ..Sample::PLAIN },
    Sample { decimals: 9, ..Sample::PLAIN },
    Sample { readings: 0, ..Sample::PLAIN },
];

fn pages(sample: Sample, paper: Paper) -> Vec<Scene> {
    compose(&sample.report(), &sample.drawings(), paper).scenes
}

#[test]
fn nothing_overlaps_or_leaves_the_page() {
    for (sample, paper) in SAMPLES.into_iter().flat_map(|sample| [(sample, Paper::A4), (sample, Paper::Letter)]) {
        for (number, page) in pages(sample, paper).iter().enumerate() {
            let faults = overlap::faults(page);
            assert!(faults.is_empty(), "{sample:?} on {paper:?}, page {}:\n{}", number + 1, faults.join("\n"));
        }
    }
}

/// The helper itself: two texts moved onto one another, and one moved off the page, are found.
#[test]
fn overlaps_are_found() {
    let mut page = pages(Sample::PLAIN, Paper::A4).remove(0);
    let second = overlap::texts(&page).nth(1).map(|(mark, _)| mark.at);
    let texts = page.marks.iter_mut().filter_map(|mark| match mark {
        crate::figure::scene::Mark::Text(text) => Some(text),
        crate::figure::scene::Mark::Path(_) => None,
    });
    let mut texts: Vec<_> = texts.collect();
    texts[0].at = second.unwrap();
    texts[5].at.1 = -3.0;
    let faults = overlap::faults(&page).join("\n");
    assert!(faults.contains("overlaps") && faults.contains("leaves the page"), "{faults}");
}

#[test]
fn no_text_is_smaller_than_seven_points() {
    for sample in SAMPLES {
        for page in pages(sample, Paper::A4) {
            assert!(overlap::texts(&page).all(|(mark, _)| mark.size_pt >= grid::LEAST_PT));
        }
    }
}

#[test]
fn every_page_names_device_and_page_and_the_last_one_ends() {
    for sample in SAMPLES {
        let pages = pages(sample, Paper::A4);
        let count = pages.len();
        for (index, page) in pages.iter().enumerate() {
            let texts: Vec<String> = overlap::texts(page).map(|(_, text)| text).collect();
            let page_text = format!("page {} of {count}", index + 1);
            assert!(texts.iter().any(|text| text.starts_with(&page_text)), "{page_text}");
            assert!(texts.iter().any(|text| text == "characterisation sheet, not a calibration certificate"));
            assert!(texts.iter().filter(|text| text.starts_with("WWW")).count() >= 2, "head and foot");
        }
        let lowest = overlap::texts(&pages[count - 1])
            .max_by(|a, b| (a.0.at.1, a.0.at.0).partial_cmp(&(b.0.at.1, b.0.at.0)).unwrap());
        assert!(lowest.unwrap().1.ends_with("end of sheet"));
    }
}

/// Nothing that the report says is lost on the way, however it is broken into lines.
#[test]
fn every_reading_and_every_caution_is_printed() {
    for sample in SAMPLES {
        let report = sample.report();
        let pages = pages(sample, Paper::A4);
        let all: String = pages.iter().skip(1).flat_map(|page| overlap::texts(page).map(|(_, text)| text)).collect();
        let bare = |text: &str| text.chars().filter(|c| !c.is_whitespace()).collect::<String>();
        let all = bare(&all);
        let count = |text: &str| all.matches(&bare(&typeset::plain(text))).count();
        let rows = report.points.iter().flat_map(|point| &point.rows);
        for cell in rows.flat_map(|row| [&row.toward, &row.away]) {
            for printed in [&cell.exact, &cell.expected, &cell.measured, &cell.in_u, &cell.in_1e6].into_iter().flatten()
            {
                assert!(count(&printed.text) > 0, "{}", printed.text);
            }
        }
        assert!(count(&report.rules[0]) >= 4 && count(&report.limits[3]) >= 4);
        assert!(report.provenance.inputs.iter().all(|input| count(&input.sha256) >= 3 && count(&input.name) >= 3));
    }
}

#[test]
fn decimal_points_of_a_column_have_one_place() {
    let pages = pages(Sample { readings: 30, ..Sample::PLAIN }, Paper::A4);
    let mut places: Vec<f64> = Vec::new();
    for (mark, text) in overlap::texts(&pages[1]).filter(|(_, text)| text.starts_with("−25.") && !text.contains('('))
    {
        let before = crate::figure::fonts::advance_mm(mark.face, mark.size_pt, &text[..text.find('.').unwrap()]);
        places.push(mark.at.0 + before);
    }
    places.sort_by(f64::total_cmp);
    places.dedup_by(|a, b| (*a - *b).abs() < 1e-9);
    assert_eq!(places.len(), 2, "one per polarity: {places:?}");
}

#[test]
fn a_long_table_repeats_its_head_on_every_page() {
    let pages = pages(Sample { readings: 400, ..Sample::PLAIN }, Paper::A4);
    // The names in the table of readings are bold, those in small tables and charts are not.
    let bold = |mark: &crate::figure::scene::TextMark| mark.face == crate::figure::fonts::Face::Bold;
    let named = |page: &Scene| overlap::texts(page).any(|(mark, text)| bold(mark) && text.starts_with("R14,"));
    let with_rows = pages[1..].iter().filter(|page| named(page));
    let heads = with_rows.clone().filter(|page| overlap::texts(page).any(|(_, text)| text == "measured"));
    assert!(with_rows.clone().count() > 4);
    assert_eq!(with_rows.count(), heads.count());
}

#[test]
fn a_column_that_is_cut_stands_whole_at_the_end() {
    let sample = Sample { points: 6, ..Sample::PLAIN };
    let pages = pages(sample, Paper::A4);
    let first: Vec<String> = overlap::texts(&pages[0]).map(|(_, text)| text).collect();
    assert!(first.iter().any(|text| text.contains(" more, in full on page ")));
    let rest = || pages[1..].iter().flat_map(|page| overlap::texts(page).map(|(_, text)| text));
    assert!(rest().any(|text| text == "From the first page, in full"));
}

#[test]
fn without_a_reading_or_a_drawing_there_is_still_a_sheet() {
    let sample = Sample { readings: 0, ..Sample::PLAIN };
    let mut report = sample.report();
    report.points.clear();
    let pages = compose(&report, &[], Paper::A4).scenes;
    assert!(pages.iter().all(|page| overlap::faults(page).is_empty()));
}
