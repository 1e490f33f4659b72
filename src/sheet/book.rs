//! The pages after the first, one after the other.

use crate::report::Report;
use crate::sheet::flow::Line;
use crate::sheet::frame;
use crate::sheet::grid::Paper;
use crate::sheet::page::Page;

/// Finished pages and the one that is being filled.
#[derive(Clone)]
pub struct Book<'a> {
    /// What is printed.
    pub report: &'a Report,
    /// The page that is being filled.
    pub page: Page,
    done: Vec<Page>,
}

impl<'a> Book<'a> {
    /// A book with one empty page.
    pub fn new(report: &'a Report, paper: Paper) -> Self {
        Self { report, page: fresh(report, paper), done: Vec::new() }
    }

    /// Turns to a fresh page where less than `wanted_mm` are left; gives whether it did.
    pub fn turn_unless(&mut self, wanted_mm: f64) -> bool {
        let short = self.page.left_mm() < wanted_mm;
        if short {
            self.turn();
        }
        short
    }

    /// Turns to a fresh page.
    pub fn turn(&mut self) {
        let next = fresh(self.report, self.page.paper);
        self.done.push(std::mem::replace(&mut self.page, next));
    }

    /// Lines over the whole width; where a page turns within a table, its head is repeated.
    pub fn lines(&mut self, lines: &[Line]) {
        let mut at = 0;
        while at < lines.len() {
            let block = lines[at..].iter().position(|line| !line.kept).map_or(lines.len(), |end| at + end + 1);
            let height_mm: f64 = lines[at..block].iter().map(Line::height_mm).sum();
            if self.turn_unless(height_mm) {
                let head = lines[at].repeated.clone();
                head.iter().for_each(|line| self.line(line));
            }
            lines[at..block].iter().for_each(|line| self.line(line));
            at = block;
        }
    }

    fn line(&mut self, line: &Line) {
        let page = &mut self.page;
        page.y_mm += line.height_mm();
        line.draw(page, page.paper.left_mm(), page.y_mm);
    }

    /// Number of pages so far.
    pub fn pages(&self) -> usize {
        self.done.len() + 1
    }

    /// All pages.
    pub fn finish(mut self) -> Vec<Page> {
        self.done.push(self.page);
        self.done
    }
}

fn fresh(report: &Report, paper: Paper) -> Page {
    let mut page = Page::new(paper);
    frame::later_head(&mut page, report);
    page
}
