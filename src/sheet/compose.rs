//! From a report and its drawings to finished pages.

use crate::figure::scene::Scene;
use crate::report::Report;
use crate::sheet::answer;
use crate::sheet::book::Book;
use crate::sheet::closing;
use crate::sheet::closing::Leftover;
use crate::sheet::frame;
use crate::sheet::grid::Paper;
use crate::sheet::guide;
use crate::sheet::guide::Contents;
use crate::sheet::listing;
use crate::sheet::pdf::Bookmark;
use crate::sheet::pdf::Link;

/// Finished pages and the ways through them.
#[derive(Clone, Debug, PartialEq)]
pub struct Pages {
    /// The pages in order.
    pub scenes: Vec<Scene>,
    /// The table of contents.
    pub bookmarks: Vec<Bookmark>,
    /// Links between the pages.
    pub links: Vec<Link>,
}

/// All pages of a sheet. `drawings` holds one pair per operating point, field toward first, each at most
/// [`DRAWING_WIDTH_MM`](crate::sheet::DRAWING_WIDTH_MM) wide; a point without a pair goes without.
pub fn compose(report: &Report, drawings: &[[Scene; 2]], paper: Paper) -> Pages {
    let answer = |contents: &Contents| answer::compose(report, drawings.get(report.answer_point), (paper, contents));
    let first = answer(&Contents::default());
    let leftover = Leftover { columns_cut: first.columns_cut, field_left: first.field_left };
    let mut book = Book::new(report, paper);
    listing::compose(&mut book, drawings, first.rules_left);
    closing::compose(&mut book, leftover);
    let later = book.finish();
    // Once more, now that the pages are known to which it refers.
    let mut pages = vec![answer(&Contents::of(&later, 2)).page];
    pages.extend(later);
    frame::feet(&mut pages, report);
    let (bookmarks, links) = (guide::bookmarks(&pages), guide::links(&pages));
    Pages { scenes: pages.into_iter().map(|page| page.scene).collect(), bookmarks, links }
}
