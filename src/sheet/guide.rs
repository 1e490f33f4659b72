//! Ways through a sheet: places that can be gone to, links to them, and the entries of the viewer's table of contents.

use std::collections::BTreeMap;

use crate::sheet::page::Page;
use crate::sheet::pdf::Bookmark;
use crate::sheet::pdf::Link;
use crate::sheet::typeset::spoken;

/// Space above the place that a viewer goes to, in mm.
const ABOVE_MM: f64 = 1.0;

/// A place that can be gone to.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Target {
    /// The first page.
    Answer,
    /// An operating point, by its index.
    Point(usize),
    /// Its drawings.
    Drawings(usize),
    /// The table of all its readings.
    Table(usize),
    /// One row of that table, by the index of the point and of the row.
    Row(usize, usize),
    /// Its chart.
    Chart(usize),
    /// A part of the sheet by its heading.
    Part(String),
}

/// A place on a page.
#[derive(Clone, Debug, PartialEq)]
pub struct Anchor {
    /// What stands there.
    pub target: Target,
    /// Height in mm from the top.
    pub y_mm: f64,
    /// Its entry in the table of contents, if it has one: depth and words.
    pub entry: Option<(usize, String)>,
}

/// An area of a page that leads to a place.
#[derive(Clone, Debug, PartialEq)]
pub struct Jump {
    /// Left, top, right, bottom in mm.
    pub sides_mm: [f64; 4],
    /// Where it leads.
    pub target: Target,
    /// What a viewer that cannot be seen says of it.
    pub words: String,
}

/// A heading's place and its entry in the table of contents.
pub fn headed(target: Target, depth: usize, title: &str) -> Anchor {
    Anchor { target, y_mm: 0.0, entry: Some((depth, spoken(title))) }
}

/// The page of every place, counted from 1.
#[derive(Clone, Debug, Default)]
pub struct Contents {
    places: BTreeMap<Target, usize>,
}

impl Contents {
    /// Of pages, the first of which has a number.
    pub fn of(pages: &[Page], first: usize) -> Self {
        let mut places = BTreeMap::new();
        for (page, anchor) in pages.iter().enumerate().flat_map(|(at, page)| page.anchors.iter().map(move |a| (at, a)))
        {
            places.entry(anchor.target.clone()).or_insert(first + page);
        }
        Self { places }
    }

    /// The page of a place.
    pub fn page_of(&self, target: &Target) -> Option<usize> {
        self.places.get(target).copied()
    }

    /// The part that a text names in quotation marks.
    pub fn quoted(&self, text: &str) -> Option<Target> {
        let named = |target: &&Target| matches!(target, Target::Part(title) if text.contains(&format!("“{title}”")));
        self.places.keys().find(named).cloned()
    }
}

/// The links of all pages whose places exist.
pub fn links(pages: &[Page]) -> Vec<Link> {
    let places = places(pages);
    let jumps = pages.iter().enumerate().flat_map(|(page, one)| one.jumps.iter().map(move |jump| (page, jump)));
    let link = |(page, jump): (usize, &Jump)| {
        let &(to_page, to_y_mm) = places.get(&jump.target)?;
        Some(Link { page, sides_mm: jump.sides_mm, to_page, to_y_mm, words: jump.words.clone() })
    };
    jumps.filter_map(link).collect()
}

fn places(pages: &[Page]) -> BTreeMap<Target, (usize, f64)> {
    let mut places = BTreeMap::new();
    for (index, page) in pages.iter().enumerate() {
        for anchor in &page.anchors {
            let y_mm = (anchor.y_mm - ABOVE_MM).max(0.0);
            places.entry(anchor.target.clone()).or_insert((index, y_mm));
        }
    }
    places
}

/// The table of contents in reading order; an entry hangs on the last one above it.
pub fn bookmarks(pages: &[Page]) -> Vec<Bookmark> {
    let mut entries: Vec<Bookmark> = Vec::new();
    for (page, anchor) in pages.iter().enumerate().flat_map(|(at, page)| page.anchors.iter().map(move |a| (at, a))) {
        if let Some((depth, title)) = &anchor.entry {
            let y_mm = (anchor.y_mm - ABOVE_MM).max(0.0);
            let bookmark = Bookmark { title: title.clone(), page, y_mm, children: Vec::new() };
            hang(&mut entries, *depth, bookmark);
        }
    }
    entries
}

fn hang(entries: &mut Vec<Bookmark>, depth: usize, bookmark: Bookmark) {
    match entries.last_mut() {
        Some(above) if depth > 0 => hang(&mut above.children, depth - 1, bookmark),
        _ => entries.push(bookmark),
    }
}
