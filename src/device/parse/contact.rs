//! `[[contact]]`: where each contact sits and how well it absorbs.

use std::collections::BTreeSet;

use crate::diagnostic::Diagnostic;
use crate::diagnostic::Findings;
use crate::quantity::Nanometres;
use crate::syntax::Table;
use crate::syntax::quoted;

use crate::device::Contact;
use crate::device::ContactShape;
use crate::device::Corner;
use crate::device::names::doubled;
use crate::device::parse::placement;
use crate::device::parse::transmission;

/// All contacts, none in place of one that could not be read.
pub(super) fn read(root: &Table, findings: &mut Findings) -> Vec<Option<Contact>> {
    let tables = root.tables("contact");
    findings.extend(doubled("contact", "name", &tables));
    findings.extend(doubled("pin", "pin", &tables));
    findings.extend(ambiguous_pins(&tables));
    findings.extend(too_few(&tables));
    if root.tables("point").iter().any(|point| point.node("modes").is_some()) {
        findings.extend(tables.iter().filter_map(|table| transmission::beside_modes(table)));
    }
    let mesa = root.table("mesa").and_then(|mesa| mesa.text("shape"));
    let contact = |table: &&Table| contact(table, placement::read(table, mesa.as_deref(), findings)?);
    tables.iter().map(contact).collect()
}

/// A pin that is the name of another contact: tables name contacts by either.
fn ambiguous_pins(tables: &[&Table]) -> Vec<Diagnostic> {
    let names: BTreeSet<String> = tables.iter().filter_map(|table| table.text("name")).collect();
    let pins = tables.iter().filter_map(|table| Some((table, table.text("pin")?)));
    let other = pins.filter(|(table, pin)| names.contains(pin) && table.text("name").as_ref() != Some(pin));
    let notice = |(table, pin): (&&Table, String)| {
        Diagnostic::notice("ambiguous-pin", format!("the pin {} is also the name of another contact", quoted(&pin)))
            .at(table.place_of("pin"))
            .hint("a table of readings cannot use this word for either; pins such as \"p2\" cannot be mistaken")
    };
    other.map(notice).collect()
}

fn too_few(tables: &[&Table]) -> Option<Diagnostic> {
    let [only] = tables else { return None };
    Some(
        Diagnostic::fault("too-few-contacts", "a device needs at least two contacts, and this one has 1")
            .at(&only.place)
            .hint("add another [[contact]]"),
    )
}

fn contact(table: &Table, shape: ContactShape) -> Option<Contact> {
    Some(Contact {
        name: table.text("name")?,
        pin: table.text("pin"),
        pad: table.text("pad"),
        note: table.text("note"),
        shape,
        transmission: transmission::read(table),
        place: table.place.clone(),
    })
}

pub(super) fn to_corners(corners: Vec<(i64, i64)>) -> Vec<Corner> {
    corners.into_iter().map(|(x, y)| (Nanometres(x), Nanometres(y))).collect()
}
