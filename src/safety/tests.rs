//! Each caution is switched on and off by the key that calls for it.

use super::*;
use crate::cooldown::Excitation;
use crate::cooldown::Magnet;
use crate::cooldown::Room;
use crate::device::Drive;
use crate::device::EdgeRules;
use crate::device::Ladder;
use crate::device::Layer;
use crate::device::Mesa;
use crate::device::MesaShape;
use crate::device::Mixing;
use crate::device::Overlay;
use crate::device::OverlayKind;
use crate::device::OverlayShape;
use crate::diagnostic::Place;
use crate::diagnostic::Source;
use crate::quantity::Nanometres;

fn place() -> Place {
    Place { source: Source::new("device.toml", ""), start: 0, end: 0 }
}

fn plain_device() -> Device {
    let shape = MesaShape::Bar { length: Nanometres(600_000), width: Nanometres(100_000) };
    Device {
        id: "KR-0417".to_string(),
        title: String::new(),
        material: String::new(),
        ladder: Ladder::named("spin-split").unwrap(),
        layer: Layer::default(),
        mesa: Mesa { shape, snap: Nanometres(10), place: place() },
        edge: EdgeRules { rim: Mixing::None, interface: Mixing::None, opposite: Mixing::Full },
        groups: None,
        driven_by: Drive::Field,
        contacts: Vec::new(),
        overlays: Vec::new(),
        points: Vec::new(),
        readings: Vec::new(),
        bench: None,
    }
}

fn gated_device() -> Device {
    let gate = Overlay {
        name: "TG".to_string(),
        kind: OverlayKind::Gate,
        shape: OverlayShape::Across { from: Nanometres(250_000), to: Nanometres(350_000) },
        mixing: None,
        density_per_m2_per_v: None,
        zero_v: None,
        limits_v: Some((-0.8, 0.2)),
        place: place(),
    };
    Device { overlays: vec![gate], ..plain_device() }
}

fn plain_cooldown() -> Cooldown {
    Cooldown {
        id: "c3".to_string(),
        readings_file: None,
        readings_place: None,
        date: None,
        revision: 1,
        temperature_k: None,
        electron_temperature_k: None,
        texts: Vec::new(),
        coverage_factor: 1.0,
        notes: Vec::new(),
        source: Excitation::default(),
        lines: Vec::new(),
        meters: Vec::new(),
        states: Vec::new(),
        joins: Vec::new(),
        magnet: Magnet::default(),
        room: Room::default(),
    }
}

fn everything() -> Cooldown {
    Cooldown {
        temperature_k: Some(0.3),
        source: Excitation { current_na: Some(10.0), ..Excitation::default() },
        magnet: Magnet {
            max_field_t: Some(8.0),
            current_a: Some(100.0),
            inductance_h: Some(10.0),
            ..Magnet::default()
        },
        room: Room { volume_m3: Some(60.0), helium_litre: Some(50.0), nitrogen_litre: Some(50.0), oxygen_alarm: None },
        ..plain_cooldown()
    }
}

fn keys(device: &Device, cooldown: &Cooldown) -> Vec<&'static str> {
    cautions(device, Some(cooldown)).into_iter().map(|caution| caution.key).collect()
}

#[test]
fn without_any_key_only_local_rules_are_named() {
    let only = cautions(&plain_device(), None);
    assert_eq!(only.len(), 1);
    assert!(only[0].text.contains("site safety officer") && only[0].text.contains("not a risk assessment"));
    assert_eq!(keys(&plain_device(), &plain_cooldown()), ["always"]);
}

#[test]
fn each_key_calls_for_its_cautions() {
    let with = |change: fn(&mut Cooldown)| {
        let mut cooldown = plain_cooldown();
        change(&mut cooldown);
        keys(&plain_device(), &cooldown)[1..].to_vec()
    };
    let helium = "[room] helium_litre";
    assert_eq!(with(|c| c.room.helium_litre = Some(50.0)), [helium, helium, helium]);
    assert_eq!(with(|c| c.room.volume_m3 = Some(60.0)), [""; 0]);
    let nitrogen = "[room] nitrogen_litre";
    assert_eq!(with(|c| c.room.nitrogen_litre = Some(50.0)), [nitrogen, nitrogen, nitrogen]);
    assert_eq!(with(|c| c.magnet.inductance_h = Some(10.0)), ["[magnet] inductance_H"]);
    assert_eq!(with(|c| c.magnet.current_a = Some(100.0)), [""; 0]);
    assert_eq!(with(|c| c.magnet.max_field_t = Some(8.0)), ["[magnet] max_field_T", "[magnet] max_field_T"]);
    assert_eq!(with(|c| c.temperature_k = Some(0.3)), ["[cooldown] temperature_K"]);
    assert_eq!(with(|c| c.temperature_k = Some(295.0)), [""; 0]);
    assert_eq!(with(|c| c.source.current_na = Some(10.0)), ["[source] current_nA"]);
    assert_eq!(keys(&gated_device(), &plain_cooldown())[1..], ["[[gate]]", "[[gate]] limits_V"]);
}

#[test]
fn a_step_is_no_gate() {
    let mut device = gated_device();
    device.overlays[0].kind = OverlayKind::Step;
    device.overlays[0].limits_v = None;
    assert_eq!(keys(&device, &plain_cooldown()), ["always"]);
}

#[test]
fn all_keys_together_stay_within_twelve_and_keep_the_local_rules_first() {
    let all = cautions(&gated_device(), Some(&everything()));
    assert_eq!(all.len(), 12);
    assert_eq!(all[0].key, "always");
    assert!(all.iter().all(|caution| !caution.source.is_empty()));
}

/// 50 L of helium in 60 m³: 7.8 and 11.2 % (method of the University of Nottingham note). 10 H at 100 A: 50 kJ, 19 L,
/// 14 m³ (from 20.75 kJ/kg, 125 kg/m³ and 755 L per L of the University of Wisconsin tables).
#[test]
fn numbers_of_the_worked_examples_are_printed() {
    let all = cautions(&gated_device(), Some(&everything()));
    let text = |key: &str| all.iter().find(|caution| caution.key == key).unwrap().text.clone();
    let oxygen = text("[room] helium_litre");
    assert!(["7.8 %", "11.2 %", "755 L", "19.5 %"].iter().all(|number| oxygen.contains(number)), "{oxygen}");
    let energy = text("[magnet] inductance_H, current_A");
    assert!(["50 kJ", "19 L", "14 m³"].iter().all(|number| energy.contains(number)), "{energy}");
    assert!(text("[[gate]] limits_V").contains("TG −0.8 … 0.2 V"));
}

#[test]
fn a_missing_volume_gives_no_estimate_and_says_so() {
    let mut cooldown = everything();
    cooldown.room.volume_m3 = None;
    let text = cautions(&plain_device(), Some(&cooldown))[1].text.clone();
    assert!(text.contains("no oxygen estimate") && !text.contains("displaces"), "{text}");
}
