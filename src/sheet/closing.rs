//! The last pages: rules, limits, notices, cautions, provenance, sign-off.

use crate::report::Report;
use crate::sheet::book::Book;
use crate::sheet::flow;
use crate::sheet::flow::Line;
use crate::sheet::grid;
use crate::sheet::grid::GUTTER_MM;
use crate::sheet::grid::HALF_MM;
use crate::sheet::grid::TEXT_MM;
use crate::sheet::grid::THIRD_MM;
use crate::sheet::guide::Target;
use crate::sheet::guide::headed;
use crate::sheet::typeset::Style;

/// The closing begins under the last table only where this much is left.
const BEGIN_MM: f64 = 70.0;

/// Shares of the space between paragraphs, tried one after the other: where a page is saved by it, less is kept.
const SQUEEZED: [f64; 5] = [1.0, 0.8, 0.65, 0.5, 0.35];

/// Height of the sign-off.
const SIGN_OFF_MM: f64 = 27.0;
/// Space between the lines for remarks, and the least number of them.
const REMARK_MM: f64 = 8.0;
const LEAST_REMARKS: usize = 3;

/// What the answer page left for the end.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Leftover {
    /// Whether the three columns were cut.
    pub columns_cut: bool,
    /// Whether the words on the field are still to be printed.
    pub field_left: bool,
}

/// Adds everything that is left to say.
pub fn compose(book: &mut Book, leftover: Leftover) {
    let report = book.report;
    if !book.turn_unless(BEGIN_MM) {
        let page = &mut book.page;
        page.rule((page.paper.left_mm(), page.y_mm), TEXT_MM, grid::THIN_MM, grid::GREY);
    }
    let mut lines = sections(report, leftover);
    provenance(&mut lines, report);
    // A page less is worth less space between paragraphs.
    let filled = SQUEEZED.into_iter().map(|share| filled(book, &lines, share));
    if let Some(best) = filled.reduce(|best, next| if next.pages() < best.pages() { next } else { best }) {
        *book = best;
    }
    remarks(book);
    sign_off(book);
}

/// The book with all lines and room for the sign-off.
fn filled<'a>(book: &Book<'a>, lines: &[Line], share: f64) -> Book<'a> {
    let squeezed = |line: &Line| Line { before_mm: line.before_mm * share, ..line.clone() };
    let mut book = book.clone();
    two_columns(&mut book, &lines.iter().map(squeezed).collect::<Vec<_>>());
    book.turn_unless(SIGN_OFF_MM);
    book
}

/// Lines to write on, over what is left of the last page above the sign-off.
fn remarks(book: &mut Book) {
    const HEADING_MM: f64 = 10.2;
    let room_mm = book.page.left_mm() - SIGN_OFF_MM - HEADING_MM;
    let count = (room_mm / REMARK_MM).max(0.0) as usize;
    if count < LEAST_REMARKS {
        return;
    }
    heading(book, &book.report.words.remarks);
    let page = &mut book.page;
    for _ in 0..count {
        page.y_mm += REMARK_MM;
        page.rule((page.paper.left_mm(), page.y_mm), TEXT_MM, grid::THIN_MM, grid::PALE);
    }
}

fn sections(report: &Report, leftover: Leftover) -> Vec<Line> {
    let words = &report.words;
    let mut lines = Vec::new();
    if leftover.columns_cut {
        let verdict = &report.verdict;
        section(&mut lines, &words.from_first_page, std::slice::from_ref(&verdict.sentence));
        below(&mut lines, &words.usable, &verdict.usable);
        below(&mut lines, &words.with_care, &verdict.with_care);
        below(&mut lines, &words.not_tested, &verdict.not_tested);
    }
    if leftover.field_left {
        section(&mut lines, &words.field, &report.field_words);
    }
    let tables = report.closure.iter().chain(&report.instruments).chain(&report.corrections).chain(&report.budgets);
    for (index, table) in tables.enumerate() {
        if index == report.closure.len() {
            let start = lines.len();
            flow::title(&mut lines, &words.instruments, HALF_MM);
            flow::part(&mut lines, start, (0, &words.instruments));
        }
        let start = lines.len();
        flow::small_table(&mut lines, table, HALF_MM);
        if !table.heading.is_empty() {
            flow::part(&mut lines, start, (usize::from(index >= report.closure.len()), &table.heading));
        }
    }
    section(&mut lines, &words.rules, &report.rules);
    section(&mut lines, &words.limits, &report.limits);
    section(&mut lines, &words.points, &identity(report));
    if !report.contacts.is_empty() {
        section(&mut lines, &words.contacts, &report.contacts);
    }
    let none = std::slice::from_ref(&words.no_notices);
    section(&mut lines, &words.notices, if report.notices.is_empty() { none } else { &report.notices });
    section(&mut lines, &words.cautions, &[]);
    for caution in &report.cautions {
        paragraph(&mut lines, &caution.text, Style::text(grid::SMALL_PT), 1.2);
        flow::keep_last(&mut lines);
        paragraph(
            &mut lines,
            &format!("{} {}", words.caution_source, caution.source),
            Style::text(grid::LEAST_PT).grey(),
            0.1,
        );
    }
    lines
}

/// Device and points in full: heads and feet may shorten them.
fn identity(report: &Report) -> Vec<String> {
    let identity = &report.identity;
    let device = if identity.title.is_empty() {
        identity.device.clone()
    } else {
        format!("{}: {}", identity.device, identity.title)
    };
    let lines = identity.lines.join(", ");
    [device, lines].into_iter().chain(identity.points.iter().cloned()).chain(identity.stated.iter().cloned()).collect()
}

fn section(lines: &mut Vec<Line>, heading: &str, paragraphs: &[String]) {
    let start = lines.len();
    flow::heading(lines, heading, HALF_MM);
    flow::part(lines, start, (0, heading));
    for text in paragraphs {
        paragraph(lines, text, Style::text(grid::SMALL_PT), 1.0);
    }
}

/// A section below the last one.
fn below(lines: &mut Vec<Line>, heading: &str, paragraphs: &[String]) {
    let start = lines.len();
    section(lines, heading, paragraphs);
    flow::part(lines, start, (1, heading));
}

fn paragraph(lines: &mut Vec<Line>, text: &str, style: Style, before_mm: f64) {
    flow::paragraph(lines, text, (style, HALF_MM), before_mm);
}

/// Two columns of equal height, over as many pages as it takes.
fn two_columns(book: &mut Book, lines: &[Line]) {
    let mut rest = lines.to_vec();
    while !rest.is_empty() {
        let height_mm = balanced_mm(&rest, book.page.left_mm());
        let top = book.page.y_mm;
        let mut end: f64 = top;
        for x in [0.0, HALF_MM + GUTTER_MM] {
            let (column, left) = column(rest, height_mm);
            rest = left;
            let (left, mut base) = (book.page.paper.left_mm() + x, top);
            for (index, line) in column.iter().enumerate() {
                base += line.height_mm() - if index == 0 { line.before_mm - line.before_mm.min(1.2) } else { 0.0 };
                line.draw(&mut book.page, left, base);
            }
            end = end.max(base);
        }
        book.page.y_mm = end;
        if !rest.is_empty() {
            book.turn();
        }
    }
}

/// The least height at which two columns hold everything, else all of the room.
fn balanced_mm(lines: &[Line], room_mm: f64) -> f64 {
    let holds = |height_mm: f64| column(column(lines.to_vec(), height_mm).1, height_mm).1.is_empty();
    let steps = (room_mm / 2.0) as usize;
    (1..=steps).map(|step| 2.0 * step as f64).find(|height| holds(*height)).unwrap_or(room_mm)
}

/// The lines of one column and the rest; a column that begins within a table repeats its head.
fn column(mut lines: Vec<Line>, height_mm: f64) -> (Vec<Line>, Vec<Line>) {
    let Some(first) = lines.first() else { return (lines, Vec::new()) };
    let head = first.repeated.clone();
    lines.splice(0..0, head.iter().cloned());
    let count = fitting(&lines, height_mm).max(head.len() + 1).min(lines.len());
    let rest = lines.split_off(count);
    (lines, rest)
}

/// How many lines fit into a height; what is kept with the next goes along, and one line always fits.
fn fitting(lines: &[Line], height_mm: f64) -> usize {
    let mut used_mm = 0.0;
    let mut count = 0;
    for line in lines {
        used_mm += line.height_mm();
        if used_mm > height_mm {
            break;
        }
        count += 1;
    }
    while count > 0 && count < lines.len() && lines[count - 1].kept {
        count -= 1;
    }
    count.max(1).min(lines.len())
}

fn provenance(lines: &mut Vec<Line>, report: &Report) {
    let (words, provenance) = (&report.words, &report.provenance);
    let small = Style::text(grid::SMALL_PT);
    section(lines, &words.provenance, &[format!("{}. {}", provenance.program, provenance.repeat)]);
    for input in &provenance.inputs {
        paragraph(lines, &format!("{}, {} {}", input.name, input.bytes, words.bytes), Style::bold(grid::SMALL_PT), 0.6);
        flow::keep_last(lines);
        // Two halves, each on a line of its own.
        let (first, second) = input.sha256.split_at_checked(32).unwrap_or((&input.sha256, ""));
        let sum = format!("{} {first} {second}", words.sha256);
        paragraph(lines, &sum, Style::text(grid::LEAST_PT).grey(), 0.1);
    }
    for line in &provenance.constants {
        paragraph(lines, line, small, 1.0);
    }
    if !provenance.options.is_empty() {
        paragraph(lines, &format!("{}: {}", words.options, provenance.options.join(" ")), small, 1.0);
    }
}

fn heading(book: &mut Book, heading: &str) {
    let page = &mut book.page;
    page.y_mm += 5.0;
    page.rule((page.paper.left_mm(), page.y_mm), TEXT_MM, grid::THIN_MM, grid::GREY);
    page.anchor(headed(Target::Part(heading.to_owned()), 0, heading), page.y_mm);
    page.y_mm += 4.6;
    page.text((page.paper.left_mm(), page.y_mm), Style::bold(grid::TEXT_PT), heading);
    page.y_mm += 0.6;
}

fn sign_off(book: &mut Book) {
    let report = book.report;
    // It stands at the foot of the last page.
    book.page.y_mm += (book.page.left_mm() - SIGN_OFF_MM).max(0.0);
    heading(book, &report.words.sign_off);
    let page = &mut book.page;
    page.y_mm += 10.0;
    let small = Style::text(grid::LEAST_PT).grey();
    for (index, label) in report.words.sign_off_lines.iter().take(3).enumerate() {
        let x = page.paper.left_mm() + index as f64 * (THIRD_MM + GUTTER_MM);
        page.rule((x, page.y_mm), THIRD_MM, grid::THIN_MM, grid::INK);
        page.lines((x, page.y_mm), small, &small.lines(label, THIRD_MM));
    }
}
