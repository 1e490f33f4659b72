//! The first page: the answer, the two drawings, the worst readings, which way the field points.

use crate::figure::scene::At;
use crate::figure::scene::Scene;
use crate::report::NamedReading;
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
use crate::sheet::guide::Contents;
use crate::sheet::guide::Target;
use crate::sheet::guide::headed;
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
///
/// Its references take the same room whatever `contents` says, so that it can be composed before the others are.
pub fn compose(report: &Report, scenes: Option<&[Scene; 2]>, (paper, contents): (Paper, &Contents)) -> AnswerPage {
    let mut page = Page::new(paper);
    page.anchor(headed(Target::Answer, 0, &report.identity.device), 0.0);
    frame::first_head(&mut page, report);
    let sentence_cut = sentence(&mut page, report, contents);
    let columns_cut = three_columns(&mut page, report, contents) || sentence_cut;
    let Some(point) = report.points.get(report.answer_point) else {
        return AnswerPage { page, columns_cut, rules_left: false, field_left: true };
    };
    point_heading(&mut page, point);
    let drawn = scenes.filter(|_| drawings::height_mm(&page, point, scenes) <= page.left_mm());
    page.anchor(headed(Target::Drawings(report.answer_point), 1, &report.words.drawings), page.y_mm);
    drawings::draw(&mut page, point, drawn);
    let rules_left = !rules(&mut page, point, drawn.is_some());
    let field_mm = field_mm(&page, report);
    let field_left = page.left_mm() < field_mm + 2.0;
    table(&mut page, report, contents, if field_left { 0.0 } else { field_mm });
    if !field_left {
        page.anchor(headed(Target::Part(report.words.field.clone()), 1, &report.words.field), page.y_mm);
        field(&mut page, report);
    }
    AnswerPage { page, columns_cut, rules_left, field_left }
}

/// Which reading shows one region alone: one line where there is one region, else a table. Nothing where the words below
/// the drawings say it.
pub fn rule_lines(point: &PointReport, drawn: bool) -> Vec<flow::Line> {
    let mut lines = Vec::new();
    match point.alone_lines.as_slice() {
        [] => {}
        [_] if drawn && drawings::tell_rule(point) => {}
        [only] => flow::paragraph(&mut lines, only, (Style::text(grid::SMALL_PT), TEXT_MM), 1.2),
        _ => flow::small_table(&mut lines, &point.alone_table, TEXT_MM),
    }
    lines
}

/// The rules of the point; gives whether they found room.
fn rules(page: &mut Page, point: &PointReport, drawn: bool) -> bool {
    let lines = rule_lines(point, drawn);
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

fn sentence(page: &mut Page, report: &Report, contents: &Contents) -> bool {
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
    let mut base = linked(page, (left, page.y_mm + 1.6), (style, &lines), led_to(report, contents, &lines)) + 1.4;
    let text = Style::text(grid::TEXT_PT);
    for line in &report.verdict.why {
        let lines = text.lines(line, TEXT_MM);
        base = linked(page, (left, base), (text, &lines), led_to(report, contents, &lines));
    }
    page.y_mm = base + 3.0;
    cut
}

/// Where lines of text lead: to the part that they name in quotation marks, else to the row of the reading that they name.
fn led_to(report: &Report, contents: &Contents, lines: &[String]) -> Option<(Target, String)> {
    let text = lines.join(" ");
    let part = contents.quoted(&text).map(|target| (target, text.clone()));
    let named = || report.verdict.named.iter().filter(|named| text.contains(&named.name));
    let here = |named: &&NamedReading| report.points.get(named.point).is_some_and(|point| text.contains(&point.title));
    let row = named().find(here).or(named().next());
    part.or(row.map(|named| (Target::Row(named.point, named.row), named.name.clone())))
}

/// Lines of text, of which the name of the place that they lead to is a link, or all where no line holds the whole name.
fn linked(page: &mut Page, at: At, (style, lines): (Style, &[String]), led: Option<(Target, String)>) -> f64 {
    let end = page.lines(at, style, lines);
    let Some((target, name)) = led else { return end };
    let (x, top) = at;
    let hit = lines.iter().enumerate().find_map(|(line, text)| Some((line, text, text.find(&name)?)));
    let sides = match hit {
        Some((line, text, start)) => {
            let line_top = top + line as f64 * style.leading_mm();
            let left = x + style.width_mm(&text[..start]);
            [left, line_top + 0.6, left + style.width_mm(&name), line_top + style.leading_mm() + 0.9]
        }
        None => {
            let width = lines.iter().map(|line| style.width_mm(line)).fold(0.0, f64::max);
            [x, top + 0.6, x + width, end + 0.9]
        }
    };
    page.jump(sides, target, &name);
    end
}

/// Usable, with care, not tested; gives whether any of them was cut.
fn three_columns(page: &mut Page, report: &Report, contents: &Contents) -> bool {
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
            page.y_mm = linked(page, (x, page.y_mm + ITEM_MM), (text, &lines), led_to(report, contents, &lines));
        }
        if left > 0 {
            cut = true;
            let target = Target::Part(words.from_first_page.clone());
            let on = contents.page_of(&target).map_or_else(String::new, |page| page.to_string());
            let more = format!("{left} {} {on}", words.more);
            let led = Some((target, more.clone()));
            page.y_mm = linked(page, (x, page.y_mm + ITEM_MM), (text.grey(), &[more]), led);
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
fn table(page: &mut Page, report: &Report, contents: &Contents, below_mm: f64) {
    let (left, answer) = (page.paper.left_mm(), report.answer_point);
    let point = &report.points[answer];
    let table = Table::new(&point.rows, &report.words, &columns::answer_sets(point), left).brief();
    let room_mm = page.left_mm() - below_mm - AROUND_MM - table.head_mm();
    let heights = (0..point.rows.len().min(ROWS)).map(|row| table.row_mm(row));
    let ends = heights.scan(0.0, |sum, height| {
        *sum += height;
        Some(*sum)
    });
    let count = ends.take_while(|end| *end <= room_mm).count();
    if count == 0 {
        return references(page, report, contents);
    }
    page.anchor(
        headed(Target::Part(heading_of(report, point).0.clone()), 1, heading_of(report, point).0),
        page.y_mm + 2.0,
    );
    table_heading(page, report, point);
    table.draw_head(page, left);
    for row in 0..count {
        let top = page.y_mm;
        table.draw_row(page, left, row);
        let sides = [left, top, left + TEXT_MM, page.y_mm];
        page.jump(sides, Target::Row(answer, row), &point.rows[row].name);
    }
    references(page, report, contents);
}

/// Space between two references.
const REFERENCE_GAP_MM: f64 = 3.6;

/// One line on the pages that follow, each reference a link: all points, then what fits beside them.
fn references(page: &mut Page, report: &Report, contents: &Contents) {
    let style = Style::text(grid::SMALL_PT).grey();
    let words = &report.words;
    let (left, base) = (page.paper.left_mm(), page.y_mm + 4.2);
    page.text((left, base), style, &words.whole_table);
    let mut x = left + style.width_mm(&words.whole_table) + REFERENCE_GAP_MM / 2.0;
    let points = report.points.iter().enumerate().map(|(at, point)| (Target::Table(at), point.title.as_str()));
    let parts = [&words.provenance, &words.cautions, &words.limits];
    let parts = parts.map(|title| (Target::Part(title.clone()), title.as_str()));
    for (target, title) in points.chain(parts) {
        let Some(number) = contents.page_of(&target) else { continue };
        let text = format!("{}: {} {number}", style.shortened(title, THIRD_MM), words.page);
        if x + style.width_mm(&text) <= page.paper.right_mm() {
            let top = base - style.leading_mm();
            linked(page, (x, top), (style, std::slice::from_ref(&text)), Some((target, text.clone())));
            x += style.width_mm(&text) + REFERENCE_GAP_MM;
        }
    }
    page.y_mm = base + 1.8;
}

/// Heading of a table of readings.
pub fn table_title<'a>(report: &'a Report, point: &PointReport) -> &'a str {
    heading_of(report, point).0
}

/// Heading of a table of readings, and what it says of units on the first page.
fn heading_of<'a>(report: &'a Report, point: &PointReport) -> (&'a String, &'a String) {
    let words = &report.words;
    if point.measured {
        (&words.expected_and_measured, &words.table_units)
    } else {
        (&words.expected_only, &words.table_units_expected)
    }
}

/// `Expected and measured`, with the units beside it.
pub fn table_heading(page: &mut Page, report: &Report, point: &PointReport) {
    let left = page.paper.left_mm();
    let (heading, units) = heading_of(report, point);
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
