//! The first page: the answer, the two drawings, the worst readings, which way the field points.

use crate::figure::scene::Scene;
use crate::report::PointReport;
use crate::report::Report;
use crate::sheet::columns;
use crate::sheet::drawings;
use crate::sheet::flow;
use crate::sheet::frame;
use crate::sheet::grid;
use crate::sheet::grid::GUTTER_MM;
use crate::sheet::grid::Paper;
use crate::sheet::grid::TEXT_MM;
use crate::sheet::grid::THIRD_MM;
use crate::sheet::page::Page;
use crate::sheet::table::Table;
use crate::sheet::typeset::Style;

/// Most height of the three columns.
const COLUMNS_MM: f64 = 26.0;
/// Space between the items of a column.
const ITEM_MM: f64 = 0.9;
/// Height of the table's heading and of the line below it.
const AROUND_MM: f64 = 13.4;
/// Most rows of the answer table.
const ROWS: usize = 10;
/// Most lines of the answer itself.
const SENTENCE_LINES: usize = 3;

/// The page, and what did not fit on it.
pub struct AnswerPage {
    /// The page.
    pub page: Page,
    /// Whether the three columns were cut; their whole text then stands on the last page.
    pub columns_cut: bool,
    /// Whether the rules on regions that are read alone are still to be printed.
    pub rules_left: bool,
    /// Whether the words on the field are still to be printed.
    pub field_left: bool,
}

/// Composes the first page.
pub fn compose(report: &Report, scenes: Option<&[Scene; 2]>, paper: Paper) -> AnswerPage {
    let mut page = Page::new(paper);
    frame::first_head(&mut page, report);
    let sentence_cut = sentence(&mut page, report);
    let columns_cut = three_columns(&mut page, report) || sentence_cut;
    let Some(point) = report.points.get(report.answer_point) else {
        return AnswerPage { page, columns_cut, rules_left: false, field_left: true };
    };
    point_heading(&mut page, point);
    if drawings::height_mm(&page, point, scenes) <= page.left_mm() {
        drawings::draw(&mut page, point, scenes);
    }
    let rules_left = !rules(&mut page, point);
    let field_mm = field_mm(&page, report);
    let field_left = page.left_mm() < field_mm + 2.0;
    table(&mut page, report, point, if field_left { 0.0 } else { field_mm });
    if !field_left {
        field(&mut page, report);
    }
    AnswerPage { page, columns_cut, rules_left, field_left }
}

/// Which reading shows one region alone: one line where there is one region, else a table.
pub fn rule_lines(point: &PointReport) -> Vec<flow::Line> {
    let mut lines = Vec::new();
    match point.alone_lines.as_slice() {
        [] => {}
        [only] => flow::paragraph(&mut lines, only, (Style::text(grid::SMALL_PT), TEXT_MM), 1.2),
        _ => flow::small_table(&mut lines, &point.alone_table, TEXT_MM),
    }
    lines
}

/// The rules of the point; gives whether they found room.
fn rules(page: &mut Page, point: &PointReport) -> bool {
    let lines = rule_lines(point);
    if lines.iter().map(flow::Line::height_mm).sum::<f64>() > page.left_mm() {
        return false;
    }
    for line in &lines {
        page.y_mm += line.height_mm();
        line.draw(page, page.paper.left_mm(), page.y_mm);
    }
    page.y_mm += 1.0;
    true
}

fn sentence(page: &mut Page, report: &Report) -> bool {
    let left = page.paper.left_mm();
    let style = Style::bold(grid::ANSWER_PT);
    let mut lines = style.lines(&report.verdict.sentence, TEXT_MM);
    let cut = lines.len() > SENTENCE_LINES;
    if cut {
        lines.truncate(SENTENCE_LINES);
        if let Some(last) = lines.last_mut() {
            *last = style.shortened(&format!("{last} …"), TEXT_MM);
        }
    }
    let mut base = page.lines((left, page.y_mm + 1.6), style, &lines) + 1.4;
    let text = Style::text(grid::TEXT_PT);
    for line in &report.verdict.why {
        base = page.lines((left, base), text, &text.lines(line, TEXT_MM));
    }
    page.y_mm = base + 3.0;
    cut
}

/// Usable, with care, not tested; gives whether any of them was cut.
fn three_columns(page: &mut Page, report: &Report) -> bool {
    let (verdict, words) = (&report.verdict, &report.words);
    let columns = [
        (&words.usable, &verdict.usable),
        (&words.with_care, &verdict.with_care),
        (&words.not_tested, &verdict.not_tested),
    ];
    let (top, mut end, mut cut) = (page.y_mm, page.y_mm, false);
    for (index, (heading, items)) in columns.into_iter().enumerate() {
        let x = page.paper.left_mm() + index as f64 * (THIRD_MM + GUTTER_MM);
        page.rule((x, top), THIRD_MM, grid::THIN_MM, grid::GREY);
        page.text((x, top + 4.3), Style::bold(grid::TEXT_PT), heading);
        let text = Style::text(grid::SMALL_PT);
        let (shown, left) = fitting(text, items);
        page.y_mm = top + 4.9 - ITEM_MM;
        for lines in shown {
            page.y_mm = page.lines((x, page.y_mm + ITEM_MM), text, &lines);
        }
        if left > 0 {
            cut = true;
            page.y_mm = page.lines((x, page.y_mm + ITEM_MM), text.grey(), &[format!("{left} {}", words.more)]);
        }
        end = page.y_mm.max(end);
    }
    page.y_mm = end + 3.0;
    cut
}

/// The lines of as many whole items as fit, and how many items are left.
fn fitting(style: Style, items: &[String]) -> (Vec<Vec<String>>, usize) {
    let (mut shown, mut used_mm) = (Vec::new(), 0.0);
    for (index, item) in items.iter().enumerate() {
        let lines = style.lines(item, THIRD_MM);
        used_mm += lines.len() as f64 * style.leading_mm() + ITEM_MM;
        let reserve_mm = if index + 1 < items.len() { style.leading_mm() } else { 0.0 };
        if used_mm + reserve_mm > COLUMNS_MM {
            return (shown, items.len() - index);
        }
        shown.push(lines);
    }
    (shown, 0)
}

/// The point's name large, the rest of its heading beside or below.
pub fn point_heading(page: &mut Page, point: &PointReport) {
    let left = page.paper.left_mm();
    let bold = Style::bold(grid::HEADING_PT);
    let base = page.lines((left, page.y_mm + 0.8), bold, &bold.lines(&point.title, TEXT_MM));
    let text = Style::text(grid::TEXT_PT);
    let x = bold.width_mm(&point.title) + 3.0;
    let beside = x + text.width_mm(&point.subtitle) <= TEXT_MM;
    if beside {
        page.text((left + x, base), text, &point.subtitle);
    }
    let below = if beside { Vec::new() } else { text.lines(&point.subtitle, TEXT_MM) };
    page.y_mm = page.lines((left, base), text, &below) + 1.4;
}

/// The first rows of the point's table, as many as fit above the words on the field.
fn table(page: &mut Page, report: &Report, point: &PointReport, below_mm: f64) {
    let left = page.paper.left_mm();
    let table = Table::new(&point.rows, &report.words, &columns::answer_sets(point), left).brief();
    let room_mm = page.left_mm() - below_mm - AROUND_MM - table.head_mm();
    let heights = (0..point.rows.len().min(ROWS)).map(|row| table.row_mm(row));
    let ends = heights.scan(0.0, |sum, height| {
        *sum += height;
        Some(*sum)
    });
    let count = ends.take_while(|end| *end <= room_mm).count();
    if count == 0 {
        return;
    }
    table_heading(page, report, point);
    table.draw_head(page, left);
    for row in 0..count {
        table.draw_row(page, left, row);
    }
    page.text((left, page.y_mm + 4.2), Style::text(grid::SMALL_PT).grey(), &report.words.whole_table);
    page.y_mm += 6.0;
}

/// `Expected and measured`, with the units beside it.
pub fn table_heading(page: &mut Page, report: &Report, point: &PointReport) {
    let (left, words) = (page.paper.left_mm(), &report.words);
    let (heading, units) = if point.measured {
        (&words.expected_and_measured, &words.table_units)
    } else {
        (&words.expected_only, &words.table_units_expected)
    };
    let bold = Style::bold(grid::HEADING_PT);
    let base = page.y_mm + 6.4;
    page.text((left, base), bold, heading);
    page.text((left + bold.width_mm(heading) + 3.0, base), Style::text(grid::SMALL_PT), units);
    page.y_mm = base + 0.6;
}

/// Which way the field points.
pub fn field(page: &mut Page, report: &Report) {
    let left = page.paper.left_mm();
    page.y_mm += 2.0;
    page.rule((left, page.y_mm), TEXT_MM, grid::THIN_MM, grid::GREY);
    page.y_mm += 5.2;
    page.text((left, page.y_mm), Style::bold(grid::HEADING_PT), &report.words.field);
    page.y_mm += 0.8;
    let text = Style::text(grid::TEXT_PT);
    for line in &report.field_words {
        page.y_mm = page.lines((left, page.y_mm), text, &text.lines(line, TEXT_MM));
    }
}

fn field_mm(page: &Page, report: &Report) -> f64 {
    let mut trial = Page::new(page.paper);
    field(&mut trial, report);
    trial.y_mm + 1.0
}
