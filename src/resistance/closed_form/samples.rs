//! Small fillings in the ordering of a point.

use crate::network::Operating;
use crate::number::Rational;
use crate::resistance::closed_form::FillingRegion;

/// Fillings for all regions: signs as at the point, sizes in the same order within each sign, small and all different
/// within a sign. Every number `round` gives another choice; the same number always the same.
pub(super) fn sample(regions: &[FillingRegion], round: u64) -> Vec<Rational> {
    let mut sizes = vec![0_i64; regions.len()];
    for negative in [false, true] {
        let mut size = 0;
        for at in by_size(regions, negative, round) {
            size += 1 + gap(round, at as u64);
            sizes[at] = if negative { -size } else { size };
        }
    }
    sizes.into_iter().map(Rational::from).collect()
}

/// The setting with other fillings in its regions. All of them are taken as steps of the ladder: parts of one step
/// differ only in their weight.
pub(super) fn with_fillings(operating: &Operating, regions: &[FillingRegion], fillings: &[Rational]) -> Operating {
    let mut changed = operating.clone();
    for (region, filling) in regions.iter().zip(fillings) {
        for face in &region.faces {
            changed.fillings[face.0] = filling.clone();
            changed.enclosing[face.0] = None;
        }
    }
    changed
}

/// Smallest first; regions of one filling now in this order, now in that.
fn by_size(regions: &[FillingRegion], negative: bool, round: u64) -> Vec<usize> {
    let mut order: Vec<usize> =
        (0..regions.len()).filter(|&at| regions[at].filling.is_negative() == negative).collect();
    order.sort_by_key(|&at| (regions[at].filling.abs(), mixed(round, at as u64 + 1000)));
    order
}

/// A gap of 0 to 3 that looks irregular.
fn gap(round: u64, at: u64) -> i64 {
    (mixed(round, at) % 4) as i64
}

/// A fixed integer hash (multiplication and shift), not a random source.
fn mixed(round: u64, at: u64) -> u64 {
    (round * 7919 + at + 1).wrapping_mul(0x9E37_79B9_7F4A_7C15) >> 33
}
