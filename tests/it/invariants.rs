//! What must hold for every device, tested on random bars.

use edgesheet::network::Feed;
use edgesheet::network::Wired;
use edgesheet::number::Matrix;
use edgesheet::number::Rational;
use edgesheet::quantity::Polarity;
use edgesheet::resistance::every_reading;

use crate::bar::BOTH;
use crate::bar::Made;
use crate::bar::make;
use crate::random_bar::Dice;
use crate::random_bar::RandomBar;

const BARS: u64 = 400;

fn each_bar(mut check: impl FnMut(&RandomBar, &Made)) {
    for seed in 0..BARS {
        let bar = RandomBar::new(seed);
        let made = make(&bar.text(&bar.names()));
        check(&bar, &made);
    }
}

fn matrix(made: &Made, polarity: Polarity) -> Matrix<Rational> {
    made.predict(0, polarity, &[]).conductance.exact().unwrap().matrix.clone()
}

fn row_sums(matrix: &Matrix<Rational>) -> Vec<Rational> {
    (0..matrix.rows()).map(|row| matrix.row(row).iter().cloned().sum()).collect()
}

/// No current flows when all contacts have one potential, and none is lost (M. Büttiker, Phys. Rev. Lett. 57, 1761
/// (1986)).
#[test]
fn rows_and_columns_of_the_conductance_matrix_sum_to_zero() {
    each_bar(|bar, made| {
        for polarity in BOTH {
            let matrix = matrix(made, polarity);
            assert!(row_sums(&matrix).iter().all(Rational::is_zero), "{bar:?}");
            assert!(row_sums(&matrix.transposed()).iter().all(Rational::is_zero), "{bar:?}");
        }
    });
}

/// Onsager–Casimir: G(−) is the transpose of G(+), and with it R_ij,kl(+) = R_kl,ij(−) (Büttiker 1986).
#[test]
fn reversing_the_field_transposes_the_matrix_and_exchanges_the_pairs() {
    each_bar(|bar, made| {
        let [toward, away] = BOTH.map(|polarity| matrix(made, polarity));
        assert_eq!(toward.transposed(), away, "{bar:?}");
        let readings = every_reading(bar.contacts.len().min(5));
        let exchanged: Vec<_> =
            readings.iter().map(|r| edgesheet::resistance::Reading::new(r.voltage, r.current)).collect();
        let at_plus = made.predict(0, Polarity::Toward, &readings).expected;
        let at_minus = made.predict(0, Polarity::Away, &exchanged).expected;
        for (a, b) in at_plus.iter().zip(&at_minus) {
            if a.exact.is_some() && b.exact.is_some() {
                assert_eq!(a.exact, b.exact, "{bar:?}");
            }
        }
    });
}

/// Kirchhoff: the voltages round any loop of probes cancel.
#[test]
fn readings_round_a_loop_of_probes_close() {
    each_bar(|bar, made| {
        let contacts = bar.contacts.len();
        let at = edgesheet::device::ContactIdx;
        let ring: Vec<_> = (0..contacts)
            .map(|k| edgesheet::resistance::Reading::new([at(0), at(contacts / 2)], [at(k), at((k + 1) % contacts)]))
            .collect();
        for polarity in BOTH {
            let sum: Option<Rational> =
                made.predict(0, polarity, &ring).expected.into_iter().map(|expected| expected.exact).sum();
            assert!(sum.is_none_or(|sum| sum.is_zero()), "{bar:?}");
        }
    });
}

#[test]
fn the_mirror_image_is_the_reversed_field() {
    each_bar(|bar, made| {
        let mirrored = make(&bar.mirrored().text(&bar.names()));
        for polarity in BOTH {
            assert_eq!(matrix(&mirrored, polarity), matrix(made, polarity.reversed()), "{bar:?}");
        }
    });
}

#[test]
fn the_size_of_the_bar_does_not_matter() {
    each_bar(|bar, made| {
        let larger = make(&bar.scaled(7).text(&bar.names()));
        assert_eq!(matrix(&larger, Polarity::Toward), matrix(made, Polarity::Toward), "{bar:?}");
    });
}

#[test]
fn names_and_order_of_contacts_do_not_matter() {
    each_bar(|bar, made| {
        let count = bar.contacts.len();
        let mut dice = Dice::new(count as u64 + bar.length);
        let mut order: Vec<usize> = (0..count).collect();
        (1..count).rev().for_each(|at| order.swap(at, dice.below(at as u64 + 1) as usize));
        let names: Vec<String> = (0..count).map(|at| format!("probe {}", (at * 7 + 3) % 97)).collect();
        let shuffled = make(&bar.text_in_order(&names, &order));
        let (before, after) = (matrix(made, Polarity::Toward), matrix(&shuffled, Polarity::Toward));
        for (row, &old_row) in order.iter().enumerate() {
            for (column, &old_column) in order.iter().enumerate() {
                assert_eq!(after[(row, column)], before[(old_row, old_column)], "{bar:?}");
            }
        }
    });
}

/// What flows into a bundle flows out of it, and its potential is a mean of contact potentials.
#[test]
fn currents_are_conserved_in_every_bundle_and_shares_sum_to_one() {
    each_bar(|bar, made| {
        for polarity in BOTH {
            let prediction = made.predict(0, polarity, &[]);
            check_bundles(prediction.channels.exact().unwrap(), bar);
            for share in prediction.conductance.exact().unwrap().shares.iter().flatten() {
                assert_eq!(share.iter().map(|(_, part)| part.clone()).sum::<Rational>(), Rational::ONE, "{bar:?}");
            }
        }
    });
}

/// What flows into every bundle flows out of it; a closed loop that nothing feeds carries nothing.
pub fn check_bundles(channels: &Wired<Rational>, bar: &impl std::fmt::Debug) {
    let mut leaving = vec![Rational::ZERO; channels.bundles.len()];
    for bundle in &channels.bundles {
        let arriving: Rational = bundle.feeds.iter().map(|(_, weight)| weight.clone()).sum();
        assert!(arriving == bundle.weight || bundle.feeds.is_empty(), "{bar:?}");
        for (feed, weight) in &bundle.feeds {
            if let Feed::Bundle(from) = feed {
                leaving[from.0] += weight;
            }
        }
    }
    for (at, weight) in channels.terminals.iter().flat_map(|terminal| &terminal.absorbed) {
        leaving[at.0] += weight;
    }
    for (bundle, leaving) in channels.bundles.iter().zip(&leaving) {
        assert!(*leaving == bundle.weight || bundle.feeds.is_empty(), "{bar:?}");
    }
}

/// The two-terminal resistance of an ideal Hall conductor is its Hall resistance for any placement of contacts
/// (D. A. Abanin and L. S. Levitov, Phys. Rev. B 78, 035416 (2008), abstract seen).
#[test]
fn an_ungated_bar_has_its_hall_resistance_between_any_two_contacts() {
    for seed in 0..BARS {
        let bar = RandomBar { parts: Vec::new(), ..RandomBar::new(seed) };
        let made = make(&bar.text(&bar.names()));
        let expected = Rational::fraction(1, bar.bulk.abs()).unwrap();
        let two_terminal: Vec<_> = every_reading(bar.contacts.len())
            .into_iter()
            .filter(|reading| reading.current == reading.voltage)
            .collect();
        for answer in made.predict(0, Polarity::Toward, &two_terminal).expected {
            assert_eq!(answer.exact, Some(expected.clone()), "{bar:?}");
        }
    }
}
