//! The two drawings of a point, side by side or one below the other, with the lines to copy into the logbook.

use crate::figure::MIXING_AREA;
use crate::figure::key_pens;
use crate::figure::scene::At;
use crate::figure::scene::PathMark;
use crate::figure::scene::Role;
use crate::figure::scene::Scene;
use crate::figure::scene::Segment;
use crate::figure::scene::Stroke;
use crate::report::AloneReading;
use crate::report::DrawingWords;
use crate::report::PointReport;
use crate::sheet::grid;
use crate::sheet::grid::GUTTER_MM;
use crate::sheet::grid::HALF_MM;
use crate::sheet::grid::TEXT_MM;
use crate::sheet::page::Page;
use crate::sheet::typeset::Style;

/// Length of the pen samples in the key.
const SAMPLE_MM: f64 = 9.0;

/// Both drawings below `page.y_mm`; nothing where none were made. Drawings wider than a column stand one below the
/// other.
pub fn draw(page: &mut Page, point: &PointReport, scenes: Option<&[Scene; 2]>) {
    let Some(scenes) = scenes else { return };
    if scenes.iter().any(|scene| scene.width_mm > HALF_MM) {
        stacked(page, point, scenes);
    } else {
        beside(page, point, scenes);
    }
    key(page, point);
}

fn beside(page: &mut Page, point: &PointReport, scenes: &[Scene; 2]) {
    let left = page.paper.left_mm();
    let top = page.y_mm;
    let tallest = scenes.iter().map(|scene| scene.height_mm).fold(0.0, f64::max);
    let columns = [left, left + HALF_MM + GUTTER_MM];
    let mut below = top;
    for (words, x) in point.drawings.iter().zip(columns) {
        below = heading(page, (x, top), words).max(below);
    }
    let mut end = below;
    for ((scene, words), x) in scenes.iter().zip(&point.drawings).zip(columns) {
        page.place((x + (HALF_MM - scene.width_mm) / 2.0, below + 1.8), scene);
        end = caption(page, (x, below + 2.8 + tallest), (words, HALF_MM)).max(end);
    }
    page.y_mm = end;
}

fn stacked(page: &mut Page, point: &PointReport, scenes: &[Scene; 2]) {
    let left = page.paper.left_mm();
    for (scene, words) in scenes.iter().zip(&point.drawings) {
        let below = heading(page, (left, page.y_mm), words);
        page.place((left + (TEXT_MM - scene.width_mm) / 2.0, below + 1.0), scene);
        page.y_mm = caption(page, (left, below + 1.4 + scene.height_mm), (words, TEXT_MM)) + 1.0;
    }
}

/// Whether the words below the drawings say which reading shows the only region of its own alone.
pub fn tell_rule(point: &PointReport) -> bool {
    let [rule] = point.alone.as_slice() else { return false };
    let sides = [&rule.toward, &rule.away];
    let told = |(side, words): (&Option<AloneReading>, &DrawingWords)| {
        side.as_ref().is_some_and(|side| side.leads == words.leads && side.value == words.value)
    };
    point.drawings.len() == sides.len() && sides.into_iter().zip(&point.drawings).all(told)
}

/// Height of the block in mm.
pub fn height_mm(page: &Page, point: &PointReport, scenes: Option<&[Scene; 2]>) -> f64 {
    let mut trial = Page::new(page.paper);
    draw(&mut trial, point, scenes);
    trial.y_mm
}

/// Which way the field points, and beside it or below which way the carriers run; gives the last base line.
fn heading(page: &mut Page, (x, y): At, words: &DrawingWords) -> f64 {
    let (bold, grey) = (Style::bold(grid::TEXT_PT), Style::text(grid::SMALL_PT).grey());
    let base = y + 4.4;
    page.text((x, base), bold, &words.heading);
    let beside_mm = bold.width_mm(&words.heading) + 3.0;
    if beside_mm + grey.width_mm(&words.sense) <= HALF_MM {
        page.text((x + beside_mm, base), grey, &words.sense);
        return base;
    }
    page.lines((x, base), grey, &grey.lines(&words.sense, HALF_MM))
}

/// Leads and number within a width in mm; gives the last base line.
fn caption(page: &mut Page, (x, y): At, (words, width_mm): (&DrawingWords, f64)) -> f64 {
    if words.leads.is_empty() {
        return y;
    }
    let (bold, text) = (Style::bold(10.0), Style::text(grid::TEXT_PT));
    let leads_mm = bold.width_mm(&words.leads) + 4.0;
    let beside = leads_mm + text.width_mm(&words.value) <= width_mm;
    let mut base = page.lines((x, y), bold, &bold.lines(&words.leads, width_mm));
    if beside {
        page.text((x + leads_mm, base), text, &words.value);
    } else {
        base = page.lines((x, base), text, &text.lines(&words.value, width_mm));
    }
    let grey = Style::text(grid::SMALL_PT).grey();
    page.lines((x, base + 0.3), grey, &grey.lines(&words.remark, width_mm))
}

/// Samples of the pens with their words, then the rest of the key.
fn key(page: &mut Page, point: &PointReport) {
    let (left, right) = (page.paper.left_mm(), page.paper.right_mm());
    let style = Style::text(grid::SMALL_PT).grey();
    let mut base = page.y_mm + 5.2;
    let mut x = left;
    for (pen, words) in key_pens().into_iter().zip(&point.pens) {
        let wide = SAMPLE_MM + 2.0 + style.width_mm(words);
        if x > left && x + wide > right {
            (x, base) = (left, base + style.leading_mm());
        }
        sample(page, (x, base - 0.95), pen);
        let lines = style.lines(words, TEXT_MM - SAMPLE_MM - 2.0);
        base = page.lines((x + SAMPLE_MM + 2.0, base - style.leading_mm()), style, &lines);
        x += wide + 6.0;
    }
    if let Some(words) = &point.mixing_key {
        let wide = SAMPLE_MM + 2.0 + style.width_mm(words);
        if x > left && x + wide > right {
            (x, base) = (left, base + style.leading_mm());
        }
        let corner = |dx: f64, dy: f64| (x + dx, base - 0.95 + dy);
        page.area(&[corner(0.0, -1.1), corner(SAMPLE_MM, -1.1), corner(SAMPLE_MM, 1.1), corner(0.0, 1.1)], MIXING_AREA);
        page.text((x + SAMPLE_MM + 2.0, base), style, words);
    }
    for line in &point.key {
        base = page.lines((left, base), style, &style.lines(line, TEXT_MM));
    }
    page.y_mm = base + 1.0;
}

fn sample(page: &mut Page, (x, y): At, pen: Stroke) {
    let segments = vec![Segment::Move((x, y)), Segment::Line((x + SAMPLE_MM, y))];
    page.path(PathMark { segments, stroke: Some(pen), fill: None, role: Role::Plain });
}
