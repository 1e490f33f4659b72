//! A second solver, on pixels: it shares no code with the program, only the device.
//!
//! For every level the border of the pixels with |ν| ≥ level is followed edge by edge; at `+` an electron channel has
//! those pixels on its right hand, a hole channel on its left; at `−` all turn. Every pixel edge is a place of its own
//! where channels mix or not. Nodes are then eliminated one after the other (own algebra: each potential is a mean of
//! what feeds it; no subtraction occurs).

use std::collections::BTreeMap;
use std::collections::BTreeSet;

use edgesheet::quantity::Polarity;

use crate::bar::BOTH;
use crate::bar::Made;
use crate::bar::make;
use crate::pixel_bar::Matter;
use crate::pixel_bar::PIXEL_UM;
use crate::pixel_bar::Pixel;
use crate::pixel_bar::PixelBar;

/// What a node is fed by.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
enum Fed {
    Contact(usize),
    Node(usize),
}

/// Twice the middle of a pixel edge, and the ladder step with its carrier; no step where all channels share.
type Place = ((i32, i32), Option<(bool, usize)>, Side);

/// Where potentials change along a pixel edge, its two ends.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
enum Side {
    Entering,
    Leaving,
}

/// What channels do to one another along a pixel edge.
#[derive(Clone, Copy, Debug)]
enum Rule {
    None,
    Full,
    Over(f64),
}

/// By step its two nodes and their conductance.
type Blended = BTreeMap<(bool, usize), (usize, usize, f64)>;

#[derive(Default)]
struct Nodes {
    index: BTreeMap<Place, usize>,
    feeds: Vec<BTreeMap<Fed, f64>>,
    /// By pixel edge with a length: what is left of departures, and what runs there.
    blended: BTreeMap<(i32, i32), (f64, Blended)>,
    /// (contact, node, conductance)
    absorbed: Vec<(usize, usize, f64)>,
    emitted: Vec<f64>,
}

/// Where a walk stands: a corner and the way on from it.
type Stand = ((i32, i32), (i32, i32));

/// One pixel edge walked: twice its middle, the pixel of the set, the pixel on the other hand.
type Stride = ((i32, i32), Pixel, Pixel);

/// G of a bar in e²/h.
pub fn raster(bar: &PixelBar, polarity: Polarity) -> Vec<Vec<f64>> {
    let map = bar.map();
    let mut nodes = Nodes { emitted: vec![0.0; bar.contacts.len()], ..Nodes::default() };
    for hole in [false, true] {
        let size = |pixel: Pixel| match map.get(&pixel) {
            Some(Matter::Gas { filling, .. }) if *filling < 0 && hole || *filling > 0 && !hole => filling.abs(),
            _ => 0,
        };
        let highest = map.keys().map(|pixel| size(*pixel)).max().unwrap_or(0);
        let steps = &bar.ladder.steps[usize::from(hole)];
        let ends: BTreeSet<i64> = map
            .keys()
            .map(|pixel| size(*pixel))
            .chain(steps.iter().copied())
            .filter(|v| *v > 0 && *v <= highest)
            .collect();
        let right = hole != (polarity == Polarity::Toward);
        let mut below = 0;
        for end in ends {
            let step = steps.iter().position(|step| end <= *step).expect("a step above");
            let set: BTreeSet<Pixel> = map.keys().copied().filter(|pixel| size(*pixel) >= end).collect();
            let weight = (end - below) as f64 / crate::pixel_bar::UNIT as f64;
            for walk in walks(&set, right) {
                follow(bar, &map, &mut nodes, (&walk, (hole, step), weight));
            }
            below = end;
        }
    }
    nodes.blend();
    nodes.conductance()
}

/// The pixel ahead of a corner on one hand.
fn ahead(corner: (i32, i32), (dx, dy): (i32, i32), right: bool) -> Pixel {
    let (rx, ry) = if right { (dy, -dx) } else { (-dy, dx) };
    ((2 * corner.0 + dx + rx - 1) / 2, (2 * corner.1 + dy + ry - 1) / 2)
}

/// All closed walks round a set of pixels. Pixels that touch in a corner only are not joined.
fn walks(set: &BTreeSet<Pixel>, right: bool) -> Vec<Vec<Stride>> {
    let mut walked = BTreeSet::new();
    let mut found = Vec::new();
    for &(x, y) in set {
        for (corner, direction) in [((x, y), (0, 1)), ((x, y), (1, 0)), ((x + 1, y), (0, 1)), ((x, y + 1), (1, 0))] {
            for (start, heading) in
                [(corner, direction), ((corner.0 + direction.0, corner.1 + direction.1), (-direction.0, -direction.1))]
            {
                let border = ahead(start, heading, right) == (x, y) && !set.contains(&ahead(start, heading, !right));
                if border && !walked.contains(&(start, heading)) {
                    found.push(walk(set, right, (start, heading), &mut walked));
                }
            }
        }
    }
    found
}

fn walk(set: &BTreeSet<Pixel>, right: bool, start: Stand, walked: &mut BTreeSet<Stand>) -> Vec<Stride> {
    let mut strides = Vec::new();
    let (mut corner, mut heading) = start;
    loop {
        walked.insert((corner, heading));
        let middle = (2 * corner.0 + heading.0, 2 * corner.1 + heading.1);
        strides.push((middle, ahead(corner, heading, right), ahead(corner, heading, !right)));
        corner = (corner.0 + heading.0, corner.1 + heading.1);
        let toward = if right { (heading.1, -heading.0) } else { (-heading.1, heading.0) };
        if !set.contains(&ahead(corner, heading, right)) {
            heading = toward;
        } else if set.contains(&ahead(corner, heading, !right)) {
            heading = (-toward.0, -toward.1);
        }
        if (corner, heading) == start {
            return strides;
        }
    }
}

/// Puts one closed walk of a level into the nodes, cut where contacts lie on the other hand.
fn follow(
    bar: &PixelBar,
    map: &BTreeMap<Pixel, Matter>,
    nodes: &mut Nodes,
    (walk, step, weight): (&[Stride], (bool, usize), f64),
) {
    let contact = |stride: &Stride| match map.get(&stride.2) {
        Some(Matter::Contact(at)) => Some(*at),
        _ => None,
    };
    let first = walk.iter().position(|stride| contact(stride).is_some()).unwrap_or(0);
    let round = walk[first..].iter().chain(&walk[..first]);
    let rule = |stride: &Stride| rule(bar, map, stride);
    let places: Vec<Result<(usize, usize), usize>> = round
        .map(|stride| contact(stride).map_or_else(|| Ok(nodes.ends(stride.0, rule(stride), (step, weight))), Err))
        .collect();
    let Some((_, mut before)) = places.iter().rev().find_map(|place| place.ok()) else { return };
    let mut passed = None;
    for place in places {
        match place {
            Err(contact) => passed = Some(contact),
            Ok((node, leaving)) => {
                nodes.feed(before, node, weight, passed.map(|at| (at, bar.contacts[at].transmission as f64 / 20.0)));
                (before, passed) = (leaving, None);
            }
        }
    }
}

fn rule(bar: &PixelBar, map: &BTreeMap<Pixel, Matter>, stride: &Stride) -> Rule {
    let filling = |pixel: &Pixel| match map.get(pixel) {
        Some(Matter::Gas { filling, .. }) => Some(*filling),
        _ => None,
    };
    let whole = |full: bool| if full { Rule::Full } else { Rule::None };
    let of = |kind: usize| match bar.over_um[kind] {
        Some(length) => Rule::Over((-f64::from(PIXEL_UM) / f64::from(length)).exp()),
        None => whole(bar.full[kind]),
    };
    let own = filling(&stride.1).unwrap_or(0);
    match filling(&stride.2) {
        None => of(0),
        Some(other) => {
            let kind = if own * other < 0 { 2 } else { 1 };
            bar.own_mixing(stride.1, stride.2).map_or_else(|| of(kind), whole)
        }
    }
}

impl Nodes {
    /// The nodes in which a channel enters and leaves a pixel edge.
    fn ends(&mut self, middle: (i32, i32), rule: Rule, (step, weight): ((bool, usize), f64)) -> (usize, usize) {
        let own = matches!(rule, Rule::None | Rule::Over(_)).then_some(step);
        let entering = self.at((middle, own, Side::Entering));
        let Rule::Over(kept) = rule else { return (entering, entering) };
        let leaving = self.at((middle, own, Side::Leaving));
        let (_, steps) = self.blended.entry(middle).or_insert_with(|| (kept, Blended::new()));
        steps.entry(step).or_insert((entering, leaving, 0.0)).2 += weight;
        (entering, leaving)
    }

    /// Along each pixel edge the departure from the mean keeps its share; the mean does not change.
    fn blend(&mut self) {
        for (kept, steps) in std::mem::take(&mut self.blended).into_values() {
            let whole: f64 = steps.values().map(|(_, _, weight)| weight).sum();
            for (own, &(_, leaving, weight)) in &steps {
                for (other, &(entering, _, from)) in &steps {
                    let share = (1.0 - kept) * from / whole + if own == other { kept } else { 0.0 };
                    *self.feeds[leaving].entry(Fed::Node(entering)).or_default() += weight * share;
                }
            }
        }
    }

    fn at(&mut self, place: Place) -> usize {
        let next = self.index.len();
        let at = *self.index.entry(place).or_insert(next);
        self.feeds.resize(self.index.len(), BTreeMap::new());
        at
    }

    fn feed(&mut self, from: usize, into: usize, weight: f64, through: Option<(usize, f64)>) {
        let taken = through.map_or(0.0, |(_, share)| share * weight);
        if let Some((contact, _)) = through.filter(|_| taken > 0.0) {
            self.absorbed.push((contact, from, taken));
            self.emitted[contact] += taken;
            *self.feeds[into].entry(Fed::Contact(contact)).or_default() += taken;
        }
        if weight > taken {
            *self.feeds[into].entry(Fed::Node(from)).or_default() += weight - taken;
        }
    }

    /// Each node as a mean of contacts: a node is put into all that it feeds, then forgotten; at the end all are read
    /// back in the other order. A node that nothing else feeds is a closed loop.
    fn shares(&mut self) -> Vec<BTreeMap<usize, f64>> {
        let total = self.feeds.len();
        let mut users = vec![BTreeSet::new(); total];
        for (at, feeds) in self.feeds.iter().enumerate() {
            for fed in feeds.keys() {
                if let Fed::Node(from) = fed {
                    users[*from].insert(at);
                }
            }
        }
        for at in 0..total {
            self.feeds[at].remove(&Fed::Node(at));
            let sum: f64 = self.feeds[at].values().sum();
            self.feeds[at].values_mut().for_each(|weight| *weight /= sum);
            let own = self.feeds[at].clone();
            for user in std::mem::take(&mut users[at]).split_off(&(at + 1)) {
                let Some(weight) = self.feeds[user].remove(&Fed::Node(at)) else { continue };
                for (fed, share) in &own {
                    *self.feeds[user].entry(*fed).or_default() += weight * share;
                    if let Fed::Node(from) = fed {
                        users[*from].insert(user);
                    }
                }
            }
        }
        self.read_back()
    }

    fn read_back(&self) -> Vec<BTreeMap<usize, f64>> {
        let mut shares: Vec<BTreeMap<usize, f64>> = vec![BTreeMap::new(); self.feeds.len()];
        for at in (0..self.feeds.len()).rev() {
            let mut own = BTreeMap::new();
            for (fed, weight) in &self.feeds[at] {
                match fed {
                    Fed::Contact(contact) => *own.entry(*contact).or_default() += weight,
                    Fed::Node(from) => {
                        shares[*from].iter().for_each(|(c, share)| *own.entry(*c).or_default() += weight * share)
                    }
                }
            }
            shares[at] = own;
        }
        shares
    }

    fn conductance(mut self) -> Vec<Vec<f64>> {
        let shares = self.shares();
        let contacts = self.emitted.len();
        let mut matrix = vec![vec![0.0; contacts]; contacts];
        for (at, emitted) in self.emitted.iter().enumerate() {
            matrix[at][at] += emitted;
        }
        for (contact, node, weight) in &self.absorbed {
            shares[*node].iter().for_each(|(from, share)| matrix[*contact][*from] -= weight * share);
        }
        matrix
    }
}

/// Checks bars; gives how many were solved and how many the program refused.
fn compare(bars: impl Iterator<Item = (u64, PixelBar)>) -> (usize, usize) {
    let (mut solved, mut refused) = (0, 0);
    for (seed, bar) in bars {
        let Some(made) = accepted(&bar) else {
            refused += 1;
            continue;
        };
        solved += 1;
        for polarity in BOTH {
            let solved = made.predict(0, polarity, &[]).conductance;
            for (row, values) in raster(&bar, polarity).iter().enumerate() {
                for (column, value) in values.iter().enumerate() {
                    let found = solved.entry(row, column).to_f64();
                    assert!(
                        (found - value).abs() < 1e-9,
                        "seed {seed} {polarity:?}: G[{row}][{column}] is {found}, on pixels {value}\n{}",
                        bar.text()
                    );
                }
            }
        }
    }
    (solved, refused)
}

fn accepted(bar: &PixelBar) -> Option<Made> {
    let source = edgesheet::diagnostic::Source::new("p.toml", bar.text());
    let device = edgesheet::device::from_source(&source).ok()?.value;
    edgesheet::layout::layout(&device).ok()?;
    Some(make(&bar.text()))
}

/// Own algebra: the second solver above.
#[test]
fn a_solver_on_pixels_finds_the_same_conductance_matrix() {
    let (solved, refused) = compare((0..600).map(|seed| (seed, PixelBar::new(seed))));
    assert!(solved >= 400, "{solved} solved, {refused} refused");
}

/// The same with lengths over which channels mix: on pixels each edge of 10 µm mixes for itself, and the exponentials of a
/// piece multiply.
#[test]
fn a_solver_on_pixels_mixes_over_lengths_alike() {
    let (solved, refused) = compare((0..400).map(|seed| (seed, PixelBar::with_lengths(seed))));
    assert!(solved >= 250, "{solved} solved, {refused} refused");
}
