//! Writing a group of files whole or not at all.

use std::fs;
use std::fs::File;
use std::io;
use std::io::ErrorKind;
use std::path::Path;
use std::path::PathBuf;
use std::sync::atomic::AtomicU32;
use std::sync::atomic::Ordering;

use crate::files::group::Group;
use crate::files::group::PROBE;
use crate::files::read::reason;

/// Why nothing was written.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum WriteFault {
    /// These files exist and were not to be replaced.
    Exists(Vec<PathBuf>),
    /// The operating system refused.
    Refused(Refused),
}

/// What the operating system refused.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Refused {
    /// What was being written.
    pub path: PathBuf,
    /// Its reason.
    pub reason: String,
    /// What to do.
    pub advice: &'static str,
}

impl From<Refused> for WriteFault {
    fn from(refused: Refused) -> Self {
        Self::Refused(refused)
    }
}

/// A folder and the names to be written there, tested before the work.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Target {
    folder: PathBuf,
    names: Vec<String>,
    existing: Existing,
}

/// Whether files that exist may be replaced.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Existing {
    /// They stay, and nothing is written.
    Keep,
    /// They are replaced. A link is replaced itself; what it points to stays.
    Replace,
}

impl Target {
    /// Tests that all `names` can be written into `folder`. The folder is made later, with the files, if it is missing.
    /// What a stopped run left there is put right first.
    pub fn test(folder: &Path, names: &[String], existing: Existing) -> Result<Self, WriteFault> {
        let target = Self { folder: folder.to_owned(), names: names.to_vec(), existing };
        let alone = alone(folder);
        target.look_around(alone.as_ref())?;
        probe(folder)?;
        Ok(target)
    }

    /// Writes all files or none. `contents` are in the order of the names; the first of them appears last. Gives the paths
    /// written.
    pub fn write(&self, contents: &[Vec<u8>]) -> Result<Vec<PathBuf>, WriteFault> {
        refused(&self.folder, fs::create_dir_all(&self.folder))?;
        let alone = alone(&self.folder);
        self.look_around(alone.as_ref())?;
        self.group().write(contents)?;
        Ok(self.paths().collect())
    }

    /// Puts right what a stopped run left, if no other run writes here, and finds what is in the way.
    fn look_around(&self, alone: Option<&File>) -> Result<(), WriteFault> {
        if alone.is_some() {
            self.group().recover();
        }
        let taken: Vec<PathBuf> = self.paths().filter(|path| path.symlink_metadata().is_ok()).collect();
        if let Some(path) = taken.iter().find(|path| path.symlink_metadata().is_ok_and(|found| found.is_dir())) {
            let (path, reason) = (path.clone(), "a folder of this name exists".to_owned());
            return Err(Refused { path, reason, advice: "move it away, or name another folder" }.into());
        }
        if self.existing == Existing::Keep && !taken.is_empty() {
            return Err(WriteFault::Exists(taken));
        }
        Ok(())
    }

    fn group(&self) -> Group<'_> {
        Group { folder: &self.folder, names: &self.names }
    }

    fn paths(&self) -> impl Iterator<Item = PathBuf> {
        self.names.iter().map(|name| self.folder.join(name))
    }
}

/// Waits until no other run writes into a folder; the others wait until what is given goes, at the latest with this
/// program. None where the folder is missing or the system cannot do that.
fn alone(folder: &Path) -> Option<File> {
    let folder = File::open(folder).ok()?;
    folder.lock().ok().map(|()| folder)
}

/// Makes and removes a file in the folder, or in the nearest folder above that exists.
fn probe(folder: &Path) -> Result<(), Refused> {
    static COUNT: AtomicU32 = AtomicU32::new(0);
    let exists = |above: &&Path| above.symlink_metadata().is_ok() && !above.as_os_str().is_empty();
    let nearest = folder.ancestors().find(exists).unwrap_or(Path::new("."));
    let number = COUNT.fetch_add(1, Ordering::Relaxed);
    let path = nearest.join(format!("{PROBE}{}-{number}.partial", std::process::id()));
    refused(folder, File::create(&path).map(drop))?;
    match fs::remove_file(&path) {
        Err(error) if error.kind() != ErrorKind::NotFound => refused(folder, Err(error)),
        _ => Ok(()),
    }
}

/// The outcome, with what was written and what to do.
pub(super) fn refused<T>(path: &Path, outcome: io::Result<T>) -> Result<T, Refused> {
    outcome.map_err(|error| Refused { path: path.to_owned(), reason: reason(&error), advice: advice(error.kind()) })
}

/// What to do about a refusal.
fn advice(kind: ErrorKind) -> &'static str {
    match kind {
        ErrorKind::StorageFull | ErrorKind::QuotaExceeded => "make room there, or name a folder on another disk",
        ErrorKind::FileTooLarge => "the system limits the size of files; raise the limit, or name another folder",
        ErrorKind::ReadOnlyFilesystem | ErrorKind::PermissionDenied => "name a folder that you may write into",
        ErrorKind::NotADirectory | ErrorKind::AlreadyExists => {
            "a file stands where a folder should; name another folder"
        }
        ErrorKind::InvalidFilename => "shorten the ids of device and cooldown, or name another folder",
        _ => "name another folder",
    }
}
