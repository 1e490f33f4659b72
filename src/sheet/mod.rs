//! Sheets: a report and its drawings composed to pages, and pages to the bytes of a PDF.
//!
//! Owns: [`compose`], [`pdf`] and the HTML twin [`html`]. Takes a report, finished scenes, titles and files to attach;
//! gives pages and bytes. Must never do arithmetic on results, round a number that is printed, or touch the disk: the only
//! numbers that are computed here are millimetres.

pub mod pdf;

mod answer;
mod book;
mod charts;
mod closing;
mod columns;
mod compose;
mod document;
mod drawings;
mod flow;
mod frame;
mod grid;
mod guide;
mod html;
mod listing;
mod page;
mod strip;
mod table;
mod typeset;
mod whys;

pub use charts::scenes as chart_scenes;
pub use compose::Pages;
pub use compose::compose;
pub use document::document;
pub use document::spelled;
pub use grid::HALF_MM as DRAWING_WIDTH_MM;
pub use grid::Paper;
pub use grid::TEXT_MM as WIDE_DRAWING_MM;
pub use html::html;
pub use typeset::spoken;

#[cfg(test)]
mod overlap;
#[cfg(test)]
mod sample;
#[cfg(test)]
mod tests;
