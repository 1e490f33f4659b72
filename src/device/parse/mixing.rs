//! Mixing rules: `[edge]`, and what a point or a gate puts in their place.

use crate::diagnostic::Diagnostic;
use crate::diagnostic::Findings;
use crate::quantity::Nanometres;
use crate::syntax::Node;
use crate::syntax::Table;

use crate::device::Drive;
use crate::device::EdgeRules;
use crate::device::Groups;
use crate::device::Mixing;

/// No mixing, but full along borders between opposite signs.
const DEFAULT: EdgeRules = EdgeRules { rim: Mixing::None, interface: Mixing::None, opposite: Mixing::Full };

pub(super) fn edge(root: &Table) -> EdgeRules {
    root.table("edge").map_or(DEFAULT, |table| overridden(table, &DEFAULT))
}

/// Groups of ladder steps with the mixing between them.
pub(super) fn groups(root: &Table, findings: &mut Findings) -> Option<Groups> {
    let table = root.table("edge")?;
    if table.lacks("groups") {
        findings.extend(table.node("group_mixing").map(|_| between_nothing(table)));
    }
    let steps = |group: &Node| group.list().unwrap_or_default().iter().filter_map(step).collect();
    let steps = table.node("groups")?.list()?.iter().map(steps).collect();
    Some(Groups { steps, between: one(table, "group_mixing").unwrap_or(Mixing::None) })
}

fn step(node: &Node) -> Option<usize> {
    usize::try_from(node.count()?).ok()
}

fn between_nothing(table: &Table) -> Diagnostic {
    Diagnostic::fault("missing-key", "`group_mixing` stands without `groups`")
        .at(table.key_place("group_mixing"))
        .hint("add `groups = [[1, 3], [2, 4]]`, or leave it out: `mixing` then acts between all channels alike")
}

/// What turns the channels.
pub(super) fn driven_by(root: &Table) -> Drive {
    match root.table("edge").and_then(|table| table.text("driven_by")).as_deref() {
        Some("magnetisation") => Drive::Magnetisation,
        _ => Drive::Field,
    }
}

/// The rules with the entries of a table put in.
pub(super) fn overridden(table: &Table, rules: &EdgeRules) -> EdgeRules {
    EdgeRules {
        rim: one(table, "mixing").unwrap_or_else(|| rules.rim.clone()),
        interface: one(table, "interface_mixing").unwrap_or_else(|| rules.interface.clone()),
        opposite: one(table, "opposite_mixing").unwrap_or_else(|| rules.opposite.clone()),
    }
}

/// The mixing under one key.
pub(super) fn one(table: &Table, key: &str) -> Option<Mixing> {
    if let Some(over) = table.table(key) {
        return over.length("length_um").map(|length| Mixing::Over(Nanometres(length)));
    }
    match table.text(key)?.as_str() {
        "full" => Some(Mixing::Full),
        _ => Some(Mixing::None),
    }
}
