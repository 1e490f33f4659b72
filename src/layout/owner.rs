//! Whose outline a line belongs to, and how the user calls it.

use crate::device::ContactIdx;
use crate::device::Device;
use crate::device::MesaShape;
use crate::device::OverlayIdx;
use crate::device::OverlayKind;
use crate::diagnostic::Place;
use crate::layout::Point;
use crate::layout::grid::Cell;
use crate::layout::grid::Grid;

/// Mesa, contact or overlay.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub(super) enum Owner {
    /// The mesa with all arms, cut-outs not taken out.
    Mesa,
    /// One opening in the mesa, in the order of the file.
    Cutout(usize),
    /// One contact.
    Contact(ContactIdx),
    /// One gate or step.
    Overlay(OverlayIdx),
}

impl Owner {
    /// `contact "2"`, `gate "TG"`, `the mesa`.
    pub(super) fn words(self, device: &Device) -> String {
        match self {
            Self::Mesa => "the mesa".to_string(),
            Self::Cutout(_) if matches!(device.mesa.shape, MesaShape::Ring { .. }) => {
                "the opening of the ring".to_string()
            }
            Self::Cutout(cutout) => format!("cut-out {}", cutout + 1),
            Self::Contact(contact) => format!("contact \"{}\"", device.contacts[contact.0].name),
            Self::Overlay(overlay) => {
                let Device { overlays, .. } = device;
                let kind = match overlays[overlay.0].kind {
                    OverlayKind::Gate => "gate",
                    OverlayKind::Step => "step",
                };
                format!("{kind} \"{}\"", overlays[overlay.0].name)
            }
        }
    }

    /// Where the device file has it: its table, or the corners of an outline of the mesa.
    pub(super) fn place(self, device: &Device) -> &Place {
        match (self, &device.mesa.shape) {
            (Self::Mesa, MesaShape::Outline { outline, .. }) => return &outline.place,
            (Self::Cutout(cutout), MesaShape::Outline { cutouts, .. }) if cutout < cutouts.len() => {
                return &cutouts[cutout].place;
            }
            _ => {}
        }
        match self {
            Self::Mesa | Self::Cutout(_) => &device.mesa.place,
            Self::Contact(contact) => &device.contacts[contact.0].place,
            Self::Overlay(overlay) => &device.overlays[overlay.0].place,
        }
    }
}

/// A length in nm as µm, exactly: `12.5 µm`, `-0.01 µm`.
pub(super) fn um(nm: i64) -> String {
    format!("{} µm", um_digits(nm))
}

/// The centre of a pixel as `(12.5, 0) µm`.
pub(super) fn at_um(grid: Grid, cell: Cell) -> String {
    point_um(grid.point(cell))
}

/// A point as `(12.5, 0) µm`.
pub(super) fn point_um((x, y): Point) -> String {
    format!("({}, {}) µm", um_digits(x), um_digits(y))
}

/// A length in nm as µm without the unit.
pub(super) fn um_digits(nm: i64) -> String {
    let sign = if nm < 0 { "-" } else { "" };
    let (whole, rest) = (nm.unsigned_abs() / 1000, nm.unsigned_abs() % 1000);
    let fraction = format!(".{rest:03}");
    format!("{sign}{whole}{}", fraction.trim_end_matches('0').trim_end_matches('.'))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn lengths_are_written_exactly() {
        for (nm, text) in [(0, "0 µm"), (12_500, "12.5 µm"), (-10, "-0.01 µm"), (600_000, "600 µm"), (1, "0.001 µm")]
        {
            assert_eq!(um(nm), text);
        }
    }
}
