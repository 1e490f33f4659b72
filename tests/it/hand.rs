//! Whole bars against values worked out by hand: fractional ladders, partial fillings, unequal sides, imperfect contacts,
//! overlaps, holes, closed-off ends. Each test names its source; `own algebra` is a calculation on paper with Büttiker's
//! equations.

use edgesheet::device::Mixing;
use edgesheet::network::Coupling;
use edgesheet::number::Rational;
use edgesheet::quantity::Polarity;
use edgesheet::resistance::ReadingState;

use crate::around::near;
use crate::bar::BOTH;
use crate::bar::Made;
use crate::bar::Part;
use crate::bar::make;
use crate::bar::six;
use crate::bar::six_text;
use crate::literature::check;
use crate::shown::one;
use crate::tableau::R_K;

/// A bar with a gate in the middle, on another ladder.
fn on_ladder(ladder: &str, bulk: &str, under: &str) -> Made {
    let text = six_text(bulk, &[("TG", "gate", 250, 350, under)], "");
    make(&text.replace("ladder = \"spin-split\"", &format!("ladder = {ladder}")))
}

/// A bar with a gate in the middle and shares of transmission at the current contacts 1 and 4.
fn with_shares(text: &str, [first, fourth]: [&str; 2]) -> Made {
    let share = |text: String, name: &str, share: &str| {
        text.replace(&format!("name = \"{name}\"\n"), &format!("name = \"{name}\"\ntransmission = {share}\n"))
    };
    make(&share(share(text.to_owned(), "1", first), "4", fourth))
}

fn rational(text: &str) -> Rational {
    Rational::from_text(text).unwrap_or_else(|| panic!("{text} is no rational"))
}

fn value(made: &Made, polarity: Polarity, reading: &str) -> Rational {
    rational(&made.exact(polarity, reading))
}

/// R_4t = (h/2e²)(1/N_min − 1/N_wide) with spin-degenerate channels: H. van Houten et al., Phys. Rev. B 37, 8534 (1988),
/// abstract seen; formula from memory, algebra verified. N_wide = 3 with N_min = 1 and 2: 1/3 and 1/12 of h/e².
#[test]
fn a_spin_degenerate_constriction_counts_channels_of_two() {
    check(&on_ladder("\"spin-degenerate\"", "6", "2"), "14,23 = 1/3\n14,14 = 1/2\n14,26 = 1/6 | -1/6");
    check(&on_ladder("\"spin-degenerate\"", "6", "4"), "14,23 = 1/12\n14,14 = 1/4");
}

/// R_L = 1/ν_min − 1/ν_b, R_D = 1/ν_min and 2/ν_b − 1/ν_min at fractional fillings: C. W. J. Beenakker and H. van
/// Houten, Solid State Phys. 44, 1 (1991), section IV; formulas from memory, algebra verified.
#[test]
fn fractional_fillings_follow_the_same_formulas() {
    let ladder = "[\"1/3\", \"2/3\", 1]";
    check(
        &on_ladder(ladder, "1", "\"2/3\""),
        "14,14 = 3/2\n14,23 = 1/2\n14,65 = 1/2\n14,26 = 1 | -1\n14,25 = 3/2 | -1/2\n14,36 = 1/2 | -3/2",
    );
    check(&on_ladder(ladder, "1", "\"1/3\""), "14,14 = 3\n14,23 = 2\n14,26 = 1 | -1\n14,25 = 3 | 1\n14,36 = -1 | -3");
    check(
        &on_ladder(ladder, "\"2/3\"", "\"1/3\""),
        "14,14 = 3\n14,23 = 3/2\n14,26 = 3/2 | -3/2\n14,25 = 3 | 0\n14,36 = 0 | -3",
    );
    check(&on_ladder(ladder, "1", "0.5"), "14,14 = 2\n14,23 = 1\n14,25 = 2 | 0\n14,36 = 0 | -2");
}

/// Sides ν_a = 4 and ν_c = 3 of a constriction at 5/2: one edge 1/ν_g − 1/ν_c, the other 1/ν_g − 1/ν_a, diagonals 1/ν_g
/// and 1/ν_g − 1/ν_a − 1/ν_c (own algebra).
#[test]
fn a_partial_filling_between_unequal_sides() {
    check(
        &six("4", &[("TG", "gate", 250, 350, "2.5"), ("S", "step", 350, 600, "3")], ""),
        "14,14 = 2/5
         14,23 = 1/15 | 3/20
         14,65 = 3/20 | 1/15
         14,26 = 1/4 | -1/4
         14,35 = 1/3 | -1/3
         14,25 = 2/5 | -11/60
         14,63 = -11/60 | 2/5",
    );
}

/// A gate at 2 and, apart from it, a step from 6 to 4: what goes round between them closes on itself, so that the same
/// formulas hold as with the step at the gate (own algebra).
#[test]
fn a_step_beside_a_gate() {
    check(
        &six("6", &[("TG", "gate", 200, 300, "2"), ("S", "step", 400, 600, "4")], ""),
        "14,14 = 1/2
         14,23 = 1/4 | 1/3
         14,65 = 1/3 | 1/4
         14,26 = 1/6 | -1/6
         14,35 = 1/4 | -1/4
         14,25 = 1/2 | 1/12
         14,63 = 1/12 | 1/2",
    );
}

/// A constriction at 7/3, 5/2 and 8/3 in a bar at 3, in Ω: R_D = R_K/ν and R_L = R_D − R_K/3. J. B. Miller et al., Nature
/// Phys. 3, 561 (2007) for the method, formulas from memory; numbers computed independently.
#[test]
fn constrictions_between_two_plateaus_in_ohm() {
    for (under, diagonal, longitudinal) in [
        ("\"7/3\"", 11_062.631_8, 2_458.362_615),
        ("2.5", 10_325.123_0, 1_720.853_831),
        ("\"8/3\"", 9_679.802_8, 1_075.533_644),
    ] {
        let made = six("3", &[("TG", "gate", 250, 350, under)], "");
        let ohm =
            |polarity, reading| made.predict(0, polarity, &[made.reading(reading)]).expected[0].ohm.expect("a number");
        near(ohm(Polarity::Toward, "14,25"), diagonal, 1e-8);
        near(ohm(Polarity::Away, "14,63"), diagonal, 1e-8);
        near(ohm(Polarity::Toward, "14,23"), longitudinal, 3e-8);
        near(ohm(Polarity::Away, "14,65"), longitudinal, 3e-8);
    }
}

/// The longitudinal resistance and both diagonals of a point contact in one bar: M. Snell et al., J. Phys. Condens.
/// Matter 1, 7499 (1989), abstract seen, for the three readings; values by own algebra, 4 over 1.
#[test]
fn three_magnetoresistances_of_a_point_contact() {
    check(
        &six("4", &[("TG", "gate", 250, 350, "1")], ""),
        "14,23 = 3/4\n14,65 = 3/4\n14,25 = 1 | 1/2\n14,36 = -1/2 | -1\n14,26 = 1/4 | -1/4",
    );
}

/// (R_L + R_H)^-1 = T: P. Streda, J. Kucera, A. H. MacDonald, Phys. Rev. Lett. 59, 1973 (1987), abstract seen. Along the
/// way from a hot probe over the barrier to the Hall probe behind it, at each polarity, for barriers with any T.
#[test]
fn longitudinal_and_hall_resistance_sum_to_the_inverse_transmission() {
    let cases: [(&str, &[Part], &str); 6] = [
        ("2", &[("A", "gate", 250, 350, "1")], "1"),
        ("4", &[("A", "gate", 250, 350, "\"11/4\"")], "11/4"),
        ("5", &[("A", "gate", 200, 250, "3"), ("B", "gate", 350, 400, "2")], "2"),
        ("-3", &[("A", "gate", 250, 350, "-2")], "2"),
        ("6", &[("A", "step", 300, 600, "2")], "2"),
        ("3", &[("A", "gate", 200, 250, "2.5"), ("B", "gate", 350, 400, "2.5")], "7/3"),
    ];
    for (bulk, parts, transmission) in cases {
        let made = six(bulk, parts, "");
        let inverse = &Rational::ONE / &rational(transmission);
        for polarity in BOTH {
            let electrons = !bulk.starts_with('-');
            let [along, across] =
                if electrons == (polarity == Polarity::Toward) { ["14,23", "14,35"] } else { ["14,65", "14,53"] };
            assert_eq!(value(&made, polarity, along) + value(&made, polarity, across), inverse, "{bulk} {parts:?}");
            assert_eq!(value(&made, polarity, "14,14"), inverse, "{bulk} {parts:?}");
        }
    }
}

/// Two gates that each pass half of the third channel, which keeps one potential between them: half is turned back
/// again and again, 1/(1/t + 1/t − 1) = 1/3 gets through (own algebra); 1/2 in all where both gates are one.
#[test]
fn a_level_passed_in_part_twice() {
    check(&six("3", &[("A", "gate", 200, 250, "2.5"), ("B", "gate", 350, 400, "2.5")], ""), "14,14 = 3/7");
    check(&six("3", &[("A", "gate", 200, 300, "2.5"), ("B", "gate", 300, 400, "2.5")], ""), "14,14 = 2/5");
}

/// A contact that passes n of N channels with all channels mixed along the rims: R_2T = 1/n1 + 1/n2 − 1/N. M. Büttiker,
/// IBM J. Res. Dev. 32, 317 (1988), and S. Komiyama and H. Hirai, Phys. Rev. B 54, 2067 (1996), both from memory;
/// algebra verified.
#[test]
fn current_contacts_that_pass_a_part_add_to_the_two_terminal_value() {
    for (shares, whole) in [(["1.0", "0.5"], "1/2"), (["0.5", "0.5"], "3/4"), (["0.75", "0.25"], "13/12")] {
        for edge in ["mixing = \"full\"", ""] {
            let made = with_shares(&six_text("4", &[], edge), shares);
            check(&made, &format!("14,14 = {whole}\n14,23 = 0\n14,26 = 1/4 | -1/4\n14,35 = 1/4 | -1/4"));
        }
    }
}

/// Three-terminal reading of a current contact that passes half of two channels: 1/1 − 1/2 at the probe that it feeds,
/// 1/2 more at the other (own algebra).
#[test]
fn a_three_terminal_reading_shows_what_a_contact_turns_back() {
    let made = with_shares(&six_text("2", &[], "mixing = \"full\""), ["0.5", "1.0"]);
    check(&made, "14,12 = 1/2 | 1\n14,16 = 1 | 1/2\n14,24 = 1/2 | 0");
}

/// Three-terminal test of a contact of 0.001 R_K at ν = 2: R_c at the probe downstream, R_c + R_K/2 upstream, exchanged
/// with the field; method after F. Delahaye and B. Jeckelmann, Metrologia 40, 217 (2003), values by own algebra.
#[test]
fn a_three_terminal_reading_shows_the_resistance_of_a_contact() {
    let made = six("2", &[], "");
    let line = format!("[[line]]\ncontact = \"1\"\nohm = {:.13}\n", R_K / 1000.0);
    for (polarity, reading, share) in [
        (Polarity::Toward, "14,12", 0.001),
        (Polarity::Toward, "14,16", 0.501),
        (Polarity::Away, "14,16", 0.001),
        (Polarity::Away, "14,12", 0.501),
    ] {
        near(one(&made, &line, polarity, reading).shown_ohm.unwrap(), share * R_K, 1e-11);
    }
}

/// 10 MΩ across a Hall pair at ν = 2: 12 889.767 675 Ω, as V R_in/(R_in + R_s) has it (common practice). 10 MΩ from each
/// input to ground: a false R_23 of 16.614 611 Ω at one polarity, nothing at the other (F. Fischer and M. Grayson, J.
/// Appl. Phys. 98, 013710 (2005), from memory). 1 MΩ in series with a voltage: −1.274 195 % at ν = 2 (common practice).
#[test]
fn a_cooldown_file_loads_and_droops_as_by_hand() {
    let made = six("2", &[], "");
    let meter = |input: &str| format!("[[meter]]\nname = \"A\"\ninput_ohm = 1e7\ninput = \"{input}\"\n");
    let ohm = |tables: &str, polarity, reading| one(&made, tables, polarity, reading).shown_ohm.unwrap();
    near(ohm(&meter("across"), Polarity::Toward, "14,26"), 12_889.767_675, 1e-10);
    near(ohm(&meter("across"), Polarity::Away, "14,26"), -12_889.767_675, 1e-10);
    near(ohm(&meter("ground"), Polarity::Toward, "14,23"), 16.614_611, 1e-7);
    assert_eq!(ohm(&meter("ground"), Polarity::Away, "14,23"), 0.0);
    let source = "[source]\nvoltage_V = 1\nseries_ohm = 1e6\n";
    near(ohm(source, Polarity::Toward, "14,26") / (R_K / 2.0) - 1.0, -1.274_195e-2, 1e-6);
}

/// The table of 2, 4, 3 and 6 over a gate: 1/g − 1/ν, 1/ν, 1/g and 1/g − 2/ν, 2/ν − 1/g and −1/g, 1/g (after Beenakker and
/// van Houten (1991); formulas from memory, algebra verified).
#[test]
fn four_pairs_of_bulk_and_gate_have_every_reading_right() {
    for (bulk, under, [along, hall, hot, cold, whole]) in [
        ("2", "1", ["1/2", "1/2", "1", "0", "1"]),
        ("4", "2", ["1/4", "1/4", "1/2", "0", "1/2"]),
        ("3", "1", ["2/3", "1/3", "1", "1/3", "1"]),
        ("6", "2", ["1/3", "1/6", "1/2", "1/6", "1/2"]),
    ] {
        let cold_36 = if cold == "0" { "0".to_owned() } else { format!("-{cold}") };
        check(
            &six(bulk, &[("TG", "gate", 250, 350, under)], ""),
            &format!(
                "14,23 = {along}\n14,65 = {along}\n14,26 = {hall} | -{hall}\n14,35 = {hall} | -{hall}
                 14,25 = {hot} | {cold}\n14,36 = {cold_36} | -{hot}\n14,14 = {whole}"
            ),
        );
    }
}

/// Two overlapping gates: the lowest filling of the three parts decides (own algebra).
#[test]
fn overlapping_gates_close_where_they_overlap() {
    let text = six_text("4", &[("TG", "gate", 200, 350, "3"), ("BG", "gate", 300, 400, "2")], "");
    let overlap = |entry: &str| make(&text.replace("BG = 2 }", &format!("BG = 2, \"BG+TG\" = {entry} }}")));
    check(&overlap("1"), "14,14 = 1\n14,23 = 3/4\n14,65 = 3/4\n14,25 = 1 | 1/2\n14,36 = -1/2 | -1");
    check(&overlap("3"), "14,14 = 1/2\n14,23 = 1/4\n14,65 = 1/4\n14,25 = 1/2 | 0");
}

/// A hole bar at `+` is an electron bar at `−`: R_14,26 at `+` is −1/|ν| (own algebra).
#[test]
fn holes_turn_every_hall_sign() {
    check(&six("-2", &[], ""), "14,14 = 1/2\n14,23 = 0\n14,26 = -1/2 | 1/2\n14,35 = -1/2 | 1/2");
    check(
        &six("-3", &[("TG", "gate", 250, 350, "-1")], ""),
        "14,14 = 1\n14,23 = 2/3\n14,65 = 2/3\n14,26 = -1/3 | 1/3\n14,25 = 1/3 | 1\n14,36 = -1 | -1/3",
    );
}

/// A gate at 0 cuts the bar in two: no path from 1 to 4 for whatever is read; on one half the readings are those of a
/// small bar, and a probe of the other half floats (own algebra).
#[test]
fn a_gate_at_zero_cuts_the_bar() {
    let made = six("2", &[("TG", "gate", 250, 350, "0")], "");
    for polarity in BOTH {
        for (reading, state) in [
            ("14,14", ReadingState::NoPath),
            ("14,23", ReadingState::NoPath),
            ("14,26", ReadingState::NoPath),
            ("12,36", ReadingState::Floating),
            ("12,35", ReadingState::Floating),
            ("12,16", ReadingState::Fine),
        ] {
            let expected = made.predict(0, polarity, &[made.reading(reading)]).expected.remove(0);
            assert_eq!(expected.state, state, "{reading} at {polarity:?}");
            assert_eq!(expected.exact.is_some(), state == ReadingState::Fine);
        }
    }
    check(&made, "12,12 = 1/2\n12,16 = 1/2 | 0\n12,26 = 0 | -1/2\n35,34 = 0 | 1/2");
}

/// More filling under a gate makes closed loops, which do nothing while only the gate's own border mixes: the loops meet
/// the other channels along the rim (own algebra).
#[test]
fn the_border_of_a_gate_with_more_filling_mixes_loops_only() {
    let text = six_text("2", &[("TG", "gate", 250, 350, "6")], "");
    let made = make(&text.replace("name = \"TG\"\n", "name = \"TG\"\nmixing = \"full\"\n"));
    check(&made, "14,14 = 1/2\n14,23 = 0\n14,65 = 0\n14,26 = 1/2 | -1/2");
}

/// Where borders of two gates coincide, the one that states a rule has it, on whichever side it lies.
#[test]
fn a_border_of_two_gates_follows_the_one_that_states_a_rule() {
    for mixed in ["A", "B"] {
        let text = six_text("3", &[("A", "gate", 200, 300, "1"), ("B", "gate", 300, 400, "2")], "");
        let name = format!("name = \"{mixed}\"\n");
        let made = make(&text.replace(&name, &format!("{name}mixing = \"full\"\n")));
        for polarity in BOTH {
            let point = &made.device.points[0];
            let operating = edgesheet::network::operating(&made.network, &made.device, point, polarity);
            let full = operating.coupling.iter().filter(|coupling| **coupling == Coupling::Alike(Mixing::Full)).count();
            assert_eq!(full, 2, "both borders of {mixed}");
        }
    }
}

/// Probe 3 grounded at ν = 2. At `+` it is the first sink on the way from 1: all current leaves there, V_2 = V_1 = 1/2,
/// everything from 3 round to 6 at 0, and nothing to divide by at the outlet. At `−` it lies behind 4 and takes nothing
/// (own algebra).
#[test]
fn a_grounded_probe_steals_the_current_at_one_polarity_by_hand() {
    let made = six("2", &[], "");
    let state = "[contacts]\n\"3\" = \"grounded\"\n";
    for (reading, toward, away) in
        [("14,14", 0.5, 0.5), ("14,23", 0.5, 0.0), ("14,35", 0.0, -0.5), ("14,26", 0.5, -0.5), ("14,65", 0.0, 0.0)]
    {
        for (polarity, share) in [(Polarity::Toward, toward), (Polarity::Away, away)] {
            near(one(&made, state, polarity, reading).shown_ohm.unwrap(), share * R_K, 1e-13);
        }
    }
    let counted = format!("[source]\ncurrent_nA = 10\ncurrent = \"outlet\"\n{state}");
    let at_outlet = one(&made, &counted, Polarity::Toward, "14,26");
    assert_eq!((at_outlet.state, at_outlet.shown_ohm), (ReadingState::Fine, None));
    near(one(&made, &counted, Polarity::Away, "14,26").shown_ohm.unwrap(), -R_K / 2.0, 1e-12);
}

/// Probes 2 and 6 joined, 3 over 1 at `+`: with V_4 = V_5 = 0 and V = V_2 = V_6 the balances 3V_3 = V + 2V_5, I = 3V_3 at
/// 4, 3(V − V_1) + (V − V_5) = 0 of the joined pair give V = 1, V_1 = 4/3, V_3 = 1/3 (own algebra). A broken lead at 3
/// changes no other reading, and what needs it floats or has no path.
#[test]
fn joined_probes_beside_a_gate_by_hand() {
    let made = six("3", &[("TG", "gate", 250, 350, "1")], "");
    let join = "[[join]]\ncontacts = [\"2\", \"6\"]\n";
    let open = format!("[contacts]\n\"3\" = \"open\"\n{join}");
    let shown = |tables: &str, reading: &str| one(&made, tables, Polarity::Toward, reading);
    for (reading, share) in [("14,14", 4.0 / 3.0), ("14,65", 1.0), ("14,26", 0.0), ("14,25", 1.0), ("14,16", 1.0 / 3.0)]
    {
        near(shown(join, reading).shown_ohm.unwrap(), share * R_K, 1e-13);
        near(shown(&open, reading).shown_ohm.unwrap(), share * R_K, 1e-13);
    }
    near(shown(join, "14,23").shown_ohm.unwrap(), 2.0 / 3.0 * R_K, 1e-13);
    near(shown(join, "14,35").shown_ohm.unwrap(), 1.0 / 3.0 * R_K, 1e-13);
    for (reading, state) in [
        ("14,23", ReadingState::Floating),
        ("14,33", ReadingState::Floating),
        ("34,26", ReadingState::NoPath),
        ("34,35", ReadingState::NoPath),
        ("14,14", ReadingState::Fine),
    ] {
        assert_eq!(shown(&open, reading).state, state, "{reading}");
    }
}

/// A contact that passes nothing can neither carry the current nor hold a voltage; no path goes before floating, and a
/// gate at 0 with two floating probes on its far side still is floating (own reading of the rule).
#[test]
fn no_path_goes_before_floating() {
    let text = six_text("2", &[("TG", "gate", 250, 350, "0")], "");
    let made = make(&text.replace("name = \"5\"\n", "name = \"5\"\ntransmission = 0\n"));
    let state = |tables: &str, reading: &str| one(&made, tables, Polarity::Away, reading).state;
    let grounds = "[[meter]]\nname = \"A\"\ninput_ohm = 1e7\ninput = \"ground\"\n[contacts]\n\"4\" = \"grounded\"\n\"6\" = \"open\"\n";
    for (reading, expected) in [
        ("35,34", ReadingState::NoPath),
        ("34,35", ReadingState::Floating),
        ("34,34", ReadingState::Fine),
        ("34,12", ReadingState::Floating),
        ("12,34", ReadingState::Floating),
        ("12,12", ReadingState::Fine),
        ("16,12", ReadingState::NoPath),
        ("12,26", ReadingState::Floating),
        ("13,65", ReadingState::NoPath),
    ] {
        assert_eq!(state(grounds, reading), expected, "{reading}");
    }
}

/// Readings of one set close, R_23 − R_65 = R_26 − R_35, with lines, grounded inputs, a grounded probe and joined ones
/// (Kirchhoff); the same readings taken alone do not.
#[test]
fn shown_values_of_one_set_close() {
    let made = six("3", &[("TG", "gate", 250, 350, "1")], "");
    let tables = "[[line]]\ncontact = \"2\"\nohm = 900\n[[line]]\ncontact = \"5\"\nohm = 150\n\
                  [[meter]]\nname = \"A\"\ninput_ohm = 1e6\ninput = \"ground\"\n";
    let gap = |tables: &str, polarity, set: Option<usize>| {
        let readings: Vec<_> = ["14,23", "14,65", "14,26", "14,35"]
            .iter()
            .map(|text| edgesheet::resistance::Reading { set, ..made.reading(text) })
            .collect();
        let circuit = crate::shown::circuit(&made, tables);
        let found = made.predict_in(Some(circuit), 0, polarity, &readings).expected;
        let ohm: Vec<f64> = found.iter().map(|expected| expected.shown_ohm.unwrap()).collect();
        ohm[0] - ohm[1] - ohm[2] + ohm[3]
    };
    for polarity in BOTH {
        for more in ["", "[[join]]\ncontacts = [\"2\", \"3\"]\n", "[contacts]\n\"6\" = \"grounded\"\n"] {
            near(gap(&format!("{tables}{more}"), polarity, Some(3)), 0.0, 1e-9);
        }
        assert!(gap(tables, polarity, None).abs() > 10.0);
    }
}
