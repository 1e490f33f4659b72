//! Which readings to print where the user names none.

use crate::device::ContactIdx;
use crate::network::Network;
use crate::network::rim_order;
use crate::resistance::Reading;

/// The usual set for any device: current from the first contact of the file to the one farthest round the rim; the
/// two-terminal reading; then, with the probes of the two sides numbered from the inlet, every neighbouring pair along a
/// side (longitudinal), every facing pair (Hall) and the diagonals between neighbours.
///
/// On a bench the current runs from the first post to the last, or without posts from where it enters the first device
/// to where it leaves the last; the two-terminal reading, then the usual pairs of every device.
///
/// Where contacts of one device lie on several rims, every rim has its own current and pairs, and the two-terminal reading
/// from each rim to the next is added.
pub fn standard_readings(network: &Network) -> Vec<Reading> {
    let rims = rim_order(network);
    if network.parts.is_empty() && rims.len() > 1 && rims.iter().any(|rim| rim.len() > 1) {
        return rim_by_rim(&rims);
    }
    let sets: Vec<Vec<[ContactIdx; 2]>> = match network.parts.as_slice() {
        [] => vec![usual_pairs(&around(network))],
        parts => parts.iter().zip(first_contacts(parts)).map(|(part, first)| on_bench(part, first)).collect(),
    };
    let [Some(&[inlet, _]), Some(&[_, outlet])] =
        [sets.first().and_then(|pairs| pairs.first()), sets.last().and_then(|pairs| pairs.first())]
    else {
        return Vec::new();
    };
    let ends = post_ends(network).unwrap_or([inlet, outlet]);
    let mut pairs = sets.concat();
    pairs.retain(|pair| *pair != ends);
    pairs.insert(0, ends);
    pairs.into_iter().map(|voltage| Reading::new(ends, voltage)).collect()
}

fn rim_by_rim(rims: &[Vec<ContactIdx>]) -> Vec<Reading> {
    let mut readings = Vec::new();
    for pairs in rims.iter().filter(|rim| rim.len() > 1).map(|rim| usual_pairs(rim)) {
        readings.extend(pairs.iter().map(|voltage| Reading::new(pairs[0], *voltage)));
    }
    let between = rims.windows(2).map(|pair| [pair[0][0], pair[1][0]]);
    readings.extend(between.filter(|[one, other]| one != other).map(|pair| Reading::new(pair, pair)));
    readings
}

/// The current contacts, then the pairs of probes; none for fewer than two contacts.
fn usual_pairs(around: &[ContactIdx]) -> Vec<[ContactIdx; 2]> {
    let half = around.len() / 2;
    let [Some(&inlet), Some(&outlet)] = [around.first(), around.get(half)] else { return Vec::new() };
    let near: Vec<ContactIdx> = around[1.min(half)..half].to_vec();
    let far: Vec<ContactIdx> = around[half + 1..].iter().rev().copied().collect();
    let mut pairs = vec![[inlet, outlet]];
    pairs.extend(near.windows(2).map(|pair| [pair[0], pair[1]]));
    pairs.extend(far.windows(2).map(|pair| [pair[0], pair[1]]));
    pairs.extend(near.iter().zip(&far).map(|(&a, &b)| [a, b]));
    pairs.extend(near.iter().zip(far.iter().skip(1)).map(|(&a, &b)| [a, b]));
    pairs.extend(near.iter().skip(1).zip(&far).map(|(&a, &b)| [a, b]));
    pairs
}

/// The usual pairs of one device, with its contacts counted over the bench.
fn on_bench(part: &Network, first: usize) -> Vec<[ContactIdx; 2]> {
    let pairs = usual_pairs(&around(part)).into_iter();
    pairs.map(|pair| pair.map(|contact| ContactIdx(first + contact.0))).collect()
}

fn first_contacts(parts: &[Network]) -> Vec<usize> {
    (0..parts.len()).map(|at| parts[..at].iter().map(|part| part.contacts).sum()).collect()
}

/// The first and the last post, where a bench has several.
fn post_ends(network: &Network) -> Option<[ContactIdx; 2]> {
    let on_chips: usize = network.parts.iter().map(|part| part.contacts).sum();
    let several = !network.parts.is_empty() && network.contacts > on_chips + 1;
    several.then(|| [ContactIdx(on_chips), ContactIdx(network.contacts - 1)])
}

/// Contacts rim by rim; where fewer than two lie on a rim no order is better than that of the file.
fn around(network: &Network) -> Vec<ContactIdx> {
    let on_rims = rim_order(network).concat();
    if on_rims.len() < 2 { (0..network.contacts).map(ContactIdx).collect() } else { on_rims }
}

/// Every unordered current pair with every unordered voltage pair, in the order of the device file.
pub fn every_reading(contacts: usize) -> Vec<Reading> {
    pairs(contacts).into_iter().flat_map(|current| readings_with(contacts, current)).collect()
}

/// One current pair with every unordered voltage pair, in the order of the device file.
pub fn readings_with(contacts: usize, current: [ContactIdx; 2]) -> Vec<Reading> {
    pairs(contacts).into_iter().map(|voltage| Reading::new(current, voltage)).collect()
}

fn pairs(contacts: usize) -> Vec<[ContactIdx; 2]> {
    (0..contacts).flat_map(|a| (a + 1..contacts).map(move |b| [ContactIdx(a), ContactIdx(b)])).collect()
}
