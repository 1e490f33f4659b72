//! Scenes to page contents: path and text operators in points, y upwards (ISO 32000-1, 8.5 and 9.4).
//!
//! Areas are filled by the even–odd rule, so a ring inside a ring is a hole however it is wound. Lines have butt ends
//! and round joins. Colour, pen and font are written only where they change.

use printpdf::Color;
use printpdf::DictItem;
use printpdf::LineDashPattern;
use printpdf::LineJoinStyle;
use printpdf::Mm;
use printpdf::Op;
use printpdf::PdfFontHandle;
use printpdf::PdfPage;
use printpdf::Point;
use printpdf::Pt;
use printpdf::Rgb;
use printpdf::TextItem;

use crate::figure::fonts::Face;
use crate::figure::fonts::MM_PER_PT;
use crate::figure::fonts::Piece;
use crate::figure::fonts::pieces;
use crate::figure::fonts::spoken;
use crate::figure::scene::At;
use crate::figure::scene::Colour;
use crate::figure::scene::Level;
use crate::figure::scene::Mark;
use crate::figure::scene::PathMark;
use crate::figure::scene::Scene;
use crate::figure::scene::Segment;
use crate::figure::scene::Stroke;
use crate::figure::scene::TextMark;
use crate::sheet::pdf::fonts::Used;
use crate::sheet::pdf::fonts::font_id;

/// The page of a scene; the characters that it uses are added to `used`.
pub(super) fn page(scene: &Scene, used: &mut Used) -> PdfPage {
    let mut contents = Contents { height_mm: scene.height_mm, ops: Vec::new(), pen: Pen::default(), used };
    contents.ops.push(Op::SetLineJoinStyle { join: LineJoinStyle::Round });
    for mark in &scene.marks {
        match mark {
            Mark::Path(path) => contents.path(path),
            Mark::Text(text) => contents.text(text),
        }
    }
    PdfPage::new(Mm(scene.width_mm as f32), Mm(scene.height_mm as f32), contents.ops)
}

/// A length in whole thousandths of a point, the finest step in the file: whatever differs less between machines
/// does not reach it. Lengths that are no numbers become 0.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub(super) struct Milli(i64);

impl Milli {
    /// From mm.
    pub(super) fn from_mm(mm: f64) -> Milli {
        Milli::from_pt(mm / MM_PER_PT)
    }

    fn from_pt(pt: f64) -> Milli {
        // 14 400 pt is the largest page that viewers take (ISO 32000-1, annex C).
        Milli((pt.clamp(-14_400.0, 14_400.0) * 1000.0).round() as i64)
    }

    fn pt(self) -> f32 {
        self.0 as f32 / 1000.0
    }
}

impl From<Milli> for lopdf::Object {
    fn from(length: Milli) -> lopdf::Object {
        lopdf::Object::Real(length.pt())
    }
}

/// The operators of a page as they grow.
struct Contents<'a> {
    height_mm: f64,
    ops: Vec<Op>,
    pen: Pen,
    used: &'a mut Used,
}

/// What the operators written so far have set.
#[derive(Default)]
struct Pen {
    fill: Option<Colour>,
    stroke: Option<Colour>,
    width: Option<Milli>,
    dashes: Vec<Milli>,
    font: Option<(Face, Milli)>,
    rise: Milli,
}

impl Contents<'_> {
    fn path(&mut self, path: &PathMark) {
        let paint = match (&path.stroke, path.fill) {
            (None, None) => return,
            (Some(_), None) => "S",
            (None, Some(_)) => "f*",
            (Some(_), Some(_)) => "B*",
        };
        if path.segments.is_empty() {
            return;
        }
        if let Some(stroke) = &path.stroke {
            self.set_stroke(stroke);
        }
        if let Some(fill) = path.fill {
            self.set_fill(fill);
        }
        for (index, &segment) in path.segments.iter().enumerate() {
            self.segment(segment, index);
        }
        self.operator(paint, &[]);
    }

    /// Writes a pen movement; the first one always moves, because a path must begin at a point.
    fn segment(&mut self, segment: Segment, index: usize) {
        match segment {
            Segment::Move(end) => self.operator("m", &[end]),
            Segment::Line(end) | Segment::Cubic(_, _, end) if index == 0 => self.operator("m", &[end]),
            Segment::Line(end) => self.operator("l", &[end]),
            Segment::Cubic(first, second, end) => self.operator("c", &[first, second, end]),
            Segment::Close if index == 0 => self.operator("m", &[(0.0, 0.0)]),
            Segment::Close => self.operator("h", &[]),
        }
    }

    /// Writes one line of text. All pieces hang on one starting point, so that they are selected as one line; the
    /// viewer's pen goes on by the same widths as the layout.
    fn text(&mut self, mark: &TextMark) {
        let pieces = pieces(mark);
        let Some(first) = pieces.first() else { return };
        self.set_fill(mark.colour);
        let pos = self.point((mark.at.0 + first.x_mm, mark.at.1));
        self.ops.push(Op::StartTextSection);
        self.ops.push(Op::SetTextCursor { pos });
        for piece in pieces {
            self.piece(mark.face, piece);
        }
        self.ops.push(Op::EndTextSection);
    }

    fn piece(&mut self, face: Face, piece: Piece) {
        let size = Milli::from_pt(piece.size_pt);
        if self.pen.font.replace((face, size)) != Some((face, size)) {
            let font = PdfFontHandle::External(font_id(face));
            self.ops.push(Op::SetFont { font, size: Pt(size.pt()) });
        }
        let rise = Milli::from_mm(piece.rise_mm);
        if std::mem::replace(&mut self.pen.rise, rise) != rise {
            self.ops.push(Op::SetLineOffset { multiplier: rise.pt() });
        }
        self.used.entry(face).or_default().extend(piece.text.chars());
        let said = said(&piece);
        if let Some(said) = &said {
            let words = DictItem::Bytes(utf16(said));
            let map = std::collections::BTreeMap::from([("ActualText".to_string(), words)]);
            let value = vec![DictItem::Name(b"Span".to_vec()), DictItem::Dict { map }];
            self.ops.push(Op::Unknown { key: "BDC".to_string(), value });
        }
        self.ops.push(Op::ShowText { items: vec![TextItem::Text(piece.text)] });
        if said.is_some() {
            self.ops.push(Op::Unknown { key: "EMC".to_string(), value: Vec::new() });
        }
    }

    fn set_fill(&mut self, colour: Colour) {
        if self.pen.fill.replace(colour) != Some(colour) {
            self.ops.push(Op::SetFillColor { col: rgb(colour) });
        }
    }

    fn set_stroke(&mut self, stroke: &Stroke) {
        if self.pen.stroke.replace(stroke.colour) != Some(stroke.colour) {
            self.ops.push(Op::SetOutlineColor { col: rgb(stroke.colour) });
        }
        let width = Milli::from_mm(stroke.width_mm);
        if self.pen.width.replace(width) != Some(width) {
            self.ops.push(Op::SetOutlineThickness { pt: Pt(width.pt()) });
        }
        let dashes = dashes(&stroke.dash_mm);
        if std::mem::replace(&mut self.pen.dashes, dashes.clone()) != dashes {
            let lengths: Vec<f32> = dashes.into_iter().map(Milli::pt).collect();
            self.ops.push(Op::SetLineDashPattern { dash: LineDashPattern::new(0.0, &lengths) });
        }
    }

    fn operator(&mut self, key: &str, points: &[At]) {
        let points = points.iter().map(|&at| self.point(at));
        let value = points.flat_map(|point| [DictItem::Real(point.x.0), DictItem::Real(point.y.0)]).collect();
        self.ops.push(Op::Unknown { key: key.to_string(), value });
    }

    /// A point of the scene, y downwards, on the page, y upwards.
    fn point(&self, (x_mm, y_mm): At) -> Point {
        Point { x: Pt(Milli::from_mm(x_mm).pt()), y: Pt(Milli::from_mm(self.height_mm - y_mm).pt()) }
    }
}

/// What a raised or lowered piece says when it is copied or read aloud (ISO 32000-1, 14.9.4).
fn said(piece: &Piece) -> Option<String> {
    let level = match piece.rise_mm {
        rise if rise > 0.0 => Level::Super,
        rise if rise < 0.0 => Level::Sub,
        _ => return None,
    };
    Some(spoken(&piece.text, level))
}

/// Text as a PDF string: a byte order mark and UTF-16 (ISO 32000-1, 7.9.2.2).
fn utf16(text: &str) -> Vec<u8> {
    std::iter::once(0xFEFF).chain(text.encode_utf16()).flat_map(u16::to_be_bytes).collect()
}

/// Dashes that a viewer accepts: none below zero and not all zero (ISO 32000-1, 8.4.3.6); else a solid line.
fn dashes(dash_mm: &[f64]) -> Vec<Milli> {
    let dashes: Vec<Milli> = dash_mm.iter().map(|&length| Milli::from_mm(length.max(0.0))).collect();
    if dashes.iter().all(|dash| dash.0 == 0) { Vec::new() } else { dashes }
}

fn rgb(Colour(red, green, blue): Colour) -> Color {
    // Four decimals tell all 256 steps apart and keep the file short.
    let share = |step: u8| (f64::from(step) / 255.0 * 10_000.0).round() as f32 / 10_000.0;
    Color::Rgb(Rgb { r: share(red), g: share(green), b: share(blue), icc_profile: None })
}
