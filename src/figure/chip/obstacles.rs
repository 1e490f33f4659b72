//! What labels must keep clear of: boxes and lines.

use std::ops::RangeInclusive;

use crate::figure::chip::area::Area;
use crate::figure::chip::stretch::Frame;
use crate::figure::chip::vector::distance;
use crate::figure::chip::vector::gap;
use crate::figure::scene::At;

/// Everything placed so far.
pub(super) struct Obstacles {
    /// The drawing; labels stay inside.
    page: Frame,
    /// Texts, contacts, arrows and marks.
    boxes: Vec<Frame>,
    /// Channel lines, borders and leaders with half their width, in every column of the page that they touch.
    columns: Vec<Vec<Stroke>>,
}

/// A straight line and half its width.
pub(super) type Stroke = ((At, At), f64);

/// Free space kept around a label, in mm.
const CLEARANCE_MM: f64 = 0.3;

/// Width of a column in mm.
const COLUMN_MM: f64 = 2.0;

/// Space around a point beyond which a place is not better, in mm.
pub(super) const ROOMY_MM: f64 = 6.0;

impl Obstacles {
    /// A page with boxes and lines on it.
    pub fn new(page: Frame, boxes: Vec<Frame>, strokes: impl Iterator<Item = Stroke>) -> Self {
        let columns = vec![Vec::new(); (page.right / COLUMN_MM) as usize + 1];
        let mut obstacles = Self { page, boxes, columns };
        strokes.for_each(|stroke| obstacles.add_stroke(stroke));
        obstacles
    }

    /// Adds a box.
    pub fn add_box(&mut self, frame: Frame) {
        self.boxes.push(frame);
    }

    /// Adds a line.
    pub fn add_stroke(&mut self, (stretch, half_mm): Stroke) {
        let (left, right) = (stretch.0.0.min(stretch.1.0) - half_mm, stretch.0.0.max(stretch.1.0) + half_mm);
        let columns = self.columns_between(left, right);
        self.columns[columns].iter_mut().for_each(|column| column.push((stretch, half_mm)));
    }

    fn columns_between(&self, left: f64, right: f64) -> RangeInclusive<usize> {
        let last = self.columns.len() - 1;
        // A negative number becomes 0 here.
        let column = |x: f64| ((x / COLUMN_MM) as usize).min(last);
        column(left)..=column(right)
    }

    fn strokes_between(&self, left: f64, right: f64) -> impl Iterator<Item = &Stroke> {
        self.columns[self.columns_between(left, right)].iter().flatten()
    }

    /// Whether a box lies on the page and meets nothing.
    pub fn leave(&self, frame: Frame) -> bool {
        let page = self.page;
        let on_page = frame.left >= page.left && frame.right <= page.right;
        let on_page = on_page && frame.top >= page.top && frame.bottom <= page.bottom;
        let wide = frame.grown(CLEARANCE_MM);
        on_page && !self.boxes.iter().any(|held| held.meets(wide)) && !self.is_stroked(wide)
    }

    /// Whether a line runs through a box.
    pub fn is_stroked(&self, frame: Frame) -> bool {
        let mut near = self.strokes_between(frame.left, frame.right);
        near.any(|&(stretch, half_mm)| frame.grown(half_mm).is_met_by(stretch))
    }

    /// Whether a thin straight line meets no text, contact or channel line.
    pub fn leave_line(&self, line: (At, At)) -> bool {
        let (left, right) = (line.0.0.min(line.1.0) - CLEARANCE_MM, line.0.0.max(line.1.0) + CLEARANCE_MM);
        let mut near = self.strokes_between(left, right);
        !self.boxes.iter().any(|held| held.grown(CLEARANCE_MM).is_met_by(line))
            && !near.any(|&(stretch, half_mm)| gap(stretch, line) < half_mm + CLEARANCE_MM)
    }

    /// Free space around a point, as far as it counts.
    pub fn room_mm(&self, point: At) -> f64 {
        let near = self.strokes_between(point.0 - ROOMY_MM, point.0 + ROOMY_MM);
        near.map(|&(stretch, half_mm)| distance(point, stretch) - half_mm).fold(ROOMY_MM, f64::min)
    }
}

impl Frame {
    /// The box with a margin around.
    pub fn grown(self, by_mm: f64) -> Self {
        Frame { left: self.left - by_mm, top: self.top - by_mm, right: self.right + by_mm, bottom: self.bottom + by_mm }
    }

    /// The middle.
    pub fn centre(self) -> At {
        ((self.left + self.right) / 2.0, (self.top + self.bottom) / 2.0)
    }

    /// Extent along x.
    pub fn width(self) -> f64 {
        self.right - self.left
    }

    /// Extent along y.
    pub fn height(self) -> f64 {
        self.bottom - self.top
    }

    /// Whether two boxes overlap.
    pub fn meets(self, other: Frame) -> bool {
        self.left < other.right && other.left < self.right && self.top < other.bottom && other.top < self.bottom
    }

    /// Whether a straight line passes through the box: its part within the box's span of x and of y is not empty.
    pub fn is_met_by(self, (a, b): (At, At)) -> bool {
        let beside = a.0.max(b.0) < self.left || a.0.min(b.0) > self.right;
        if beside || a.1.max(b.1) < self.top || a.1.min(b.1) > self.bottom {
            return false;
        }
        let (low, high) = clipped((0.0, 1.0), (a.0, b.0), (self.left, self.right));
        let (low, high) = clipped((low, high), (a.1, b.1), (self.top, self.bottom));
        low <= high
    }

    /// Whether the box lies outside an area: neither its corners nor its middle lie in it, and no side passes through.
    pub fn is_outside(self, area: &Area) -> bool {
        let corners =
            [(self.left, self.top), (self.right, self.top), (self.left, self.bottom), (self.right, self.bottom)];
        !corners.into_iter().chain([self.centre()]).any(|point| area.holds(point))
            && !area.sides().any(|side| self.is_met_by(side))
    }
}

/// The part of a range of shares in which a coordinate that goes from `a` to `b` lies between two limits.
fn clipped((low, high): (f64, f64), (a, b): (f64, f64), limits: (f64, f64)) -> (f64, f64) {
    if a == b {
        let inside = limits.0 <= a && a <= limits.1;
        return if inside { (low, high) } else { (1.0, 0.0) };
    }
    let (first, second) = ((limits.0 - a) / (b - a), (limits.1 - a) / (b - a));
    (low.max(first.min(second)), high.min(first.max(second)))
}
