//! The files from which a sheet was computed, kept whole.

use base64::Engine;
use base64::engine::general_purpose::STANDARD;
use schemars::JsonSchema;
use serde::Deserialize;
use serde::Serialize;
use sha2::Digest;

/// What a file is to a sheet.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize, JsonSchema)]
#[serde(rename_all = "lowercase")]
pub enum Role {
    /// The device file, or that of a bench.
    Device,
    /// A device file that a bench names.
    Part,
    /// The cooldown file.
    Cooldown,
    /// The table of measured readings.
    Readings,
}

/// A file that went in, as it was.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Kept {
    /// What it is.
    pub role: Role,
    /// Its name without folders.
    pub name: String,
    /// Its bytes.
    pub bytes: Vec<u8>,
}

/// A file that went in, as a record holds it.
#[derive(Debug, Serialize, JsonSchema)]
pub(super) struct KeptText<'a> {
    /// What it is to the sheet.
    role: Role,
    /// Its name without folders.
    name: &'a str,
    /// Its size in bytes.
    bytes: usize,
    /// Its SHA-256 (FIPS 180-4), 64 hexadecimal digits.
    sha256: String,
    /// The whole file, where it is text in UTF-8.
    #[serde(skip_serializing_if = "Option::is_none")]
    text: Option<&'a str>,
    /// The whole file in base64 (RFC 4648, 4), where it is not. A file with neither `text` nor `base64` was not kept.
    #[serde(skip_serializing_if = "Option::is_none")]
    base64: Option<String>,
}

impl Kept {
    pub(super) fn text(&self) -> KeptText<'_> {
        let text = std::str::from_utf8(&self.bytes).ok();
        KeptText {
            role: self.role,
            name: &self.name,
            bytes: self.bytes.len(),
            sha256: sha256(&self.bytes),
            text,
            base64: text.is_none().then(|| STANDARD.encode(&self.bytes)),
        }
    }
}

/// SHA-256 (FIPS 180-4) as 64 hexadecimal digits.
pub(super) fn sha256(bytes: &[u8]) -> String {
    hexadecimal(&sha2::Sha256::digest(bytes))
}

pub(super) fn hexadecimal(bytes: &[u8]) -> String {
    bytes.iter().map(|byte| format!("{byte:02x}")).collect()
}
