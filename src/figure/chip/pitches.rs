//! The distance of neighbouring lines at every place of every border.
//!
//! Every side of a border piece has knots, a millimetre or so apart. Lines start at one pitch everywhere; where they come
//! too near to others the pitch of the knots there is narrowed, and falls off gently toward them. So a narrow neck
//! thins the lines that pass it, and no others.

use crate::figure::chip::chains::Chains;
use crate::figure::chip::vector::between;
use crate::figure::chip::vector::length;
use crate::figure::chip::vector::sub;
use crate::figure::scene::At;

/// Greatest distance of knots in mm.
const KNOTS_MM: f64 = 1.2;

/// How much the depth of the deepest line may change per length along the border.
const SLOPE: f64 = 0.5;

/// One side of a piece.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub(super) struct Side {
    pub piece: usize,
    pub on_right: bool,
}

/// A knot on one side of a piece.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) struct Place {
    pub side: Side,
    pub knot: usize,
}

/// The knots of a piece.
pub(super) struct Track {
    /// Where they lie.
    pub knots: Vec<At>,
    /// For every stretch between two knots the number of the straight stretch of the chain that it is part of.
    pub straight: Vec<usize>,
}

/// Knots of all pieces with the pitch on both their sides.
pub(super) struct Pitches {
    pub tracks: Vec<Track>,
    /// Per piece, on the left and on the right hand, per knot: the pitch in mm.
    mm: Vec<[Vec<f64>; 2]>,
    /// In the same order: by how many pitches the nest is set back, because outer lines are absent.
    set_back: Vec<[Vec<f64>; 2]>,
    /// Lines in the nest of each side.
    counts: Vec<[usize; 2]>,
    /// Knots that are one place of one nest.
    joints: Vec<[Place; 2]>,
}

impl Pitches {
    /// One pitch everywhere. Nests give first and end number of the lines on both sides of a piece; `straight` are the
    /// joints at which a nest goes straight on, `joints` all of them.
    pub fn new(
        tracks: Vec<Track>,
        pitch_mm: f64,
        nests: impl Fn(Side) -> Option<(usize, usize)>,
        (joints, straight): (Vec<[Place; 2]>, &[[Place; 2]]),
    ) -> Self {
        let each = |value: &dyn Fn(Side) -> f64| -> Vec<[Vec<f64>; 2]> {
            let sides = |(piece, track): (usize, &Track)| {
                [false, true].map(|on_right| vec![value(Side { piece, on_right }); track.knots.len()])
            };
            tracks.iter().enumerate().map(sides).collect()
        };
        let mm = each(&|_| pitch_mm);
        let mut set_back = each(&|side| nests(side).map_or(0.0, |(from, _)| from as f64));
        let count = |piece, on_right| nests(Side { piece, on_right }).map_or(0, |(from, to)| to - from);
        let counts = (0..tracks.len()).map(|piece| [false, true].map(|on_right| count(piece, on_right))).collect();
        settle(&mut set_back, &tracks, straight, |_| SLOPE / pitch_mm);
        Self { tracks, mm, set_back, counts, joints }
    }

    /// The pitch at a knot.
    pub fn at(&self, place: Place) -> f64 {
        self.mm[place.side.piece][usize::from(place.side.on_right)][place.knot]
    }

    /// By how many pitches the nest is set back at a knot.
    pub fn set_back(&self, place: Place) -> f64 {
        self.set_back[place.side.piece][usize::from(place.side.on_right)][place.knot]
    }

    /// How many lines run on a side.
    pub fn count(&self, side: Side) -> usize {
        self.counts[side.piece][usize::from(side.on_right)]
    }

    /// Narrows the pitch at a knot; neighbours follow in [`Pitches::settle`].
    pub fn narrow(&mut self, place: Place, to_mm: f64) {
        let held = &mut self.mm[place.side.piece][usize::from(place.side.on_right)][place.knot];
        *held = held.min(to_mm);
    }

    /// Lets the pitch fall off gently toward narrowed knots.
    pub fn settle(&mut self) {
        let Self { tracks, mm, counts, joints, .. } = self;
        settle(mm, tracks, joints, |side| SLOPE / counts[side.piece][usize::from(side.on_right)].max(1) as f64);
    }

    /// The narrowest pitch on each side along which lines run, in mm, with the number of the lines.
    pub fn narrowest(&self) -> impl Iterator<Item = (f64, usize)> + '_ {
        let sides = self.mm.iter().zip(&self.counts).flat_map(|(sides, counts)| sides.iter().zip(counts));
        let used = sides.filter(|(_, count)| **count > 0);
        used.map(|(mm, count)| (mm.iter().copied().fold(f64::INFINITY, f64::min), *count))
    }
}

/// Lowers values until no two neighbours differ by more than a slope times their distance, and joined ones not at all.
fn settle(values: &mut [[Vec<f64>; 2]], tracks: &[Track], joints: &[[Place; 2]], slope: impl Fn(Side) -> f64) {
    loop {
        for (piece, (sides, track)) in values.iter_mut().zip(tracks).enumerate() {
            for (on_right, side) in [false, true].into_iter().zip(sides) {
                soften(side, track, slope(Side { piece, on_right }));
            }
        }
        let mut changed = false;
        for joint in joints {
            let [a, b] = joint.map(|at| values[at.side.piece][usize::from(at.side.on_right)][at.knot]);
            for (at, held) in joint.iter().zip([a, b]) {
                if a.min(b) < held - 1e-9 {
                    values[at.side.piece][usize::from(at.side.on_right)][at.knot] = a.min(b);
                    changed = true;
                }
            }
        }
        if !changed {
            return;
        }
    }
}

fn soften(values: &mut [f64], track: &Track, slope: f64) {
    let rise = |at: usize| slope * length(sub(track.knots[at], track.knots[at - 1]));
    for at in 1..values.len() {
        values[at] = values[at].min(values[at - 1] + rise(at));
    }
    for at in (1..values.len()).rev() {
        values[at - 1] = values[at - 1].min(values[at] + rise(at));
    }
}

/// The knots of all chains.
pub(super) fn tracks(chains: &Chains) -> Vec<Track> {
    chains.all().iter().map(|chain| track(chain)).collect()
}

fn track(chain: &[At]) -> Track {
    let mut track = Track { knots: chain.first().copied().into_iter().collect(), straight: Vec::new() };
    for (number, pair) in chain.windows(2).enumerate() {
        let count = (length(sub(pair[1], pair[0])) / KNOTS_MM) as usize + 1;
        track.knots.extend((1..count).map(|at| between(pair[0], pair[1], at as f64 / count as f64)));
        track.knots.push(pair[1]);
        track.straight.extend(std::iter::repeat_n(number, count));
    }
    track
}
