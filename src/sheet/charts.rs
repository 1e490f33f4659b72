//! The charts of a point, from the rows of its table.

use crate::figure::Chart;
use crate::figure::ChartLevel;
use crate::figure::ChartPoint;
use crate::figure::ChartReading;
use crate::figure::ChartSide;
use crate::figure::draw_chart;
use crate::figure::scene::Level;
use crate::figure::scene::Run;
use crate::figure::scene::Scene;
use crate::report::Cell;
use crate::report::PointReport;
use crate::report::TableRow;
use crate::sheet::grid;
use crate::sheet::typeset;
use crate::sheet::typeset::Style;

/// Height of a chart.
pub const HEIGHT_MM: f64 = 62.0;
/// A chart is made lower where a page is filled by it, down to this: its marks still stand apart.
pub const LEAST_HEIGHT_MM: f64 = 36.0;
/// Width of the names of all readings together.
const NAMES_MM: f64 = 140.0;

/// One scene per chart of the point, at its usual height.
pub fn scenes(point: &PointReport) -> Vec<Scene> {
    (0..point.charts.len()).filter_map(|at| scene(point, at, HEIGHT_MM)).collect()
}

/// One chart of the point at a height in mm; none where it has no value to draw.
pub fn scene(point: &PointReport, at: usize, height_mm: f64) -> Option<Scene> {
    draw_chart(&chart(point, *point.charts.get(at)?, height_mm))
}

/// Whether places in the table stand for the names of readings: long ones would touch.
pub fn is_numbered(point: &PointReport) -> bool {
    let style = Style::text(grid::SMALL_PT);
    let widest_mm = point.rows.iter().map(|row| style.width_mm(&row.name)).fold(0.0, f64::max);
    point.charts.iter().any(|[_, count]| widest_mm + 1.5 > NAMES_MM / *count as f64)
}

fn chart(point: &PointReport, [first, count]: [usize; 2], height_mm: f64) -> Chart {
    let rows = &point.rows[first..first + count];
    let numbered = is_numbered(point);
    let label = |row: &TableRow| match numbered {
        false => typeset::runs(&row.name),
        true => vec![Run { text: row.place.to_string(), level: Level::Normal }],
    };
    let reading = |row: &TableRow| ChartReading { label: label(row), sides: [side(&row.toward), side(&row.away)] };
    Chart { readings: rows.iter().map(reading).collect(), levels: levels(rows), size_mm: (grid::TEXT_MM, height_mm) }
}

fn side(cell: &Cell) -> ChartSide {
    let point = |measured: &crate::report::Printed| ChartPoint {
        kilo_ohm: measured.value,
        u_kilo_ohm: measured.u.unwrap_or(0.0),
        disagrees: cell.odd,
    };
    ChartSide {
        expected_kilo_ohm: cell.expected.as_ref().map(|expected| expected.value),
        measured: cell.measured.as_ref().map(point).into_iter().collect(),
    }
}

/// The distinct exact values of the device.
fn levels(rows: &[TableRow]) -> Vec<ChartLevel> {
    let mut levels: Vec<ChartLevel> = Vec::new();
    for cell in rows.iter().flat_map(|row| [&row.toward, &row.away]) {
        if let (Some(exact), Some(device)) = (&cell.exact, &cell.device)
            && !levels.iter().any(|level| level.h_per_e2 == exact.text)
        {
            let (h_per_e2, text) = (exact.text.clone(), device.text.clone());
            levels.push(ChartLevel { kilo_ohm: device.value, h_per_e2, text });
        }
    }
    levels
}
