//! What a PDF shows, whatever form it has: a checksum for every page and one for the rest.
//!
//! Another program that saves the file again may number, order and pack its objects otherwise. A checksum is made from the
//! objects as they are met from the pages on, unpacked, and so does not see that.

use std::collections::BTreeMap;
use std::rc::Rc;

use sha2::Digest;
use sha2::Sha256;

use crate::archive::pdf::PdfFile;
use crate::archive::pdf::Read;
use crate::archive::pdf::object::Dict;
use crate::archive::pdf::object::Object;

/// Most pages of a file.
const MOST_PAGES: usize = 5_000;
/// Objects that lead to one another.
const DEEPEST: usize = 200;
/// Parts of objects that go into the checksums of one file.
const MOST_PARTS: usize = 1_000_000;
/// What a page takes over from the branch on which it stands (ISO 32000-1, 7.7.3.4).
const INHERITED: [&str; 4] = ["Resources", "MediaBox", "CropBox", "Rotate"];
/// How a stream is packed is no content.
const PACKING: [&str; 5] = ["Length", "Filter", "DecodeParms", "DL", "Parent"];

type Sum = [u8; 32];

/// Checksums of what a file shows.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Content {
    /// One per page.
    pub pages: Vec<Sum>,
    /// Everything else but the attachments: title, bookmarks, names of pages, description.
    pub rest: Sum,
}

/// What a file shows.
pub fn content(file: &mut PdfFile) -> Read<Content> {
    let trailer = file.trailer().clone();
    let root = file.dict(&trailer, "Root")?;
    let pages = pages(file, root.get("Pages"))?;
    let index = pages.iter().enumerate().filter_map(|(at, (number, _))| Some(((*number)?, at))).collect();
    let mut sums = Sums { file, index, known: BTreeMap::new(), left: MOST_PARTS };
    let shown = pages.iter().map(|(_, page)| sums.page(page)).collect::<Read<Vec<Sum>>>()?;
    let kept = |(name, _): &(Vec<u8>, Object)| ![&b"Pages"[..], b"AF", b"Names"].contains(&name.as_slice());
    let rest = Dict(root.0.iter().filter(|entry| kept(entry)).cloned().collect());
    let rest = Dict(vec![(b"Root".to_vec(), Object::Dict(rest)), (b"Info".to_vec(), trailer.get("Info").clone())]);
    Ok(Content { pages: shown, rest: sums.dict(&rest, 0)? })
}

/// A page, and what it takes over from the branches above it.
type Page = (Dict, Rc<Dict>);

/// All pages with their numbers.
fn pages(file: &mut PdfFile, root: &Object) -> Read<Vec<(Option<u32>, Page)>> {
    let mut found = Vec::new();
    let mut branches = vec![(root.clone(), Rc::new(Dict::default()))];
    let mut visited = 0;
    while let Some((reference, inherited)) = branches.pop() {
        visited += 1;
        let node = file.resolved(&reference)?.dict().cloned().unwrap_or_default();
        let kids = file.resolved(node.get("Kids"))?;
        let Some(kids) = kids.array() else {
            let number = if let Object::Ref(number) = reference { Some(number) } else { None };
            found.push((number, (node, inherited)));
            continue;
        };
        if visited + branches.len() + kids.len() > 2 * MOST_PAGES {
            return Err("it has more pages than any sheet, or they go in a circle".to_owned());
        }
        let inherited = Rc::new(passed_on(&node, &inherited));
        branches.extend(kids.iter().rev().map(|kid| (kid.clone(), Rc::clone(&inherited))));
    }
    Ok(found)
}

/// What stands on a branch for its pages, or above it.
fn passed_on(node: &Dict, above: &Dict) -> Dict {
    let entry = |name: &str| if node.get(name).is_null() { above.get(name) } else { node.get(name) };
    Dict(INHERITED.iter().map(|name| (name.as_bytes().to_vec(), entry(name).clone())).collect())
}

struct Sums<'f, 'a> {
    file: &'f mut PdfFile<'a>,
    /// Pages by their number: a link to a page is the page's place, not what is on it.
    index: BTreeMap<u32, usize>,
    /// Checksums of objects by their number; none while one is being made.
    known: BTreeMap<u32, Option<Sum>>,
    /// Parts that may still be looked at.
    left: usize,
}

impl Sums<'_, '_> {
    fn page(&mut self, (node, inherited): &Page) -> Read<Sum> {
        let missing = inherited.0.iter().filter(|(name, _)| node.get(&String::from_utf8_lossy(name)).is_null());
        self.dict(&Dict(node.0.iter().chain(missing).cloned().collect()), 0)
    }

    fn of(&mut self, object: &Object, depth: usize) -> Read<Sum> {
        self.left = self.left.checked_sub(1).ok_or("it holds more objects than any sheet")?;
        if depth > DEEPEST {
            return Err("its objects are nested too deeply".to_owned());
        }
        match object {
            Object::Ref(number) => self.behind(*number, depth),
            Object::Dict(dict) => self.dict(dict, depth),
            Object::Array(list) => {
                let sums = list.iter().map(|item| self.of(item, depth + 1)).collect::<Read<Vec<Sum>>>()?;
                Ok(sum(b"list", sums.iter().map(|sum| sum.as_slice())))
            }
            Object::Stream(dict, _) => {
                let head = self.dict(dict, depth)?;
                let bytes = self.file.bytes(object)?;
                Ok(sum(b"stream", [head.as_slice(), &bytes].into_iter()))
            }
            Object::Null => Ok(sum(b"null", std::iter::empty())),
            Object::Bool(value) => Ok(sum(b"bool", std::iter::once(&[u8::from(*value)][..]))),
            Object::Int(value) => Ok(sum(b"number", std::iter::once(value.to_string().as_bytes()))),
            Object::Real(text) => Ok(sum(b"number", std::iter::once(text.as_slice()))),
            Object::Name(name) => Ok(sum(b"name", std::iter::once(name.as_slice()))),
            Object::Text(text) => Ok(sum(b"text", std::iter::once(text.as_slice()))),
        }
    }

    fn behind(&mut self, number: u32, depth: usize) -> Read<Sum> {
        if let Some(page) = self.index.get(&number) {
            return Ok(sum(b"page", std::iter::once(page.to_string().as_bytes())));
        }
        match self.known.get(&number) {
            Some(Some(known)) => return Ok(*known),
            Some(None) => return Ok(sum(b"circle", std::iter::empty())),
            None => {}
        }
        self.known.insert(number, None);
        let object = self.file.object(number)?;
        let found = self.of(&object, depth + 1)?;
        self.known.insert(number, Some(found));
        Ok(found)
    }

    /// Entries by name, without those that say how the file is packed or lead back up; null is no entry.
    fn dict(&mut self, dict: &Dict, depth: usize) -> Read<Sum> {
        let mut entries: Vec<&(Vec<u8>, Object)> = dict.0.iter().collect();
        entries.retain(|(name, object)| !object.is_null() && !PACKING.iter().any(|packing| packing.as_bytes() == name));
        entries.sort_by(|a, b| a.0.cmp(&b.0));
        let mut parts: Vec<(&[u8], Sum)> = Vec::new();
        for (name, object) in entries {
            parts.push((name, self.of(object, depth + 1)?));
        }
        Ok(sum(b"table", parts.iter().flat_map(|(name, sum)| [*name, sum.as_slice()])))
    }
}

/// SHA-256 of a kind and its parts, each behind its length.
fn sum<'a>(kind: &[u8], parts: impl Iterator<Item = &'a [u8]>) -> Sum {
    let mut hash = Sha256::new();
    hash.update(kind);
    for part in parts {
        hash.update((part.len() as u64).to_be_bytes());
        hash.update(part);
    }
    hash.finalize().into()
}
