//! `transmission` of a contact.

use crate::diagnostic::Diagnostic;
use crate::diagnostic::Findings;
use crate::number::Rational;
use crate::syntax::Node;
use crate::syntax::Table;

use crate::device::Ladder;
use crate::device::OperatingPoint;

/// The shares, outermost ladder step first; 1 where none is given. `channels` is the most that any contact can meet.
pub(super) fn read(table: &Table, channels: Option<usize>, findings: &mut Findings) -> Vec<Rational> {
    let Some(node) = table.node("transmission") else { return vec![Rational::ONE] };
    let values: Vec<Rational> = match node.list() {
        Some(list) => list.iter().filter_map(Node::exact).collect(),
        None => node.exact().into_iter().collect(),
    };
    findings.extend(too_many(&values, channels, node));
    findings.extend(unequal(&values, node));
    values
}

fn too_many(values: &[Rational], channels: Option<usize>, node: &Node) -> Option<Diagnostic> {
    let channels = channels.filter(|channels| values.len() > (*channels).max(1))?;
    let message =
        format!("`transmission` lists {} values, and no contact meets more than {channels} channels", values.len());
    Some(
        Diagnostic::fault("too-many-values", message)
            .at(&node.place)
            .hint("write one per ladder step, outermost first"),
    )
}

fn unequal(values: &[Rational], node: &Node) -> Option<Diagnostic> {
    let equal = values.windows(2).all(|pair| pair[0] == pair[1]);
    (!equal).then(|| {
        Diagnostic::fault("not-computed-yet", "a transmission that differs from channel to channel is not computed yet")
            .at(&node.place)
            .hint("one number for all channels of a contact is computed")
    })
}

/// Ladder steps of the highest filling that stands anywhere in any point.
pub(super) fn most_channels(points: &[OperatingPoint], ladder: &Ladder) -> usize {
    let fillings = points.iter().flat_map(|point| {
        let under = point.fillings.iter().map(|(_, filling)| filling);
        under.chain([&point.bulk])
    });
    fillings.map(|filling| ladder.steps_up_to(filling)).max().unwrap_or(0)
}
