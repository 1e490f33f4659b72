//! `modes` of a point: counter-running edge modes in place of fillings.

use crate::diagnostic::Diagnostic;
use crate::diagnostic::Findings;
use crate::quantity::Nanometres;
use crate::syntax::Table;

use crate::device::Modes;

/// The modes of a point, where it has them.
pub(super) fn read(table: &Table, findings: &mut Findings) -> Option<Modes> {
    findings.extend(backscatter_alone(table));
    let inner = table.table("modes")?;
    let (forward, backward) = (inner.count("forward")?, inner.count("backward")?);
    let modes = Modes { forward, backward, backscatter: table.length("backscatter_um").map(Nanometres) };
    findings.extend(no_mode(table, &modes));
    findings.extend(backscatter_of_others(table, &modes));
    Some(modes)
}

fn backscatter_alone(table: &Table) -> Option<Diagnostic> {
    (table.lacks("modes") && table.node("backscatter_um").is_some()).then(|| {
        Diagnostic::fault("missing-key", "`backscatter_um` stands without `modes`")
            .at(table.key_place("backscatter_um"))
            .hint("add `modes = { forward = 1, backward = 1 }`, or leave it out")
    })
}

fn no_mode(table: &Table, modes: &Modes) -> Option<Diagnostic> {
    (modes.forward == 0 && modes.backward == 0).then(|| {
        Diagnostic::fault("no-modes", "`modes` has no mode in either direction")
            .at(table.place_of("modes"))
            .hint("give at least one, or write `bulk = 0`")
    })
}

/// A stretch that scatters back is a resistor (h/e²)(1 + L/λ): so defined for one mode each way.
fn backscatter_of_others(table: &Table, modes: &Modes) -> Option<Diagnostic> {
    (modes.backscatter.is_some() && (modes.forward, modes.backward) != (1, 1)).then(|| {
        Diagnostic::fault("contradiction", "`backscatter_um` is defined for one mode each way")
            .at(table.key_place("backscatter_um"))
            .hint("leave it out, or write `modes = { forward = 1, backward = 1 }`")
    })
}
