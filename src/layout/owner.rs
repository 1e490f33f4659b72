//! Whose outline a line belongs to, and how the user calls it.

use crate::device::ContactIdx;
use crate::device::Device;
use crate::device::OverlayIdx;
use crate::device::OverlayKind;
use crate::diagnostic::Place;
use crate::layout::grid::Cell;
use crate::layout::grid::Grid;

/// Mesa, contact or overlay.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub(super) enum Owner {
    /// All parts of the mesa together.
    Mesa,
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

    /// The table in the device file.
    pub(super) fn place(self, device: &Device) -> &Place {
        match self {
            Self::Mesa => &device.mesa.place,
            Self::Contact(contact) => &device.contacts[contact.0].place,
            Self::Overlay(overlay) => &device.overlays[overlay.0].place,
        }
    }
}

/// A length in nm as µm, exactly: `12.5 µm`, `-0.01 µm`.
pub(super) fn um(nm: i64) -> String {
    format!("{} µm", um_digits(nm))
}

/// A point as `(12.5, 0) µm`.
pub(super) fn at_um(grid: Grid, cell: Cell) -> String {
    let (x, y) = grid.point(cell);
    format!("({}, {}) µm", um_digits(x), um_digits(y))
}

fn um_digits(nm: i64) -> String {
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
