//! One page while it is being filled.

use crate::figure::scene::At;
use crate::figure::scene::Colour;
use crate::figure::scene::Mark;
use crate::figure::scene::PathMark;
use crate::figure::scene::Role;
use crate::figure::scene::Scene;
use crate::figure::scene::Segment;
use crate::figure::scene::Stroke;
use crate::sheet::grid::Paper;
use crate::sheet::guide::Anchor;
use crate::sheet::guide::Jump;
use crate::sheet::guide::Target;
use crate::sheet::typeset::Style;
use crate::sheet::typeset::spoken;

/// A page and how far down it is filled.
#[derive(Clone, Debug, PartialEq)]
pub struct Page {
    /// Its marks.
    pub scene: Scene,
    /// Its paper.
    pub paper: Paper,
    /// Lowest filled height in mm from the top.
    pub y_mm: f64,
    /// Places that can be gone to, in reading order.
    pub anchors: Vec<Anchor>,
    /// Areas that lead to a place.
    pub jumps: Vec<Jump>,
}

impl Page {
    /// An empty page.
    pub fn new(paper: Paper) -> Self {
        let scene = Scene { width_mm: paper.width_mm(), height_mm: paper.height_mm(), marks: Vec::new() };
        Self { scene, paper, y_mm: 0.0, anchors: Vec::new(), jumps: Vec::new() }
    }

    /// Height that is left above the foot.
    pub fn left_mm(&self) -> f64 {
        self.paper.bottom_mm() - self.y_mm
    }

    /// One line of marked text.
    pub fn text(&mut self, at: At, style: Style, marked: &str) {
        if !marked.is_empty() {
            self.scene.marks.push(Mark::Text(style.mark(at, marked)));
        }
    }

    /// Lines below `y_mm`, `x_mm` at their left end; gives the last base line.
    pub fn lines(&mut self, (x_mm, y_mm): At, style: Style, lines: &[String]) -> f64 {
        let mut base = y_mm;
        for line in lines {
            base += style.leading_mm();
            self.text((x_mm, base), style, line);
        }
        base
    }

    /// Makes a place at a height that can be gone to.
    pub fn anchor(&mut self, anchor: Anchor, y_mm: f64) {
        self.anchors.push(Anchor { y_mm, ..anchor });
    }

    /// Makes an area lead to a place: left, top, right, bottom in mm. The words say the same to whom cannot see it.
    pub fn jump(&mut self, sides_mm: [f64; 4], target: Target, words: &str) {
        self.jumps.push(Jump { sides_mm, target, words: spoken(words) });
    }

    /// A level rule.
    pub fn rule(&mut self, (x_mm, y_mm): At, length_mm: f64, width_mm: f64, colour: Colour) {
        let segments = vec![Segment::Move((x_mm, y_mm)), Segment::Line((x_mm + length_mm, y_mm))];
        let stroke = Stroke { colour, width_mm, dash_mm: Vec::new() };
        self.path(PathMark { segments, stroke: Some(stroke), fill: None, role: Role::Plain });
    }

    /// A filled outline.
    pub fn area(&mut self, corners: &[At], colour: Colour) {
        let mut segments: Vec<Segment> = corners.iter().map(|corner| Segment::Line(*corner)).collect();
        if let (Some(first), Some(corner)) = (segments.first_mut(), corners.first()) {
            *first = Segment::Move(*corner);
        }
        segments.push(Segment::Close);
        self.path(PathMark { segments, stroke: None, fill: Some(colour), role: Role::Plain });
    }

    /// Any path.
    pub fn path(&mut self, mark: PathMark) {
        self.scene.marks.push(Mark::Path(mark));
    }

    /// A finished drawing with its top left corner at a point.
    pub fn place(&mut self, (x_mm, y_mm): At, drawing: &Scene) {
        let moved = |(x, y): At| (x + x_mm, y + y_mm);
        for mark in &drawing.marks {
            let mut mark = mark.clone();
            match &mut mark {
                Mark::Text(text) => text.at = moved(text.at),
                Mark::Path(path) => path.segments.iter_mut().for_each(|segment| *segment = shift(*segment, &moved)),
            }
            self.scene.marks.push(mark);
        }
    }
}

fn shift(segment: Segment, moved: &impl Fn(At) -> At) -> Segment {
    match segment {
        Segment::Move(at) => Segment::Move(moved(at)),
        Segment::Line(at) => Segment::Line(moved(at)),
        Segment::Cubic(a, b, at) => Segment::Cubic(moved(a), moved(b), moved(at)),
        Segment::Close => Segment::Close,
    }
}
