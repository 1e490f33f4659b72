//! The equations of one circuit, with resistances as resistances.
//!
//! Per contact: I = G V + the currents of its links (from the line into the chip), W = V + R I (its rack node), and at the
//! rack node I + Σ Y W = J. R never divides, so that a line of 0 Ω is exact and one of a milliohm costs no digits, as a
//! large conductance beside a small one would. All in units of h/e² and e²/h.

use nalgebra::Complex;
use nalgebra::DMatrix;
use nalgebra::RowDVector;

use crate::circuit::Chip;
use crate::circuit::Circuit;
use crate::circuit::Taken;
use crate::circuit::loads::Load;
use crate::circuit::loads::loads;
use crate::circuit::unknowns::Joint;
use crate::circuit::unknowns::Unknowns;
use crate::circuit::unknowns::grounded;
use crate::cooldown::ContactState;
use crate::quantity::KLITZING;

type Row = RowDVector<Complex<f64>>;

/// A square system, with what is read from its solution.
pub(super) struct Equations {
    /// One row per unknown.
    pub matrix: DMatrix<Complex<f64>>,
    /// The row that the unit current enters.
    pub inlet: usize,
    /// Every rack potential as a combination of the unknowns; none for a node that hangs free.
    pub rack: Vec<Option<Row>>,
    /// The current that leaves at the outlet, as a combination of the unknowns.
    pub leaving: Row,
}

/// Sets up the circuit; none when the inlet's rack node hangs free.
pub(super) fn equations(chip: &Chip, circuit: &Circuit, taken: &Taken) -> Option<Equations> {
    let unknowns = Unknowns::of(chip, circuit);
    let loads = loads(circuit, taken);
    let grounded = grounded(circuit, taken);
    let held = unknowns.held(chip, &loads, &grounded);
    let [inlet, outlet] = taken.current.map(|contact| unknowns.rack[contact.0]);
    let chip_rows = chip_rows(chip, &unknowns);
    let rack = rack_rows(circuit, &unknowns, &chip_rows);
    let mut matrix = balance(&unknowns, &loads, &chip_rows, &rack);
    let leaving = -matrix.row(outlet);
    for &contact in &grounded {
        let pinned = pinned(circuit, taken, contact, (&rack[contact], &leaving));
        // Scaled to its neighbours, so that pivoting leaves the rows in place.
        matrix.set_row(unknowns.rack[contact], &(pinned * Complex::from(chip.matrix[(contact, contact)].max(1.0))));
    }
    let shorted = shorted_links(circuit, taken, &unknowns, &grounded);
    for at in (0..unknowns.total).filter(|at| !held[*at] || shorted.contains(at)) {
        matrix.set_row(at, &unit(unknowns.total, at));
    }
    let rack = rack.into_iter().zip(&unknowns.rack).map(|(row, &at)| held[at].then_some(row)).collect();
    held[inlet].then_some(Equations { matrix, inlet, rack, leaving })
}

fn unit(total: usize, at: usize) -> Row {
    let mut row = Row::zeros(total);
    row[at] = Complex::ONE;
    row
}

/// I = G V + links, per contact.
fn chip_rows(chip: &Chip, unknowns: &Unknowns) -> Vec<Row> {
    let mut rows = vec![Row::zeros(unknowns.total); unknowns.contacts];
    for (contact, row) in rows.iter_mut().enumerate() {
        (0..unknowns.contacts).for_each(|column| row[column] = chip.matrix[(contact, column)].into());
    }
    for (at, &Joint { ends: [first, other], .. }) in unknowns.links.iter().enumerate() {
        rows[first][unknowns.contacts + at] = Complex::ONE;
        rows[other][unknowns.contacts + at] = -Complex::ONE;
    }
    rows
}

/// W = V + R I, per contact; behind a broken lead an unknown of its own.
fn rack_rows(circuit: &Circuit, unknowns: &Unknowns, chip_rows: &[Row]) -> Vec<Row> {
    let row = |(contact, &at): (usize, &usize)| {
        let drop = &chip_rows[contact] * Complex::from(circuit.lines[contact].ohm / KLITZING.value);
        let unit = unit(unknowns.total, at);
        if at == contact { unit + drop } else { unit }
    };
    unknowns.rack.iter().enumerate().map(row).collect()
}

/// I + Σ Y W per rack node, with I = 0 on the chip side of a broken lead; V − V' = R I per link.
fn balance(unknowns: &Unknowns, loads: &[Load], chip_rows: &[Row], rack: &[Row]) -> DMatrix<Complex<f64>> {
    let mut matrix = DMatrix::zeros(unknowns.total, unknowns.total);
    chip_rows.iter().enumerate().for_each(|(contact, row)| matrix.set_row(contact, row));
    for (at, &Joint { ends: [first, other], resistance }) in unknowns.links.iter().enumerate() {
        let mut drop = unit(unknowns.total, first) - unit(unknowns.total, other);
        // A link carries its current from its first contact to the other.
        drop[unknowns.contacts + at] = Complex::from(-resistance);
        matrix.set_row(unknowns.contacts + at, &drop);
    }
    for load in loads {
        let drop = load.to.map_or_else(|| rack[load.from].clone(), |to| &rack[load.from] - &rack[to]);
        let drawn = drop * load.admittance;
        let mut add = |contact: usize, drawn: &Row| {
            let mut row = matrix.row_mut(unknowns.rack[contact]);
            row += drawn;
        };
        add(load.from, &drawn);
        load.to.into_iter().for_each(|to| add(to, &-&drawn));
    }
    matrix
}

/// W = 0, or at the outlet W = R I' with the ammeter's R and the current I' that leaves.
fn pinned(circuit: &Circuit, taken: &Taken, contact: usize, (rack, leaving): (&Row, &Row)) -> Row {
    if is_firm(circuit, taken, contact) {
        return rack.clone();
    }
    rack - leaving * Complex::from(circuit.ammeter_ohm / KLITZING.value)
}

/// Whether nothing lies between the rack node of a contact at ground and the ground itself.
fn is_firm(circuit: &Circuit, taken: &Taken, contact: usize) -> bool {
    contact != taken.current[1].0 || circuit.ammeter_ohm == 0.0 || circuit.states[contact] == ContactState::Grounded
}

/// Links between joined contacts that both reach ground without resistance. How the current divides in such a ring is not
/// fixed by anything and no potential depends on it: these links count as carrying none.
fn shorted_links(circuit: &Circuit, taken: &Taken, unknowns: &Unknowns, grounded: &[usize]) -> Vec<usize> {
    let at_ground = |contact: &usize| {
        grounded.contains(contact)
            && circuit.states[*contact] != ContactState::Open
            && circuit.lines[*contact].ohm == 0.0
            && is_firm(circuit, taken, *contact)
    };
    let firm = || unknowns.links.iter().enumerate().filter(|(_, joint)| joint.resistance == 0.0);
    let mut reached: Vec<usize> = firm().map(|(_, joint)| joint.ends[0]).filter(at_ground).collect();
    let mut shorted = Vec::new();
    for (at, Joint { ends: [first, other], .. }) in firm().filter(|(_, joint)| at_ground(&joint.ends[1])) {
        if reached.contains(first) {
            shorted.push(unknowns.contacts + at);
        }
        reached.extend([first, other]);
    }
    shorted
}
