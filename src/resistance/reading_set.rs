//! Which readings to print where the user names none.

use crate::device::ContactIdx;
use crate::network::Network;
use crate::network::rim_order;
use crate::resistance::Reading;

/// The usual set for any device: current from the first contact of the file to the one farthest round the rim; the
/// two-terminal reading; then, with the probes of the two sides numbered from the inlet, every neighbouring pair along a
/// side (longitudinal), every facing pair (Hall) and the diagonals between neighbours.
pub fn standard_readings(network: &Network) -> Vec<Reading> {
    let around = around(network);
    let half = around.len() / 2;
    let [Some(&inlet), Some(&outlet)] = [around.first(), around.get(half)] else { return Vec::new() };
    let near: Vec<ContactIdx> = around[1..half].to_vec();
    let far: Vec<ContactIdx> = around[half + 1..].iter().rev().copied().collect();
    let mut pairs = vec![[inlet, outlet]];
    pairs.extend(near.windows(2).map(|pair| [pair[0], pair[1]]));
    pairs.extend(far.windows(2).map(|pair| [pair[0], pair[1]]));
    pairs.extend(near.iter().zip(&far).map(|(&a, &b)| [a, b]));
    pairs.extend(near.iter().zip(far.iter().skip(1)).map(|(&a, &b)| [a, b]));
    pairs.extend(near.iter().skip(1).zip(&far).map(|(&a, &b)| [a, b]));
    pairs.into_iter().map(|voltage| Reading::new([inlet, outlet], voltage)).collect()
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
