//! Mixing rules: `[edge]`, and what a point or a gate puts in their place.

use crate::diagnostic::Diagnostic;
use crate::diagnostic::Findings;
use crate::syntax::Table;

use crate::device::EdgeRules;
use crate::device::Mixing;

/// No mixing, but full along borders between opposite signs.
const DEFAULT: EdgeRules = EdgeRules { rim: Mixing::None, interface: Mixing::None, opposite: Mixing::Full };

pub(super) fn edge(root: &Table, findings: &mut Findings) -> EdgeRules {
    let Some(table) = root.table("edge") else { return DEFAULT };
    findings.extend(magnetisation(table));
    overridden(table, &DEFAULT)
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
    match table.text(key)?.as_str() {
        "full" => Some(Mixing::Full),
        _ => Some(Mixing::None),
    }
}

fn magnetisation(table: &Table) -> Option<Diagnostic> {
    (table.text("driven_by")? == "magnetisation").then(|| {
        let message =
            "channels that a magnetisation drives are not computed yet, and results without it would be wrong";
        Diagnostic::fault("not-computed-yet", message)
            .at(table.place_of("driven_by"))
            .hint("`driven_by = \"field\"` is computed")
    })
}
