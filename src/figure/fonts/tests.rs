//! What measuring text must hold to.

use super::*;
use crate::figure::scene::Colour;
use crate::figure::scene::Mark;
use crate::figure::scene::Role;
use crate::figure::scene::Scene;

fn mark(anchor: Anchor, runs: &[(&str, Level)]) -> TextMark {
    let runs = runs.iter().map(|&(text, level)| Run { text: text.into(), level }).collect();
    let colour = Colour(0, 0, 0);
    TextMark { at: (10.0, 10.0), anchor, size_pt: 10.0, face: Face::Regular, colour, runs, role: Role::Plain }
}

#[test]
fn the_signs_of_the_trade_have_glyphs_in_every_face() {
    for face in Face::ALL {
        for sign in "νΩ−±×·→←°µ²³¹½⅓⅔∞≤≥≈≠ℓφΔσλρχ√…–—“”’ÄÖÜßéñ№".chars()
        {
            assert!(covers(face, sign), "{face:?} lacks {sign}");
        }
        for sign in "⊙⊗⁻₂中\u{9}\u{d}\u{0}".chars() {
            assert!(!covers(face, sign), "{face:?} has {sign:?}");
        }
    }
}

#[test]
fn faces_have_the_same_characters_and_no_shared_glyphs() {
    let characters = || (0u32..0x11_0000).filter_map(char::from_u32);
    let of = |face| characters().filter(|&c| covers(face, c)).collect::<Vec<_>>();
    let regular = of(Face::Regular);
    assert_eq!(regular.len(), 2185);
    for face in Face::ALL {
        assert_eq!(of(face), regular, "{face:?}");
        let glyphs: std::collections::BTreeSet<_> = regular.iter().filter_map(|&c| glyph(face, c)).collect();
        assert_eq!(glyphs.len(), regular.len(), "{face:?}");
    }
}

/// Advance of the digits in Noto Sans: 1171 of 2048 units upright (read from the file with another tool), that is
/// 571.8 thousandths.
#[test]
fn digits_signs_and_figures_have_one_width() {
    for sign in "0123456789+−±=".chars() {
        assert_eq!(advance_thousandths(Face::Regular, sign), 572, "{sign}");
        assert_eq!(advance_thousandths(Face::Bold, sign), 572, "{sign}");
    }
    let ten_digits_mm = advance_mm(Face::Regular, 10.0, "0123456789");
    assert!((ten_digits_mm - 10.0 * 0.572 * 10.0 * 25.4 / 72.0).abs() < 1e-12);
}

/// Heights of Noto Sans: ascender 1.069 em, descender 0.293 em, capitals 0.714 em (common practice for this face).
#[test]
fn heights_are_those_of_the_face() {
    let em_mm = 10.0 * 25.4 / 72.0;
    assert_eq!((metrics(Face::Regular).ascent, metrics(Face::Bold).descent), (1069, -293));
    assert!((cap_height_mm(Face::Italic, 10.0) - 0.714 * em_mm).abs() < 1e-9);
    assert_eq!((metrics(Face::BoldItalic).slant_deg, metrics(Face::BoldItalic).weight), (-12, 700));
}

#[test]
fn pieces_join_end_to_end_and_hang_on_the_anchor() {
    let runs = [("R", Level::Normal), ("14,25", Level::Sub), (" = 12 kΩ", Level::Normal)];
    let width = width_of(&mark(Anchor::Start, &runs));
    for (anchor, left) in [(Anchor::Start, 0.0), (Anchor::Middle, -width / 2.0), (Anchor::End, -width)] {
        let pieces = pieces(&mark(anchor, &runs));
        let mut pen = left;
        for piece in &pieces {
            assert!((piece.x_mm - pen).abs() < 1e-9);
            pen += advance_mm(Face::Regular, piece.size_pt, &piece.text);
        }
        assert!((pen - left - width).abs() < 1e-9);
        assert!((pieces[1].size_pt - 7.2).abs() < 1e-12 && pieces[1].rise_mm < 0.0);
    }
}

#[test]
fn raised_and_lowered_signs_without_a_glyph_are_set_at_their_level() {
    let shown = |text| {
        let pieces = pieces(&mark(Anchor::Start, &[(text, Level::Normal)]));
        pieces.into_iter().map(|piece| (piece.text, piece.rise_mm.signum() as i8 * (piece.rise_mm != 0.0) as i8))
    };
    let expect = |parts: &[(&str, i8)]| parts.iter().map(|&(text, rise)| (text.to_string(), rise)).collect::<Vec<_>>();
    assert_eq!(shown("10⁻³ m").collect::<Vec<_>>(), expect(&[("10", 0), ("−3", 1), (" m", 0)]));
    assert_eq!(shown("m²").collect::<Vec<_>>(), expect(&[("m²", 0)]));
    assert_eq!(shown("H₂O").collect::<Vec<_>>(), expect(&[("H", 0), ("2", -1), ("O", 0)]));
    assert_eq!(shown("2‑5\t6").collect::<Vec<_>>(), expect(&[("2-5 6", 0)]));
}

#[test]
fn characters_of_other_scripts_are_spelled_and_named() {
    assert_eq!(missing("probe 中, B ⊙, H₂O\n"), ['中', '⊙'].into());
    let page = Mark::Text(mark(Anchor::Start, &[("ν 中", Level::Normal), ("国", Level::Sub)]));
    let page = Scene { width_mm: 210.0, height_mm: 297.0, marks: vec![page] };
    assert_eq!(missing_in(&page), ['中', '国'].into());
    let set = pieces(&mark(Anchor::Start, &[("中国-A", Level::Normal)]));
    assert_eq!(set.into_iter().map(|piece| piece.text).collect::<Vec<_>>(), ["U+4E2D U+56FD-A"]);
    let spelled_mm = advance_mm(Face::Regular, 8.0, "U+4E2D");
    assert!((advance_mm(Face::Regular, 8.0, "中") - spelled_mm).abs() < 1e-12);
}
