//! What is printed for characters that the faces lack.
//!
//! Raised and lowered signs without a glyph are set as ordinary signs at that level; spaces and hyphens of special
//! kinds as ordinary ones. Everything else is spelled by its number, as in `U+4E2D`, and [`missing_in`] names it so
//! that the user can be told.

use std::collections::BTreeSet;

use crate::figure::fonts::Face;
use crate::figure::fonts::covers;
use crate::figure::scene::Level;
use crate::figure::scene::Mark;
use crate::figure::scene::Scene;

/// The characters of a text that can only be printed as their number.
pub fn missing(text: &str) -> BTreeSet<char> {
    text.chars().filter(|&character| !has_glyph(character) && relation(character).is_none()).collect()
}

/// The characters of a drawing or page that can only be printed as their number.
pub fn missing_in(scene: &Scene) -> BTreeSet<char> {
    let texts = scene.marks.iter().filter_map(|mark| match mark {
        Mark::Text(text) => Some(text),
        Mark::Path(_) => None,
    });
    texts.flat_map(|mark| &mark.runs).flat_map(|run| missing(&run.text)).collect()
}

/// A run cut where raised or lowered signs without a glyph change the level; all characters have glyphs.
///
/// Neighbouring superscripts stay together: in `10⁻³` the 3 is set like the minus sign, although it has a glyph.
pub(super) fn stretches(text: &str, level: Level) -> Vec<(String, Level)> {
    let characters: Vec<char> = text.chars().collect();
    let mut stretches: Vec<(String, Level)> = Vec::new();
    for stretch in characters.chunk_by(|&left, &right| own_level(left) == own_level(right)) {
        let (text, level) = set_stretch(stretch, level);
        match stretches.last_mut().filter(|last| last.1 == level) {
            Some(last) => last.0.push_str(&text),
            None => stretches.push((text, level)),
        }
    }
    stretches
}

/// A stretch of characters of one own level, as it is set inside a run of a given level.
fn set_stretch(stretch: &[char], around: Level) -> (String, Level) {
    if stretch.iter().copied().all(has_glyph) {
        return (stretch.iter().collect(), around);
    }
    let own = stretch.first().copied().map_or(Level::Normal, own_level);
    match (own, around) {
        (Level::Normal, _) => (spell(stretch.iter().copied()), around),
        (_, Level::Normal) => (stretch.iter().copied().map(base_sign).collect(), own),
        _ => (stretch.iter().copied().map(base_sign).collect(), around),
    }
}

/// All faces have the same characters; a test holds them to it.
fn has_glyph(character: char) -> bool {
    covers(Face::Regular, character)
}

/// The characters with near relations and numbers in place of what has no glyph; numbers stand apart from each other.
fn spell(characters: impl Iterator<Item = char>) -> String {
    let mut text = String::new();
    let mut after_number = false;
    for character in characters {
        let sign = Some(character).filter(|&c| has_glyph(c)).or_else(|| relation(character));
        match sign {
            Some(sign) => text.push(sign),
            None if after_number => text.push_str(&format!(" U+{:04X}", u32::from(character))),
            None => text.push_str(&format!("U+{:04X}", u32::from(character))),
        }
        after_number = sign.is_none();
    }
    text
}

/// A sign that says the same as one without a glyph.
fn relation(character: char) -> Option<char> {
    match character {
        '\u{2010}' | '\u{2011}' => Some('-'),
        _ if character.is_whitespace() => Some(' '),
        _ if own_level(character) != Level::Normal => Some(base_sign(character)),
        _ => None,
    }
}

/// The level that a character stands at by its own meaning.
fn own_level(character: char) -> Level {
    match character {
        '\u{2080}'..='\u{208E}' => Level::Sub,
        '¹' | '²' | '³' | '⁰' | '\u{2074}'..='\u{207E}' => Level::Super,
        _ => Level::Normal,
    }
}

/// What a run says when it is copied, searched or read aloud: raised and lowered signs of Unicode where it has them, else
/// `_` and `^` for the level, as on the terminal: `R_14,25`. Without them 10⁻⁶ would come out as 10−6.
pub fn spoken(text: &str, level: Level) -> String {
    let signs: Option<String> = text.chars().map(|sign| at_level(sign, level)).collect();
    signs.unwrap_or_else(|| match level {
        Level::Normal => text.to_owned(),
        Level::Sub => format!("_{text}"),
        Level::Super => format!("^{text}"),
    })
}

/// The raised or lowered sign that Unicode has for an ordinary one.
fn at_level(sign: char, level: Level) -> Option<char> {
    let place = SIGNS.iter().position(|other| *other == sign)? as u32;
    match (level, place) {
        (Level::Normal, _) => Some(sign),
        (Level::Sub, _) => char::from_u32(0x2080 + place),
        (Level::Super, 1) => Some('¹'),
        (Level::Super, 2) => Some('²'),
        (Level::Super, 3) => Some('³'),
        (Level::Super, _) => char::from_u32(0x2070 + place),
    }
}

/// Digits, then + − = ( ) in the order of Unicode's block "Superscripts and Subscripts".
const SIGNS: [char; 15] = ['0', '1', '2', '3', '4', '5', '6', '7', '8', '9', '+', '−', '=', '(', ')'];

/// The ordinary sign of a raised or lowered one.
fn base_sign(character: char) -> char {
    let place = match character {
        '¹' => 1,
        '²' => 2,
        '³' => 3,
        '\u{2070}'..='\u{207E}' => u32::from(character) - 0x2070,
        '\u{2080}'..='\u{208E}' => u32::from(character) - 0x2080,
        _ => return character,
    };
    SIGNS.get(place as usize).copied().unwrap_or(character)
}
