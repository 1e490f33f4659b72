//! Published values of gated, stepped and bipolar bars. Each test names its source; `value from memory` stands where the
//! formula was not read again in print, and then the algebra was verified independently with exact rationals.

use edgesheet::quantity::Polarity;

use crate::bar::Made;
use crate::bar::six;

/// Checks readings written as `14,25 = 1 | 1/3`: the value at `+` and at `−`, in h/e².
pub fn check(made: &Made, table: &str) {
    for line in table.lines().map(str::trim).filter(|line| !line.is_empty()) {
        let (reading, values) = line.split_once('=').expect("a reading and its values");
        let (toward, away) = values.split_once('|').unwrap_or((values, values));
        for (polarity, value) in [(Polarity::Toward, toward), (Polarity::Away, away)] {
            assert_eq!(made.exact(polarity, reading.trim()), value.trim(), "{line} at {polarity:?}");
        }
    }
}

fn gate(bulk: &str, under: &str, edge: &str) -> Made {
    six(bulk, &[("TG", "gate", 250, 350, under)], edge)
}

fn step(left: &str, right: &str) -> Made {
    six(left, &[("S", "step", 300, 600, right)], "")
}

/// M. Büttiker, Phys. Rev. B 38, 9375 (1988), ideal contacts; value from memory.
#[test]
fn an_ideal_bar_shows_its_hall_resistance_and_nothing_else() {
    for (filling, hall) in [("1", "1"), ("2", "1/2"), ("5", "1/5")] {
        check(
            &six(filling, &[], ""),
            &format!(
                "14,14 = {hall}
                 14,23 = 0
                 14,65 = 0
                 14,26 = {hall} | -{hall}
                 14,35 = {hall} | -{hall}
                 12,45 = 0
                 12,34 = 0
                 23,65 = 0"
            ),
        );
    }
}

/// The signs of all readings of the 3-over-1 bar: R_L = 1/ν_g − 1/ν_b, R_D = 1/ν_g and 2/ν_b − 1/ν_g after
/// C. W. J. Beenakker and H. van Houten, Solid State Phys. 44, 1 (1991), section IV; formulas from memory, algebra
/// verified. The signs follow from electrons running clockwise with the field toward the reader (common practice).
#[test]
fn three_over_one_has_every_sign_right() {
    check(
        &gate("3", "1", ""),
        "14,14 = 1
         14,23 = 2/3
         14,65 = 2/3
         14,26 = 1/3 | -1/3
         14,35 = 1/3 | -1/3
         14,25 = 1 | 1/3
         14,36 = -1/3 | -1",
    );
}

/// R. J. Haug, A. H. MacDonald, P. Streda, K. von Klitzing, Phys. Rev. Lett. 61, 2797 (1988): R_L = 1/ν_g − 1/ν_b on
/// both edges at both polarities; formula from memory, algebra verified.
#[test]
fn a_gate_across_the_bar_gives_the_difference_of_two_hall_resistances() {
    for (bulk, under, longitudinal, hall, whole) in
        [("2", "1", "1/2", "1/2", "1"), ("3", "2", "1/6", "1/3", "1/2"), ("4", "2", "1/4", "1/4", "1/2")]
    {
        check(
            &gate(bulk, under, ""),
            &format!(
                "14,14 = {whole}
                 14,23 = {longitudinal}
                 14,65 = {longitudinal}
                 14,26 = {hall} | -{hall}
                 14,35 = {hall} | -{hall}"
            ),
        );
    }
}

/// Diagonals as in Beenakker and van Houten (1991): 1/ν_g and 1/ν_g − 2/ν_b exchange with the field; formulas from
/// memory, algebra verified.
#[test]
fn diagonals_exchange_with_the_field() {
    check(&gate("2", "1", ""), "14,25 = 1 | 0\n14,63 = 0 | 1");
    check(&gate("3", "2", ""), "14,25 = 1/2 | -1/6\n14,63 = -1/6 | 1/2");
    check(&gate("4", "2", ""), "14,25 = 1/2 | 0\n14,63 = 0 | 1/2");
}

/// A constriction at 5/2 in a bar at 3: R_D = 2/5 and R_L = 1/15. J. B. Miller et al., Nature Phys. 3, 561 (2007) for the
/// method; formulas from memory, algebra verified.
#[test]
fn a_partly_transmitted_level_counts_with_its_share() {
    check(
        &gate("3", "2.5", ""),
        "14,14 = 2/5
         14,23 = 1/15
         14,65 = 1/15
         14,26 = 1/3 | -1/3
         14,25 = 2/5 | -4/15
         14,63 = -4/15 | 2/5",
    );
}

/// Unequal sides 4 | 2 | 3: own algebra with exact rationals, after Beenakker and van Houten (1991).
#[test]
fn unequal_sides_show_a_different_resistance_on_each_edge() {
    check(
        &six("4", &[("TG", "gate", 250, 350, "2"), ("S", "step", 350, 600, "3")], ""),
        "14,14 = 1/2
         14,23 = 1/6 | 1/4
         14,65 = 1/4 | 1/6
         14,26 = 1/4 | -1/4
         14,35 = 1/3 | -1/3
         14,25 = 1/2 | -1/12
         14,63 = -1/12 | 1/2",
    );
}

/// A density step without a gate: one edge 0, the other 1/ν_c − 1/ν_a, exchanged with the field. Experiment:
/// L. A. Ponomarenko et al., Solid State Commun. 130, 705 (2004), abstract seen.
#[test]
fn a_density_step_shows_on_one_edge_only() {
    check(&step("6", "2"), "14,14 = 1/2\n14,23 = 0 | 1/3\n14,65 = 1/3 | 0");
    check(&step("10", "6"), "14,14 = 1/6\n14,23 = 0 | 1/15\n14,65 = 1/15 | 0");
}

/// Two gates in series: 1/min(ν_g) unmixed; 1/ν_g1 + 1/ν_g2 − 1/ν_b when the channels between them equilibrate
/// (own algebra, verified with exact rationals).
#[test]
fn two_gates_in_series_depend_on_mixing_between_them() {
    for (bulk, first, second, unmixed, mixed) in [
        ("2", "1", "1", "1", "3/2"),
        ("4", "2", "2", "1/2", "3/4"),
        ("4", "2", "3", "1/2", "7/12"),
        ("4", "3", "1", "1", "13/12"),
    ] {
        let gates = [("A", "gate", 200, 250, first), ("B", "gate", 350, 400, second)];
        check(&six(bulk, &gates, ""), &format!("14,14 = {unmixed}"));
        check(&six(bulk, &gates, "mixing = \"full\""), &format!("14,14 = {mixed}"));
    }
}

/// p–n junction, fully mixed: G = |ν1||ν2|/(|ν1| + |ν2|); unipolar the smaller one. D. A. Abanin and L. S. Levitov,
/// Science 317, 641 (2007); plateaus 1 and 3/2 seen by J. R. Williams et al., Science 317, 638 (2007), abstract seen.
#[test]
fn a_bipolar_junction_divides_the_current_by_full_mixing() {
    for (left, right, resistance) in [
        ("2", "-2", "1"),
        ("2", "-6", "2/3"),
        ("2", "-10", "3/5"),
        ("6", "-6", "1/3"),
        ("6", "-10", "4/15"),
        ("10", "-10", "1/5"),
        ("2", "6", "1/2"),
    ] {
        check(&step(left, right), &format!("14,14 = {resistance}"));
    }
}

/// Four-terminal p–n junction: one edge 1/|ν1| + 1/|ν2|, the other 0. T. Lohmann, K. von Klitzing, J. H. Smet, Nano Lett.
/// 9, 1973 (2009) for h/e²; values verified with exact rationals.
#[test]
fn a_bipolar_junction_shows_on_one_edge_only() {
    check(
        &step("2", "-2"),
        "14,23 = 1 | 0\n14,65 = 0 | 1\n14,26 = 1/2 | -1/2\n14,35 = -1/2 | 1/2\n14,25 = 1/2 | 1/2\n14,63 = 1/2 | 1/2",
    );
    check(&step("2", "-6"), "14,23 = 2/3 | 0\n14,65 = 0 | 2/3\n14,25 = 1/2 | 1/6\n14,63 = 1/6 | 1/2");
    check(&step("6", "-10"), "14,23 = 4/15 | 0\n14,65 = 0 | 4/15");
}

/// p–n–p, two-terminal: bipolar G = |ν||ν'|/(2|ν'| + |ν|); unipolar |ν'| ≤ |ν|: |ν'|; accumulation fully mixed
/// |ν||ν'|/(2|ν'| − |ν|), unmixed |ν|. B. Özyilmaz et al., Phys. Rev. Lett. 99, 166804 (2007), abstract seen; formulas
/// from memory, algebra verified.
#[test]
fn a_gate_of_the_other_sign_or_of_more_levels() {
    for (outer, inner, resistance) in [
        ("2", "-2", "3/2"),
        ("2", "-6", "7/6"),
        ("2", "-10", "11/10"),
        ("6", "-2", "5/6"),
        ("6", "-6", "1/2"),
        ("6", "-10", "13/30"),
        ("10", "-2", "7/10"),
        ("10", "-6", "11/30"),
        ("10", "-10", "3/10"),
    ] {
        check(&gate(outer, inner, ""), &format!("14,14 = {resistance}"));
    }
    for (outer, inner, mixed) in [("2", "6", "5/6"), ("2", "10", "9/10"), ("6", "10", "7/30")] {
        check(&gate(outer, inner, "mixing = \"full\""), &format!("14,14 = {mixed}"));
    }
    check(&gate("2", "6", ""), "14,14 = 1/2");
}

/// Four-terminal p–n–p: D.-K. Ki and H.-J. Lee, Phys. Rev. B 79, 195327 (2009), abstract seen; values verified with exact
/// rationals.
#[test]
fn four_terminal_readings_of_a_gate_of_the_other_sign() {
    check(&gate("2", "-2", ""), "14,23 = 1\n14,65 = 1\n14,26 = 1/2 | -1/2\n14,25 = 3/2 | 1/2\n14,63 = 1/2 | 3/2");
    check(&gate("2", "-6", ""), "14,23 = 2/3\n14,65 = 2/3\n14,25 = 7/6 | 1/6");
    check(&gate("6", "-2", ""), "14,23 = 2/3\n14,65 = 2/3\n14,26 = 1/6 | -1/6\n14,25 = 5/6 | 1/2");
}

/// Accumulation under the gate, fully mixed along the rim: R_L = 1/ν − 1/ν' on both edges, diagonals 2/ν − 1/ν' and
/// −1/ν'... of the other sense; Ki and Lee (2009), abstract seen; values verified with exact rationals.
#[test]
fn four_terminal_readings_of_accumulation_with_full_mixing() {
    let mixed = "mixing = \"full\"";
    check(&gate("2", "6", mixed), "14,23 = 1/3\n14,65 = 1/3\n14,26 = 1/2 | -1/2\n14,25 = 5/6 | -1/6");
    check(&gate("6", "10", mixed), "14,23 = 1/15\n14,65 = 1/15\n14,26 = 1/6 | -1/6\n14,25 = 7/30 | -1/10");
}
