//! What the words of a table can mean: contacts, points, meters, and the sense of the magnet.

use crate::cooldown::Cooldown;
use crate::cooldown::MagnetSense;
use crate::device::ContactIdx;
use crate::device::Device;
use crate::device::Drive;
use crate::diagnostic::Diagnostic;
use crate::syntax::did_you_mean;
use crate::syntax::quoted;

/// The names that a table may use. All a table needs of device and cooldown.
#[derive(Clone, Debug, PartialEq)]
pub struct Names {
    /// The names of every contact, in the order of the device file.
    pub contacts: Vec<ContactNames>,
    /// Operating points, in the order of the device file.
    pub points: Vec<String>,
    /// Meters; none where there is no cooldown file, and then any name is taken.
    pub meters: Option<Vec<String>>,
    /// Where a positive field points.
    pub magnet: MagnetSense,
    /// What sets the sense of the channels.
    pub driven_by: Drive,
    /// Divides every written uncertainty.
    pub coverage_factor: f64,
}

/// What one contact is called.
#[derive(Clone, Debug, PartialEq)]
pub struct ContactNames {
    /// In the device file.
    pub name: String,
    /// Its pin on the carrier.
    pub pin: Option<String>,
    /// Its plug at the rack.
    pub plug: Option<String>,
}

impl Names {
    /// Whether the polarity of a reading is that of a magnetisation.
    pub fn is_magnetised(&self) -> bool {
        self.driven_by == Drive::Magnetisation
    }

    /// The names that this device and this cooldown give.
    pub fn of(device: &Device, cooldown: Option<&Cooldown>) -> Self {
        let plug = |idx: usize| {
            let line = cooldown?.lines.iter().find(|line| line.contact == ContactIdx(idx))?;
            line.plug.clone()
        };
        let contacts = device.contacts.iter().enumerate();
        Self {
            contacts: contacts
                .map(|(idx, contact)| ContactNames {
                    name: contact.name.clone(),
                    pin: contact.pin.clone(),
                    plug: plug(idx),
                })
                .collect(),
            points: device.points.iter().map(|point| point.name.clone()).collect(),
            meters: cooldown.map(|cooldown| cooldown.meters.iter().map(|meter| meter.name.clone()).collect()),
            driven_by: device.driven_by,
            magnet: cooldown.map_or(MagnetSense::Unknown, |cooldown| cooldown.magnet.positive),
            coverage_factor: cooldown.map_or(1.0, |cooldown| cooldown.coverage_factor),
        }
    }

    /// The contact that `word` names, by name, pin or plug.
    pub fn contact(&self, word: &str) -> Result<ContactIdx, Diagnostic> {
        let meant: Vec<(usize, &str)> = self.meanings().filter(|(_, _, name)| *name == word).map(drop_name).collect();
        let Some((first, _)) = meant.first() else {
            return Err(self.unknown_contact(word));
        };
        if meant.iter().all(|(idx, _)| idx == first) {
            return Ok(ContactIdx(*first));
        }
        Err(self.ambiguous(word, &meant))
    }

    /// The operating point that `word` names.
    pub fn point(&self, word: &str) -> Result<usize, Diagnostic> {
        let found = self.points.iter().position(|name| name == word);
        found.ok_or_else(|| unknown("point", word, self.points.iter().map(String::as_str)))
    }

    /// The meter that `word` names.
    pub fn meter(&self, word: &str) -> Result<String, Diagnostic> {
        match &self.meters {
            Some(known) if !known.iter().any(|name| name == word) => {
                Err(unknown("meter", word, known.iter().map(String::as_str)))
            }
            _ => Ok(word.to_string()),
        }
    }

    /// (contact, kind of name, name), in the order of contacts.
    fn meanings(&self) -> impl Iterator<Item = (usize, &'static str, &str)> {
        self.contacts.iter().enumerate().flat_map(|(idx, contact)| {
            let kinds = [("name", Some(&contact.name)), ("pin", contact.pin.as_ref()), ("plug", contact.plug.as_ref())];
            kinds.into_iter().filter_map(move |(kind, name)| Some((idx, kind, name?.as_str())))
        })
    }

    fn unknown_contact(&self, word: &str) -> Diagnostic {
        let known: Vec<&str> = self.meanings().map(|(_, _, name)| name).collect();
        let fault = unknown("contact", word, known.iter().copied());
        if did_you_mean(word, known.iter().copied()).is_some() {
            return fault;
        }
        let names: Vec<&str> = self.contacts.iter().map(|contact| contact.name.as_str()).collect();
        fault.hint(format!("write a contact's name, pin or plug; the names are {}", listed(&names)))
    }

    fn ambiguous(&self, word: &str, meant: &[(usize, &str)]) -> Diagnostic {
        let meanings: Vec<String> =
            meant.iter().map(|(idx, kind)| format!("the {kind} of contact `{}`", self.contacts[*idx].name)).collect();
        let message = format!("{} can mean {}", quoted(word), meanings.join(" or "));
        Diagnostic::fault("ambiguous-contact", message)
            .hint("write a name, pin or plug that only one contact has, or rename one of the two")
    }
}

fn drop_name<'a>((idx, kind, _): (usize, &'a str, &str)) -> (usize, &'a str) {
    (idx, kind)
}

/// A fault about a word that no name matches, with the nearest name or the list of all.
fn unknown<'a>(what: &str, word: &str, known: impl Iterator<Item = &'a str>) -> Diagnostic {
    let known: Vec<&str> = known.collect();
    let code = match what {
        "contact" => "unknown-contact",
        "point" => "unknown-point",
        _ => "unknown-meter",
    };
    Diagnostic::fault(code, format!("no {what} is called {}", quoted(word))).hint(advice(what, word, &known))
}

fn advice(what: &str, word: &str, known: &[&str]) -> String {
    if known.is_empty() {
        return format!("there is no {what} to name; leave the cell empty");
    }
    match did_you_mean(word, known.iter().copied()) {
        Some(name) => format!("did you mean `{name}`?"),
        None => format!("write one of {}", listed(known)),
    }
}

fn listed(known: &[&str]) -> String {
    const MOST: usize = 20;
    let shown: Vec<String> = known.iter().take(MOST).map(|name| format!("`{name}`")).collect();
    let more = if known.len() > MOST { ", …" } else { "" };
    format!("{}{more}", shown.join(", "))
}
