//! Reads PDF files back for the tests, by the standard (ISO 32000-1) and not by the way they were written.

use std::collections::BTreeMap;

use lopdf::Dictionary;
use lopdf::Document;
use lopdf::Object;
use lopdf::content::Content;
use lopdf::content::Operation;

/// A line of text: everything between BT and ET.
#[derive(Debug, Default)]
pub struct Shown {
    /// Text by the font's ToUnicode table.
    pub text: String,
    /// Where the pen starts.
    pub start_pt: (f64, f64),
    /// How far the pen goes by /W.
    pub width_pt: f64,
    /// Greatest difference between /W and the advance in the embedded program, in thousandths of an em.
    pub worst_advance_error: f64,
}

/// A file carried inside.
pub struct Carried {
    pub bytes: Vec<u8>,
    pub checksum: String,
    pub relationship: String,
    pub kind: String,
}

/// An embedded font.
pub struct Embedded {
    pub name: String,
    pub cap_height: i64,
    pub program: Vec<u8>,
}

/// The embedded fonts.
pub fn embedded(file: &Document) -> Vec<Embedded> {
    let dictionaries = file.objects.values().filter_map(|object| object.as_dict().ok());
    let descriptors = dictionaries.filter(|dictionary| dictionary.has_type(b"FontDescriptor"));
    let embedded = |descriptor: &Dictionary| Embedded {
        name: name(descriptor, b"FontName"),
        cap_height: descriptor.get(b"CapHeight").and_then(Object::as_i64).expect("a height"),
        program: stream(file, descriptor, b"FontFile2"),
    };
    descriptors.map(embedded).collect()
}

/// The codes of the only font of the first page with the text that each stands for.
pub fn codes(file: &Document) -> BTreeMap<u16, String> {
    let fonts = file.get_page_fonts(file.get_pages()[&1]).expect("fonts");
    Font::read(file, fonts.values().next().expect("a font")).unicode
}

/// The operators of the first page, written out.
pub fn operators(file: &Document) -> Vec<String> {
    let written = |operation: &Operation| {
        let operands = operation.operands.iter().map(|operand| match operand {
            Object::Name(name) => String::from_utf8_lossy(name).into_owned(),
            Object::Array(items) => format!("[{}]", items.iter().map(plain).collect::<Vec<_>>().join(" ")),
            other => plain(other),
        });
        operands.chain([operation.operator.clone()]).collect::<Vec<_>>().join(" ")
    };
    content(file).operations.iter().map(written).collect()
}

/// What the marked stretches of the first page say in place of their glyphs.
pub fn spoken(file: &Document) -> Vec<String> {
    let said = |operation: &Operation| {
        let words = operation.operands.get(1)?.as_dict().ok()?.get(b"ActualText").ok()?;
        lopdf::decode_text_string(words).ok()
    };
    content(file).operations.iter().filter(|operation| operation.operator == "BDC").filter_map(said).collect()
}

/// The lines of text of the first page.
pub fn shown_texts(file: &Document) -> Vec<Shown> {
    let page = file.get_pages()[&1];
    let fonts = file.get_page_fonts(page).expect("fonts");
    let mut lines = Vec::new();
    let mut font: Option<(Font, f64)> = None;
    for operation in content(file).operations {
        let number = |index: usize| f64::from(operation.operands[index].as_float().expect("a number"));
        match operation.operator.as_str() {
            "BT" => lines.push(Shown::default()),
            "Td" => lines.last_mut().expect("inside BT").start_pt = (number(0), number(1)),
            "Tf" => {
                let name = operation.operands[0].as_name().expect("a name");
                font = Some((Font::read(file, fonts[name]), number(1)));
            }
            "Tj" => {
                let (font, size) = font.as_ref().expect("a font before text");
                let codes = operation.operands[0].as_str().expect("a string").chunks(2);
                let line = lines.last_mut().expect("inside BT");
                codes.for_each(|code| font.show(u16::from_be_bytes([code[0], code[1]]), *size, line));
            }
            _ => {}
        }
    }
    lines
}

struct Font {
    unicode: BTreeMap<u16, String>,
    widths: BTreeMap<u16, f64>,
    program: Vec<u8>,
}

impl Font {
    fn read(file: &Document, font: &Dictionary) -> Font {
        let descendant = font.get(b"DescendantFonts").and_then(Object::as_array).expect("descendants")[0].as_dict();
        let descendant = descendant.expect("a font");
        let descriptor = dictionary(file, descendant, b"FontDescriptor");
        Font {
            unicode: unicode(&String::from_utf8(stream(file, font, b"ToUnicode")).expect("ASCII")),
            widths: widths(descendant.get(b"W").and_then(Object::as_array).expect("widths")),
            program: stream(file, descriptor, b"FontFile2"),
        }
    }

    fn show(&self, code: u16, size: f64, line: &mut Shown) {
        line.text.push_str(&self.unicode[&code]);
        line.width_pt += self.widths[&code] / 1000.0 * size;
        let program = ttf_parser::Face::parse(&self.program, 0).expect("a font");
        let advance = program.glyph_hor_advance(ttf_parser::GlyphId(code)).expect("an advance");
        let thousandths = f64::from(advance) * 1000.0 / f64::from(program.units_per_em());
        line.worst_advance_error = line.worst_advance_error.max((thousandths - self.widths[&code]).abs());
    }
}

/// Lines `<code> <UTF-16>` of a ToUnicode table.
fn unicode(table: &str) -> BTreeMap<u16, String> {
    let hex = |text: &str| u16::from_str_radix(text.trim_matches(['<', '>']), 16).ok();
    let pair = |line: &str| {
        let (code, text) = line.split_once(' ')?;
        Some((hex(code)?, String::from_utf16(&[hex(text)?]).ok()?))
    };
    let (_, table) = table.split_once("endcodespacerange").expect("a range of codes");
    table.lines().filter(|line| line.starts_with('<') && line.len() == 13).filter_map(pair).collect()
}

/// Runs `first [width …]` of /W.
fn widths(runs: &[Object]) -> BTreeMap<u16, f64> {
    let run = |pair: &[Object]| {
        let first = pair[0].as_i64().expect("a code") as u16;
        let widths = pair[1].as_array().expect("widths").clone();
        (first..).zip(widths).map(|(code, width)| (code, f64::from(width.as_float().expect("a width"))))
    };
    runs.chunks(2).flat_map(run).collect()
}

/// The carried files by name, from the name tree.
pub fn carried(file: &Document) -> BTreeMap<String, Carried> {
    let names = dictionary(file, file.catalog().expect("a catalog"), b"Names");
    let tree = dictionary(file, names, b"EmbeddedFiles").get(b"Names").and_then(Object::as_array).expect("names");
    let keys: Vec<Vec<u8>> = tree.iter().step_by(2).map(|key| key.as_str().expect("a key").to_vec()).collect();
    assert!(keys.is_sorted(), "a name tree is sorted by bytes");
    let associated = file.catalog().and_then(|catalog| catalog.get(b"AF")).and_then(Object::as_array);
    assert_eq!(associated.expect("AF").len(), keys.len());
    tree.iter().skip(1).step_by(2).map(|specification| one_carried(file, specification)).collect()
}

fn one_carried(file: &Document, specification: &Object) -> (String, Carried) {
    let specification = file.dereference(specification).and_then(|found| found.1.as_dict()).expect("a dictionary");
    let contents = dictionary(file, specification, b"EF");
    let header = dictionary(file, contents, b"UF");
    let bytes = stream(file, contents, b"UF");
    let parameters = dictionary(file, header, b"Params");
    assert_eq!(parameters.get(b"Size").and_then(Object::as_i64).ok(), Some(bytes.len() as i64));
    let checksum = parameters.get(b"CheckSum").and_then(Object::as_str).expect("a checksum");
    let checksum = checksum.iter().map(|byte| format!("{byte:02x}")).collect();
    let carried = Carried {
        bytes,
        checksum,
        relationship: name(specification, b"AFRelationship"),
        kind: name(header, b"Subtype"),
    };
    (lopdf::decode_text_string(specification.get(b"UF").expect("a name")).expect("text"), carried)
}

/// Entries of the table of contents: depth, title, page, height in pt.
pub fn outline(file: &Document) -> Vec<String> {
    let root = dictionary(file, file.catalog().expect("a catalog"), b"Outlines");
    let mut lines = Vec::new();
    walk(file, root, 0, &mut lines);
    lines
}

fn walk(file: &Document, above: &Dictionary, depth: usize, lines: &mut Vec<String>) {
    let mut next = above.get(b"First").ok();
    while let Some(id) = next {
        let entry = file.dereference(id).and_then(|found| found.1.as_dict()).expect("an entry");
        let title = lopdf::decode_text_string(entry.get(b"Title").expect("a title")).expect("text");
        let target = entry.get(b"Dest").and_then(Object::as_array).expect("a place");
        let page = target[0].as_reference().expect("a page");
        let page = file.get_pages().into_iter().find(|&(_, id)| id == page).expect("a page of the file").0;
        lines.push(format!("{depth} {title} page {page} top {}", plain(&target[3])));
        walk(file, entry, depth + 1, lines);
        next = entry.get(b"Next").ok();
    }
}

/// An entry of the information dictionary.
pub fn information(file: &Document, key: &str) -> Option<String> {
    let entry = dictionary(file, &file.trailer, b"Info").get(key.as_bytes()).ok()?;
    lopdf::decode_text_string(entry).ok()
}

/// The XMP packet.
pub fn packet(file: &Document) -> String {
    String::from_utf8(stream(file, file.catalog().expect("a catalog"), b"Metadata")).expect("UTF-8")
}

/// The file's identifier.
pub fn identifier(file: &Document) -> Vec<u8> {
    file.trailer.get(b"ID").and_then(Object::as_array).expect("two")[0].as_str().expect("a string").to_vec()
}

fn content(file: &Document) -> Content {
    Content::decode(&file.get_page_content(file.get_pages()[&1])).expect("operators")
}

fn plain(object: &Object) -> String {
    object.as_float().map_or_else(|_| format!("{object:?}"), |number| number.to_string())
}

fn name(dictionary: &Dictionary, key: &[u8]) -> String {
    String::from_utf8_lossy(dictionary.get(key).and_then(Object::as_name).expect("a name")).into_owned()
}

/// The dictionary, or a stream's dictionary, behind a key.
fn dictionary<'a>(file: &'a Document, holder: &'a Dictionary, key: &[u8]) -> &'a Dictionary {
    let found = holder.get(key).and_then(|object| file.dereference(object)).expect("an entry").1;
    found.as_dict().or_else(|_| found.as_stream().map(|stream| &stream.dict)).expect("a dictionary")
}

fn stream(file: &Document, holder: &Dictionary, key: &[u8]) -> Vec<u8> {
    let found = holder.get(key).and_then(|object| file.dereference(object)).expect("an entry").1;
    let stream = found.as_stream().expect("a stream");
    stream.decompressed_content().unwrap_or_else(|_| stream.content.clone())
}
