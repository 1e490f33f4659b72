//! The text of a cooldown file to a checked [`Cooldown`]: one file per family of tables.

mod circuit;
mod contacts;
mod identity;
mod surroundings;
mod sweep;

use std::sync::Arc;

use crate::device::Device;
use crate::device::Names;
use crate::diagnostic::Findings;
use crate::diagnostic::Outcome;
use crate::diagnostic::Source;
use crate::syntax;
use crate::syntax::Checked;
use crate::syntax::Table;
use crate::syntax::keys::COOLDOWN_FILE;

use crate::cooldown::Cooldown;

/// Reads the bytes of a cooldown file known to the user as `name`. Faults: all of [`from_source`], and bytes that are not
/// UTF-8.
pub fn from_bytes(name: &str, bytes: &[u8], device: &Device) -> Outcome<Cooldown> {
    from_source(&syntax::from_bytes(name, bytes)?, device)
}

/// Reads a cooldown file of this device. All faults come at once, each with its place; where the syntax is broken the
/// rules between tables are left for the next run, because they would find faults that are not there.
pub fn from_source(source: &Arc<Source>, device: &Device) -> Outcome<Cooldown> {
    let Checked { root, mut findings, whole } = syntax::read(source, &COOLDOWN_FILE)?;
    let cooldown = if whole { cooldown(&root, device, &mut findings) } else { None };
    match cooldown {
        Some(cooldown) => findings.finish(cooldown),
        None => Err(findings.into_faults()),
    }
}

/// What can be checked without the device: syntax, keys, kinds and units. Gives the file as it is written.
pub fn without_device(source: &Arc<Source>) -> Outcome<Table> {
    let Checked { root, findings, .. } = syntax::read(source, &COOLDOWN_FILE)?;
    findings.finish(root)
}

fn cooldown(root: &Table, device: &Device, findings: &mut Findings) -> Option<Cooldown> {
    let contacts = Names::of_contacts(device);
    findings.extend(identity::another_device(root, device));
    sweep::check(root, (&contacts, device), findings);
    contacts::check_names(root, &contacts, findings);
    let identity = identity::read(root);
    let lines = circuit::lines(root, &contacts, findings);
    let meters = circuit::meters(root, findings);
    let states = contacts::states(root, &contacts, device.contacts.len(), findings);
    let joins = contacts::joins(root, &contacts, findings);
    Some(Cooldown {
        id: identity.id,
        readings_file: root.text("readings"),
        readings_place: root.node("readings").map(|node| node.place.clone()),
        date: identity.date,
        revision: identity.revision,
        temperature_k: identity.temperature_k,
        electron_temperature_k: identity.electron_temperature_k,
        texts: identity.texts,
        coverage_factor: identity.coverage_factor,
        notes: identity::notes(root),
        source: circuit::excitation(root, findings),
        lines: lines?,
        meters: meters?,
        states: states?,
        joins: joins?,
        magnet: surroundings::magnet(root),
        room: surroundings::room(root),
    })
}
