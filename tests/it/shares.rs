//! Contacts that pass a part of their channels, on random bars of every kind.

use edgesheet::number::Matrix;
use edgesheet::number::Rational;
use edgesheet::quantity::Polarity;
use edgesheet::resistance::Prediction;
use edgesheet::resistance::Reading;
use edgesheet::resistance::every_reading;

use crate::bar::BOTH;
use crate::bar::make;
use crate::bar::six_text;
use crate::literature::check;
use crate::pixel_bar::PixelBar;
use crate::random_bar::Dice;

const BARS: u64 = 300;

fn exact_matrix(prediction: &Prediction) -> &Matrix<Rational> {
    &prediction.conductance.exact().unwrap().matrix
}

fn matrix(bar: &PixelBar, polarity: Polarity) -> Matrix<Rational> {
    make(&bar.text()).predict(0, polarity, &[]).conductance.exact().unwrap().matrix.clone()
}

/// G(−) is the transpose of G(+), with it R_ij,kl(+) = R_kl,ij(−), and all rows and columns sum to zero, for any
/// transmissions (M. Büttiker, Phys. Rev. Lett. 57, 1761 (1986); value from memory).
#[test]
fn any_transmissions_leave_reciprocity_and_sums() {
    for seed in 0..BARS {
        let bar = PixelBar::new(seed);
        let made = make(&bar.text());
        let all = every_reading(bar.contacts.len().min(5));
        let exchanged: Vec<Reading> = all.iter().map(|r| Reading::new(r.voltage, r.current)).collect();
        let (toward, away) = (made.predict(0, Polarity::Toward, &all), made.predict(0, Polarity::Away, &exchanged));
        let (plus, minus) = (exact_matrix(&toward), exact_matrix(&away));
        assert_eq!(plus.transposed(), *minus, "seed {seed}");
        for at in 0..plus.rows() {
            assert!(plus.row(at).iter().cloned().sum::<Rational>().is_zero(), "seed {seed}");
            assert!(minus.row(at).iter().cloned().sum::<Rational>().is_zero(), "seed {seed}");
        }
        for (a, b) in toward.expected.iter().zip(&away.expected) {
            if a.exact.is_some() && b.exact.is_some() {
                assert_eq!(a.exact, b.exact, "seed {seed}");
            }
        }
    }
}

/// The device takes up power Σ V_i I_i ≥ 0 whatever potentials its contacts have (second law of thermodynamics).
#[test]
fn no_potentials_draw_power_out_of_a_device() {
    for seed in 0..BARS {
        let bar = PixelBar::new(seed);
        let mut dice = Dice::new(seed + 1);
        for polarity in BOTH {
            let matrix = matrix(&bar, polarity);
            for _ in 0..10 {
                let potentials: Vec<Rational> =
                    (0..matrix.rows()).map(|_| Rational::from(dice.below(21) as i64 - 10)).collect();
                let current =
                    |row: usize| matrix.row(row).iter().zip(&potentials).map(|(g, v)| g * v).sum::<Rational>();
                let power: Rational = potentials.iter().enumerate().map(|(row, v)| v * &current(row)).sum();
                assert!(!power.is_negative(), "seed {seed} {polarity:?} {potentials:?}");
            }
        }
    }
}

/// A contact flush with the rim that takes nothing in is as good as none: all channels pass it by. (Where rims mix a bare
/// rim mixes too, and the border of a contact does not.)
#[test]
fn a_contact_that_passes_nothing_is_as_good_as_none() {
    let mut compared = 0;
    for seed in 0..BARS {
        let bar = PixelBar::new(seed);
        let flush = |at: &usize| bar.contacts[*at].arm.is_empty() && bar.contacts[*at].lines.contains("edge");
        let enough = bar.contacts.len() > 2 && !bar.full[0];
        let Some(dead) = (0..bar.contacts.len()).find(flush).filter(|_| enough) else { continue };
        let (mut shut, mut without) = (bar.clone(), bar.clone());
        shut.contacts[dead].transmission = 0;
        without.contacts.remove(dead);
        for polarity in BOTH {
            let (shut, without) = (matrix(&shut, polarity), matrix(&without, polarity));
            assert!(shut.row(dead).iter().all(Rational::is_zero), "seed {seed}");
            let others: Vec<usize> = (0..shut.rows()).filter(|at| *at != dead).collect();
            for (row, &from) in others.iter().enumerate() {
                for (column, &to) in others.iter().enumerate() {
                    assert_eq!(shut[(from, to)], without[(row, column)], "seed {seed} {polarity:?}\n{}", bar.text());
                }
            }
        }
        compared += 1;
    }
    assert!(compared > 100, "{compared}");
}

/// A probe that takes in half of four equal channels shows what all of them show; one that takes in nothing shows
/// nothing, and the others are as before (own algebra).
#[test]
fn a_poor_probe_reads_as_a_good_one_where_all_channels_are_alike() {
    let text = six_text("4", &[("TG", "gate", 250, 350, "2")], "");
    let shared =
        |share: &str| make(&text.replace("name = \"2\"\n", &format!("name = \"2\"\ntransmission = {share}\n")));
    check(&shared("0.5"), "14,14 = 1/2\n14,23 = 1/4\n14,65 = 1/4\n14,26 = 1/4 | -1/4\n14,25 = 1/2 | 0");
    check(&shared("0"), "14,14 = 1/2\n14,23 = -\n14,26 = -\n14,65 = 1/4\n14,35 = 1/4 | -1/4\n12,14 = -");
}

/// A source that takes in half of each of four channels, before a gate at 2. Probes lie between it and the gate, so
/// that all channels that reach either have one potential: it adds 1/(4/2) − 1/4 to the two-terminal value alone (own
/// algebra).
#[test]
fn a_poor_source_before_a_gate_by_hand() {
    let text = six_text("4", &[("TG", "gate", 250, 350, "2")], "");
    let made = make(&text.replace("name = \"1\"\n", "name = \"1\"\ntransmission = 0.5\n"));
    check(&made, "14,23 = 1/4\n14,65 = 1/4\n14,26 = 1/4 | -1/4\n14,14 = 3/4");
}
