//! Electrons on a square lattice in a field: sites, bonds with their phases, potential, and the gaps of the bulk.
//!
//! Written for the tests alone: it knows nothing of channels, regions or fillings, only of sites and of hopping between
//! neighbours. Energies are in units of the hopping, lengths in sites.

use nalgebra::Complex;
use nalgebra::DMatrix;
use std::f64::consts::TAU;

/// A complex number.
pub type C = Complex<f64>;
/// A complex matrix.
pub type M = DMatrix<C>;
/// Column and row of a site.
pub type Site = (i64, i64);

/// A bar of `length` columns and `height` rows with its potential, column by column, and leads that run on beyond it.
pub struct Lattice {
    pub length: i64,
    pub height: i64,
    /// Field toward the reader times the area of a plaquette, in units of h/e: negative away from the reader.
    pub flux: f64,
    /// Potential energy of the electrons at a column, in units of the hopping.
    pub potential: Box<dyn Fn(i64) -> f64>,
}

impl Lattice {
    /// Amplitude of the hop from one site to a neighbour: −exp((i q/ħ) ∫ A·dl) with q = −e (R. Peierls, Z. Phys. 80, 763
    /// (1933); the form from memory).
    ///
    /// Inside the bar A = (−B y, 0), so that ∂A_y/∂x − ∂A_x/∂y = B. For q = −e a hop to the right then turns the phase by
    /// +2π × flux × y. Beyond the rims, in leads that run up or down, A_x stays as it is at the rim and A_y = B x instead:
    /// the field is the same, and every lead is periodic along its own direction.
    pub fn hop(&self, from: Site, to: Site) -> C {
        let (columns, rows) = (to.0 - from.0, to.1 - from.1);
        let phase = match (columns, rows) {
            (1 | -1, 0) => columns as f64 * from.1.clamp(0, self.height - 1) as f64,
            (0, 1 | -1) if self.is_beyond_rim(from) || self.is_beyond_rim(to) => -(rows as f64) * from.0 as f64,
            (0, 1 | -1) => 0.0,
            _ => return C::new(0.0, 0.0),
        };
        -C::from_polar(1.0, TAU * self.flux * phase)
    }

    /// Hops from each of some sites (columns of the matrix) to each of others (rows).
    pub fn hops(&self, from: &[Site], to: &[Site]) -> M {
        M::from_fn(to.len(), from.len(), |row, column| self.hop(from[column], to[row]))
    }

    /// The Hamiltonian of some sites at one potential.
    pub fn hamiltonian(&self, sites: &[Site], potential: f64) -> M {
        self.hops(sites, sites) + M::from_diagonal_element(sites.len(), sites.len(), C::new(potential, 0.0))
    }

    /// The sites of one column of the bar, from the lower rim up.
    pub fn column(&self, at: i64) -> Vec<Site> {
        (0..self.height).map(|row| (at, row)).collect()
    }

    fn is_beyond_rim(&self, (_, row): Site) -> bool {
        row < 0 || row >= self.height
    }
}

/// The energy in the middle of the gap above the lowest `bands` bands of an endless lattice with one flux quantum h/e per
/// `period` plaquettes (P. G. Harper, Proc. Phys. Soc. A 68, 874 (1955); from memory).
///
/// With the phase on the hops along x a Bloch wave in x leaves a chain of `period` rows with the potential
/// −2 cos(kx + 2πn/period), closed with the phase of ky. The edges of all bands lie where both phases are 0 or π/period.
pub fn middle_of_gap(period: usize, bands: usize) -> f64 {
    let edges: Vec<Vec<f64>> = (0..4).map(|at| chain(period, [at & 1, at >> 1])).collect();
    let top = edges.iter().map(|levels| if bands > 0 { levels[bands - 1] } else { -6.0 }).fold(-6.0, f64::max);
    let bottom = edges.iter().map(|levels| levels[bands]).fold(f64::INFINITY, f64::min);
    assert!(bottom - top > 0.3, "the gap from {top} to {bottom} is narrow");
    (top + bottom) / 2.0
}

fn chain(period: usize, [kx, ky]: [usize; 2]) -> Vec<f64> {
    let step = TAU / period as f64;
    let mut chain = M::zeros(period, period);
    for row in 0..period {
        chain[(row, row)] += -2.0 * (step * (row as f64 + kx as f64 / 2.0)).cos();
        let next = (row + 1) % period;
        let turn = if next == 0 { C::from_polar(1.0, TAU / 2.0 * ky as f64) } else { C::new(1.0, 0.0) };
        chain[(next, row)] -= turn;
        chain[(row, next)] -= turn.conj();
    }
    let mut levels: Vec<f64> = chain.symmetric_eigenvalues().iter().copied().collect();
    levels.sort_by(f64::total_cmp);
    levels
}
