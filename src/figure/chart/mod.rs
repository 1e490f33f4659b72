//! The chart of expected and measured readings at both polarities.
//!
//! Every reading has two places side by side: field toward the reader on the left, away on the right. What is expected is
//! a short line, what was measured a mark with its uncertainty: a filled disc toward, a ring away, a triangle where it
//! disagrees. Levels carry h/e² on the left and kΩ on the right.

mod canvas;
mod labels;

use plotters::coord::types::RangedCoordf64;
use plotters::prelude::Cartesian2d;
use plotters::prelude::ChartBuilder;
use plotters::prelude::ChartContext;
use plotters::prelude::Circle;
use plotters::prelude::Color;
use plotters::prelude::ErrorBar;
use plotters::prelude::IntoDrawingArea;
use plotters::prelude::PathElement;
use plotters::prelude::Polygon;
use plotters::prelude::RGBColor;
use plotters::prelude::ShapeStyle;

use crate::figure::chart::canvas::Canvas;
use crate::figure::chart::canvas::UNITS_PER_MM;
use crate::figure::scene::Run;
use crate::figure::scene::Scene;

/// What a chart shows: finished values only.
#[derive(Clone, Debug, PartialEq)]
pub struct Chart {
    /// Readings from left to right.
    pub readings: Vec<ChartReading>,
    /// Levels with their labels, in any order; where labels would touch, later ones stay away.
    pub levels: Vec<ChartLevel>,
    /// Size in mm.
    pub size_mm: (f64, f64),
}

/// One reading: the field toward the reader, then away.
#[derive(Clone, Debug, PartialEq)]
pub struct ChartReading {
    /// Its name.
    pub label: Vec<Run>,
    /// Both polarities.
    pub sides: [ChartSide; 2],
}

/// One reading at one polarity.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct ChartSide {
    /// What the meter should show, in kΩ.
    pub expected_kilo_ohm: Option<f64>,
    /// What was measured, each in kΩ with its standard uncertainty.
    pub measured: Vec<ChartPoint>,
}

/// One measured value.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ChartPoint {
    /// The value in kΩ.
    pub kilo_ohm: f64,
    /// Its standard uncertainty in kΩ; 0 where none is stated.
    pub u_kilo_ohm: f64,
    /// Whether it disagrees.
    pub disagrees: bool,
}

/// A level with its labels.
#[derive(Clone, Debug, PartialEq)]
pub struct ChartLevel {
    /// Where, in kΩ.
    pub kilo_ohm: f64,
    /// In h/e², on the left.
    pub h_per_e2: String,
    /// In kΩ, on the right.
    pub text: String,
}

/// Room for labels on the left, right, above and below the plot, in mm.
const LEFT_MM: f64 = 13.0;
const RIGHT_MM: f64 = 16.0;
const ABOVE_MM: f64 = 5.0;
const BELOW_MM: f64 = 6.0;

const INK: RGBColor = RGBColor(26, 26, 26);
const PALE: RGBColor = RGBColor(214, 214, 214);
const ODD: RGBColor = RGBColor(213, 94, 0);

/// Places of the two polarities within the width of one reading.
const PLACES: [f64; 2] = [0.32, 0.68];

type Plot<'a, 'b> = ChartContext<'a, Canvas<'b>, Cartesian2d<RangedCoordf64, RangedCoordf64>>;

/// Draws a chart; none where there is no value to draw.
pub fn draw_chart(chart: &Chart) -> Option<Scene> {
    let range = range(chart)?;
    let (width_mm, height_mm) = chart.size_mm;
    let mut marks = Vec::new();
    let size = ((width_mm * UNITS_PER_MM) as u32, (height_mm * UNITS_PER_MM) as u32);
    let area = Canvas { size, marks: &mut marks }.into_drawing_area();
    let mut plot = ChartBuilder::on(&area)
        .margin_left(LEFT_MM * UNITS_PER_MM)
        .margin_right(RIGHT_MM * UNITS_PER_MM)
        .margin_top(ABOVE_MM * UNITS_PER_MM)
        .margin_bottom(BELOW_MM * UNITS_PER_MM)
        .build_cartesian_2d(0.0..chart.readings.len() as f64, range.0..range.1)
        .ok()?;
    draw_levels(&mut plot, chart)?;
    for (at, reading) in chart.readings.iter().enumerate() {
        for (side, place) in reading.sides.iter().zip(PLACES) {
            draw_side(&mut plot, side, at as f64 + place)?;
        }
    }
    let spots = labels::Spots::of(&plot, chart);
    drop(plot);
    drop(area);
    labels::append(&mut marks, chart, &spots);
    Some(Scene { width_mm, height_mm, marks })
}

/// All values with their uncertainties and a margin: what lies outside would be drawn on the rim.
fn range(chart: &Chart) -> Option<(f64, f64)> {
    let sides = chart.readings.iter().flat_map(|reading| &reading.sides);
    let values = sides.flat_map(|side| {
        let measured = side.measured.iter().flat_map(|m| [m.kilo_ohm - m.u_kilo_ohm, m.kilo_ohm + m.u_kilo_ohm]);
        side.expected_kilo_ohm.into_iter().chain(measured)
    });
    let (low, high) = values.fold(None, |range: Option<(f64, f64)>, value| {
        Some(range.map_or((value, value), |(low, high)| (low.min(value), high.max(value))))
    })?;
    let (low, high) = (low.min(0.0), high.max(0.0));
    let margin = 0.06 * (high - low).max(1e-3);
    Some((low - margin, high + margin))
}

fn pen(colour: RGBColor, width_mm: f64) -> ShapeStyle {
    colour.stroke_width((width_mm * UNITS_PER_MM) as u32)
}

fn draw_levels(plot: &mut Plot, chart: &Chart) -> Option<()> {
    let end = chart.readings.len() as f64;
    let line = |level: &ChartLevel| {
        let style = pen(if level.kilo_ohm == 0.0 { INK } else { PALE }, 0.12);
        PathElement::new(vec![(0.0, level.kilo_ohm), (end, level.kilo_ohm)], style)
    };
    plot.draw_series(chart.levels.iter().map(line)).ok().map(drop)
}

fn draw_side(plot: &mut Plot, side: &ChartSide, x: f64) -> Option<()> {
    let expected = side.expected_kilo_ohm.into_iter();
    let line = expected.map(|y| PathElement::new(vec![(x - 0.15, y), (x + 0.15, y)], pen(INK, 0.3)));
    plot.draw_series(line).ok()?;
    for point in &side.measured {
        draw_point(plot, point, x)?;
    }
    Some(())
}

fn draw_point(plot: &mut Plot, point: &ChartPoint, x: f64) -> Option<()> {
    let (y, u) = (point.kilo_ohm, point.u_kilo_ohm);
    let bar = ErrorBar::new_vertical(x, y - u, y, y + u, pen(INK, 0.15), (0.8 * UNITS_PER_MM) as u32);
    plot.draw_series((u > 0.0).then_some(bar)).ok()?;
    let toward = x.fract() < 0.5;
    match (point.disagrees, toward) {
        (true, _) => plot.draw_series([triangle(plot, (x, y))]).ok().map(drop),
        (false, true) => plot.draw_series([Circle::new((x, y), radius(0.65), INK.filled())]).ok().map(drop),
        (false, false) => {
            let disc = Circle::new((x, y), radius(0.65), RGBColor(255, 255, 255).filled());
            plot.draw_series([disc, Circle::new((x, y), radius(0.65), pen(INK, 0.25))]).ok().map(drop)
        }
    }
}

fn radius(mm: f64) -> f64 {
    mm * UNITS_PER_MM
}

/// A triangle of fixed size on the paper, wherever it stands.
fn triangle(plot: &Plot, (x, y): (f64, f64)) -> Polygon<(f64, f64)> {
    let spot = |x, y| plot.backend_coord(&(x, y));
    let ((x0, y0), (x1, y1)) = (spot(0.0, 0.0), spot(1.0, 1.0));
    let per_mm = (UNITS_PER_MM / f64::from(x1 - x0), UNITS_PER_MM / f64::from(y0 - y1));
    let corner = |dx: f64, dy: f64| (x + dx * per_mm.0, y + dy * per_mm.1);
    Polygon::new(vec![corner(-1.1, -0.8), corner(1.1, -0.8), corner(0.0, 1.2)], ODD.filled())
}
