//! Files carried inside the PDF (ISO 32000-1, 7.11.4; relationship to the pages by ISO 32000-2, 7.11.3).

use std::collections::BTreeMap;

use lopdf::Object;
use lopdf::ObjectId;
use lopdf::Stream;
use lopdf::StringFormat;
use lopdf::text_string;
use md5::Digest;

use crate::sheet::pdf::Attachment;
use crate::sheet::pdf::Entries;
use crate::sheet::pdf::PdfDocument;
use crate::sheet::pdf::Relationship;
use crate::sheet::pdf::dictionary;
use crate::sheet::pdf::metadata::pdf_date;
use crate::sheet::pdf::name;

/// Catalog entries for the attached files.
pub(super) fn entries(document: &PdfDocument, file: &mut lopdf::Document) -> Entries {
    if document.attachments.is_empty() {
        return Entries::new();
    }
    let date = pdf_date(document);
    let mut specifications: BTreeMap<String, ObjectId> = BTreeMap::new();
    let mut associated: Vec<Object> = Vec::new();
    for attachment in &document.attachments {
        let file_name = free_name(&attachment.name, &specifications);
        let specification = specification(attachment, &file_name, date.as_ref(), file);
        associated.push(specification.into());
        specifications.insert(file_name, specification);
    }
    let tree = specifications.into_iter().flat_map(|(name, id)| [text_string(&name), id.into()]);
    let tree = dictionary([("Names", tree.collect::<Vec<Object>>().into())]);
    vec![("AF", associated.into()), ("Names", dictionary([("EmbeddedFiles", tree.into())]).into())]
}

/// Writes a file and its description.
fn specification(
    attachment: &Attachment,
    file_name: &str,
    date: Option<&Object>,
    file: &mut lopdf::Document,
) -> ObjectId {
    let checksum = md5::Md5::digest(&attachment.bytes).to_vec();
    let mut parameters = dictionary([
        ("Size", (attachment.bytes.len() as i64).into()),
        ("CheckSum", Object::String(checksum, StringFormat::Hexadecimal)),
    ]);
    if let Some(date) = date {
        parameters.set("ModDate", date.clone());
    }
    let header = dictionary([
        ("Type", name("EmbeddedFile")),
        ("Subtype", name(&attachment.mime)),
        ("Params", parameters.into()),
    ]);
    let content = file.add_object(Stream::new(header, attachment.bytes.clone()));
    let contents = dictionary([("F", content.into()), ("UF", content.into())]);
    file.add_object(dictionary([
        ("Type", name("Filespec")),
        ("F", text_string(&ascii(file_name))),
        ("UF", text_string(file_name)),
        ("Desc", text_string(&attachment.description)),
        ("AFRelationship", name(relationship(attachment.relationship))),
        ("EF", contents.into()),
    ]))
}

fn relationship(relationship: Relationship) -> &'static str {
    match relationship {
        Relationship::Source => "Source",
        Relationship::Data => "Data",
        Relationship::Alternative => "Alternative",
        Relationship::Supplement => "Supplement",
        Relationship::Unspecified => "Unspecified",
    }
}

/// A safe name that no earlier file has; a second `a.csv` becomes `a-2.csv`. Case does not tell files apart.
fn free_name(wanted: &str, taken: &BTreeMap<String, ObjectId>) -> String {
    let safe = safe_name(wanted);
    let (stem, ending) = safe.rsplit_once('.').map_or((safe.as_str(), String::new()), |(s, e)| (s, format!(".{e}")));
    let numbered = (2..).map(|number| format!("{stem}-{number}{ending}"));
    let is_free = |name: &String| !taken.keys().any(|other| other.to_lowercase() == name.to_lowercase());
    std::iter::once(safe.clone()).chain(numbered).find(is_free).unwrap_or_default()
}

/// A file name without a directory that any file system takes and that shows what it is.
///
/// Characters forbidden on common systems become `_`; so do controls and the invisible marks that turn the direction
/// of writing, which could make one ending look like another. Names that common systems keep for devices get a `_`.
fn safe_name(wanted: &str) -> String {
    let last = wanted.rsplit(['/', '\\']).next().unwrap_or_default();
    let plain: String = last.chars().map(|c| if is_unsafe(c) { '_' } else { c }).collect();
    let plain = plain.trim_matches([' ', '.']);
    let (stem, ending) = plain.rsplit_once('.').unwrap_or((plain, ""));
    let short = |text: &str, length: usize| text.chars().take(length).collect::<String>();
    let ending = if ending.is_empty() { String::new() } else { format!(".{}", short(ending, 20)) };
    let stem = if stem.is_empty() { "file".to_string() } else { short(stem, 80) };
    if is_device(&stem) { format!("_{stem}{ending}") } else { format!("{stem}{ending}") }
}

fn is_unsafe(character: char) -> bool {
    let invisible =
        matches!(character, '\u{200B}'..='\u{200F}' | '\u{2028}'..='\u{202E}' | '\u{2060}'..='\u{206F}' | '\u{FEFF}');
    invisible || character.is_control() || "<>:\"|?*".contains(character)
}

fn is_device(stem: &str) -> bool {
    let first = stem.split('.').next().unwrap_or_default().to_ascii_uppercase();
    let numbered = |kind: &str| first.strip_prefix(kind).is_some_and(|rest| matches!(rest.as_bytes(), [b'1'..=b'9']));
    ["CON", "PRN", "AUX", "NUL"].contains(&first.as_str()) || numbered("COM") || numbered("LPT")
}

/// The name for viewers that know ASCII only.
fn ascii(file_name: &str) -> String {
    file_name.chars().map(|character| if character.is_ascii() { character } else { '_' }).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn names_are_made_safe() {
        for (wanted, safe) in [
            ("readings.csv", "readings.csv"),
            ("Messung ν.csv", "Messung ν.csv"),
            ("../../etc/passwd", "passwd"),
            ("C:\\data\\hall up.dat", "hall up.dat"),
            ("what?<1>.csv", "what__1_.csv"),
            ("sheet\u{202E}fdp.exe", "sheet_fdp.exe"),
            (".hidden", "hidden"),
            ("con.toml", "_con.toml"),
            ("lpt1", "_lpt1"),
            ("a. ", "a"),
            ("", "file"),
            ("..", "file"),
        ] {
            assert_eq!(safe_name(wanted), safe, "{wanted:?}");
        }
        assert_eq!(safe_name(&"x".repeat(300)).len(), 80);
    }

    #[test]
    fn equal_names_are_numbered() {
        let taken = BTreeMap::from([("A.csv".to_string(), (1, 0)), ("a-2.csv".to_string(), (2, 0))]);
        assert_eq!(free_name("a.csv", &taken), "a-3.csv");
        assert_eq!(free_name("b.csv", &taken), "b.csv");
    }
}
