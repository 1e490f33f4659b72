//! What the files state beside what is computed with: layer, gates, cooling, notes. Nothing that a user wrote is
//! lost between file and sheet.

use crate::cooldown::Cooldown;
use crate::device::Device;
use crate::device::OverlayKind;
use crate::measured::MeasuredReading;
use crate::quantity::printed::as_given;
use crate::report::Sources;
use crate::report::identity::date;
use crate::report::names;
use crate::resistance::Reading;

/// A line for the device, one for the cooling, one for every note, in the order of the files.
pub fn stated(sources: &Sources) -> Vec<String> {
    let device: Vec<String> = layers(sources.device).into_iter().chain(gates(sources.device)).collect();
    let mut lines = one_line(&device);
    lines.extend(names::wires(sources.device).map(|wires| format!("wires: {wires}")));
    if let Some(cooldown) = sources.cooldown {
        let texts = cooldown.texts.iter().map(|(key, text)| format!("{key}: {text}"));
        let cooling: Vec<String> = texts.chain(remanence(cooldown)).chain(boxes(sources.device, cooldown)).collect();
        lines.extend(one_line(&cooling));
        lines.extend(cooldown.notes.iter().map(|(day, text)| note(day.as_deref(), text)));
    }
    let rows = sources.comparison.map_or(&[][..], |comparison| &comparison.rows);
    lines.extend(rows.iter().filter_map(|row| reading_note(sources.device, &row.measured)));
    lines
}

fn one_line(parts: &[String]) -> Vec<String> {
    if parts.is_empty() { Vec::new() } else { vec![parts.join("; ")] }
}

/// `layer: density …`; on a bench one for every device, `layer of A: …`.
fn layers(device: &Device) -> Vec<String> {
    match &device.bench {
        None => layer(device, "layer"),
        Some(bench) => {
            bench.parts.iter().flat_map(|part| layer(&part.device, &format!("layer of {}", part.name))).collect()
        }
    }
}

fn layer(device: &Device, words: &str) -> Vec<String> {
    let density = device.layer.density_per_m2.map(|value| format!("density {} m⁻²", as_given(value)));
    let mobility = device.layer.mobility_m2_per_vs.map(|value| format!("mobility {} m²/(V s)", as_given(value)));
    let parts: Vec<String> = density.into_iter().chain(mobility).collect();
    if parts.is_empty() { parts } else { vec![format!("{words}: {}", parts.join(", "))] }
}

fn gates(device: &Device) -> Vec<String> {
    let gates = device.overlays.iter().enumerate().filter(|(_, overlay)| overlay.kind == OverlayKind::Gate);
    gates
        .filter_map(|(at, gate)| {
            let lever = gate.density_per_m2_per_v.map(|value| format!("{} m⁻² per V", as_given(value)));
            let zero = gate.zero_v.map(|value| format!("the layer's density at {} V", as_given(value)));
            let set = device.points.iter().flat_map(|point| point.gates_v.iter().map(move |set| (point, set)));
            let set = set.filter(|(_, (gate, _))| gate.0 == at);
            let set = set.map(|(point, (_, volt))| format!("{} V at {}", as_given(*volt), point.name));
            let parts: Vec<String> = lever.into_iter().chain(zero).chain(set).collect();
            (!parts.is_empty()).then(|| format!("gate {}: {}", gate.name, parts.join(", ")))
        })
        .collect()
}

/// What else is stated of the magnet stands in the cautions.
fn remanence(cooldown: &Cooldown) -> Option<String> {
    cooldown.magnet.remanence_mt.map(|value| format!("remanence of the magnet {} mT", as_given(value)))
}

fn boxes(device: &Device, cooldown: &Cooldown) -> Vec<String> {
    let named = cooldown.lines.iter().filter_map(|line| {
        let name = names::contact_name(device, line.contact);
        line.breakout.as_ref().map(|breakout| format!("{name} at {breakout}"))
    });
    let parts: Vec<String> = named.collect();
    if parts.is_empty() { parts } else { vec![format!("boxes: {}", parts.join(", "))] }
}

fn note(day: Option<&str>, text: &str) -> String {
    match day {
        Some(day) => format!("note of {}: {text}", date(day)),
        None => format!("note: {text}"),
    }
}

fn reading_note(device: &Device, row: &MeasuredReading) -> Option<String> {
    let text = row.note.as_ref()?;
    let name = names::reading_name(device, &Reading::new(row.current, row.voltage));
    let side = names::side(device, row.polarity);
    let point = device.points.get(row.point).filter(|_| device.points.len() > 1);
    let at = point.map(|point| format!(", {}", point.name)).unwrap_or_default();
    Some(format!("{name}, {side}{at}: {text}"))
}
