//! Names below the plot, levels at its sides, set with our own measuring.

use crate::figure::chart::Chart;
use crate::figure::chart::Plot;
use crate::figure::chart::canvas::UNITS_PER_MM;
use crate::figure::fonts::Face;
use crate::figure::scene::Anchor;
use crate::figure::scene::At;
use crate::figure::scene::Colour;
use crate::figure::scene::Level;
use crate::figure::scene::Mark;
use crate::figure::scene::Role;
use crate::figure::scene::Run;
use crate::figure::scene::TextMark;

const SIZE_PT: f64 = 7.5;
const INK: Colour = Colour(26, 26, 26);
const GREY: Colour = Colour(110, 110, 110);

/// Levels nearer than this would have labels that touch, in mm.
const APART_MM: f64 = 3.0;

/// Where things stand on the paper, in mm.
pub(super) struct Spots {
    /// Middle of every reading.
    readings: Vec<f64>,
    /// Height of every level.
    levels: Vec<f64>,
    left: f64,
    right: f64,
    below: f64,
    above: f64,
}

impl Spots {
    pub fn of(plot: &Plot, chart: &Chart) -> Self {
        let spot = |x: f64, y: f64| plot.backend_coord(&(x, y));
        let mm = |units: i32| f64::from(units) / UNITS_PER_MM;
        let end = chart.readings.len() as f64;
        let y_range = plot.y_range();
        Self {
            readings: (0..chart.readings.len()).map(|at| mm(spot(at as f64 + 0.5, 0.0).0)).collect(),
            levels: chart.levels.iter().map(|level| mm(spot(0.0, level.kilo_ohm).1)).collect(),
            left: mm(spot(0.0, 0.0).0),
            right: mm(spot(end, 0.0).0),
            below: mm(spot(0.0, y_range.start).1),
            above: mm(spot(0.0, y_range.end).1),
        }
    }
}

pub(super) fn append(marks: &mut Vec<Mark>, chart: &Chart, spots: &Spots) {
    let mut taken: Vec<f64> = Vec::new();
    for (level, &y) in chart.levels.iter().zip(&spots.levels) {
        if taken.iter().all(|other| (other - y).abs() >= APART_MM) {
            taken.push(y);
            let base = y + 0.95;
            marks.push(text((spots.left - 1.5, base), Anchor::End, INK, plain(&level.h_per_e2)));
            marks.push(text((spots.right + 1.5, base), Anchor::Start, INK, plain(&level.text)));
        }
    }
    for (reading, &x) in chart.readings.iter().zip(&spots.readings) {
        marks.push(text((x, spots.below + 4.2), Anchor::Middle, INK, reading.label.clone()));
    }
    marks.push(text((spots.left - 1.5, spots.above - 1.8), Anchor::End, GREY, plain("h/e²")));
    marks.push(text((spots.right + 1.5, spots.above - 1.8), Anchor::Start, GREY, plain("kΩ")));
}

fn plain(words: &str) -> Vec<Run> {
    vec![Run { text: words.to_owned(), level: Level::Normal }]
}

fn text(at: At, anchor: Anchor, colour: Colour, runs: Vec<Run>) -> Mark {
    Mark::Text(TextMark { at, anchor, size_pt: SIZE_PT, face: Face::Regular, colour, runs, role: Role::Label })
}
