//! The conductance matrix in e²/h, its sum rules, and the potential shares of every bundle.
//!
//! Owns: [`Conductance`]. Takes `Channels`, gives the exact matrix and shares. Must never contain coordinates, SI units
//! or data.

use crate::number::Matrix;
use crate::number::Rational;

mod solve;

pub use solve::conductance;

/// The device seen from its contacts.
#[derive(Clone, Debug, PartialEq)]
pub struct Conductance {
    /// Number of contacts.
    pub contacts: usize,
    /// G\[i\]\[j\] in e²/h: current into the device at contact i per potential at contact j.
    pub matrix: Matrix<Rational>,
    /// For every bundle its potential as a combination of contact potentials: (contact, share), no zero shares,
    /// shares sum to 1. None for a loop that no contact feeds.
    pub shares: Vec<Option<Vec<(usize, Rational)>>>,
}
