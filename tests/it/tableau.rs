//! An independent solution of a device in its circuit: every node and every branch is an unknown of its own, in volt and
//! ampere, with the source as a part of the circuit, solved by elimination with full pivoting. Slow and plain on purpose.

use edgesheet::circuit::Circuit;
use edgesheet::circuit::Drive;
use edgesheet::circuit::Taken;
use edgesheet::conductance::Conductance;
use edgesheet::cooldown::ContactState;
use edgesheet::cooldown::CurrentDivisor;
use edgesheet::cooldown::MeterInput;
use nalgebra::Complex;

type C = Complex<f64>;

/// h/e² in Ω, from h = 6.626 070 15e-34 J s and e = 1.602 176 634e-19 C (SI Brochure, 9th edition).
pub const R_K: f64 = 6.626_070_15e-34 / (1.602_176_634e-19 * 1.602_176_634e-19);
/// Currents count in 0.1 mA, so that volts and currents are of one size.
const SCALE: f64 = 1e4;

/// A branch from one node to another with a·v = b·i + c.
struct Branch {
    from: usize,
    to: usize,
    a: C,
    b: C,
    c: C,
}

/// Nodes: 0 the ground, then chip and rack of every contact, last the inside of a voltage source.
struct Nodes(usize);

impl Nodes {
    fn chip(&self, contact: usize) -> usize {
        1 + contact
    }
    fn rack(&self, contact: usize) -> usize {
        1 + self.0 + contact
    }
    fn source(&self) -> usize {
        1 + 2 * self.0
    }
    fn count(&self) -> usize {
        2 + 2 * self.0
    }
}

fn resistor(from: usize, to: usize, ohm: f64) -> Branch {
    Branch { from, to, a: C::from(1.0), b: C::from(ohm / SCALE), c: C::from(0.0) }
}

fn capacitor(from: usize, farad: f64, hertz: f64) -> Branch {
    let admittance = C::new(0.0, 2.0 * std::f64::consts::PI * hertz * farad * SCALE);
    Branch { from, to: 0, a: admittance, b: C::from(1.0), c: C::from(0.0) }
}

/// What every meter shows in Ω, complex; none where the circuit has no one solution or no current to divide by.
pub fn shown(conductance: &Conductance, circuit: &Circuit, taken: &Taken) -> Option<Vec<C>> {
    let nodes = Nodes(conductance.contacts());
    let [inlet, outlet] = taken.current.map(|contact| contact.0);
    let mut branches = surroundings(&nodes, circuit, taken);
    let ammeter = branches.len();
    branches.push(resistor(nodes.rack(outlet), 0, circuit.ammeter_ohm));
    let feed = branches.len();
    branches.extend(source(&nodes, circuit, inlet));
    let (potentials, currents) = solve(&nodes, conductance, &branches)?;
    let current = match (circuit.divisor, circuit.drive) {
        (CurrentDivisor::Outlet, _) => currents[ammeter],
        (CurrentDivisor::Nominal, Drive::Voltage { volt, series_ohm }) => C::from(volt / series_ohm * SCALE),
        _ => currents[feed],
    } / SCALE;
    let one = |connection: &edgesheet::circuit::Connection| {
        let [plus, minus] = connection.voltage.map(|contact| potentials[nodes.rack(contact.0)]);
        let meter = &circuit.meters[connection.meter.unwrap_or(0)];
        let phase = if circuit.frequency_hz.is_some() { meter.phase_deg.to_radians() } else { 0.0 };
        C::from_polar(meter.gain, -phase) * (plus - minus) / current
    };
    (current.norm() > 1e-15).then(|| taken.connections.iter().map(one).collect())
}

fn surroundings(nodes: &Nodes, circuit: &Circuit, taken: &Taken) -> Vec<Branch> {
    let mut branches = Vec::new();
    for (contact, (line, state)) in circuit.lines.iter().zip(&circuit.states).enumerate() {
        match state {
            ContactState::Open => {}
            _ => branches.push(resistor(nodes.rack(contact), nodes.chip(contact), line.ohm)),
        }
        if *state == ContactState::Grounded && contact != taken.current[0].0 {
            branches.push(resistor(nodes.rack(contact), 0, 0.0));
        }
        if let Some(hertz) = circuit.frequency_hz {
            branches.push(capacitor(nodes.rack(contact), line.capacitance_farad, hertz));
        }
    }
    for join in &circuit.joins {
        branches.extend(join.windows(2).map(|pair| resistor(nodes.chip(pair[0].0), nodes.chip(pair[1].0), 0.0)));
    }
    for connection in &taken.connections {
        let meter = &circuit.meters[connection.meter.unwrap_or(0)];
        let [plus, minus] = connection.voltage.map(|contact| nodes.rack(contact.0));
        match (meter.input_ohm, meter.input) {
            (None, _) => {}
            (Some(ohm), MeterInput::Across) => branches.push(resistor(plus, minus, ohm)),
            (Some(ohm), MeterInput::Ground) => branches.extend([plus, minus].map(|node| resistor(node, 0, ohm))),
        }
    }
    branches
}

/// The current flows from ground into the rack node of the inlet; the first branch is the one that carries it.
fn source(nodes: &Nodes, circuit: &Circuit, inlet: usize) -> Vec<Branch> {
    let zero = C::from(0.0);
    match circuit.drive {
        Drive::Current { .. } => {
            let ideal = Branch { from: 0, to: nodes.rack(inlet), a: zero, b: C::from(1.0), c: C::from(-1e-4 * SCALE) };
            vec![ideal, resistor(nodes.source(), 0, 1.0)]
        }
        Drive::Voltage { volt, series_ohm } => vec![
            resistor(nodes.source(), nodes.rack(inlet), series_ohm),
            Branch { from: nodes.source(), to: 0, a: C::from(1.0), b: zero, c: C::from(volt) },
        ],
    }
}

/// Currents balance at every node but the ground; every branch has its law.
fn solve(nodes: &Nodes, conductance: &Conductance, branches: &[Branch]) -> Option<(Vec<C>, Vec<C>)> {
    let size = nodes.count() + branches.len();
    let mut rows = vec![vec![C::from(0.0); size + 1]; size];
    rows[0][0] = C::from(1.0);
    for row in 0..conductance.contacts() {
        for column in 0..conductance.contacts() {
            let siemens = conductance.entry(row, column).to_f64() / R_K;
            rows[nodes.chip(row)][nodes.chip(column)] += siemens * SCALE;
        }
    }
    for (at, branch) in branches.iter().enumerate() {
        let at = nodes.count() + at;
        for (node, sign) in [(branch.from, 1.0), (branch.to, -1.0)] {
            if node != 0 {
                rows[node][at] += sign;
            }
            rows[at][node] += branch.a * sign;
        }
        rows[at][at] -= branch.b;
        rows[at][size] = branch.c;
    }
    let mut solution = eliminated(rows)?;
    let currents = solution.split_off(nodes.count());
    Some((solution, currents))
}

/// Gauss–Jordan with the largest remaining entry as pivot; none where nothing is left to divide by.
fn eliminated(mut rows: Vec<Vec<C>>) -> Option<Vec<C>> {
    let size = rows.len();
    let mut place = vec![0; size];
    let mut free: Vec<usize> = (0..size).collect();
    for step in 0..size {
        let candidates = (step..size).flat_map(|row| free.iter().map(move |&column| (row, column)));
        let worth = |&(row, column): &(usize, usize)| rows[row][column].norm();
        let (row, column) = candidates.max_by(|a, b| worth(a).total_cmp(&worth(b)))?;
        if rows[row][column].norm() < 1e-13 {
            return None;
        }
        rows.swap(step, row);
        free.retain(|&other| other != column);
        place[column] = step;
        let pivot = rows[step].clone();
        for (_, other) in rows.iter_mut().enumerate().filter(|(at, _)| *at != step) {
            let factor = other[column] / pivot[column];
            other.iter_mut().zip(&pivot).for_each(|(entry, pivot)| *entry -= factor * pivot);
        }
    }
    Some((0..size).map(|column| rows[place[column]][size] / rows[place[column]][column]).collect())
}
