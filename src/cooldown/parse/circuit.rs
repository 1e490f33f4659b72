//! `[source]`, `[[line]]` and `[[meter]]`.

use crate::device::ContactIdx;
use crate::device::Names;
use crate::diagnostic::Diagnostic;
use crate::diagnostic::Findings;
use crate::syntax::Table;
use crate::syntax::quoted;

use crate::cooldown::CurrentDivisor;
use crate::cooldown::Excitation;
use crate::cooldown::Line;
use crate::cooldown::Meter;
use crate::cooldown::MeterInput;
use crate::cooldown::parse::contacts::contact;

pub(super) fn excitation(root: &Table, findings: &mut Findings) -> Excitation {
    let Some(table) = root.table("source") else { return Excitation::default() };
    findings.extend(contradictions(table));
    Excitation {
        current_na: table.number("current_nA"),
        u_current_na: table.number("u_current_nA"),
        voltage_v: table.number("voltage_V"),
        series_ohm: table.number("series_ohm"),
        ammeter_ohm: table.number("ammeter_ohm"),
        divisor: divisor(table),
        frequency_hz: table.number("frequency_Hz"),
        current_from: table.text("current_from"),
    }
}

fn divisor(table: &Table) -> CurrentDivisor {
    match table.text("current").as_deref() {
        Some("inlet") => CurrentDivisor::Inlet,
        Some("outlet") => CurrentDivisor::Outlet,
        _ => CurrentDivisor::Nominal,
    }
}

/// A source is a current, or a voltage with a known way to the current.
fn contradictions(table: &Table) -> Vec<Diagnostic> {
    let given = |key: &str| table.node(key).is_some();
    let fault = |code, key: &str, message: &str, hint: &str| {
        Diagnostic::fault(code, message).at(table.key_place(key)).hint(hint)
    };
    let mut found = Vec::new();
    if given("current_nA") && given("voltage_V") {
        let message = "`current_nA` and `voltage_V` both say what drives the current";
        found.push(fault("contradiction", "voltage_V", message, "keep the one that the source holds constant"));
    }
    // A series resistance of zero fixes no nominal current.
    let series =
        table.number("series_ohm").is_some_and(|ohm| ohm > 0.0) || !given("series_ohm") && !table.lacks("series_ohm");
    if given("voltage_V") && !series && divisor(table) == CurrentDivisor::Nominal {
        let message = "`voltage_V` alone does not say by which current the voltages are divided";
        let hint = "add `series_ohm` above zero, or `current = \"inlet\"` or \"outlet\" where the current was measured";
        found.push(fault("missing-key", "voltage_V", message, hint));
    }
    if given("series_ohm") && table.lacks("voltage_V") {
        let message = "`series_ohm` has no effect without `voltage_V`";
        found.push(fault("contradiction", "series_ohm", message, "add `voltage_V`, or take `series_ohm` out"));
    }
    if given("u_current_nA") && table.lacks("current_nA") && table.lacks("voltage_V") {
        let message = "`u_current_nA` has no current that it belongs to";
        found.push(fault("contradiction", "u_current_nA", message, "add `current_nA`"));
    }
    found
}

pub(super) fn lines(root: &Table, contacts: &Names, findings: &mut Findings) -> Option<Vec<Line>> {
    let tables = root.tables("line");
    let lines: Vec<Option<Line>> = tables.iter().map(|table| line(table, contacts, findings)).collect();
    findings.extend(doubled(&tables, "contact", "the line of contact"));
    findings.extend(doubled(&tables, "plug", "the plug"));
    lines.into_iter().collect()
}

fn line(table: &Table, contacts: &Names, findings: &mut Findings) -> Option<Line> {
    let contact = contact(table.node("contact")?, contacts, findings)?;
    findings.extend(ambiguous_plug(table, contact, contacts));
    Some(Line {
        contact,
        ohm: table.number("ohm").unwrap_or(0.0),
        u_ohm: table.number("u_ohm"),
        capacitance_nf: table.number("capacitance_nF"),
        plug: table.text("plug"),
        breakout: table.text("box"),
    })
}

/// A plug that is the name or pin of another contact: tables name contacts by any of the three.
fn ambiguous_plug(table: &Table, contact: ContactIdx, contacts: &Names) -> Option<Diagnostic> {
    let plug = table.text("plug")?;
    contacts.by_name_or_pin(&plug).filter(|other| *other != contact.0)?;
    let message = format!("the plug {} is also the name or pin of another contact", quoted(&plug));
    let notice = Diagnostic::notice("ambiguous-plug", message).at(table.place_of("plug"));
    Some(notice.hint("a table of readings cannot use this word for either; plugs such as \"P2\" cannot be mistaken"))
}

pub(super) fn meters(root: &Table, findings: &mut Findings) -> Option<Vec<Meter>> {
    let tables = root.tables("meter");
    findings.extend(doubled(&tables, "name", "the meter"));
    tables.into_iter().map(meter).collect()
}

fn meter(table: &Table) -> Option<Meter> {
    let across = table.text("input").as_deref() == Some("across");
    Some(Meter {
        name: table.text("name")?,
        input_ohm: table.number("input_ohm"),
        input: if across { MeterInput::Across } else { MeterInput::Ground },
        gain: table.number("gain").unwrap_or(1.0),
        u_gain: table.number("u_gain"),
        phase_deg: table.number("phase_deg").unwrap_or(0.0),
    })
}

/// A name or contact that stands in two tables.
fn doubled(tables: &[&Table], key: &str, what: &str) -> Vec<Diagnostic> {
    let second = |at: usize| {
        let name = tables[at].text(key)?;
        let earlier = tables[..at].iter().any(|table| table.text(key).as_ref() == Some(&name));
        let message = format!("{what} {} is there twice", quoted(&name));
        earlier.then(|| {
            Diagnostic::fault("doubled-name", message)
                .at(tables[at].place_of(key))
                .hint("keep one, or correct the name")
        })
    };
    (0..tables.len()).filter_map(second).collect()
}
