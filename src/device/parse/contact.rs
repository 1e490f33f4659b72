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
use crate::device::Edge;
use crate::device::Ladder;
use crate::device::OperatingPoint;
use crate::device::names::doubled;
use crate::device::parse::transmission;

/// All contacts; `points` tells how many channels a contact can meet, where the points could be read.
pub(super) fn read(
    root: &Table,
    points: Option<(&[OperatingPoint], &Ladder)>,
    findings: &mut Findings,
) -> Option<Vec<Contact>> {
    let tables = root.tables("contact");
    findings.extend(doubled("contact", "name", &tables));
    findings.extend(doubled("pin", "pin", &tables));
    findings.extend(ambiguous_pins(&tables));
    findings.extend(too_few(&tables));
    let channels = points.map(|(points, ladder)| transmission::most_channels(points, ladder));
    let contacts: Vec<Option<Contact>> = tables.iter().map(|table| contact(table, channels, findings)).collect();
    contacts.into_iter().collect()
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

fn contact(table: &Table, channels: Option<usize>, findings: &mut Findings) -> Option<Contact> {
    let shape = shape(table, findings);
    let transmission = transmission::read(table, channels, findings);
    Some(Contact {
        name: table.text("name")?,
        pin: table.text("pin"),
        pad: table.text("pad"),
        note: table.text("note"),
        shape: shape?,
        transmission,
        place: table.place.clone(),
    })
}

fn shape(table: &Table, findings: &mut Findings) -> Option<ContactShape> {
    let before = table.entries.len();
    let faults: Vec<Diagnostic> = other_mesas(table).into_iter().chain(outline_and_edge(table)).collect();
    let clean = faults.is_empty() && before > 0;
    findings.extend(faults);
    if let Some(corners) = table.outline("outline_um") {
        return Some(ContactShape::Outline(to_corners(corners)));
    }
    let edge = table.text("edge").filter(|_| clean)?;
    on_edge(table, &edge, findings)
}

/// Keys that place a contact on a mesa of another shape.
fn other_mesas(table: &Table) -> Vec<Diagnostic> {
    let fault = |key: &str, owner: &str| {
        Diagnostic::fault("other-shape", format!("`{key}` places a contact on a mesa of shape {owner}"))
            .at(table.key_place(key))
            .hint("on a bar write `edge` with `x_um` or `y_um` and `width_um`, or `outline_um`")
    };
    let keys = [("at_um", "outline"), ("angle_deg", "ring")].into_iter().filter(|(key, _)| table.node(key).is_some());
    let mut found: Vec<Diagnostic> = keys.map(|(key, owner)| fault(key, owner)).collect();
    if let Some(edge) = table.text("edge").filter(|edge| edge == "outer" || edge == "inner") {
        let message = format!("`edge = \"{edge}\"` belongs to a mesa of shape ring");
        let hint = "a bar has the edges left, top, right and bottom";
        found.push(Diagnostic::fault("other-shape", message).at(table.place_of("edge")).hint(hint));
    }
    found
}

/// Either an edge or an outline.
fn outline_and_edge(table: &Table) -> Vec<Diagnostic> {
    let edge_keys = ["edge", "x_um", "y_um", "width_um", "arm_um"];
    let outline = table.node("outline_um").is_some();
    if outline {
        let both = edge_keys.into_iter().filter(|key| table.node(key).is_some());
        return both.map(|key| contradiction(table, key)).collect();
    }
    if table.lacks("outline_um") && table.lacks("edge") && table.node("at_um").is_none() {
        let fault = Diagnostic::fault("missing-key", "a contact has neither `edge` nor `outline_um`").at(&table.place);
        return vec![fault.hint("write `edge = \"left\"` (or top, right, bottom), or its corners in `outline_um`")];
    }
    Vec::new()
}

fn contradiction(table: &Table, key: &str) -> Diagnostic {
    Diagnostic::fault("contradiction", format!("`{key}` and `outline_um` both say where the contact lies"))
        .at(table.key_place(key))
        .hint("keep one of the two")
}

fn on_edge(table: &Table, edge: &str, findings: &mut Findings) -> Option<ContactShape> {
    let (edge, along, across) = match edge {
        "left" => (Edge::Left, "y_um", "x_um"),
        "right" => (Edge::Right, "y_um", "x_um"),
        "top" => (Edge::Top, "x_um", "y_um"),
        _ => (Edge::Bottom, "x_um", "y_um"),
    };
    if table.node(across).is_some() {
        findings.push(wrong_direction(table, along, across));
    }
    findings.extend(half_placed(table, along));
    Some(ContactShape::Edge {
        edge,
        centre: table.length(along).map(Nanometres),
        width: table.length("width_um").map(Nanometres),
        arm: Nanometres(table.length("arm_um").unwrap_or(0)),
    })
}

fn wrong_direction(table: &Table, along: &str, across: &str) -> Diagnostic {
    let edge = table.text_or_empty("edge");
    let message = format!("`{across}` cannot place a contact along the {edge} edge");
    Diagnostic::fault("wrong-direction", message)
        .at(table.key_place(across))
        .hint(format!("write `{along}`, its centre"))
}

/// A centre without a width, or a width without a centre.
fn half_placed(table: &Table, along: &str) -> Option<Diagnostic> {
    let (given, absent) = match (table.node(along).is_some(), table.node("width_um").is_some()) {
        (true, false) => (along, "width_um"),
        (false, true) => ("width_um", along),
        _ => return None,
    };
    // A centre under the key of the other direction has been said already.
    let other = if along == "x_um" { "y_um" } else { "x_um" };
    let meant = absent == along && table.node(other).is_some();
    (table.lacks(absent) && !meant).then(|| {
        Diagnostic::fault("missing-key", format!("a contact with `{given}` has no `{absent}`"))
            .at(table.key_place(given))
            .hint(format!("add `{absent}`, or leave both out where the contact takes the whole edge"))
    })
}

pub(super) fn to_corners(corners: Vec<(i64, i64)>) -> Vec<Corner> {
    corners.into_iter().map(|(x, y)| (Nanometres(x), Nanometres(y))).collect()
}
