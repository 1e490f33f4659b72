//! The places of the unknowns, and which of them anything fixes.

use crate::circuit::Chip;
use crate::circuit::Circuit;
use crate::circuit::Taken;
use crate::circuit::loads::Load;
use crate::conductance::Link;
use crate::cooldown::ContactState;

/// The unknowns of one circuit in order: the potential of every contact on the chip, the current in every link between
/// joined contacts, the rack potential of every contact whose lead is broken. Every unknown has the equation of the same
/// number.
pub(super) struct Unknowns {
    pub contacts: usize,
    /// Joined contacts (of each group the first with every other) and wires between contacts.
    pub links: Vec<Joint>,
    /// For every contact the unknown of its rack node: its own number, unless its lead is broken.
    pub rack: Vec<usize>,
    pub total: usize,
}

/// Two contacts with a current between them beside the chip: V − V' = R I.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Joint {
    pub ends: [usize; 2],
    /// In h/e²; 0 for contacts that share one potential.
    pub resistance: f64,
}

impl Unknowns {
    pub fn of(chip: &Chip, circuit: &Circuit) -> Self {
        let contacts = circuit.lines.len();
        let links = links(chip, circuit);
        let mut total = contacts + links.len();
        let mut place = |(contact, state): (usize, &ContactState)| match state {
            ContactState::Open => {
                total += 1;
                total - 1
            }
            ContactState::Live | ContactState::Grounded => contact,
        };
        let rack = circuit.states.iter().enumerate().map(&mut place).collect();
        Self { contacts, links, rack, total }
    }

    /// For every unknown whether a way leads from its node to ground; links count with their contacts. A node that hangs
    /// free has no potential.
    pub fn held(&self, chip: &Chip, loads: &[Load], grounded: &[usize]) -> Vec<bool> {
        let mut held = vec![false; self.total];
        let mut front: Vec<usize> = grounded.iter().map(|&contact| self.rack[contact]).collect();
        front.extend(loads.iter().filter(|load| load.to.is_none()).map(|load| self.rack[load.from]));
        let edges = self.edges(chip, loads);
        while let Some(at) = front.pop() {
            if !std::mem::replace(&mut held[at], true) {
                front.extend(edges[at].iter().copied().filter(|&next| !held[next]));
            }
        }
        for (at, joint) in self.links.iter().enumerate() {
            held[self.contacts + at] = held[joint.ends[0]];
        }
        held
    }

    fn edges(&self, chip: &Chip, loads: &[Load]) -> Vec<Vec<usize>> {
        let mut edges = vec![Vec::new(); self.total];
        let mut add = |a: usize, b: usize| {
            edges[a].push(b);
            edges[b].push(a);
        };
        for row in 0..self.contacts {
            (0..row).filter(|&column| chip.joins(row, column)).for_each(|column| add(row, column));
        }
        self.links.iter().for_each(|joint| add(joint.ends[0], joint.ends[1]));
        loads.iter().filter_map(|load| Some((load.from, load.to?))).for_each(|(a, b)| add(self.rack[a], self.rack[b]));
        edges
    }
}

/// Contacts that the circuit puts at ground: the outlet and what is grounded, save the inlet.
pub(super) fn grounded(circuit: &Circuit, taken: &Taken) -> Vec<usize> {
    let [inlet, outlet] = taken.current.map(|contact| contact.0);
    let is_ground = |at: usize| circuit.states[at] == ContactState::Grounded && at != inlet;
    (0..circuit.states.len()).filter(|&at| at == outlet || is_ground(at)).collect()
}

/// Overlapping joins are one group, so that no two links close a loop without resistance.
fn links(chip: &Chip, circuit: &Circuit) -> Vec<Joint> {
    let (firm, wires): (Vec<_>, Vec<_>) = chip.links.iter().partition(|link| link.resistance == 0.0);
    let joins = circuit.joins.iter().flat_map(|join| join.windows(2)).map(|pair| [pair[0].0, pair[1].0]);
    let mut group: Vec<usize> = (0..circuit.lines.len()).collect();
    for [a, b] in joins.chain(firm.iter().map(|link| link.ends.map(|end| end.0))) {
        let (a, b) = (group[a], group[b]);
        group.iter_mut().filter(|of| **of == a.max(b)).for_each(|of| *of = a.min(b));
    }
    let joined = group.iter().enumerate().filter(|(contact, first)| contact != *first);
    let joined = joined.map(|(at, &first)| Joint { ends: [first, at], resistance: 0.0 });
    let wire = |link: &Link<f64>| Joint { ends: link.ends.map(|end| end.0), resistance: link.resistance };
    joined.chain(wires.into_iter().map(wire)).collect()
}
