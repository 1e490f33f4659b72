//! Pages to the bytes of a PDF 1.7 file (ISO 32000-1): text that can be selected and found, lines and areas, no images.
//!
//! The same document gives the same bytes on every machine: there is no clock and no chance in it. printpdf writes
//! pages, contents and fonts; what it leaves out or writes otherwise is put right on the objects that it hands out.

mod attach;
mod colour;
mod fonts;
mod links;
mod marks;
mod metadata;
mod outline;

use lopdf::Dictionary;
use lopdf::Object;
use md5::Digest;

use crate::figure::scene::Scene;

/// Everything that a PDF holds.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct PdfDocument {
    /// The pages in order.
    pub pages: Vec<Scene>,
    /// Title, shown in the viewer's title bar.
    pub title: String,
    /// One sentence on the content.
    pub subject: String,
    /// A name that no other document has.
    pub identifier: String,
    /// What kind of document it is.
    pub kind: String,
    /// What belongs to it: the record carried inside, with its format.
    pub related: Vec<String>,
    /// Words to be found by.
    pub keywords: Vec<String>,
    /// Date `YYYY-MM-DD` of what the document describes; without one the file carries no date at all.
    pub date: Option<String>,
    /// Language of the text as in RFC 3066; `en-GB` for our own templates.
    pub language: String,
    /// Entries of the viewer's table of contents.
    pub bookmarks: Vec<Bookmark>,
    /// Links between the pages.
    pub links: Vec<Link>,
    /// Names of pages in the viewer; without any they are counted from 1.
    pub page_labels: Vec<PageLabel>,
    /// Files carried inside.
    pub attachments: Vec<Attachment>,
}

/// An entry of the table of contents. One that points to a page that does not exist is left out.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Bookmark {
    /// Words of the entry.
    pub title: String,
    /// Page, counted from 0.
    pub page: usize,
    /// Height on the page in mm from its top.
    pub y_mm: f64,
    /// Entries below this one, at first folded away.
    pub children: Vec<Bookmark>,
}

/// An area of a page that leads to a place on a page.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Link {
    /// The page that it stands on, counted from 0.
    pub page: usize,
    /// Left, top, right, bottom in mm from the top left corner.
    pub sides_mm: [f64; 4],
    /// The page that it leads to, counted from 0.
    pub to_page: usize,
    /// Height there in mm from the top.
    pub to_y_mm: f64,
    /// What it leads to, in words.
    pub words: String,
}

/// Pages from one on are named by a prefix and a number.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct PageLabel {
    /// The first page so named, counted from 0.
    pub first_page: usize,
    /// Words before the number.
    pub prefix: String,
    /// Number of the first page.
    pub first_number: u32,
}

/// A file carried inside the PDF, byte for byte.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Attachment {
    /// File name; it is made safe for any file system.
    pub name: String,
    /// Media type, as `application/toml`.
    pub mime: String,
    /// What the file is, in a few words.
    pub description: String,
    /// What the file is to the pages.
    pub relationship: Relationship,
    /// Content.
    pub bytes: Vec<u8>,
}

/// What an attached file is to the pages (ISO 32000-2, 7.11.3, `AFRelationship`).
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Relationship {
    /// The pages were made from it.
    Source,
    /// It holds the data behind a table or chart.
    Data,
    /// It says the same in another form.
    Alternative,
    /// It adds to the pages.
    Supplement,
    /// None of these.
    Unspecified,
}

/// The bytes of the PDF file. Characters that the fonts lack are printed by a near relation or by their number.
pub fn pdf(document: &PdfDocument) -> Vec<u8> {
    let (mut file, used) = printed(document);
    file.version = "1.7".to_string();
    file.binary_mark = vec![0xE2, 0xE3, 0xCF, 0xD3];
    fonts::correct(&used, &mut file);
    tidy_pages(document, &mut file);

    let mut entries = metadata::entries(document, &mut file);
    entries.extend(colour::entries(&mut file));
    let goals = outline::Goals::of(document, &file);
    entries.extend(outline::entries(document, &goals, &mut file));
    links::append(document, &goals, &mut file);
    entries.extend(attach::entries(document, &mut file));
    set_catalog(&mut file, entries);

    file.prune_objects();
    file.renumber_objects();
    file.compress();
    identified(file)
}

/// Names and values for the document's catalog.
type Entries = Vec<(&'static str, Object)>;

/// Pages and fonts as printpdf writes them.
fn printed(document: &PdfDocument) -> (lopdf::Document, fonts::Used) {
    let mut used = fonts::Used::new();
    let mut printed = printpdf::PdfDocument::new("");
    printed.pages = document.pages.iter().map(|scene| marks::page(scene, &mut used)).collect();
    fonts::embed(&used, &mut printed.resources);
    // Path operators go through as they are, which printpdf allows only with this option off.
    let options = printpdf::PdfSaveOptions { secure: false, ..Default::default() };
    (printed.to_lopdf_document(&options, &mut Vec::new()), used)
}

/// Sets the page boxes to the scenes' sizes and drops the empty lists of links, images and shadings.
fn tidy_pages(document: &PdfDocument, file: &mut lopdf::Document) {
    let page_ids: Vec<_> = file.get_pages().into_values().collect();
    for (scene, page_id) in document.pages.iter().zip(page_ids) {
        let size = [scene.width_mm, scene.height_mm].map(marks::Milli::from_mm);
        let sheet = vec![0.into(), 0.into(), size[0].into(), size[1].into()];
        let Ok(page) = file.get_dictionary_mut(page_id) else { continue };
        for name in ["CropBox", "Annots"] {
            page.remove(name.as_bytes());
        }
        for name in ["MediaBox", "TrimBox"] {
            page.set(name, sheet.clone());
        }
        let resources = page.get(b"Resources").and_then(Object::as_reference);
        let Ok(resources) = resources.and_then(|id| file.get_dictionary_mut(id)) else { continue };
        for name in ["XObject", "ExtGState", "Shading"] {
            resources.remove(name.as_bytes());
        }
    }
}

fn set_catalog(file: &mut lopdf::Document, entries: Entries) {
    let Ok(catalog) = file.catalog_mut() else { return };
    catalog.set("PageLayout", Object::Name(b"SinglePage".to_vec()));
    for (name, value) in entries {
        catalog.set(name, value);
    }
}

/// The file with an identifier that comes from its content, so that equal documents are equal files.
fn identified(mut file: lopdf::Document) -> Vec<u8> {
    file.trailer.remove(b"ID");
    let digest = md5::Md5::digest(saved(&mut file)).to_vec();
    let id = Object::String(digest, lopdf::StringFormat::Hexadecimal);
    file.trailer.set("ID", vec![id.clone(), id]);
    saved(&mut file)
}

fn saved(file: &mut lopdf::Document) -> Vec<u8> {
    let mut bytes = Vec::new();
    // Only the target can fail, and memory does not.
    let _done = file.save_to(&mut bytes);
    bytes
}

/// A dictionary from names and values.
fn dictionary<const N: usize>(entries: [(&str, Object); N]) -> Dictionary {
    entries.into_iter().collect()
}

/// A name object.
fn name(text: &str) -> Object {
    Object::Name(text.as_bytes().to_vec())
}

#[cfg(test)]
mod tests;
