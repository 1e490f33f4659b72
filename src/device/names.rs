//! Names of contacts, gates and steps, looked up with did-you-mean.

use std::collections::BTreeSet;

use crate::diagnostic::Diagnostic;
use crate::diagnostic::Place;
use crate::syntax::Table;
use crate::syntax::did_you_mean;
use crate::syntax::quoted;

use crate::device::Device;

/// Names in the order of the file.
#[derive(Debug)]
pub struct Names {
    /// What they are names of: `contact`.
    what: &'static str,
    /// None where a name was refused.
    list: Vec<Option<String>>,
    /// Other words for a name, which are recognised in the hint alone: (pin, place in the list).
    pins: Vec<(String, usize)>,
}

impl Names {
    /// The names of tables under their key `name`.
    pub(super) fn of_tables<'a>(what: &'static str, tables: impl IntoIterator<Item = &'a Table>) -> Self {
        let mut names = Self { what, list: Vec::new(), pins: Vec::new() };
        for (at, table) in tables.into_iter().enumerate() {
            names.list.push(table.text("name"));
            names.pins.extend(table.text("pin").map(|pin| (pin, at)));
        }
        names
    }

    /// The names of contacts.
    pub(super) fn of_list<'a>(names: impl IntoIterator<Item = &'a str>) -> Self {
        let list = names.into_iter().map(|name| Some(name.to_owned())).collect();
        Self { what: "contact", list, pins: Vec::new() }
    }

    /// The names of a device's contacts.
    pub fn of_contacts(device: &Device) -> Self {
        let pins = device.contacts.iter().enumerate().filter_map(|(at, contact)| Some((contact.pin.clone()?, at)));
        let list = device.contacts.iter().map(|contact| Some(contact.name.clone())).collect();
        Self { what: "contact", list, pins: pins.collect() }
    }

    /// The names of a device's operating points.
    pub fn of_points(device: &Device) -> Self {
        let list = device.points.iter().map(|point| Some(point.name.clone())).collect();
        Self { what: "operating point", list, pins: Vec::new() }
    }

    /// Place of a name in the list, or what to tell the user. No finding where the name may be one that was refused.
    pub fn find(&self, name: &str, place: &Place) -> Result<usize, Option<Diagnostic>> {
        match self.list.iter().position(|known| known.as_deref() == Some(name)) {
            Some(at) => Ok(at),
            None if self.list.contains(&None) => Err(None),
            None => Err(Some(self.unknown(name, place))),
        }
    }

    /// A contact that has this word as its name, or else as its pin.
    pub fn by_name_or_pin(&self, word: &str) -> Option<usize> {
        let named = self.list.iter().position(|known| known.as_deref() == Some(word));
        named.or_else(|| self.pins.iter().find(|(pin, _)| pin == word).map(|(_, at)| *at))
    }

    fn unknown(&self, name: &str, place: &Place) -> Diagnostic {
        let known: Vec<&str> = self.list.iter().flatten().map(String::as_str).collect();
        let pin = self.pins.iter().find(|(pin, _)| pin == name).and_then(|(_, at)| self.list.get(*at)?.as_deref());
        let hint = match (pin, did_you_mean(name, known.iter().copied())) {
            (Some(meant), _) => format!("{name} is the pin of contact {meant}: write \"{meant}\""),
            (None, Some(meant)) => format!("did you mean \"{meant}\"?"),
            (None, None) if known.is_empty() => format!("no {} is named in the device file", self.what),
            (None, None) => format!("known are: {}", listed(&known)),
        };
        let message = format!("there is no {} {}", self.what, quoted(name));
        Diagnostic::fault("unknown-name", message).at(place).hint(hint)
    }
}

/// Names between commas, the first twenty of many.
fn listed(names: &[&str]) -> String {
    let dots = if names.len() > 20 { ", …" } else { "" };
    format!("{}{dots}", names[..names.len().min(20)].join(", "))
}

/// Faults for names that stand twice under `key`.
pub(super) fn doubled(what: &str, key: &str, tables: &[&Table]) -> Vec<Diagnostic> {
    let mut seen = BTreeSet::new();
    let named = tables.iter().filter_map(|table| Some((table.text(key)?, table.place_of(key))));
    let second = named.filter(|(name, _)| !seen.insert(name.clone()));
    second.map(|(name, place)| doubled_fault(what, &name, place)).collect()
}

fn doubled_fault(what: &str, name: &str, place: &Place) -> Diagnostic {
    Diagnostic::fault("doubled-name", format!("the {what} {} is there twice", quoted(name)))
        .at(place)
        .hint(format!("give each {what} a name of its own"))
}
