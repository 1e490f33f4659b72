//! The device in floats.

use nalgebra::DMatrix;

use crate::conductance::Conductance;
use crate::conductance::Link;

/// The conductance matrix of the device as the circuit uses it: floats in e²/h, rows that sum to zero.
#[derive(Clone, Debug, PartialEq)]
pub struct Chip {
    pub(super) matrix: DMatrix<f64>,
    /// Wires between contacts, in h/e².
    pub(super) links: Vec<Link<f64>>,
}

impl Chip {
    /// Made once for all circuits around one device at one polarity.
    ///
    /// The diagonal is minus the rest of its row: a current that only a rounded digit of the diagonal drives would show
    /// as a false resistance.
    pub fn of(conductance: &Conductance) -> Self {
        let contacts = conductance.contacts();
        let mut matrix = DMatrix::from_fn(contacts, contacts, |row, column| {
            if row == column { 0.0 } else { conductance.entry(row, column).to_f64() }
        });
        for row in 0..contacts {
            matrix[(row, row)] = -matrix.row(row).sum();
        }
        Self { matrix, links: conductance.links() }
    }

    /// Whether a current can pass from one contact to the other, either way.
    pub(super) fn joins(&self, a: usize, b: usize) -> bool {
        self.matrix[(a, b)] != 0.0 || self.matrix[(b, a)] != 0.0
    }
}
