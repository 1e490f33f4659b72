//! What `start` says when the starter files are written.

use std::path::Path;
use std::path::PathBuf;

/// What to do where a starter file would stand in place of one that exists.
pub const NEVER_REPLACED: &str = "nothing was written; name a folder that has no such files";

/// The files written (a device, its cooldown, the readings), and the commands that come next.
pub fn started(written: &[PathBuf]) -> String {
    let [device, cooldown, ..] = written else { return String::new() };
    let wrote: String = written.iter().map(|path| format!("wrote {}\n", path.display())).collect();
    let sheets = device.with_file_name("sheets");
    let [device, cooldown, sheets] = [device.as_path(), cooldown, &sheets].map(typed);
    format!(
        "{wrote}\n\
         next, see what is understood:  edgesheet check {device} {cooldown}\n\
         then write the first sheet:    edgesheet sheet {device} {cooldown} -o {sheets}\n\
         and put in your own device:    every line of {device} says what it is for\n"
    )
}

/// A path as it is typed into a shell: in quotes where it holds more than letters, digits and plain signs.
fn typed(path: &Path) -> String {
    let text = path.display().to_string();
    let plain = |sign: char| sign.is_alphanumeric() || matches!(sign, '/' | '.' | '-' | '_' | '\\' | ':');
    if text.chars().all(plain) { text } else { format!("'{}'", text.replace('\'', "'\\''")) }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// POSIX.1-2017, Shell Command Language, 2.2.2: nothing inside single quotes is special but the quote itself.
    #[test]
    fn paths_with_blanks_can_be_pasted() {
        for (path, pasted) in [("a/b.toml", "a/b.toml"), ("my lab/b", "'my lab/b'"), ("it's", "'it'\\''s'")] {
            assert_eq!(typed(Path::new(path)), pasted);
        }
    }
}
