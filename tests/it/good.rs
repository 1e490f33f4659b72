//! Good files are read as they are meant.

use edgesheet::cooldown::ContactState;
use edgesheet::cooldown::CurrentDivisor;
use edgesheet::cooldown::MagnetSense;
use edgesheet::device::ContactIdx;
use edgesheet::device::ContactShape;
use edgesheet::device::Device;
use edgesheet::device::Edge;
use edgesheet::device::Ladder;
use edgesheet::device::MesaShape;
use edgesheet::device::Mixing;
use edgesheet::device::OverlayIdx;
use edgesheet::device::OverlayShape;
use edgesheet::number::Rational;
use edgesheet::quantity::Nanometres;

pub const DEVICE: &[u8] = include_bytes!("../good/bar.toml");
pub const COOLDOWN: &[u8] = include_bytes!("../good/cooldown.toml");

fn device() -> Device {
    let noted = edgesheet::device::from_bytes("bar.toml", DEVICE).unwrap();
    assert_eq!(noted.notices, []);
    noted.value
}

#[test]
fn the_bar_is_read_whole() {
    let device = device();
    assert_eq!((device.id.as_str(), &device.ladder), ("KR-0417", &Ladder::SpinSplit));
    assert_eq!((device.layer.density_per_m2, device.layer.mobility_m2_per_vs), (Some(3.0e15), Some(95.0)));
    let MesaShape::Bar { length, width } = device.mesa.shape else { panic!("a bar") };
    assert_eq!((length, width, device.mesa.snap), (Nanometres(600_000), Nanometres(100_000), Nanometres(10)));
    assert_eq!(device.contacts.iter().map(|contact| contact.name.as_str()).collect::<String>(), "123456");
    assert_eq!(device.contacts[0].pin.as_deref(), Some("A3"));
    let on_top = ContactShape::Edge {
        edge: Edge::Top,
        centre: Some(Nanometres(150_000)),
        width: Some(Nanometres(12_000)),
        arm: Nanometres(20_000),
    };
    assert_eq!((&device.contacts[1].shape, &device.contacts[1].transmission), (&on_top, &vec![Rational::ONE]));
}

#[test]
fn gate_points_and_readings_are_read() {
    let device = device();
    let strip = OverlayShape::Across { from: Nanometres(250_000), to: Nanometres(350_000) };
    assert_eq!((&device.overlays[0].shape, device.overlays[0].limits_v), (&strip, Some((-0.8, 0.2))));
    let point = &device.points[0];
    assert_eq!((point.field_t, &point.bulk), (Some(4.14), &Rational::from(3)));
    assert_eq!(point.filling(&[OverlayIdx(0)]), Some(&Rational::ONE));
    assert_eq!(point.gates_v, [(OverlayIdx(0), -0.33)]);
    assert_eq!((&point.edge.rim, &point.edge.opposite), (&Mixing::None, &Mixing::Full));
    assert_eq!(device.points[1].edge.rim, Mixing::Full);
    assert_eq!(device.readings[0].voltage, [ContactIdx(1), ContactIdx(4)]);
}

#[test]
fn the_cooldown_is_read_whole() {
    let noted = edgesheet::cooldown::from_bytes("cooldown.toml", COOLDOWN, &device()).unwrap();
    let codes: Vec<&str> = noted.notices.iter().map(|notice| notice.code).collect();
    assert_eq!(codes, ["stated-only"], "the sweep alone is not applied yet");
    let cooldown = noted.value;
    assert_eq!((cooldown.id.as_str(), cooldown.date.as_deref()), ("KR-0417-c3", Some("2026-03-14")));
    assert_eq!((cooldown.revision, cooldown.coverage_factor), (2, 2.0));
    assert_eq!((cooldown.temperature_k, cooldown.electron_temperature_k), (Some(0.30), Some(0.35)));
    assert_eq!(cooldown.texts.iter().map(|(key, _)| *key).collect::<Vec<_>>().len(), 4);
    assert_eq!(cooldown.notes, [(Some("2026-03-15".into()), "contact 3 lost after the transfer".into())]);
    assert_eq!(cooldown.readings_place.unwrap().line(), 4);
    assert_eq!((cooldown.magnet.positive, cooldown.magnet.inductance_h), (MagnetSense::Toward, Some(12.0)));
    assert_eq!((cooldown.room.helium_litre, cooldown.room.oxygen_alarm), (Some(40.0), Some(true)));
}

#[test]
fn the_circuit_is_read() {
    let cooldown = edgesheet::cooldown::from_bytes("cooldown.toml", COOLDOWN, &device()).unwrap().value;
    let source = &cooldown.source;
    assert_eq!((source.current_na, source.u_current_na, source.ammeter_ohm), (Some(10.0), Some(0.01), Some(100.0)));
    assert_eq!((source.divisor, source.frequency_hz), (CurrentDivisor::Nominal, Some(13.3)));
    let line = &cooldown.lines[0];
    assert_eq!((line.contact, line.ohm, line.capacitance_nf), (ContactIdx(0), 130.0, Some(2.2)));
    let meters: Vec<_> = cooldown.meters.iter().map(|meter| (meter.name.as_str(), meter.input_ohm)).collect();
    assert_eq!(meters, [("A", Some(1.0e7)), ("B", None)]);
    assert_eq!((cooldown.states[2], cooldown.states[0]), (ContactState::Open, ContactState::Live));
    assert_eq!(cooldown.joins, [[ContactIdx(1), ContactIdx(5)]]);
}

/// Reads the bar with one line exchanged; gives the codes of the notices.
fn notices(old: &str, new: &str) -> Vec<&'static str> {
    let text = String::from_utf8(DEVICE.to_vec()).unwrap();
    assert!(text.contains(old), "{old}");
    let noted = edgesheet::device::from_bytes("bar.toml", text.replacen(old, new, 1).as_bytes()).unwrap();
    noted.notices.iter().map(|notice| notice.code).collect()
}

/// 3.0e15 per m² make filling 4.00 at 3.10 T and 3.00 at 4.14 T: n h/e = 3.0e15 × 4.135 667 7e-15 T = 12.407 T (h/e of
/// the SI). Under the gate 1.02e15 make 1.36 and 1.02; with −0.15 V 2.10e15 make 2.10. At 4.6 T 2.70 is still next to 3.
#[test]
fn density_field_and_filling_are_compared() {
    assert_eq!(notices("field_T = 4.14", "field_T = 3.10"), ["density-against-filling"]);
    assert_eq!(notices("field_T = 4.14", "field_T = 4.6"), [""; 0]);
    assert_eq!(notices("{ TG = -0.33 }", "{ TG = -0.15 }"), ["density-against-filling"]);
    assert_eq!(notices("limits_V = [-0.8, 0.2]", "limits_V = [-0.3, 0.2]"), ["beyond-limits", "beyond-limits"]);
}

#[test]
fn partial_levels_and_fine_lengths_are_noticed() {
    assert_eq!(notices("fillings = { TG = 1 }", "fillings = { TG = 1.02 }"), ["partly-transmitted"]);
    assert_eq!(notices("bulk = 3", "bulk = \"14/5\"\nbulk_partial = true"), ["partly-transmitted"]);
    assert_eq!(notices("x_um = 150", "x_um = 150.00009"), ["rounded-length"]);
}

#[test]
fn other_ways_to_write_the_same_are_taken() {
    for (old, new) in [
        ("transmission = 1.0", "transmission = [1, 1.0]"),
        ("transmission = 1.0", "transmission = \"1/2\""),
        ("length_um = 600", "length_um = 6e2"),
        ("length_um = 600", "length_um = 600.000"),
        ("bulk = 3", "bulk = 3.0"),
        ("bulk = 3", "bulk = \"3\""),
        ("ladder = \"spin-split\"", "ladder = [1, \"4/3\", 3]"),
        ("from_um = 250\nto_um = 350", "outline_um = [[250, -1], [350, -1], [350, 101], [250, 101]]"),
    ] {
        assert_eq!(notices(old, new), [""; 0], "{new}");
    }
}

#[test]
fn overlaps_are_named_in_either_order() {
    let text = String::from_utf8(DEVICE.to_vec()).unwrap();
    let two = text
        .replace(
            "[[point]]\nname = \"3 over 1\"",
            "[[step]]\nname = \"S\"\nfrom_um = 300\nto_um = 400\n[[point]]\nname = \"3 over 1\"",
        )
        .replace("{ TG = 1 }", "{ TG = 1, \"S + TG\" = 0, S = 2 }");
    let device = edgesheet::device::from_bytes("bar.toml", two.as_bytes()).unwrap().value;
    assert_eq!(device.points[0].filling(&[OverlayIdx(0), OverlayIdx(1)]), Some(&Rational::ZERO));
    assert_eq!(device.points[0].filling(&[OverlayIdx(1)]), Some(&Rational::from(2)));
}

/// A table of readings may name contacts by pin, so a pin that is the name of another contact is worth knowing.
#[test]
fn a_pin_that_is_another_name_is_noticed() {
    assert_eq!(notices("pin = \"A3\"", "pin = \"2\""), ["ambiguous-pin"]);
    assert_eq!(notices("pin = \"A3\"", "pin = \"1\""), [""; 0]);
}

/// Editors on other systems end lines with two signs, and some begin a file with a byte order mark.
#[test]
fn line_ends_and_a_byte_order_mark_change_nothing() {
    let text = String::from_utf8(DEVICE.to_vec()).unwrap();
    let other = format!("\u{feff}{}", text.replace('\n', "\r\n"));
    let read = edgesheet::device::from_bytes("bar.toml", other.as_bytes()).unwrap();
    assert_eq!(read.notices, []);
    assert_eq!((read.value.id, read.value.contacts.len(), read.value.points.len()), ("KR-0417".into(), 6, 2));
}

#[test]
fn a_plug_that_is_another_name_or_pin_is_noticed() {
    for (plug, codes) in [("2", vec!["ambiguous-plug"]), ("A4", vec!["ambiguous-plug"]), ("A3", vec![])] {
        let text = format!("format = 1\ndevice = \"KR-0417\"\n[[line]]\ncontact = \"1\"\nplug = \"{plug}\"\n");
        let noted = edgesheet::cooldown::from_bytes("c.toml", text.as_bytes(), &device()).unwrap();
        assert_eq!(noted.notices.iter().map(|notice| notice.code).collect::<Vec<_>>(), codes, "{plug}");
    }
}
