//! Bundles: channels side by side that share one potential, and what feeds them.

use std::collections::BTreeMap;

use crate::device::ContactIdx;
use crate::device::Mixing;
use crate::layout::PieceIdx;
use crate::network::Band;
use crate::network::Bundle;
use crate::network::BundleIdx;
use crate::network::Channels;
use crate::network::Course;
use crate::network::CourseStep;
use crate::network::Feed;
use crate::network::Operating;
use crate::network::Terminal;
use crate::network::courses::Path;
use crate::number::Rational;

/// Puts every step of every path into its bundle and joins the bundles by what flows between them.
pub(super) fn assemble(bands: Vec<Band>, paths: Vec<Path>, operating: &Operating) -> Channels {
    let mut index = BTreeMap::new();
    let mut courses = Vec::with_capacity(paths.len());
    for path in &paths {
        let step = bands[path.band.0].step;
        let steps = path.walks.iter().map(|&(piece, forward)| {
            let next = BundleIdx(index.len());
            let bundle = *index.entry((piece, group(operating, piece, step))).or_insert(next);
            CourseStep { piece, forward, bundle }
        });
        courses.push(Course { band: path.band, ends: path.ends, steps: steps.collect() });
    }
    let empty = Bundle { weight: Rational::ZERO, feeds: Vec::new() };
    let mut channels = Channels {
        bundles: vec![empty; index.len()],
        terminals: vec![Terminal::default(); operating.transmission.len()],
        bands,
        courses,
    };
    for (course, path) in paths.iter().enumerate() {
        feed_course(&mut channels, course, path.previous, operating);
    }
    channels
}

/// Channels of one ladder step always share one potential; with full mixing all channels of the piece do.
fn group(operating: &Operating, piece: PieceIdx, step: usize) -> Option<usize> {
    match operating.mixing[piece.0] {
        Mixing::None => Some(step),
        Mixing::Full => None,
    }
}

fn feed_course(channels: &mut Channels, course: usize, previous: usize, operating: &Operating) {
    let Course { band, ends, ref steps } = channels.courses[course];
    let weight = &channels.bands[band.0].to - &channels.bands[band.0].from;
    let bundles: Vec<BundleIdx> = steps.iter().map(|step| step.bundle).collect();
    for pair in bundles.windows(2) {
        add_feed(channels, pair[1], Feed::Bundle(pair[0]), &weight);
    }
    let (Some(&first), Some(&last)) = (bundles.first(), bundles.last()) else { return };
    match ends {
        None => add_feed(channels, first, Feed::Bundle(last), &weight),
        Some(ends) => {
            let passing = channels.courses[previous].steps.last().map(|step| step.bundle);
            emit(channels, ends.from, (first, passing), &weight, operating);
            let absorbed = &weight * &transmission(operating, ends.to);
            channels.terminals[ends.to.0].absorbed.push((last, absorbed));
        }
    }
}

/// A channel leaves a contact with t V + (1 − t) (what arrived at the same level).
fn emit(
    channels: &mut Channels,
    contact: ContactIdx,
    (into, passing): (BundleIdx, Option<BundleIdx>),
    weight: &Rational,
    operating: &Operating,
) {
    let emitted = weight * &transmission(operating, contact);
    if let Some(passing) = passing {
        add_feed(channels, into, Feed::Bundle(passing), &(weight - &emitted));
    }
    add_feed(channels, into, Feed::Contact(contact), &emitted);
    channels.terminals[contact.0].emitted += &emitted;
}

fn transmission(operating: &Operating, contact: ContactIdx) -> Rational {
    operating.transmission[contact.0].first().cloned().unwrap_or(Rational::ONE)
}

fn add_feed(channels: &mut Channels, into: BundleIdx, from: Feed, weight: &Rational) {
    let bundle = &mut channels.bundles[into.0];
    bundle.weight += weight;
    if !weight.is_zero() {
        bundle.feeds.push((from, weight.clone()));
    }
}
