//! Draws a random bar on pixels: contacts on edges, on arms, across the rim and inside; gates across, partly across,
//! bent, round one contact and ending on one; overlaps; steps; fillings of both signs, 0 and partial ones.

use std::collections::BTreeSet;
use std::fmt::Write;

use crate::pixel_bar::PIXEL_UM;
use crate::pixel_bar::Pixel;
use crate::pixel_bar::PixelBar;
use crate::pixel_bar::PixelContact;
use crate::pixel_bar::PixelLadder;
use crate::pixel_bar::PixelOverlay;
use crate::pixel_bar::UNIT;
use crate::pixel_bar::inside;
use crate::pixel_bar::rectangle;
use crate::random_bar::Dice;

/// The bar of a seed.
pub fn draw(seed: u64) -> PixelBar {
    let mut dice = Dice::new(seed);
    let (length, width) = (8 + whole(&mut dice, 14), 4 + whole(&mut dice, 7));
    let (ladder, values) = ladder(&mut dice);
    let mut bar = PixelBar {
        length,
        width,
        contacts: Vec::new(),
        overlays: Vec::new(),
        ladder,
        bulk: 0,
        fillings: std::collections::BTreeMap::new(),
        full: [dice.chance(30), dice.chance(20), !dice.chance(15)],
        over_um: [None; 3],
    };
    let wanted = 2 + whole(&mut dice, 6) as usize;
    for _ in 0..60 {
        if bar.contacts.len() < wanted {
            add_contact(&mut dice, &mut bar);
        }
    }
    add_overlays(&mut dice, &mut bar);
    fill(&mut dice, &mut bar, &values);
    bar
}

fn whole(dice: &mut Dice, limit: i32) -> i32 {
    dice.below(limit.max(1) as u64) as i32
}

fn one_of<T: Copy>(dice: &mut Dice, list: &[T]) -> T {
    list[dice.below(list.len() as u64) as usize]
}

/// A ladder, and fillings that fit it in sixtieths.
fn ladder(dice: &mut Dice) -> (PixelLadder, Vec<i64>) {
    let whole = |steps: &[i64]| steps.iter().map(|step| step * UNIT).collect::<Vec<_>>();
    let both = |steps: Vec<i64>| [steps.clone(), steps];
    let chosen = dice.below(10);
    let (word, steps, partial): (_, _, &[i64]) = match chosen {
        0..=5 => ("\"spin-split\"", both(whole(&[1, 2, 3, 4, 5, 6, 7])), &[150, 140, 160, 90, 30, -90, -140, 75]),
        6 => ("\"spin-degenerate\"", both(whole(&[2, 4, 6, 8])), &[150, 180, 60, -180, 300]),
        7 => ("\"graphene\"", both(whole(&[2, 6, 10])), &[60, 240, 140, -60, -240, -140, 480]),
        _ => ("[\"1/3\", \"2/3\", 1, 2]", [vec![20, 40, 60, 120], Vec::new()], &[30, 10, 50, 90, 100]),
    };
    let mut values = steps[0].clone();
    values.extend(steps[1].iter().map(|step| -step));
    values.push(0);
    if dice.chance(50) {
        values.extend(partial);
    }
    if dice.chance(45) {
        values.retain(|value| *value >= 0);
    }
    (PixelLadder { word, steps }, values)
}

fn um(value: i32) -> i32 {
    value * PIXEL_UM
}

fn outline(corners: &[Pixel]) -> String {
    let corners: Vec<String> = corners.iter().map(|(x, y)| format!("[{}, {}]", um(*x), um(*y))).collect();
    format!("outline_um = [{}]", corners.join(", "))
}

/// A contact that stays clear of all others; nothing where it does not.
fn add_contact(dice: &mut Dice, bar: &mut PixelBar) {
    let mut contact = match dice.below(10) {
        0..=6 => on_edge(dice, bar),
        _ => anywhere(dice, bar),
    };
    if dice.chance(25) {
        contact.transmission = one_of(dice, &[0, 4, 10, 10, 13, 18]);
    }
    let room = |of: &PixelContact| of.pixels.union(&of.arm).copied().collect::<Vec<Pixel>>();
    let (own, others) = (room(&contact), bar.contacts.iter().flat_map(room).collect::<Vec<_>>());
    let apart = |a: &Pixel, b: &Pixel| (a.0 - b.0).abs().max((a.1 - b.1).abs()) > 1;
    if own.iter().all(|a| others.iter().all(|b| apart(a, b))) {
        bar.contacts.push(contact);
    }
}

fn on_edge(dice: &mut Dice, bar: &PixelBar) -> PixelContact {
    let edge = one_of(dice, &["left", "right", "top", "bottom", "top", "bottom"]);
    let upright = matches!(edge, "left" | "right");
    let extent = if upright { bar.width } else { bar.length };
    let end = upright && dice.chance(60);
    let (low, size) = if end { (0, extent) } else { (whole(dice, extent), 1 + whole(dice, 3)) };
    let (low, high) = (low.min(extent - 1), (low + size).min(extent));
    let arm = if dice.chance(50) { 1 + whole(dice, 3) } else { 0 };
    let beside = |from: i32, to: i32| match edge {
        "left" => rectangle((-to, low), (-from, high)),
        "right" => rectangle((bar.length + from, low), (bar.length + to, high)),
        "top" => rectangle((low, bar.width + from), (high, bar.width + to)),
        _ => rectangle((low, -to), (high, -from)),
    };
    let mut lines = format!("edge = \"{edge}\"\narm_um = {}", um(arm));
    if !end {
        let along = if upright { "y_um" } else { "x_um" };
        let _ = write!(lines, "\n{along} = {}\nwidth_um = {}", um(low + high) / 2, um(high - low));
    }
    PixelContact { pixels: beside(arm, arm + 1), arm: beside(0, arm), transmission: 20, lines }
}

/// A rectangle across the rim or inside, or the full width of the bar.
fn anywhere(dice: &mut Dice, bar: &PixelBar) -> PixelContact {
    let (x, y) = (whole(dice, bar.length), whole(dice, bar.width + 2) - 1);
    let mut low = (x, y);
    let mut high = (x + 1 + whole(dice, 2), y + 1 + whole(dice, 3));
    if dice.chance(12) {
        (low.1, high.1) = (-1, bar.width + 1);
    }
    let corners = [low, (high.0, low.1), high, (low.0, high.1)];
    let lines = outline(&corners);
    PixelContact { pixels: inside(&corners), arm: BTreeSet::new(), transmission: 20, lines }
}

fn add_overlays(dice: &mut Dice, bar: &mut PixelBar) {
    let gates = whole(dice, 4);
    let steps = if dice.chance(35) { 1 + whole(dice, 2) } else { 0 };
    for (kind, count, letter) in [("gate", gates, 'G'), ("step", steps, 'S')] {
        for at in 0..count {
            let (pixels, lines) = if dice.chance(45) { across(dice, bar, kind) } else { of_any_shape(dice, bar) };
            let full_mixing = dice.chance(15).then(|| dice.chance(50));
            bar.overlays.push(PixelOverlay { name: format!("{letter}{at}"), kind, pixels, full_mixing, lines });
        }
    }
    // What covers no gas would be refused.
    let gas = bar.gas();
    bar.overlays.retain(|overlay| !overlay.pixels.is_disjoint(&gas));
}

/// An x along the bar, often the side of a contact or a gate.
fn cut(dice: &mut Dice, bar: &PixelBar) -> i32 {
    let sides = bar.contacts.iter().map(|contact| &contact.pixels).chain(bar.overlays.iter().map(|o| &o.pixels));
    let sides: Vec<i32> = sides
        .flat_map(|pixels| [pixels.first(), pixels.last()])
        .flatten()
        .map(|pixel| pixel.0)
        .flat_map(|x| [x, x + 1])
        .filter(|x| (0..=bar.length).contains(x))
        .collect();
    if !sides.is_empty() && dice.chance(40) { one_of(dice, &sides) } else { whole(dice, bar.length + 1) }
}

/// A gate over the body of the bar, or a step with the arms of its part.
fn across(dice: &mut Dice, bar: &PixelBar, kind: &str) -> (BTreeSet<Pixel>, String) {
    let (one, other) = (cut(dice, bar), cut(dice, bar));
    let (from, to) = (one.min(other), if one == other { one.min(other) + 1 } else { one.max(other) });
    let (from, to) = (from.min(bar.length - 1), to.min(bar.length));
    let lines = format!("from_um = {}\nto_um = {}", um(from), um(to));
    let beyond = if kind == "step" { 9 } else { 0 };
    let low = if from == 0 { -beyond } else { from };
    let high = if to == bar.length { to + beyond } else { to };
    (rectangle((low, -beyond), (high, bar.width + beyond)), lines)
}

/// A rectangle, an L or a U; often just larger than a contact.
fn of_any_shape(dice: &mut Dice, bar: &PixelBar) -> (BTreeSet<Pixel>, String) {
    let mut low = (cut(dice, bar) - 1, whole(dice, bar.width + 2) - 2);
    let mut high = (low.0 + 2 + whole(dice, 6), low.1 + 2 + whole(dice, bar.width));
    if dice.chance(30) && !bar.contacts.is_empty() {
        let at = dice.below(bar.contacts.len() as u64) as usize;
        let pixels = &bar.contacts[at].pixels;
        let grow = 1 + whole(dice, 2);
        low = (pixels.iter().map(|p| p.0).min().unwrap() - grow, pixels.iter().map(|p| p.1).min().unwrap() - grow);
        high = (
            pixels.iter().map(|p| p.0).max().unwrap() + 1 + grow,
            pixels.iter().map(|p| p.1).max().unwrap() + 1 + grow,
        );
    }
    let (x, y) = (low.0 + 1 + whole(dice, high.0 - low.0 - 1), low.1 + 1 + whole(dice, high.1 - low.1 - 1));
    let corners: Vec<Pixel> = match dice.below(4) {
        0 => vec![low, (high.0, low.1), (high.0, y), (x, y), (x, high.1), (low.0, high.1)],
        1 if high.0 - low.0 > 2 => {
            let (a, b) = (low.0 + 1, high.0 - 1);
            vec![low, (high.0, low.1), high, (b, high.1), (b, y), (a, y), (a, high.1), (low.0, high.1)]
        }
        _ => vec![low, (high.0, low.1), high, (low.0, high.1)],
    };
    (inside(&corners), outline(&corners))
}

fn fill(dice: &mut Dice, bar: &mut PixelBar, values: &[i64]) {
    let steps: Vec<i64> =
        values.iter().copied().filter(|v| bar.ladder.steps[usize::from(*v < 0)].contains(&v.abs())).collect();
    bar.bulk = if dice.chance(10) { one_of(dice, values) } else { one_of(dice, &steps) };
    let mut covers = bar.covers();
    covers.remove(&Vec::new());
    covers.extend((0..bar.overlays.len()).map(|at| vec![at]));
    for cover in covers {
        let gate = cover.len() == 1 && bar.overlays[cover[0]].kind == "gate";
        if !(gate && dice.chance(10)) {
            bar.fillings.insert(cover, one_of(dice, values));
        }
    }
}
