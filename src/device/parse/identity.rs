//! `[device]` and `[layer]`.

use crate::syntax::Node;
use crate::syntax::Table;

use crate::device::Ladder;
use crate::device::Layer;

/// `[device]` without its ladder.
#[derive(Default)]
pub(super) struct Identity {
    pub id: String,
    pub title: String,
    pub material: String,
}

pub(super) fn read(root: &Table) -> Identity {
    let Some(table) = root.table("device") else { return Identity::default() };
    Identity {
        id: table.text_or_empty("id"),
        title: table.text_or_empty("title"),
        material: table.text_or_empty("material"),
    }
}

/// The ladder; the default where none is given or the one given was refused.
pub(super) fn ladder(root: &Table) -> Ladder {
    let node = root.table("device").and_then(|table| table.node("ladder"));
    node.and_then(named_or_own).unwrap_or_default()
}

fn named_or_own(node: &Node) -> Option<Ladder> {
    match node.list() {
        // 0 belongs to every ladder, written or not.
        Some(steps) => Some(Ladder::Own(steps.iter().filter_map(Node::exact).filter(|step| !step.is_zero()).collect())),
        None => Ladder::named(node.text()?),
    }
}

pub(super) fn layer(root: &Table) -> Layer {
    let Some(table) = root.table("layer") else { return Layer::default() };
    Layer { density_per_m2: table.number("density_per_m2"), mobility_m2_per_vs: table.number("mobility_m2_per_Vs") }
}
