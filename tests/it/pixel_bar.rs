//! Random bars on coarse pixels, as data: the device file and the pixel map are both written from it, so that a solver on
//! pixels and the program see the same device and share nothing else.

use std::collections::BTreeMap;
use std::collections::BTreeSet;
use std::fmt::Write;

use crate::pixel_dice::draw;
use crate::random_bar::Dice;

/// Side of a pixel in µm.
pub const PIXEL_UM: i32 = 10;

/// Fillings are counted in sixtieths, so that halves, thirds and fifths are whole.
pub const UNIT: i64 = 60;

/// A pixel by its lower left corner.
pub type Pixel = (i32, i32);

/// What a pixel holds.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Matter {
    Contact(usize),
    /// Filling in sixtieths, and a number for the set of gates and steps above.
    Gas {
        filling: i64,
        cover: usize,
    },
}

/// A contact: its pixels, the pixels of its arm, its transmission in twentieths, and its lines in the file.
#[derive(Clone, Debug)]
pub struct PixelContact {
    pub pixels: BTreeSet<Pixel>,
    pub arm: BTreeSet<Pixel>,
    pub transmission: i64,
    pub lines: String,
}

/// A gate or a step: the pixels that it covers, on the mesa or not, and its lines in the file.
#[derive(Clone, Debug)]
pub struct PixelOverlay {
    pub name: String,
    pub kind: &'static str,
    pub pixels: BTreeSet<Pixel>,
    pub full_mixing: Option<bool>,
    pub lines: String,
}

/// A ladder: its word in the file and its steps in sixtieths, rising, for electrons and for holes.
#[derive(Clone, Debug)]
pub struct PixelLadder {
    pub word: &'static str,
    pub steps: [Vec<i64>; 2],
}

/// A random bar.
#[derive(Clone, Debug)]
pub struct PixelBar {
    pub length: i32,
    pub width: i32,
    pub contacts: Vec<PixelContact>,
    /// Gates first, then steps.
    pub overlays: Vec<PixelOverlay>,
    pub ladder: PixelLadder,
    pub bulk: i64,
    /// By set of overlays; what is missing has the bulk filling.
    pub fillings: BTreeMap<Vec<usize>, i64>,
    /// Full mixing along rims, borders of one sign, borders between opposite signs.
    pub full: [bool; 3],
    /// A mixing length in µm in place of each of these.
    pub over_um: [Option<i32>; 3],
}

impl PixelBar {
    /// The bar of a seed.
    pub fn new(seed: u64) -> Self {
        draw(seed)
    }

    /// The same bar with lengths in place of some of its mixings.
    pub fn with_lengths(seed: u64) -> Self {
        let mut dice = Dice::new(seed + 7000);
        let bar = draw(seed);
        let over_um = [0, 1, 2].map(|_| [None, Some(15), Some(70), Some(400)][dice.below(4) as usize]);
        Self { over_um, ..bar }
    }

    /// Pixels of the mesa with its arms, without the contacts.
    pub fn gas(&self) -> BTreeSet<Pixel> {
        let mut gas: BTreeSet<Pixel> = rectangle((0, 0), (self.length, self.width));
        self.contacts.iter().for_each(|contact| gas.extend(&contact.arm));
        self.contacts.iter().flat_map(|contact| &contact.pixels).for_each(|pixel| _ = gas.remove(pixel));
        gas
    }

    /// The gates and steps above a pixel.
    pub fn cover(&self, pixel: Pixel) -> Vec<usize> {
        (0..self.overlays.len()).filter(|&at| self.overlays[at].pixels.contains(&pixel)).collect()
    }

    /// Every set of gates and steps that lies above some gas.
    pub fn covers(&self) -> BTreeSet<Vec<usize>> {
        self.gas().into_iter().map(|pixel| self.cover(pixel)).collect()
    }

    /// What every pixel holds; what is not named is vacuum.
    pub fn map(&self) -> BTreeMap<Pixel, Matter> {
        let covers: Vec<Vec<usize>> = self.covers().into_iter().collect();
        let gas = self.gas().into_iter().map(|pixel| {
            let over = self.cover(pixel);
            let filling = self.fillings.get(&over).copied().unwrap_or(self.bulk);
            let cover = covers.iter().position(|known| *known == over).unwrap();
            (pixel, Matter::Gas { filling, cover })
        });
        let mut map: BTreeMap<Pixel, Matter> = gas.collect();
        for (at, contact) in self.contacts.iter().enumerate() {
            map.extend(contact.pixels.iter().map(|pixel| (*pixel, Matter::Contact(at))));
        }
        map
    }

    /// The mixing that the first overlay asks for that covers one side only and asks for any.
    pub fn own_mixing(&self, one: Pixel, other: Pixel) -> Option<bool> {
        let differs = |overlay: &&PixelOverlay| overlay.pixels.contains(&one) != overlay.pixels.contains(&other);
        self.overlays.iter().filter(differs).find_map(|overlay| overlay.full_mixing)
    }

    /// The device file.
    pub fn text(&self) -> String {
        let Self { length, width, ladder, bulk, .. } = self;
        let [rim, interface, opposite] = [0, 1, 2].map(|at| match (self.over_um[at], self.full[at]) {
            (Some(length), _) => format!("{{ length_um = {length} }}"),
            (None, true) => "\"full\"".to_owned(),
            (None, false) => "\"none\"".to_owned(),
        });
        let mut text = format!(
            "format = 1\n[device]\nid = \"P\"\nladder = {}\n[mesa]\nshape = \"bar\"\nlength_um = {}\nwidth_um = {}\n\
             [edge]\nmixing = {rim}\ninterface_mixing = {interface}\nopposite_mixing = {opposite}\n",
            ladder.word,
            length * PIXEL_UM,
            width * PIXEL_UM
        );
        for (at, contact) in self.contacts.iter().enumerate() {
            let share = contact.transmission as f64 / 20.0;
            let _ = writeln!(text, "[[contact]]\nname = \"{}\"\ntransmission = {share}\n{}", at + 1, contact.lines);
        }
        for overlay in &self.overlays {
            let _ = writeln!(text, "[[{}]]\nname = \"{}\"\n{}", overlay.kind, overlay.name, overlay.lines);
            if let Some(full) = overlay.full_mixing {
                let _ = writeln!(text, "mixing = \"{}\"", if full { "full" } else { "none" });
            }
        }
        let entry = |(over, value): (&Vec<usize>, &i64)| {
            let names: Vec<&str> = over.iter().map(|&at| self.overlays[at].name.as_str()).collect();
            format!("\"{}\" = {}", names.join("+"), self.written(*value))
        };
        let fillings: Vec<String> = self.fillings.iter().map(entry).collect();
        let bulk = self.written(*bulk);
        let _ = writeln!(
            text,
            "[[point]]\nname = \"p\"\nbulk = {bulk}\nbulk_partial = true\nfillings = {{ {} }}",
            fillings.join(", ")
        );
        text
    }

    /// A filling as a device file has it: an integer between two steps is written as a decimal.
    fn written(&self, value: i64) -> String {
        let step = self.ladder.steps[usize::from(value < 0)].contains(&value.abs()) || value == 0;
        match (value % UNIT, step) {
            (0, true) => (value / UNIT).to_string(),
            (0, false) => format!("{}.0", value / UNIT),
            _ => format!("\"{value}/{UNIT}\""),
        }
    }
}

/// All pixels between two corners.
pub fn rectangle(low: Pixel, high: Pixel) -> BTreeSet<Pixel> {
    (low.0..high.0).flat_map(|x| (low.1..high.1).map(move |y| (x, y))).collect()
}

/// The pixels whose centres lie inside a polygon: a ray to the right meets its sides an odd number of times.
pub fn inside(corners: &[Pixel]) -> BTreeSet<Pixel> {
    let low = (corners.iter().map(|c| c.0).min().unwrap(), corners.iter().map(|c| c.1).min().unwrap());
    let high = (corners.iter().map(|c| c.0).max().unwrap(), corners.iter().map(|c| c.1).max().unwrap());
    let sides: Vec<(Pixel, Pixel)> =
        (0..corners.len()).map(|at| (corners[at], corners[(at + 1) % corners.len()])).collect();
    // All sides run along x or along y; the ray from a centre meets only upright ones.
    let met = |(x, y): Pixel| {
        sides.iter().filter(|(a, b)| a.0 == b.0 && a.0 > x && a.1.min(b.1) <= y && y < a.1.max(b.1)).count()
    };
    rectangle(low, high).into_iter().filter(|pixel| met(*pixel) % 2 == 1).collect()
}
