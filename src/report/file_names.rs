//! Names of the files of a sheet.

use sha2::Digest;
use sha2::Sha256;

use crate::cooldown::Cooldown;
use crate::device::Device;
use crate::report::Input;

/// Longest part of a name; two of them with revision and ending stay below what file systems take.
const LONGEST: usize = 60;

/// `DEVICE_COOLDOWN_rN`, or `DEVICE_expected_rN` without a cooldown, with ids made safe for any file system.
pub fn file_stem(device: &Device, cooldown: Option<&Cooldown>) -> String {
    let (second, revision) = match cooldown {
        Some(cooldown) => (safe(&cooldown.id), cooldown.revision),
        None => ("expected".to_owned(), 1),
    };
    format!("{}_{second}_r{revision}", safe(&device.id))
}

/// What to do about a sheet that exists.
pub fn next_revision(cooldown: Option<&Cooldown>) -> String {
    match cooldown {
        Some(cooldown) => format!(
            "write `revision = {}` under [cooldown] for a new sheet beside it, or say --replace",
            cooldown.revision.saturating_add(1)
        ),
        None => "choose another folder, or say --replace".to_owned(),
    }
}

impl Input {
    /// A file as it went in.
    pub fn of(name: &str, bytes: &[u8]) -> Self {
        Self { name: name.to_owned(), bytes: bytes.len() as u64, sha256: sha256(bytes) }
    }
}

/// SHA-256 (FIPS 180-4) as 64 hexadecimal digits.
fn sha256(bytes: &[u8]) -> String {
    Sha256::digest(bytes).iter().map(|byte| format!("{byte:02x}")).collect()
}

/// Letters, digits, `-`, `.` and `_` of ASCII stay; an id that had others, or was too long, gets a short checksum so
/// that different ids keep different names.
fn safe(id: &str) -> String {
    let keep = |c: char| if c.is_ascii_alphanumeric() || matches!(c, '-' | '.' | '_') { c } else { '-' };
    let plain: String = id.chars().map(keep).take(LONGEST).collect();
    let plain = plain.trim_start_matches('.');
    // What some systems keep for devices is kept for them with any ending.
    let plain = if is_device(plain) { plain.replace('.', "-") } else { plain.to_owned() };
    if plain == id { plain } else { format!("{plain}-{}", &sha256(id.as_bytes())[..6]) }
}

/// Whether a name begins, up to its first dot, as some systems call a device: `con`, `lpt1`.
fn is_device(name: &str) -> bool {
    let first = name.split('.').next().unwrap_or_default().to_ascii_lowercase();
    let numbered = |kind: &str| first.strip_prefix(kind).is_some_and(|rest| matches!(rest.as_bytes(), [b'1'..=b'9']));
    ["con", "prn", "aux", "nul"].contains(&first.as_str()) || numbered("com") || numbered("lpt")
}

/// A name that every file system takes, for use beside a number or an id that makes it unique.
pub(super) fn legible(name: &str) -> String {
    let plain: String = name.chars().map(|c| if c.is_ascii_alphanumeric() { c } else { '-' }).take(LONGEST).collect();
    plain.trim_matches('-').to_owned()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn ids_become_names_that_every_file_system_takes() {
        assert_eq!(safe("KR-0417"), "KR-0417");
        for id in ["a/b", "..", "../x", "con:1", "試料", "a b", "", &"x".repeat(500)] {
            let name = format!("{}_expected_r1", safe(id));
            let ordinary = |c: char| c.is_ascii_alphanumeric() || "-._".contains(c);
            assert!(name.chars().all(ordinary) && !name.starts_with('.') && name.len() < 120, "{name}");
        }
        assert_ne!(safe("a/b"), safe("a:b"));
        // Names of devices of one common system (common practice), with an ending after them.
        for id in ["con.1", "NUL.a.b", "lpt9.x"] {
            assert!(!safe(id).contains('.'), "{}", safe(id));
        }
        assert_eq!(safe("console.1"), "console.1");
    }

    /// The one-block example of FIPS 180-4, `abc`; value from memory.
    #[test]
    fn sha256_follows_the_standard() {
        assert_eq!(sha256(b"abc"), "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad");
    }
}
