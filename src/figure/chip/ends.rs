//! Lines cut where they leave and enter contacts.

use crate::figure::chip::area::Area;
use crate::figure::chip::bit::Bit;
use crate::figure::chip::bit::meeting;
use crate::figure::chip::courses::Part;

/// How far a line is drawn on inside a contact, in pitches: less than the depth at which it might turn there.
const HIDDEN: f64 = 0.4;

/// And not further than this, in mm, so that it stays clear of the name.
const HIDDEN_MM: f64 = 0.2;

/// Cuts a line a little inside the contacts at its ends; none where it does not reach one of them.
pub(super) fn cut(bits: &[Bit], (from, to): (&Area, &Area)) -> Option<Vec<Bit>> {
    let visible = |at: &usize| matches!(bits[*at].part, Part::Step(_));
    let longest = |best: usize, next: usize| if bits[next].length() > bits[best].length() + 1e-9 { next } else { best };
    let middle = (0..bits.len()).filter(visible).reduce(longest)?;
    let (early, late) = bits[middle].split(0.5);
    let backward: Vec<Bit> =
        std::iter::once(early).chain(bits[..middle].iter().rev().copied()).map(Bit::backward).collect();
    let forward: Vec<Bit> = std::iter::once(late).chain(bits[middle + 1..].iter().copied()).collect();
    let back = ended(&backward, from)?;
    let on = ended(&forward, to)?;
    let mut whole: Vec<Bit> = back.into_iter().rev().map(Bit::backward).collect();
    let joined = whole.pop()?;
    let first = on.first()?;
    match joined.bend.or(first.bend) {
        None => whole.push(Bit { to: first.to, ..joined }),
        Some(_) => whole.extend([joined, *first]),
    }
    whole.extend(on.into_iter().skip(1));
    Some(whole)
}

/// The line up to a little beyond where it first comes inside, but never out again.
fn ended(bits: &[Bit], contact: &Area) -> Option<Vec<Bit>> {
    let mut kept: Vec<Bit> = Vec::new();
    let mut left_mm = None;
    for bit in bits {
        let span_mm = bit.length().max(1e-12);
        let start = if left_mm.is_some() { Some(0.0) } else { contact.entry(bit) };
        let Some(start) = start else {
            kept.push(*bit);
            continue;
        };
        let wanted_mm: f64 = left_mm.unwrap_or(HIDDEN_MM.min(HIDDEN * bit.pitch_mm));
        let end = start + wanted_mm / span_mm;
        let exit = contact.exit(bit, start);
        if end <= 1.0 || exit < 1.0 {
            kept.push(bit.split(end.min((start + exit) / 2.0)).0);
            return Some(kept);
        }
        left_mm = Some(wanted_mm - (1.0 - start) * span_mm);
        kept.push(*bit);
    }
    left_mm.map(|_| kept)
}

impl Area {
    /// Share of the way at which a bit first comes inside.
    fn entry(&self, bit: &Bit) -> Option<f64> {
        let changes = self.changes(bit);
        changes.windows(2).find(|pair| self.holds(bit.at((pair[0] + pair[1]) / 2.0))).map(|pair| pair[0])
    }

    /// Share of the way at which a bit that is inside at `start` goes out; 1 when it does not.
    fn exit(&self, bit: &Bit, start: f64) -> f64 {
        let changes = self.changes(bit);
        let outside = |pair: &&[f64]| pair[0] >= start && !self.holds(bit.at((pair[0] + pair[1]) / 2.0));
        changes.windows(2).find(outside).map_or(1.0, |pair| pair[0])
    }

    /// Shares of the way at which a bit meets the outlines, from 0 to 1.
    fn changes(&self, bit: &Bit) -> Vec<f64> {
        let chords = bit.straightened();
        let count = chords.len() as f64;
        let met = chords.iter().enumerate().flat_map(|(at, chord)| {
            self.sides().filter_map(move |side| meeting(*chord, side)).map(move |(t, _)| (at as f64 + t) / count)
        });
        let mut changes: Vec<f64> = met.chain([0.0, 1.0]).collect();
        changes.sort_by(f64::total_cmp);
        changes.dedup_by(|late, early| *late - *early < 1e-9);
        changes
    }
}
