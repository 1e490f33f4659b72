//! From device and cooldown file to what the meters show.

use edgesheet::circuit::Circuit;
use edgesheet::diagnostic::Source;
use edgesheet::quantity::Polarity;
use edgesheet::resistance::Expected;
use edgesheet::resistance::Reading;
use edgesheet::resistance::ReadingState;
use edgesheet::resistance::takings;

use crate::around::near;
use crate::bar::BOTH;
use crate::bar::Made;
use crate::bar::six;
use crate::tableau::R_K;

/// The circuit of a cooldown file with these tables after its head.
pub fn circuit(made: &Made, tables: &str) -> Circuit {
    let text = format!("format = 1\ndevice = \"T\"\n[cooldown]\nid = \"c\"\ncoverage_factor = 2\n{tables}");
    let source = Source::new("cooldown.toml", text.as_str());
    let cooldown = edgesheet::cooldown::from_source(&source, &made.device);
    Circuit::of(&cooldown.unwrap_or_else(|faults| panic!("{faults:#?}\n{text}")).value)
}

fn expected(made: &Made, tables: &str, polarity: Polarity, readings: &[Reading]) -> Vec<Expected> {
    made.predict_in(Some(circuit(made, tables)), 0, polarity, readings).expected
}

/// What one reading should give inside the circuit of a cooldown file.
pub fn one(made: &Made, tables: &str, polarity: Polarity, reading: &str) -> Expected {
    expected(made, tables, polarity, &[made.reading(reading)]).remove(0)
}

/// A reading in ohm, loaded by 10 MΩ at each input to ground: 66.29 Ω in place of 0 on the hot edge at ν = 1, at one
/// polarity only, R_H r/(1 + r)² with r = R_H/R_in; `exact` and `ohm` stay those of the device.
#[test]
fn a_meter_of_the_cooldown_file_loads_the_reading() {
    let made = six("1", &[], "");
    let meter = "[[meter]]\nname = \"A\"\ninput_ohm = 1.0e7\ninput = \"ground\"\n";
    let r = R_K / 1e7;
    let false_resistance = R_K * r / (1.0 + r) / (1.0 + r);
    let hot = one(&made, meter, Polarity::Away, "14,65");
    near(hot.shown_ohm.unwrap(), false_resistance, 1e-10);
    assert_eq!((hot.exact.unwrap().to_string().as_str(), hot.ohm), ("0", Some(0.0)));
    assert_eq!(hot.shown_quadrature_ohm, None);
    assert_eq!(one(&made, meter, Polarity::Toward, "14,65").shown_ohm, Some(0.0));
}

/// In a set of R_26 and R_23 probe 2 carries two inputs, R_H/(1 + 2r); alone R_H/(1 + r) (by hand, ν = 1 at `+`).
#[test]
fn readings_of_a_set_are_taken_together() {
    let made = six("1", &[], "");
    let meter = "[[meter]]\nname = \"A\"\ninput_ohm = 1.0e7\ninput = \"ground\"\n";
    let [hall, longitudinal] = ["14,26", "14,23"].map(|reading| made.reading(reading));
    let set = |reading: &Reading| Reading { set: Some(0), ..reading.clone() };
    let readings = [set(&hall), hall.clone(), set(&longitudinal)];
    let shown: Vec<f64> = expected(&made, meter, Polarity::Toward, &readings)
        .iter()
        .map(|expected| expected.shown_ohm.unwrap())
        .collect();
    let r = R_K / 1e7;
    near(shown[0], R_K / (1.0 + 2.0 * r), 1e-13);
    near(shown[1], R_K / (1.0 + r), 1e-13);
    near(shown[2], R_K / (1.0 + 2.0 * r) * r / (1.0 + r), 1e-9);
}

/// Lines count where the reading shares them with the current; a gated bar at 3 over 1 (own calculation: R_14,14 = 1,
/// R_14,23 = 2/3 in h/e²).
#[test]
fn lines_add_to_the_readings_that_share_them() {
    let made = six("3", &[("TG", "gate", 250, 350, "1")], "");
    let lines = "[[line]]\ncontact = \"1\"\nohm = 130.0\n[[line]]\ncontact = \"4\"\nohm = 55.5\n[[line]]\ncontact = \"2\"\nohm = 700\n";
    for polarity in BOTH {
        near(one(&made, lines, polarity, "14,14").shown_ohm.unwrap(), R_K + 185.5, 1e-13);
        near(one(&made, lines, polarity, "14,23").shown_ohm.unwrap(), R_K * 2.0 / 3.0, 1e-13);
    }
}

/// Scene of a hand-over: 1 MΩ in the source and 3 kΩ in each current lead show 25 016.9 Ω at ν = 1; with a frequency the
/// quadrature is given, and a phase of 180° turns the sign.
#[test]
fn source_frequency_and_phase_of_the_file_act() {
    let made = six("1", &[], "");
    let lines = "[[line]]\ncontact = \"1\"\nohm = 3000\n[[line]]\ncontact = \"4\"\nohm = 3000\n";
    let source = "[source]\nvoltage_V = 1\nseries_ohm = 1.0e6\nfrequency_Hz = 17\n";
    let meter = "[[meter]]\nname = \"A\"\nphase_deg = 180\n";
    let shown = one(&made, &format!("{source}{lines}{meter}"), Polarity::Toward, "14,26");
    near(shown.shown_ohm.unwrap(), -R_K / (1.0 + (R_K + 6000.0) / 1e6), 1e-13);
    near(shown.shown_ohm.unwrap(), -25_016.9, 3e-6);
    assert_eq!(shown.shown_quadrature_ohm, Some(0.0));
}

/// A reading without a number shows none, whatever meters and grounds are connected, and `ohm` of the device with all
/// contacts live is nulled with it.
#[test]
fn no_meter_mends_the_state_of_a_reading() {
    let made = six("2", &[], "");
    let tables = "[[meter]]\nname = \"A\"\ninput_ohm = 1.0e7\ninput = \"ground\"\n[contacts]\n\"3\" = \"open\"\n";
    let readings: Vec<Reading> =
        ["14,35", "13,26", "14,26"].iter().map(|text| Reading { set: Some(1), ..made.reading(text) }).collect();
    let found = expected(&made, tables, Polarity::Toward, &readings);
    let states: Vec<ReadingState> = found.iter().map(|expected| expected.state).collect();
    assert_eq!(states, [ReadingState::Floating, ReadingState::NoPath, ReadingState::Fine]);
    for none in &found[..2] {
        assert_eq!((none.ohm, none.shown_ohm, none.shown_quadrature_ohm), (None, None, None));
    }
    // The probe 2 carries both its own inputs in the set: of 14,26 and of 13,26.
    near(found[2].shown_ohm.unwrap(), R_K / 2.0 / (1.0 + 2.0 * R_K / 2e7), 1e-13);
}

/// Contacts 2 and 6 joined at ν = 2: R_26 = 0 and the two-terminal value is 1 in place of 1/2 (by hand).
#[test]
fn joined_contacts_of_the_file_act_on_shown_values_only() {
    let made = six("2", &[], "");
    let join = "[[join]]\ncontacts = [\"2\", \"6\"]\n";
    for polarity in BOTH {
        near(one(&made, join, polarity, "14,26").shown_ohm.unwrap(), 0.0, 1e-14);
        let whole = one(&made, join, polarity, "14,14");
        near(whole.shown_ohm.unwrap(), R_K, 1e-13);
        near(whole.ohm.unwrap(), R_K / 2.0, 1e-14);
    }
}

/// The file's uncertainties are divided by its coverage factor, here 2.
#[test]
fn uncertainties_of_the_circuit_are_standard_ones() {
    let made = six("2", &[], "");
    let tables = "[source]\ncurrent_nA = 10\nu_current_nA = 0.2\n[[line]]\ncontact = \"2\"\nohm = 5\nu_ohm = 3\n[[meter]]\nname = \"A\"\nu_gain = 0.01\n";
    let circuit = circuit(&made, tables);
    assert_eq!((circuit.lines[1].u_ohm, circuit.meters[0].u_gain), (Some(1.5), Some(0.005)));
    near(circuit.u_current_ampere.unwrap() * 1e10, 1.0, 1e-12);
}

/// One solution for a set, one for each loaded reading taken alone, one per current pair where no meter draws current. A
/// set keeps all its meters while the current moves.
#[test]
fn as_few_solutions_as_the_meters_allow() {
    let made = six("2", &[], "");
    let sizes = |meter: &str, readings: &[(&str, Option<usize>)]| -> Vec<(usize, Vec<usize>)> {
        let reading = |(text, set): &(&str, Option<usize>)| Reading { set: *set, ..made.reading(text) };
        let readings: Vec<Reading> = readings.iter().map(reading).collect();
        let found = takings(&circuit(&made, meter), &readings).into_iter();
        found.map(|of| (of.taken.connections.len(), of.rows.into_iter().map(|(row, _)| row).collect())).collect()
    };
    let readings = [("14,25", None), ("14,25", Some(7)), ("14,35", None), ("14,35", Some(7))];
    let loading = "[[meter]]\nname = \"A\"\ninput_ohm = 1.0e7\n";
    assert_eq!(sizes(loading, &readings), [(2, vec![1, 3]), (1, vec![0]), (1, vec![2])]);
    assert_eq!(sizes("", &readings), [(2, vec![1, 3]), (2, vec![0, 2])]);
    let moved = [("14,25", Some(0)), ("13,25", Some(0)), ("14,65", Some(0))];
    assert_eq!(sizes("", &moved), [(3, vec![1]), (3, vec![0, 2])]);
}
