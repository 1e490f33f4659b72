//! Texts as shapes: a scene that looks the same where our fonts are not installed.

use crate::figure::fonts::MM_PER_PT;
use crate::figure::fonts::advance_thousandths;
use crate::figure::fonts::outline;
use crate::figure::fonts::pieces;
use crate::figure::scene::At;
use crate::figure::scene::Mark;
use crate::figure::scene::PathMark;
use crate::figure::scene::Scene;
use crate::figure::scene::TextMark;

/// The scene with every text as the outlines of its letters.
pub fn outlined(scene: &Scene) -> Scene {
    let shape = |mark: &Mark| match mark {
        Mark::Text(text) => Mark::Path(letters(text)),
        path => path.clone(),
    };
    Scene { marks: scene.marks.iter().map(shape).collect(), ..scene.clone() }
}

fn letters(mark: &TextMark) -> PathMark {
    let mut segments = Vec::new();
    for piece in pieces(mark) {
        let em_mm = piece.size_pt * MM_PER_PT;
        let mut at: At = (mark.at.0 + piece.x_mm, mark.at.1 - piece.rise_mm);
        for character in piece.text.chars() {
            segments.extend(outline(mark.face, character, (at, em_mm)));
            at.0 += f64::from(advance_thousandths(mark.face, character)) / 1000.0 * em_mm;
        }
    }
    PathMark { segments, stroke: None, fill: Some(mark.colour), role: mark.role.clone() }
}
