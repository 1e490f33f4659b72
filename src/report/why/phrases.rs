//! Channels, contacts and borders in words.

use crate::device::ContactIdx;
use crate::device::Device;
use crate::device::OverlayIdx;
use crate::device::OverlayKind;
use crate::network::Carrier;
use crate::network::FaceIdx;
use crate::network::FaceLabel;
use crate::network::Network;
use crate::number::Number;
use crate::quantity::printed::decimals;
use crate::quantity::printed::fraction;
use crate::report::names::contact_name;
use crate::resistance::Arrival;
use crate::resistance::MixturePlace;
use crate::resistance::Origin;
use crate::resistance::Strand;
use crate::resistance::Stretch;

/// What names are looked up in.
#[derive(Clone, Copy)]
pub struct Phrases<'a> {
    pub device: &'a Device,
    pub network: &'a Network,
    /// Words for channels of either sense where both run, so that each must be named.
    pub signs: Option<[&'static str; 2]>,
    /// The mixtures that are spoken of, in the order of their steps.
    pub mixtures: &'a [Origin],
}

impl Phrases<'_> {
    /// `3 channels`, `1 hole channel`, `channels of 1/3 e²/h`.
    pub fn channels(&self, weight: &Number, carrier: Option<Carrier>) -> String {
        let sign = match (carrier, self.signs) {
            (Some(Carrier::Electron), Some([forward, _])) => forward,
            (Some(Carrier::Hole), Some([_, backward])) => backward,
            _ => "",
        };
        match number(weight) {
            one if one == "1" => format!("1 {sign}channel"),
            whole if whole.chars().all(|c| c.is_ascii_digit()) => format!("{whole} {sign}channels"),
            part => format!("{sign}channels of {part} e²/h"),
        }
    }

    /// `3 channels: 1 runs under TG to contact 3; 2 turn at the border of TG and run along it to contact 6`, or
    /// `3 channels, which run along the rim to contact 2`.
    pub fn departures(&self, strands: &[Strand]) -> String {
        let total: Number = strands.iter().map(|strand| strand.weight.clone()).sum();
        match strands {
            [] => String::new(),
            [only] => format!("{}, which {}", self.channels(&total, only.carrier), self.course(only)),
            several => {
                let part = |strand: &Strand| format!("{} {}", self.count(strand), self.course(strand));
                let parts: Vec<String> = several.iter().map(part).collect();
                format!("{}: {}", self.channels(&total, None), parts.join("; "))
            }
        }
    }

    fn course(&self, strand: &Strand) -> String {
        let s = if number(&strand.weight) == "1" { "s" } else { "" };
        let clauses: Vec<String> = self.legs(strand).iter().flat_map(|leg| leg.clauses(s)).collect();
        let clauses = if clauses.is_empty() { vec![format!("run{s} along the rim")] } else { clauses };
        format!("{} to {}", listed(&clauses), self.end(strand.to))
    }

    /// `2 channels from contact 2 at share 1`.
    pub fn arrival(&self, arrival: &Arrival) -> String {
        let Arrival { strand, share } = arrival;
        let channels = self.channels(&strand.weight, strand.carrier);
        format!("{channels} {} at share {}", self.from(strand.from), number(share))
    }

    /// Arrivals as a list.
    pub fn arrivals(&self, arrivals: &[Arrival]) -> String {
        listed(&arrivals.iter().map(|arrival| self.arrival(arrival)).collect::<Vec<_>>())
    }

    /// `from contact 2`, `from mixture A`.
    pub fn from(&self, origin: Origin) -> String {
        format!("from {}", self.end(origin))
    }

    /// Where channels mix.
    pub fn mixing_place(&self, place: Option<MixturePlace>) -> String {
        match place {
            Some(MixturePlace::Along(stretch)) => format!("along {}", self.border(stretch)),
            Some(MixturePlace::Partly(stretch)) => {
                format!("along {}, over whose length channels mix in part", self.border(stretch))
            }
            Some(MixturePlace::Behind(contact)) => format!(
                "behind contact {}, which takes up and sends out a part and lets a part pass",
                self.contact(contact)
            ),
            None => "side by side".to_owned(),
        }
    }

    /// The name of a contact.
    pub fn contact(&self, contact: ContactIdx) -> String {
        contact_name(self.device, contact).to_owned()
    }

    /// The names of contacts in their order: `2, 3 and 5`.
    pub fn contacts(&self, contacts: &[ContactIdx]) -> String {
        listed(&contacts.iter().map(|contact| self.contact(*contact)).collect::<Vec<_>>())
    }

    fn count(&self, strand: &Strand) -> String {
        let named = self.channels(&strand.weight, strand.carrier);
        let plain = named.strip_suffix(" channels").or(named.strip_suffix(" channel"));
        plain.filter(|_| self.signs.is_none()).map_or(named.clone(), str::to_owned)
    }

    /// `contact 6`, `mixture A`.
    pub fn end(&self, origin: Origin) -> String {
        match (origin, self.mixtures.iter().position(|known| *known == origin)) {
            (Origin::Contact(contact), _) => format!("contact {}", self.contact(contact)),
            (Origin::Mixture(_), Some(at)) => match u8::try_from(at).ok().filter(|at| *at < 26) {
                Some(letter) => format!("mixture {}", char::from(b'A' + letter)),
                None => format!("mixture {}", at + 1),
            },
            (Origin::Mixture(_), None) => "where they mix with others".to_owned(),
        }
    }

    fn border(&self, stretch: Stretch) -> String {
        match stretch {
            Stretch::Rim(face) => self.rim("the rim", face),
            Stretch::CutOut(face) => self.rim("the rim of the cut-out", face),
            Stretch::Border(a, b) => format!("the border {}", self.between(a, b)),
            Stretch::Past(contact) => format!("contact {}", self.contact(contact)),
        }
    }

    fn rim(&self, rim: &str, face: FaceIdx) -> String {
        let cover = self.cover(face);
        if cover.is_empty() { rim.to_owned() } else { format!("{rim} {}", self.beneath(&cover)) }
    }

    /// `of TG`, or `between TG and BG` where one begins as the other ends.
    fn between(&self, a: FaceIdx, b: FaceIdx) -> String {
        let (a, b) = (self.cover(a), self.cover(b));
        let only = |cover: &[OverlayIdx], other: &[OverlayIdx]| -> Vec<OverlayIdx> {
            cover.iter().copied().filter(|one| !other.contains(one)).collect()
        };
        match (only(&a, &b), only(&b, &a)) {
            (one, none) | (none, one) if none.is_empty() => format!("of {}", self.overlays(&one)),
            (one, other) => format!("between {} and {}", self.overlays(&one), self.overlays(&other)),
        }
    }

    /// `under TG`, `through the thin side`.
    fn beneath(&self, cover: &[OverlayIdx]) -> String {
        let steps_only = cover.iter().all(|one| self.device.overlays[one.0].kind == OverlayKind::Step);
        format!("{} {}", if steps_only { "through" } else { "under" }, self.overlays(cover))
    }

    fn overlays(&self, cover: &[OverlayIdx]) -> String {
        cover.iter().map(|one| self.device.overlays[one.0].name.as_str()).collect::<Vec<_>>().join("+")
    }

    fn cover(&self, face: FaceIdx) -> Vec<OverlayIdx> {
        match &self.network.topology.faces[face.0] {
            FaceLabel::Mesa(cover) => cover.clone(),
            FaceLabel::Vacuum | FaceLabel::Contact(_) => Vec::new(),
        }
    }

    /// What is worth saying of a route: gates and steps on the way, turns, cut-outs, contacts passed by.
    /// Where channels leave a mixture they are on its border already.
    fn legs(&self, strand: &Strand) -> Vec<Leg> {
        let mut legs = Vec::new();
        let mut cover: Vec<OverlayIdx> = Vec::new();
        let begun = usize::from(matches!(strand.from, Origin::Mixture(_)));
        for stretch in strand.route.iter().skip(begun) {
            match *stretch {
                Stretch::Rim(face) | Stretch::CutOut(face) => {
                    let here = self.cover(face);
                    let fresh: Vec<OverlayIdx> = here.iter().copied().filter(|one| !cover.contains(one)).collect();
                    cover = here;
                    legs.extend((!fresh.is_empty()).then(|| Leg::Beneath(self.beneath(&fresh))));
                    let round = matches!(stretch, Stretch::CutOut(_)) && legs.last() != Some(&Leg::CutOut);
                    legs.extend(round.then_some(Leg::CutOut));
                }
                Stretch::Border(a, b) => legs.push(Leg::Turn(self.between(a, b))),
                Stretch::Past(contact) => legs.push(Leg::Past(self.contact(contact))),
            }
        }
        legs
    }
}

/// A part of a route that is worth saying.
#[derive(Clone, Debug, PartialEq)]
enum Leg {
    Beneath(String),
    CutOut,
    Turn(String),
    Past(String),
}

impl Leg {
    /// With its verb; `s` ends the verb of a single channel.
    fn clauses(&self, s: &str) -> Vec<String> {
        match self {
            Self::Beneath(parts) => vec![format!("run{s} {parts}")],
            Self::CutOut => vec![format!("run{s} along the rim of the cut-out")],
            Self::Turn(between) => vec![format!("turn{s} at the border {between}"), format!("run{s} along it")],
            Self::Past(contact) => vec![format!("run{s} past contact {contact}")],
        }
    }
}

/// A fraction, or four decimals of a float; whole where nothing but rounding is left of a float.
pub fn number(value: &Number) -> String {
    match value {
        Number::Exact(exact) => fraction(exact),
        Number::Float(value) if (value - value.round()).abs() < ROUNDING => decimals(value.round(), 0),
        Number::Float(value) => decimals(*value, 4),
    }
}

/// What floats of the solution can be off by.
const ROUNDING: f64 = 1e-9;

/// `a`, `a and b`, `a, b and c`.
pub fn listed(parts: &[String]) -> String {
    match parts {
        [] => String::new(),
        [only] => only.clone(),
        [before @ .., last] => format!("{} and {last}", before.join(", ")),
    }
}
