//! The drawing of a chip with its edge channels at one polarity.
//!
//! The chip is drawn in a stretched plane (`stretch`), the channels as lines inside their regions (`courses`, `border`,
//! `offset`, `round`, `ends`, `lanes`), cut where their potential changes (`strokes`), with arrows, labels and scenery around.

use crate::figure::scene::Scene;
use crate::figure::scene::Stroke;
use crate::layout::Layout;
use crate::network::BundleIdx;
use crate::network::Channels;
use crate::number::Number;
use crate::number::Rational;
use crate::quantity::Polarity;

pub use names::ChipNames;
pub use names::ContactName;
pub use names::OverlayLook;
pub use names::OverlayName;
pub use style::MIXING_AREA;
pub use style::key_pens;

mod area;
mod arrows;
mod bit;
mod border;
mod chains;
mod clashes;
mod courses;
mod demand;
mod ends;
mod fit;
mod labels;
mod lanes;
mod names;
mod obstacles;
mod offset;
mod pitches;
mod places;
mod regions;
mod round;
mod scan;
mod scenery;
mod shares;
mod stretch;
mod strokes;
mod style;
mod texts;
mod vector;
mod walls;

/// What a chip drawing shows: finished values only.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ChipDrawing<'a> {
    /// Names, pins, gates.
    pub names: &'a ChipNames,
    /// The subdivision on which the channels run.
    pub layout: &'a Layout,
    /// The channels that were solved.
    pub channels: &'a Channels,
    /// Filling of every face, in the order of the layout; empty where edge modes stand in place of fillings.
    pub fillings: &'a [Rational],
    /// Polarity of the field.
    pub polarity: Polarity,
    /// Potential of every bundle, 1 at the inlet and 0 at the outlet; none for all where no current flows.
    pub potentials: Option<&'a [Option<Number>]>,
    /// Width and greatest height in mm.
    pub size_mm: (f64, f64),
}

impl<'a> ChipDrawing<'a> {
    fn potential(&self, bundle: BundleIdx) -> Option<&'a Number> {
        self.potentials?.get(bundle.0)?.as_ref()
    }
}

/// Draws a chip. The scene has the width that is asked for and at most the height.
pub fn draw_chip(drawing: &ChipDrawing<'_>) -> Scene {
    fit::best(drawing)
}

/// The pen of channels at a potential between 0 (outlet) and 1 (inlet), or of channels that nothing feeds, as a legend
/// beside full-size drawings shows it.
pub fn channel_pen(potential: Option<&Number>) -> Stroke {
    style::channel_pen(potential, fit::WIDEST_PITCH_MM)
}
