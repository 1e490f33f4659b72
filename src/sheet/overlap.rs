//! Finds texts that overlap one another or leave the page, for tests.

use crate::figure::fonts;
use crate::figure::scene::Mark;
use crate::figure::scene::Scene;
use crate::figure::scene::TextMark;

/// A text with the box that its letters fill: left, top, right, bottom in mm.
struct Filled {
    text: String,
    sides: [f64; 4],
}

/// What is wrong with a page, in words; empty where nothing is.
pub fn faults(page: &Scene) -> Vec<String> {
    let boxes: Vec<Filled> = page.marks.iter().filter_map(filled).collect();
    let limits = [14.0, 10.0, page.width_mm - 14.0, page.height_mm - 10.0];
    let outside = boxes.iter().filter(|one| {
        let [left, top, right, bottom] = one.sides;
        left < limits[0] || top < limits[1] || right > limits[2] || bottom > limits[3]
    });
    let mut faults: Vec<String> =
        outside.map(|one| format!("“{}” leaves the page: {:?}", one.text, one.sides)).collect();
    for (index, one) in boxes.iter().enumerate() {
        let others = boxes[index + 1..].iter().filter(|other| overlap(&one.sides, &other.sides));
        faults.extend(others.map(|other| format!("“{}” overlaps “{}”", one.text, other.text)));
    }
    faults
}

/// Whether two boxes share more than a hair.
fn overlap(a: &[f64; 4], b: &[f64; 4]) -> bool {
    const HAIR_MM: f64 = 0.05;
    a[0] + HAIR_MM < b[2] && b[0] + HAIR_MM < a[2] && a[1] + HAIR_MM < b[3] && b[1] + HAIR_MM < a[3]
}

fn filled(mark: &Mark) -> Option<Filled> {
    let Mark::Text(mark) = mark else { return None };
    let pieces = fonts::pieces(mark);
    let left = pieces.iter().map(|piece| piece.x_mm).fold(f64::INFINITY, f64::min) + mark.at.0;
    let tail_mm = |size_pt: f64| 0.22 * size_pt * fonts::MM_PER_PT;
    let top =
        pieces.iter().map(|piece| piece.rise_mm + fonts::cap_height_mm(mark.face, piece.size_pt)).fold(0.0, f64::max);
    let low = pieces.iter().map(|piece| tail_mm(piece.size_pt) - piece.rise_mm).fold(0.0, f64::max);
    let text: String = mark.runs.iter().map(|run| run.text.as_str()).collect();
    Some(Filled { text, sides: [left, mark.at.1 - top, left + fonts::width_of(mark), mark.at.1 + low] })
}

/// The texts of a page with their marks.
pub fn texts(page: &Scene) -> impl Iterator<Item = (&TextMark, String)> {
    let text = |mark: &'_ TextMark| mark.runs.iter().map(|run| run.text.as_str()).collect::<String>();
    page.marks.iter().filter_map(move |mark| match mark {
        Mark::Text(mark) => Some((mark, text(mark))),
        Mark::Path(_) => None,
    })
}
