//! Lines that flow through columns: paragraphs and small tables.

use std::rc::Rc;

use crate::report::SmallCell;
use crate::report::SmallTable;
use crate::sheet::grid;
use crate::sheet::guide::Anchor;
use crate::sheet::guide::Target;
use crate::sheet::guide::headed;
use crate::sheet::page::Page;
use crate::sheet::typeset::Style;

/// A longer paragraph may be broken between columns.
const KEPT_LINES: usize = 8;
/// A longer table may be broken between rows.
const KEPT_ROWS: usize = 9;
/// Space between the columns of a small table.
const GAP_MM: f64 = 3.0;
/// A column of texts is never made narrower than this.
const LEAST_COLUMN_MM: f64 = 9.0;

/// A line of a column: pieces of text on one base line.
#[derive(Clone, Debug, PartialEq)]
pub struct Line {
    /// Distance from the left end of the column, style and text.
    pub pieces: Vec<(f64, Style, String)>,
    /// Height without the space before it.
    pub leading_mm: f64,
    /// Space before it.
    pub before_mm: f64,
    /// Never the last line of a column: headings, and lines of a paragraph before its last.
    pub kept: bool,
    /// Length of a thin rule below it; none where it is 0.
    pub rule_mm: f64,
    /// Lines that are repeated where a column begins with this one: the head of its table.
    pub repeated: Rc<[Line]>,
    /// The place that begins with it, if one does.
    pub anchor: Option<Anchor>,
}

impl Line {
    fn of(pieces: Vec<(f64, Style, String)>, style: Style, before_mm: f64) -> Self {
        let leading_mm = style.leading_mm();
        Self { pieces, leading_mm, before_mm, kept: false, rule_mm: 0.0, repeated: Rc::from([]), anchor: None }
    }

    /// Height with the space before it.
    pub fn height_mm(&self) -> f64 {
        self.before_mm + self.leading_mm
    }

    /// Draws it with its base line at a height.
    pub fn draw(&self, page: &mut Page, left_mm: f64, base_mm: f64) {
        if let Some(anchor) = &self.anchor {
            page.anchor(anchor.clone(), base_mm - self.leading_mm);
        }
        for (x, style, text) in &self.pieces {
            page.text((left_mm + x, base_mm), *style, text);
        }
        if self.rule_mm > 0.0 {
            page.rule((left_mm, base_mm + 1.1), self.rule_mm, grid::THIN_MM, grid::GREY);
        }
    }
}

/// A heading of a section.
pub fn heading(lines: &mut Vec<Line>, text: &str, width_mm: f64) {
    let style = Style::bold(grid::TEXT_PT);
    for (index, text) in style.lines(text, width_mm).into_iter().enumerate() {
        let before_mm = if index == 0 { 3.6 } else { 0.0 };
        lines.push(Line { kept: true, ..Line::of(vec![(0.0, style, text)], style, before_mm) });
    }
}

/// A title of several sections.
pub fn title(lines: &mut Vec<Line>, text: &str, width_mm: f64) {
    let style = Style::bold(grid::HEADING_PT);
    for (index, text) in style.lines(text, width_mm).into_iter().enumerate() {
        let before_mm = if index == 0 { 4.4 } else { 0.0 };
        lines.push(Line { kept: true, ..Line::of(vec![(0.0, style, text)], style, before_mm) });
    }
}

/// A paragraph, broken into lines.
pub fn paragraph(lines: &mut Vec<Line>, text: &str, (style, width_mm): (Style, f64), before_mm: f64) {
    let texts = style.lines(text, width_mm);
    let count = texts.len();
    for (index, text) in texts.into_iter().enumerate() {
        let before_mm = if index == 0 { before_mm } else { 0.0 };
        let kept = index + 1 < count && count <= KEPT_LINES;
        lines.push(Line { kept, ..Line::of(vec![(0.0, style, text)], style, before_mm) });
    }
}

/// Makes the line at a place the beginning of a part, with an entry of a depth in the table of contents.
pub fn part(lines: &mut [Line], at: usize, (depth, title): (usize, &str)) {
    if let Some(line) = lines.get_mut(at) {
        line.anchor = Some(headed(Target::Part(title.to_owned()), depth, title));
    }
}

/// Keeps what was added last with what comes next.
pub fn keep_last(lines: &mut [Line]) {
    if let Some(last) = lines.last_mut() {
        last.kept = true;
    }
}

/// A small table: heading, head, rows, notes.
pub fn small_table(lines: &mut Vec<Line>, table: &SmallTable, width_mm: f64) {
    if !table.heading.is_empty() {
        heading(lines, &table.heading, width_mm);
    }
    let small = Style::text(grid::LEAST_PT);
    let widths = widths(table, width_mm);
    let head: Vec<(Style, &str)> = table.head.iter().map(|head| (small.grey(), head.as_str())).collect();
    let mut head_lines = row_lines(&head, &table_places(table, &widths), small);
    for line in &mut head_lines {
        line.kept = true;
    }
    if let Some(last) = head_lines.last_mut() {
        last.rule_mm = widths.iter().map(|width| width + GAP_MM).sum::<f64>() - GAP_MM;
    }
    if let Some(first) = head_lines.first_mut() {
        first.before_mm = 0.8;
    }
    lines.extend(head_lines.iter().cloned());
    let repeated: Rc<[Line]> = Rc::from(head_lines);
    let whole = table.rows.len() <= KEPT_ROWS;
    for (at, row) in table.rows.iter().enumerate() {
        let cells: Vec<(Style, &str)> = row.iter().map(|cell| (small, cell.printed())).collect();
        let mut row_lines = row_lines(&cells, &table_places(table, &widths), small);
        if let Some(first) = row_lines.first_mut() {
            first.before_mm = if at == 0 { 1.5 } else { 0.5 };
            first.repeated = repeated.clone();
        }
        let last = at + 1 == table.rows.len();
        if let Some(end) = row_lines.last_mut() {
            end.kept = if last { !table.notes.is_empty() } else { whole || at == 0 };
        }
        lines.extend(row_lines);
    }
    for note in &table.notes {
        paragraph(lines, note, (small.grey(), width_mm), 0.8);
    }
}

/// Where a column begins, how wide it is, and where its decimal points stand if it holds numbers.
#[derive(Clone, Copy, Debug)]
struct Place {
    left_mm: f64,
    width_mm: f64,
    point_mm: Option<f64>,
}

fn table_places(table: &SmallTable, widths: &[f64]) -> Vec<Place> {
    let mut left_mm = 0.0;
    let mut places = Vec::new();
    for (column, &width_mm) in widths.iter().enumerate() {
        let after = numbers(table, column).map(|text| after_point_mm(&text)).fold(0.0, f64::max);
        let point_mm = numbers(table, column).next().map(|_| width_mm - after);
        places.push(Place { left_mm, width_mm, point_mm });
        left_mm += width_mm + GAP_MM;
    }
    places
}

fn numbers(table: &SmallTable, column: usize) -> impl Iterator<Item = String> {
    let number = move |row: &Vec<SmallCell>| match row.get(column) {
        Some(SmallCell::Number(number)) => Some(number.text.clone()),
        _ => None,
    };
    table.rows.iter().filter_map(number)
}

/// The width of every column; where they do not fit, the widest column of texts gives way.
fn widths(table: &SmallTable, width_mm: f64) -> Vec<f64> {
    let mut widths: Vec<f64> = (0..table.head.len()).map(|column| natural_mm(table, column)).collect();
    let room_mm = width_mm - GAP_MM * widths.len().saturating_sub(1) as f64;
    let is_text = |column: usize| numbers(table, column).next().is_none();
    let least = least_widths(table, &widths, room_mm);
    while widths.iter().sum::<f64>() > room_mm {
        let over_mm = widths.iter().sum::<f64>() - room_mm;
        let yielding = (0..widths.len()).filter(|at| is_text(*at) && widths[*at] > least[*at]);
        let Some(widest) = yielding.max_by(|a, b| widths[*a].total_cmp(&widths[*b])) else { break };
        let next = (0..widths.len()).filter(|at| is_text(*at) && *at != widest).map(|at| widths[at]);
        let floor_mm = next.fold(LEAST_COLUMN_MM, f64::max).min(widths[widest] - 1.0);
        widths[widest] = (widths[widest] - over_mm).max(floor_mm).max(least[widest]);
    }
    widths
}

/// How narrow each column may become: as wide as its longest word where there is room for those of all columns, since a
/// broken word is hard to read. A loop of contacts may break, the shortest of a column does not.
fn least_widths(table: &SmallTable, natural: &[f64], room_mm: f64) -> Vec<f64> {
    let style = Style::text(grid::LEAST_PT);
    let words_mm = |column: usize, loops: bool| -> Vec<f64> {
        let texts = table.rows.iter().filter_map(|row| match row.get(column) {
            Some(SmallCell::Text(text)) => Some(text),
            _ => None,
        });
        let words = texts.flat_map(|text| text.split(' ')).filter(|word| word.contains('→') == loops);
        words.map(|word| style.width_mm(word) + 0.05).collect()
    };
    let least = |(column, &mm): (usize, &f64)| {
        if numbers(table, column).next().is_some() {
            return mm;
        }
        let shortest_mm = words_mm(column, true).into_iter().fold(mm, f64::min);
        let loops_mm = if words_mm(column, true).is_empty() { 0.0 } else { shortest_mm };
        words_mm(column, false).into_iter().fold(loops_mm.max(LEAST_COLUMN_MM), f64::max).min(mm)
    };
    let least: Vec<f64> = natural.iter().enumerate().map(least).collect();
    let fits = least.iter().sum::<f64>() <= room_mm;
    if fits { least } else { vec![LEAST_COLUMN_MM; natural.len()] }
}

fn natural_mm(table: &SmallTable, column: usize) -> f64 {
    let style = Style::text(grid::LEAST_PT);
    let texts = table.rows.iter().filter_map(|row| match row.get(column) {
        Some(SmallCell::Text(text)) => Some(style.width_mm(text)),
        _ => None,
    });
    let head = table.head.get(column).map_or(0.0, |head| style.width_mm(head));
    let before = numbers(table, column).map(|text| style.width_mm(&text) - after_point_mm(&text)).fold(0.0, f64::max);
    let after = numbers(table, column).map(|text| after_point_mm(&text)).fold(0.0, f64::max);
    // A hair more, so that a text of exactly this width is not broken.
    texts.fold(head, f64::max).max(before + after) + 0.05
}

/// Width from the decimal point, or the bracket, to the end.
fn after_point_mm(text: &str) -> f64 {
    let start = text.find(['.', '(']).unwrap_or(text.len());
    Style::text(grid::LEAST_PT).width_mm(&text[start..])
}

/// The lines of one row: as many as its highest cell.
fn row_lines(cells: &[(Style, &str)], places: &[Place], style: Style) -> Vec<Line> {
    let broken: Vec<Vec<String>> =
        cells.iter().zip(places).map(|((style, text), place)| style.lines(text, place.width_mm)).collect();
    let count = broken.iter().map(Vec::len).max().unwrap_or(1);
    let line = |at: usize| {
        let mut pieces = Vec::new();
        for (((style, _), texts), place) in cells.iter().zip(&broken).zip(places) {
            let Some(text) = texts.get(at).filter(|text| !text.is_empty()) else { continue };
            let is_number =
                place.point_mm.is_some() && text.starts_with(|c: char| c.is_ascii_digit() || "+−".contains(c));
            let x = match place.point_mm.filter(|_| is_number) {
                Some(point_mm) => place.left_mm + point_mm - (style.width_mm(text) - after_point_mm(text)),
                // Heads over numbers, and words in their place, end where the numbers end.
                None if place.point_mm.is_some() => place.left_mm + place.width_mm - style.width_mm(text),
                None => place.left_mm,
            };
            pieces.push((x, *style, text.clone()));
        }
        Line { kept: at + 1 < count, ..Line::of(pieces, style, 0.0) }
    };
    (0..count).map(line).collect()
}
