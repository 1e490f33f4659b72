//! Laws of mixing over lengths, of groups and of contacts that tell channels apart, and references from outside.

use edgesheet::conductance::Conductance;
use edgesheet::number::Rational;
use edgesheet::quantity::Polarity;
use edgesheet::resistance::every_reading;
use nalgebra::DMatrix;

use crate::bar::BOTH;
use crate::bar::Made;
use crate::bar::make;
use crate::bar::six;
use crate::bar::six_text;
use crate::edges::float;
use crate::literature::check;
use crate::pixel_bar::PixelBar;
use crate::random_bar::Dice;

fn matrix(solved: &Conductance) -> DMatrix<f64> {
    let contacts = solved.contacts();
    DMatrix::from_fn(contacts, contacts, |row, column| solved.entry(row, column).to_f64())
}

/// Lengths in µm: within groups, between them; `none` is infinite.
struct Lengths {
    within: Option<f64>,
    between: Option<f64>,
}

impl Lengths {
    fn words(length: Option<f64>) -> String {
        length.map_or("\"none\"".to_owned(), |length| format!("{{ length_um = {length} }}"))
    }
}

/// Steps of conductance 1/3, 1/3, 1/3 and 1; two contacts on the upper rim, 180 µm apart, that touch one step each.
fn one_to_one(from: usize, to: usize, lengths: &Lengths, groups: &str) -> Made {
    let list = |open: usize| {
        let shares: Vec<&str> = (0..4).map(|at| if at == open { "1" } else { "0" }).collect();
        format!("transmission = [{}]", shares.join(", "))
    };
    let (within, between) = (Lengths::words(lengths.within), Lengths::words(lengths.between));
    let (groups, between) = match groups {
        "" => (String::new(), String::new()),
        groups => (format!("groups = {groups}\n"), format!("group_mixing = {between}\n")),
    };
    make(&format!(
        "format = 1\n[device]\nid = \"T\"\nladder = [\"1/3\", \"2/3\", 1, 2]\n[mesa]\nshape = \"bar\"\nlength_um = 600\n\
         width_um = 100\n[edge]\nmixing = {within}\n{groups}{between}\
         [[contact]]\nname = \"1\"\nedge = \"left\"\n[[contact]]\nname = \"4\"\nedge = \"right\"\n\
         [[contact]]\nname = \"A\"\nedge = \"top\"\nx_um = 100\nwidth_um = 20\n{}\n\
         [[contact]]\nname = \"B\"\nedge = \"top\"\nx_um = 300\nwidth_um = 20\n{}\n\
         [[point]]\nname = \"p\"\nbulk = 2\n",
        list(from),
        list(to)
    ))
}

/// The program's closed solution of one piece against the matrix exponential of the rate equation
/// dμ_i/dx = −(μ_i − m_group)/ℓ − (μ_i − m_all)/ℓ_g, from the linear-algebra library (scaling and squaring with Padé
/// approximants, N. J. Higham, SIAM J. Matrix Anal. Appl. 26, 1179 (2005), as its documentation says).
#[test]
fn one_piece_agrees_with_the_matrix_exponential() {
    const WEIGHTS: [f64; 4] = [1.0 / 3.0, 1.0 / 3.0, 1.0 / 3.0, 1.0];
    const APART_UM: f64 = 180.0;
    let cases = [
        ("", [0, 0, 0, 0], Some(150.0), None),
        ("[[1, 3], [2, 4]]", [0, 1, 0, 1], Some(90.0), None),
        ("[[1, 3], [2, 4]]", [0, 1, 0, 1], Some(90.0), Some(700.0)),
        ("[[2, 3]]", [0, 1, 1, 2], Some(40.0), Some(300.0)),
        ("[[4, 1]]", [0, 1, 2, 0], None, Some(120.0)),
    ];
    for (groups, group, within, between) in cases {
        let mean = |chosen: &dyn Fn(usize) -> bool, of: usize| {
            let sum: f64 = (0..4).filter(|at| chosen(*at)).map(|at| WEIGHTS[at]).sum();
            if chosen(of) { WEIGHTS[of] / sum } else { 0.0 }
        };
        let rate = |length: Option<f64>| length.map_or(0.0, |length| 1.0 / length);
        let generator = DMatrix::from_fn(4, 4, |row, column| {
            let own = f64::from(u8::from(row == column));
            let of_group = own - mean(&|at| group[at] == group[row], column);
            let of_all = own - mean(&|_| true, column);
            -APART_UM * (rate(within) * of_group + rate(between) * of_all)
        });
        let along = generator.exp();
        for from in 0..4 {
            for to in 0..4 {
                let made = one_to_one(from, to, &Lengths { within, between }, groups);
                // At `+` channels run from A to B: what B takes up is the share of A in its step there.
                let found = made.predict(0, Polarity::Toward, &[]).conductance.entry(3, 2).to_f64();
                let wanted = -WEIGHTS[to] * along[(to, from)];
                assert!((found - wanted).abs() < 1e-13, "{groups} {from}→{to}: {found}, not {wanted}");
            }
        }
    }
}

/// A random bar with lengths, some of whose contacts tell channels apart; none where the program refuses it.
fn random_made(seed: u64) -> Option<Made> {
    let bar = PixelBar::with_lengths(seed);
    let mut dice = Dice::new(seed + 99);
    let mut text = bar.text();
    for contact in &bar.contacts {
        let share = format!("transmission = {}\n", contact.transmission as f64 / 20.0);
        if dice.chance(40) {
            let list = format!(
                "transmission = [{}, {}]\n",
                f64::from(dice.below(5) as u32) / 4.0,
                share.trim().split(' ').next_back()?
            );
            text = text.replacen(&share, &list, 1);
        }
    }
    if dice.chance(40) {
        text = text.replace(
            "[[contact]]\nname = \"1\"",
            "groups = [[1, 3], [2]]\ngroup_mixing = { length_um = 250 }\n[[contact]]\nname = \"1\"",
        );
    }
    let source = edgesheet::diagnostic::Source::new("p.toml", text.as_str());
    let device = edgesheet::device::from_source(&source).ok()?.value;
    edgesheet::layout::layout(&device).ok()?;
    Some(make(&text))
}

/// Rows and columns sum to zero, reversal of the field transposes the matrix (H. B. G. Casimir, Rev. Mod. Phys. 17, 343
/// (1945)), no potentials draw power out of the device, with any lengths, groups and lists of transmissions.
#[test]
fn lengths_and_lists_leave_sums_reciprocity_and_passivity() {
    let (mut solved, mut floats) = (0, 0);
    for seed in 0..400 {
        let Some(made) = random_made(seed) else { continue };
        let [toward, away] = BOTH.map(|polarity| made.predict(0, polarity, &[]).conductance);
        floats += u32::from(matches!(toward, Conductance::Float(_)));
        solved += 1;
        let (plus, minus) = (matrix(&toward), matrix(&away));
        assert!((&plus - minus.transpose()).abs().max() < 1e-12, "seed {seed}");
        assert!(plus.row_sum().abs().max() < 1e-12 && plus.column_sum().abs().max() < 1e-12, "seed {seed}");
        let symmetric = (&plus + plus.transpose()) / 2.0;
        assert!(symmetric.symmetric_eigenvalues().min() > -1e-12, "seed {seed}");
        let beside = (0..plus.nrows()).flat_map(|row| (0..plus.ncols()).map(move |column| (row, column)));
        assert!(beside.filter(|(row, column)| row != column).all(|at| plus[at] <= 0.0), "seed {seed}");
    }
    assert!(solved > 200 && floats > 100, "{solved} solved, {floats} in floats");
}

/// R_ij,kl(+) = R_kl,ij(−) of the readings themselves (M. Büttiker, Phys. Rev. Lett. 57, 1761 (1986); value from memory).
#[test]
fn readings_are_reciprocal_with_lengths() {
    for seed in 0..60 {
        let Some(made) = random_made(seed) else { continue };
        let all = every_reading(made.device.contacts.len().min(5));
        let exchanged: Vec<_> = all.iter().map(|r| edgesheet::resistance::Reading::new(r.voltage, r.current)).collect();
        let (toward, away) = (made.predict(0, Polarity::Toward, &all), made.predict(0, Polarity::Away, &exchanged));
        for (a, b) in toward.expected.iter().zip(&away.expected) {
            if let (Some(a), Some(b)) = (a.h_per_e2, b.h_per_e2) {
                assert!((a - b).abs() < 1e-9 * a.abs().max(1.0), "seed {seed}: {a} and {b}");
            }
        }
    }
}

/// With a length far beyond the device nothing mixes, with one far below all does: the exact values of "none" and "full".
#[test]
fn long_and_short_lengths_end_at_none_and_full() {
    let parts = [("A", "gate", 200, 250, "1"), ("B", "gate", 350, 400, "2")];
    for (length, kind) in [("100000", "\"none\""), ("0.5", "\"full\"")] {
        let near = six("3", &parts, &format!("mixing = {{ length_um = {length} }}"));
        let exact = six("3", &parts, &format!("mixing = {kind}"));
        for reading in ["14,14", "14,23", "14,65", "14,25", "14,36", "14,26"] {
            for polarity in BOTH {
                let wanted = Rational::from_text(&exact.exact(polarity, reading)).unwrap().to_f64();
                assert!((float(&near, polarity, reading) - wanted).abs() < 5e-3, "{reading} {length} {polarity:?}");
            }
        }
    }
}

/// The same device solved in fractions and, when floats are asked for, in floats.
#[test]
fn floats_on_request_agree_with_fractions() {
    for seed in 0..200 {
        let bar = crate::random_bar::RandomBar::new(seed);
        let made = make(&bar.text(&bar.names()));
        for polarity in BOTH {
            let exact = edgesheet::network::operating(&made.network, &made.device, &made.device.points[0], polarity);
            let float =
                edgesheet::network::Operating { arithmetic: edgesheet::network::Arithmetic::Float, ..exact.clone() };
            let [exact, float] = [exact, float].map(|operating| {
                edgesheet::conductance::conductance(&edgesheet::network::channels(&made.network, &operating))
            });
            assert!(exact.exact().is_some() && float.exact().is_none());
            assert!((matrix(&exact) - matrix(&float)).abs().max() < 1e-12, "seed {seed}");
        }
    }
}

fn with_contact(text: &str, name: &str, edge: &str, x: u32) -> String {
    let contact = format!("[[contact]]\nname = \"{name}\"\nedge = \"{edge}\"\nx_um = {x}\nwidth_um = 20\n");
    text.replacen("[[contact]]\nname = \"1\"", &format!("{contact}[[contact]]\nname = \"1\""), 1)
}

/// An ideal floating contact forces the potentials of all channels that reach it together. Where they have one potential it
/// changes nothing; on both edges between two gates of one channel in a bar of two it turns 1 into 1 + 1 − 1/2 = 3/2; on a
/// helical edge it is one more resistor in the ring: k(7 − k)/7 in place of k(6 − k)/6 (M. Büttiker, Phys. Rev. B 38, 9375
/// (1988), and Science 325, 278 (2009); values from memory, algebra verified).
#[test]
fn a_floating_contact_changes_what_it_must() {
    let one = six_text("3", &[("TG", "gate", 250, 350, "1")], "");
    let same = "14,14 = 1\n14,23 = 2/3\n14,25 = 1 | 1/3\n14,36 = -1/3 | -1";
    check(&make(&with_contact(&one, "x", "top", 180)), same);
    check(&make(&with_contact(&with_contact(&one, "x", "top", 180), "y", "bottom", 420)), same);

    let two = six_text("2", &[("A", "gate", 200, 250, "1"), ("B", "gate", 350, 400, "1")], "");
    check(&make(&two), "14,14 = 1");
    check(&make(&with_contact(&with_contact(&two, "x", "top", 300), "y", "bottom", 300)), "14,14 = 3/2");

    let helical =
        six_text("1", &[], "").replace("bulk = 1\nfillings = {  }\n", "modes = { forward = 1, backward = 1 }\n");
    check(&make(&helical), "14,14 = 3/2\n23,23 = 5/6");
    check(&make(&with_contact(&helical, "x", "top", 300)), "14,14 = 12/7\n23,23 = 10/7");
}

/// A contact that failed on the chip, with transmission zero, leaves edge modes as they would be without it.
#[test]
fn a_dead_contact_is_passed_by_both_ways() {
    let helical =
        six_text("1", &[], "").replace("bulk = 1\nfillings = {  }\n", "modes = { forward = 1, backward = 1 }\n");
    let dead = helical.replace("name = \"3\"\n", "name = \"3\"\ntransmission = 0\n");
    // A ring of five: k(5 − k)/5.
    check(&make(&dead), "14,14 = 6/5\n12,12 = 4/5\n24,24 = 4/5\n14,23 = -");
}

/// Groups that mix fully or not at all stay in fractions. Between two gates of one channel in a bar of four the channel
/// that passes equilibrates with those of its group alone, so that the sum rule 1/ν_1 + 1/ν_2 − 1/ν_b holds with the
/// conductance of the group in place of ν_b (own algebra, from that rule).
#[test]
fn groups_decide_what_passes_a_second_gate() {
    let parts = [("A", "gate", 200, 250, "1"), ("B", "gate", 350, 400, "1")];
    let whole = |edge: &str| six("4", &parts, edge).exact(Polarity::Toward, "14,14");
    assert_eq!(whole("mixing = \"none\""), "1");
    // Of four channels all equilibrate: 1 + 1 − 1/4; of two in a group: 1 + 1 − 1/2.
    assert_eq!(whole("mixing = \"full\""), "7/4");
    assert_eq!(whole("mixing = \"full\"\ngroups = [[1, 3], [2, 4]]"), "3/2");
    assert_eq!(whole("mixing = \"full\"\ngroups = [[1, 3], [2, 4]]\ngroup_mixing = \"full\""), "7/4");
    assert_eq!(whole("mixing = \"none\"\ngroups = [[1, 3], [2, 4]]\ngroup_mixing = \"none\""), "1");
    assert_eq!(whole("mixing = \"full\"\ngroups = [[2, 3]]"), "1");
}
