//! Why the readings that show one region alone do so: a paragraph for each, field toward on the left, away on the right.

use crate::report::AloneReading;
use crate::report::PointReport;
use crate::sheet::book::Book;
use crate::sheet::flow;
use crate::sheet::flow::Line;
use crate::sheet::grid;
use crate::sheet::grid::GUTTER_MM;
use crate::sheet::grid::HALF_MM;
use crate::sheet::grid::TEXT_MM;
use crate::sheet::typeset::Style;

/// All of a point; nothing where no reading shows a region alone.
pub fn draw(book: &mut Book, point: &PointReport) {
    let rows = rows(book, point);
    for (at, row) in rows.iter().enumerate() {
        let heading = if at == 0 { heading(book) } else { Vec::new() };
        let heading_mm = height_mm(&heading);
        book.turn_unless(heading_mm + row.iter().map(|column| height_mm(column)).fold(0.0, f64::max));
        book.lines(&heading);
        let top_mm = book.page.y_mm;
        for (side, column) in row.iter().enumerate() {
            book.page.y_mm = book.page.y_mm.max(column_end(book, (side, top_mm), column));
        }
    }
    book.page.y_mm += if rows.is_empty() { 0.0 } else { 4.0 };
}

/// Every region with its two columns, of which one may be empty.
fn rows(book: &Book, point: &PointReport) -> Vec<[Vec<Line>; 2]> {
    let words = &book.report.words;
    let row = |rule: &crate::report::AloneRule| {
        [(&rule.toward, &words.toward), (&rule.away, &words.away)]
            .map(|(reading, side)| reading.as_ref().map_or_else(Vec::new, |one| block(&rule.region, side, one)))
    };
    let all = point.alone.iter().map(row);
    all.filter(|row| row.iter().any(|column| !column.is_empty())).collect()
}

fn block(region: &str, side: &str, reading: &AloneReading) -> Vec<Line> {
    let mut lines = Vec::new();
    if let Some(why) = &reading.why {
        let (bold, small) = (Style::bold(grid::LEAST_PT), Style::text(grid::LEAST_PT));
        flow::paragraph(&mut lines, &format!("{region}, {side}: {}", reading.leads), (bold, HALF_MM), 1.4);
        flow::paragraph(&mut lines, why, (small, HALF_MM), 0.3);
    }
    lines
}

fn heading(book: &Book) -> Vec<Line> {
    let words = &book.report.words;
    let mut lines = Vec::new();
    flow::heading(&mut lines, &words.alone_why, TEXT_MM);
    flow::part(&mut lines, 0, (1, &words.alone_why));
    flow::paragraph(&mut lines, &words.alone_why_key, (Style::text(grid::LEAST_PT).grey(), TEXT_MM), 0.6);
    lines
}

fn height_mm(lines: &[Line]) -> f64 {
    lines.iter().map(Line::height_mm).sum()
}

/// Draws a column and gives where it ends.
fn column_end(book: &mut Book, (side, top_mm): (usize, f64), lines: &[Line]) -> f64 {
    let left_mm = book.page.paper.left_mm() + side as f64 * (HALF_MM + GUTTER_MM);
    let mut y_mm = top_mm;
    for line in lines {
        y_mm += line.height_mm();
        line.draw(&mut book.page, left_mm, y_mm);
    }
    y_mm
}
