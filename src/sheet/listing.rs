//! The pages that hold all readings of all points.

use crate::figure::scene::Scene;
use crate::report::PointReport;
use crate::report::Report;
use crate::sheet::answer;
use crate::sheet::book::Book;
use crate::sheet::charts;
use crate::sheet::columns;
use crate::sheet::drawings;
use crate::sheet::flow;
use crate::sheet::grid;
use crate::sheet::grid::TEXT_MM;
use crate::sheet::guide::Anchor;
use crate::sheet::guide::Target;
use crate::sheet::guide::headed;
use crate::sheet::page::Page;
use crate::sheet::table::Table;
use crate::sheet::typeset::Style;
use crate::sheet::whys;

/// A point is begun only where its heading, the head of its table and a few rows fit.
const BEGIN_MM: f64 = 48.0;

/// Adds all points; the drawings of the one on the answer page are not repeated, nor its rules unless they are left.
pub fn compose(book: &mut Book, scenes: &[[Scene; 2]], rules_left: bool) {
    let report = book.report;
    for (index, point) in report.points.iter().enumerate() {
        let scenes = scenes.get(index).filter(|_| index != report.answer_point);
        let drawings_mm = drawings::height_mm(&book.page, point, scenes);
        let rules = answer::rule_lines(point, scenes.is_some());
        let rules_mm: f64 = rules.iter().map(flow::Line::height_mm).sum();
        book.turn_unless(drawings_mm + rules_mm + BEGIN_MM);
        book.page.y_mm += 3.0;
        book.page.anchor(headed(Target::Point(index), 0, &point.title), book.page.y_mm);
        answer::point_heading(&mut book.page, point);
        if scenes.is_some() {
            book.page.anchor(headed(Target::Drawings(index), 1, &report.words.drawings), book.page.y_mm);
        }
        drawings::draw(&mut book.page, point, scenes);
        if index != report.answer_point || rules_left {
            book.lines(&rules);
            book.page.y_mm += if rules.is_empty() { 0.0 } else { 1.5 };
        }
        book.page.anchor(headed(Target::Table(index), 1, answer::table_title(report, point)), book.page.y_mm);
        notes(&mut book.page, report, point);
        rows(book, (index, point));
        whys::draw(book, point);
        charts(book, (index, point));
        let mut lines = Vec::new();
        point.mixing.iter().for_each(|table| flow::small_table(&mut lines, table, TEXT_MM));
        if let Some(table) = &point.mixing {
            flow::part(&mut lines, 0, (1, &table.heading));
        }
        book.lines(&lines);
        book.page.y_mm += if lines.is_empty() { 0.0 } else { 4.0 };
    }
}

/// The charts, each with what its marks mean on the same page.
fn charts(book: &mut Book, (index, point): (usize, &PointReport)) {
    let grey = Style::text(grid::SMALL_PT).grey();
    let numbers = charts::is_numbered(point).then_some(&book.report.words.chart_numbers);
    let notes = point.chart_notes.iter().chain(numbers);
    let notes: Vec<String> = notes.flat_map(|note| grey.lines(note, TEXT_MM)).collect();
    let notes_mm = notes.len() as f64 * grey.leading_mm();
    for at in 0..point.charts.len() {
        let last = at + 1 == point.charts.len();
        let below_mm = if last { notes_mm + 2.0 } else { 0.0 };
        book.turn_unless(charts::LEAST_HEIGHT_MM + below_mm);
        // Whole millimetres, so that what was rounded above does not shape the chart.
        let room_mm = (book.page.left_mm() - below_mm).floor();
        let page = &mut book.page;
        if at == 0 {
            page.anchor(headed(Target::Chart(index), 1, &book.report.words.chart), page.y_mm);
        }
        if let Some(scene) = charts::scene(point, at, room_mm.min(charts::HEIGHT_MM)) {
            page.place((page.paper.left_mm(), page.y_mm), &scene);
            page.y_mm += scene.height_mm;
        }
        if last {
            page.y_mm = page.lines((page.paper.left_mm(), page.y_mm), grey, &notes) + 4.0;
        }
    }
}

fn notes(page: &mut Page, report: &Report, point: &PointReport) {
    let left = page.paper.left_mm();
    let small = Style::text(grid::SMALL_PT).grey();
    let units = if point.measured { &report.words.full_table_units } else { &report.words.table_units_expected };
    let first = format!("{}; {units}", point.readings);
    for line in std::iter::once(&first).chain(&point.notes) {
        page.y_mm = page.lines((left, page.y_mm), small, &small.lines(line, TEXT_MM));
    }
    page.y_mm += 1.6;
}

fn rows(book: &mut Book, (index, point): (usize, &PointReport)) {
    let left = book.page.paper.left_mm();
    let table = Table::new(&point.rows, &book.report.words, &columns::full_sets(point), left);
    if book.turn_unless(table.head_mm() + (0..point.rows.len().min(2)).map(|row| table.row_mm(row)).sum::<f64>()) {
        continued(book, point);
    }
    head(&mut book.page, &table);
    for row in 0..point.rows.len() {
        if book.turn_unless(table.row_mm(row)) {
            continued(book, point);
            head(&mut book.page, &table);
        }
        let place = Anchor { target: Target::Row(index, row), y_mm: 0.0, entry: None };
        book.page.anchor(place, book.page.y_mm);
        table.draw_row(&mut book.page, left, row);
    }
    book.page.y_mm += 5.0;
}

fn head(page: &mut Page, table: &Table) {
    let left = page.paper.left_mm();
    table.draw_head(page, left);
}

fn continued(book: &mut Book, point: &PointReport) {
    let bold = Style::bold(grid::TEXT_PT);
    let heading = format!("{}, {}", point.title, book.report.words.continued);
    let page = &mut book.page;
    page.text((page.paper.left_mm(), page.y_mm + 4.4), bold, &bold.shortened(&heading, TEXT_MM));
    page.y_mm += 5.0;
}
