//! Where lines come too near to each other or to borders that they must not cross.
//!
//! Everything is put into square cells, so that only neighbours are compared.

use crate::figure::chip::bit::Bit;
use crate::figure::chip::lanes::Lane;
use crate::figure::chip::vector::between;
use crate::figure::chip::vector::crosses;
use crate::figure::chip::vector::gap;
use crate::figure::chip::vector::length;
use crate::figure::chip::vector::sub;
use crate::figure::scene::At;

/// Distance that two lines must keep, as a share of the wider pitch: the heaviest pen is a little over half a pitch.
const LEAST: f64 = 0.52;

/// Distance that a line must keep from a border that it must not cross, as a share of its pitch.
const LEAST_TO_BORDER: f64 = 0.4;

/// Two things that come too near.
#[derive(Clone, Copy, Debug)]
pub(super) struct Clash {
    /// Bit number `.1` of line number `.0`.
    pub line: (usize, usize),
    /// What it comes too near to.
    pub other: Other,
    /// Whether they cross or touch.
    pub crossing: bool,
}

/// The other side of a clash.
#[derive(Clone, Copy, Debug)]
pub(super) enum Other {
    /// A bit of a line.
    Line((usize, usize)),
    /// A straight stretch of a border.
    Border((At, At)),
}

/// A straight stretch in a cell.
#[derive(Clone, Copy)]
enum Item {
    Chord { line: usize, bit: usize, ends: (At, At), pitch_mm: f64 },
    Border { piece: usize, ends: (At, At) },
}

/// Side of a cell in mm.
const CELL_MM: f64 = 2.5;

/// All clashes between lines, and between lines and borders: `is_wall` says which pieces a course must not cross.
pub(super) fn clashes(lanes: &[Lane], chains: &[Vec<At>], is_wall: impl Fn(&Lane, usize) -> bool) -> Vec<Clash> {
    let mut cells = Cells::around(chains);
    for (line, lane) in lanes.iter().enumerate() {
        for (number, bit) in lane.bits.iter().enumerate() {
            for ends in bit.straightened() {
                let item = Item::Chord { line, bit: number, ends, pitch_mm: bit.pitch_mm };
                cells.put(ends, LEAST * bit.pitch_mm, item);
            }
        }
    }
    for (piece, chain) in chains.iter().enumerate() {
        for pair in chain.windows(2) {
            cells.put((pair[0], pair[1]), 0.0, Item::Border { piece, ends: (pair[0], pair[1]) });
        }
    }
    let mut found = Vec::new();
    for cell in &cells.cells {
        for (at, first) in cell.iter().enumerate() {
            for second in &cell[at + 1..] {
                found.extend(clash(lanes, (*first, *second), &is_wall));
            }
        }
    }
    found
}

fn clash(lanes: &[Lane], pair: (Item, Item), is_wall: &impl Fn(&Lane, usize) -> bool) -> Option<Clash> {
    match pair {
        (
            Item::Chord { line, bit, ends, pitch_mm },
            Item::Chord { line: other_line, bit: other_bit, ends: other_ends, pitch_mm: other_mm },
        ) if line != other_line => {
            let limit = LEAST * pitch_mm.max(other_mm);
            let distance = near(ends, other_ends, limit)?;
            let other = Other::Line((other_line, other_bit));
            Some(Clash { line: (line, bit), other, crossing: distance <= 0.1 * limit })
        }
        (Item::Chord { line, bit, ends, .. }, Item::Chord { line: _, bit: other_bit, ends: other_ends, .. })
            if bit.abs_diff(other_bit) > 1
                && crosses(ends, other_ends)
                && !is_closing(lanes, line, (bit, other_bit)) =>
        {
            let other = Other::Line((line, other_bit));
            Some(Clash { line: (line, bit), other, crossing: true })
        }
        (Item::Chord { line, bit, ends, pitch_mm }, Item::Border { piece, ends: border }) => {
            let limit = LEAST_TO_BORDER * pitch_mm;
            let distance = near(ends, border, limit).filter(|_| is_wall(&lanes[line], piece))?;
            Some(Clash { line: (line, bit), other: Other::Border(border), crossing: distance <= 0.1 * limit })
        }
        _ => None,
    }
}

/// Whether two bits are the last and the first of a closed line.
fn is_closing(lanes: &[Lane], line: usize, (a, b): (usize, usize)) -> bool {
    let bits: &[Bit] = &lanes[line].bits;
    a.min(b) == 0 && a.max(b) + 1 == bits.len() && bits.first().map(|bit| bit.from) == bits.last().map(|bit| bit.to)
}

/// The distance of two stretches where it is below a limit.
fn near(one: (At, At), other: (At, At), limit: f64) -> Option<f64> {
    let apart =
        |a: (f64, f64), b: (f64, f64)| a.0.min(a.1) > b.0.max(b.1) + limit || b.0.min(b.1) > a.0.max(a.1) + limit;
    let (x, y) = (((one.0.0, one.1.0), (other.0.0, other.1.0)), ((one.0.1, one.1.1), (other.0.1, other.1.1)));
    if apart(x.0, x.1) || apart(y.0, y.1) {
        return None;
    }
    Some(gap(one, other)).filter(|distance| *distance < limit)
}

struct Cells {
    corner: At,
    columns: usize,
    rows: usize,
    cells: Vec<Vec<Item>>,
}

impl Cells {
    fn around(chains: &[Vec<At>]) -> Self {
        let points = || chains.iter().flatten();
        let low = points().fold((f64::INFINITY, f64::INFINITY), |low, at| (low.0.min(at.0), low.1.min(at.1)));
        let high = points().fold(low, |high, at| (high.0.max(at.0), high.1.max(at.1)));
        let count = |low: f64, high: f64| ((high - low).max(0.0) / CELL_MM) as usize + 1;
        let (columns, rows) = (count(low.0, high.0), count(low.1, high.1));
        Self { corner: low, columns, rows, cells: vec![Vec::new(); columns * rows] }
    }

    /// Puts an item into every cell that it passes, with a margin; what lies outside belongs to the cells at the rim.
    fn put(&mut self, (a, b): (At, At), margin: f64, item: Item) {
        let count = (length(sub(b, a)) / CELL_MM) as usize + 1;
        let mut last = None;
        for part in 0..count {
            let t = |at: usize| at as f64 / count as f64;
            let (from, to) = (between(a, b, t(part)), between(a, b, t(part + 1)));
            let column = |x: f64| (((x - self.corner.0) / CELL_MM).max(0.0) as usize).min(self.columns - 1);
            let row = |y: f64| (((y - self.corner.1) / CELL_MM).max(0.0) as usize).min(self.rows - 1);
            let columns = column(from.0.min(to.0) - margin)..=column(from.0.max(to.0) + margin);
            let rows = row(from.1.min(to.1) - margin)..=row(from.1.max(to.1) + margin);
            for (column, row) in columns.flat_map(|column| rows.clone().map(move |row| (column, row))) {
                let number = row * self.columns + column;
                if last != Some(number) {
                    self.cells[number].push(item);
                }
                last = Some(number);
            }
        }
    }
}
