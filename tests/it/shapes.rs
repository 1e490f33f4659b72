//! Mesas of any shape: the same device drawn in other ways, and what is known of rings, openings and constrictions.

use edgesheet::number::Matrix;
use edgesheet::number::Rational;
use edgesheet::quantity::Polarity;
use edgesheet::resistance::every_reading;

use crate::bar::BOTH;
use crate::bar::Made;
use crate::bar::make;
use crate::bar::six;
use crate::literature::check;
use crate::random_bar::RandomBar;
use crate::shaped::At;
use crate::shaped::Shaped;
use crate::shaped::rectangle;
use crate::shaped::six_outlined;

fn matrix(made: &Made, polarity: Polarity) -> Matrix<Rational> {
    made.predict(0, polarity, &[]).conductance.exact().unwrap().matrix.clone()
}

fn matrices(shaped: &Shaped) -> [Matrix<Rational>; 2] {
    let made = make(&shaped.text());
    BOTH.map(|polarity| matrix(&made, polarity))
}

/// Turned by the angle of a Pythagorean triangle (a, b, c), c times as large, so that every corner stays whole.
fn turned((a, b): At) -> impl Fn(At) -> At {
    move |(x, y)| (a * x - b * y, b * x + a * y)
}

/// One device drawn as a bar and as an outline: straight, by quarter turns, obliquely (angles of Pythagorean triangles),
/// listed the other way round. A mirror exchanges the two senses of the field.
#[test]
fn a_bar_drawn_as_an_outline_in_any_position_is_the_same_device() {
    for seed in 0..60 {
        let bar = RandomBar::new(seed);
        let shaped = Shaped::of_bar(&bar);
        let as_bar = make(&bar.text(&bar.names()));
        let [toward, away] = BOTH.map(|polarity| matrix(&as_bar, polarity));
        let oblique = [(3, 4, 5), (-5, 12, 13), (15, -8, 17), (-20, -21, 29)];
        let (a, b, c) = oblique[seed as usize % oblique.len()];
        let same = [
            ("as it is", shaped.clone()),
            ("reversed", shaped.reversed()),
            ("a quarter turn", shaped.moved(|(x, y)| (-y, x), 1)),
            ("half a turn", shaped.moved(|(x, y)| (-x, -y), 1)),
            ("three quarters", shaped.moved(|(x, y)| (y, -x), 1)),
            ("oblique", shaped.moved(turned((a, b)), c)),
            // Fifths of micrometres, which lie on the grid of 10 nm.
            ("3-4-5 in its own size", shaped.moved(|(x, y)| ((3 * x - 4 * y) / 5, (4 * x + 3 * y) / 5), 1)),
        ];
        for (how, drawn) in &same {
            assert_eq!(matrices(drawn), [toward.clone(), away.clone()], "{seed} {how} {bar:?}");
        }
        for mirrored in [shaped.moved(|(x, y)| (-x, y), 1), shaped.moved(|(x, y)| (y, x), 1)] {
            assert_eq!(matrices(&mirrored), [away.clone(), toward.clone()], "{seed} mirrored {bar:?}");
        }
    }
}

/// The two-terminal resistance of an ideal Hall conductor is its Hall resistance 1/ν for any simply connected shape and
/// any contacts (D. A. Abanin and L. S. Levitov, Phys. Rev. B 78, 035416 (2008), abstract seen).
#[test]
fn any_shape_has_its_hall_resistance_between_any_two_contacts() {
    let mut tried = 0;
    for seed in 0..300 {
        let shaped = crate::random_shape::plain(seed);
        let Some(made) = crate::random_shape::made(&shaped.text()) else { continue };
        tried += 1;
        let expected = Rational::fraction(1, shaped.bulk.parse::<i64>().unwrap().abs()).unwrap();
        let readings: Vec<_> =
            every_reading(shaped.contacts.len()).into_iter().filter(|r| r.current == r.voltage).collect();
        for polarity in BOTH {
            for answer in made.predict(0, polarity, &readings).expected {
                assert_eq!(answer.exact, Some(expected.clone()), "{shaped:?}");
            }
        }
    }
    assert!(tried > 150, "only {tried} shapes could be laid out");
}

/// The tables of the gated, stepped and doubly gated bar, on an outline turned by the angle of the 3-4-5 triangle.
fn outlined(bulk: &str, parts: &[crate::bar::Part], edge: &str) -> Made {
    let shaped = six_outlined(bulk, parts, edge);
    make(&shaped.moved(|(x, y)| ((3 * x - 4 * y) / 5, (4 * x + 3 * y) / 5), 1).text())
}

/// R_L = 1/ν_g − 1/ν_b and the diagonals 1/ν_g and 1/ν_g − 2/ν_b: C. W. J. Beenakker and H. van Houten, Solid State Phys.
/// 44, 1 (1991); R. J. Haug et al., Phys. Rev. Lett. 61, 2797 (1988). Formulas from memory, algebra verified.
#[test]
fn a_gate_across_an_outline_gives_the_published_values() {
    for (bulk, under, values) in [
        (
            "2",
            "1",
            "14,14 = 1\n14,23 = 1/2\n14,65 = 1/2\n14,26 = 1/2 | -1/2\n14,35 = 1/2 | -1/2\n14,25 = 1 | 0\n14,63 = 0 | 1",
        ),
        ("3", "2", "14,14 = 1/2\n14,23 = 1/6\n14,65 = 1/6\n14,26 = 1/3 | -1/3\n14,25 = 1/2 | -1/6\n14,63 = -1/6 | 1/2"),
        ("4", "2", "14,14 = 1/2\n14,23 = 1/4\n14,65 = 1/4\n14,26 = 1/4 | -1/4\n14,25 = 1/2 | 0\n14,63 = 0 | 1/2"),
        (
            "3",
            "2.5",
            "14,14 = 2/5\n14,23 = 1/15\n14,65 = 1/15\n14,26 = 1/3 | -1/3\n14,25 = 2/5 | -4/15\n14,63 = -4/15 | 2/5",
        ),
    ] {
        check(&outlined(bulk, &[("TG", "gate", 250, 350, under)], ""), values);
    }
}

/// Unequal sides 4 | 2 | 3, and density steps 6 | 2 and 10 | 6 with one edge 0 and the other 1/ν_c − 1/ν_a (experiment:
/// L. A. Ponomarenko et al., Solid State Commun. 130, 705 (2004), abstract seen; values verified with exact rationals).
#[test]
fn steps_on_an_outline_give_the_published_values() {
    check(
        &outlined("4", &[("TG", "gate", 250, 350, "2"), ("S", "step", 350, 600, "3")], ""),
        "14,14 = 1/2
         14,23 = 1/6 | 1/4
         14,65 = 1/4 | 1/6
         14,26 = 1/4 | -1/4
         14,35 = 1/3 | -1/3
         14,25 = 1/2 | -1/12
         14,63 = -1/12 | 1/2",
    );
    check(&outlined("6", &[("S", "step", 300, 600, "2")], ""), "14,14 = 1/2\n14,23 = 0 | 1/3\n14,65 = 1/3 | 0");
    check(&outlined("10", &[("S", "step", 300, 600, "6")], ""), "14,14 = 1/6\n14,23 = 0 | 1/15\n14,65 = 1/15 | 0");
}

/// Two gates in series: 1/min(ν_g) unmixed, 1/ν_g1 + 1/ν_g2 − 1/ν_b fully mixed (own algebra with exact rationals).
#[test]
fn two_gates_on_an_outline_depend_on_mixing_between_them() {
    for (bulk, first, second, unmixed, mixed) in [
        ("2", "1", "1", "1", "3/2"),
        ("4", "2", "2", "1/2", "3/4"),
        ("4", "2", "3", "1/2", "7/12"),
        ("4", "3", "1", "1", "13/12"),
    ] {
        let gates = [("A", "gate", 200, 250, first), ("B", "gate", 350, 400, second)];
        check(&outlined(bulk, &gates, ""), &format!("14,14 = {unmixed}"));
        check(&outlined(bulk, &gates, "mixing = \"full\""), &format!("14,14 = {mixed}"));
    }
}

/// An opening that touches no rim carries closed loops alone, and no current of any contact; one that joins both edges
/// stops the current as a gate at filling 0 does.
#[test]
fn an_opening_counts_where_it_joins_the_rim() {
    let gates = [("A", "gate", 150, 200, "1"), ("B", "gate", 380, 450, "2")];
    let bare = six_outlined("3", &gates, "");
    let plain = matrices(&bare);
    let antidot = Shaped { cutouts: vec![rectangle((280_000, 30_000), (320_000, 70_000))], ..bare.clone() };
    assert_eq!(matrices(&antidot), plain);
    // Under a gate it does not matter either.
    let gated = Shaped { cutouts: vec![rectangle((160_000, 20_000), (190_000, 80_000))], ..bare.clone() };
    assert_eq!(matrices(&gated), plain);
    let across = Shaped { cutouts: vec![rectangle((280_000, 0), (320_000, 100_000))], ..bare.clone() };
    let mut closed = gates.to_vec();
    closed.push(("C", "gate", 280, 320, "0"));
    assert_eq!(matrices(&across), matrices(&six_outlined("3", &closed, "")));
    assert_ne!(matrices(&across), plain);
}

/// A gate on one side of the opening only: the levels that the gate turns back go round the other side, so that nothing
/// is turned back as a whole. Gates on both sides at one filling turn back as one gate across does (hand argument: the
/// levels above it find no way past).
#[test]
fn gates_beside_an_opening_count_together() {
    let opening = vec![rectangle((280_000, 30_000), (320_000, 70_000))];
    let gate = |name: &str, low: i64, high: i64, filling: &str| {
        (name.to_owned(), "gate", rectangle((290_000, low), (310_000, high)), filling.to_owned())
    };
    let bare = Shaped { cutouts: opening, ..six_outlined("3", &[], "") };
    let one_side = Shaped { parts: vec![gate("N", 70_000, 100_000, "1")], ..bare.clone() };
    let both_sides = Shaped { parts: vec![gate("N", 70_000, 100_000, "1"), gate("S", 0, 30_000, "1")], ..bare.clone() };
    let across = |filling| make(&six_outlined("3", &[("TG", "gate", 290, 310, filling)], "").text());
    let both_sides = make(&both_sides.text());
    // Level 1 passes both gates; levels 2 and 3 are turned back by both.
    for polarity in BOTH {
        assert_eq!(both_sides.exact(polarity, "14,14"), across("1").exact(polarity, "14,14"));
        assert_eq!(both_sides.exact(polarity, "14,23"), across("1").exact(polarity, "14,23"));
    }
    // With one gate levels 2 and 3 join the rim and the opening on its side and leave by the other side of the opening.
    check(&make(&one_side.text()), "14,14 = 1/3\n14,26 = 1/3 | -1/3");
}

const RING: &str =
    "format = 1\n[device]\nid = \"R\"\n[mesa]\nshape = \"ring\"\nouter_diameter_um = 400\ninner_diameter_um = 160\n";

fn on_ring(contacts: &[(&str, &str, i32)], rest: &str) -> Made {
    let mut text = RING.to_owned();
    for (name, edge, angle) in contacts {
        text += &format!("[[contact]]\nname = \"{name}\"\nedge = \"{edge}\"\nangle_deg = {angle}\nwidth_um = 30\n");
    }
    make(&(text + rest))
}

const SIX_ON_RING: [(&str, &str, i32); 6] = [
    ("1", "outer", 180),
    ("2", "outer", 60),
    ("3", "outer", -60),
    ("a", "inner", 180),
    ("b", "inner", 0),
    ("c", "inner", 90),
];

/// Nothing flows between the rims of a Corbino ring on a plateau (R. B. Laughlin, Phys. Rev. B 23, 5632 (1981), from
/// memory), and each rim by itself is a Hall conductor with three contacts: at + channels run clockwise on the outer rim,
/// 1 → 2 → 3, and anticlockwise on the inner one, a → b → c. A contact that takes no current has the potential of the
/// contact before it (M. Büttiker, Phys. Rev. B 38, 9375 (1988), from memory).
#[test]
fn the_rims_of_a_corbino_ring_are_two_hall_conductors() {
    let made = on_ring(&SIX_ON_RING, "[[point]]\nname = \"p\"\nbulk = 2\n");
    for polarity in BOTH {
        let matrix = matrix(&made, polarity);
        for (outer, inner) in (0..3).flat_map(|outer| (3..6).map(move |inner| (outer, inner))) {
            assert!(matrix[(outer, inner)].is_zero() && matrix[(inner, outer)].is_zero());
        }
    }
    check(
        &made,
        "12,12 = 1/2
         12,13 = 1/2 | 0
         12,32 = 0 | 1/2
         ab,ab = 1/2
         ab,ac = 1/2 | 0
         ab,cb = 0 | 1/2
         1a,1a = - | -
         12,ab = - | -
         1b,23 = - | -",
    );
}

/// A gate over a sector of the ring at filling g turns ν − g levels from one rim to the other and back: they see a simply
/// connected ν − g Hall conductor, the others none (hand argument, with the theorem of Abanin and Levitov above).
#[test]
fn a_gate_over_a_sector_joins_the_rims_of_a_ring() {
    let sector = "[[gate]]\nname = \"G\"\noutline_um = [[60, -10], [250, -40], [250, 40], [60, 10]]\n";
    let two = [("1", "outer", 180), ("a", "inner", 180)];
    for (under, resistance) in [("0", "1/3"), ("1", "1/2"), ("2", "1"), ("3", "-")] {
        let point = format!("{sector}[[point]]\nname = \"p\"\nbulk = 3\nfillings = {{ G = {under} }}\n");
        check(&on_ring(&two, &point), &format!("1a,1a = {resistance} | {resistance}"));
    }
}

/// Contacts over the whole of both rims: the Corbino disc. No rim is left, so that no channel joins them.
#[test]
fn a_corbino_disc_has_no_path() {
    let text = format!(
        "{RING}[[contact]]\nname = \"1\"\nedge = \"outer\"\n[[contact]]\nname = \"2\"\nedge = \"inner\"\n[[point]]\nname = \"p\"\nbulk = 2\n"
    );
    check(&make(&text), "12,12 = - | -");
}

/// A contact over a whole opening of a bar, drawn by its own outline, touches no channel on a plateau, and one that a gate
/// border reaches takes the levels that run there.
#[test]
fn a_contact_over_an_opening_takes_what_runs_along_a_gate() {
    let base = Shaped {
        cutouts: vec![rectangle((290_000, 40_000), (310_000, 60_000))],
        ..six_outlined("3", &[("TG", "gate", 250, 300, "1")], "")
    };
    let own = "[[contact]]\nname = \"7\"\noutline_um = [[280, 30], [320, 30], [320, 70], [280, 70]]\n[[gate]]";
    let made = make(&base.text().replacen("[[gate]]", own, 1));
    // Gate and bulk meet at the contact: two levels arrive and two leave.
    let matrix = matrix(&made, Polarity::Toward);
    assert_eq!(matrix[(6, 6)], Rational::from(2));
    let free = make(&Shaped { parts: Vec::new(), ..base }.text().replacen(
        "[[point]]",
        "[[contact]]\nname = \"7\"\noutline_um = [[280, 30], [320, 30], [320, 70], [280, 70]]\n[[point]]",
        1,
    ));
    check(&free, "17,17 = - | -\n14,14 = 1/3\n14,23 = 0");
}

/// A split gate: two gates at filling 0 leave a channel open. With the bulk filling in it nothing is turned back
/// (adiabatic constriction); with n levels in it R_L = 1/n − 1/ν_b, after H. van Houten et al., Phys. Rev. B 37, 8534
/// (1988), abstract seen, and the diagonals of Beenakker and van Houten (1991). Closed, there is no path.
#[test]
fn a_split_gate_is_a_constriction() {
    let wedge = |name: &str, rim: i64, tip: i64, filling: &str| {
        (
            name.to_owned(),
            "gate",
            vec![(270_000, rim), (330_000, rim), (305_000, tip), (295_000, tip)],
            filling.to_owned(),
        )
    };
    let split = |low: i64, high: i64| Shaped {
        parts: vec![wedge("N", 100_000, high, "0"), wedge("S", 0, low, "0")],
        ..six_outlined("4", &[], "")
    };
    let open = make(&split(40_000, 60_000).text());
    check(&open, "14,14 = 1/4\n14,23 = 0\n14,65 = 0\n14,26 = 1/4 | -1/4");
    for (inside, values) in [
        ("2", "14,14 = 1/2\n14,23 = 1/4\n14,65 = 1/4\n14,25 = 1/2 | 0\n14,63 = 0 | 1/2"),
        ("1", "14,14 = 1\n14,23 = 3/4\n14,65 = 3/4\n14,25 = 1 | 1/2\n14,63 = 1/2 | 1"),
        ("0", "14,14 = - | -"),
    ] {
        let mut shaped = split(40_000, 60_000);
        let channel = rectangle((295_000, 40_000), (305_000, 60_000));
        shaped.parts.push(("Q".to_owned(), "step", channel, inside.to_owned()));
        check(&make(&shaped.text()), values);
    }
    check(&make(&split(60_000, 40_000).with_overlap("\"N+S\" = 0").text()), "14,14 = - | -\n12,12 = 1/4");
}

impl Shaped {
    fn with_overlap(mut self, entry: &str) -> Self {
        self.overlaps.push(entry.to_owned());
        self
    }
}

/// A cross has four corners between neighbouring arms and no other rim: neighbours are as on any four-contact device.
/// R_13,24 is the Hall resistance (Büttiker 1988, from memory).
#[test]
fn a_cross_is_a_four_contact_hall_conductor() {
    let mut text =
        "format = 1\n[device]\nid = \"X\"\n[mesa]\nshape = \"cross\"\narm_length_um = 100\narm_width_um = 40\n"
            .to_owned();
    for (name, edge) in [("1", "left"), ("2", "top"), ("3", "right"), ("4", "bottom")] {
        text += &format!("[[contact]]\nname = \"{name}\"\nedge = \"{edge}\"\n");
    }
    let gated = format!(
        "{text}[[gate]]\nname = \"G\"\nfrom_um = 20\nto_um = 60\n[[point]]\nname = \"p\"\nbulk = 3\nfillings = {{ G = 1 }}\n"
    );
    text += "[[point]]\nname = \"p\"\nbulk = 2\n";
    check(&make(&text), "13,13 = 1/2\n13,24 = 1/2 | -1/2\n12,43 = 0\n12,12 = 1/2");
    // The gate lies across the left arm alone: in series with contact 1.
    check(&make(&gated), "13,13 = 1\n24,24 = 1/3\n13,24 = 1/3 | -1/3");
}

/// The bar of the six contacts, given as a bar and as an outline with strips by `from_um` and `to_um`.
#[test]
fn strips_across_an_outline_reach_as_far_as_across_a_bar() {
    let parts = [("TG", "gate", 250, 350, "1")];
    let outlined = six_outlined("3", &[], "").text();
    let strip = "[[gate]]\nname = \"TG\"\nfrom_um = 250\nto_um = 350\n[[point]]";
    let outlined = outlined.replace("[[point]]", strip).replace("fillings = {  }", "fillings = { TG = 1 }");
    let (bar, outline) = (six("3", &parts, ""), make(&outlined));
    for polarity in BOTH {
        assert_eq!(matrix(&bar, polarity), matrix(&outline, polarity));
    }
}
