//! Head and foot.

use crate::report::Report;
use crate::sheet::grid;
use crate::sheet::grid::MARGIN_MM;
use crate::sheet::grid::TEXT_MM;
use crate::sheet::guide::Target;
use crate::sheet::page::Page;
use crate::sheet::typeset::Style;

/// Width that the identity may take beside the lines at the right.
const IDENTITY_MM: f64 = 104.0;

/// The head of the first page: identity large, what the sheet is at the right.
pub fn first_head(page: &mut Page, report: &Report) {
    let (left, right) = (page.paper.left_mm(), page.paper.right_mm());
    let identity = &report.identity;
    let large = Style::bold(grid::IDENTITY_PT);
    page.text((left, MARGIN_MM + 6.4), large, &large.shortened(&identity.device, IDENTITY_MM));
    let text = Style::text(grid::TEXT_PT);
    let title = text.lines(&identity.title, IDENTITY_MM);
    let shown: Vec<String> = match title.as_slice() {
        [first, second, _, ..] => vec![first.clone(), text.shortened(&format!("{second} …"), IDENTITY_MM - 4.0)],
        few => few.to_vec(),
    };
    let title_end = page.lines((left, MARGIN_MM + 7.4), text, &shown);
    let mut base = MARGIN_MM + 3.2;
    page.text((right, base), Style::bold(grid::TEXT_PT).right(), &report.words.kind);
    for line in &identity.lines {
        for part in text.lines(line, TEXT_MM - IDENTITY_MM - 4.0) {
            base += 4.2;
            page.text((right, base), text.right(), &part);
        }
    }
    page.y_mm = title_end.max(base) + 2.6;
    page.rule((left, page.y_mm), TEXT_MM, grid::HEAVY_MM, grid::INK);
}

/// The small head of every later page.
pub fn later_head(page: &mut Page, report: &Report) {
    let (left, right) = (page.paper.left_mm(), page.paper.right_mm());
    let base = MARGIN_MM + 3.0;
    let bold = Style::bold(grid::TEXT_PT);
    let device = bold.shortened(&report.identity.device, 70.0);
    page.text((left, base), bold, &device);
    page.jump([left, base - 3.4, left + bold.width_mm(&device), base + 0.9], Target::Answer, &device);
    let grey = Style::text(grid::SMALL_PT).grey().right();
    page.text((right, base), grey, &later_line(report, grey));
    page.y_mm = base + 1.9;
    page.rule((left, page.y_mm), TEXT_MM, grid::THIN_MM, grid::INK);
    page.y_mm += 2.0;
}

/// All lines of the identity where they fit, else the first; the whole stands on the first page.
fn later_line(report: &Report, style: Style) -> String {
    const ROOM_MM: f64 = 98.0;
    let lines = &report.identity.lines;
    let whole = lines.join(", ");
    if style.width_mm(&whole) <= ROOM_MM {
        return whole;
    }
    style.shortened(lines.first().map_or("", String::as_str), ROOM_MM)
}

/// The feet of all pages, once their number is known.
pub fn feet(pages: &mut [Page], report: &Report) {
    let count = pages.len();
    for (index, page) in pages.iter_mut().enumerate() {
        foot(page, report, (index + 1, count));
    }
}

fn foot(page: &mut Page, report: &Report, (number, count): (usize, usize)) {
    let (left, right, words) = (page.paper.left_mm(), page.paper.right_mm(), &report.words);
    let base = page.paper.height_mm() - MARGIN_MM + 1.4;
    page.rule((left, base - 4.0), TEXT_MM, grid::THIN_MM, grid::PALE);
    let grey = Style::text(grid::LEAST_PT).grey();
    page.text((left, base), grey, &grey.shortened(&report.identity.foot, 52.0));
    page.text(((left + right) / 2.0, base), grey.centred(), &words.not_a_certificate);
    let end = if number == count { format!(" · {}", words.end_of_sheet) } else { String::new() };
    page.text((right, base), grey.right(), &format!("{} {number} {} {count}{end}", words.page, words.of));
}
