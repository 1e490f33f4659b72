//! What must hold for every circuit, on random ones: the independent solution, reciprocity, passivity, closure; and the
//! single effects and uncertainties against formulas by hand.

use edgesheet::circuit::Cause;
use edgesheet::circuit::Chip;
use edgesheet::circuit::Circuit;
use edgesheet::circuit::Connection;
use edgesheet::circuit::Drive;
use edgesheet::circuit::Part;
use edgesheet::circuit::Shown;
use edgesheet::circuit::Taken;
use edgesheet::circuit::budget;
use edgesheet::circuit::corrections;
use edgesheet::circuit::shown;
use edgesheet::conductance::Conductance;
use edgesheet::conductance::Solved;
use edgesheet::cooldown::ContactState;
use edgesheet::cooldown::CurrentDivisor;
use edgesheet::cooldown::MeterInput;
use edgesheet::device::ContactIdx;
use edgesheet::number::Matrix;
use edgesheet::number::Rational;
use edgesheet::quantity::Polarity::Away;
use edgesheet::quantity::Polarity::Toward;
use nalgebra::Complex;

use crate::around::bar;
use crate::around::meter;
use crate::around::metered;
use crate::around::near;
use crate::around::taken;
use crate::around::through;
use crate::random_bar::Dice;
use crate::tableau;
use crate::tableau::R_K;

/// A device whose channels run in random rings: what enters a contact leaves it, so rows and columns sum to zero.
fn random_device(dice: &mut Dice, contacts: usize) -> Conductance {
    let mut matrix = Matrix::zero(contacts, contacts);
    for _ in 0..3 {
        let mut order: Vec<usize> = (0..contacts).collect();
        (1..contacts).rev().for_each(|at| order.swap(at, dice.below(at as u64 + 1) as usize));
        let weight = Rational::fraction(1 + dice.below(9) as i64, 1 + dice.below(3) as i64).unwrap();
        for at in 0..contacts {
            let (from, to) = (order[at], order[(at + 1) % contacts]);
            matrix[(to, to)] += &weight;
            matrix[(to, from)] -= &weight;
        }
    }
    Conductance::Exact(Solved { matrix, shares: Vec::new(), links: Vec::new() })
}

fn one_of<T: Copy>(dice: &mut Dice, values: &[T]) -> T {
    values[dice.below(values.len() as u64) as usize]
}

fn random_circuit(dice: &mut Dice, contacts: usize) -> Circuit {
    let mut circuit = Circuit::ideal(contacts);
    for line in &mut circuit.lines {
        line.ohm = one_of(dice, &[0.0, 0.0, 0.02, 130.0, 3000.0, 4.0e5]);
        line.capacitance_farad = one_of(dice, &[0.0, 0.3e-9, 1e-9, 5e-9]);
    }
    circuit.frequency_hz = one_of(dice, &[None, Some(17.0), Some(137.0)]);
    circuit.ammeter_ohm = one_of(dice, &[0.0, 100.0, 1e4]);
    circuit.meters = vec![
        meter(one_of(dice, &[MeterInput::Across, MeterInput::Ground]), one_of(dice, &[1e5, 1e7, 1e9])),
        meter(one_of(dice, &[MeterInput::Across, MeterInput::Ground]), 1e8),
    ];
    circuit.meters[0].gain = one_of(dice, &[1.0, 0.97, 100.0]);
    circuit.meters[1].phase_deg = one_of(dice, &[0.0, 3.0, -120.0]);
    circuit
}

/// Source, divisor and states on top; joined contacts have lines, so that no ring without resistance arises.
fn with_accidents(dice: &mut Dice, mut circuit: Circuit, outlet: usize) -> Circuit {
    let contacts = circuit.lines.len();
    let bare = Drive::Current { ampere: None };
    circuit.drive = one_of(dice, &[bare, Drive::Voltage { volt: 0.1, series_ohm: 1e6 }]);
    circuit.divisor = one_of(dice, &[CurrentDivisor::Nominal, CurrentDivisor::Inlet, CurrentDivisor::Outlet]);
    let hit = dice.below(2 * contacts as u64) as usize;
    if hit < contacts && hit != outlet {
        circuit.states[hit] = one_of(dice, &[ContactState::Grounded, ContactState::Open]);
    }
    if dice.below(3) == 0 {
        circuit.joins = vec![vec![ContactIdx(0), ContactIdx(2)]];
        [0, 2].into_iter().for_each(|at| circuit.lines[at].ohm += 1.0);
    }
    circuit
}

fn random_taken(dice: &mut Dice, contacts: usize) -> Taken {
    let mut pair = || {
        let first = dice.below(contacts as u64) as usize;
        let second = (first + 1 + dice.below(contacts as u64 - 1) as usize) % contacts;
        [ContactIdx(first), ContactIdx(second)]
    };
    let current = pair();
    let connections = (0..3).map(|at| Connection { voltage: pair(), meter: [None, Some(1), Some(0)][at] }).collect();
    Taken { current, connections }
}

fn complex(shown: Shown) -> Complex<f64> {
    Complex::new(shown.ohm, shown.quadrature_ohm.unwrap_or(0.0))
}

/// Every node and branch as an unknown of its own, in SI units, with the source as a part of the circuit.
#[test]
fn an_independent_solution_gives_the_same() {
    let mut compared = 0;
    for seed in 0..400 {
        let mut dice = Dice::new(seed);
        let contacts = 3 + dice.below(5) as usize;
        let device = random_device(&mut dice, contacts);
        let taken = random_taken(&mut dice, contacts);
        let circuit = random_circuit(&mut dice, contacts);
        let circuit = with_accidents(&mut dice, circuit, taken.current[1].0);
        let ours = shown(&Chip::of(&device), &circuit, &taken);
        let Some(theirs) = tableau::shown(&device, &circuit, &taken) else { continue };
        for (ours, theirs) in ours.iter().zip(theirs) {
            let ours = complex(ours.unwrap_or_else(|| panic!("{seed}: nothing shown, {theirs} expected")));
            let gap = (ours - theirs).norm();
            assert!(gap < 1e-9 * R_K.max(theirs.norm()), "{seed}: {ours} is not {theirs} {circuit:?} {taken:?}");
            compared += 1;
        }
    }
    assert!(compared > 900, "only {compared} values compared");
}

/// Potentials against the ground, per current into every rack node, with all meters and grounds in place.
fn port_matrix(device: &Conductance, circuit: &Circuit, taken: &Taken) -> Vec<Vec<Complex<f64>>> {
    let ground = taken.current[1];
    let ports: Vec<ContactIdx> = (0..device.contacts()).map(ContactIdx).filter(|port| *port != ground).collect();
    let silent = circuit.meters.len();
    let mut circuit = circuit.clone();
    circuit.meters.push(edgesheet::cooldown::Meter { input_ohm: None, ..meter(MeterInput::Across, 1.0) });
    let column = |&inlet: &ContactIdx| {
        let mut all = Taken { current: [inlet, ground], connections: taken.connections.clone() };
        let against_ground = |&port| Connection { voltage: [port, ground], meter: Some(silent) };
        all.connections.extend(ports.iter().map(against_ground));
        let shown = shown(&Chip::of(device), &circuit, &all);
        shown[taken.connections.len()..].iter().map(|shown| complex(shown.unwrap())).collect()
    };
    ports.iter().map(column).collect()
}

fn reversed(device: &Conductance) -> Conductance {
    let solved = device.exact().unwrap();
    Conductance::Exact(Solved { matrix: solved.matrix.transposed(), ..solved.clone() })
}

/// Reversing the field transposes the port matrix of a fixed circuit (Onsager–Casimir: H. B. G. Casimir, Rev. Mod. Phys.
/// 17, 343 (1945); from memory), and a passive circuit takes power: v†(Z + Z†)v ≥ 0 for any currents v.
#[test]
fn a_fixed_circuit_is_reciprocal_and_passive() {
    for seed in 0..100 {
        let mut dice = Dice::new(1000 + seed);
        let contacts = 3 + dice.below(5) as usize;
        let device = random_device(&mut dice, contacts);
        let circuit = Circuit { ammeter_ohm: 0.0, ..random_circuit(&mut dice, contacts) };
        let taken = random_taken(&mut dice, contacts);
        let toward = port_matrix(&device, &circuit, &taken);
        let away = port_matrix(&reversed(&device), &circuit, &taken);
        let currents: Vec<Complex<f64>> =
            toward.iter().map(|_| Complex::new(dice.below(21) as f64 - 10.0, dice.below(21) as f64 - 10.0)).collect();
        let mut power = 0.0;
        for (row, column) in (0..toward.len()).flat_map(|row| (0..toward.len()).map(move |column| (row, column))) {
            let gap = (toward[row][column] - away[column][row]).norm();
            assert!(gap < 1e-10 * R_K.max(toward[row][column].norm()), "{seed}");
            power += (currents[row].conj() * toward[column][row] * currents[column]).re;
        }
        assert!(power >= -1e-6, "{seed}: {power}");
    }
}

/// Kirchhoff: the voltages of one set round a loop of probes cancel, whatever the meters draw.
#[test]
fn readings_of_one_set_close() {
    for (seed, polarity) in (0..100).flat_map(|seed| [(seed, Toward), (seed, Away)]) {
        let mut circuit = random_circuit(&mut Dice::new(seed), 6);
        circuit.meters.truncate(1);
        let shown = shown(&Chip::of(&bar(3, polarity)), &circuit, &taken("14,23 65 26 35"));
        let value: Vec<Complex<f64>> = shown.into_iter().map(|shown| complex(shown.unwrap())).collect();
        let sum = (value[0] - value[1]) - (value[2] - value[3]);
        assert!(sum.norm() < 1e-12 * R_K * circuit.meters[0].gain, "{seed}: {sum}");
    }
}

/// Taken one at a time with inputs to ground the loop stays open. By hand at ν = 1 and `+`, r = R_K/R_in: R_23 =
/// R_K r/(1 + r)², R_65 = 0, and R_26 = R_35 = R_K/(1 + r).
#[test]
fn readings_taken_alone_with_grounded_inputs_do_not_close() {
    let circuit = metered(MeterInput::Ground, 1e7);
    let alone = |reading| shown(&Chip::of(&bar(1, Toward)), &circuit, &taken(reading))[0].unwrap().ohm;
    let sum = (alone("14,23") - alone("14,65")) - (alone("14,26") - alone("14,35"));
    let r = R_K / 1e7;
    near(sum, R_K * r / (1.0 + r) / (1.0 + r), 1e-9);
}

/// Every part alone, by hand at ν = 1 and `+` for the reading 14,26: droop −R²/(R_s + R), input across −R²/(R_in + R),
/// gain (g − 1)R, lines none, capacitance on 2 R/(1 + ix) − R, phase R(e^{−iφ} − 1).
#[test]
fn corrections_name_the_part_that_matters() {
    let mut circuit = Circuit { frequency_hz: Some(17.0), ..through(1e6) };
    circuit.meters = vec![edgesheet::cooldown::Meter { gain: 1.01, phase_deg: 2.0, ..meter(MeterInput::Across, 1e7) }];
    (circuit.lines[0].ohm, circuit.lines[1].capacitance_farad) = (500.0, 1e-9);
    let found = corrections(&Chip::of(&bar(1, Toward)), &circuit, &taken("14,26")).remove(0);
    let x = Complex::new(0.0, 2.0 * std::f64::consts::PI * 17.0 * 1e-9 * R_K);
    let phase = 2.0_f64.to_radians();
    let expected = [
        (Part::Source, Complex::from(-R_K * R_K / (1e6 + R_K))),
        (Part::Lines, Complex::from(0.0)),
        (Part::Capacitance, R_K / (1.0 + x) - R_K),
        (Part::MeterInput, Complex::from(R_K / (1.0 + R_K / 1e7) - R_K)),
        (Part::Gain, Complex::from(0.01 * R_K)),
        (Part::Phase, R_K * (Complex::from_polar(1.0, -phase) - 1.0)),
    ];
    assert_eq!(found.len(), expected.len());
    for (correction, (part, change)) in found.iter().zip(expected) {
        assert_eq!(correction.part, part);
        let gap = (complex(correction.change) - change).norm();
        assert!(gap < 1e-9, "{part:?}: {:?} is not {change}", correction.change);
    }
    // The two-terminal reading holds the line of 1.
    let whole = corrections(&Chip::of(&bar(1, Toward)), &circuit, &taken("14,14")).remove(0);
    near(whole[1].change.ohm, 500.0, 1e-10);
}

/// By hand for R_14,14 at ν = 2 with lines of 130(2) Ω and 80(3) Ω, a gain of 1.02(1) and 10.0(1) nA: R = 1.02 (R_K/2 +
/// 210 Ω), contributions 2.04 Ω, 3.06 Ω, R/102 and R/100, added in squares (JCGM 100:2008, 5.1.2).
#[test]
fn a_budget_lists_what_is_stated() {
    let mut circuit = metered(MeterInput::Ground, 1e300);
    (circuit.lines[0].ohm, circuit.lines[0].u_ohm) = (130.0, Some(2.0));
    (circuit.lines[3].ohm, circuit.lines[3].u_ohm) = (80.0, Some(3.0));
    circuit.lines[1].u_ohm = Some(5.0);
    (circuit.meters[0].gain, circuit.meters[0].u_gain) = (1.02, Some(0.01));
    (circuit.drive, circuit.u_current_ampere) = (Drive::Current { ampere: Some(1e-8) }, Some(1e-10));
    let found = budget(&Chip::of(&bar(2, Toward)), &circuit, &taken("14,14"), 0).unwrap();
    let ohm = 1.02 * (R_K / 2.0 + 210.0);
    let expected = [
        (Cause::Line(ContactIdx(0)), 2.0, 2.04),
        (Cause::Line(ContactIdx(1)), 5.0, 0.0),
        (Cause::Line(ContactIdx(3)), 3.0, 3.06),
        (Cause::Gain(0), 0.01, ohm / 102.0),
        (Cause::Current, 1e-10, ohm / 100.0),
    ];
    assert_eq!(found.terms.len(), expected.len());
    for (term, (cause, u, contribution_ohm)) in found.terms.iter().zip(expected) {
        assert_eq!((term.cause, term.u), (cause, u));
        near(term.contribution_ohm, contribution_ohm, 1e-10);
    }
    let whole = expected.iter().map(|(_, _, part)| part * part).sum::<f64>().sqrt();
    near(found.u_ohm, whole, 1e-10);
    // Behind 1 MΩ the nominal 1 V / 1 MΩ divides: 1(0.01) µA is 1 %; the line enters through the droop alone:
    // ∂/∂R of R_H/(1 + (R_H + R)/R_s) = −R_app²/(R_H R_s).
    let mut circuit = Circuit { u_current_ampere: Some(1e-8), ..through(1e6) };
    circuit.lines[0].u_ohm = Some(1.0);
    let found = budget(&Chip::of(&bar(1, Toward)), &circuit, &taken("14,26"), 0).unwrap();
    let app = R_K / (1.0 + R_K / 1e6);
    near(found.terms[0].sensitivity, -app * app / R_K / 1e6, 1e-7);
    near(found.terms[1].contribution_ohm, app / 100.0, 1e-12);
    assert!(budget(&Chip::of(&bar(1, Toward)), &circuit, &taken("14,26"), 7).is_none());
}
