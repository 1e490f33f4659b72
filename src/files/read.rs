//! Reading a file whole.

use std::fs::File;
use std::io::Read;
use std::path::Path;
use std::path::PathBuf;

use crate::diagnostic::Diagnostic;

/// No file of ours is larger; more is refused before all of it is read.
const LARGEST_BYTES: u64 = 64 << 20;

/// The bytes of a file. A finding without a place when it cannot be read.
pub fn read(path: &Path) -> Result<Vec<u8>, Diagnostic> {
    read_up_to(path, LARGEST_BYTES)
}

/// The bytes of a file that may have so many.
pub fn read_up_to(path: &Path, largest_bytes: u64) -> Result<Vec<u8>, Diagnostic> {
    let fault = |error: std::io::Error| {
        Diagnostic::fault("unreadable-file", format!("cannot read {}: {}", path.display(), reason(&error)))
            .hint("check the name and the folder, and that you may read the file")
    };
    if path.is_dir() {
        return Err(Diagnostic::fault("unreadable-file", format!("{} is a folder", path.display())).hint("name a file"));
    }
    let mut bytes = Vec::new();
    let file = File::open(path).map_err(fault)?;
    file.take(largest_bytes + 1).read_to_end(&mut bytes).map_err(fault)?;
    if bytes.len() as u64 > largest_bytes {
        let most = largest_bytes >> 20;
        return Err(Diagnostic::fault("large-file", format!("{} is larger than {most} MB", path.display()))
            .hint("files for this command have a few kilobytes; is this the right file?"));
    }
    Ok(bytes)
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

/// The operating system's reason, without its number.
pub(super) fn reason(error: &std::io::Error) -> String {
    let text = error.to_string();
    text.split(" (os error").next().unwrap_or(&text).to_owned()
}
