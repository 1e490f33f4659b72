//! Mixing over a length, groups, contacts that tell channels apart, edge modes: published values and own algebra.

use edgesheet::network::Junctions;
use edgesheet::number::Rational;
use edgesheet::quantity::Polarity;
use edgesheet::resistance::Prediction;

use crate::bar::BOTH;
use crate::bar::Made;
use crate::bar::make;
use crate::bar::six;
use crate::bar::six_text;
use crate::literature::check;

/// Checks readings written as `14,25 = 1.25 | 0.3`: the value at `+` and at `−`, in h/e², to 1e-9.
pub fn check_floats(made: &Made, table: &str) {
    for line in table.lines().map(str::trim).filter(|line| !line.is_empty()) {
        let (reading, values) = line.split_once('=').expect("a reading and its values");
        let (toward, away) = values.split_once('|').unwrap_or((values, values));
        for (polarity, value) in BOTH.into_iter().zip([toward, away]) {
            let (found, wanted) = (float(made, polarity, reading.trim()), value.trim().parse::<f64>().unwrap());
            assert!((found - wanted).abs() < 1e-9, "{line} at {polarity:?}: {found}");
        }
    }
}

/// One reading in h/e².
pub fn float(made: &Made, polarity: Polarity, reading: &str) -> f64 {
    let reading = made.reading(reading);
    made.predict(0, polarity, &[reading]).expected[0].h_per_e2.unwrap()
}

fn is_exact(prediction: &Prediction) -> bool {
    matches!(prediction.channels.junctions, Junctions::Exact(_))
}

/// Two gates of one channel in a bar of two, so far apart; no probe lies between them.
fn two_gates(apart: u32, edge: &str) -> Made {
    let (from, to) = (300 - apart / 2, 300 + apart / 2);
    six("2", &[("A", "gate", from - 40, from, "1"), ("B", "gate", to, to + 40, "1")], edge)
}

/// Two barriers in series without mixing between them: 1/min(ν_g); fully mixed 1/ν_1 + 1/ν_2 − 1/ν_b (own algebra with
/// exact rationals, after M. Büttiker, Phys. Rev. B 38, 9375 (1988)).
#[test]
fn two_gates_in_series_without_mixing_and_with_it() {
    for (bulk, one, other, kept, mixed) in [
        ("2", "1", "1", "1", "3/2"),
        ("4", "2", "2", "1/2", "3/4"),
        ("4", "2", "3", "1/2", "7/12"),
        ("4", "3", "1", "1", "13/12"),
    ] {
        let parts = [("A", "gate", 200, 250, one), ("B", "gate", 350, 400, other)];
        check(&six(bulk, &parts, ""), &format!("14,14 = {kept}"));
        check(&six(bulk, &parts, "mixing = \"full\""), &format!("14,14 = {mixed}"));
    }
}

/// Partial equilibration between two barriers of one channel in a bar of two: with the share m that changes channel along
/// each edge R = (2 − m)/(2(1 − m)), own algebra. There dμ_o/dx = −(μ_o − μ_i)/ℓ, so that the difference decays as
/// exp(−2x/ℓ) and m = (1 − exp(−2L/ℓ))/2: for L = 100 µm and ℓ = 100 µm m = 0.432332 and R = 1.380797, for ℓ = 1 mm
/// m = 0.090635 and R = 1.049834. Here departures from the mean decay as exp(−L/ℓ): the same length is half as long.
#[test]
fn two_gates_partly_equilibrated() {
    for (length, resistance) in [(50.0, 1.380797), (500.0, 1.049834)] {
        let made = two_gates(100, &format!("mixing = {{ length_um = {length} }}"));
        for polarity in BOTH {
            let found = float(&made, polarity, "14,14");
            assert!((found - resistance).abs() < 5e-7, "{found}");
        }
    }
}

/// Selective injection and detection: of N = 3 spin-resolved channels one contact feeds N_i and its neighbour takes up N_v,
/// with no equilibration between them: R_H = 1/max(N_i, N_v) (B. J. van Wees et al., Phys. Rev. Lett. 62, 1181 (1989);
/// formula from memory, algebra verified). Full equilibration: 1/N.
#[test]
fn selective_contacts_show_the_larger_number_of_channels() {
    for (n, injected, detected, hall) in
        [(3, 1, 1, "1"), (3, 1, 2, "1/2"), (3, 2, 1, "1/2"), (3, 3, 1, "1/3"), (4, 2, 3, "1/3"), (4, 4, 4, "1/4")]
    {
        let list = |open: usize| {
            let shares: Vec<&str> = (0..n).map(|at| if at < open { "1" } else { "0" }).collect();
            format!("transmission = [{}]", shares.join(", "))
        };
        // At `+` channels run 1→2→3→4: contact 2 feeds what contact 3 takes up first.
        let text = |edge: &str| {
            six_text(&n.to_string(), &[], edge)
                .replace("name = \"2\"\n", &format!("name = \"2\"\n{}\n", list(injected)))
                .replace("name = \"3\"\n", &format!("name = \"3\"\n{}\n", list(detected)))
        };
        let made = make(&text(""));
        assert_eq!(made.exact(Polarity::Toward, "25,36"), hall, "{n} {injected} {detected}");
        // The other way round the rim the detector lies before the injector, and other contacts lie between.
        assert_eq!(made.exact(Polarity::Away, "25,36"), format!("-1/{n}"), "{n} {injected} {detected}");
        assert_eq!(make(&text("mixing = \"full\"")).exact(Polarity::Toward, "25,36"), format!("1/{n}"));
    }
}

/// Contacts that pass n of N channels between equilibrated edges: R_2T = 1/n_1 + 1/n_2 − 1/N (M. Büttiker, Phys. Rev. B
/// 38, 9375 (1988); formula from memory, algebra verified).
#[test]
fn poor_contacts_between_equilibrated_edges_add_up() {
    for (first, second, whole) in
        [("[1, 1, 1, 1]", "[1, 1, 0]", "1/2"), ("[1, 1, 0]", "[1, 1, 0]", "3/4"), ("[1, 1, 1, 0]", "[1, 0]", "13/12")]
    {
        let text = six_text("4", &[], "mixing = \"full\"")
            .replace("name = \"1\"\n", &format!("name = \"1\"\ntransmission = {first}\n"))
            .replace("name = \"4\"\n", &format!("name = \"4\"\ntransmission = {second}\n"));
        check(&make(&text), &format!("14,14 = {whole}"));
    }
}

fn with_modes(modes: &str) -> Made {
    let text = six_text("1", &[("TG", "gate", 250, 350, "1")], "");
    make(&text.replace("bulk = 1\nfillings = { TG = 1 }\n", &format!("modes = {modes}\n")))
}

/// The helical edge with six contacts: a ring of six conductances e²/h, so that k(6 − k)/6 lies between contacts k stretches
/// apart (M. Büttiker, Science 325, 278 (2009), and A. Roth et al., Science 325, 294 (2009): 3/2 two-terminal, 1/2
/// four-terminal; values from memory, algebra verified).
#[test]
fn a_helical_bar_is_a_ring_of_resistors() {
    check(
        &with_modes("{ forward = 1, backward = 1 }"),
        "14,14 = 3/2
         14,23 = 1/2
         14,65 = 1/2
         14,26 = 0
         14,35 = 0
         13,13 = 4/3
         13,54 = 1/3
         12,54 = 1/6",
    );
}

/// With four contacts 3/4 two-terminal and 1/4 nonlocal (A. Roth et al., Science 325, 294 (2009); values from memory,
/// algebra verified).
#[test]
fn a_helical_bar_of_four_contacts() {
    let mut text =
        six_text("1", &[], "").replace("bulk = 1\nfillings = {  }\n", "modes = { forward = 1, backward = 1 }\n");
    for name in ["2", "3"] {
        let at = text.find(&format!("[[contact]]\nname = \"{name}\"")).unwrap();
        let end = at + 1 + text[at + 1..].find("[[").unwrap();
        text.replace_range(at..end, "");
    }
    // Round the rim: 1, 4, 5, 6.
    check(&make(&text), "15,15 = 1\n16,16 = 3/4\n14,14 = 3/4\n14,65 = 1/4\n16,45 = 1/4");
}

/// Backscattering makes each stretch a resistor 1 + L/λ: λ of 100 µm on a bar of 600 µm by 100 µm with probes at 100 µm and
/// 500 µm, arms of 30 µm and contacts of 20 µm width. The ring of six such resistors is solved by hand.
#[test]
fn backscattering_adds_in_proportion_to_the_length() {
    let text = six_text("1", &[], "")
        .replace("bulk = 1\nfillings = {  }\n", "modes = { forward = 1, backward = 1 }\nbackscatter_um = 100\n");
    let (end, long) = (1.0 + (90.0 + 30.0) / 100.0, 1.0 + (380.0 + 60.0) / 100.0);
    let side = 2.0 * end + long;
    let table = format!(
        "14,14 = {}
         14,23 = {}
         14,65 = {}
         14,26 = 0
         12,12 = {}
         12,45 = {}",
        side / 2.0,
        long / 2.0,
        long / 2.0,
        end * (2.0 * side - end) / (2.0 * side),
        -end * end / (2.0 * side),
    );
    check_floats(&make(&text), &table);
}

/// A chiral edge of one channel, driven by the magnetisation: no longitudinal resistance, a Hall resistance of h/e² whose
/// sign is that of the magnetisation, nothing nonlocal (C.-Z. Chang et al., Science 340, 167 (2013), and Phys. Rev. Lett.
/// 115, 057206 (2015), abstracts seen).
#[test]
fn an_anomalous_bar_shows_one_hall_resistance() {
    let clockwise = six("1", &[], "driven_by = \"magnetisation\"");
    check(&clockwise, "14,14 = 1\n14,23 = 0\n14,65 = 0\n14,26 = 1 | -1\n12,45 = 0\n12,34 = 0");
    let counter = six("-1", &[], "driven_by = \"magnetisation\"");
    check(&counter, "14,14 = 1\n14,23 = 0\n14,26 = -1 | 1");
}

/// One chiral mode with one helical pair, two forward and one backward: an internal check of this model by own algebra, no
/// published value. (The idea of such edges: J. Wang, B. Lian, S.-C. Zhang, Phys. Rev. Lett. 111, 086803 (2013),
/// abstract seen.)
#[test]
fn a_chiral_mode_beside_a_helical_pair() {
    check(
        &with_modes("{ forward = 2, backward = 1 }"),
        "14,14 = 7/9
         14,23 = 2/9
         14,65 = 2/9
         14,26 = 1/3 | -1/3
         12,45 = -4/63
         12,34 = -2/63 | -8/63
         13,54 = 2/21 | 4/21",
    );
}

/// Two-terminal conductance of graphene with outer filling ν and inner filling ν' (B. Özyilmaz et al., Phys. Rev. Lett. 99,
/// 166804 (2007), abstract seen; formulas from memory, algebra verified): bipolar |ν||ν'|/(2|ν'| + |ν|); unipolar |ν'| where
/// it is the smaller, else |ν||ν'|/(2|ν'| − |ν|) with full mixing and |ν| without. J. Velasco et al. find the same in
/// suspended devices (New J. Phys. 11, 095008 (2009), from memory).
#[test]
fn graphene_with_a_gate_across_has_its_two_terminal_plateaus() {
    let conductance = |outer: i64, inner: i64, edge: &str| {
        let text = six_text(&outer.to_string(), &[("TG", "gate", 250, 350, &inner.to_string())], edge);
        make(&text.replace("spin-split", "graphene")).exact(Polarity::Toward, "14,14")
    };
    for (outer, inner, bipolar, mixed) in [
        (2, 2, "3/2", "1/2"),
        (2, 6, "7/6", "5/6"),
        (2, 10, "11/10", "9/10"),
        (6, 2, "5/6", "1/2"),
        (6, 6, "1/2", "1/6"),
        (6, 10, "13/30", "7/30"),
        (10, 2, "7/10", "1/2"),
        (10, 6, "11/30", "1/6"),
        (10, 10, "3/10", "1/10"),
    ] {
        let full = "mixing = \"full\"\ninterface_mixing = \"full\"";
        assert_eq!(conductance(outer, -inner, full), bipolar, "{outer} over -{inner}");
        assert_eq!(conductance(outer, inner, full), mixed, "{outer} over {inner}");
        let kept = Rational::fraction(1, outer.min(inner)).unwrap().to_string();
        assert_eq!(conductance(outer, inner, ""), kept, "{outer} over {inner} unmixed");
    }
}

/// What has no length, or one channel alone, stays in fractions.
#[test]
fn floats_come_only_where_a_length_matters() {
    let over = "mixing = { length_um = 80 }";
    assert!(is_exact(&six("1", &[], over).predict(0, Polarity::Toward, &[])));
    assert!(!is_exact(&six("2", &[("TG", "gate", 250, 350, "1")], over).predict(0, Polarity::Toward, &[])));
    let groups = "mixing = \"full\"\ngroups = [[1, 3], [2, 4]]";
    assert!(is_exact(&six("4", &[("TG", "gate", 250, 350, "2")], groups).predict(0, Polarity::Toward, &[])));
}
