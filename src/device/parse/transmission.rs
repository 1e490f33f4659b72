//! `transmission` of a contact.

use crate::diagnostic::Diagnostic;
use crate::number::Rational;
use crate::syntax::Node;
use crate::syntax::Table;

/// The shares, outermost ladder step first; 1 where none is given. How many a contact can use shows its place on the chip.
pub(super) fn read(table: &Table) -> Vec<Rational> {
    let Some(node) = table.node("transmission") else { return vec![Rational::ONE] };
    match node.list() {
        Some(list) => list.iter().filter_map(Node::exact).collect(),
        None => node.exact().into_iter().collect(),
    }
}

/// Edge modes take one number at every contact.
pub(super) fn beside_modes(table: &Table) -> Option<Diagnostic> {
    let list = table.node("transmission")?.list().filter(|list| list.len() > 1)?;
    let message =
        format!("`transmission` lists {} values, and at a point with `modes` a contact takes one", list.len());
    Some(
        Diagnostic::fault("too-many-values", message)
            .at(table.place_of("transmission"))
            .hint("write one number, or keep points with `modes` in a file of their own"),
    )
}
