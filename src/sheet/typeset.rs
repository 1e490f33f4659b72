//! Marked text to runs, and lines of a given width.
//!
//! What stands between marks is lowered or raised; everything else, whatever it looks like, stands as it is.

use crate::figure::fonts;
use crate::figure::fonts::Face;
use crate::figure::scene::Anchor;
use crate::figure::scene::Colour;
use crate::figure::scene::Level;
use crate::figure::scene::Role;
use crate::figure::scene::Run;
use crate::figure::scene::TextMark;
use crate::report::CLOSED;
use crate::report::LOWERED;
use crate::report::RAISED;
use crate::sheet::grid;

/// How a line of text is set.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Style {
    /// Size in pt.
    pub size_pt: f64,
    /// Face.
    pub face: Face,
    /// Colour.
    pub colour: Colour,
    /// Which part of the line sits on its point.
    pub anchor: Anchor,
}

impl Style {
    /// Upright ink of a size, from its left end.
    pub const fn text(size_pt: f64) -> Self {
        Self { size_pt, face: Face::Regular, colour: grid::INK, anchor: Anchor::Start }
    }

    /// The same, heavy.
    pub const fn bold(size_pt: f64) -> Self {
        Self { face: Face::Bold, ..Self::text(size_pt) }
    }

    /// The same in grey.
    pub const fn grey(self) -> Self {
        Self { colour: grid::GREY, ..self }
    }

    /// The same, by its right end.
    pub const fn right(self) -> Self {
        Self { anchor: Anchor::End, ..self }
    }

    /// The same, by its middle.
    pub const fn centred(self) -> Self {
        Self { anchor: Anchor::Middle, ..self }
    }

    /// Distance of base lines in mm.
    pub fn leading_mm(self) -> f64 {
        1.36 * self.size_pt * fonts::MM_PER_PT
    }

    /// Width of marked text in mm.
    pub fn width_mm(self, marked: &str) -> f64 {
        fonts::width_of(&self.mark((0.0, 0.0), marked))
    }

    /// The text mark at a point.
    pub fn mark(self, at: (f64, f64), marked: &str) -> TextMark {
        TextMark {
            at,
            anchor: self.anchor,
            size_pt: self.size_pt,
            face: self.face,
            colour: self.colour,
            runs: runs(marked),
            role: Role::Plain,
        }
    }

    /// Lines no wider than `width_mm`, broken at spaces; a word that is too wide alone is broken between characters.
    pub fn lines(self, marked: &str, width_mm: f64) -> Vec<String> {
        let mut lines: Vec<String> = vec![String::new()];
        for word in words(marked).into_iter().flat_map(|word| self.broken(word, width_mm)) {
            let line = lines.last().map_or("", String::as_str);
            let longer = if line.is_empty() { word.clone() } else { format!("{line} {word}") };
            match lines.last_mut() {
                Some(line) if line.is_empty() || self.width_mm(&longer) <= width_mm => *line = longer,
                _ => lines.push(word),
            }
        }
        lines
    }

    /// The text, or as much of it as fits with an ellipsis. Use it only where the whole text stands elsewhere.
    pub fn shortened(self, marked: &str, width_mm: f64) -> String {
        if self.width_mm(marked) <= width_mm {
            return marked.to_string();
        }
        let plain = plain(marked);
        let cut = |count: usize| plain.chars().take(count).collect::<String>().trim_end().to_string() + "…";
        let count = (0..plain.chars().count()).rev().find(|count| self.width_mm(&cut(*count)) <= width_mm);
        cut(count.unwrap_or(0))
    }

    fn broken(self, word: &str, width_mm: f64) -> Vec<String> {
        if self.width_mm(word) <= width_mm {
            return vec![word.to_string()];
        }
        let mut parts = vec![String::new()];
        for character in plain(word).chars() {
            let part = parts.last().map_or("", String::as_str);
            let longer = format!("{part}{character}");
            match parts.last_mut() {
                Some(part) if part.is_empty() || self.width_mm(&longer) <= width_mm => *part = longer,
                _ => parts.push(character.to_string()),
            }
        }
        parts
    }
}

/// The runs of a marked text.
pub fn runs(marked: &str) -> Vec<Run> {
    let mut runs = Vec::new();
    let mut rest = marked;
    while let Some((before, level, (inside, after))) = next_mark(rest) {
        push(&mut runs, before, Level::Normal);
        push(&mut runs, inside, level);
        rest = after;
    }
    push(&mut runs, rest, Level::Normal);
    runs
}

/// The text without its marks.
pub fn plain(marked: &str) -> String {
    runs(marked).into_iter().map(|run| run.text).collect()
}

/// The text as it is copied or read aloud: `R_14,25`, h/e².
pub fn spoken(marked: &str) -> String {
    runs(marked).into_iter().map(|run| fonts::spoken(&run.text, run.level)).collect()
}

/// What stands before the next mark, its level, what it holds and the rest.
fn next_mark(text: &str) -> Option<(&str, Level, (&str, &str))> {
    let (before, from_mark) = text.split_at(text.find([LOWERED, RAISED])?);
    let level = if from_mark.starts_with(LOWERED) { Level::Sub } else { Level::Super };
    Some((before, level, from_mark.strip_prefix([LOWERED, RAISED])?.split_once(CLOSED)?))
}

fn push(runs: &mut Vec<Run>, text: &str, level: Level) {
    if !text.is_empty() {
        runs.push(Run { text: text.to_string(), level });
    }
}

/// Words between spaces. A space inside a mark does not part words, nor one between a number and its unit.
fn words(marked: &str) -> Vec<&str> {
    let mut words = Vec::new();
    let (mut start, mut depth, mut before) = (0, 0_usize, ' ');
    for (index, character) in marked.char_indices() {
        match character {
            LOWERED | RAISED => depth += 1,
            CLOSED => depth = depth.saturating_sub(1),
            ' ' if depth == 0 && !(before.is_ascii_digit() && begins_with_unit(&marked[index + 1..])) => {
                words.push(&marked[start..index]);
                start = index + 1;
            }
            _ => {}
        }
        before = character;
    }
    words.push(&marked[start..]);
    words.retain(|word| !word.is_empty());
    words
}

/// Whether a text begins with a word of one or two letters, as units are.
fn begins_with_unit(text: &str) -> bool {
    let word = text.split(' ').next().unwrap_or_default();
    let letters = word.trim_end_matches([',', ';', '.', ':', ')']);
    (1..=2).contains(&letters.chars().count()) && !letters.starts_with(|c: char| c.is_ascii_digit())
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::report::marked;

    #[test]
    fn marks_become_levels() {
        let texts: Vec<(String, Level)> =
            runs(&(marked("R_{14,25} in h/e^{2}") + " a_{b}^{c}")).into_iter().map(|r| (r.text, r.level)).collect();
        let expected = [
            ("R", Level::Normal),
            ("14,25", Level::Sub),
            (" in h/e", Level::Normal),
            ("2", Level::Super),
            (" a_{b}^{c}", Level::Normal),
        ];
        assert_eq!(texts, expected.map(|(text, level)| (text.to_string(), level)));
    }

    #[test]
    fn levels_are_told_in_plain_text() {
        let text = marked("R_{14,25} = h/e^{2} × 10^{−6}, H_{2}O, ν^{*}");
        assert_eq!(spoken(&text), "R_14,25 = h/e² × 10⁻⁶, H₂O, ν^*");
    }

    #[test]
    fn lines_keep_every_character_and_stay_within_their_width() {
        let style = Style::text(8.5);
        let text = marked(
            "a rather long sentence with averyveryveryveryverylongwordinside and R_{14,25} ν_{thin side} at its end",
        );
        let lines = style.lines(&text, 22.0);
        assert!(lines.iter().all(|line| style.width_mm(line) <= 22.0), "{lines:?}");
        let bare = |text: &str| text.chars().filter(|c| *c != ' ').collect::<String>();
        assert_eq!(bare(&lines.concat()), bare(&text));
        assert!(lines.len() > 4);
    }

    #[test]
    fn a_number_stays_with_its_unit() {
        assert_eq!(words("gas at 21 °C, 50 % of 14 readings"), ["gas", "at", "21 °C,", "50 %", "of", "14", "readings"]);
        let (text, name) = (marked("ν_{thin side} is 3"), marked("ν_{thin side}"));
        assert_eq!(words(&text), [name.as_str(), "is", "3"]);
    }

    #[test]
    fn what_is_cut_ends_in_an_ellipsis_and_fits() {
        let style = Style::bold(20.0);
        let short = style.shortened("a-device-with-a-very-long-identity-indeed", 60.0);
        assert!(short.ends_with('…') && style.width_mm(&short) <= 60.0, "{short}");
        assert_eq!(style.shortened("KR-0417", 60.0), "KR-0417");
    }
}
