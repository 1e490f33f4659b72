//! From a report and its drawings to finished pages.

use crate::figure::scene::Scene;
use crate::report::Report;
use crate::sheet::answer;
use crate::sheet::book::Book;
use crate::sheet::closing;
use crate::sheet::closing::Leftover;
use crate::sheet::frame;
use crate::sheet::grid::Paper;
use crate::sheet::listing;

/// All pages of a sheet. `drawings` holds one pair per operating point, field toward first, each at most
/// [`DRAWING_WIDTH_MM`](crate::sheet::DRAWING_WIDTH_MM) wide; a point without a pair goes without.
pub fn compose(report: &Report, drawings: &[[Scene; 2]], paper: Paper) -> Vec<Scene> {
    let first = answer::compose(report, drawings.get(report.answer_point), paper);
    let leftover = Leftover { columns_cut: first.columns_cut, field_left: first.field_left };
    let mut book = Book::new(report, paper);
    listing::compose(&mut book, drawings, first.rules_left);
    closing::compose(&mut book, leftover);
    let mut pages = vec![first.page];
    pages.extend(book.finish());
    frame::feet(&mut pages, report);
    pages.into_iter().map(|page| page.scene).collect()
}
