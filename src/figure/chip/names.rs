//! What stands beside the parts of a chip: names, pins, and how gates and steps look.

/// The words of a drawing, in the order of the device file.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct ChipNames {
    /// Contacts.
    pub contacts: Vec<ContactName>,
    /// Gates, then steps.
    pub overlays: Vec<OverlayName>,
}

/// A contact's name and pin.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct ContactName {
    /// Its name.
    pub name: String,
    /// Its pin, if it has one.
    pub pin: Option<String>,
}

/// A gate's or a step's name.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct OverlayName {
    /// Its name.
    pub name: String,
    /// How it is drawn.
    pub look: OverlayLook,
}

/// How a gate or a step is drawn.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum OverlayLook {
    /// A gate across the bar: it reaches beyond the mesa on both sides.
    GateAcross,
    /// A gate of any outline.
    Gate,
    /// A density step: a part of the mesa itself.
    Step,
}
