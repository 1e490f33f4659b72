//! The faces that a document uses, cut down to the characters that it uses.

use std::collections::BTreeMap;
use std::collections::BTreeSet;

use lopdf::Dictionary;
use lopdf::Object;
use lopdf::Stream;
use md5::Digest;
use printpdf::FontId;
use printpdf::FontMetrics;
use printpdf::FontType;
use printpdf::ParsedFont;
use printpdf::PdfFont;
use printpdf::PdfFontMetricsStub;
use printpdf::PdfResources;
use subsetter::GlyphRemapper;

use crate::figure::fonts::Face;
use crate::figure::fonts::Metrics;
use crate::figure::fonts::advance_thousandths;
use crate::figure::fonts::file;
use crate::figure::fonts::glyph;
use crate::figure::fonts::metrics;

/// Characters used, by face.
pub(super) type Used = BTreeMap<Face, BTreeSet<char>>;

/// Name of a face among the resources of a page.
pub(super) fn font_id(face: Face) -> FontId {
    FontId(face.postscript_name().to_string())
}

/// Puts the used faces among the document's resources.
pub(super) fn embed(used: &Used, resources: &mut PdfResources) {
    for (&face, characters) in used {
        resources.fonts.map.insert(font_id(face), PdfFont::new(cut_face(face, characters)));
    }
}

/// Sets what printpdf writes otherwise: the height of capitals, which it takes from the ascent, and the tables from codes
/// to characters, into which it puts the comments of a PostScript file.
pub(super) fn correct(used: &Used, document: &mut lopdf::Document) {
    capitals(document);
    for (&face, characters) in used {
        let table = to_unicode(&cut_face(face, characters).codepoint_to_glyph);
        let id = document.add_object(Stream::new(Dictionary::new(), table.into_bytes()));
        let of_face = |font: &&mut Dictionary| {
            let name = font.get(b"BaseFont").and_then(Object::as_name).unwrap_or_default();
            font.has(b"ToUnicode") && name.ends_with(format!("+{}", face.postscript_name()).as_bytes())
        };
        let fonts = document.objects.values_mut().filter_map(|object| object.as_dict_mut().ok());
        fonts.filter(of_face).for_each(|font| font.set("ToUnicode", id));
    }
}

/// Entries that one block of a table may hold (Adobe Technical Note 5014, 1.4.1: at most 100; from memory).
const BLOCK: usize = 100;

/// The table from codes to UTF-16 (ISO 32000-1, 9.10.3).
fn to_unicode(glyphs: &BTreeMap<u32, u16>) -> String {
    let characters = glyphs.iter().filter_map(|(&code, &glyph)| Some((glyph, char::from_u32(code)?)));
    let by_code: BTreeMap<u16, char> = characters.collect();
    let by_code: Vec<(u16, char)> = by_code.into_iter().collect();
    let mut table = String::from(
        "/CIDInit /ProcSet findresource begin\n12 dict begin\nbegincmap\n\
         /CIDSystemInfo << /Registry (Adobe) /Ordering (UCS) /Supplement 0 >> def\n\
         /CMapName /Adobe-Identity-UCS def\n/CMapType 2 def\n\
         1 begincodespacerange\n<0000> <FFFF>\nendcodespacerange\n",
    );
    for block in by_code.chunks(BLOCK) {
        table += &format!("{} beginbfchar\n", block.len());
        for (code, character) in block {
            let mut units = [0; 2];
            let text: String = character.encode_utf16(&mut units).iter().map(|unit| format!("{unit:04X}")).collect();
            table += &format!("<{code:04X}> <{text}>\n");
        }
        table += "endbfchar\n";
    }
    table + "endcmap\nCMapName currentdict /CMap defineresource pop\nend\nend\n"
}

fn capitals(document: &mut lopdf::Document) {
    let descriptors = document.objects.values_mut().filter_map(|object| object.as_dict_mut().ok());
    for descriptor in descriptors.filter(|dictionary| dictionary.has_type(b"FontDescriptor")) {
        let name = descriptor.get(b"FontName").and_then(Object::as_name).unwrap_or_default();
        let face = Face::ALL.into_iter().find(|face| name.ends_with(face.postscript_name().as_bytes()));
        if let Some(face) = face {
            descriptor.set("CapHeight", i64::from(metrics(face).cap_height));
        }
    }
}

/// A face with the glyphs of some characters, numbered from 1 in the order of the characters.
///
/// Widths and heights are handed over in whole thousandths of an em, as they are measured with, because printpdf
/// would cut off what is left of finer units.
fn cut_face(face: Face, characters: &BTreeSet<char>) -> ParsedFont {
    let mut numbers = GlyphRemapper::new();
    let glyphs: Vec<(char, u16)> = characters.iter().filter_map(|&c| Some((c, glyph(face, c)?))).collect();
    let renumbered: Vec<(char, u16)> = glyphs.iter().map(|&(c, glyph)| (c, numbers.remap(glyph))).collect();
    // A face that cannot be cut goes in whole, with its own numbers.
    let (bytes, glyphs) = match subsetter::subset(file(face), 0, &numbers) {
        Ok(bytes) => (bytes, renumbered),
        Err(_) => (file(face).to_vec(), glyphs),
    };
    let metrics = metrics(face);
    ParsedFont {
        original_bytes: bytes,
        font_index: 0,
        font_name: Some(format!("{}+{}", tag(characters), face.postscript_name())),
        codepoint_to_glyph: glyphs.iter().map(|&(c, glyph)| (u32::from(c), glyph)).collect(),
        glyph_widths: glyphs.iter().map(|&(c, glyph)| (glyph, advance_thousandths(face, c) as u16)).collect(),
        units_per_em: 1000,
        font_metrics: FontMetrics { ascent: metrics.ascent, descent: metrics.descent },
        font_type: FontType::TrueType,
        pdf_font_metrics: descriptor(metrics),
    }
}

fn descriptor(metrics: Metrics) -> PdfFontMetricsStub {
    let [x_min, y_min, x_max, y_max] = metrics.bounds;
    let slope = libm::tan(-f64::from(metrics.slant_deg).to_radians());
    PdfFontMetricsStub {
        units_per_em: 1000,
        x_min,
        y_min,
        x_max,
        y_max,
        caret_slope_rise: 1000,
        caret_slope_run: libm::round(slope * 1000.0) as i16,
        us_weight_class: metrics.weight,
    }
}

/// Six letters that name a choice of characters (ISO 32000-1, 9.6.4).
fn tag(characters: &BTreeSet<char>) -> String {
    let text: String = characters.iter().collect();
    md5::Md5::digest(text).iter().take(6).map(|byte| char::from(b'A' + byte % 26)).collect()
}
