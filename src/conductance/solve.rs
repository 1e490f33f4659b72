//! From channels to the matrix: potentials of all bundles as shares of contact potentials, then the currents.

use std::collections::BTreeMap;
use std::collections::BTreeSet;

use crate::conductance::Conductance;
use crate::conductance::Solved;
use crate::network::Bundle;
use crate::network::BundleIdx;
use crate::network::Channels;
use crate::network::Feed;
use crate::network::Junctions;
use crate::network::Wired;
use crate::number::Balance;
use crate::number::Matrix;
use crate::number::Scalar;

/// Share of every contact in one potential: no zeros.
type Share<S> = Vec<(usize, S)>;

/// The conductance matrix of a device, exactly where its channels are exact.
///
/// Every bundle's potential is the mean of what feeds it, weighted by conductance; a contact's current is what it emits
/// less what it absorbs: I_i = (e²/h) \[Σ emitted V_i − Σ absorbed μ\] (M. Büttiker, Phys. Rev. Lett. 57, 1761 (1986)).
pub fn conductance(channels: &Channels) -> Conductance {
    match &channels.junctions {
        Junctions::Exact(wired) => Conductance::Exact(solved(wired)),
        Junctions::Float(wired) => Conductance::Float(solved(wired)),
    }
}

fn solved<S: Scalar>(wired: &Wired<S>) -> Solved<S> {
    let shares = shares(wired);
    Solved { matrix: matrix(wired, &shares), shares, links: wired.links.clone() }
}

/// Every entry of the diagonal is what the other contacts take, so that rows sum to zero in floats too.
fn matrix<S: Scalar>(wired: &Wired<S>, shares: &[Option<Share<S>>]) -> Matrix<S> {
    let contacts = wired.terminals.len();
    let mut matrix = Matrix::<S>::zero(contacts, contacts);
    for (row, terminal) in wired.terminals.iter().enumerate() {
        for (bundle, weight) in &terminal.absorbed {
            let weight = S::nearest(weight);
            for (column, share) in shares[bundle.0].iter().flatten().filter(|(column, _)| *column != row) {
                let passed = share.clone() * weight.clone();
                matrix[(row, *column)].increase(&-passed.clone());
                matrix[(row, row)].increase(&passed);
            }
        }
    }
    matrix
}

fn shares<S: Scalar>(wired: &Wired<S>) -> Vec<Option<Share<S>>> {
    let contacts = wired.terminals.len();
    let bundles = &wired.bundles;
    let fed = fed_by_contacts(bundles);
    let sources: Vec<Source> = (0..bundles.len()).map(|at| source(bundles, BundleIdx(at))).collect();
    let mixers: Vec<usize> = (0..bundles.len()).filter(|&at| fed[at] && sources[at] == Source::Mean).collect();
    let mixed = mixed_shares(bundles, &sources, &mixers, contacts);
    let share_of = |at: usize| match origin(&sources, at) {
        Origin::Contact(contact) => vec![(contact, S::one())],
        Origin::Mixer(mixer) => mixed[&mixer].clone(),
    };
    (0..bundles.len()).map(|at| fed[at].then(|| share_of(at))).collect()
}

/// Whether anything that left a contact reaches the bundle. Current is conserved, so what no contact feeds also feeds
/// none: closed loops are left out of the system and cannot make it singular.
fn fed_by_contacts<S>(bundles: &[Bundle<S>]) -> Vec<bool> {
    let mut reached: BTreeSet<usize> = BTreeSet::new();
    let mut feeds_into = vec![Vec::new(); bundles.len()];
    for (at, bundle) in bundles.iter().enumerate() {
        for (feed, _) in &bundle.feeds {
            match feed {
                Feed::Contact(_) => _ = reached.insert(at),
                Feed::Bundle(from) => feeds_into[from.0].push(at),
            }
        }
    }
    let mut front: Vec<usize> = reached.iter().copied().collect();
    while let Some(at) = front.pop() {
        front.extend(feeds_into[at].iter().copied().filter(|&next| reached.insert(next)));
    }
    (0..bundles.len()).map(|at| reached.contains(&at)).collect()
}

/// Where a bundle's potential comes from: one feed alone, or a mean that must be solved for.
#[derive(Clone, Copy, Debug, PartialEq)]
enum Source {
    Contact(usize),
    Bundle(usize),
    Mean,
}

fn source<S>(bundles: &[Bundle<S>], at: BundleIdx) -> Source {
    let feeds = &bundles[at.0].feeds;
    match feeds.first() {
        Some((first, _)) if feeds.iter().all(|(feed, _)| feed == first) => match first {
            Feed::Contact(contact) => Source::Contact(contact.0),
            Feed::Bundle(bundle) => Source::Bundle(bundle.0),
        },
        _ => Source::Mean,
    }
}

enum Origin {
    Contact(usize),
    Mixer(usize),
}

/// Follows single feeds back to a contact or a mean. Ends for every bundle that a contact feeds: a ring of single feeds
/// would be a closed loop.
fn origin(sources: &[Source], mut at: usize) -> Origin {
    loop {
        match sources[at] {
            Source::Contact(contact) => return Origin::Contact(contact),
            Source::Mean => return Origin::Mixer(at),
            Source::Bundle(before) => at = before,
        }
    }
}

/// Solves W μ = Σ w μ_feed for the bundles that are means of several feeds.
fn mixed_shares<S: Scalar>(
    bundles: &[Bundle<S>],
    sources: &[Source],
    mixers: &[usize],
    contacts: usize,
) -> BTreeMap<usize, Share<S>> {
    let place: BTreeMap<usize, usize> = mixers.iter().enumerate().map(|(row, &at)| (at, row)).collect();
    let mut balance = Balance::new(mixers.len());
    for (row, &at) in mixers.iter().enumerate() {
        for (feed, weight) in &bundles[at].feeds {
            match feed_origin(sources, feed) {
                Origin::Contact(contact) => balance.give(row, contact, weight),
                Origin::Mixer(mixer) => balance.join(row, place[&mixer], weight),
            }
        }
    }
    // Every mixer is fed by a contact in the end, so none hangs free.
    let solved = balance.solve(contacts).unwrap_or_default();
    mixers.iter().copied().zip(solved.into_iter().map(sparse)).collect()
}

fn feed_origin(sources: &[Source], feed: &Feed) -> Origin {
    match feed {
        Feed::Contact(contact) => Origin::Contact(contact.0),
        Feed::Bundle(bundle) => origin(sources, bundle.0),
    }
}

fn sparse<S: Scalar>(row: Vec<S>) -> Share<S> {
    row.into_iter().enumerate().filter(|(_, share)| !share.is_zero()).collect()
}
