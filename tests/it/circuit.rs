//! What meters, lines and sources do to the readings of a six-contact bar, against published values and formulas by hand.
//! The bar: 1 left end, 2 and 3 top, 4 right end, 5 and 6 bottom (right, left).

use edgesheet::circuit::Chip;
use edgesheet::circuit::Circuit;
use edgesheet::circuit::shown;
use edgesheet::cooldown::ContactState;
use edgesheet::cooldown::CurrentDivisor;
use edgesheet::cooldown::Meter;
use edgesheet::cooldown::MeterInput;
use edgesheet::device::ContactIdx;
use edgesheet::quantity::Polarity::Away;
use edgesheet::quantity::Polarity::Toward;
use nalgebra::Complex;

use crate::around::bar;
use crate::around::first;
use crate::around::ideal;
use crate::around::metered;
use crate::around::near;
use crate::around::ohm;
use crate::around::taken;
use crate::around::through;
use crate::around::with_line;
use crate::tableau::R_K;

const MEGAOHM: f64 = 1e6;

/// Büttiker (1988), ideal contacts; value from memory.
#[test]
fn an_ideal_circuit_shows_the_device() {
    for filling in 1..7 {
        let hall = R_K / filling as f64;
        for (reading, toward, away) in [
            ("14,14", hall, hall),
            ("14,23", 0.0, 0.0),
            ("14,65", 0.0, 0.0),
            ("14,26", hall, -hall),
            ("14,35", hall, -hall),
            ("41,26", -hall, hall),
            ("12,45", 0.0, 0.0),
        ] {
            near(ohm(&bar(filling, Toward), &ideal(), reading), toward, 1e-14);
            near(ohm(&bar(filling, Away), &ideal(), reading), away, 1e-14);
        }
    }
}

/// V_meas = V R_in/(R_in + R_s), the loading of a source of resistance R_s by an input R_in (common practice); an edge
/// channel network with 10 MΩ across a Hall pair at ν = 2 gives 12 889.767 675 Ω (own calculation, exactly the formula).
#[test]
fn an_input_across_a_hall_pair_loads_it_as_a_resistance_does() {
    let loaded = metered(MeterInput::Across, 10.0 * MEGAOHM);
    near(ohm(&bar(2, Toward), &loaded, "14,26"), 12_889.767_675, 1e-10);
    near(ohm(&bar(2, Away), &loaded, "14,26"), -12_889.767_675, 1e-10);
    for (filling, input_ohm, error) in [
        (2, 1e7, -1.288_977e-3),
        (2, 1e8, -1.290_474e-4),
        (2, 1e9, -1.290_624e-5),
        (2, 1e10, -1.290_639e-6),
        (1, 1e7, -2.574_635e-3),
        (1, 1e8, -2.580_615e-4),
        (1, 1e9, -2.581_214e-5),
        (1, 1e10, -2.581_274e-6),
    ] {
        let shown = ohm(&bar(filling, Toward), &metered(MeterInput::Across, input_ohm), "14,26");
        near(shown / (R_K / filling as f64) - 1.0, error, 1e-6);
    }
}

/// Grounded inputs, r = R_H/R_in: on the hot edge each probe loses a share, V_2 = V_1/(1 + r) and V_3 = V_2/(1 + r), so
/// that R_23 = R_H r/(1 + r)²; on the cold edge there is no voltage to lose. After F. Fischer and M. Grayson, J. Appl.
/// Phys. 98, 013710 (2005), from memory; values from an edge channel network.
#[test]
fn grounded_inputs_show_a_false_longitudinal_resistance_on_the_hot_edge() {
    let loaded = metered(MeterInput::Ground, 10.0 * MEGAOHM);
    for (filling, hot) in [(2, 16.614_611), (1, 66.287_447)] {
        let r = R_K / filling as f64 / 1e7;
        let formula = R_K / filling as f64 * r / (1.0 + r) / (1.0 + r);
        near(formula, hot, 1e-7);
        near(ohm(&bar(filling, Toward), &loaded, "14,23"), formula, 1e-10);
        near(ohm(&bar(filling, Away), &loaded, "14,65"), formula, 1e-10);
        assert_eq!(ohm(&bar(filling, Toward), &loaded, "14,65"), 0.0);
        assert_eq!(ohm(&bar(filling, Away), &loaded, "14,23"), 0.0);
    }
}

/// With the Hall pair grounded through the inputs the hot probe alone loses: R_26 = R_H/(1 + r). In a set with R_23 the
/// first probe carries two inputs: R_26 = R_H/(1 + 2r).
#[test]
fn meters_of_one_set_load_each_other() {
    let loaded = metered(MeterInput::Ground, 10.0 * MEGAOHM);
    let r = R_K / 1e7;
    near(ohm(&bar(1, Toward), &loaded, "14,26"), R_K / (1.0 + r), 1e-13);
    near(ohm(&bar(1, Toward), &loaded, "14,26 23"), R_K / (1.0 + 2.0 * r), 1e-13);
}

/// The current is counted at the source and the node of the sample carries no line: the two-terminal value stays (own
/// calculation with an edge channel network).
#[test]
fn grounded_inputs_on_probes_leave_the_two_terminal_value() {
    let mut circuit = metered(MeterInput::Ground, 10.0 * MEGAOHM);
    circuit.meters.push(Meter { input_ohm: None, ..circuit.meters[0].clone() });
    let mut both = taken("14,14 23");
    both.connections[0].meter = Some(1);
    for polarity in [Toward, Away] {
        let shown = shown(&Chip::of(&bar(2, polarity)), &circuit, &both);
        near(shown[0].unwrap().ohm, 12_906.403_7, 1e-8);
    }
}

/// I/I_0 − 1 = −R_x/(R_s + R_x) for a voltage behind a series resistor (common practice, values computed by hand).
#[test]
fn a_series_resistor_lets_the_current_droop() {
    for (filling, series_ohm, droop) in [
        (2, 1e6, -1.274_195e-2),
        (2, 1e7, -1.288_977e-3),
        (2, 1e8, -1.290_474e-4),
        (1, 1e6, -2.516_327e-2),
        (1, 1e7, -2.574_635e-3),
        (1, 1e8, -2.580_615e-4),
    ] {
        let shown = ohm(&bar(filling, Toward), &through(series_ohm), "14,26");
        near(shown / (R_K / filling as f64) - 1.0, droop, 1e-6);
    }
}

/// R_app = R/(1 + (R_2t + R_lines)/R_s) by hand: 25 089.9 Ω with 3 kΩ in the current path of a 1 MΩ source at ν = 1,
/// 25 016.9 Ω with 3 kΩ in each current lead.
#[test]
fn lines_in_the_current_path_add_to_the_droop() {
    let one = with_line(through(MEGAOHM), 1, 3000.0);
    let two = with_line(one.clone(), 4, 3000.0);
    for (circuit, rounded, lines) in [(&one, 25_089.90, 3000.0), (&two, 25_016.9, 6000.0)] {
        let shown = ohm(&bar(1, Toward), circuit, "14,26");
        near(shown, R_K / (1.0 + (R_K + lines) / 1e6), 1e-13);
        near(shown, rounded, 4e-6);
    }
    for divisor in [CurrentDivisor::Inlet, CurrentDivisor::Outlet] {
        near(ohm(&bar(1, Toward), &Circuit { divisor, ..two.clone() }, "14,26"), R_K, 1e-13);
    }
}

/// A voltage with no series resistor has no nominal current; a measured one still divides.
#[test]
fn a_bare_voltage_needs_a_measured_current() {
    assert_eq!(first(&bar(1, Toward), &through(0.0), "14,26"), None);
    let measured = Circuit { divisor: CurrentDivisor::Outlet, ..through(0.0) };
    near(ohm(&bar(1, Toward), &measured, "14,26"), R_K, 1e-14);
}

/// Three-terminal test of a contact, I in at 1: against the probe that 1 feeds it shows the line, against the other one
/// the line and the Hall resistance (F. Delahaye and B. Jeckelmann, Metrologia 40, 217 (2003) for the method; from
/// memory). ν = 2 and a line of h/e²/1000: 0.001 and 0.501; the sides exchange with the field.
#[test]
fn a_three_terminal_reading_shows_the_line_of_the_shared_contact() {
    let circuit = with_line(ideal(), 1, R_K / 1000.0);
    for (polarity, fed, other) in [(Toward, "14,12", "14,16"), (Away, "14,16", "14,12")] {
        near(ohm(&bar(2, polarity), &circuit, fed), 0.001 * R_K, 1e-12);
        near(ohm(&bar(2, polarity), &circuit, other), 0.501 * R_K, 1e-13);
    }
    let both = with_line(circuit, 4, 200.0);
    near(ohm(&bar(2, Toward), &both, "14,14"), 0.501 * R_K + 200.0, 1e-13);
    near(ohm(&bar(2, Toward), &both, "14,26"), 0.5 * R_K, 1e-13);
}

/// A line of any size is as good as none for a meter that draws nothing, and adds itself where it is shared (by hand).
#[test]
fn the_size_of_a_line_costs_no_digits() {
    for size in [0.0, 1e-9, 1e-3, 1.0, 1e3, 1e6] {
        let circuit = with_line(with_line(ideal(), 2, size), 6, size);
        near(ohm(&bar(3, Toward), &circuit, "14,26"), R_K / 3.0, 1e-13);
        near(ohm(&bar(3, Toward), &with_line(ideal(), 1, size), "14,14"), R_K / 3.0 + size, 1e-14);
    }
}

/// The ammeter lifts the outlet: what is measured against ground holds it, four-terminal readings do not (by hand).
#[test]
fn an_ammeter_lifts_the_outlet() {
    let loaded = Circuit { ammeter_ohm: 1000.0, ..metered(MeterInput::Ground, 10.0 * MEGAOHM) };
    let r = R_K / 1e7;
    // Cold edge at + with ground inputs on 6 and 5: V_5 = V_4/(1 + r), V_6 = V_5/(1 + r); 4 stands at 1 kΩ times what
    // comes back, the current less both inputs.
    let a = 1000.0 / (1.0 + 1e-4 * (1.0 / (1.0 + r) + 1.0 / (1.0 + r) / (1.0 + r)));
    near(ohm(&bar(1, Toward), &loaded, "14,65"), a / (1.0 + r) / (1.0 + r) - a / (1.0 + r), 1e-9);
    let plain = Circuit { ammeter_ohm: 1000.0, ..ideal() };
    near(ohm(&bar(1, Toward), &plain, "14,26"), R_K, 1e-13);
    near(ohm(&bar(1, Toward), &plain, "14,14"), R_K, 1e-13);
}

/// Capacitances C on 2 and 3, x = ωCR_H, on the hot edge: V_2 = V_1/(1 + ix), V_3 = V_2/(1 + ix), so that
/// R_23 = R_H ix/(1 + ix)² and R_26 = R_H/(1 + ix). At 17 Hz, 1 nF and ν = 1 about 71 Ω in quadrature; a Hall reading lags.
#[test]
fn capacitances_show_in_quadrature_on_the_hot_edge() {
    let mut circuit = Circuit { frequency_hz: Some(17.0), ..ideal() };
    [1, 2].into_iter().for_each(|probe| circuit.lines[probe].capacitance_farad = 1e-9);
    let ix = Complex::new(0.0, 2.0 * std::f64::consts::PI * 17.0 * 1e-9 * R_K);
    let longitudinal = R_K * ix / (1.0 + ix) / (1.0 + ix);
    let hall = R_K / (1.0 + ix);
    for (reading, expected) in [("14,23", longitudinal), ("14,26", hall), ("14,65", Complex::from(0.0))] {
        let shown = first(&bar(1, Toward), &circuit, reading).unwrap();
        near(shown.ohm, expected.re, 1e-11);
        near(shown.quadrature_ohm.unwrap(), expected.im, 1e-12);
    }
    near(longitudinal.im, 71.2, 2e-3);
    assert!(hall.im < 0.0);
    let cold = first(&bar(1, Away), &circuit, "14,23").unwrap();
    assert_eq!((cold.ohm, cold.quadrature_ohm), (0.0, Some(0.0)));
    circuit.frequency_hz = None;
    assert_eq!(first(&bar(1, Toward), &circuit, "14,23").unwrap().quadrature_ohm, None);
    near(ohm(&bar(1, Toward), &circuit, "14,26"), R_K, 1e-14);
}

/// Shown = gain × e^{−iφ} × R: at φ = 30° in phase √3/2 and in quadrature −1/2 of it; a quarter turn is exact.
#[test]
fn gain_and_phase_turn_what_the_meter_shows() {
    let mut circuit = Circuit { frequency_hz: Some(17.0), ..metered(MeterInput::Across, 1e300) };
    (circuit.meters[0].gain, circuit.meters[0].phase_deg) = (1.1, 30.0);
    let shown = first(&bar(2, Toward), &circuit, "14,26").unwrap();
    near(shown.ohm, 1.1 * R_K / 2.0 * 0.75_f64.sqrt(), 1e-14);
    near(shown.quadrature_ohm.unwrap(), -1.1 * R_K / 4.0, 1e-14);
    for (phase_deg, in_phase, quadrature) in
        [(90.0, 0.0, -1.0), (180.0, -1.0, 0.0), (-90.0, 0.0, 1.0), (360.0, 1.0, 0.0)]
    {
        circuit.meters[0].phase_deg = phase_deg;
        let shown = first(&bar(2, Toward), &circuit, "14,26").unwrap();
        near(shown.ohm, 0.55 * R_K * in_phase, 1e-14);
        near(shown.quadrature_ohm.unwrap(), 0.55 * R_K * quadrature, 1e-14);
    }
    circuit.frequency_hz = None;
    near(ohm(&bar(2, Toward), &circuit, "14,26"), 0.55 * R_K, 1e-14);
}

/// A probe left on ground at the polarity at which the current contact feeds it takes all the current: nothing leaves at
/// the outlet, all beyond reads 0. At the other polarity it stands at ground anyway (by hand: V_2 = 0 cuts the hot edge).
#[test]
fn a_grounded_probe_takes_the_current_at_one_polarity() {
    let mut circuit = ideal();
    circuit.states[1] = ContactState::Grounded;
    for reading in ["14,23", "14,26", "14,35", "14,65"] {
        assert_eq!(ohm(&bar(2, Toward), &circuit, reading), 0.0, "{reading}");
    }
    near(ohm(&bar(2, Toward), &circuit, "14,14"), R_K / 2.0, 1e-14);
    for (reading, value) in [("14,23", 0.0), ("14,26", -0.5), ("14,35", -0.5), ("14,65", 0.0), ("14,14", 0.5)] {
        near(ohm(&bar(2, Away), &circuit, reading), value * R_K, 1e-14);
    }
    // The inlet itself is not held at ground; a reading divided by a current that does not leave has no value.
    near(ohm(&bar(2, Toward), &circuit, "24,24"), R_K / 2.0, 1e-14);
    circuit.divisor = CurrentDivisor::Outlet;
    assert_eq!(first(&bar(2, Toward), &circuit, "14,26"), None);
    near(ohm(&bar(2, Away), &circuit, "14,35"), -0.5 * R_K, 1e-14);
}

/// 2 and 6 joined at ν = 2, by hand at `+`: ν(V − V_1) + ν(V − 0) = 0 gives V = V_1/2, and ν(V_1 − V) = 1 gives V_1 = 2/ν:
/// two-terminal 1 in place of 1/2, R_26 = 0, R_23 = 0 and R_65 = 1/2; with the field reversed R_23 and R_65 exchange.
#[test]
fn joined_contacts_share_one_potential() {
    let circuit = Circuit { joins: vec![vec![ContactIdx(1), ContactIdx(5)]], ..ideal() };
    for (reading, toward, away) in
        [("14,26", 0.0, 0.0), ("14,14", 1.0, 1.0), ("14,23", 0.0, 0.5), ("14,65", 0.5, 0.0), ("14,35", 0.5, -0.5)]
    {
        near(ohm(&bar(2, Toward), &circuit, reading), toward * R_K, 1e-14);
        near(ohm(&bar(2, Away), &circuit, reading), away * R_K, 1e-14);
    }
    // 1 and 2 joined: at − the edge into 1 is cut short, R_23 = 1/2; at + nothing is seen.
    let circuit = Circuit { joins: vec![vec![ContactIdx(0), ContactIdx(1)]], ..ideal() };
    near(ohm(&bar(2, Toward), &circuit, "14,23"), 0.0, 1e-14);
    near(ohm(&bar(2, Away), &circuit, "14,23"), 0.5 * R_K, 1e-14);
    // 2 and 3 joined: invisible on a plateau.
    let circuit = Circuit { joins: vec![vec![ContactIdx(1), ContactIdx(2)]], ..ideal() };
    near(ohm(&bar(2, Toward), &circuit, "14,26"), 0.5 * R_K, 1e-14);
    near(ohm(&bar(2, Away), &circuit, "14,35"), -0.5 * R_K, 1e-14);
}

/// Joins that overlap are one group, and a ring of joins, grounds and lines of 0 Ω is no fault (by hand: 2, 3 and 4 at
/// ground take all the current at `+`).
#[test]
fn a_ring_of_ideal_shorts_is_solved() {
    let join = |a, b| vec![ContactIdx(a), ContactIdx(b)];
    let mut circuit = Circuit { joins: vec![join(1, 2), join(2, 3), join(1, 3)], ..ideal() };
    circuit.states[1] = ContactState::Grounded;
    near(ohm(&bar(2, Toward), &circuit, "14,14"), R_K / 2.0, 1e-14);
    assert_eq!(ohm(&bar(2, Toward), &circuit, "14,26"), 0.0);
    // The current contacts joined: only the lines are left.
    let circuit = Circuit { joins: vec![join(0, 3)], ..with_line(with_line(ideal(), 1, 30.0), 4, 12.0) };
    near(ohm(&bar(2, Toward), &circuit, "14,14"), 42.0, 1e-14);
    near(ohm(&bar(2, Toward), &circuit, "14,26"), 0.0, 1e-14);
}

/// An open lead takes no current from the chip, whatever hangs on it: its contact still equilibrates.
#[test]
fn an_open_lead_disturbs_nothing() {
    let mut circuit = metered(MeterInput::Ground, 10.0 * MEGAOHM);
    circuit.states[2] = ContactState::Open;
    let r = R_K / 1e7;
    near(ohm(&bar(1, Toward), &circuit, "14,26 35"), R_K / (1.0 + r), 1e-13);
    circuit.meters.clear();
    assert_eq!(first(&bar(1, Toward), &circuit, "14,35"), None);
    near(ohm(&bar(1, Toward), &circuit, "14,26"), R_K, 1e-14);
    assert_eq!(first(&bar(1, Toward), &circuit, "34,26"), None);
}
