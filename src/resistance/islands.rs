//! Islands: contacts that the device joins, each island solved once.

use crate::conductance::Conductance;
use crate::device::ContactIdx;
use crate::number::Matrix;
use crate::number::Rational;
use crate::number::Scalar;
use crate::number::solve;

/// The device cut into islands. Contacts with a conductance between them form one.
pub(super) struct Islands {
    /// For every contact its island and its place in it.
    place: Vec<(usize, usize)>,
    /// Per island: potential (row) per unit current in at a contact (column) and out at the last; the last has 0.
    potential: Vec<Matrix<Rational>>,
    passes: Vec<bool>,
}

impl Islands {
    /// Cuts and solves.
    pub fn of(conductance: &Conductance) -> Self {
        let members = members(conductance);
        let mut place = vec![(0, 0); conductance.contacts];
        for (island, contacts) in members.iter().enumerate() {
            for (at, &contact) in contacts.iter().enumerate() {
                place[contact] = (island, at);
            }
        }
        let passes = (0..conductance.contacts).map(|at| !conductance.matrix[(at, at)].is_zero()).collect();
        let potential = members.iter().map(|contacts| unit_potentials(&conductance.matrix, contacts)).collect();
        Self { place, potential, passes }
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
    pub fn resistance(&self, current: [ContactIdx; 2], voltage: [ContactIdx; 2]) -> Option<Rational> {
        let [inlet, outlet, plus, minus] = [current[0], current[1], voltage[0], voltage[1]].map(|at| self.place[at.0]);
        let one_island = [outlet, plus, minus].into_iter().all(|place| place.0 == inlet.0);
        let potential = &self.potential[inlet.0];
        let difference = |column: usize| &potential[(plus.1, column)] - &potential[(minus.1, column)];
        one_island.then(|| difference(inlet.1) - difference(outlet.1))
    }
}

fn members(conductance: &Conductance) -> Vec<Vec<usize>> {
    let joined = |a: usize, b: usize| !conductance.matrix[(a, b)].is_zero() || !conductance.matrix[(b, a)].is_zero();
    let mut left: Vec<usize> = (0..conductance.contacts).collect();
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

/// Inverse of the island's conductance matrix with its last contact as ground, a row and column of zeros for the ground.
fn unit_potentials(matrix: &Matrix<Rational>, contacts: &[usize]) -> Matrix<Rational> {
    let free = contacts.len() - 1;
    let mut a = Matrix::zero(free, free);
    let mut unit = Matrix::zero(free, free);
    for row in 0..free {
        unit[(row, row)] = Rational::one();
        for column in 0..free {
            a[(row, column)] = matrix[(contacts[row], contacts[column])].clone();
        }
    }
    let mut potential = Matrix::zero(free + 1, free + 1);
    // On an island every current finds its way, so the reduced matrix has an inverse.
    if let Ok(inverse) = solve(a, unit) {
        for row in 0..free {
            for column in 0..free {
                potential[(row, column)] = inverse[(row, column)].clone();
            }
        }
    }
    potential
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Transmissions of a four-contact conductor, T_ij from j into i; every value below is the exact rational solution of
    /// M. Büttiker's equations, Phys. Rev. Lett. 57, 1761 (1986), computed independently.
    const TRANSMISSIONS: [[i64; 4]; 4] = [[0, 1, 0, 2], [2, 0, 1, 0], [1, 1, 0, 1], [0, 1, 2, 0]];

    fn islands(transposed: bool) -> Islands {
        let mut matrix = Matrix::zero(4, 4);
        for row in 0..4 {
            for column in 0..4 {
                let passed = TRANSMISSIONS[row][column];
                let kept = if row == column { 3 } else { 0 };
                matrix[(row, column)] = Rational::from(kept - passed);
            }
        }
        let matrix = if transposed { matrix.transposed() } else { matrix };
        Islands::of(&Conductance { contacts: 4, matrix, shares: Vec::new() })
    }

    fn seventeenths(islands: &Islands, [i, j, k, l]: [usize; 4]) -> String {
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
