//! Whether a file is one that the program wrote itself, by its content.

use crate::archive::archived;

/// A file that the program wrote.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Own {
    /// What it is: `sheet (PDF)`.
    pub what: &'static str,
    /// Device, cooldown and revision, as the file says them.
    pub foot: Option<String>,
}

/// A sheet, its HTML twin or its record; none for any other file, also for PDF files of other programs.
pub fn recognise(bytes: &[u8]) -> Option<Own> {
    sheet(bytes).or_else(|| record(bytes)).or_else(|| twin(bytes))
}

/// Sheets carry their title and the program's name in readable XMP (ISO 32000-1, 14.3.2).
fn sheet(bytes: &[u8]) -> Option<Own> {
    let text = String::from_utf8_lossy(bytes.strip_prefix(b"%PDF-").map(|_| bytes)?);
    text.contains("<pdf:Producer>edgesheet ").then_some(())?;
    let title = between(&text, "<dc:title><rdf:Alt><rdf:li xml:lang=\"x-default\">", "</rdf:li>");
    let foot = title.map(|title| title.rsplit_once(": ").map_or(title.clone(), |(foot, _)| foot.to_owned()));
    Some(Own { what: "sheet (PDF)", foot })
}

fn twin(bytes: &[u8]) -> Option<Own> {
    let text = std::str::from_utf8(bytes).ok().filter(|text| text.starts_with("<!DOCTYPE html>"))?;
    let ours = text.contains("not a calibration certificate");
    ours.then(|| Own { what: "HTML twin of a sheet", foot: between(text, "<title>", "</title>") })
}

fn record(bytes: &[u8]) -> Option<Own> {
    bytes.trim_ascii_start().starts_with(b"{").then_some(())?;
    let value = archived::value(bytes).ok()?;
    let foot = value.pointer("/printed/identity/foot")?.as_str()?;
    value.get("verdict")?;
    Some(Own { what: "record of a sheet", foot: Some(foot.to_owned()) })
}

/// The text between two marks, with the entities of XML resolved.
fn between(text: &str, from: &str, to: &str) -> Option<String> {
    let (inside, _) = text.split_once(from)?.1.split_once(to)?;
    let entities = [("&lt;", "<"), ("&gt;", ">"), ("&quot;", "\""), ("&#x27;", "'"), ("&#39;", "'"), ("&amp;", "&")];
    Some(entities.iter().fold(inside.to_owned(), |text, (entity, sign)| text.replace(entity, sign)))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn files_of_other_programs_are_not_ours() {
        let others: [&[u8]; 6] =
            [b"", b"%PDF-1.7\nother", b"{}", b"{\"identity\": 3}", b"<!DOCTYPE html><p>", b"format = 1"];
        for other in others {
            assert_eq!(recognise(other), None);
        }
    }

    #[test]
    fn signs_in_a_title_are_read_back() {
        let page = "<!DOCTYPE html><title>A&amp;B &lt;1&gt;</title> not a calibration certificate";
        assert_eq!(recognise(page.as_bytes()).unwrap().foot.as_deref(), Some("A&B <1>"));
    }
}
