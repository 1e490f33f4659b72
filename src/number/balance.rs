//! Systems of weighted means, and elimination that subtracts nothing.

use std::collections::BTreeMap;
use std::collections::BTreeSet;

use crate::number::Scalar;

/// Unknowns x_i with (Σ_j w_ij + g_i) x_i = Σ_j w_ij x_j + s_i: nodes that are joined by conductances, some of them to
/// nodes of given potential or to ground. All w and g are zero or positive.
pub struct Balance<S> {
    /// w_ij ≥ 0 by row, without w_ii.
    pub joined: Vec<BTreeMap<usize, S>>,
    /// g_i ≥ 0: the whole conductance to nodes of given potential.
    pub given: Vec<S>,
    /// s_i for any number of right-hand sides, by row.
    pub sources: Vec<BTreeMap<usize, S>>,
}

/// A node has no way to any given potential.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Singular;

impl<S: Scalar> Balance<S> {
    /// So many nodes without any conductance.
    pub fn new(nodes: usize) -> Self {
        let none = || vec![BTreeMap::new(); nodes];
        Self { joined: none(), given: vec![S::zero(); nodes], sources: none() }
    }

    /// Adds to w_ij; a node joined to itself carries nothing.
    pub fn join(&mut self, row: usize, column: usize, weight: &S) {
        if row != column {
            add(&mut self.joined[row], column, weight);
        }
    }

    /// Adds a conductance to the given potential of a right-hand side.
    pub fn give(&mut self, row: usize, side: usize, weight: &S) {
        self.given[row].increase(weight);
        add(&mut self.sources[row], side, weight);
    }

    /// x_i for every right-hand side, by row.
    ///
    /// The nodes are eliminated one by one, that with the fewest neighbours first. The weight of a node is always the sum
    /// of what leaves it, never a difference, so that floats keep all digits of small shares and shares sum to one
    /// (W. K. Grassmann, M. I. Taksar and D. P. Heyman, Oper. Res. 33, 1107 (1985); algorithm from memory).
    pub fn solve(mut self, sides: usize) -> Result<Vec<Vec<S>>, Singular> {
        let mut used_by = used_by(&self.joined);
        let mut left: BTreeSet<usize> = (0..self.joined.len()).collect();
        let mut order = Vec::with_capacity(left.len());
        while let Some(node) = next(&left, &self.joined, &used_by) {
            left.remove(&node);
            self.eliminate(node, &mut used_by)?;
            order.push(node);
        }
        Ok(self.substituted(&order, sides))
    }

    /// Writes the node as a mean of its neighbours, and puts that in its place wherever it is used.
    fn eliminate(&mut self, node: usize, used_by: &mut [BTreeSet<usize>]) -> Result<(), Singular> {
        let mut weight = self.given[node].clone();
        self.joined[node].values().for_each(|part| weight.increase(part));
        if weight.is_zero() {
            return Err(Singular);
        }
        let share = |value: &mut S| *value = value.clone() / weight.clone();
        self.joined[node].values_mut().for_each(share);
        self.sources[node].values_mut().for_each(share);
        share(&mut self.given[node]);
        let (row, sources) = (self.joined[node].clone(), self.sources[node].clone());
        let given = self.given[node].clone();
        for user in std::mem::take(&mut used_by[node]) {
            let Some(weight) = self.joined[user].remove(&node) else { continue };
            for (&column, share) in row.iter().filter(|(column, _)| **column != user) {
                add(&mut self.joined[user], column, &(weight.clone() * share.clone()));
                used_by[column].insert(user);
            }
            sources
                .iter()
                .for_each(|(&side, share)| add(&mut self.sources[user], side, &(weight.clone() * share.clone())));
            self.given[user].increase(&(weight * given.clone()));
        }
        row.keys().for_each(|column| _ = used_by[*column].remove(&node));
        Ok(())
    }

    /// From the last node eliminated to the first, each from those after it.
    fn substituted(self, order: &[usize], sides: usize) -> Vec<Vec<S>> {
        let mut solved: Vec<Vec<S>> = vec![Vec::new(); order.len()];
        for &node in order.iter().rev() {
            let mut values: Vec<S> = vec![S::zero(); sides];
            self.sources[node].iter().for_each(|(&side, value)| values[side] = value.clone());
            for (&column, share) in &self.joined[node] {
                for (value, other) in values.iter_mut().zip(&solved[column]).filter(|(_, other)| !other.is_zero()) {
                    value.increase(&(share.clone() * other.clone()));
                }
            }
            solved[node] = values;
        }
        solved
    }
}

fn add<S: Scalar>(row: &mut BTreeMap<usize, S>, column: usize, weight: &S) {
    if !weight.is_zero() {
        row.entry(column).or_insert_with(S::zero).increase(weight);
    }
}

fn used_by<S>(joined: &[BTreeMap<usize, S>]) -> Vec<BTreeSet<usize>> {
    let mut used_by = vec![BTreeSet::new(); joined.len()];
    for (row, columns) in joined.iter().enumerate() {
        columns.keys().for_each(|column| _ = used_by[*column].insert(row));
    }
    used_by
}

/// The node whose elimination makes the fewest new entries; the first of equals.
fn next<S>(left: &BTreeSet<usize>, joined: &[BTreeMap<usize, S>], used_by: &[BTreeSet<usize>]) -> Option<usize> {
    left.iter().copied().min_by_key(|&node| joined[node].len() * used_by[node].len())
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::number::Rational;

    /// Three nodes in a row between 1 and 0 with conductances 1, 2, 3, 4: a voltage divider, potentials by Ohm's law
    /// 1 − 12/25, 1 − 18/25 and 1 − 22/25.
    fn divider<S: Scalar>() -> Vec<S> {
        let number = |value| S::nearest(&Rational::from(value));
        let mut balance = Balance::new(3);
        balance.give(0, 0, &number(1));
        for (a, weight) in [(0, 2), (1, 3)] {
            balance.join(a, a + 1, &number(weight));
            balance.join(a + 1, a, &number(weight));
        }
        balance.given[2].increase(&number(4));
        balance.solve(1).unwrap().into_iter().map(|row| row[0].clone()).collect()
    }

    #[test]
    fn a_voltage_divider_is_solved_exactly_and_in_floats() {
        let exact: Vec<Rational> = divider();
        assert_eq!(exact.iter().map(ToString::to_string).collect::<Vec<_>>(), ["13/25", "7/25", "3/25"]);
        for (float, exact) in divider::<f64>().iter().zip(&exact) {
            assert!((float - exact.to_f64()).abs() < 1e-16);
        }
    }

    #[test]
    fn a_node_that_hangs_free_is_an_error() {
        let mut balance = Balance::<f64>::new(2);
        balance.join(0, 1, &1.0);
        balance.join(1, 0, &1.0);
        assert_eq!(balance.solve(0), Err(Singular));
    }
}
