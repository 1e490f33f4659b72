//! Files of any kind, read and recognised by their content.

use std::path::Path;
use std::path::PathBuf;
use std::sync::Arc;

use crate::archive;
use crate::archive::Own;
use crate::diagnostic::Diagnostic;
use crate::diagnostic::Faults;
use crate::diagnostic::Findings;
use crate::diagnostic::Noted;
use crate::diagnostic::Place;
use crate::diagnostic::Source;
use crate::files;
use crate::measured;
use crate::syntax;
use crate::syntax::keys::COOLDOWN_FILE;
use crate::syntax::keys::DEVICE_FILE;

/// A file that was read and recognised.
pub struct Opened {
    pub path: PathBuf,
    pub kind: Kind,
}

/// What a file is.
pub enum Kind {
    Device(Arc<Source>),
    Cooldown(Arc<Source>),
    Readings(Arc<Source>),
    Own(Own),
}

impl Opened {
    /// The file as the user named it.
    pub fn name(&self) -> String {
        files::shown(&self.path)
    }

    /// The text of a device file.
    pub fn device(&self) -> Option<&Arc<Source>> {
        if let Kind::Device(source) = &self.kind { Some(source) } else { None }
    }

    /// The text of a cooldown file.
    pub fn cooldown(&self) -> Option<&Arc<Source>> {
        if let Kind::Cooldown(source) = &self.kind { Some(source) } else { None }
    }
}

/// All files that can be read and are of ours; the others are faults.
pub fn open_all(paths: &[PathBuf], findings: &mut Findings) -> Vec<Opened> {
    let opened =
        paths.iter().filter_map(|path| findings.take(open(path).map(|value| Noted { value, notices: Vec::new() })));
    opened.collect()
}

/// The device and cooldown files beside a file that can be read.
pub fn open_neighbours(of: &Path) -> Vec<Opened> {
    files::neighbours(of).iter().filter_map(|path| open(path).ok()).collect()
}

/// The text of a file that another one names at a place.
pub fn open_named(beside: &Path, (name, place): (&str, &Place)) -> Result<Arc<Source>, Faults> {
    let path = files::sibling(beside, name);
    let bytes = files::read(&path).map_err(|fault| Faults(vec![fault.at(place)]))?;
    syntax::from_bytes(&path.display().to_string(), &bytes)
}

fn open(path: &Path) -> Result<Opened, Faults> {
    let bytes = files::read(path).map_err(|fault| Faults(vec![fault]))?;
    if let Some(own) = archive::recognise(&bytes) {
        return Ok(Opened { path: path.to_owned(), kind: Kind::Own(own) });
    }
    let name = files::shown(path);
    if bytes.contains(&0) && !bytes.starts_with(&[0xFF, 0xFE]) && !bytes.starts_with(&[0xFE, 0xFF]) {
        return Err(Faults(vec![not_ours(&name)]));
    }
    let source = syntax::from_bytes(&name, &bytes)?;
    let kind = if measured::is_table(&source) {
        Kind::Readings(source)
    } else {
        match syntax::recognise(&source, &[&DEVICE_FILE, &COOLDOWN_FILE]) {
            Some(file) if std::ptr::eq(file, &DEVICE_FILE) => Kind::Device(source),
            Some(_) => Kind::Cooldown(source),
            None => return Err(Faults(vec![not_ours(&name)])),
        }
    };
    Ok(Opened { path: path.to_owned(), kind })
}

fn not_ours(name: &str) -> Diagnostic {
    Diagnostic::fault("unknown-file", format!("{name} is no device, cooldown, readings, record or sheet file"))
        .hint("`edgesheet start DIR` writes one of each to begin with, and `edgesheet guide` says what stands in them")
}
