//! Pens, colours and sizes of the chip drawing: the potential is shown by weight, colour and dash together.

use crate::figure::scene::Colour;
use crate::figure::scene::Stroke;
use crate::number::Number;

/// Channels at the potential of the inlet (vermillion of the Okabe–Ito set).
pub(super) const SOURCE: Colour = Colour(213, 94, 0);
/// Channels at the potential of the outlet (blue of the same set).
pub(super) const DRAIN: Colour = Colour(0, 114, 178);
/// Channels that nothing feeds.
pub(super) const IDLE: Colour = Colour(165, 165, 165);
/// Area of the mesa.
pub(super) const MESA: Colour = Colour(240, 240, 238);
/// Area of a gate.
pub(super) const GATE: Colour = Colour(221, 222, 214);
/// Area of an ungated step.
pub(super) const STEP: Colour = Colour(232, 232, 226);
/// Lines of a hatch.
pub(super) const HATCH: Colour = Colour(172, 174, 164);
/// Rim of the mesa and leaders of labels.
pub(super) const RIM: Colour = Colour(150, 150, 150);
/// Area in which channels mix.
pub(super) const MIXING: Colour = Colour(247, 226, 168);
/// Its rim, dark enough for a grey printer.
pub(super) const MIXING_RIM: Colour = Colour(176, 134, 44);
/// Contacts and filling factors.
pub(super) const DARK: Colour = Colour(51, 51, 51);
/// Names inside contacts.
pub(super) const LIGHT: Colour = Colour(255, 255, 255);
/// Pins, shares, names of gates.
pub(super) const GREY: Colour = Colour(95, 95, 95);

/// Smallest text, in pt.
pub(super) const SMALL_PT: f64 = 7.0;
/// Names of contacts, in pt.
pub(super) const NAME_PT: f64 = 8.0;
/// Filling factors, in pt.
pub(super) const FILLING_PT: f64 = 9.5;

/// Width of the heaviest channel line, as a share of the pitch.
pub(super) const HEAVY: f64 = 0.52;

/// A solid pen.
pub(super) fn pen(colour: Colour, width_mm: f64) -> Stroke {
    Stroke { colour, width_mm, dash_mm: Vec::new() }
}

/// The pen for a potential between 0 (outlet) and 1 (inlet) at a pitch: heavy and solid at the inlet, light and solid
/// at the outlet; in between grey, with longer dashes, more width and more ink the nearer to the inlet.
pub(super) fn channel_pen(potential: Option<&Number>, pitch_mm: f64) -> Stroke {
    let heavy_mm = (HEAVY * pitch_mm).min(0.62);
    let Some(potential) = potential else { return pen(IDLE, 0.3 * heavy_mm) };
    match potential.to_f64() {
        value if value >= 1.0 => pen(SOURCE, heavy_mm),
        value if value <= 0.0 => pen(DRAIN, 0.42 * heavy_mm),
        value => Stroke {
            colour: ramp(value),
            width_mm: heavy_mm * (0.48 + 0.34 * value),
            dash_mm: vec![0.45 + 2.6 * value, 0.65],
        },
    }
}

fn ramp(value: f64) -> Colour {
    let level = (128.0 - 58.0 * value).round() as u8;
    Colour(level, level, level)
}

/// The pens of a drawing of usual size, for a key beside it: at the inlet's potential, in between, at the outlet's.
pub fn key_pens() -> [Stroke; 3] {
    const PITCH_MM: f64 = 1.2;
    [1.0, 0.5, 0.0].map(|share| channel_pen(Some(&Number::Float(share)), PITCH_MM))
}

/// The area in which channels mix.
pub const MIXING_AREA: Colour = MIXING;
