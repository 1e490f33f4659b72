//! The edge-channel network against electrons on a lattice: bars with six contacts, solved site by site.
//!
//! The network says that every level carries e²/h from contact to contact as a whole or not at all. Here the same bars are
//! square lattices in a field, with gates as smooth potentials and six leads without end; the transmissions between the
//! leads come from the propagator (`scattering.rs`), which knows of no channel. They must be the network's whole numbers,
//! from and to the right contacts at either polarity.
//!
//! Every level counts once, so the electrons have no spin: 4 over 2 is four orbital levels over two. One site stands for
//! 1 µm of the device file. The energy lies in the middle of a bulk gap, and the potential under a gate puts it into the
//! middle of another.
//!
//! The sense of rotation does not come from the program. A free electron turns by m dv/dt = −e v × B: with B toward the
//! reader a velocity to the right is turned upward, so orbits run anticlockwise. At the upper rim only their lower halves
//! fit in, and those run to the right; at the lower rim to the left. Skipping electrons go clockwise round the bar, and
//! the lattice does the same because the phase of its hops has the same −e and B (`Lattice::hop`).

use std::fs;

use nalgebra::DMatrix;

use crate::lattice::Lattice;
use crate::lattice::Site;
use crate::lattice::middle_of_gap;
use crate::program::fresh;
use crate::program::run;
use crate::scattering::Lead;
use crate::scattering::transmissions;

/// Plaquettes for one flux quantum: the magnetic length √(16/2π) is 1.6 sites.
const PERIOD: usize = 16;
/// Length over which a gate's edge rises as an error function, in sites: smooth against the magnetic length.
const RISE: f64 = 6.0;
/// Bare bar at both ends, in sites.
const MARGIN: i64 = 8;

/// A part of the bar with a filling of its own, from column to column counted from the middle.
#[derive(Clone, Copy)]
struct Part {
    from: i64,
    to: i64,
    filling: usize,
}

/// A bar with filling `bulk`, parts of their own and `gap` columns between the side contacts.
struct Bar {
    bulk: usize,
    parts: Vec<Part>,
    gap: i64,
    rise: f64,
}

impl Bar {
    fn gated(bulk: usize, filling: usize) -> Self {
        Self { bulk, parts: vec![Part { from: -12, to: 12, filling }], gap: 44, rise: RISE }
    }

    /// Orbits of higher levels are wider, and opposite rims must not touch.
    fn height(&self) -> i64 {
        8 * self.levels() + 16
    }

    /// Even, so that the middle of a contact is a whole number of sites.
    fn contact_width(&self) -> i64 {
        6 * self.levels() + 6
    }

    fn levels(&self) -> i64 {
        self.parts.iter().map(|part| part.filling).chain([self.bulk]).max().unwrap() as i64
    }

    fn length(&self) -> i64 {
        2 * (MARGIN + self.contact_width()) + self.gap
    }

    /// First columns of the left and of the right side contacts.
    fn sides(&self) -> [i64; 2] {
        [MARGIN, MARGIN + self.contact_width() + self.gap]
    }

    fn energy(&self) -> f64 {
        middle_of_gap(PERIOD, self.bulk)
    }

    /// The middle of a part has the potential that makes its filling; its edges are where half of that is reached.
    fn potential(&self) -> impl Fn(i64) -> f64 + use<> {
        let (middle, rise) = (self.length() as f64 / 2.0, self.rise);
        let rises: Vec<_> =
            self.parts.iter().map(|part| (*part, self.energy() - middle_of_gap(PERIOD, part.filling))).collect();
        move |column| {
            let x = column as f64 + 0.5 - middle;
            let over = |edge: i64| libm::erf((x - edge as f64) / rise) / 2.0;
            rises.iter().map(|(part, height)| height * (over(part.from) - over(part.to))).sum()
        }
    }

    /// The six leads in the order 1 to 6: left end, top left, top right, right end, bottom right, bottom left.
    fn leads(&self, lattice: &Lattice) -> Vec<Lead> {
        let [left, right] = self.sides();
        let lead = |sites: Vec<Site>, outward| {
            let column = sites[0].0.clamp(0, self.length());
            Lead { potential: (lattice.potential)(column), sites, outward }
        };
        let side = |from: i64, row| (from..from + self.contact_width()).map(|column| (column, row)).collect();
        vec![
            lead(lattice.column(-1), (-1, 0)),
            lead(side(left, self.height()), (0, 1)),
            lead(side(right, self.height()), (0, 1)),
            lead(lattice.column(self.length()), (1, 0)),
            lead(side(right, -1), (0, -1)),
            lead(side(left, -1), (0, -1)),
        ]
    }

    /// Transmissions of the lattice; `sign` is that of the polarity.
    fn on_the_lattice(&self, sign: f64) -> DMatrix<f64> {
        let potential = Box::new(self.potential());
        let lattice = Lattice { length: self.length(), height: self.height(), flux: sign / PERIOD as f64, potential };
        transmissions(&lattice, &self.leads(&lattice), self.energy())
    }

    /// The conductance matrices of the same bar as the program gives them, at `+` and at `−`.
    fn as_a_network(&self) -> [DMatrix<f64>; 2] {
        let folder = fresh(&format!("microscopic/{}-{:?}", self.bulk, self.fillings()));
        fs::write(folder.join("device.toml"), self.device_file()).unwrap();
        let answer = run(&folder, "expect device.toml --json").json();
        [0, 1].map(|at| {
            let point = &answer["points"][at];
            assert_eq!(point["polarity"], ["+", "-"][at]);
            let entry = |row: usize, column: usize| point["conductance"][row][column].as_str().unwrap();
            DMatrix::from_fn(6, 6, |row, column| entry(row, column).parse().expect("a whole number"))
        })
    }

    fn fillings(&self) -> Vec<usize> {
        self.parts.iter().map(|part| part.filling).collect()
    }

    fn device_file(&self) -> String {
        let [left, right] = self.sides().map(|from| from + self.contact_width() / 2);
        let end = |name: u8, edge: &str| format!("[[contact]]\nname = \"{name}\"\nedge = \"{edge}\"\n");
        let side = |name: u8, edge: &str, middle: i64| {
            end(name, edge) + &format!("x_um = {middle}\nwidth_um = {}\n", self.contact_width())
        };
        let mut text = format!(
            "format = 1\n[device]\nid = \"lattice\"\n[mesa]\nshape = \"bar\"\nlength_um = {}\nwidth_um = {}\n",
            self.length(),
            self.height()
        );
        text += &(end(1, "left") + &side(2, "top", left) + &side(3, "top", right));
        text += &(end(4, "right") + &side(5, "bottom", right) + &side(6, "bottom", left));
        let mut fillings = Vec::new();
        for (at, part) in self.parts.iter().enumerate() {
            let [from, to] = [part.from, part.to].map(|edge| (self.length() / 2 + edge).clamp(0, self.length()));
            text += &format!("[[step]]\nname = \"P{at}\"\nfrom_um = {from}\nto_um = {to}\n");
            fillings.push(format!("P{at} = {}", part.filling));
        }
        text + &format!("[[point]]\nname = \"point\"\nbulk = {}\nfillings = {{ {} }}\n", self.bulk, fillings.join(", "))
    }
}

/// The largest difference between the lattice's conductance matrix and the network's, over both polarities. Off the
/// diagonal the matrix is −T; on it, what a contact sends to all others.
fn deviation(bar: &Bar) -> f64 {
    let network = bar.as_a_network();
    let found = [1.0, -1.0].iter().zip(network).map(|(&sign, network)| {
        let passed = bar.on_the_lattice(sign);
        let sent = passed.row_sum();
        (DMatrix::from_diagonal(&sent.transpose()) - passed - network).amax()
    });
    found.fold(0.0, f64::max)
}

/// Largest deviations seen:
#[test]
fn gates_pass_the_levels_that_the_network_says() {
    for (bulk, gated) in [(2, 1), (3, 1), (4, 2), (2, 0)] {
        let found = deviation(&Bar::gated(bulk, gated));
        assert!(found < 1e-8, "{bulk} over {gated}: {found:e}");
    }
}

/// A lower density in the right part of the bar and its contacts.
#[test]
fn a_density_step_passes_and_returns_the_levels_that_the_network_says() {
    for (left, right) in [(2, 1), (3, 1)] {
        let part = Part { from: 0, to: 10_000, filling: right };
        let found = deviation(&Bar { bulk: left, parts: vec![part], gap: 44, rise: RISE });
        assert!(found < 1e-8, "{left} beside {right}: {found:e}");
    }
}

/// Without scattering between channels two gates pass what the lower one passes, and one with a higher filling than the
/// bar passes all: the levels that live under it, or between the two, run in closed loops.
#[test]
fn two_gates_and_a_gate_with_more_carriers_are_as_without_mixing() {
    let two = vec![Part { from: -36, to: -12, filling: 1 }, Part { from: 12, to: 36, filling: 2 }];
    let two = Bar { bulk: 3, parts: two, gap: 92, rise: RISE };
    for bar in [two, Bar::gated(2, 3)] {
        let found = deviation(&bar);
        assert!(found < 1e-8, "{} over {:?}: {found:e}", bar.bulk, bar.fillings());
    }
}

/// The lattice does not give whole numbers by its nature: a gate as short as its rise passes a part of the second level
/// (1.389 levels seen), and no electron is lost.
#[test]
fn a_short_gate_passes_a_part_of_a_level() {
    let part = Part { from: -2, to: 2, filling: 1 };
    let passed = Bar { bulk: 2, parts: vec![part], gap: 44, rise: 3.0 }.on_the_lattice(1.0);
    let across = passed[(2, 1)];
    assert!(across > 1.3 && across < 1.5, "{across}");
    assert!((passed.row(2).sum() - 2.0).abs() < 1e-8, "what leaves arrives");
}
