//! Which rows of a table its charts show.

use serde::Serialize;

use crate::diagnostic::Diagnostic;
use crate::report::Texts;

/// Most readings of one chart: their names stand side by side.
const PER_CHART: usize = 18;
/// Most charts of one point.
const CHARTS: usize = 2;

/// First row and number of rows of every chart; the readings are shared out evenly.
pub fn ranges(rows: usize) -> Vec<[usize; 2]> {
    let shown = rows.min(CHARTS * PER_CHART);
    let charts = shown.div_ceil(PER_CHART);
    let start = |chart: usize| chart * shown / charts;
    (0..charts).map(|chart| [start(chart), start(chart + 1) - start(chart)]).collect()
}

/// What the marks mean, and how many rows no chart shows.
pub fn notes(charts: &[[usize; 2]], rows: usize, texts: &Texts) -> Result<Vec<String>, Diagnostic> {
    let shown = charts.iter().map(|[_, count]| count).sum();
    if shown == 0 { Ok(Vec::new()) } else { texts.lines("chart.txt", &ChartFields { shown, rows }) }
}

#[derive(Serialize)]
struct ChartFields {
    shown: usize,
    rows: usize,
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn charts_share_the_readings_evenly_and_stop_at_two() {
        for (rows, charts) in [
            (0, vec![]),
            (7, vec![[0, 7]]),
            (18, vec![[0, 18]]),
            (19, vec![[0, 9], [9, 10]]),
            (36, vec![[0, 18], [18, 18]]),
            (400, vec![[0, 18], [18, 18]]),
        ] {
            assert_eq!(ranges(rows), charts, "{rows}");
        }
    }
}
