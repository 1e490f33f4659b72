//! Writing a group of files whole or not at all.

use std::fs;
use std::fs::File;
use std::io::Write;
use std::path::Path;
use std::path::PathBuf;

use crate::files::read::reason;

/// Why nothing was written.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum WriteFault {
    /// These files exist and were not to be replaced.
    Exists(Vec<PathBuf>),
    /// The operating system refused.
    Refused {
        /// What was being written.
        path: PathBuf,
        /// Its reason.
        reason: String,
    },
}

/// A folder and the names to be written there, tested before the work.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Target {
    folder: PathBuf,
    names: Vec<String>,
}

/// Whether files that exist may be replaced.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Existing {
    /// They stay, and nothing is written.
    Keep,
    /// They are replaced.
    Replace,
}

impl Target {
    /// Tests that all `names` can be written into `folder`. The folder is made later, with the files, if it is missing.
    pub fn test(folder: &Path, names: &[String], existing: Existing) -> Result<Self, WriteFault> {
        let target = Self { folder: folder.to_owned(), names: names.to_vec() };
        let taken: Vec<PathBuf> = target.paths().filter(|path| path.symlink_metadata().is_ok()).collect();
        if existing == Existing::Keep && !taken.is_empty() {
            return Err(WriteFault::Exists(taken));
        }
        if let Some(folder) = taken.into_iter().find(|path| path.is_dir()) {
            return Err(WriteFault::Refused { path: folder, reason: "a folder of this name exists".into() });
        }
        probe(folder)?;
        Ok(target)
    }

    /// Writes all files: first whole under temporary names, then renamed. On a failure the temporary files are removed.
    /// `contents` are in the order of the names. Gives the paths written.
    pub fn write(&self, contents: &[Vec<u8>]) -> Result<Vec<PathBuf>, WriteFault> {
        let paths: Vec<PathBuf> = self.paths().collect();
        let partial: Vec<PathBuf> =
            self.names.iter().map(|name| self.folder.join(format!(".{name}.partial"))).collect();
        let outcome = refused(&self.folder, fs::create_dir_all(&self.folder))
            .and_then(|()| partial.iter().zip(contents).try_for_each(|(path, bytes)| write_whole(path, bytes)))
            .and_then(|()| partial.iter().zip(&paths).try_for_each(|(from, to)| refused(to, fs::rename(from, to))));
        if outcome.is_err() {
            partial.iter().for_each(|path| _ = fs::remove_file(path));
        }
        outcome.map(|()| paths)
    }

    fn paths(&self) -> impl Iterator<Item = PathBuf> {
        self.names.iter().map(|name| self.folder.join(name))
    }
}

/// Makes and removes a file in the folder, or in the nearest folder above that exists.
fn probe(folder: &Path) -> Result<(), WriteFault> {
    let nearest = folder.ancestors().find(|above| above.exists() && !above.as_os_str().is_empty());
    let path = nearest.unwrap_or(Path::new(".")).join(".edgesheet-probe.partial");
    refused(folder, File::create(&path).map(drop))?;
    refused(folder, fs::remove_file(&path))
}

fn write_whole(path: &Path, bytes: &[u8]) -> Result<(), WriteFault> {
    let written = File::create(path).and_then(|mut file| {
        file.write_all(bytes)?;
        file.sync_all()
    });
    refused(path, written)
}

fn refused(path: &Path, outcome: std::io::Result<()>) -> Result<(), WriteFault> {
    outcome.map_err(|error| WriteFault::Refused { path: path.to_owned(), reason: reason(&error) })
}
