//! `[[sweep]]`: checked against the device; nothing is computed from it yet.

use crate::device::Device;
use crate::device::Names;
use crate::diagnostic::Diagnostic;
use crate::diagnostic::Findings;
use crate::syntax::Table;
use crate::syntax::quoted;

use crate::cooldown::parse::contacts::contact;

pub(super) fn check(root: &Table, (contacts, device): (&Names, &Device), findings: &mut Findings) {
    let sweeps = root.tables("sweep");
    let points = Names::of_points(device);
    for (at, sweep) in sweeps.iter().enumerate() {
        findings.extend(doubled(sweep, &sweeps[..at]));
        findings.extend(sweep.node("point").and_then(|node| points.find(node.text()?, &node.place).err().flatten()));
        findings.extend(swept_quantity(sweep));
        findings.extend(sweep.table("field").and_then(monitor));
        sweep.tables("trace").into_iter().for_each(|trace| check_trace(trace, contacts, findings));
    }
}

fn doubled(sweep: &Table, earlier: &[&Table]) -> Option<Diagnostic> {
    let name = sweep.text("name")?;
    let twice = earlier.iter().any(|other| other.text("name").as_ref() == Some(&name));
    let message = format!("the sweep {} is there twice", quoted(&name));
    twice.then(|| {
        Diagnostic::fault("doubled-name", message).at(sweep.place_of("name")).hint("give each sweep a name of its own")
    })
}

fn swept_quantity(sweep: &Table) -> Option<Diagnostic> {
    (sweep.lacks("field") && sweep.lacks("gate")).then(|| {
        Diagnostic::fault("missing-key", "[[sweep]] has neither `field` nor `gate`")
            .at(&sweep.place)
            .hint("name the column of the swept quantity: field = { column = \"B\", unit = \"T\" }")
    })
}

/// A column in volts or amperes is a monitor and needs its factor.
fn monitor(field: &Table) -> Option<Diagnostic> {
    let unit = field.text("unit").filter(|unit| unit == "V" || unit == "A")?;
    field.lacks("tesla_per_unit").then(|| {
        Diagnostic::fault("missing-key", format!("a field column in {unit} has no `tesla_per_unit`"))
            .at(field.place_of("unit"))
            .hint("add the tesla per volt or ampere of the monitor")
    })
}

fn check_trace(trace: &Table, contacts: &Names, findings: &mut Findings) {
    for node in ["current", "voltage"].into_iter().flat_map(|key| trace.list(key)) {
        contact(node, contacts, findings);
    }
}
