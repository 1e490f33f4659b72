//! A record as it was archived, read again: by whichever version it was written, and whoever changed it since.

use base64::Engine;
use base64::engine::general_purpose::STANDARD;
use serde::Deserialize;
use serde_json::Value;

use crate::archive::input::Kept;
use crate::archive::input::Role;
use crate::archive::input::sha256;
use crate::archive::record::FORMAT;
use crate::archive::record::Options;
use crate::diagnostic::Diagnostic;

/// A larger record is none of a sheet.
const LARGEST: usize = 12 << 20;
/// Nor is one of more values: what a value costs in memory is many times its text.
const MOST_VALUES: usize = 300_000;

/// A record, read as far as it takes to compute again.
#[derive(Clone, Debug)]
pub struct Archived {
    /// Version of the program that wrote it.
    pub version: String,
    /// Options in use.
    pub options: Options,
    /// The files that went in.
    pub inputs: Vec<ArchivedInput>,
    /// Everything that it says.
    pub value: Value,
    /// Whether a key stands twice in one table, which hides one of its values.
    pub doubled: bool,
}

/// A file that went in, as the record tells of it. What a later version adds is passed over.
#[derive(Clone, Debug, Deserialize)]
pub struct ArchivedInput {
    /// What it was to the sheet.
    pub role: Role,
    /// Its name without folders.
    pub name: String,
    /// Its size.
    pub bytes: u64,
    /// Its SHA-256.
    pub sha256: String,
    #[serde(default)]
    text: Option<String>,
    #[serde(default)]
    base64: Option<String>,
}

#[derive(Deserialize)]
struct Head {
    program: Program,
    options: Options,
    inputs: Vec<ArchivedInput>,
}

#[derive(Deserialize)]
struct Program {
    version: String,
}

impl ArchivedInput {
    /// The file as the record holds it; none where it does not.
    pub fn kept(&self) -> Option<Kept> {
        let text = self.text.clone().map(String::into_bytes);
        let bytes = text.or_else(|| STANDARD.decode(self.base64.as_ref()?).ok())?;
        Some(Kept { role: self.role, name: self.name.clone(), bytes })
    }

    /// Whether these are the bytes of which the record states size and SHA-256.
    pub fn is(&self, bytes: &[u8]) -> bool {
        bytes.len() as u64 == self.bytes && sha256(bytes) == self.sha256.to_lowercase()
    }
}

/// Reads a record. A fault says in the user's words why this is none that can be verified.
pub fn archived(bytes: &[u8]) -> Result<Archived, Diagnostic> {
    let value = value(bytes)?;
    check_format(&value)?;
    let head = Head::deserialize(&value).map_err(|error| none(&error.to_string()))?;
    let doubled = marks(value.to_string().as_bytes()) != marks(bytes);
    Ok(Archived { version: head.program.version, options: head.options, inputs: head.inputs, value, doubled })
}

/// JSON of a stranger, bounded before it is read.
pub(super) fn value(bytes: &[u8]) -> Result<Value, Diagnostic> {
    if bytes.len() > LARGEST || marks(bytes) > MOST_VALUES {
        return Err(none("it is larger than the record of any sheet"));
    }
    serde_json::from_slice(bytes).map_err(|error| none(&format!("it is no JSON text: {error}")))
}

fn check_format(value: &Value) -> Result<(), Diagnostic> {
    let writer = writer(value);
    match value.get("format").and_then(Value::as_u64) {
        None => Err(none("it has no `format`")),
        Some(format) if format != u64::from(FORMAT) => {
            let said =
                format!("{} wrote this record in format {format}, and this program knows format {FORMAT}", writer);
            Err(Diagnostic::fault("record-format", said)
                .hint("verify it with the program that wrote it, or a newer one"))
        }
        Some(_) if value.get("inputs").is_none() => {
            let said = format!("{writer} wrote this record before records held their inputs");
            Err(Diagnostic::fault("record-format", said).hint("write the sheet again from its files"))
        }
        Some(_) => Ok(()),
    }
}

/// Name and version of the program that wrote a record, wherever its format has them; shortened, for it may be anything.
fn writer(value: &Value) -> String {
    let text = |pointer| value.pointer(pointer).and_then(Value::as_str).map(str::to_owned);
    let name = text("/program/name").zip(text("/program/version")).map(|(name, version)| format!("{name} {version}"));
    let name = name.or_else(|| text("/provenance/program")).unwrap_or_else(|| "a program that is not named".to_owned());
    name.chars().filter(|letter| !letter.is_control()).take(60).collect()
}

fn none(reason: &str) -> Diagnostic {
    let reason: String = reason.chars().filter(|letter| !letter.is_control()).take(200).collect();
    Diagnostic::fault("no-record", format!("this is no record of a sheet: {reason}"))
        .hint("give the PDF or the JSON file that `edgesheet sheet` wrote")
}

/// Signs that begin or part values, outside of texts.
fn marks(bytes: &[u8]) -> usize {
    let (mut inside, mut escaped, mut count) = (false, false, 0);
    for byte in bytes {
        match byte {
            _ if escaped => escaped = false,
            b'\\' if inside => escaped = true,
            b'"' => inside = !inside,
            b'[' | b'{' | b',' | b':' if !inside => count += 1,
            _ => {}
        }
    }
    count
}

#[cfg(test)]
mod tests {
    use super::*;

    fn fault(text: &str) -> String {
        archived(text.as_bytes()).unwrap_err().message
    }

    #[test]
    fn what_is_no_record_is_told() {
        assert!(fault("[]").contains("no `format`"));
        assert!(fault("{").contains("no JSON"));
        assert!(fault(&"[".repeat(100_000)).contains("no JSON"));
        assert!(fault(&format!("[{}0]", "0,".repeat(400_000))).contains("larger"));
        assert!(fault("{\"format\": 1, \"inputs\": 3}").contains("no record"));
        let next = "{\"format\": 2, \"program\": {\"name\": \"edgesheet\", \"version\": \"7.1.0\"}}";
        assert!(fault(next).contains("edgesheet 7.1.0 wrote this record in format 2"), "{}", fault(next));
        let first = "{\"format\": 1, \"provenance\": {\"program\": \"edgesheet 0.1.0\"}}";
        assert!(fault(first).contains("edgesheet 0.1.0 wrote this record before"), "{}", fault(first));
    }

    #[test]
    fn marks_inside_texts_do_not_count() {
        assert_eq!(marks(br#"{"a,\"[": [1, "\\"], "b": {}}"#), 7);
    }
}
