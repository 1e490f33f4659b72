//! Texts of the drawing and the boxes they fill.

use crate::figure::chip::stretch::Frame;
use crate::figure::fonts::Face;
use crate::figure::fonts::MM_PER_PT;
use crate::figure::fonts::advance_mm;
use crate::figure::fonts::cap_height_mm;
use crate::figure::scene::Anchor;
use crate::figure::scene::At;
use crate::figure::scene::Colour;
use crate::figure::scene::Level;
use crate::figure::scene::Mark;
use crate::figure::scene::Role;
use crate::figure::scene::Run;
use crate::figure::scene::TextMark;
use crate::number::Rational;

/// A text before it has a place.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Wording {
    pub text: String,
    pub face: Face,
    pub size_pt: f64,
    pub colour: Colour,
    width_mm: f64,
    height_mm: f64,
}

/// Depth of the lowest letters below the base line, as a share of the size.
const TAIL: f64 = 0.22;

impl Wording {
    /// A text, measured.
    pub fn new(text: String, face: Face, size_pt: f64, colour: Colour) -> Self {
        let (width_mm, height_mm) = (advance_mm(face, size_pt, &text), cap_height_mm(face, size_pt));
        Self { text, face, size_pt, colour, width_mm, height_mm }
    }

    /// The same text in another size.
    pub fn in_size(&self, size_pt: f64) -> Self {
        Self::new(self.text.clone(), self.face, size_pt, self.colour)
    }

    /// Width in mm.
    pub fn width(&self) -> f64 {
        self.width_mm
    }

    /// Height of capitals in mm.
    pub fn height(&self) -> f64 {
        self.height_mm
    }

    /// The box around the text when its capitals are centred on a point.
    pub fn frame(&self, (x, y): At) -> Frame {
        let (half_width, half_height) = (self.width() / 2.0, self.height() / 2.0);
        Frame {
            left: x - half_width,
            top: y - half_height,
            right: x + half_width,
            bottom: y + half_height + TAIL * self.size_pt * MM_PER_PT,
        }
    }

    /// The mark with the text's capitals centred on a point.
    pub fn mark(&self, (x, y): At) -> Mark {
        Mark::Text(TextMark {
            at: (x, y + self.height() / 2.0),
            anchor: Anchor::Middle,
            size_pt: self.size_pt,
            face: self.face,
            colour: self.colour,
            runs: vec![Run { text: self.text.clone(), level: Level::Normal }],
            role: Role::Label,
        })
    }
}

/// A number as labels show it: `3`, `−2`, `5/2`.
pub(super) fn number(value: &Rational) -> String {
    value.to_string().replace('-', "\u{2212}")
}
