//! Bundles: channels side by side that share one potential, and what feeds them.

use std::collections::BTreeMap;

use crate::device::ContactIdx;
use crate::network::Arithmetic;
use crate::network::Band;
use crate::network::Bundle;
use crate::network::BundleIdx;
use crate::network::Course;
use crate::network::CourseStep;
use crate::network::Feed;
use crate::network::Junctions;
use crate::network::Link;
use crate::network::Network;
use crate::network::Operating;
use crate::network::Terminal;
use crate::network::Wired;
use crate::network::courses::Path;
use crate::network::joined::Assembled;
use crate::network::mixing::Blends;
use crate::network::mixing::key;
use crate::number::Number;
use crate::number::Rational;

/// Puts every step of every path into its bundle and joins the bundles by what flows between them.
pub(super) fn assemble(bands: Vec<Band>, paths: Vec<Path>, (network, operating): (&Network, &Operating)) -> Assembled {
    let mut index = BTreeMap::new();
    let mut courses = Vec::with_capacity(paths.len());
    for path in &paths {
        let band = &bands[path.band.0];
        let steps = path.walks.iter().map(|&(piece, forward)| {
            let next = BundleIdx(index.len());
            let bundle = *index.entry((piece, key(operating, piece, band))).or_insert(next);
            CourseStep { piece, forward, bundle, leaving: bundle }
        });
        courses.push(Course { band: path.band, ends: path.ends, steps: steps.collect() });
    }
    let blends = Blends::along(&bands, &mut courses, (network, operating));
    let none = || Bundle { weight: Rational::ZERO, feeds: Vec::new() };
    let mut wires = Wired {
        bundles: (0..index.len()).map(|_| none()).collect(),
        terminals: vec![Terminal::default(); operating.transmission.len()],
        links: Vec::new(),
    };
    for (course, path) in paths.iter().enumerate() {
        feed_course(&mut wires, (&courses, &bands), (course, path.previous), operating);
    }
    wires.bundles.extend(blends.bundles);
    Assembled { bands, courses, wires }
}

/// In fractions, where all feeds and wires are some and nothing else is asked for.
pub(super) fn junctions(wires: Wired<Number>, arithmetic: Arithmetic) -> Junctions {
    let feeds = wires.bundles.iter().flat_map(|bundle| &bundle.feeds).map(|(_, weight)| weight);
    let mut all = feeds.chain(wires.links.iter().map(|link| &link.resistance));
    if arithmetic == Arithmetic::Float || all.any(|number| number.exact().is_none()) {
        return Junctions::Float(converted(wires, |weight| weight.to_f64()));
    }
    Junctions::Exact(converted(wires, |weight| weight.exact().cloned().unwrap_or_default()))
}

fn converted<S>(wires: Wired<Number>, number: impl Fn(&Number) -> S) -> Wired<S> {
    let bundle = |Bundle { weight, feeds }: Bundle<Number>| {
        let feeds = feeds.iter().map(|(feed, weight)| (*feed, number(weight))).collect();
        Bundle { weight, feeds }
    };
    let link = |Link { ends, resistance }: &Link<Number>| Link { ends: *ends, resistance: number(resistance) };
    let links = wires.links.iter().map(link).collect();
    Wired { links, bundles: wires.bundles.into_iter().map(bundle).collect(), terminals: wires.terminals }
}

fn feed_course(
    wires: &mut Wired<Number>,
    (courses, bands): (&[Course], &[Band]),
    (course, previous): (usize, usize),
    operating: &Operating,
) {
    let Course { band, ends, ref steps } = courses[course];
    let band = &bands[band.0];
    let weight = &band.to - &band.from;
    for pair in steps.windows(2) {
        add_feed(wires, pair[1].bundle, Feed::Bundle(pair[0].leaving), weight.clone());
    }
    let (Some(first), Some(last)) = (steps.first(), steps.last()) else { return };
    match ends {
        None => add_feed(wires, first.bundle, Feed::Bundle(last.leaving), weight),
        Some(ends) => {
            let emitted = &weight * &transmission(operating, ends.from, band);
            let passing = courses[previous].steps.last().map(|step| step.leaving);
            emit(wires, (ends.from, first.bundle), passing, (weight.clone(), emitted));
            let absorbed = &weight * &transmission(operating, ends.to, band);
            wires.terminals[ends.to.0].absorbed.push((last.leaving, absorbed));
        }
    }
}

/// A channel leaves a contact with t V + (1 − t) (what arrived at the same level).
fn emit(
    wires: &mut Wired<Number>,
    (contact, into): (ContactIdx, BundleIdx),
    passing: Option<BundleIdx>,
    (weight, emitted): (Rational, Rational),
) {
    if let Some(passing) = passing {
        add_feed(wires, into, Feed::Bundle(passing), &weight - &emitted);
    }
    add_feed(wires, into, Feed::Contact(contact), emitted);
}

/// The share of a contact at the band's ladder step; a shorter list repeats its last value.
fn transmission(operating: &Operating, contact: ContactIdx, band: &Band) -> Rational {
    let shares = &operating.transmission[contact.0];
    shares.get(band.ladder_step).or(shares.last()).cloned().unwrap_or(Rational::ONE)
}

fn add_feed(wires: &mut Wired<Number>, into: BundleIdx, from: Feed, weight: Rational) {
    let bundle = &mut wires.bundles[into.0];
    bundle.weight += &weight;
    if !weight.is_zero() {
        bundle.feeds.push((from, weight.into()));
    }
}
