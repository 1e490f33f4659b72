//! From paths to checked inputs: the head of every command.

use std::path::Path;
use std::path::PathBuf;
use std::sync::Arc;

use crate::archive::Kept;
use crate::archive::Role;
use crate::cli::Failure;
use crate::cooldown::Cooldown;
use crate::device::Device;
use crate::device::Others;
use crate::diagnostic::Diagnostic;
use crate::diagnostic::Faults;
use crate::diagnostic::Findings;
use crate::diagnostic::Noted;
use crate::diagnostic::Place;
use crate::diagnostic::Source;
use crate::files;
use crate::layout::Layout;
use crate::measured::MeasuredReading;
use crate::network::Network;

/// Everything that was read and checked.
pub struct Loaded {
    pub device: Device,
    pub layout: Layout,
    pub network: Network,
    pub cooldown: Option<Cooldown>,
    pub measured: Vec<MeasuredReading>,
    pub inputs: Vec<Kept>,
    pub notices: Vec<Diagnostic>,
}

/// Reads and checks a device file and, where given, a cooldown file with its readings; all faults at once.
pub fn load(device: &Path, cooldown: Option<&Path>) -> Result<Loaded, Failure> {
    checked(Shelf::Disk, device, cooldown)
}

/// The same with files that were kept.
pub fn load_kept(kept: &[Kept]) -> Result<Loaded, Failure> {
    let name = |role| kept.iter().find(|file| file.role == role).map(|file| Path::new(&file.name));
    checked(Shelf::Kept(kept), name(Role::Device).unwrap_or(Path::new("device")), name(Role::Cooldown))
}

/// Where files are read.
#[derive(Clone, Copy)]
enum Shelf<'a> {
    Disk,
    Kept(&'a [Kept]),
}

impl Shelf<'_> {
    fn read(self, role: Role, path: &Path) -> Result<Vec<u8>, Diagnostic> {
        let Self::Kept(kept) = self else { return files::read(path) };
        // There is one file of each role, save for parts: these go by their names.
        let is_it = |file: &&Kept| file.role == role && (role != Role::Part || Path::new(&file.name) == path);
        let found = kept.iter().find(is_it).map(|file| file.bytes.clone());
        let fault = || Diagnostic::fault("unreadable-file", format!("{} was not kept", path.display()));
        found.ok_or_else(|| fault().hint("the sheet cannot be computed again without it"))
    }
}

fn checked(shelf: Shelf, device: &Path, cooldown: Option<&Path>) -> Result<Loaded, Failure> {
    let mut findings = Findings::default();
    let mut inputs = Vec::new();
    let device = described((shelf, device), &mut inputs, &mut findings);
    let layout = device.as_ref().and_then(|device| findings.take(crate::layout::layout(device)));
    let mut measured = Some(Vec::new());
    let mut read_cooldown = None;
    if let Some(path) = cooldown {
        let text = source((shelf, Role::Cooldown), (path, None), (&mut inputs, &mut findings));
        read_cooldown = device
            .as_ref()
            .zip(text)
            .and_then(|(device, text)| findings.take(crate::cooldown::from_source(&text, device)));
        measured = device
            .as_ref()
            .zip(read_cooldown.as_ref())
            .and_then(|(device, cooldown)| readings((shelf, path), device, cooldown, (&mut inputs, &mut findings)));
    }
    let (Some(device), Some(layout), Some(measured)) = (device, layout, measured) else {
        return Err(Failure::Input(findings.into_faults()));
    };
    let Noted { notices, .. } = findings.finish(()).map_err(Failure::Input)?;
    let network = crate::network::of_device(&layout, &device, crate::circuit::links(&device));
    Ok(Loaded { device, layout, network, cooldown: read_cooldown, measured, inputs, notices })
}

/// The device; where its file has faults, those of what can be drawn of it are told as well. `others` reads the files that
/// a bench names.
pub fn device_of((text, others): (&Arc<Source>, &mut Others), findings: &mut Findings) -> Option<Device> {
    let device = findings.take(crate::device::with_others(text, others));
    let drawing = if device.is_none() { crate::device::drawing(text) } else { None };
    findings.extend(drawing.iter().flat_map(crate::layout::faults));
    device
}

/// A device, or a bench with the devices whose files it names.
fn described((shelf, path): (Shelf, &Path), inputs: &mut Vec<Kept>, findings: &mut Findings) -> Option<Device> {
    let text = source((shelf, Role::Device), (path, None), (inputs, findings))?;
    let mut others = |written: &str, place: &Place| part((shelf, path), (written, place), inputs);
    device_of((&text, &mut others), findings)
}

/// The text of a device file that a bench names. A file that is named twice goes in once.
fn part(
    (shelf, bench): (Shelf, &Path),
    (written, place): (&str, &Place),
    inputs: &mut Vec<Kept>,
) -> Result<Arc<Source>, Faults> {
    let (mut read, mut findings) = (Vec::new(), Findings::default());
    let path = match shelf {
        Shelf::Disk => files::sibling(bench, written),
        Shelf::Kept(_) => PathBuf::from(files::name_beside(written)),
    };
    let text = source((shelf, Role::Part), (&path, Some(place)), (&mut read, &mut findings));
    for file in read {
        let file = Kept { name: files::name_beside(written), ..file };
        match inputs.iter().find(|known| known.name == file.name) {
            None => inputs.push(file),
            Some(known) if known.bytes == file.bytes => {}
            Some(_) => findings.push(same_name(&file.name, place)),
        }
    }
    text.filter(|_| !findings.has_faults()).ok_or_else(|| findings.into_faults())
}

fn same_name(name: &str, place: &Place) -> Diagnostic {
    let message = format!("another file goes onto the sheet as {name}, with other contents");
    Diagnostic::fault("same-file-name", message).at(place).hint("rename one of the two files")
}

fn readings(
    (shelf, beside): (Shelf, &Path),
    device: &Device,
    cooldown: &Cooldown,
    (inputs, findings): (&mut Vec<Kept>, &mut Findings),
) -> Option<Vec<MeasuredReading>> {
    let Some(name) = &cooldown.readings_file else { return Some(Vec::new()) };
    let path = files::sibling(beside, name);
    let text = source((shelf, Role::Readings), (&path, cooldown.readings_place.as_ref()), (inputs, findings))?;
    findings.take(crate::measured::from_source(&text, &crate::cooldown::Names::of(device, Some(cooldown))))
}

/// A file, and where another file names it if one does.
fn source(
    (shelf, role): (Shelf, Role),
    (path, named): (&Path, Option<&Place>),
    (inputs, findings): (&mut Vec<Kept>, &mut Findings),
) -> Option<Arc<Source>> {
    let placed = |fault: Diagnostic| if let Some(place) = named { fault.at(place) } else { fault };
    let bytes = shelf.read(role, path).map_err(|fault| findings.push(placed(fault))).ok()?;
    let name = path.file_name().unwrap_or(path.as_os_str()).to_string_lossy().into_owned();
    let read = crate::syntax::from_bytes(&files::shown(path), &bytes);
    let source = findings.take(read.map(|value| Noted { value, notices: Vec::new() }))?;
    inputs.push(Kept { role, name, bytes });
    Some(source)
}
