//! Paper, margins, columns, sizes and colours of every page.

use crate::figure::scene::Colour;

/// Paper of a sheet, always upright.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Paper {
    /// 210 mm × 297 mm (ISO 216).
    #[default]
    A4,
    /// 8.5 in × 11 in.
    Letter,
}

impl Paper {
    /// Width in mm.
    pub fn width_mm(self) -> f64 {
        match self {
            Self::A4 => 210.0,
            Self::Letter => 215.9,
        }
    }

    /// Height in mm.
    pub fn height_mm(self) -> f64 {
        match self {
            Self::A4 => 297.0,
            Self::Letter => 279.4,
        }
    }

    /// Left end of the text: the 174 mm stand in the middle, 18 mm from the sides of A4.
    pub fn left_mm(self) -> f64 {
        (self.width_mm() - TEXT_MM) / 2.0
    }

    /// Right end of the text.
    pub fn right_mm(self) -> f64 {
        self.left_mm() + TEXT_MM
    }

    /// Lowest base line of the text above the foot.
    pub fn bottom_mm(self) -> f64 {
        self.height_mm() - MARGIN_MM - 7.0
    }
}

/// Width of the text.
pub const TEXT_MM: f64 = 174.0;
/// Margin above and below.
pub const MARGIN_MM: f64 = 14.0;
/// Space between columns.
pub const GUTTER_MM: f64 = 6.0;
/// One of three columns.
pub const THIRD_MM: f64 = 54.0;
/// One of two columns; a drawing is at most as wide.
pub const HALF_MM: f64 = 84.0;

/// Text.
pub const TEXT_PT: f64 = 8.5;
/// Small text.
pub const SMALL_PT: f64 = 7.5;
/// The least that is ever printed.
pub const LEAST_PT: f64 = 7.0;
/// Headings.
pub const HEADING_PT: f64 = 11.0;
/// The answer.
pub const ANSWER_PT: f64 = 12.5;
/// Identity of the device.
pub const IDENTITY_PT: f64 = 20.0;

/// Thin rules.
pub const THIN_MM: f64 = 0.12;
/// The rule under the head.
pub const HEAVY_MM: f64 = 0.35;

/// Text and heavy rules.
pub const INK: Colour = Colour(17, 17, 17);
/// Text of the second rank.
pub const GREY: Colour = Colour(92, 92, 92);
/// Thin rules.
pub const PALE: Colour = Colour(176, 176, 176);
/// The band of a strip.
pub const BAND: Colour = Colour(234, 234, 230);
/// What disagrees: vermillion of the Okabe–Ito set. It only repeats what weight and shape say.
pub const ODD: Colour = Colour(213, 94, 0);
