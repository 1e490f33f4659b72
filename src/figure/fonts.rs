//! The one family of fonts: which characters it has, how wide text is, where the pieces of a text mark stand.
//!
//! Drawings and pages are laid out with these widths and the PDF embeds the same ones, rounded to whole
//! thousandths of an em, so that a viewer's pen ends where the layout said it would. There is no kerning and no
//! shaping: scripts that need it are printed letter by letter.
//!
//! The faces are Noto Sans 1.04 (licence: `LICENSE-FONTS`). All four have the same 2185 characters, no two of which
//! share a glyph. They lack ⁺ ⁻ ₀–₉, which are set as raised and lowered signs, and ⊙ ⊗ ↻ ℏ, which drawings make
//! from lines.

mod outline;
mod spelling;

pub use outline::outline;
pub use spelling::missing;
pub use spelling::missing_in;
pub use spelling::spoken;

use std::sync::LazyLock;

use std::sync::OnceLock;

use crate::figure::scene::Anchor;
use crate::figure::scene::Level;
use crate::figure::scene::Run;
use crate::figure::scene::TextMark;

/// Millimetres in a point: 25.4/72 by the definition of the point in PDF (ISO 32000-1, 8.3.2.3).
pub const MM_PER_PT: f64 = 25.4 / 72.0;

/// Size of lowered and raised text, as a share of the size around it.
pub const LEVEL_SCALE: f64 = 0.72;

/// Nothing is printed smaller than this, in pt, unless the text around it is smaller still.
pub const SMALLEST_PT: f64 = 7.0;

/// Lowering of a subscript in em of the text around it: digits reach as low as a comma and stay below the x height.
pub const SUB_DROP_EM: f64 = 0.16;

/// Raising of a superscript in em of the text around it: digits stand a little higher than capitals.
pub const SUPER_RISE_EM: f64 = 0.34;

/// A face of the family.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Face {
    /// Upright, for text and numbers.
    Regular,
    /// Upright and heavy.
    Bold,
    /// Slanted.
    Italic,
    /// Slanted and heavy.
    BoldItalic,
}

impl Face {
    /// All faces.
    pub const ALL: [Face; 4] = [Face::Regular, Face::Bold, Face::Italic, Face::BoldItalic];

    /// Name of the face in its file and in a PDF.
    pub fn postscript_name(self) -> &'static str {
        match self {
            Face::Regular => "NotoSans-Regular",
            Face::Bold => "NotoSans-Bold",
            Face::Italic => "NotoSans-Italic",
            Face::BoldItalic => "NotoSans-BoldItalic",
        }
    }
}

/// A stretch of a text mark that one pen movement can write.
#[derive(Clone, Debug, PartialEq)]
pub struct Piece {
    /// Left end, in mm along the base line from the mark's `at`; the anchor is taken into account.
    pub x_mm: f64,
    /// Height above the base line in mm; negative for a subscript.
    pub rise_mm: f64,
    /// Size in pt.
    pub size_pt: f64,
    /// Characters, all of which the faces have.
    pub text: String,
}

/// The pieces of a text mark from left to right, as every writer must draw them.
pub fn pieces(mark: &TextMark) -> Vec<Piece> {
    let mut x_mm = match mark.anchor {
        Anchor::Start => 0.0,
        Anchor::Middle => -width_of(mark) / 2.0,
        Anchor::End => -width_of(mark),
    };
    let mut pieces = Vec::new();
    for (text, level) in mark.runs.iter().flat_map(|run| spelling::stretches(&run.text, run.level)) {
        let size_pt = size_at(level, mark.size_pt);
        let width_mm = plain_advance_mm(mark.face, size_pt, &text);
        pieces.push(Piece { x_mm, rise_mm: rise_mm(level, mark.size_pt), size_pt, text });
        x_mm += width_mm;
    }
    pieces
}

/// Width of a text mark in mm.
pub fn width_of(mark: &TextMark) -> f64 {
    let width_mm = |run: &Run| advance_at_mm(mark.face, mark.size_pt, &run.text, run.level);
    mark.runs.iter().map(width_mm).sum()
}

/// Width in mm of a text in normal position, at a size in pt.
pub fn advance_mm(face: Face, size_pt: f64, text: &str) -> f64 {
    advance_at_mm(face, size_pt, text, Level::Normal)
}

/// Height of capitals above the base line, in mm.
pub fn cap_height_mm(face: Face, size_pt: f64) -> f64 {
    thousandths_mm(metrics(face).cap_height, size_pt)
}

/// Whether a face has a character; control characters never count.
pub fn covers(face: Face, character: char) -> bool {
    glyph(face, character).is_some()
}

/// The face's file.
///
/// Never inlined, so that the program holds each file once.
#[inline(never)]
pub fn file(face: Face) -> &'static [u8] {
    match face {
        Face::Regular => notosans::REGULAR_TTF,
        Face::Bold => notosans::BOLD_TTF,
        Face::Italic => notosans::ITALIC_TTF,
        Face::BoldItalic => notosans::BOLD_ITALIC_TTF,
    }
}

/// Number of a character's glyph in the file.
pub fn glyph(face: Face, character: char) -> Option<u16> {
    if character.is_control() {
        return None;
    }
    let (glyph, _) = match common(face).get(character as usize) {
        Some(&found) => found,
        None => looked_up(face, character),
    };
    (glyph != 0).then_some(glyph)
}

/// Advance of a character in thousandths of an em; 0 for one that the face lacks.
pub fn advance_thousandths(face: Face, character: char) -> i16 {
    match common(face).get(character as usize) {
        Some(&(glyph, advance)) if glyph != 0 => advance,
        Some(_) => 0,
        None => looked_up(face, character).1,
    }
}

/// Characters below this are looked up in the file once and for all: Latin, Greek, punctuation, arrows, operators.
const COMMON: u32 = 0x2300;

/// Glyph and advance of every common character; glyph 0 for one that the face lacks.
fn common(face: Face) -> &'static [(u16, i16)] {
    static TABLES: [OnceLock<Vec<(u16, i16)>>; 4] = [const { OnceLock::new() }; 4];
    let all = || (0..COMMON).map(|code| char::from_u32(code).map_or((0, 0), |c| looked_up(face, c))).collect();
    TABLES[face as usize].get_or_init(all)
}

fn looked_up(face: Face, character: char) -> (u16, i16) {
    let found = parsed(face).and_then(|parsed| Some((parsed, parsed.glyph_index(character).filter(|g| g.0 != 0)?)));
    let Some((parsed, glyph)) = found else { return (0, 0) };
    let units = parsed.glyph_hor_advance(glyph).unwrap_or(0);
    (glyph.0, to_thousandths(i32::from(units), parsed.units_per_em()))
}

/// Measures of a face in thousandths of an em.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Metrics {
    /// Height above the base line.
    pub ascent: i16,
    /// Height of the lowest letters; negative.
    pub descent: i16,
    /// Height of capitals.
    pub cap_height: i16,
    /// Box that holds every glyph: left, lower, right, upper.
    pub bounds: [i16; 4],
    /// Slant in degrees, negative to the right.
    pub slant_deg: i16,
    /// Weight from 100 to 900.
    pub weight: u16,
}

/// Measures of a face.
pub fn metrics(face: Face) -> Metrics {
    let Some(parsed) = parsed(face) else { return Metrics::default() };
    let scaled = |units: i16| to_thousandths(i32::from(units), parsed.units_per_em());
    let bounds = parsed.global_bounding_box();
    Metrics {
        ascent: scaled(parsed.ascender()),
        descent: scaled(parsed.descender()),
        cap_height: scaled(parsed.capital_height().unwrap_or(parsed.ascender())),
        bounds: [bounds.x_min, bounds.y_min, bounds.x_max, bounds.y_max].map(scaled),
        slant_deg: parsed.italic_angle() as i16,
        weight: parsed.weight().to_number(),
    }
}

/// Width in mm of a run at a level, with signs inside it that change the level by themselves.
fn advance_at_mm(face: Face, size_pt: f64, text: &str, level: Level) -> f64 {
    let width_mm = |(text, level): (String, Level)| plain_advance_mm(face, size_at(level, size_pt), &text);
    spelling::stretches(text, level).into_iter().map(width_mm).sum()
}

/// Width in mm of characters that the face has.
fn plain_advance_mm(face: Face, size_pt: f64, text: &str) -> f64 {
    let thousandths: i64 = text.chars().map(|character| i64::from(advance_thousandths(face, character))).sum();
    thousandths as f64 / 1000.0 * size_pt * MM_PER_PT
}

/// Size in pt of text at a level.
fn size_at(level: Level, size_pt: f64) -> f64 {
    match level {
        Level::Normal => size_pt,
        Level::Sub | Level::Super => (size_pt * LEVEL_SCALE).max(SMALLEST_PT.min(size_pt)),
    }
}

/// Height in mm of a level's base line above that of the text around it.
fn rise_mm(level: Level, size_pt: f64) -> f64 {
    match level {
        Level::Normal => 0.0,
        Level::Sub => -SUB_DROP_EM * size_pt * MM_PER_PT,
        Level::Super => SUPER_RISE_EM * size_pt * MM_PER_PT,
    }
}

fn thousandths_mm(thousandths: i16, size_pt: f64) -> f64 {
    f64::from(thousandths) / 1000.0 * size_pt * MM_PER_PT
}

/// Font units in thousandths of an em, rounded to the nearest.
fn to_thousandths(units: i32, units_per_em: u16) -> i16 {
    let em = i32::from(units_per_em.max(1));
    ((units * 1000 + em / 2).div_euclid(em)) as i16
}

/// The face's tables, looked up once.
fn parsed(face: Face) -> Option<&'static ttf_parser::Face<'static>> {
    static FACES: LazyLock<[Option<ttf_parser::Face<'static>>; 4]> =
        LazyLock::new(|| Face::ALL.map(|face| ttf_parser::Face::parse(file(face), 0).ok()));
    FACES[face as usize].as_ref()
}

#[cfg(test)]
mod tests;
