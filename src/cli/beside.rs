//! Which device a cooldown belongs to, and which cooldown a table of readings: among the files given, or beside them.

use std::path::Path;
use std::path::PathBuf;
use std::sync::Arc;

use crate::cli::load;
use crate::cli::opened::Kind;
use crate::cli::opened::Opened;
use crate::cli::opened::open_named;
use crate::cli::opened::open_neighbours;
use crate::cooldown;
use crate::cooldown::Cooldown;
use crate::cooldown::Names;
use crate::device::Device;
use crate::diagnostic::Findings;
use crate::diagnostic::Place;
use crate::diagnostic::Source;
use crate::files;
use crate::layout;
use crate::measured;
use crate::network;
use crate::report;
use crate::report::Understood;
use crate::syntax;

/// What is understood of all files, in their order; a table that a cooldown names follows it.
pub fn understood(files: &[Opened], findings: &mut Findings) -> Vec<Understood> {
    let devices: Vec<Known> = files.iter().filter_map(|file| known(file, findings)).collect();
    let mut desk = Desk { files, devices, tables: Vec::new(), said: Vec::new() };
    for file in files {
        match &file.kind {
            Kind::Device(_) => desk.device(file),
            Kind::Cooldown(source) => desk.cooldown(file, source, findings),
            Kind::Readings(source) => desk.table(&file.path, source, findings),
            Kind::Own(own) => {
                desk.said.push(report::understood_output(&file.name(), own.what, own.foot.as_deref()));
            }
        }
    }
    desk.said
}

/// A device file with its identity, and the device where it has no faults.
#[derive(Clone)]
struct Known {
    path: PathBuf,
    id: Option<String>,
    device: Option<Device>,
    said: Understood,
}

struct Desk<'a> {
    files: &'a [Opened],
    devices: Vec<Known>,
    /// Tables that were read already.
    tables: Vec<PathBuf>,
    said: Vec<Understood>,
}

/// Reads a device file as far as its layout.
fn known(file: &Opened, findings: &mut Findings) -> Option<Known> {
    let source = file.device()?;
    let id = syntax::text_at(source, &["device", "id"]);
    let mut others = |name: &str, place: &Place| open_named(&file.path, (name, place));
    let device = load::device_of((source, &mut others), findings);
    let layout = device.as_ref().and_then(|device| findings.take(layout::layout(device)));
    let rims = layout.zip(device.as_ref()).map(|(layout, device)| {
        let network = network::network(&layout, device.contacts.len());
        network::rim_order(&network)
    });
    let said = match &device {
        Some(device) => report::understood_device(&file.name(), device, rims.as_deref()),
        None => Understood::new(&file.name(), "device file, not understood before its faults are mended"),
    };
    Some(Known { path: file.path.clone(), id, device, said })
}

impl Desk<'_> {
    fn device(&mut self, file: &Opened) {
        self.said.extend(self.devices.iter().find(|known| known.path == file.path).map(|known| known.said.clone()));
    }

    fn cooldown(&mut self, file: &Opened, source: &Arc<Source>, findings: &mut Findings) {
        let Some(beside) = self.device_of(file, source) else {
            return self.said.extend(alone(file, source, "without its device", findings));
        };
        let Some(device) = &beside.device else {
            return self.said.extend(alone(file, source, "without its device, which has faults", findings));
        };
        let name = beside.path.display().to_string();
        let Some(read) = findings.take(cooldown::from_source(source, device)) else {
            self.said.push(not_understood(file));
            return;
        };
        self.said.push(report::understood_cooldown(&file.name(), (&read, device), &name));
        self.readings(&file.path, (&read, device), findings);
    }

    /// The table that a cooldown names.
    fn readings(&mut self, beside: &Path, (cooldown, device): (&Cooldown, &Device), findings: &mut Findings) {
        let Some(name) = &cooldown.readings_file else { return };
        let path = files::sibling(beside, name);
        if self.is_read(&path) {
            return;
        }
        let bytes = files::read(&path).map_err(|fault| match &cooldown.readings_place {
            Some(place) => fault.at(place),
            None => fault,
        });
        let Some(bytes) = bytes.map_err(|fault| findings.push(fault)).ok() else { return };
        let text = syntax::from_bytes(&path.display().to_string(), &bytes);
        match text {
            Ok(source) => {
                let words = format!("{}, which names it", beside.display());
                self.read_table(&path, &source, (device, Some(cooldown)), (&words, findings));
            }
            Err(faults) => findings.extend(faults.0),
        }
    }

    /// A table given by itself: its cooldown is looked for.
    fn table(&mut self, path: &Path, source: &Arc<Source>, findings: &mut Findings) {
        if self.is_read(path) {
            return;
        }
        let neighbours = open_neighbours(path);
        let names_it = |file: &&Opened| {
            let readings = file.cooldown().and_then(|text| syntax::text_at(text, &["readings"]));
            readings.is_some_and(|name| files::same(&files::sibling(&file.path, &name), path))
        };
        let cooldown = self.files.iter().find(names_it).or_else(|| neighbours.iter().find(names_it));
        let found = cooldown.and_then(|file| {
            let device = self.device_of(file, file.cooldown()?)?.device?;
            let read = cooldown::from_source(file.cooldown()?, &device).ok()?.value;
            Some((file.name(), device, read))
        });
        match found {
            Some((name, device, cooldown)) => {
                let words = format!("{name}, which names it");
                self.read_table(path, source, (&device, Some(&cooldown)), (&words, findings));
            }
            None => self.table_alone(path, source, (cooldown.is_some(), findings)),
        }
    }

    /// Without a cooldown file the words of a table still have a meaning where one device was given.
    fn table_alone(&mut self, path: &Path, source: &Arc<Source>, (named, findings): (bool, &mut Findings)) {
        let only = match self.devices.as_slice() {
            [only] if !named => only.device.clone().map(|device| (device, only.path.display().to_string())),
            _ => None,
        };
        match only {
            Some((device, name)) => self.read_table(path, source, (&device, None), (&name, findings)),
            None => {
                let why = match named {
                    true => "not read further: its cooldown file or device file cannot be used",
                    false => "not read further: no cooldown file here names it",
                };
                let overview = measured::overview(source);
                self.said.push(report::understood_table(&path.display().to_string(), &overview, why));
            }
        }
    }

    fn read_table(
        &mut self,
        path: &Path,
        source: &Arc<Source>,
        (device, cooldown): (&Device, Option<&Cooldown>),
        (beside, findings): (&str, &mut Findings),
    ) {
        self.tables.push(path.to_owned());
        let overview = measured::overview(source);
        let name = path.display().to_string();
        self.said.push(match findings.take(measured::from_source(source, &Names::of(device, cooldown))) {
            Some(readings) => report::understood_readings(&name, &overview, (device, &readings), beside),
            None => report::understood_table(&name, &overview, "not understood before its faults are mended"),
        });
    }

    fn is_read(&self, path: &Path) -> bool {
        self.tables.iter().any(|read| files::same(read, path))
    }

    /// The device of a cooldown: of the files given the one with this identity, or the only one; else one beside the
    /// cooldown file.
    fn device_of(&self, file: &Opened, source: &Arc<Source>) -> Option<Known> {
        let id = syntax::text_at(source, &["device"]);
        let is_it = |known: &&Known| known.id.is_some() && known.id == id;
        let given = self.devices.iter().find(is_it).or(match self.devices.as_slice() {
            [only] => Some(only),
            _ => None,
        });
        if let Some(known) = given {
            return Some(known.clone());
        }
        let neighbours = open_neighbours(&file.path);
        neighbours.iter().filter_map(|file| known(file, &mut Findings::default())).find(|known| is_it(&known))
    }
}

fn alone(file: &Opened, source: &Arc<Source>, why: &str, findings: &mut Findings) -> Option<Understood> {
    let root = findings.take(cooldown::without_device(source));
    Some(root.map_or_else(|| not_understood(file), |root| report::understood_alone(&file.name(), &root, why)))
}

fn not_understood(file: &Opened) -> Understood {
    Understood::new(&file.name(), "cooldown file, not understood before its faults are mended")
}
