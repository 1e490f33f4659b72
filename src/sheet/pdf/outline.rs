//! The viewer's table of contents and the names of pages (ISO 32000-1, 12.3.3 and 12.4.2).

use lopdf::Dictionary;
use lopdf::Object;
use lopdf::ObjectId;
use lopdf::text_string;

use crate::sheet::pdf::Bookmark;
use crate::sheet::pdf::Entries;
use crate::sheet::pdf::PageLabel;
use crate::sheet::pdf::PdfDocument;
use crate::sheet::pdf::dictionary;
use crate::sheet::pdf::marks::Milli;
use crate::sheet::pdf::name;

/// Catalog entries for bookmarks and page names.
pub(super) fn entries(document: &PdfDocument, goals: &Goals, file: &mut lopdf::Document) -> Entries {
    let mut entries = Entries::new();
    let root = file.new_object_id();
    if let Some(branch) = branch(&document.bookmarks, root, goals, file) {
        let mut outlines = dictionary([("Type", name("Outlines"))]);
        branch.hang(&mut outlines, 1);
        file.set_object(root, outlines);
        entries.push(("Outlines", root.into()));
    }
    let mode = if entries.is_empty() { "UseNone" } else { "UseOutlines" };
    entries.push(("PageMode", name(mode)));
    if !document.page_labels.is_empty() {
        entries.push(("PageLabels", page_labels(&document.page_labels).into()));
    }
    entries
}

/// Object and height in mm of each page.
pub(super) struct Goals(Vec<(ObjectId, f64)>);

impl Goals {
    /// The pages of a file.
    pub(super) fn of(document: &PdfDocument, file: &lopdf::Document) -> Self {
        let heights_mm = document.pages.iter().map(|scene| scene.height_mm);
        Self(file.get_pages().into_values().zip(heights_mm).collect())
    }

    /// A page, counted from 0.
    pub(super) fn page(&self, page: usize) -> Option<(ObjectId, f64)> {
        self.0.get(page).copied()
    }

    /// A place on a page, at a height in mm from its top; the viewer keeps its size.
    pub(super) fn place(&self, page: usize, y_mm: f64) -> Option<Object> {
        let (page, height_mm) = self.page(page)?;
        let top = Milli::from_mm(height_mm - y_mm);
        Some(vec![page.into(), name("XYZ"), 0.into(), top.into(), Object::Null].into())
    }
}

/// The entries below one entry.
struct Branch {
    first: ObjectId,
    last: ObjectId,
    count: i64,
}

impl Branch {
    /// Hangs the branch on the entry above; sign 1 shows it unfolded, −1 folded.
    fn hang(&self, above: &mut Dictionary, sign: i64) {
        above.set("First", self.first);
        above.set("Last", self.last);
        above.set("Count", sign * self.count);
    }
}

/// Writes the entries below `parent`, and what is below them.
fn branch(bookmarks: &[Bookmark], parent: ObjectId, goals: &Goals, file: &mut lopdf::Document) -> Option<Branch> {
    let known = bookmarks.iter().filter_map(|mark| Some((mark, goals.place(mark.page, mark.y_mm)?)));
    let known: Vec<(&Bookmark, Object, ObjectId)> =
        known.map(|(mark, goal)| (mark, goal, file.new_object_id())).collect();
    for (index, (bookmark, goal, id)) in known.iter().enumerate() {
        let mut entry =
            dictionary([("Title", text_string(&bookmark.title)), ("Parent", parent.into()), ("Dest", goal.clone())]);
        if let Some(&(_, _, previous)) = index.checked_sub(1).and_then(|index| known.get(index)) {
            entry.set("Prev", previous);
        }
        if let Some(&(_, _, next)) = known.get(index + 1) {
            entry.set("Next", next);
        }
        if let Some(below) = branch(&bookmark.children, *id, goals, file) {
            below.hang(&mut entry, -1);
        }
        file.set_object(*id, entry);
    }
    Some(Branch { first: known.first()?.2, last: known.last()?.2, count: known.len() as i64 })
}

fn page_labels(labels: &[PageLabel]) -> Dictionary {
    let mut sorted: Vec<&PageLabel> = labels.iter().collect();
    sorted.sort_by_key(|label| label.first_page);
    let range = |label: &PageLabel| {
        let numbers = i64::from(label.first_number.max(1));
        let mut range = dictionary([("S", name("D")), ("St", numbers.into())]);
        if !label.prefix.is_empty() {
            range.set("P", text_string(&label.prefix));
        }
        range
    };
    let numbers = sorted.into_iter().flat_map(|label| [(label.first_page as i64).into(), range(label).into()]);
    dictionary([("Nums", numbers.collect::<Vec<Object>>().into())])
}
