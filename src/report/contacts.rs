//! What else is known of the contacts.

use crate::cooldown::Cooldown;
use crate::device::Contact;
use crate::number::Rational;
use crate::report::Sources;
use crate::report::printed::filling;

/// One line per contact of which the tables of lines do not say all, in the order of the device file: `1: pad 7,
/// transmission 9/10`. With a cooldown pin, line and state stand in its table.
pub fn contacts(sources: &Sources) -> Vec<String> {
    sources.device.contacts.iter().filter_map(|contact| line(contact, sources.cooldown)).collect()
}

fn line(contact: &Contact, cooldown: Option<&Cooldown>) -> Option<String> {
    let mut parts: Vec<String> = Vec::new();
    parts.extend(contact.pin.as_ref().filter(|_| cooldown.is_none()).map(|pin| format!("pin {pin}")));
    parts.extend(contact.pad.as_ref().map(|pad| format!("pad {pad}")));
    parts.extend(transmission(contact));
    parts.extend(contact.note.clone());
    (!parts.is_empty()).then(|| format!("{}: {}", contact.name, parts.join(", ")))
}

/// Only where it is not one for all channels.
fn transmission(contact: &Contact) -> Option<String> {
    let perfect = contact.transmission.iter().all(|share| *share == Rational::ONE);
    let shares: Vec<String> = contact.transmission.iter().map(filling).collect();
    (!perfect).then(|| format!("transmission {}", shares.join(", ")))
}
