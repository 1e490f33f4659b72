//! The text of a device file to a checked [`Device`]: one file per table, one function per rule.

mod bench;
mod contact;
mod density;
mod filling;
mod identity;
mod mesa;
mod mixing;
mod modes;
mod overlay;
mod placement;
mod point;
mod reading;
mod transmission;

use std::sync::Arc;

use crate::diagnostic::Diagnostic;
use crate::diagnostic::Faults;
use crate::diagnostic::Findings;
use crate::diagnostic::Outcome;
use crate::diagnostic::Place;
use crate::diagnostic::Source;
use crate::syntax;
use crate::syntax::Checked;
use crate::syntax::Table;
use crate::syntax::keys::DEVICE_FILE;

use crate::device::Contact;
use crate::device::Device;
use crate::device::EdgeRules;
use crate::device::Groups;
use crate::device::Ladder;
use crate::device::Layer;
use crate::device::Mesa;
use crate::device::NamedReading;
use crate::device::Names;
use crate::device::OperatingPoint;
use crate::device::Overlay;

/// Reads the bytes of a device file known to the user as `name`. Faults: all of [`from_source`], and bytes that are not UTF-8.
pub fn from_bytes(name: &str, bytes: &[u8]) -> Outcome<Device> {
    from_source(&syntax::from_bytes(name, bytes)?)
}

/// Reads the file of one device. All faults come at once, each with its place; where the syntax is broken the rules
/// between tables are left for the next run, because they would find faults that are not there.
pub fn from_source(source: &Arc<Source>) -> Outcome<Device> {
    with_others(source, &mut |_, place| Err(bench::not_here(place)))
}

/// Gives the text of a device file that is named in another one at a place.
pub type Others<'a> = dyn FnMut(&str, &Place) -> Result<Arc<Source>, Faults> + 'a;

/// Reads a device file, or a bench with the device files that it names.
pub fn with_others(source: &Arc<Source>, others: &mut Others) -> Outcome<Device> {
    let Checked { root, mut findings, whole } = syntax::read(source, &DEVICE_FILE)?;
    let device = match whole {
        true if root.lacks("bench") => device(&root, &mut findings),
        true => bench::read(&root, others, &mut findings),
        false => None,
    };
    match device {
        Some(device) => findings.finish(device),
        None => Err(findings.into_faults()),
    }
}

/// What can be drawn of a device file that has faults: its mesa with the contacts, gates and steps that could be read, so
/// that faults of the drawing are told together with those of the text. Points are there only where all gates and steps
/// are, whose indices they hold; none where nothing can be drawn.
pub fn drawing(source: &Arc<Source>) -> Option<Device> {
    let Checked { root, whole, .. } = syntax::read(source, &DEVICE_FILE).ok()?;
    let parts = whole.then(|| Parts::read(&root, &mut Findings::default()))?;
    let contacts: Vec<Contact> = parts.contacts.into_iter().flatten().collect();
    let all = parts.overlays.iter().all(Option::is_some);
    Some(Device {
        id: String::new(),
        title: String::new(),
        material: String::new(),
        layer: parts.layer,
        mesa: parts.mesa?,
        edge: parts.edge,
        groups: parts.groups,
        driven_by: mixing::driven_by(&root),
        contacts,
        overlays: parts.overlays.into_iter().flatten().collect(),
        points: parts.points.filter(|_| all).unwrap_or_default(),
        readings: Vec::new(),
        ladder: parts.ladder,
        bench: None,
    })
}

/// What the rules for points, contacts and readings look up.
struct Scope<'a> {
    ladder: &'a Ladder,
    contacts: Names,
    overlays: Names,
    gates: usize,
}

/// All tables, each read by itself.
struct Parts {
    ladder: Ladder,
    layer: Layer,
    mesa: Option<Mesa>,
    edge: EdgeRules,
    groups: Option<Groups>,
    contacts: Vec<Option<Contact>>,
    overlays: Vec<Option<Overlay>>,
    points: Option<Vec<OperatingPoint>>,
    readings: Option<Vec<NamedReading>>,
}

impl Parts {
    fn read(root: &Table, findings: &mut Findings) -> Self {
        let ladder = identity::ladder(root);
        let mesa = mesa::read(root, findings);
        let edge = mixing::edge(root);
        let groups = mixing::groups(root, findings);
        let overlays = overlay::read(root, findings);
        let scope = scope(root, &ladder);
        let points = point::read(root, &scope, findings);
        let contacts = contact::read(root, findings);
        let readings = reading::read(root, &scope, findings);
        Self { layer: identity::layer(root), mesa, edge, groups, contacts, overlays, points, readings, ladder }
    }
}

fn device(root: &Table, findings: &mut Findings) -> Option<Device> {
    findings.extend(bench::links_alone(root));
    let identity = identity::read(root);
    let parts = Parts::read(root, findings);
    let device = Device {
        id: identity.id,
        title: identity.title,
        material: identity.material,
        layer: parts.layer,
        mesa: parts.mesa?,
        edge: parts.edge,
        groups: parts.groups,
        driven_by: mixing::driven_by(root),
        contacts: parts.contacts.into_iter().collect::<Option<_>>()?,
        overlays: parts.overlays.into_iter().collect::<Option<_>>()?,
        points: parts.points?,
        readings: parts.readings?,
        ladder: parts.ladder,
        bench: None,
    };
    density::compare(&device, findings);
    Some(device)
}

fn scope<'a>(root: &Table, ladder: &'a Ladder) -> Scope<'a> {
    let gates = root.tables("gate");
    let overlays = gates.iter().copied().chain(root.tables("step"));
    Scope {
        ladder,
        contacts: Names::of_tables("contact", root.tables("contact")),
        overlays: Names::of_tables("gate or step", overlays),
        gates: gates.len(),
    }
}

/// Takes a value, or notes why there is none.
fn noted<T>(found: Result<T, Option<Diagnostic>>, findings: &mut Findings) -> Option<T> {
    found.map_err(|fault| findings.extend(fault)).ok()
}
