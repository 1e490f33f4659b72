//! Links from areas of pages to places in the same file (ISO 32000-1, 12.5.6.5).

use std::collections::BTreeMap;

use lopdf::Object;
use lopdf::ObjectId;
use lopdf::text_string;

use crate::sheet::pdf::Link;
use crate::sheet::pdf::PdfDocument;
use crate::sheet::pdf::dictionary;
use crate::sheet::pdf::marks::Milli;
use crate::sheet::pdf::name;
use crate::sheet::pdf::outline::Goals;

/// Flag of an annotation that is printed with its page (ISO 32000-1, table 165); the archive standards ask for it.
const PRINT: i64 = 4;

/// Hangs the links on their pages; one from or to a page that does not exist is left out.
pub(super) fn append(document: &PdfDocument, goals: &Goals, file: &mut lopdf::Document) {
    let mut by_page: BTreeMap<ObjectId, Vec<Object>> = BTreeMap::new();
    for link in &document.links {
        if let (Some((page, height_mm)), Some(goal)) = (goals.page(link.page), goals.place(link.to_page, link.to_y_mm))
        {
            let annotation = file.add_object(annotation(link, height_mm, goal));
            by_page.entry(page).or_default().push(annotation.into());
        }
    }
    for (page, annotations) in by_page {
        if let Ok(page) = file.get_dictionary_mut(page) {
            page.set("Annots", annotations);
        }
    }
}

fn annotation(link: &Link, height_mm: f64, goal: Object) -> lopdf::Dictionary {
    let [left, top, right, bottom] = link.sides_mm;
    let rectangle = [left, height_mm - bottom, right, height_mm - top].map(|mm| Object::from(Milli::from_mm(mm)));
    dictionary([
        ("Type", name("Annot")),
        ("Subtype", name("Link")),
        ("Rect", rectangle.to_vec().into()),
        ("Border", vec![0.into(), 0.into(), 0.into()].into()),
        ("F", PRINT.into()),
        ("Contents", text_string(&link.words)),
        ("Dest", goal),
    ])
}
