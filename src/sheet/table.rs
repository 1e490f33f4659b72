//! A table of readings: columns set by the widths of their entries, decimal points under one another.

use crate::figure::fonts;
use crate::figure::scene::Anchor;
use crate::report::TableRow;
use crate::report::Words;
use crate::sheet::columns;
use crate::sheet::columns::Align;
use crate::sheet::columns::Column;
use crate::sheet::columns::Entry;
use crate::sheet::columns::Half;
use crate::sheet::grid;
use crate::sheet::page::Page;
use crate::sheet::strip;
use crate::sheet::typeset::Style;

/// Least space between columns.
const LEAST_GAP_MM: f64 = 1.9;
/// Space between the halves, in gaps.
const HALVES_APART: f64 = 2.2;
/// Most space between columns.
const MOST_GAP_MM: f64 = 14.0;
/// A name wider than this stands on a line of its own above its row.
const WIDEST_NAME_MM: f64 = 26.0;
/// Space above the base line of a row, and below it.
const ABOVE_MM: f64 = 3.6;
const BELOW_MM: f64 = 1.4;

/// A table that knows where its columns stand.
#[derive(Clone, Debug)]
pub struct Table<'a> {
    rows: &'a [TableRow],
    words: &'a Words,
    size_pt: f64,
    columns: Vec<Placed>,
    names_above: bool,
    brief: bool,
}

/// A column with its place.
#[derive(Clone, Debug)]
struct Placed {
    column: Column,
    left_mm: f64,
    width_mm: f64,
    /// Distance of the decimal points from the left end.
    point_mm: f64,
}

impl<'a> Table<'a> {
    /// The first of `sets` that fits the text width at the usual size or at the least; else the last.
    pub fn new(rows: &'a [TableRow], words: &'a Words, sets: &[Vec<Column>], left_mm: f64) -> Self {
        let name_mm = rows.iter().map(|row| Style::bold(grid::SMALL_PT).width_mm(&row.name)).fold(0.0, f64::max);
        let build = |(names_above, set, size_pt): (bool, &Vec<Column>, f64)| {
            let set = set.iter().filter(|column| !(names_above && **column == Column::Name));
            let columns = set.map(|column| measure(*column, rows, words, size_pt)).collect();
            Self { rows, words, size_pt, columns, names_above, brief: false }
        };
        let sizes = |names_above| {
            sets.iter().flat_map(move |set| [grid::SMALL_PT, grid::LEAST_PT].map(|size| (names_above, set, size)))
        };
        // Names give way before numbers come too near to one another.
        let beside = sizes(false).filter(|_| name_mm <= WIDEST_NAME_MM);
        let mut tables: Vec<Self> = beside.chain(sizes(true)).map(build).collect();
        let fit =
            tables.iter().position(|table| table.gap_mm() >= LEAST_GAP_MM).unwrap_or(tables.len().saturating_sub(1));
        let mut table = tables.swap_remove(fit);
        table.spread(left_mm);
        table
    }

    /// The same without second lines for what the columns do not hold, for a table that stands whole elsewhere.
    pub fn brief(self) -> Self {
        Self { brief: true, ..self }
    }

    /// Height of the head.
    pub fn head_mm(&self) -> f64 {
        11.0
    }

    /// Height of a row.
    pub fn row_mm(&self, row: usize) -> f64 {
        let small = Style::text(grid::LEAST_PT).leading_mm();
        ABOVE_MM + BELOW_MM + small * (self.above_lines(row).len() + self.below_lines(row).len()) as f64
    }

    /// Heads of both halves and of all columns, and the rule below.
    pub fn draw_head(&self, page: &mut Page, left_mm: f64) {
        let y_mm = page.y_mm;
        for (half, word) in [(Half::Toward, &self.words.toward), (Half::Away, &self.words.away)] {
            if let Some(middle_mm) = self.middle_of(half) {
                page.text((middle_mm, y_mm + 4.0), Style::bold(grid::SMALL_PT).centred(), word);
            }
        }
        let base = y_mm + 8.6;
        for placed in &self.columns {
            self.draw_column_head(page, placed, base);
        }
        page.rule((left_mm, y_mm + self.head_mm() - 0.5), grid::TEXT_MM, 0.25, grid::INK);
        page.y_mm += self.head_mm();
    }

    /// One row, and the thin rule below.
    pub fn draw_row(&self, page: &mut Page, left_mm: f64, row: usize) {
        let y_mm = page.y_mm;
        let small = Style::text(grid::LEAST_PT).grey();
        let top = page.lines((left_mm, y_mm + 0.4), Style::bold(grid::LEAST_PT), &self.above_lines(row));
        let base = if self.above_lines(row).is_empty() { y_mm + ABOVE_MM } else { top + ABOVE_MM - 0.4 };
        for placed in &self.columns {
            self.draw_entry(page, placed, base, row);
        }
        page.lines((left_mm, base), small, &self.below_lines(row));
        page.y_mm += self.row_mm(row);
        page.rule((left_mm, page.y_mm), grid::TEXT_MM, 0.08, grid::PALE);
    }

    fn draw_column_head(&self, page: &mut Page, placed: &Placed, base: f64) {
        let style = Style::text(grid::LEAST_PT).grey();
        let head = placed.column.head(self.words);
        match (placed.column, placed.column.align()) {
            (Column::Strip(_), _) => {
                let middle = placed.left_mm + placed.width_mm / 2.0;
                for (place, label) in [-1.0, 0.0, 1.0].into_iter().zip(&self.words.strip_scale) {
                    page.text((middle + place * strip::REACH_MM, base), style.centred(), label);
                }
            }
            (_, Align::Left) => page.text((placed.left_mm, base), style, &head),
            _ => page.text((placed.left_mm + placed.width_mm, base), style.right(), &head),
        }
    }

    fn draw_entry(&self, page: &mut Page, placed: &Placed, base: f64, row: usize) {
        let row = &self.rows[row];
        if let (Column::Strip(half), true) = (placed.column, placed.column.align() == Align::Middle) {
            let middle = placed.left_mm + placed.width_mm / 2.0;
            let cap_mm = fonts::cap_height_mm(fonts::Face::Regular, self.size_pt);
            return strip::draw(page, (middle, base - cap_mm / 2.0), columns::cell(row, half));
        }
        let Some(entry) = placed.column.entry(row) else { return };
        let style = style(&entry, self.size_pt);
        let x_mm = match placed.column.align() {
            Align::Point if !entry.grey => placed.left_mm + placed.point_mm - before_point_mm(style, &entry.text),
            Align::Point => placed.left_mm + placed.width_mm,
            _ => placed.left_mm,
        };
        let anchor = if entry.grey && placed.column.align() == Align::Point { Anchor::End } else { Anchor::Start };
        page.text((x_mm, base), Style { anchor, ..style }, &entry.text);
    }

    /// The name where it has a line of its own.
    fn above_lines(&self, row: usize) -> Vec<String> {
        if !self.names_above {
            return Vec::new();
        }
        Style::bold(grid::LEAST_PT).lines(&self.rows[row].name, grid::TEXT_MM)
    }

    /// What the columns do not hold: label, closed form, exact values.
    fn below_lines(&self, row: usize) -> Vec<String> {
        if self.brief {
            return Vec::new();
        }
        let row = &self.rows[row];
        let has = |wanted: Column| self.columns.iter().any(|placed| placed.column == wanted);
        let form = row.formula.clone().filter(|_| !has(Column::Formula));
        let exact = exact_pair(row).filter(|_| !has(Column::Exact(Half::Toward)));
        let quadrature = quadrature_pair(row, self.words);
        let quadrature = quadrature.filter(|_| !has(Column::Quadrature(Half::Toward)));
        let parts = [row.label.clone(), form, exact, quadrature];
        let parts: Vec<String> = parts.into_iter().flatten().collect();
        if parts.is_empty() {
            Vec::new()
        } else {
            Style::text(grid::LEAST_PT).lines(&parts.join("  ·  "), grid::TEXT_MM)
        }
    }

    fn middle_of(&self, half: Half) -> Option<f64> {
        let mut mine = self.columns.iter().filter(|placed| placed.column.half() == Some(half));
        let first = mine.next()?;
        let last = mine.next_back().unwrap_or(first);
        Some((first.left_mm + last.left_mm + last.width_mm) / 2.0)
    }

    /// The space between columns if the whole width is used; that between the halves counts more.
    fn gap_mm(&self) -> f64 {
        let used: f64 = self.columns.iter().map(|placed| placed.width_mm).sum();
        let gaps: f64 = self.columns.windows(2).map(|pair| gap_weight(&pair[0], &pair[1])).sum();
        (grid::TEXT_MM - used) / gaps.max(1.0)
    }

    fn spread(&mut self, left_mm: f64) {
        let gap_mm = self.gap_mm().min(MOST_GAP_MM);
        let mut x_mm = left_mm;
        let weights: Vec<f64> = self.columns.windows(2).map(|pair| gap_weight(&pair[0], &pair[1])).collect();
        for (placed, weight) in self.columns.iter_mut().zip(weights.into_iter().chain([0.0])) {
            placed.left_mm = x_mm;
            x_mm += placed.width_mm + gap_mm * weight;
        }
    }
}

fn gap_weight(left: &Placed, right: &Placed) -> f64 {
    if left.column.half() == right.column.half() { 1.0 } else { HALVES_APART }
}

fn exact_pair(row: &TableRow) -> Option<String> {
    let text = |half| columns::cell(row, half).exact.as_ref().map(|exact| exact.text.clone());
    let shown = |text: Option<String>| text.unwrap_or_else(|| "–".to_string());
    match (text(Half::Toward), text(Half::Away)) {
        (None, None) => None,
        (Some(toward), Some(away)) if toward == away => Some(format!("{toward} h/e²")),
        (toward, away) => Some(format!("{} | {} h/e²", shown(toward), shown(away))),
    }
}

fn quadrature_pair(row: &TableRow, words: &Words) -> Option<String> {
    let text = |half| columns::cell(row, half).quadrature.as_ref().map(|number| number.text.clone());
    let shown = |text: Option<String>| text.unwrap_or_else(|| "–".to_string());
    match (text(Half::Toward), text(Half::Away)) {
        (None, None) => None,
        (toward, away) => Some(format!("{} {} | {} kΩ", words.quadrature, shown(toward), shown(away))),
    }
}

fn style(entry: &Entry, size_pt: f64) -> Style {
    let style = if entry.bold { Style::bold(size_pt) } else { Style::text(size_pt) };
    if entry.grey { style.grey() } else { style }
}

/// Width of what stands before the decimal point, or before the bracket where there is none.
fn before_point_mm(style: Style, text: &str) -> f64 {
    let end = text.find(['.', '(']).unwrap_or(text.len());
    style.width_mm(&text[..end])
}

fn measure(column: Column, rows: &[TableRow], words: &Words, size_pt: f64) -> Placed {
    let (mut before_mm, mut after_mm, mut whole_mm) =
        (0.0_f64, 0.0_f64, Style::text(grid::LEAST_PT).width_mm(&column.head(words)));
    if let Column::Strip(_) = column {
        whole_mm = strip::WIDTH_MM;
    }
    for entry in rows.iter().filter_map(|row| column.entry(row)) {
        let style = style(&entry, size_pt);
        let width_mm = style.width_mm(&entry.text);
        if column.align() == Align::Point && !entry.grey {
            let before = before_point_mm(style, &entry.text);
            before_mm = before_mm.max(before);
            after_mm = after_mm.max(width_mm - before);
        } else {
            whole_mm = whole_mm.max(width_mm);
        }
    }
    let width_mm = whole_mm.max(before_mm + after_mm);
    Placed { column, left_mm: 0.0, width_mm, point_mm: width_mm - after_mm }
}
