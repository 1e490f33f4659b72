//! Islands: contacts that the device and its wires join, each island solved once.

use crate::conductance::Solved;
use crate::device::ContactIdx;
use crate::number::Balance;
use crate::number::Matrix;
use crate::number::Scalar;
use crate::resistance::nodes::Nodes;

/// The device cut into islands. Contacts with a conductance or a wire between them form one.
pub(super) struct Islands<S> {
    /// For every contact its island and its place in it; contacts of one node share it.
    place: Vec<(usize, usize)>,
    /// Per island: potential (row) per unit current in at a contact (column) and out at the last; the last has 0.
    potential: Vec<Vec<Vec<S>>>,
    passes: Vec<bool>,
}

impl<S: Scalar> Islands<S> {
    /// Cuts and solves.
    pub fn of(solved: &Solved<S>) -> Self {
        let Nodes { of_contact, matrix, passes } = Nodes::of(solved);
        let members = members(&matrix);
        let mut place = vec![(0, 0); matrix.rows()];
        for (island, nodes) in members.iter().enumerate() {
            for (at, &node) in nodes.iter().enumerate() {
                place[node] = (island, at);
            }
        }
        Self {
            place: of_contact.iter().map(|&node| place[node]).collect(),
            passes: of_contact.iter().map(|&node| passes[node]).collect(),
            potential: members.iter().map(|nodes| unit_potentials(&matrix, nodes)).collect(),
        }
    }

    /// Number of contacts of the device.
    pub fn contacts(&self) -> usize {
        self.place.len()
    }

    /// Whether the contact passes any current.
    pub fn passes(&self, contact: ContactIdx) -> bool {
        self.passes[contact.0]
    }

    /// Whether two contacts lie on one island.
    pub fn together(&self, a: ContactIdx, b: ContactIdx) -> bool {
        self.place[a.0].0 == self.place[b.0].0
    }

    /// R_ij,kl in h/e²; none when the four contacts do not lie on one island.
    pub fn resistance(&self, current: [ContactIdx; 2], voltage: [ContactIdx; 2]) -> Option<S> {
        let [inlet, outlet, plus, minus] = [current[0], current[1], voltage[0], voltage[1]].map(|at| self.place[at.0]);
        let one_island = [outlet, plus, minus].into_iter().all(|place| place.0 == inlet.0);
        let potential = &self.potential[inlet.0];
        let at = |contact: (usize, usize)| potential[contact.1][inlet.1].less(&potential[contact.1][outlet.1]);
        one_island.then(|| at(plus).less(&at(minus)))
    }
}

fn members<S: Scalar>(matrix: &Matrix<S>) -> Vec<Vec<usize>> {
    let joined = |a: usize, b: usize| !matrix[(a, b)].is_zero() || !matrix[(b, a)].is_zero();
    let mut left: Vec<usize> = (0..matrix.rows()).collect();
    let mut islands = Vec::new();
    while !left.is_empty() {
        let mut island = vec![left.remove(0)];
        let mut at = 0;
        while at < island.len() {
            let (near, far): (Vec<usize>, Vec<usize>) = left.iter().partition(|&&contact| joined(island[at], contact));
            island.extend(near);
            left = far;
            at += 1;
        }
        island.sort_unstable();
        islands.push(island);
    }
    islands
}

/// V in G V = I for unit currents, with the last contact as ground: a row of potentials for every contact. Only what lies
/// beside the diagonal is read, because rows sum to zero.
fn unit_potentials<S: Scalar>(matrix: &Matrix<S>, contacts: &[usize]) -> Vec<Vec<S>> {
    let free = contacts.len() - 1;
    let mut balance = Balance::new(free);
    for row in 0..free {
        balance.sources[row].insert(row, S::one());
        let joined = |column: usize| -matrix[(contacts[row], contacts[column])].clone();
        balance.given[row] = joined(free);
        (0..free).for_each(|column| balance.join(row, column, &joined(column)));
    }
    // On an island every current finds its way, so no contact hangs free.
    let mut potential = balance.solve(free + 1).unwrap_or_else(|_| vec![vec![S::zero(); free + 1]; free]);
    potential.push(vec![S::zero(); free + 1]);
    potential
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::number::Rational;

    /// Transmissions of a four-contact conductor, T_ij from j into i; every value below is the exact rational solution of
    /// M. Büttiker's equations, Phys. Rev. Lett. 57, 1761 (1986), computed independently.
    const TRANSMISSIONS: [[i64; 4]; 4] = [[0, 1, 0, 2], [2, 0, 1, 0], [1, 1, 0, 1], [0, 1, 2, 0]];

    fn islands(transposed: bool) -> Islands<Rational> {
        let mut matrix = Matrix::zero(4, 4);
        for row in 0..4 {
            for column in 0..4 {
                let passed = TRANSMISSIONS[row][column];
                let kept = if row == column { 3 } else { 0 };
                matrix[(row, column)] = Rational::from(kept - passed);
            }
        }
        let matrix = if transposed { matrix.transposed() } else { matrix };
        Islands::of(&Solved { matrix, shares: Vec::new(), links: Vec::new() })
    }

    fn seventeenths(islands: &Islands<Rational>, [i, j, k, l]: [usize; 4]) -> String {
        let exact = islands.resistance([ContactIdx(i - 1), ContactIdx(j - 1)], [ContactIdx(k - 1), ContactIdx(l - 1)]);
        (exact.unwrap() * Rational::from(17)).to_string()
    }

    #[test]
    fn four_contacts_follow_the_exact_test_vector() {
        for (reading, toward, away) in [
            ([1, 2, 1, 2], "7", "7"),
            ([1, 3, 1, 3], "9", "9"),
            ([1, 4, 1, 4], "8", "8"),
            ([2, 3, 2, 3], "9", "9"),
            ([2, 4, 2, 4], "9", "9"),
            ([3, 4, 3, 4], "7", "7"),
            ([1, 2, 3, 4], "1", "-2"),
            ([3, 4, 1, 2], "-2", "1"),
            ([1, 3, 2, 4], "4", "-1"),
            ([2, 4, 1, 3], "-1", "4"),
            ([1, 4, 2, 3], "2", "2"),
            ([2, 3, 1, 4], "2", "2"),
        ] {
            assert_eq!(seventeenths(&islands(false), reading), toward, "{reading:?} at +");
            assert_eq!(seventeenths(&islands(true), reading), away, "{reading:?} at −");
        }
    }
}
