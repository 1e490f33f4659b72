//! `[contacts]`, `[[join]]`, and the tables whose keys are contacts.

use crate::device::ContactIdx;
use crate::device::Names;
use crate::diagnostic::Diagnostic;
use crate::diagnostic::Findings;
use crate::syntax::Node;
use crate::syntax::Table;
use crate::syntax::quoted;

use crate::cooldown::ContactState;

/// The contact that a text names.
pub(super) fn contact(node: &Node, contacts: &Names, findings: &mut Findings) -> Option<ContactIdx> {
    let found = contacts.find(node.text()?, &node.place);
    found.map(ContactIdx).map_err(|fault| findings.extend(fault)).ok()
}

/// States of all contacts, live where nothing is said.
pub(super) fn states(
    root: &Table,
    contacts: &Names,
    count: usize,
    findings: &mut Findings,
) -> Option<Vec<ContactState>> {
    let mut states = vec![ContactState::Live; count];
    let mut complete = true;
    for entry in root.open_entries("contacts") {
        match contacts.find(&entry.key, &entry.key_place) {
            Ok(at) => states[at] = state(&entry.node),
            Err(fault) => {
                findings.extend(fault);
                complete = false;
            }
        }
    }
    complete.then_some(states)
}

fn state(node: &Node) -> ContactState {
    match node.text() {
        Some("open") => ContactState::Open,
        Some("grounded") => ContactState::Grounded,
        _ => ContactState::Live,
    }
}

pub(super) fn joins(root: &Table, contacts: &Names, findings: &mut Findings) -> Option<Vec<Vec<ContactIdx>>> {
    let tables = root.tables("join");
    let mut seen: Vec<ContactIdx> = Vec::new();
    let mut joins = Vec::new();
    for table in tables {
        let join = join(table, contacts, findings);
        for (at, node) in join.iter().flatten().zip(table.list("contacts")) {
            if seen.contains(at) {
                findings.push(joined_twice(node));
            }
        }
        seen.extend(join.iter().flatten());
        joins.push(join);
    }
    joins.into_iter().collect()
}

fn join(table: &Table, contacts: &Names, findings: &mut Findings) -> Option<Vec<ContactIdx>> {
    let found: Vec<Option<ContactIdx>> =
        table.list("contacts").iter().map(|node| contact(node, contacts, findings)).collect();
    found.into_iter().collect()
}

fn joined_twice(node: &Node) -> Diagnostic {
    let name = quoted(node.text().unwrap_or_default());
    Diagnostic::fault("doubled-name", format!("the contact {name} stands in two [[join]] tables"))
        .at(&node.place)
        .hint("contacts that share one potential stand in one [[join]]")
}

/// `[names]` and `[wiring]`: keys are contacts, and no word stands for two of them.
pub(super) fn check_names(root: &Table, contacts: &Names, findings: &mut Findings) {
    for key in ["names", "wiring"] {
        let entries = root.open_entries(key);
        for (at, entry) in entries.iter().enumerate() {
            findings.extend(contacts.find(&entry.key, &entry.key_place).err().flatten());
            let word = entry.node.text().unwrap_or_default();
            if entries[..at].iter().any(|earlier| earlier.node.text() == Some(word)) {
                findings.push(
                    Diagnostic::fault("doubled-name", format!("{} stands for two contacts", quoted(word)))
                        .at(&entry.node.place)
                        .hint("give each contact a word of its own"),
                );
            }
        }
    }
}
