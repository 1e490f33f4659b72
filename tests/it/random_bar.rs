//! Random bars as device files: contacts on all four sides with and without arms, gates and steps across, fillings of
//! both signs. The same seed always gives the same bar.

use std::fmt::Write;

/// A small generator of numbers that look random (a linear congruence; constants after D. E. Knuth's MMIX, value from
/// memory). Tests need repeatable variety, not quality.
pub struct Dice(u64);

impl Dice {
    pub fn new(seed: u64) -> Self {
        let mut dice = Self(seed.wrapping_mul(0x9E37_79B9_7F4A_7C15) ^ 0xD1B5_4A32_D192_ED03);
        dice.below(7);
        dice
    }

    /// A number from 0 to `limit − 1`.
    pub fn below(&mut self, limit: u64) -> u64 {
        self.0 = self.0.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
        (self.0 >> 33) % limit
    }

    /// Whether a throw of `percent` in a hundred falls.
    pub fn chance(&mut self, percent: u64) -> bool {
        self.below(100) < percent
    }
}

/// A contact of a random bar.
#[derive(Clone, Debug)]
pub struct SideContact {
    pub edge: &'static str,
    /// Centre along the edge, width, arm, in µm; none for a whole end.
    pub place: Option<(u64, u64, u64)>,
}

/// A random bar before it is written down, so that tests can change it in ways that must not matter.
#[derive(Clone, Debug)]
pub struct RandomBar {
    pub length: u64,
    pub width: u64,
    pub contacts: Vec<SideContact>,
    /// (name, kind, from, to, filling)
    pub parts: Vec<(String, &'static str, u64, u64, i64)>,
    pub bulk: i64,
    pub mixing: &'static str,
}

impl RandomBar {
    pub fn new(seed: u64) -> Self {
        let mut dice = Dice::new(seed);
        let (length, width) = (400 + 10 * dice.below(60), 60 + 10 * dice.below(20));
        let mut contacts = Vec::new();
        for (edge, extent) in [("left", width), ("top", length), ("right", width), ("bottom", length)] {
            contacts.extend(side(&mut dice, edge, extent));
        }
        while contacts.len() < 2 {
            contacts = vec![SideContact { edge: "left", place: None }, SideContact { edge: "right", place: None }];
        }
        let sign = if dice.chance(25) { -1 } else { 1 };
        let parts = parts(&mut dice, length, sign);
        let bulk = sign * (1 + dice.below(5) as i64);
        let mixing = if dice.chance(30) { "full" } else { "none" };
        Self { length, width, contacts, parts, bulk, mixing }
    }

    /// The bar as a device file; `names` in the order of the contacts.
    pub fn text(&self, names: &[String]) -> String {
        let order: Vec<usize> = (0..self.contacts.len()).collect();
        self.text_in_order(names, &order)
    }

    /// The same with the contacts written in another order.
    pub fn text_in_order(&self, names: &[String], order: &[usize]) -> String {
        let Self { length, width, mixing, bulk, .. } = self;
        let mut text = format!(
            "format = 1\n[device]\nid = \"R\"\n[mesa]\nshape = \"bar\"\nlength_um = {length}\nwidth_um = {width}\n[edge]\nmixing = \"{mixing}\"\n"
        );
        for &at in order {
            let _ = writeln!(text, "[[contact]]\nname = \"{}\"\n{}", names[at], contact_lines(&self.contacts[at]));
        }
        for (name, kind, from, to, _) in &self.parts {
            let _ = writeln!(text, "[[{kind}]]\nname = \"{name}\"\nfrom_um = {from}\nto_um = {to}");
        }
        let fillings: Vec<String> =
            self.parts.iter().map(|(name, _, _, _, value)| format!("{name} = {value}")).collect();
        let _ = writeln!(text, "[[point]]\nname = \"p\"\nbulk = {bulk}\nfillings = {{ {} }}", fillings.join(", "));
        text
    }

    /// Names `1`, `2`, … for all contacts.
    pub fn names(&self) -> Vec<String> {
        (1..=self.contacts.len()).map(|at| at.to_string()).collect()
    }

    /// Top and bottom exchanged: the mirror image about the long axis.
    pub fn mirrored(&self) -> Self {
        let flip = |contact: &SideContact| match (contact.edge, contact.place) {
            ("top", place) => SideContact { edge: "bottom", place },
            ("bottom", place) => SideContact { edge: "top", place },
            (edge, place) => SideContact { edge, place: place.map(|(at, width, arm)| (self.width - at, width, arm)) },
        };
        Self { contacts: self.contacts.iter().map(flip).collect(), ..self.clone() }
    }

    /// All lengths times `factor`.
    pub fn scaled(&self, factor: u64) -> Self {
        let grow = |contact: &SideContact| SideContact {
            edge: contact.edge,
            place: contact.place.map(|(at, width, arm)| (at * factor, width * factor, arm * factor)),
        };
        let parts = self
            .parts
            .iter()
            .map(|(name, kind, from, to, value)| (name.clone(), *kind, from * factor, to * factor, *value));
        Self {
            length: self.length * factor,
            width: self.width * factor,
            contacts: self.contacts.iter().map(grow).collect(),
            parts: parts.collect(),
            ..self.clone()
        }
    }
}

fn contact_lines(contact: &SideContact) -> String {
    let along = if matches!(contact.edge, "top" | "bottom") { "x_um" } else { "y_um" };
    let place = contact
        .place
        .map_or(String::new(), |(at, width, arm)| format!("{along} = {at}\nwidth_um = {width}\narm_um = {arm}\n"));
    format!("edge = \"{}\"\n{place}", contact.edge)
}

/// No, one or several contacts on a side, clear of each other and of the corners.
fn side(dice: &mut Dice, edge: &'static str, extent: u64) -> Vec<SideContact> {
    let whole_end = matches!(edge, "left" | "right") && dice.chance(60);
    if whole_end {
        return vec![SideContact { edge, place: None }];
    }
    let count = dice.below(1 + extent.min(400) / 80);
    let room = extent / (count + 1);
    (1..=count)
        .map(|at| {
            let width = 10 + dice.below(room / 3);
            let arm = if dice.chance(50) { 20 + dice.below(40) } else { 0 };
            SideContact { edge, place: Some((at * room, 2 * (width / 2), arm)) }
        })
        .collect()
}

/// Gates and steps across, side by side or apart, never overlapping.
fn parts(dice: &mut Dice, length: u64, sign: i64) -> Vec<(String, &'static str, u64, u64, i64)> {
    let count = dice.below(4);
    let room = length / (count + 1);
    let mut end = 0;
    let mut parts = Vec::new();
    for at in 0..count {
        let from = if dice.chance(20) && end > 0 { end } else { at * room + room / 3 + dice.below(room / 4) };
        let to = from + room / 4 + dice.below(room / 3);
        let opposite = if dice.chance(25) { -1 } else { 1 };
        let kind = if dice.chance(70) { "gate" } else { "step" };
        parts.push((format!("G{at}"), kind, from, to, sign * opposite * dice.below(7) as i64));
        end = to;
    }
    parts
}
