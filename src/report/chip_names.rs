//! The words of a chip drawing, from the device.

use crate::device::Device;
use crate::device::Overlay;
use crate::device::OverlayKind;
use crate::device::OverlayShape;
use crate::figure::ChipNames;
use crate::figure::ContactName;
use crate::figure::OverlayLook;
use crate::figure::OverlayName;

/// Names, pins and looks, in the order of the device file.
pub fn chip_names(device: &Device) -> ChipNames {
    let contacts = device.contacts.iter();
    let overlays = device.overlays.iter();
    ChipNames {
        contacts: contacts.map(|c| ContactName { name: c.name.clone(), pin: c.pin.clone() }).collect(),
        overlays: overlays.map(|overlay| OverlayName { name: overlay.name.clone(), look: look(overlay) }).collect(),
    }
}

fn look(overlay: &Overlay) -> OverlayLook {
    match (overlay.kind, &overlay.shape) {
        (OverlayKind::Step, _) => OverlayLook::Step,
        (OverlayKind::Gate, OverlayShape::Across { .. }) => OverlayLook::GateAcross,
        (OverlayKind::Gate, OverlayShape::Outline(_)) => OverlayLook::Gate,
    }
}
