//! A surface for plotters that records marks of a scene: one unit is a hundredth of a millimetre.

use std::convert::Infallible;

use plotters_backend::BackendColor;
use plotters_backend::BackendCoord;
use plotters_backend::BackendStyle;
use plotters_backend::BackendTextStyle;
use plotters_backend::DrawingBackend;
use plotters_backend::DrawingErrorKind;

use crate::figure::scene::At;
use crate::figure::scene::Colour;
use crate::figure::scene::Mark;
use crate::figure::scene::PathMark;
use crate::figure::scene::Role;
use crate::figure::scene::Segment;
use crate::figure::scene::Stroke;
use crate::figure::scene::circle;

/// Units in a millimetre.
pub(super) const UNITS_PER_MM: f64 = 100.0;

/// Records what is drawn. Text is none of its business: it is set beside the plot with our own measuring.
pub(super) struct Canvas<'a> {
    pub size: (u32, u32),
    pub marks: &'a mut Vec<Mark>,
}

type Drawn = Result<(), DrawingErrorKind<Infallible>>;

impl DrawingBackend for Canvas<'_> {
    type ErrorType = Infallible;

    fn get_size(&self) -> (u32, u32) {
        self.size
    }

    fn ensure_prepared(&mut self) -> Drawn {
        Ok(())
    }

    fn present(&mut self) -> Drawn {
        Ok(())
    }

    fn draw_pixel(&mut self, at: BackendCoord, colour: BackendColor) -> Drawn {
        self.draw_rect(at, (at.0 + 1, at.1 + 1), &colour, true)
    }

    fn draw_line<S: BackendStyle>(&mut self, from: BackendCoord, to: BackendCoord, style: &S) -> Drawn {
        self.draw_path([from, to], style)
    }

    fn draw_rect<S: BackendStyle>(&mut self, low: BackendCoord, high: BackendCoord, style: &S, fill: bool) -> Drawn {
        self.closed([low, (high.0, low.1), high, (low.0, high.1)].into_iter(), style, fill);
        Ok(())
    }

    fn draw_path<S: BackendStyle, I: IntoIterator<Item = BackendCoord>>(&mut self, path: I, style: &S) -> Drawn {
        let segments = polyline(path.into_iter());
        self.push(segments, Some(stroke(style)), None, style);
        Ok(())
    }

    fn draw_circle<S: BackendStyle>(&mut self, centre: BackendCoord, radius: u32, style: &S, fill: bool) -> Drawn {
        let segments = circle(mm(centre), f64::from(radius) / UNITS_PER_MM);
        let (stroke, colour) = if fill { (None, Some(colour(style.color()))) } else { (Some(stroke(style)), None) };
        self.push(segments, stroke, colour, style);
        Ok(())
    }

    fn fill_polygon<S: BackendStyle, I: IntoIterator<Item = BackendCoord>>(&mut self, corners: I, style: &S) -> Drawn {
        self.closed(corners.into_iter(), style, true);
        Ok(())
    }

    fn draw_text<T: BackendTextStyle>(&mut self, _: &str, _: &T, _: BackendCoord) -> Drawn {
        Ok(())
    }
}

impl Canvas<'_> {
    fn closed<S: BackendStyle>(&mut self, corners: impl Iterator<Item = BackendCoord>, style: &S, fill: bool) {
        let mut segments = polyline(corners);
        segments.push(Segment::Close);
        let (stroke, colour) = if fill { (None, Some(colour(style.color()))) } else { (Some(stroke(style)), None) };
        self.push(segments, stroke, colour, style);
    }

    /// What is wholly transparent is not there.
    fn push<S: BackendStyle>(
        &mut self,
        segments: Vec<Segment>,
        stroke: Option<Stroke>,
        fill: Option<Colour>,
        style: &S,
    ) {
        if style.color().alpha > 0.0 {
            self.marks.push(Mark::Path(PathMark { segments, stroke, fill, role: Role::Plain }));
        }
    }
}

fn mm((x, y): BackendCoord) -> At {
    (f64::from(x) / UNITS_PER_MM, f64::from(y) / UNITS_PER_MM)
}

fn polyline(points: impl Iterator<Item = BackendCoord>) -> Vec<Segment> {
    let step = |(at, point)| if at == 0 { Segment::Move(mm(point)) } else { Segment::Line(mm(point)) };
    points.enumerate().map(step).collect()
}

fn stroke<S: BackendStyle>(style: &S) -> Stroke {
    let width_mm = f64::from(style.stroke_width()) / UNITS_PER_MM;
    Stroke { colour: colour(style.color()), width_mm, dash_mm: Vec::new() }
}

fn colour(colour: BackendColor) -> Colour {
    Colour(colour.rgb.0, colour.rgb.1, colour.rgb.2)
}
