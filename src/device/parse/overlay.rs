//! `[[gate]]` and `[[step]]`.

use crate::diagnostic::Diagnostic;
use crate::diagnostic::Findings;
use crate::quantity::Nanometres;
use crate::syntax::Table;
use crate::syntax::quoted;

use crate::device::Overlay;
use crate::device::OverlayKind;
use crate::device::OverlayShape;
use crate::device::names::doubled;
use crate::device::parse::contact::to_corners;
use crate::device::parse::mixing;

/// All gates, then all steps, none in place of one that could not be read.
pub(super) fn read(root: &Table, findings: &mut Findings) -> Vec<Option<Overlay>> {
    let gates = root.tables("gate");
    let steps = root.tables("step");
    let all: Vec<&Table> = gates.iter().chain(&steps).copied().collect();
    findings.extend(doubled("gate or step", "name", &all));
    findings.extend(all.iter().filter_map(|table| name_with_a_meaning(table)));
    let kinds = gates.iter().map(|_| OverlayKind::Gate).chain(steps.iter().map(|_| OverlayKind::Step));
    all.iter().zip(kinds).map(|(table, kind)| overlay(table, kind, findings)).collect()
}

/// `+` joins names in `fillings`, and `bulk` is the ungated mesa in every closed form.
fn name_with_a_meaning(table: &Table) -> Option<Diagnostic> {
    let name = table.text("name")?;
    let (message, hint) = match name.as_str() {
        "bulk" => ("means the ungated mesa", "choose another name for this gate or step"),
        _ if name.contains('+') => ("contains a +", "+ joins names where gates overlap; choose a name without it"),
        _ => return None,
    };
    let fault = Diagnostic::fault("bad-name", format!("the name {} {message}", quoted(&name)));
    Some(fault.at(table.place_of("name")).hint(hint))
}

fn overlay(table: &Table, kind: OverlayKind, findings: &mut Findings) -> Option<Overlay> {
    let shape = shape(table, findings);
    Some(Overlay {
        name: table.text("name")?,
        kind,
        shape: shape?,
        mixing: mixing::one(table, "mixing"),
        density_per_m2_per_v: table.number("density_per_m2_per_V"),
        zero_v: table.number("zero_V"),
        limits_v: table.limits("limits_V"),
        place: table.place.clone(),
    })
}

fn shape(table: &Table, findings: &mut Findings) -> Option<OverlayShape> {
    if let Some(corners) = table.outline("outline_um") {
        let both = ["from_um", "to_um"].into_iter().filter(|key| table.node(key).is_some());
        findings.extend(both.map(|key| contradiction(table, key)));
        return Some(OverlayShape::Outline(to_corners(corners)));
    }
    findings.extend(missing_border(table));
    let (from, to) = (table.length("from_um")?, table.length("to_um")?);
    if from >= to {
        findings.push(turned_round(table));
        return None;
    }
    Some(OverlayShape::Across { from: Nanometres(from), to: Nanometres(to) })
}

fn contradiction(table: &Table, key: &str) -> Diagnostic {
    Diagnostic::fault("contradiction", format!("`{key}` and `outline_um` both say where it lies"))
        .at(table.key_place(key))
        .hint("keep `from_um` and `to_um`, or `outline_um`")
}

fn missing_border(table: &Table) -> Option<Diagnostic> {
    let absent: Vec<&str> = ["from_um", "to_um"].into_iter().filter(|key| table.lacks(key)).collect();
    let what = table.text("name").map_or_else(|| "this gate or step".to_owned(), |name| quoted(&name));
    let message = match absent.as_slice() {
        _ if !table.lacks("outline_um") => return None,
        [] => return None,
        [one] => format!("{what} has no `{one}`"),
        _ => format!("{what} has neither `from_um` and `to_um` nor `outline_um`"),
    };
    let hint = "a strip across the mesa has `from_um` and `to_um`, any other shape `outline_um`";
    Some(Diagnostic::fault("missing-key", message).at(&table.place).hint(hint))
}

fn turned_round(table: &Table) -> Diagnostic {
    Diagnostic::fault("order", "`from_um` is not left of `to_um`")
        .at(table.place_of("from_um"))
        .hint("`from_um` is the left border, `to_um` the right one")
}
