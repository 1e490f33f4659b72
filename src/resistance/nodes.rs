//! Nodes: contacts that a wire without resistance makes one.

use crate::conductance::Solved;
use crate::number::Matrix;
use crate::number::Scalar;

/// The device with its wires, seen from its nodes.
pub(super) struct Nodes<S> {
    /// The node of every contact.
    pub of_contact: Vec<usize>,
    /// Currents into the nodes per potential, in e²/h. Only what lies beside the diagonal is meant: rows sum to zero.
    pub matrix: Matrix<S>,
    /// Whether a node passes any current.
    pub passes: Vec<bool>,
}

impl<S: Scalar> Nodes<S> {
    /// Every contact is a node of its own, unless wires join it.
    pub fn of(solved: &Solved<S>) -> Self {
        let of_contact = numbered(&groups(solved));
        let count = of_contact.iter().map(|node| node + 1).max().unwrap_or(0);
        let mut matrix = Matrix::<S>::zero(count, count);
        let mut add = |from: usize, to: usize, conductance: S| {
            if from != to {
                matrix[(from, to)].increase(&conductance);
            }
        };
        for (row, &from) in of_contact.iter().enumerate() {
            for (column, &to) in of_contact.iter().enumerate() {
                add(from, to, solved.matrix[(row, column)].clone());
            }
        }
        for link in solved.links.iter().filter(|link| !link.resistance.is_zero()) {
            let [a, b] = link.ends.map(|end| of_contact[end.0]);
            let conductance = S::one() / link.resistance.clone();
            add(a, b, -conductance.clone());
            add(b, a, -conductance);
        }
        let several = |node: usize| of_contact.iter().filter(|other| **other == node).count() > 1;
        let passes = (0..count).map(|node| several(node) || matrix.row(node).iter().any(|entry| !entry.is_zero()));
        Self { passes: passes.collect(), of_contact, matrix }
    }
}

/// For every contact the first one that wires without resistance join it to.
fn groups<S: Scalar>(solved: &Solved<S>) -> Vec<usize> {
    let mut group: Vec<usize> = (0..solved.contacts()).collect();
    for link in solved.links.iter().filter(|link| link.resistance.is_zero()) {
        let [a, b] = link.ends.map(|end| group[end.0]);
        group.iter_mut().filter(|of| **of == a.max(b)).for_each(|of| *of = a.min(b));
    }
    group
}

/// Groups counted from 0 in the order of their first contacts.
fn numbered(groups: &[usize]) -> Vec<usize> {
    let mut firsts: Vec<usize> = groups.to_vec();
    firsts.sort_unstable();
    firsts.dedup();
    groups.iter().map(|first| firsts.binary_search(first).unwrap_or_default()).collect()
}
