//! `[bench]` and `[[link]]`: devices with files of their own, joined by wires.

use std::collections::BTreeMap;

use crate::diagnostic::Diagnostic;
use crate::diagnostic::Faults;
use crate::diagnostic::Findings;
use crate::diagnostic::Place;
use crate::syntax::Table;
use crate::syntax::did_you_mean;
use crate::syntax::keys::DEVICE_FILE;
use crate::syntax::quoted;

use crate::device::Bench;
use crate::device::ContactIdx;
use crate::device::Device;
use crate::device::Link;
use crate::device::Names;
use crate::device::OperatingPoint;
use crate::device::Part;
use crate::device::bench;
use crate::device::parse::Others;
use crate::device::parse::Scope;
use crate::device::parse::identity;
use crate::device::parse::noted;
use crate::device::parse::reading;
use crate::device::parse::with_others;

/// Reads a bench and the devices on it.
pub(super) fn read(root: &Table, others: &mut Others, findings: &mut Findings) -> Option<Device> {
    findings.extend(beside(root));
    let table = root.table("bench")?;
    let parts = parts(table, others, findings);
    let posts = named(table, "posts");
    let parts = parts?;
    findings.extend(doubled(&named(table, "posts"), "post", "give each post a name of its own"));
    let contacts = bench::contacts(&parts, &posts);
    let names = Names::of_list(contacts.iter().map(|contact| contact.name.as_str()));
    let links = links(root, (&parts, &names), findings);
    findings.extend(links.iter().flat_map(|links| free_posts(links, &posts, contacts.len())));
    let overlays = bench::overlays(&parts);
    let points = points(table, &parts, findings);
    let identity = identity::read(root);
    let first = parts.first()?.device.clone();
    let scope = Scope { ladder: &first.ladder, contacts: names, overlays: Names::of_list([]), gates: 0 };
    let readings = reading::read(root, &scope, findings);
    Some(Device {
        id: identity.id,
        title: identity.title,
        material: identity.material,
        contacts,
        overlays,
        points: points?,
        readings: readings?,
        bench: Some(Bench { parts, posts: posts.len(), links: links? }),
        ..first
    })
}

/// The fault for a bench where only one device was asked for.
pub(super) fn not_here(place: &Place) -> Faults {
    let fault = Diagnostic::fault("bench-in-a-bench", "a bench stands on devices, and this file is a bench itself");
    Faults(vec![fault.at(place).hint("name the device files of that bench here")])
}

/// Wires without a bench to join devices on.
pub(super) fn links_alone(root: &Table) -> Option<Diagnostic> {
    let first = *root.tables("link").first()?;
    let fault = Diagnostic::fault("link-without-bench", "[[link]] joins devices, and this file has no [bench]");
    Some(fault.at(&first.place).hint("write a file with [device], [bench] and [[link]] that names this one"))
}

/// What describes one device stands in that device's file.
fn beside(root: &Table) -> Vec<Diagnostic> {
    let fault = |key: &str, place: &Place| {
        Diagnostic::fault("beside-bench", format!("{key} belongs to one device, and this file is a bench"))
            .at(place)
            .hint("write it into the device's own file, which [bench] names")
    };
    let single = DEVICE_FILE.root.keys.iter().filter(|key| key.alone);
    let mut found: Vec<Diagnostic> = single
        .filter(|key| root.node(key.name).is_some())
        .map(|key| fault(&format!("`{}`", key.name), root.key_place(key.name)))
        .collect();
    let ladder = root.table("device").filter(|table| table.node("ladder").is_some());
    found.extend(ladder.map(|table| fault("`ladder`", table.key_place("ladder"))));
    found
}

/// Texts of a list with their places.
fn named(table: &Table, key: &str) -> Vec<(String, Place)> {
    table.list(key).iter().filter_map(|node| Some((node.text()?.to_owned(), node.place.clone()))).collect()
}

fn doubled(names: &[(String, Place)], what: &str, hint: &str) -> Vec<Diagnostic> {
    let second = (0..names.len()).filter(|&at| names[..at].iter().any(|(earlier, _)| *earlier == names[at].0));
    let fault = |at: usize| {
        Diagnostic::fault("doubled-name", format!("the {what} {} is there twice", quoted(&names[at].0)))
            .at(&names[at].1)
            .hint(hint)
    };
    second.map(fault).collect()
}

fn parts(table: &Table, others: &mut Others, findings: &mut Findings) -> Option<Vec<Part>> {
    let files = named(table, "devices");
    let mut read: BTreeMap<String, Option<Device>> = BTreeMap::new();
    for (file, place) in &files {
        if !read.contains_key(file) {
            read.insert(file.clone(), device(file, place, others, findings));
        }
    }
    let devices: Vec<Device> =
        files.iter().map(|(file, _)| read.get(file).cloned().flatten()).collect::<Option<_>>()?;
    let names = names(table, &devices, &files, findings)?;
    Some(names.into_iter().zip(devices).map(|(name, device)| Part { name, device }).collect())
}

fn device(file: &str, place: &Place, others: &mut Others, findings: &mut Findings) -> Option<Device> {
    let source = others(file, place).map_err(|Faults(list)| findings.extend(list)).ok()?;
    findings.take(with_others(&source, &mut |_, place| Err(not_here(place))))
}

/// What the bench calls its devices: their ids, unless it gives names.
fn names(table: &Table, devices: &[Device], files: &[(String, Place)], findings: &mut Findings) -> Option<Vec<String>> {
    let given = named(table, "names");
    if table.lacks("names") {
        let ids: Vec<(String, Place)> =
            devices.iter().zip(files).map(|(device, (_, place))| (device.id.clone(), place.clone())).collect();
        let hint = "give every device a name on this bench: `names = [\"A\", \"B\"]`";
        findings.extend(doubled(&ids, "device", hint));
        return Some(ids.into_iter().map(|(id, _)| id).collect());
    }
    findings.extend(doubled(&given, "device", "give each device a name of its own"));
    if given.len() != devices.len() {
        let message = format!("{} names are given to {} devices", given.len(), devices.len());
        let fault = Diagnostic::fault("names-and-devices", message).at(table.place_of("names"));
        findings.push(fault.hint("give one name for each entry of `devices`, in the same order"));
        return None;
    }
    Some(given.into_iter().map(|(name, _)| name).collect())
}

fn links(root: &Table, scope: (&[Part], &Names), findings: &mut Findings) -> Option<Vec<Link>> {
    let mut links: Vec<Link> = Vec::new();
    let mut whole = true;
    for table in root.tables("link") {
        let Some(link) = link(table, scope, findings) else {
            whole = false;
            continue;
        };
        let [a, b] = link.ends;
        if a == b {
            let message = format!("this wire joins {} to itself", quoted(&table.text_or_empty("from")));
            let fault = Diagnostic::fault("link-to-itself", message).at(table.place_of("to"));
            findings.push(fault.hint("name another contact, or leave the wire out"));
        }
        if links.iter().any(|earlier| earlier.ends == [a, b] || earlier.ends == [b, a]) {
            let [from, to] = ["from", "to"].map(|key| quoted(&table.text_or_empty(key)));
            let fault = Diagnostic::fault("doubled-link", format!("{from} and {to} are joined twice"));
            findings.push(fault.at(&table.place).hint("give wires side by side once, with the resistance of them all"));
        }
        links.push(link);
    }
    whole.then_some(links)
}

fn link(table: &Table, (parts, names): (&[Part], &Names), findings: &mut Findings) -> Option<Link> {
    let mut end = |key: &str| {
        let name = table.text(key)?;
        let place = table.place_of(key);
        let found = names.find(&name, place).map_err(|fault| no_such_device(&name, parts, place).or(fault));
        noted(found, findings).map(ContactIdx)
    };
    let (from, to) = (end("from"), end("to"));
    Some(Link { ends: [from?, to?], ohm: table.number("ohm").unwrap_or(0.0), place: table.place.clone() })
}

/// The fault for a contact of a device that is not on the bench; none where the device is, or no device is named.
fn no_such_device(name: &str, parts: &[Part], place: &Place) -> Option<Diagnostic> {
    let (device, contact) = name.split_once(':')?;
    let known: Vec<&str> = parts.iter().map(|part| part.name.as_str()).collect();
    if known.iter().any(|known| name.strip_prefix(known).is_some_and(|rest| rest.starts_with(':'))) {
        return None;
    }
    let hint = match did_you_mean(device, known.iter().copied()) {
        Some(meant) => format!("did you mean \"{meant}:{contact}\"?"),
        None => format!("on the bench are: {}", known.join(", ")),
    };
    let fault = Diagnostic::fault("unknown-name", format!("there is no device {} on the bench", quoted(device)));
    Some(fault.at(place).hint(hint))
}

/// Posts that no wire reaches; one that is there twice is said elsewhere.
fn free_posts(links: &[Link], posts: &[(String, Place)], contacts: usize) -> Vec<Diagnostic> {
    let reached = |at: usize| links.iter().any(|link| link.ends.contains(&ContactIdx(contacts - posts.len() + at)));
    let again = |at: usize| posts[..at].iter().any(|(earlier, _)| *earlier == posts[at].0);
    let free = posts.iter().enumerate().filter(|(at, _)| !reached(*at) && !again(*at));
    let fault = |(_, (name, place)): (usize, &(String, Place))| {
        Diagnostic::fault("free-post", format!("no wire reaches the post {}", quoted(name)))
            .at(place)
            .hint("join it with a [[link]], or leave it out")
    };
    free.map(fault).collect()
}

/// Points go together by name: every device has one of each name.
fn points(table: &Table, parts: &[Part], findings: &mut Findings) -> Option<Vec<OperatingPoint>> {
    let first = parts.first()?;
    let names = |part: &Part| part.device.points.iter().map(|point| point.name.clone()).collect::<Vec<_>>();
    let all = names(first);
    for part in &parts[1..] {
        let here = names(part);
        let here_only = here.iter().filter(|name| !all.contains(name)).map(|name| (name, part, first));
        let first_only = all.iter().filter(|name| !here.contains(name)).map(|name| (name, first, part));
        for (name, with, without) in here_only.chain(first_only) {
            let [with, without] = [with, without].map(|part| quoted(&part.name));
            let message =
                format!("{with} has an operating point {}, and {without} has none of that name", quoted(name));
            let fault = Diagnostic::fault("differing-points", message).at(table.place_of("devices"));
            findings.push(fault.hint("what is set at the same time has the same name in all device files"));
        }
    }
    findings.extend(differing_drives(table, parts));
    let points: Vec<OperatingPoint> = all.iter().filter_map(|name| bench::point(parts, name)).collect();
    findings.extend(points.iter().filter_map(|point| differing_fields(point, parts)));
    Some(points)
}

/// The polarity is one for all: that of the field or that of the magnetisation.
fn differing_drives(table: &Table, parts: &[Part]) -> Option<Diagnostic> {
    let first = parts.first()?;
    let other = parts.iter().find(|part| part.device.driven_by != first.device.driven_by)?;
    let [one, other] = [first, other].map(|part| quoted(&part.name));
    let message = format!("{one} and {other} are not both driven by the field, or both by a magnetisation");
    let fault = Diagnostic::fault("differing-drives", message).at(table.place_of("devices"));
    Some(fault.hint("on one bench the polarity means the same for all devices"))
}

/// All devices usually lie in one magnet.
fn differing_fields(point: &OperatingPoint, parts: &[Part]) -> Option<Diagnostic> {
    let tesla = point.field_t?;
    let other =
        |(part, other): (&Part, &OperatingPoint)| Some((part.name.clone(), other.field_t?, other.place.clone()));
    let mut fields = parts.iter().zip(&point.parts).filter_map(other);
    let (name, differs, place) = fields.find(|(_, field, _)| *field != tesla)?;
    let message =
        format!("at {} {} is at {differs} T, another device at {tesla} T", quoted(&point.name), quoted(&name));
    let notice = Diagnostic::notice("differing-fields", message).at(&place);
    Some(notice.hint("correct it unless the devices lie in two magnets; the sheet prints the first"))
}
