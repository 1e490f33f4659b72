//! The starter files: a device, a cooldown and its readings that are accepted as they stand, with comments that teach.

/// Name and text of every starter file, the device first, then its cooldown, then the readings that this names.
pub const STARTER: [(&str, &str); 3] = [
    ("device.toml", include_str!("../../templates/start/device.toml")),
    ("cooldown.toml", include_str!("../../templates/start/cooldown.toml")),
    ("readings.csv", include_str!("../../templates/start/readings.csv")),
];
