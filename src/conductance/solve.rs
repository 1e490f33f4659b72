//! From channels to the matrix: potentials of all bundles as shares of contact potentials, then the currents.

use std::collections::BTreeMap;
use std::collections::BTreeSet;

use crate::conductance::Conductance;
use crate::network::Bundle;
use crate::network::BundleIdx;
use crate::network::Channels;
use crate::network::Feed;
use crate::number::Matrix;
use crate::number::Rational;
use crate::number::solve;

/// Share of every contact in one potential: no zeros.
type Share = Vec<(usize, Rational)>;

/// The conductance matrix of a device, exactly.
///
/// Every bundle's potential is the mean of what feeds it, weighted by conductance; a contact's current is what it emits
/// less what it absorbs: I_i = (e²/h) \[Σ emitted V_i − Σ absorbed μ\] (M. Büttiker, Phys. Rev. Lett. 57, 1761 (1986)).
pub fn conductance(channels: &Channels) -> Conductance {
    let shares = shares(channels);
    Conductance { contacts: channels.terminals.len(), matrix: matrix(channels, &shares), shares }
}

fn matrix(channels: &Channels, shares: &[Option<Share>]) -> Matrix<Rational> {
    let contacts = channels.terminals.len();
    let mut matrix = Matrix::zero(contacts, contacts);
    for (row, terminal) in channels.terminals.iter().enumerate() {
        matrix[(row, row)] += &terminal.emitted;
        for (bundle, weight) in &terminal.absorbed {
            for (column, share) in shares[bundle.0].iter().flatten() {
                matrix[(row, *column)] -= &(share * weight);
            }
        }
    }
    matrix
}

fn shares(channels: &Channels) -> Vec<Option<Share>> {
    let contacts = channels.terminals.len();
    let bundles = &channels.bundles;
    let fed = fed_by_contacts(bundles);
    let sources: Vec<Source> = (0..bundles.len()).map(|at| source(bundles, BundleIdx(at))).collect();
    let mixers: Vec<usize> = (0..bundles.len()).filter(|&at| fed[at] && sources[at] == Source::Mean).collect();
    let mixed = mixed_shares(bundles, &sources, &mixers, contacts);
    let share_of = |at: usize| match origin(&sources, at) {
        Origin::Contact(contact) => vec![(contact, Rational::ONE)],
        Origin::Mixer(mixer) => mixed[&mixer].clone(),
    };
    (0..bundles.len()).map(|at| fed[at].then(|| share_of(at))).collect()
}

/// Whether anything that left a contact reaches the bundle. Current is conserved, so what no contact feeds also feeds
/// none: closed loops are left out of the system and cannot make it singular.
fn fed_by_contacts(bundles: &[Bundle]) -> Vec<bool> {
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

fn source(bundles: &[Bundle], at: BundleIdx) -> Source {
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
fn mixed_shares(bundles: &[Bundle], sources: &[Source], mixers: &[usize], contacts: usize) -> BTreeMap<usize, Share> {
    let place: BTreeMap<usize, usize> = mixers.iter().enumerate().map(|(row, &at)| (at, row)).collect();
    let mut a = Matrix::zero(mixers.len(), mixers.len());
    let mut b = Matrix::zero(mixers.len(), contacts);
    for (row, &at) in mixers.iter().enumerate() {
        for (feed, weight) in &bundles[at].feeds {
            a[(row, row)] += weight;
            match feed_origin(sources, feed) {
                Origin::Contact(contact) => b[(row, contact)] += weight,
                Origin::Mixer(mixer) => a[(row, place[&mixer])] -= weight,
            }
        }
    }
    // Every mixer is fed by a contact in the end, so the matrix is an irreducibly dominant one and has an inverse.
    let solved = solve(a, b).unwrap_or_else(|_| Matrix::zero(mixers.len(), contacts));
    mixers.iter().enumerate().map(|(row, &at)| (at, sparse(solved.row(row)))).collect()
}

fn feed_origin(sources: &[Source], feed: &Feed) -> Origin {
    match feed {
        Feed::Contact(contact) => Origin::Contact(contact.0),
        Feed::Bundle(bundle) => origin(sources, bundle.0),
    }
}

fn sparse(row: &[Rational]) -> Share {
    row.iter().enumerate().filter(|(_, share)| !share.is_zero()).map(|(at, share)| (at, share.clone())).collect()
}
