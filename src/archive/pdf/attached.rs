//! Files carried inside a PDF (ISO 32000-1, 7.11.4 and 7.9.6; relationship by ISO 32000-2, 7.11.3).

use std::collections::BTreeSet;

use md5::Digest;

use crate::archive::pdf::PdfFile;
use crate::archive::pdf::Read;
use crate::archive::pdf::object::Dict;
use crate::archive::pdf::object::Object;

/// Most files that are taken out.
const MOST: usize = 64;
/// Most branches of the tree of names.
const MOST_BRANCHES: usize = 64;

/// A file carried inside.
#[derive(Clone, Debug, PartialEq)]
pub struct Attached {
    /// Its name as written; nothing is written under it.
    pub name: String,
    /// What it is to the pages: `Source`, `Data`.
    pub relationship: String,
    /// Its bytes, or why they cannot be had.
    pub bytes: Read<Vec<u8>>,
    /// Whether size and MD5 that stand beside it are those of its bytes; where one is not, which.
    pub wrong: Vec<&'static str>,
}

/// All files carried inside, in the order of their names.
pub fn attached(file: &mut PdfFile) -> Read<Vec<Attached>> {
    let trailer = file.trailer().clone();
    let root = file.dict(&trailer, "Root")?;
    let names = file.dict(&root, "Names")?;
    let mut branches = vec![file.dict(&names, "EmbeddedFiles")?];
    let (mut found, mut seen) = (Vec::new(), BTreeSet::new());
    let mut visited = 0;
    while let Some(branch) = branches.pop() {
        visited += 1;
        let kids = file.resolved(branch.get("Kids"))?;
        for kid in kids.array().unwrap_or_default().iter().rev() {
            let known = matches!(kid, Object::Ref(number) if !seen.insert(*number));
            if known || branches.len() + visited > MOST_BRANCHES {
                return Err("the list of its attachments goes in a circle".to_owned());
            }
            branches.push(file.resolved(kid)?.dict().cloned().unwrap_or_default());
        }
        let pairs = file.resolved(branch.get("Names"))?;
        for pair in pairs.array().unwrap_or_default().chunks_exact(2) {
            if found.len() == MOST {
                return Err("it holds more attachments than any sheet".to_owned());
            }
            found.push(one(file, &pair[1])?);
        }
    }
    Ok(found)
}

fn one(file: &mut PdfFile, specification: &Object) -> Read<Attached> {
    let specification = file.resolved(specification)?.dict().cloned().unwrap_or_default();
    let name = match file.resolved(specification.get("UF"))? {
        Object::Null => file.resolved(specification.get("F"))?,
        name => name,
    };
    let relationship = file.resolved(specification.get("AFRelationship"))?;
    let files = file.dict(&specification, "EF")?;
    let content = match files.get("F") {
        Object::Null => file.resolved(files.get("UF")),
        content => file.resolved(content),
    };
    let mut wrong = Vec::new();
    let bytes = content.and_then(|content| {
        let parameters = content.dict().map_or(Ok(Dict::default()), |dict| file.dict(dict, "Params"))?;
        let bytes = file.bytes(&content)?;
        wrong = faults(file, &parameters, &bytes)?;
        Ok(bytes)
    });
    Ok(Attached {
        name: text(name.text().unwrap_or_default()),
        relationship: String::from_utf8_lossy(relationship.name().unwrap_or_default()).into_owned(),
        bytes,
        wrong,
    })
}

fn faults(file: &mut PdfFile, parameters: &Dict, bytes: &[u8]) -> Read<Vec<&'static str>> {
    let size = file.resolved(parameters.get("Size"))?;
    let checksum = file.resolved(parameters.get("CheckSum"))?;
    let size = (size.int() != Some(bytes.len() as i64)).then_some("size");
    let sum = md5::Md5::digest(bytes);
    let checksum = (checksum.text() != Some(sum.as_slice())).then_some("MD5");
    Ok(size.into_iter().chain(checksum).collect())
}

/// A text string (7.9.2.2): UTF-16 with its mark, UTF-8 with its mark, else letter by letter.
fn text(bytes: &[u8]) -> String {
    let short = &bytes[..bytes.len().min(1000)];
    match short {
        [0xFE, 0xFF, rest @ ..] => {
            let units: Vec<u16> = rest.chunks_exact(2).map(|pair| u16::from_be_bytes([pair[0], pair[1]])).collect();
            String::from_utf16_lossy(&units)
        }
        [0xEF, 0xBB, 0xBF, rest @ ..] => String::from_utf8_lossy(rest).into_owned(),
        plain => plain.iter().map(|byte| char::from(*byte)).collect(),
    }
}
