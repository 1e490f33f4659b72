//! What is understood of a cooldown file beside its device.

use crate::cooldown::ContactIdx;
use crate::cooldown::ContactState;
use crate::cooldown::Cooldown;
use crate::cooldown::CurrentDivisor;
use crate::cooldown::Excitation;
use crate::cooldown::Line;
use crate::cooldown::MagnetSense;
use crate::cooldown::Meter;
use crate::cooldown::MeterInput;
use crate::device::Device;
use crate::quantity::Uncertain;
use crate::quantity::printed::as_given;
use crate::quantity::printed::uncertain;
use crate::quantity::printed::uncertain_ohm;
use crate::report::Understood;
use crate::report::identity::date;
use crate::report::names;

/// A cooldown; `beside` is the device's file as the user knows it.
pub fn understood_cooldown(file: &str, (cooldown, device): (&Cooldown, &Device), beside: &str) -> Understood {
    let kind =
        format!("cooldown file {} of {}, revision {}, read beside {beside}", cooldown.id, device.id, cooldown.revision);
    Understood::new(file, kind)
        .saying("cooled", cooled(cooldown))
        .saying("source", vec![source(cooldown)])
        .with("lines", cooldown.lines.iter().map(|line| line_row(cooldown, device, line)).collect())
        .with("meters", cooldown.meters.iter().map(|meter| meter_row(cooldown, meter)).collect())
        .saying("contacts", states(cooldown, device))
        .saying("magnet", magnet(cooldown))
        .saying("room", room(cooldown))
        .saying("assumed", assumed(cooldown, device))
        .saying("readings", vec![readings(cooldown)])
}

fn cooled(cooldown: &Cooldown) -> Vec<String> {
    let kelvin = |what: &str, value: Option<f64>| value.map(|value| format!("{what}{} K", as_given(value)));
    let conditions = [
        cooldown.date.as_deref().map(date),
        kelvin("", cooldown.temperature_k),
        kelvin("electrons ", cooldown.electron_temperature_k),
    ];
    let texts = cooldown.texts.iter().map(|(key, text)| format!("{key}: {text}"));
    let k = (cooldown.coverage_factor != 1.0)
        .then(|| format!("every uncertainty is divided by {}", as_given(cooldown.coverage_factor)));
    let parts: Vec<String> = conditions.into_iter().flatten().chain(texts).chain(k).collect();
    let notes = cooldown.notes.iter().map(|(day, text)| match day {
        Some(day) => format!("note of {}: {text}", date(day)),
        None => format!("note: {text}"),
    });
    let first = if parts.is_empty() { None } else { Some(parts.join("; ")) };
    first.into_iter().chain(notes).collect()
}

fn source(cooldown: &Cooldown) -> String {
    let source = &cooldown.source;
    let u = source.u_current_na.map(|u| cooldown.standard(u));
    let drive = match (source.current_na, source.voltage_v) {
        (Some(value), _) => format!("{} nA", uncertain(Uncertain { value, u })),
        (None, Some(volts)) => match source.series_ohm {
            Some(ohm) => format!("{} V through {}", as_given(volts), plain_ohm(ohm)),
            None => format!("{} V", as_given(volts)),
        },
        (None, None) => "ideal current, as none is stated".to_owned(),
    };
    let frequency =
        source.frequency_hz.map_or(", direct current".to_owned(), |hertz| format!(" at {} Hz", as_given(hertz)));
    let ammeter =
        source.ammeter_ohm.map_or(String::new(), |ohm| format!("; ammeter of {} Ω at the outlet", as_given(ohm)));
    format!("{drive}{frequency}; voltages are divided by {}{ammeter}", divisor(source))
}

fn plain_ohm(value: f64) -> String {
    uncertain_ohm(Uncertain { value, u: None })
}

fn divisor(source: &Excitation) -> &'static str {
    match source.divisor {
        CurrentDivisor::Nominal => "the nominal current",
        CurrentDivisor::Inlet => "the current measured at the inlet",
        CurrentDivisor::Outlet => "the current measured at the outlet",
    }
}

fn line_row(cooldown: &Cooldown, device: &Device, line: &Line) -> Vec<String> {
    let u = line.u_ohm.map(|u| cooldown.standard(u));
    let capacitance = line.capacitance_nf.map(|value| format!("{} nF to ground", as_given(value)));
    let plug = line.plug.as_ref().map(|plug| format!("plug {plug}"));
    let breakout = line.breakout.as_ref().map(|text| format!("box {text}"));
    let more: Vec<String> = [capacitance, plug, breakout].into_iter().flatten().collect();
    let ohm = uncertain(Uncertain { value: line.ohm, u });
    vec![names::contact_name(device, line.contact).to_owned(), format!("{ohm} Ω"), more.join(", ")]
}

fn meter_row(cooldown: &Cooldown, meter: &Meter) -> Vec<String> {
    let input = match (meter.input_ohm, meter.input) {
        (None, _) => "draws no current".to_owned(),
        (Some(ohm), MeterInput::Ground) => format!("{} from each input to ground", plain_ohm(ohm)),
        (Some(ohm), MeterInput::Across) => format!("{} across the inputs", plain_ohm(ohm)),
    };
    let gain = Uncertain { value: meter.gain, u: meter.u_gain.map(|u| cooldown.standard(u)) };
    let gain = (meter.gain != 1.0 || meter.u_gain.is_some()).then(|| format!("gain {}", uncertain(gain)));
    let phase = (meter.phase_deg != 0.0).then(|| format!("phase {}°", as_given(meter.phase_deg)));
    let more: Vec<String> = std::iter::once(input).chain(gain).chain(phase).collect();
    vec![meter.name.clone(), more.join(", ")]
}

fn states(cooldown: &Cooldown, device: &Device) -> Vec<String> {
    let with = |wanted: ContactState| {
        let all = cooldown.states.iter().enumerate();
        all.filter(|(_, state)| **state == wanted).map(|(at, _)| ContactIdx(at)).collect::<Vec<_>>()
    };
    let named = [("open", ContactState::Open), ("grounded", ContactState::Grounded)].map(|(word, state)| {
        let contacts = with(state);
        (!contacts.is_empty()).then(|| format!("{word}: {}", names::contact_list(device, &contacts)))
    });
    let joins = cooldown.joins.iter().map(|join| format!("joined: {}", names::contact_list(device, join)));
    let lines: Vec<String> = named.into_iter().flatten().chain(joins).collect();
    if lines.is_empty() { vec!["all live".to_owned()] } else { lines }
}

fn magnet(cooldown: &Cooldown) -> Vec<String> {
    let magnet = &cooldown.magnet;
    let sense = match magnet.positive {
        MagnetSense::Toward => "positive on the console is toward you, polarity +",
        MagnetSense::Away => "positive on the console is away from you, polarity −",
        MagnetSense::Unknown => "it is not said where the field points when the console reads positive",
    };
    let value =
        |what: &str, value: Option<f64>, unit: &str| value.map(|value| format!("{what} {} {unit}", as_given(value)));
    let more = [
        value("up to", magnet.max_field_t, "T"),
        value("current", magnet.current_a, "A"),
        value("inductance", magnet.inductance_h, "H"),
        value("remanence", magnet.remanence_mt, "mT"),
    ];
    vec![std::iter::once(sense.to_owned()).chain(more.into_iter().flatten()).collect::<Vec<_>>().join("; ")]
}

fn room(cooldown: &Cooldown) -> Vec<String> {
    let room = &cooldown.room;
    let value = |value: Option<f64>, unit: &str| value.map(|value| format!("{} {unit}", as_given(value)));
    let alarm = room.oxygen_alarm.map(|fitted| if fitted { "oxygen alarm" } else { "no oxygen alarm" }.to_owned());
    let parts = [
        value(room.volume_m3, "m³"),
        value(room.helium_litre, "L of liquid helium"),
        value(room.nitrogen_litre, "L of liquid nitrogen"),
        alarm,
    ];
    let parts: Vec<String> = parts.into_iter().flatten().collect();
    if parts.is_empty() { parts } else { vec![parts.join(", ")] }
}

/// What is taken as ideal because nothing is said of it.
fn assumed(cooldown: &Cooldown, device: &Device) -> Vec<String> {
    let lineless: Vec<ContactIdx> = (0..device.contacts.len())
        .map(ContactIdx)
        .filter(|at| !cooldown.lines.iter().any(|line| line.contact == *at))
        .collect();
    let lines = (!lineless.is_empty()).then(|| format!("lines of {}: 0 Ω", names::contact_list(device, &lineless)));
    let meters = cooldown.meters.is_empty().then(|| "no meter is described: none draws current".to_owned());
    lines.into_iter().chain(meters).collect()
}

fn readings(cooldown: &Cooldown) -> String {
    cooldown.readings_file.clone().unwrap_or_else(|| "none named: there is nothing to compare".to_owned())
}
