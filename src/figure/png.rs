//! A scene as a PNG picture (ISO/IEC 15948) with 300 dots to the inch, drawn by the same rules as the PDF: nothing that
//! depends on the machine or its fonts.

use std::io::Cursor;

use tiny_skia::FillRule;
use tiny_skia::LineJoin;
use tiny_skia::Paint;
use tiny_skia::Path;
use tiny_skia::PathBuilder;
use tiny_skia::Pixmap;
use tiny_skia::StrokeDash;
use tiny_skia::Transform;

use crate::diagnostic::Diagnostic;
use crate::figure::outlined::outlined;
use crate::figure::picture::PictureData;
use crate::figure::scene::At;
use crate::figure::scene::Colour;
use crate::figure::scene::Mark;
use crate::figure::scene::PathMark;
use crate::figure::scene::Scene;
use crate::figure::scene::Segment;
use crate::figure::scene::Stroke;

/// Dots to the inch, the usual resolution of print (common practice).
const DOTS_PER_INCH: f64 = 300.0;
/// Millimetres in an inch, exact (international yard and pound agreement, 1959).
const MM_PER_INCH: f64 = 25.4;
/// Dots in a millimetre.
const DOTS_PER_MM: f64 = DOTS_PER_INCH / MM_PER_INCH;
/// Millimetres in a metre.
const MM_PER_M: f64 = 1000.0;

/// The picture on white. A fault means that the scene has no extent or more dots than a picture can have.
pub fn to_png(scene: &Scene, data: &PictureData) -> Result<Vec<u8>, Diagnostic> {
    let dots = |mm: f64| (mm * DOTS_PER_MM).ceil() as u32;
    let (width, height) = (dots(scene.width_mm), dots(scene.height_mm));
    let mut pixmap = Pixmap::new(width, height).ok_or_else(|| fault("its size cannot be drawn"))?;
    pixmap.fill(tiny_skia::Color::WHITE);
    for mark in outlined(scene).marks {
        if let Mark::Path(path) = mark {
            draw(&mut pixmap, &path);
        }
    }
    encoded(&pixmap, data).map_err(|error| fault(&error.to_string()))
}

fn fault(reason: &str) -> Diagnostic {
    Diagnostic::fault("picture", format!("a picture cannot be written: {reason}"))
}

fn draw(pixmap: &mut Pixmap, mark: &PathMark) {
    let Some(path) = path(&mark.segments) else { return };
    let scale = Transform::from_scale(DOTS_PER_MM as f32, DOTS_PER_MM as f32);
    if let Some(fill) = mark.fill {
        pixmap.fill_path(&path, &paint(fill), FillRule::Winding, scale, None);
    }
    if let Some(stroke) = &mark.stroke {
        pixmap.stroke_path(&path, &paint(stroke.colour), &pen(stroke), scale, None);
    }
}

fn path(segments: &[Segment]) -> Option<Path> {
    let mut builder = PathBuilder::new();
    let float = |(x, y): At| (x as f32, y as f32);
    for segment in segments {
        match segment {
            Segment::Move(at) => {
                let (x, y) = float(*at);
                builder.move_to(x, y);
            }
            Segment::Line(at) => {
                let (x, y) = float(*at);
                builder.line_to(x, y);
            }
            Segment::Cubic(first, second, at) => {
                let ((x1, y1), (x2, y2), (x, y)) = (float(*first), float(*second), float(*at));
                builder.cubic_to(x1, y1, x2, y2, x, y);
            }
            Segment::Close => builder.close(),
        }
    }
    builder.finish()
}

fn paint(Colour(red, green, blue): Colour) -> Paint<'static> {
    let mut paint = Paint::default();
    paint.set_color_rgba8(red, green, blue, u8::MAX);
    paint
}

fn pen(stroke: &Stroke) -> tiny_skia::Stroke {
    let mut lengths: Vec<f32> = stroke.dash_mm.iter().map(|&mm| mm as f32).collect();
    // Dash and gap alternate: an odd list is read twice (SVG 1.1, 11.4; ISO 32000-1, 8.4.3.6).
    if lengths.len() % 2 == 1 {
        lengths.extend(lengths.clone());
    }
    tiny_skia::Stroke {
        width: stroke.width_mm as f32,
        line_join: LineJoin::Round,
        dash: StrokeDash::new(lengths, 0.0),
        ..tiny_skia::Stroke::default()
    }
}

fn encoded(pixmap: &Pixmap, data: &PictureData) -> Result<Vec<u8>, png::EncodingError> {
    let mut bytes = Cursor::new(Vec::new());
    let mut encoder = png::Encoder::new(&mut bytes, pixmap.width(), pixmap.height());
    encoder.set_color(png::ColorType::Rgb);
    encoder.set_depth(png::BitDepth::Eight);
    let per_metre = (DOTS_PER_MM * MM_PER_M).round() as u32;
    let unit = png::Unit::Meter;
    encoder.set_pixel_dims(Some(png::PixelDimensions { xppu: per_metre, yppu: per_metre, unit }));
    for (keyword, text) in [
        ("Title", &data.title),
        ("Description", &data.description),
        ("Software", &data.software),
        ("Source", &data.source),
    ] {
        encoder.add_itxt_chunk(keyword.to_owned(), text.clone())?;
    }
    let mut writer = encoder.write_header()?;
    // Everything is opaque, so that premultiplied colours are plain ones.
    let colours: Vec<u8> = pixmap.pixels().iter().flat_map(|dot| [dot.red(), dot.green(), dot.blue()]).collect();
    writer.write_image_data(&colours)?;
    writer.finish()?;
    Ok(bytes.into_inner())
}
