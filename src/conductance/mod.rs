//! The conductance matrix in e²/h, its sum rules, and the potential shares of every bundle.
//!
//! Owns: [`Conductance`]. Takes `Channels`, gives matrix and shares, exact where the channels are. Must never contain
//! coordinates, SI units or data.

pub use crate::network::Link;
use crate::number::Matrix;
use crate::number::Number;
use crate::number::Rational;
use crate::number::Scalar;

mod solve;

pub use solve::conductance;

/// The device seen from its contacts.
#[derive(Clone, Debug, PartialEq)]
pub enum Conductance {
    /// In fractions.
    Exact(Solved<Rational>),
    /// In floats: something entered that is no fraction.
    Float(Solved<f64>),
}

/// Matrix and shares in one kind of number.
#[derive(Clone, Debug, PartialEq)]
pub struct Solved<S> {
    /// G\[i\]\[j\] in e²/h: current into the device at contact i per potential at contact j.
    pub matrix: Matrix<S>,
    /// For every bundle its potential as a combination of contact potentials: (contact, share), no zero shares,
    /// shares sum to 1. None for a loop that no contact feeds.
    pub shares: Vec<Option<Vec<(usize, S)>>>,
    /// Wires between contacts of a bench; the matrix is that of the devices without them.
    pub links: Vec<Link<S>>,
}

impl Conductance {
    /// Number of contacts.
    pub fn contacts(&self) -> usize {
        match self {
            Self::Exact(solved) => solved.contacts(),
            Self::Float(solved) => solved.contacts(),
        }
    }

    /// G\[row\]\[column\] in e²/h.
    pub fn entry(&self, row: usize, column: usize) -> Number {
        match self {
            Self::Exact(solved) => solved.matrix[(row, column)].clone().into(),
            Self::Float(solved) => solved.matrix[(row, column)].into(),
        }
    }

    /// The wires of a bench, with their resistance in h/e².
    pub fn links(&self) -> Vec<Link<f64>> {
        match self {
            Self::Exact(solved) => {
                solved.links.iter().map(|link| Link { ends: link.ends, resistance: link.resistance.to_f64() }).collect()
            }
            Self::Float(solved) => solved.links.clone(),
        }
    }

    /// Matrix and shares in fractions, where they are.
    pub fn exact(&self) -> Option<&Solved<Rational>> {
        match self {
            Self::Exact(solved) => Some(solved),
            Self::Float(_) => None,
        }
    }
}

impl<S: Scalar> Solved<S> {
    /// Number of contacts.
    pub fn contacts(&self) -> usize {
        self.matrix.rows()
    }
}
