//! Repeatable random outlines for tests.

use crate::device::ContactIdx;
use crate::device::OverlayIdx;
use crate::layout::Owner;
use crate::layout::grid::Cell;
use crate::layout::outline;

/// A linear congruential generator; multiplier and increment as in Knuth's MMIX (value from memory), upper bits used.
pub(super) struct Dice(pub(super) u64);

impl Dice {
    /// A whole number from 0 to below `n`.
    pub(super) fn below(&mut self, n: i64) -> i64 {
        self.0 = self.0.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
        ((self.0 >> 33) % n as u64) as i64
    }

    /// One of several.
    pub(super) fn pick<T: Copy>(&mut self, of: &[T]) -> T {
        of[self.below(of.len() as i64) as usize]
    }

    /// Random corners, often on corners or sides of what is there, or one pixel beside them.
    fn corner(&mut self, scale: i64, rings: &[(Owner, Vec<Cell>)]) -> Cell {
        if rings.is_empty() || self.below(2) == 0 {
            return (self.below(scale), self.below(scale));
        }
        let ring = &rings[self.below(rings.len() as i64) as usize].1;
        let n = self.below(ring.len() as i64) as usize;
        let (a, b) = (ring[n], ring[(n + 1) % ring.len()]);
        let part = self.below(5);
        let on = |a: i64, b: i64| a + (b - a) * part / 4;
        let jitter = |dice: &mut Self| if dice.below(3) == 0 { dice.below(3) - 1 } else { 0 };
        (on(a.0, b.0) + jitter(self), on(a.1, b.1) + jitter(self))
    }

    fn ring(&mut self, scale: i64, rings: &[(Owner, Vec<Cell>)]) -> Vec<Cell> {
        loop {
            let corners: Vec<Cell> = (0..3 + self.below(4)).map(|_| self.corner(scale, rings)).collect();
            if let Ok(ring) = outline::ring(&corners) {
                return ring;
            }
        }
    }

    /// A mesa (sometimes of two parts, sometimes with a cut-out), up to five overlays and five contacts.
    pub(super) fn outlines(&mut self, scale: i64) -> Vec<(Owner, Vec<Cell>)> {
        let mut rings = Vec::new();
        for _ in 0..1 + self.below(2) {
            let ring = self.ring(scale, &rings);
            rings.push((Owner::Mesa, ring));
        }
        if self.below(3) == 0 {
            let cutout = self.ring(scale, &rings).into_iter().rev().collect();
            rings.push((Owner::Mesa, cutout));
        }
        for n in 0..self.below(6) as usize {
            let ring = self.ring(scale, &rings);
            rings.push((Owner::Overlay(OverlayIdx(n)), ring));
        }
        for n in 0..self.below(6) as usize {
            let ring = self.ring(scale, &rings);
            rings.push((Owner::Contact(ContactIdx(n)), ring));
        }
        rings
    }
}
