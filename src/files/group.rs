//! A group of files that appear together: staged whole beside their places, moved in one after the other, and put back
//! when a move fails or the program is stopped between two.
//!
//! A file system moves one file at a time. So the new files and links to those they replace lie in one folder, whose name
//! says how far the work has come: `.partial` while it is filled, `.publishing` from the first move on, `.replaced` when
//! all are in place. Each change of the name is one step that happens or does not. What a stopped run leaves as
//! `.publishing` is put back by the next run into the folder; the other two are only removed.

use std::fs;
use std::fs::File;
use std::io;
use std::io::Write;
use std::path::Path;
use std::path::PathBuf;

use crate::files::write::Refused;
use crate::files::write::refused;

/// Where the new files lie in the staging folder, and those that they replace.
const NEW: &str = "new";
const PREVIOUS: &str = "previous";

/// Files of one folder that belong together.
#[derive(Clone, Copy, Debug)]
pub(super) struct Group<'a> {
    /// The folder.
    pub folder: &'a Path,
    /// Their names. The last one moved in is the first of them, so that it stands for all.
    pub names: &'a [String],
}

impl Group<'_> {
    /// Writes all files or none: after a fault everything is as it was.
    pub fn write(self, contents: &[Vec<u8>]) -> Result<(), Refused> {
        let partial = self.stage("partial");
        let outcome = self.prepare(&partial, contents).and_then(|()| self.publish(&partial));
        if outcome.is_err() {
            _ = fs::remove_dir_all(&partial);
        }
        outcome
    }

    /// Puts back what a stopped run was replacing and removes what it left. Only while no other run writes here.
    pub fn recover(self) {
        let Ok(entries) = fs::read_dir(self.folder) else { return };
        for path in entries.filter_map(|entry| Some(entry.ok()?.path())) {
            match self.stage_of(&path) {
                Some("publishing") => self.put_back(&path),
                Some("partial" | "replaced") if path.is_dir() => _ = fs::remove_dir_all(&path),
                Some("partial") => _ = fs::remove_file(&path),
                _ => {}
            }
        }
    }

    fn prepare(self, partial: &Path, contents: &[Vec<u8>]) -> Result<(), Refused> {
        for folder in [NEW, PREVIOUS] {
            refused(self.folder, fs::create_dir_all(partial.join(folder)))?;
        }
        for (name, bytes) in self.names.iter().zip(contents) {
            refused(&self.folder.join(name), write_whole(&partial.join(NEW).join(name), bytes))?;
        }
        for name in self.names {
            let path = self.folder.join(name);
            if path.symlink_metadata().is_ok() {
                refused(&path, keep(&path, &partial.join(PREVIOUS).join(name)))?;
            }
        }
        Ok(())
    }

    fn publish(self, partial: &Path) -> Result<(), Refused> {
        let publishing = self.stage("publishing");
        refused(self.folder, fs::rename(partial, &publishing))?;
        let moved = self.names.iter().rev().try_for_each(|name| {
            let path = self.folder.join(name);
            refused(&path, fs::rename(publishing.join(NEW).join(name), &path))
        });
        if moved.is_err() {
            self.put_back(&publishing);
            return moved;
        }
        sync(self.folder);
        let replaced = self.stage("replaced");
        let done = if fs::rename(&publishing, &replaced).is_ok() { replaced } else { publishing };
        _ = fs::remove_dir_all(done);
        Ok(())
    }

    /// Undoes the moves: what was replaced comes back, what was new goes. The staging folder stays where that fails, since
    /// it then holds the only copy.
    fn put_back(self, publishing: &Path) {
        let undone = self.names.iter().all(|name| {
            let (path, previous) = (self.folder.join(name), publishing.join(PREVIOUS).join(name));
            let moved = publishing.join(NEW).join(name).symlink_metadata().is_err();
            match (moved, previous.symlink_metadata().is_ok()) {
                (false, _) => true,
                (true, true) => fs::rename(previous, path).is_ok(),
                (true, false) => gone(fs::remove_file(path)),
            }
        });
        if undone {
            sync(self.folder);
            _ = fs::remove_dir_all(publishing);
        }
    }

    /// The staging folder of this run. Two runs have two numbers.
    fn stage(self, stage: &str) -> PathBuf {
        let name = self.names.first().map_or("", String::as_str);
        self.folder.join(format!(".{name}.{}.{stage}", std::process::id()))
    }

    /// How far the run came that left a path, if it is one of this group.
    fn stage_of(self, path: &Path) -> Option<&str> {
        let name = path.file_name()?.to_str()?;
        let ours = |one: &String| name.strip_prefix('.').is_some_and(|rest| rest.starts_with(&format!("{one}.")));
        let probe = name.starts_with(PROBE);
        let (_, stage) = name.rsplit_once('.')?;
        (probe || self.names.iter().any(ours)).then_some(stage)
    }
}

/// How the names of files begin that only test whether a folder takes files.
pub(super) const PROBE: &str = ".edgesheet-probe.";

/// Whether a file was removed or was not there.
fn gone(removed: io::Result<()>) -> bool {
    removed.map_or_else(|error| error.kind() == io::ErrorKind::NotFound, |()| true)
}

fn write_whole(path: &Path, bytes: &[u8]) -> io::Result<()> {
    let mut file = File::create_new(path)?;
    file.write_all(bytes)?;
    file.sync_all()
}

/// A second name for a file that is about to be replaced, or a copy where the file system has no second names. A link is
/// kept as the link that it is.
fn keep(path: &Path, previous: &Path) -> io::Result<()> {
    match fs::hard_link(path, previous) {
        Err(_) if path.is_file() => fs::copy(path, previous).map(drop),
        outcome => outcome,
    }
}

/// Makes the moves last. Not every system can do that with a folder; where it cannot there is nothing more to do.
fn sync(folder: &Path) {
    _ = File::open(folder).and_then(|folder| folder.sync_all());
}

#[cfg(test)]
mod tests {
    use super::*;

    fn fresh(name: &str) -> PathBuf {
        let folder = std::env::temp_dir().join(format!("edgesheet-group-{}-{name}", std::process::id()));
        _ = fs::remove_dir_all(&folder);
        fs::create_dir_all(&folder).unwrap();
        folder
    }

    fn names() -> Vec<String> {
        ["s.pdf", "s.html", "s.json"].map(str::to_owned).to_vec()
    }

    fn contents(word: &str) -> Vec<Vec<u8>> {
        names().iter().map(|name| format!("{word} {name}").into_bytes()).collect()
    }

    /// What stands in a folder: names, also hidden, with their bytes; folders without.
    fn state(folder: &Path) -> Vec<(String, String)> {
        let mut state: Vec<(String, String)> = fs::read_dir(folder)
            .unwrap()
            .map(|entry| entry.unwrap().path())
            .map(|path| {
                (path.file_name().unwrap().to_string_lossy().into_owned(), fs::read_to_string(path).unwrap_or_default())
            })
            .collect();
        state.sort();
        state
    }

    fn all(word: &str) -> Vec<(String, String)> {
        let mut all: Vec<_> = names().into_iter().map(|name| (name.clone(), format!("{word} {name}"))).collect();
        all.sort();
        all
    }

    #[test]
    fn a_move_that_fails_puts_everything_back() {
        let names = names();
        for blocked in &names {
            let folder = fresh("blocked");
            let group = Group { folder: &folder, names: &names };
            group.write(&contents("old")).unwrap();
            // A folder comes into the way of one file after the files were staged.
            let partial = group.stage("partial");
            group.prepare(&partial, &contents("new")).unwrap();
            fs::remove_file(folder.join(blocked)).unwrap();
            fs::create_dir(folder.join(blocked)).unwrap();
            assert!(group.publish(&partial).is_err());
            let expected: Vec<_> = all("old").into_iter().filter(|(name, _)| name != blocked).collect();
            let left: Vec<_> = state(&folder).into_iter().filter(|(name, _)| name != blocked).collect();
            assert_eq!(left, expected, "{blocked} in the way");
            fs::remove_dir_all(folder).unwrap();
        }
    }

    /// The moves of a run that is stopped after so many of its steps, as the program makes them.
    fn stopped_after(group: Group, steps: usize) {
        let (partial, publishing) = (group.stage("partial"), group.stage("publishing"));
        if steps == 0 {
            fs::create_dir_all(partial.join(NEW)).unwrap();
            return fs::write(partial.join(NEW).join("s.pdf"), "ne").unwrap();
        }
        group.prepare(&partial, &contents("new")).unwrap();
        if steps >= 2 {
            fs::rename(&partial, &publishing).unwrap();
        }
        for name in group.names.iter().rev().take(steps.saturating_sub(2)) {
            fs::rename(publishing.join(NEW).join(name), group.folder.join(name)).unwrap();
        }
        if steps == 6 {
            fs::rename(&publishing, group.stage("replaced")).unwrap();
        }
    }

    #[test]
    fn what_a_stopped_run_leaves_is_whole_again_with_the_next() {
        let names = names();
        for (steps, before) in (0..=6).flat_map(|steps| [(steps, true), (steps, false)]) {
            let folder = fresh("stopped");
            let group = Group { folder: &folder, names: &names };
            if before {
                group.write(&contents("old")).unwrap();
            }
            stopped_after(group, steps);
            group.recover();
            let expected = match (steps, before) {
                (6, _) => all("new"),
                (_, true) => all("old"),
                (_, false) => Vec::new(),
            };
            assert_eq!(state(&folder), expected, "stopped after step {steps}, before: {before}");
            group.write(&contents("newest")).unwrap();
            assert_eq!(state(&folder), all("newest"));
            fs::remove_dir_all(folder).unwrap();
        }
    }

    /// Files of other sheets, and of the user, are not touched.
    #[test]
    fn only_leftovers_of_the_same_sheet_are_removed() {
        let folder = fresh("others");
        let names = names();
        let others = [".other.pdf.1.partial", "s.pdf.1.partial", ".s.pdf", "partial", ".partial"];
        others.iter().for_each(|name| fs::write(folder.join(name), "mine").unwrap());
        fs::write(folder.join(".s.pdf.7.partial"), "left").unwrap();
        Group { folder: &folder, names: &names }.recover();
        let left: Vec<String> = state(&folder).into_iter().map(|(name, _)| name).collect();
        let mut expected = others.map(str::to_owned);
        expected.sort();
        assert_eq!(left, expected);
        fs::remove_dir_all(folder).unwrap();
    }
}
