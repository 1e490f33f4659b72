//! Reading a file whole.

use std::fs;
use std::fs::File;
use std::io::Read;
use std::path::Component;
use std::path::Path;
use std::path::PathBuf;

use crate::diagnostic::Diagnostic;

/// No file of ours is larger; more is refused before all of it is read.
const LARGEST_BYTES: u64 = 64 << 20;

/// The bytes of a file. A finding without a place when it cannot be read.
///
/// Only a plain file, or a link to one: a sheet names its inputs and carries them, and others can take them up again by
/// their names. A pipe has none, a device has no end.
pub fn read(path: &Path) -> Result<Vec<u8>, Diagnostic> {
    read_up_to(path, LARGEST_BYTES)
}

/// The bytes of a plain file that may have so many.
pub fn read_up_to(path: &Path, largest_bytes: u64) -> Result<Vec<u8>, Diagnostic> {
    let kind = fs::metadata(path).map_err(|error| unreadable(path, &error))?.file_type();
    if kind.is_dir() {
        return Err(fault(format!("{} is a folder", shown(path))).hint("name a file"));
    }
    if !kind.is_file() {
        return Err(fault(format!("{} is a pipe or a device, not a file", shown(path)))
            .hint("save what comes from it to a file and name that: a sheet names its inputs"));
    }
    let file = File::open(path).map_err(|error| unreadable(path, &error))?;
    let mut bytes = Vec::new();
    file.take(largest_bytes + 1).read_to_end(&mut bytes).map_err(|error| unreadable(path, &error))?;
    if bytes.len() as u64 > largest_bytes {
        let most = largest_bytes >> 20;
        return Err(Diagnostic::fault("large-file", format!("{} is larger than {most} MB", shown(path)))
            .hint("files for this command have a few kilobytes; is this the right file?"));
    }
    Ok(bytes)
}

/// A path as it is shown: what would move the cursor or cannot be written down is `�`.
pub fn shown(path: &Path) -> String {
    path.to_string_lossy().chars().map(|sign| if sign.is_control() { '\u{FFFD}' } else { sign }).collect()
}

/// A file named in another file: relative names are looked up in that file's folder.
pub fn sibling(of: &Path, name: &str) -> PathBuf {
    of.parent().unwrap_or(Path::new("")).join(name)
}

/// The device and cooldown files (`.toml`) in the folder of a file, by name and without that file itself. A folder that
/// cannot be read has none.
pub fn neighbours(of: &Path) -> Vec<PathBuf> {
    let folder = of.parent().filter(|folder| !folder.as_os_str().is_empty()).unwrap_or(Path::new("."));
    let entries = std::fs::read_dir(folder).into_iter().flatten().flatten();
    let names = entries.map(|entry| entry.file_name());
    let mut found: Vec<PathBuf> = names.map(|name| of.with_file_name(name)).collect();
    found.retain(|path| path.extension().is_some_and(|ending| ending == "toml") && !same(path, of));
    found.sort();
    found
}

/// Whether two paths lead to one file.
pub fn same(one: &Path, other: &Path) -> bool {
    match (one.canonicalize(), other.canonicalize()) {
        (Ok(one), Ok(other)) => one == other,
        _ => one == other,
    }
}

/// The name under which a file that another one names as `a/b.toml` is kept beside it: `a-b.toml`, whatever folder it came
/// from.
pub fn name_beside(written: &str) -> String {
    let parts = Path::new(written).components().filter_map(|part| match part {
        Component::Normal(name) => Some(name.to_string_lossy().into_owned()),
        _ => None,
    });
    parts.collect::<Vec<_>>().join("-")
}

/// The operating system's reason, without its number.
pub(super) fn reason(error: &std::io::Error) -> String {
    let text = error.to_string();
    text.split(" (os error").next().unwrap_or(&text).to_owned()
}

fn fault(message: String) -> Diagnostic {
    Diagnostic::fault("unreadable-file", message)
}

fn unreadable(path: &Path, error: &std::io::Error) -> Diagnostic {
    let finding = fault(format!("cannot read {}: {}", shown(path), reason(error)));
    if path == Path::new("-") {
        return finding.hint("standard input is not read: save it to a file and name that");
    }
    finding.hint("check the name and the folder, and that you may read the file")
}
