//! Lines, source and meters as the cooldown file gives them.

use crate::cooldown::ContactState;
use crate::cooldown::Cooldown;
use crate::cooldown::CurrentDivisor;
use crate::cooldown::Meter;
use crate::cooldown::MeterInput;
use crate::device::ContactIdx;
use crate::quantity::Uncertain;
use crate::report::Printed;
use crate::report::SmallCell;
use crate::report::SmallTable;
use crate::report::Sources;
use crate::report::names::contact_name;
use crate::report::small_table::TableTexts;

/// Tables of lines, source and meters; empty without a cooldown.
pub fn tables(sources: &Sources, texts: &TableTexts) -> Vec<SmallTable> {
    let Some(cooldown) = sources.cooldown else { return Vec::new() };
    let lines = (0..sources.device.contacts.len()).map(|at| line(sources, cooldown, ContactIdx(at))).collect();
    let meters = cooldown.meters.iter().map(|meter| meter_row(meter, cooldown, texts)).collect();
    let all = [texts.lines.table(lines), texts.source.table(source(cooldown)), texts.meters.table(meters)];
    let all = all.into_iter().filter(|table| !table.rows.is_empty());
    all.map(SmallTable::without_empty_columns).collect()
}

fn line(sources: &Sources, cooldown: &Cooldown, contact: ContactIdx) -> Vec<SmallCell> {
    let line = cooldown.lines.iter().find(|line| line.contact == contact);
    let given = &sources.device.contacts[contact.0];
    let u_ohm = line.and_then(|line| line.u_ohm).map(|stated| cooldown.standard(stated));
    let ohm = Uncertain { value: line.map_or(0.0, |line| line.ohm), u: u_ohm };
    let capacitance = line.and_then(|line| line.capacitance_nf).map(|value| Uncertain { value, u: None });
    vec![
        SmallCell::text(given.name.clone()),
        SmallCell::text(given.pin.clone().unwrap_or_default()),
        SmallCell::text(line.and_then(|line| line.plug.clone()).unwrap_or_default()),
        SmallCell::Number(Printed::uncertain(ohm, "Ω")),
        SmallCell::number(capacitance.map(|value| Printed::uncertain(value, "nF"))),
        SmallCell::text(state(sources, cooldown, contact)),
    ]
}

fn state(sources: &Sources, cooldown: &Cooldown, contact: ContactIdx) -> String {
    let state = match cooldown.states.get(contact.0) {
        Some(ContactState::Open) => "open",
        Some(ContactState::Grounded) => "grounded",
        _ => "live",
    };
    let mine =
        cooldown.joins.iter().filter(|join| join.contains(&contact)).flatten().filter(|other| **other != contact);
    let joined: Vec<&str> = mine.map(|other| contact_name(sources.device, *other)).collect();
    if joined.is_empty() { state.to_string() } else { format!("{state}, joined to {}", joined.join(", ")) }
}

fn source(cooldown: &Cooldown) -> Vec<Vec<SmallCell>> {
    let source = &cooldown.source;
    let number = |what: &str, value: Option<f64>, u: Option<f64>, unit: &'static str| {
        let printed = value.map(|value| Printed::uncertain(Uncertain { value, u }, unit));
        printed.map(|printed| vec![SmallCell::text(what), SmallCell::Number(printed), SmallCell::text(unit)])
    };
    let divisor = match source.divisor {
        CurrentDivisor::Nominal => "the nominal one",
        CurrentDivisor::Inlet => "measured at the inlet",
        CurrentDivisor::Outlet => "measured at the outlet",
    };
    let u_current = source.u_current_na.map(|stated| cooldown.standard(stated));
    let rows = [
        number("current", source.current_na, u_current, "nA"),
        number("voltage", source.voltage_v, None, "V"),
        number("series resistor", source.series_ohm, None, "Ω"),
        number("ammeter at the outlet", source.ammeter_ohm, None, "Ω"),
        number("frequency", source.frequency_hz, None, "Hz"),
        Some(vec![SmallCell::text("current that divides"), SmallCell::text(divisor), SmallCell::Empty]),
        source
            .current_from
            .as_ref()
            .map(|from| vec![SmallCell::text("current got from"), SmallCell::text(from.clone()), SmallCell::Empty]),
    ];
    rows.into_iter().flatten().collect()
}

fn meter_row(meter: &Meter, cooldown: &Cooldown, texts: &TableTexts) -> Vec<SmallCell> {
    let gain = Uncertain { value: meter.gain, u: meter.u_gain.map(|stated| cooldown.standard(stated)) };
    let input = match meter.input_ohm {
        Some(value) => SmallCell::Number(Printed::uncertain(Uncertain { value, u: None }, "Ω")),
        None => SmallCell::text(texts.none.clone()),
    };
    let place = meter.input_ohm.map_or("draws no current", |_| match meter.input {
        MeterInput::Ground => "each input to ground",
        MeterInput::Across => "across the inputs",
    });
    let phase = Uncertain { value: meter.phase_deg, u: None };
    vec![
        SmallCell::text(meter.name.clone()),
        input,
        SmallCell::text(place),
        SmallCell::Number(Printed::uncertain(gain, "1")),
        SmallCell::Number(Printed::uncertain(phase, "°")),
    ]
}
