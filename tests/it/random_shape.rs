//! Random mesas with corners and sides on one another, slivers, openings at rims and under gates: nothing panics, what is
//! refused says why, and currents are conserved in what is laid out. `EDGESHEET_SHAPES` sets how many are tried.

use edgesheet::number::Rational;
use edgesheet::quantity::Polarity;

use crate::bar::BOTH;
use crate::bar::Made;
use crate::invariants::check_bundles;
use crate::random_bar::Dice;
use crate::shaped::At;
use crate::shaped::Shaped;

/// Devices of an ordinary run.
const USUAL: u64 = 2_500;

/// A layout where there is one; refusals must say where and what to do.
pub fn made(text: &str) -> Option<Made> {
    let device = match edgesheet::device::from_bytes("shape.toml", text.as_bytes()) {
        Ok(noted) => noted.value,
        Err(faults) => panic!("{faults:#?}\n{text}"),
    };
    match edgesheet::layout::layout(&device) {
        Ok(noted) => {
            let network = edgesheet::network::network(&noted.value, device.contacts.len());
            Some(Made { device, layout: noted.value, network })
        }
        Err(faults) => {
            assert!(faults.0.iter().all(|fault| fault.place.is_some() && fault.hint.is_some()), "{faults:#?}\n{text}");
            None
        }
    }
}

/// Corners round a centre at random distances, one in each of `count` equal sectors: simple, because a ray from the centre
/// meets the outline once.
fn star(dice: &mut Dice, (x, y): At, (least, most): (i64, i64), count: u64) -> Vec<At> {
    let sector = std::f64::consts::TAU / count as f64;
    let corner = |n: u64| {
        let angle = sector * (n as f64 + 0.1 + 0.8 * dice.below(1000) as f64 / 1000.0);
        let radius = (least + dice.below((most - least) as u64) as i64) as f64;
        (x + (radius * angle.cos()) as i64 / 10 * 10, y + (radius * angle.sin()) as i64 / 10 * 10)
    };
    (0..count).map(corner).collect()
}

/// A simply connected mesa with contacts round its rim.
pub fn plain(seed: u64) -> Shaped {
    let mut dice = Dice::new(seed);
    let corners = 4 + dice.below(9);
    let outline = star(&mut dice, (0, 0), (60_000, 400_000), corners);
    let contacts = on_rim(&mut dice, &outline, 2 + corners / 3, "");
    Shaped { outline, contacts, bulk: (1 + dice.below(4)).to_string(), ..Shaped::default() }
}

/// Contacts on some sides of a ring, their middles anywhere, their widths often round a corner.
fn on_rim(dice: &mut Dice, ring: &[At], count: u64, mark: &str) -> Vec<(String, At, i64)> {
    let stride = (ring.len() / count as usize).max(1);
    let sides = (0..ring.len()).step_by(stride).take(count as usize);
    let contact = |side: usize| {
        let (a, b) = (ring[side], ring[(side + 1) % ring.len()]);
        let part = [0, 1, 2, 3, 5, 8][dice.below(6) as usize];
        let at = (a.0 + (b.0 - a.0) * part / 10, a.1 + (b.1 - a.1) * part / 10);
        (format!("{mark}{side}"), at, 10 * (100 + dice.below(3_000) as i64))
    };
    sides.map(contact).collect()
}

/// A point on a corner or a side of what is there, or one pixel beside it.
fn degenerate(dice: &mut Dice, rings: &[Vec<At>]) -> At {
    let ring = &rings[dice.below(rings.len() as u64) as usize];
    let side = dice.below(ring.len() as u64) as usize;
    let (a, b) = (ring[side], ring[(side + 1) % ring.len()]);
    let part = dice.below(5) as i64;
    let jitter = if dice.chance(30) { 10 * (dice.below(3) as i64 - 1) } else { 0 };
    (a.0 + (b.0 - a.0) * part / 4 + jitter, a.1 + (b.1 - a.1) * part / 4)
}

/// A part of three or four corners, most of them on what is there, in the order of their directions from their middle.
fn part(dice: &mut Dice, rings: &[Vec<At>]) -> Vec<At> {
    let count = 3 + dice.below(2);
    let mut corners: Vec<At> = (0..count)
        .map(|_| {
            let anywhere = |dice: &mut Dice| 10 * (dice.below(60_000) as i64 - 30_000);
            if dice.chance(60) { degenerate(dice, rings) } else { (anywhere(dice), anywhere(dice)) }
        })
        .collect();
    let middle = |part: fn(&At) -> i64| corners.iter().map(part).sum::<i64>() as f64 / count as f64;
    let (x, y) = (middle(|at| at.0), middle(|at| at.1));
    corners.sort_by(|a, b| (a.1 as f64 - y).atan2(a.0 as f64 - x).total_cmp(&(b.1 as f64 - y).atan2(b.0 as f64 - x)));
    corners
}

/// A mesa with up to two openings and three gates that share corners and sides with one another and with the rims.
fn crowded(seed: u64) -> Shaped {
    let mut dice = Dice::new(seed);
    let mut shaped = plain(seed);
    let mut rings = vec![shaped.outline.clone()];
    for at in 0..dice.below(3) as i64 {
        let cutout = match dice.below(4) {
            0 => part(&mut dice, &rings),
            _ => star(&mut dice, (15_000 - 30_000 * at, 0), (4_000, 14_000), 5),
        };
        if dice.chance(40) {
            let inner = on_rim(&mut dice, &cutout, 2, ["a", "b"][at as usize]);
            shaped.contacts.extend(inner.into_iter().map(|(name, place, width)| (name, place, width / 8)));
        }
        rings.push(cutout.clone());
        shaped.cutouts.push(cutout);
    }
    let names = ["A", "B", "C"];
    for name in &names[..dice.below(4) as usize] {
        let corners = part(&mut dice, &rings);
        rings.push(corners.clone());
        let filling = dice.below(7) as i64 - 2;
        shaped.parts.push(((*name).to_owned(), "gate", corners, filling.to_string()));
    }
    let pairs = ["A+B", "A+C", "B+C", "A+B+C"]
        .into_iter()
        .filter(|pair| pair.split('+').all(|name| shaped.parts.iter().any(|(other, ..)| other == name)));
    shaped.overlaps = pairs.map(|pair| format!("\"{pair}\" = {}", dice.below(5))).collect();
    shaped
}

#[test]
fn random_shapes_conserve_every_current_or_are_refused_with_reasons() {
    let count = std::env::var("EDGESHEET_SHAPES").ok().and_then(|count| count.parse().ok()).unwrap_or(USUAL);
    let mut laid_out = 0;
    for seed in 0..count {
        let shaped = crowded(seed);
        let Some(made) = made(&shaped.text()) else { continue };
        laid_out += 1;
        let [toward, away] = BOTH.map(|polarity| made.predict(0, polarity, &[]));
        let [matrix, reversed] = [&toward, &away].map(|prediction| &prediction.conductance.exact().unwrap().matrix);
        assert_eq!(matrix.transposed(), *reversed, "{shaped:?}");
        for row in 0..matrix.rows() {
            let sums =
                [matrix.row(row).iter().cloned().sum::<Rational>(), matrix.transposed().row(row).iter().cloned().sum()];
            assert!(sums.iter().all(Rational::is_zero), "{shaped:?}");
        }
        check_bundles(toward.channels.exact().unwrap(), &shaped);
    }
    println!("{laid_out} of {count} random shapes laid out");
    assert!(laid_out * 10 > count, "only {laid_out} of {count} could be laid out");
}

/// The mirror image with the reversed field, where no detail is finer than a pixel: half-open pixels are not symmetric.
#[test]
fn mirrored_random_shapes_exchange_the_senses_of_the_field() {
    let mut tried = 0;
    for seed in 0..400 {
        let shaped = plain(seed);
        let mirrored = shaped.moved(|(x, y)| (-x, y), 1);
        let (Some(one), Some(other)) = (made(&shaped.text()), made(&mirrored.text())) else { continue };
        tried += 1;
        let toward = one.predict(0, Polarity::Toward, &[]).conductance;
        let away = other.predict(0, Polarity::Away, &[]).conductance;
        assert_eq!(toward.exact().unwrap().matrix, away.exact().unwrap().matrix, "{shaped:?}");
    }
    assert!(tried > 200, "only {tried}");
}
