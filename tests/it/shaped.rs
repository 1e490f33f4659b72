//! Mesas with an outline as device files, in whole nanometres so that tests can turn, mirror and reverse them exactly.

use std::fmt::Write;

use crate::random_bar::RandomBar;
use crate::random_bar::SideContact;

/// A point in nm.
pub type At = (i64, i64);

/// A gate or step: name, `gate` or `step`, outline, filling.
pub type ShapedPart = (String, &'static str, Vec<At>, String);

/// A device whose mesa is an outline.
#[derive(Clone, Debug, Default)]
pub struct Shaped {
    pub outline: Vec<At>,
    pub cutouts: Vec<Vec<At>>,
    /// Name, place on the rim, width.
    pub contacts: Vec<(String, At, i64)>,
    pub parts: Vec<ShapedPart>,
    /// Fillings of overlaps, `"A+B" = 2`.
    pub overlaps: Vec<String>,
    pub bulk: String,
    /// Lines of `[edge]`.
    pub edge: String,
}

impl Shaped {
    /// The device file.
    pub fn text(&self) -> String {
        let Self { bulk, edge, .. } = self;
        let mut text = format!(
            "format = 1\n[device]\nid = \"O\"\n[mesa]\nshape = \"outline\"\noutline_um = {}\n",
            ring(&self.outline)
        );
        if !self.cutouts.is_empty() {
            let rings: Vec<String> = self.cutouts.iter().map(|corners| ring(corners)).collect();
            let _ = writeln!(text, "cutouts_um = [{}]", rings.join(", "));
        }
        let _ = writeln!(text, "[edge]\n{edge}");
        for (name, at, width) in &self.contacts {
            let _ =
                writeln!(text, "[[contact]]\nname = \"{name}\"\nat_um = {}\nwidth_um = {}", corner(*at), um(*width));
        }
        for (name, kind, corners, _) in &self.parts {
            let _ = writeln!(text, "[[{kind}]]\nname = \"{name}\"\noutline_um = {}", ring(corners));
        }
        let own = self.parts.iter().map(|(name, _, _, filling)| format!("{name} = {filling}"));
        let fillings: Vec<String> = own.chain(self.overlaps.iter().cloned()).collect();
        let _ = writeln!(text, "[[point]]\nname = \"p\"\nbulk = {bulk}\nfillings = {{ {} }}", fillings.join(", "));
        text
    }

    /// Every point sent elsewhere by a map that makes all lengths `factor` times as long.
    pub fn moved(&self, map: impl Fn(At) -> At, factor: i64) -> Self {
        let all = |corners: &Vec<At>| corners.iter().map(|at| map(*at)).collect::<Vec<At>>();
        let part = |(name, kind, corners, filling): &ShapedPart| (name.clone(), *kind, all(corners), filling.clone());
        Self {
            outline: all(&self.outline),
            cutouts: self.cutouts.iter().map(all).collect(),
            contacts: self.contacts.iter().map(|(name, at, width)| (name.clone(), map(*at), factor * width)).collect(),
            parts: self.parts.iter().map(part).collect(),
            ..self.clone()
        }
    }

    /// All outlines listed the other way round, from another corner.
    pub fn reversed(&self) -> Self {
        let other = |corners: &Vec<At>| {
            let mut corners: Vec<At> = corners.iter().rev().copied().collect();
            corners.rotate_left(1);
            corners
        };
        let part = |(name, kind, corners, filling): &ShapedPart| (name.clone(), *kind, other(corners), filling.clone());
        Self {
            outline: other(&self.outline),
            cutouts: self.cutouts.iter().map(other).collect(),
            parts: self.parts.iter().map(part).collect(),
            ..self.clone()
        }
    }

    /// A random bar, its arms drawn into the outline.
    pub fn of_bar(bar: &RandomBar) -> Self {
        let (length, width) = (1000 * bar.length as i64, 1000 * bar.width as i64);
        let side = |edge: &str| {
            let on_it = bar.contacts.iter().filter(|contact| contact.edge == edge);
            let arms = on_it
                .filter_map(|contact| contact.place)
                .map(|(at, width, arm)| [at, width, arm].map(|um| 1000 * um as i64));
            let mut arms: Vec<[i64; 3]> = arms.filter(|[_, _, arm]| *arm > 0).collect();
            arms.sort();
            arms.into_iter().map(|[at, width, arm]| (at - width / 2, at + width / 2, arm)).collect::<Vec<_>>()
        };
        let mut outline = vec![(0, 0)];
        for (low, high, arm) in side("bottom") {
            outline.extend([(low, 0), (low, -arm), (high, -arm), (high, 0)]);
        }
        outline.push((length, 0));
        for (low, high, arm) in side("right") {
            outline.extend([(length, low), (length + arm, low), (length + arm, high), (length, high)]);
        }
        outline.push((length, width));
        for (low, high, arm) in side("top").into_iter().rev() {
            outline.extend([(high, width), (high, width + arm), (low, width + arm), (low, width)]);
        }
        outline.push((0, width));
        for (low, high, arm) in side("left").into_iter().rev() {
            outline.extend([(0, high), (-arm, high), (-arm, low), (0, low)]);
        }
        let contacts = bar.contacts.iter().zip(bar.names()).map(|(contact, name)| {
            let (at, width) = place(contact, (length, width));
            (name, at, width)
        });
        let longest = |edge: &str| side(edge).into_iter().map(|(_, _, arm)| arm).max().unwrap_or(0);
        let [right, top, bottom] = ["right", "top", "bottom"].map(longest);
        let parts = bar.parts.iter().map(|(name, kind, from, to, filling)| {
            let (from, mut to) = (1000 * *from as i64, (1000 * *to as i64).min(length));
            let (mut low, mut high) = (0, width);
            if *kind == "step" {
                (low, high) = (-bottom, width + top);
                to += if to == length { right } else { 0 };
            }
            (name.clone(), *kind, rectangle((from, low), (to, high)), filling.to_string())
        });
        Self {
            outline,
            contacts: contacts.collect(),
            parts: parts.collect(),
            bulk: bar.bulk.to_string(),
            edge: format!("mixing = \"{}\"", bar.mixing),
            ..Self::default()
        }
    }
}

fn place(contact: &SideContact, (length, width): At) -> (At, i64) {
    let whole = if matches!(contact.edge, "left" | "right") { width } else { length };
    let (at, wide, arm) = contact
        .place
        .map_or((whole / 2, whole, 0), |(at, wide, arm)| (1000 * at as i64, 1000 * wide as i64, 1000 * arm as i64));
    let at = match contact.edge {
        "left" => (-arm, at),
        "right" => (length + arm, at),
        "top" => (at, width + arm),
        _ => (at, -arm),
    };
    (at, wide)
}

/// A rectangle from its lower left and upper right corners.
pub fn rectangle(low: At, high: At) -> Vec<At> {
    vec![low, (high.0, low.1), high, (low.0, high.1)]
}

/// The six-contact bar of `bar::six` as an outline, with parts across it between two x in µm.
pub fn six_outlined(bulk: &str, parts: &[crate::bar::Part], edge: &str) -> Shaped {
    let arm = |edge, at| SideContact { edge, place: Some((at, 20, 30)) };
    let end = |edge| SideContact { edge, place: None };
    let contacts =
        vec![end("left"), arm("top", 100), arm("top", 500), end("right"), arm("bottom", 500), arm("bottom", 100)];
    let bare = RandomBar { length: 600, width: 100, contacts, parts: Vec::new(), bulk: 1, mixing: "none" };
    let strip = |(name, kind, from, to, filling): &crate::bar::Part| {
        let (from, to) = (1000 * i64::from(*from), 1000 * i64::from(*to));
        let reach = if *kind == "step" { 30_000 } else { 0 };
        let to = if *kind == "step" && to == 600_000 { to + reach } else { to };
        (
            (*name).to_owned(),
            if *kind == "step" { "step" } else { "gate" },
            rectangle((from, -reach), (to, 100_000 + reach)),
            (*filling).to_owned(),
        )
    };
    Shaped {
        parts: parts.iter().map(strip).collect(),
        bulk: bulk.to_owned(),
        edge: edge.to_owned(),
        ..Shaped::of_bar(&bare)
    }
}

fn ring(corners: &[At]) -> String {
    format!("[{}]", corners.iter().map(|at| corner(*at)).collect::<Vec<_>>().join(", "))
}

fn corner((x, y): At) -> String {
    format!("[{}, {}]", um(x), um(y))
}

/// Nanometres in µm, exactly.
fn um(nm: i64) -> String {
    let sign = if nm < 0 { "-" } else { "" };
    format!("{sign}{}.{:03}", nm.abs() / 1000, nm.abs() % 1000)
}
