//! Level bands: levels that run everywhere alike are one channel with a weight.

use std::collections::BTreeMap;
use std::collections::BTreeSet;

use crate::network::Band;
use crate::network::Carrier;
use crate::network::FaceIdx;
use crate::network::Operating;
use crate::number::Rational;

/// All bands of a setting: electrons from the outermost inward, then holes.
///
/// Between two successive values of |ν| that occur (or that enclose a partial filling) all levels bound the same
/// regions, so ν = 100 costs no more than ν = 2.
pub(super) fn bands(operating: &Operating) -> Vec<Band> {
    let mut all = carrier_bands(operating, Carrier::Electron);
    let first_hole_step = all.iter().map(|band| band.step + 1).max().unwrap_or(0);
    let holes = carrier_bands(operating, Carrier::Hole);
    all.extend(holes.into_iter().map(|band| Band { step: band.step + first_hole_step, ..band }));
    all
}

/// |ν| of a face for one carrier: zero where the face holds the other carrier or none. Edge modes are as many on every
/// face of the mesa, each way.
pub(super) fn level(operating: &Operating, face: FaceIdx, carrier: Carrier) -> Rational {
    if carrier == Carrier::Hole && !operating.backward.is_empty() {
        return operating.backward[face.0].clone();
    }
    let filling = &operating.fillings[face.0];
    match (carrier, filling.is_negative()) {
        (Carrier::Electron, false) | (Carrier::Hole, true) => filling.abs(),
        _ => Rational::ZERO,
    }
}

fn carrier_bands(operating: &Operating, carrier: Carrier) -> Vec<Band> {
    let enclosing = enclosing_steps(operating, carrier);
    let cuts = cuts(operating, carrier);
    let mut steps = BTreeMap::new();
    let mut below = Rational::ZERO;
    let mut bands = Vec::new();
    for (rank, to) in thresholds(operating, carrier, &enclosing, &cuts).into_iter().enumerate() {
        let key = step_bottom(&enclosing, &below, &to);
        let next_step = steps.len();
        let step = *steps.entry(key).or_insert(next_step);
        // Beyond the last cut all ladder steps are alike.
        let ladder_step = cuts.iter().filter(|cut| **cut < to).count();
        bands.push(Band { carrier, from: below, to: to.clone(), rank, step, ladder_step });
        below = to;
    }
    bands
}

/// Ends of the ladder steps that some contact or group tells apart, outermost first.
fn cuts(operating: &Operating, carrier: Carrier) -> Vec<Rational> {
    let unequal = |shares: &&Vec<Rational>| shares.windows(2).any(|pair| pair[0] != pair[1]);
    let listed = operating.transmission.iter().filter(unequal).map(|shares| shares.len() - 1).max();
    let grouped = operating.groups.iter().flatten().copied().max();
    let sign = match carrier {
        Carrier::Electron => Rational::ONE,
        Carrier::Hole => -Rational::ONE,
    };
    let highest = faces(operating).map(|face| level(operating, face, carrier)).max().unwrap_or_default();
    let steps = operating.ladder.steps(&sign).take_while(|step| *step < highest);
    steps.take(listed.max(grouped).unwrap_or(0)).collect()
}

/// Values of |ν| at which a band ends: those that occur, those that enclose a partial one and those that end a ladder
/// step that is not like the next, none beyond the highest.
fn thresholds(
    operating: &Operating,
    carrier: Carrier,
    enclosing: &[(Rational, Rational)],
    cuts: &[Rational],
) -> BTreeSet<Rational> {
    let mut ends: BTreeSet<Rational> = faces(operating).map(|face| level(operating, face, carrier)).collect();
    let highest = ends.last().cloned().unwrap_or_default();
    ends.extend(enclosing.iter().flat_map(|(lower, upper)| [lower.clone(), upper.clone()]));
    ends.extend(cuts.iter().cloned());
    ends.into_iter().filter(|end| !end.is_zero() && *end <= highest).collect()
}

fn enclosing_steps(operating: &Operating, carrier: Carrier) -> Vec<(Rational, Rational)> {
    let held = faces(operating).filter(|face| !level(operating, *face, carrier).is_zero());
    held.filter_map(|face| operating.enclosing[face.0].clone()).collect()
}

fn faces(operating: &Operating) -> impl Iterator<Item = FaceIdx> {
    (0..operating.fillings.len()).map(FaceIdx)
}

/// The lower end of the ladder step to which a band belongs; a band outside all partial steps is its own.
fn step_bottom(enclosing: &[(Rational, Rational)], from: &Rational, to: &Rational) -> Rational {
    let holder = enclosing.iter().find(|(lower, upper)| lower <= from && to <= upper);
    holder.map_or(from, |(lower, _)| lower).clone()
}
