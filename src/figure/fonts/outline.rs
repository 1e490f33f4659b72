//! Outlines of letters.

use ttf_parser::OutlineBuilder;

use crate::figure::fonts::Face;
use crate::figure::fonts::glyph;
use crate::figure::fonts::parsed;
use crate::figure::scene::At;
use crate::figure::scene::Segment;

/// The outline of a character with its pen at `at`, for an em of so many mm; y down. Empty for spaces and for characters
/// that the face lacks. To be filled where the winding number is not zero.
pub fn outline(face: Face, character: char, (at, em_mm): (At, f64)) -> Vec<Segment> {
    let Some((parsed, glyph)) = parsed(face).zip(glyph(face, character)) else { return Vec::new() };
    let scale = em_mm / f64::from(parsed.units_per_em());
    let mut pen = Pen { at, scale, last: at, segments: Vec::new() };
    parsed.outline_glyph(ttf_parser::GlyphId(glyph), &mut pen);
    pen.segments
}

struct Pen {
    at: At,
    scale: f64,
    last: At,
    segments: Vec<Segment>,
}

impl Pen {
    fn place(&self, x: f32, y: f32) -> At {
        (self.at.0 + f64::from(x) * self.scale, self.at.1 - f64::from(y) * self.scale)
    }

    fn draw(&mut self, segment: Segment, end: At) {
        self.segments.push(segment);
        self.last = end;
    }
}

impl OutlineBuilder for Pen {
    fn move_to(&mut self, x: f32, y: f32) {
        let end = self.place(x, y);
        self.draw(Segment::Move(end), end);
    }

    fn line_to(&mut self, x: f32, y: f32) {
        let end = self.place(x, y);
        self.draw(Segment::Line(end), end);
    }

    /// A parabola as a cubic curve: its handles lie two thirds of the way to the control point.
    fn quad_to(&mut self, x1: f32, y1: f32, x: f32, y: f32) {
        let (control, end, start) = (self.place(x1, y1), self.place(x, y), self.last);
        let handle = |from: At| (from.0 + (control.0 - from.0) * 2.0 / 3.0, from.1 + (control.1 - from.1) * 2.0 / 3.0);
        self.draw(Segment::Cubic(handle(start), handle(end), end), end);
    }

    fn curve_to(&mut self, x1: f32, y1: f32, x2: f32, y2: f32, x: f32, y: f32) {
        let end = self.place(x, y);
        self.draw(Segment::Cubic(self.place(x1, y1), self.place(x2, y2), end), end);
    }

    fn close(&mut self) {
        self.segments.push(Segment::Close);
    }
}
