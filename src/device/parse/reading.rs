//! `[[reading]]`: readings that the file asks for.

use crate::diagnostic::Findings;
use crate::syntax::Table;

use crate::device::ContactIdx;
use crate::device::NamedReading;
use crate::device::names::doubled;
use crate::device::parse::Scope;
use crate::device::parse::noted;

pub(super) fn read(root: &Table, scope: &Scope<'_>, findings: &mut Findings) -> Option<Vec<NamedReading>> {
    let tables = root.tables("reading");
    findings.extend(doubled("reading", "name", &tables));
    let readings: Vec<Option<NamedReading>> = tables.iter().map(|table| reading(table, scope, findings)).collect();
    readings.into_iter().collect()
}

fn reading(table: &Table, scope: &Scope<'_>, findings: &mut Findings) -> Option<NamedReading> {
    let current = pair(table, "current", scope, findings);
    let voltage = pair(table, "voltage", scope, findings);
    Some(NamedReading { name: table.text("name"), current: current?, voltage: voltage? })
}

fn pair(table: &Table, key: &str, scope: &Scope<'_>, findings: &mut Findings) -> Option<[ContactIdx; 2]> {
    let mut find = |at: usize| {
        let node = table.list(key).get(at)?;
        noted(scope.contacts.find(node.text()?, &node.place), findings)
    };
    let (first, second) = (find(0), find(1));
    Some([ContactIdx(first?), ContactIdx(second?)])
}
