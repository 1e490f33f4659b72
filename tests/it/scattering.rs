//! Transmission between the leads of a lattice, by elimination column after column and by nothing that knows of channels.

use nalgebra::DMatrix;

use crate::lattice::C;
use crate::lattice::Lattice;
use crate::lattice::M;
use crate::lattice::Site;

/// A lead without end: its first cell of sites, the way from one cell to the next, and its potential.
pub struct Lead {
    pub sites: Vec<Site>,
    pub outward: (i64, i64),
    pub potential: f64,
}

/// A lead whose cells lie at the first cell of the matrix of all leads.
struct Port {
    first: usize,
    size: usize,
    /// The inverse of the surface's own propagator: energy less Hamiltonian less what the rest of the lead adds.
    stiffness: M,
    /// Γ = i(Σ − Σ†) of the rest of the lead.
    broadening: M,
}

/// Energy's imaginary part in the leads: what leaves does not come back. It costs the transmissions about as much.
const ABSORPTION: f64 = 1e-11;

/// T\[i\]\[j\]: electrons from lead j to lead i, summed over their channels, at an energy. The diagonal is zero.
///
/// T_ij = tr Γ_i G Γ_j G† (D. S. Fisher and P. A. Lee, Phys. Rev. B 23, 6851 (1981); from memory). The propagator between
/// the leads is the inverse of what remains when all sites of the bar are eliminated.
pub fn transmissions(lattice: &Lattice, leads: &[Lead], energy: f64) -> DMatrix<f64> {
    let ports = ports(lattice, leads, energy);
    let between = remainder(lattice, leads, &ports, energy).try_inverse().expect("leads absorb, so the inverse exists");
    DMatrix::from_fn(leads.len(), leads.len(), |to, from| {
        let [to, from] = [to, from].map(|lead| &ports[lead]);
        let path = between.view((to.first, from.first), (to.size, from.size));
        let passed = &to.broadening * path * &from.broadening * path.adjoint();
        if to.first == from.first { 0.0 } else { passed.trace().re }
    })
}

fn ports(lattice: &Lattice, leads: &[Lead], energy: f64) -> Vec<Port> {
    let mut ports: Vec<Port> = Vec::new();
    for lead in leads {
        let first = ports.last().map_or(0, |before| before.first + before.size);
        let next: Vec<Site> =
            lead.sites.iter().map(|site| (site.0 + lead.outward.0, site.1 + lead.outward.1)).collect();
        let [out, back] = [lattice.hops(&lead.sites, &next), lattice.hops(&next, &lead.sites)];
        let cell = M::from_diagonal_element(next.len(), next.len(), C::new(energy, ABSORPTION))
            - lattice.hamiltonian(&lead.sites, lead.potential);
        let rest = &back * surface(&cell, &back, &out) * &out;
        let broadening = (&rest - rest.adjoint()) * C::i();
        ports.push(Port { first, size: next.len(), stiffness: cell - rest, broadening });
    }
    ports
}

/// The propagator on the first cell of a lead, by eliminating every second cell again and again: M. P. López Sancho, J. M.
/// López Sancho and J. Rubio, J. Phys. F 15, 851 (1985) (from memory). `cell` is energy less Hamiltonian of one cell, `back`
/// the hops toward the bar, `out` those away from it.
fn surface(cell: &M, back: &M, out: &M) -> M {
    let (mut end, mut inner, mut back, mut out) = (cell.clone(), cell.clone(), back.clone(), out.clone());
    for _ in 0..100 {
        let middle = inner.clone().try_inverse().expect("energy has an imaginary part");
        let [middle_back, middle_out] = [&middle * &back, &middle * &out];
        let returned = &back * &middle_out;
        end -= &returned;
        inner -= returned + &out * &middle_back;
        back = &back * middle_back;
        out = &out * middle_out;
        if back.norm() + out.norm() < 1e-14 {
            return end.try_inverse().expect("energy has an imaginary part");
        }
    }
    panic!("the lead does not end");
}

/// What remains of energy less Hamiltonian on the first cells of all leads when the columns of the bar are eliminated from
/// left to right. `arms` couples the leads with the column in hand; leads that no column has met yet have none.
fn remainder(lattice: &Lattice, leads: &[Lead], ports: &[Port], energy: f64) -> M {
    let sites: Vec<Site> = leads.iter().flat_map(|lead| lead.sites.iter().copied()).collect();
    let mut remainder = M::zeros(sites.len(), sites.len());
    for port in ports {
        remainder.view_mut((port.first, port.first), (port.size, port.size)).copy_from(&port.stiffness);
    }
    let own = |at: i64| {
        M::from_diagonal_element(lattice.height as usize, lattice.height as usize, C::new(energy, 0.0))
            - lattice.hamiltonian(&lattice.column(at), (lattice.potential)(at))
    };
    let mut column = own(0);
    let mut arms_in = -lattice.hops(&lattice.column(0), &sites);
    let mut arms_out = -lattice.hops(&sites, &lattice.column(0));
    for at in 0..lattice.length {
        let inverse = column.try_inverse().expect("the energy is no level of the columns so far");
        let through = &arms_in * &inverse;
        remainder -= &through * &arms_out;
        let [here, next] = [lattice.column(at), lattice.column(at + 1)];
        let [forth, back] = [lattice.hops(&here, &next), lattice.hops(&next, &here)];
        column = own(at + 1) - &forth * &inverse * &back;
        arms_in = through * &back - lattice.hops(&next, &sites);
        arms_out = &forth * (inverse * &arms_out) - lattice.hops(&sites, &next);
    }
    remainder
}
