//! One finished drawing model, many writers: marks in millimetres, x to the right, y **down** from the top left corner.

use crate::figure::fonts::Face;

/// A point in millimetres.
pub type At = (f64, f64);

/// A finished drawing or page.
#[derive(Clone, Debug, PartialEq)]
pub struct Scene {
    /// Width in mm.
    pub width_mm: f64,
    /// Height in mm.
    pub height_mm: f64,
    /// Marks from the lowest to the topmost.
    pub marks: Vec<Mark>,
}

/// One mark.
#[derive(Clone, Debug, PartialEq)]
pub enum Mark {
    /// A line or a filled shape.
    Path(PathMark),
    /// One line of text.
    Text(TextMark),
}

/// A path: stroked, filled or both.
#[derive(Clone, Debug, PartialEq)]
pub struct PathMark {
    /// Pen movements; the first is a `Move`.
    pub segments: Vec<Segment>,
    /// Stroke, if any.
    pub stroke: Option<Stroke>,
    /// Fill, if any.
    pub fill: Option<Colour>,
    /// What the mark stands for; tests read pictures back through it.
    pub role: Role,
}

/// A pen movement, in mm.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Segment {
    /// Start of a sub-path.
    Move(At),
    /// Straight line.
    Line(At),
    /// Cubic curve: two control points and the end.
    Cubic(At, At, At),
    /// Back to the start of the sub-path.
    Close,
}

/// Control points of a quarter of a circle lie at this share of its radius from its ends: 4/3·(√2 − 1).
const QUARTER: f64 = 0.552_284_749_830_793_4;

/// A circle as four cubic curves, within 3e-4 of its radius.
pub fn circle((x, y): At, radius_mm: f64) -> Vec<Segment> {
    let (r, k) = (radius_mm, radius_mm * QUARTER);
    vec![
        Segment::Move((x + r, y)),
        Segment::Cubic((x + r, y + k), (x + k, y + r), (x, y + r)),
        Segment::Cubic((x - k, y + r), (x - r, y + k), (x - r, y)),
        Segment::Cubic((x - r, y - k), (x - k, y - r), (x, y - r)),
        Segment::Cubic((x + k, y - r), (x + r, y - k), (x + r, y)),
        Segment::Close,
    ]
}

/// Pen.
#[derive(Clone, Debug, PartialEq)]
pub struct Stroke {
    /// Colour.
    pub colour: Colour,
    /// Width in mm.
    pub width_mm: f64,
    /// Lengths of dashes and gaps in mm; empty means solid.
    pub dash_mm: Vec<f64>,
}

/// An opaque colour, 0–255 each.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Colour(pub u8, pub u8, pub u8);

/// One line of text made of runs; `at` is on the base line.
#[derive(Clone, Debug, PartialEq)]
pub struct TextMark {
    /// Anchor point on the base line.
    pub at: At,
    /// Which part of the text sits on `at`.
    pub anchor: Anchor,
    /// Size in pt of normal runs.
    pub size_pt: f64,
    /// Face.
    pub face: Face,
    /// Colour.
    pub colour: Colour,
    /// Runs from left to right.
    pub runs: Vec<Run>,
    /// What the mark stands for.
    pub role: Role,
}

/// A stretch of text, raised or lowered.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Run {
    /// The characters.
    pub text: String,
    /// Normal, lowered or raised.
    pub level: Level,
}

/// Vertical place of a run. Lowered and raised runs are 0.72 of the size, but at least 7 pt.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Level {
    /// On the base line.
    Normal,
    /// Subscript.
    Sub,
    /// Superscript.
    Super,
}

/// Which part of a text sits on its point.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Anchor {
    /// Left end.
    Start,
    /// Middle.
    Middle,
    /// Right end.
    End,
}

/// What a mark stands for.
#[derive(Clone, Debug, PartialEq)]
pub enum Role {
    /// Page furniture: rules, ordinary text.
    Plain,
    /// The mesa's area, its rim, hatches: scenery under the channels.
    Scenery,
    /// The dark area of a contact, by index in the device file.
    Contact(usize),
    /// A channel line; the pieces of one line join at their ends.
    Channel {
        /// Conductance in e²/h that the line stands for.
        weight: f64,
    },
    /// The arrowhead of a channel.
    Arrow,
    /// An area in which all channel lines inside share one potential.
    MixingBand,
    /// A label that must stay clear of lines and labels.
    Label,
}
