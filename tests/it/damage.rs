//! Damaged files: whatever happens to the bytes, reading them ends in an answer, and every fault has a place.

use edgesheet::diagnostic::Colour;
use edgesheet::diagnostic::Faults;
use edgesheet::diagnostic::Severity;
use edgesheet::diagnostic::show;

use crate::good::COOLDOWN;
use crate::good::DEVICE;

/// A small generator (Numerical Recipes' linear congruence, 1664525 and 1013904223: value from memory) so that the
/// damage is the same on every machine.
struct Dice(u32);

impl Dice {
    fn below(&mut self, limit: usize) -> usize {
        self.0 = self.0.wrapping_mul(1_664_525).wrapping_add(1_013_904_223);
        (self.0 >> 8) as usize % limit.max(1)
    }
}

/// Bytes that are likely to hurt.
const NASTY: &[u8] = b"[]{}=\"',.#+-\n\r\t\0\xff\xc3\xe2 0e_n";

fn damaged(good: &[u8], kind: usize, dice: &mut Dice) -> Vec<u8> {
    let mut bytes = good.to_vec();
    let (at, other) = (dice.below(bytes.len()), dice.below(bytes.len()));
    match kind % 8 {
        0 => drop(bytes.drain(at..(at + 1 + dice.below(6)).min(good.len()))),
        1 => bytes.insert(at, bytes[other]),
        2 => bytes.swap(at, other),
        3 => bytes[at] = NASTY[dice.below(NASTY.len())],
        4 => bytes.truncate(at),
        _ => return damaged_lines(good, kind, dice),
    }
    bytes
}

fn damaged_lines(good: &[u8], kind: usize, dice: &mut Dice) -> Vec<u8> {
    let mut lines: Vec<&[u8]> = good.split(|byte| *byte == b'\n').collect();
    let (at, other) = (dice.below(lines.len()), dice.below(lines.len()));
    match kind % 8 {
        5 => drop(lines.remove(at)),
        6 => lines.insert(at, lines[other]),
        _ => lines.swap(at, other),
    }
    lines.join(&b'\n')
}

/// Reads 300 damaged copies; gives how many of them failed.
fn failures<T>(good: &[u8], read: impl Fn(&[u8]) -> Result<T, Faults>) -> usize {
    let mut dice = Dice(4711);
    let mut failed = 0;
    for kind in 0..300 {
        let bytes = damaged(good, kind, &mut dice);
        let Err(Faults(found)) = read(&bytes) else { continue };
        let text = String::from_utf8_lossy(&bytes);
        assert!(found.iter().any(|finding| finding.severity == Severity::Fault), "no fault in\n{text}");
        for finding in &found {
            assert!(finding.place.is_some() && finding.hint.is_some(), "{finding:?}\nin\n{text}");
        }
        assert!(!show(&found, Colour::Plain).is_empty());
        failed += 1;
    }
    failed
}

#[test]
fn a_damaged_device_file_never_panics() {
    let failed = failures(DEVICE, |bytes| edgesheet::device::from_bytes("bar.toml", bytes));
    assert!((100..300).contains(&failed), "{failed}");
}

#[test]
fn a_damaged_cooldown_file_never_panics() {
    let device = edgesheet::device::from_bytes("bar.toml", DEVICE).unwrap().value;
    let failed = failures(COOLDOWN, |bytes| edgesheet::cooldown::from_bytes("cooldown.toml", bytes, &device));
    assert!((100..300).contains(&failed), "{failed}");
}

/// Brackets nested deeper than any file needs must not exhaust the stack.
#[test]
fn deep_brackets_are_a_fault() {
    for (open, close) in [("[", "]"), ("{a=", "}")] {
        let nested = format!("format = {}1{}\n", open.repeat(100_000), close.repeat(100_000));
        let found = edgesheet::device::from_bytes("deep.toml", nested.as_bytes()).unwrap_err().0;
        assert!(found.iter().any(|finding| finding.code == "syntax"), "{:?}", found.first());
    }
}
