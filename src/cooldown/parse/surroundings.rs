//! `[magnet]` and `[room]`.

use crate::syntax::Table;

use crate::cooldown::Magnet;
use crate::cooldown::MagnetSense;
use crate::cooldown::Room;

pub(super) fn magnet(root: &Table) -> Magnet {
    let Some(table) = root.table("magnet") else { return Magnet::default() };
    Magnet {
        positive: match table.text("positive").as_deref() {
            Some("toward") => MagnetSense::Toward,
            Some("away") => MagnetSense::Away,
            _ => MagnetSense::Unknown,
        },
        max_field_t: table.number("max_field_T"),
        current_a: table.number("current_A"),
        inductance_h: table.number("inductance_H"),
        remanence_mt: table.number("remanence_mT"),
    }
}

pub(super) fn room(root: &Table) -> Room {
    let Some(table) = root.table("room") else { return Room::default() };
    Room {
        volume_m3: table.number("volume_m3"),
        helium_litre: table.number("helium_litre"),
        nitrogen_litre: table.number("nitrogen_litre"),
        oxygen_alarm: table.boolean("oxygen_alarm"),
    }
}
