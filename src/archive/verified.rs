//! What came of verifying a sheet, in sentences.

use serde_json::Value;

use crate::archive::compare::Compared;
use crate::archive::compare::Writer;
use crate::archive::compare::compare;
use crate::archive::input::Kept;
use crate::archive::opened::Opened;
use crate::archive::pdf;
use crate::archive::pdf::Content;
use crate::archive::pdf::PdfFile;
use crate::archive::pdf::Read;

/// Most differences that are written out.
const MOST_SHOWN: usize = 12;

/// The sheet as it was computed again.
#[derive(Clone, Copy, Debug)]
pub struct Again<'a> {
    /// The record.
    pub record: &'a [u8],
    /// The PDF.
    pub pdf: &'a [u8],
    /// Version of this program.
    pub version: &'a str,
}

/// What came of it.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Verified {
    /// The answer in few words.
    pub answer: String,
    /// What differs.
    pub differences: Vec<String>,
    /// What else is worth knowing, and what could not be checked.
    pub remarks: Vec<String>,
}

impl Verified {
    /// Whether nothing differs.
    pub fn is_same(&self) -> bool {
        self.differences.is_empty()
    }

    /// The answer as text, behind the name of the file.
    pub fn text(&self, name: &str) -> String {
        let more = self.differences.len().saturating_sub(MOST_SHOWN);
        let more = (more > 0).then(|| format!("and {more} more"));
        let differences = self.differences.iter().take(MOST_SHOWN).cloned().chain(more);
        let lines = differences.chain(self.remarks.iter().cloned()).map(|line| format!("  {line}\n"));
        format!("{name}: {}\n{}", self.answer, lines.collect::<String>())
    }
}

/// What differs before anything is computed: inputs against the sums that stand beside them.
pub fn verified_inputs(opened: &Opened) -> Vec<String> {
    let mut found = Vec::new();
    for input in &opened.record.inputs {
        if input.kept().is_some_and(|kept| !input.is(&kept.bytes)) {
            found.push(format!(
                "{}: its text in the record has not the size and SHA-256 that stand beside it",
                input.name
            ));
        }
    }
    let Some(attached) = &opened.attached else { return found };
    for one in attached {
        let name: String = one.name.chars().filter(|letter| !letter.is_control()).take(80).collect();
        match &one.bytes {
            Err(reason) => found.push(format!("{name}, attached: {reason}")),
            Ok(_) if !one.wrong.is_empty() => {
                found.push(format!(
                    "{name}, attached: its {} in the PDF is not that of its bytes",
                    one.wrong.join(" and ")
                ));
            }
            Ok(_) => {}
        }
        let is_known =
            |bytes: &Vec<u8>| *bytes == opened.record_bytes || opened.record.inputs.iter().any(|input| input.is(bytes));
        if one.bytes.as_ref().is_ok_and(|bytes| !is_known(bytes)) {
            found.push(format!("{name}, attached: it is not a file from which this sheet was computed"));
        }
    }
    for input in &opened.record.inputs {
        let is_there = attached.iter().any(|one| one.bytes.as_ref().is_ok_and(|bytes| input.is(bytes)));
        if !is_there {
            found.push(format!("{}: the file that went in is not attached", input.name));
        }
    }
    found
}

/// Everything that was archived beside what was computed again.
pub fn verified(opened: &Opened, inputs: &[Kept], again: Again) -> Verified {
    let same_version = opened.record.version == again.version;
    let writer = if same_version { Writer::SameVersion } else { Writer::OtherVersion };
    let recomputed: Value = serde_json::from_slice(again.record).unwrap_or(Value::Null);
    let compared = compare(&opened.record.value, &recomputed, writer);
    let mut found = Verified { differences: verified_inputs(opened), ..Verified::default() };
    found.differences.extend(
        compared
            .differences
            .iter()
            .map(|one| format!("{}: archived {}, computed again {}", one.place, one.archived, one.again)),
    );
    if opened.record.doubled {
        found
            .differences
            .push("a key of the record stands twice in one table, so that one of its values is hidden".to_owned());
    }
    if same_version {
        form(opened, again, &mut found);
    }
    found.remarks.splice(0..0, remarks(opened, (inputs, &compared), again.version));
    found.answer = match (found.is_same(), same_version) {
        (true, true) => "same".to_owned(),
        (true, false) => "same numbers, other program version".to_owned(),
        (false, _) => "not the same".to_owned(),
    };
    found
}

/// What was compared, and what was not.
fn remarks(opened: &Opened, (inputs, compared): (&[Kept], &Compared), version: &str) -> Vec<String> {
    let equal = compared.count - compared.differences.len();
    let files = if inputs.len() == 1 { "1 file".to_owned() } else { format!("{} files", inputs.len()) };
    let mut said = vec![format!("computed again from {files}: {equal} of {} values are the same", compared.count)];
    if opened.record.version != version {
        let other: String = opened.record.version.chars().filter(|letter| !letter.is_control()).take(40).collect();
        said.push(format!(
            "written by version {other}, computed again by {version}: numbers to 10⁻¹² and the words that follow from them are \
             compared; sentences and pages are not"
        ));
    }
    let shown = compared.unchecked.iter().take(MOST_SHOWN);
    said.extend(shown.map(|place| format!("not checked, as this version does not compute it: {place}")));
    let more = compared.unchecked.len().saturating_sub(MOST_SHOWN);
    said.extend((more > 0).then(|| format!("nor {more} more")));
    said
}

/// The bytes of the same version: of the record, and of the pages.
fn form(opened: &Opened, again: Again, found: &mut Verified) {
    let numbers_same = found.is_same();
    if opened.record_bytes != again.record && numbers_same {
        found
            .remarks
            .push("the record says the same in another form: it was written again by another program".to_owned());
    }
    if opened.attached.is_none() {
        if opened.record_bytes == again.record {
            found.remarks.push("the record is the same, byte for byte".to_owned());
        }
        found.remarks.push("the pages were not checked: a record has none".to_owned());
    } else if opened.bytes == again.pdf {
        found.remarks.push("the PDF is the same, byte for byte".to_owned());
    } else if let Some(rest) = opened.bytes.strip_prefix(again.pdf) {
        found.differences.push(format!("{} bytes were added behind the end of the sheet", rest.len()));
    } else {
        pages(opened, again.pdf, found);
    }
}

/// Which pages differ where the bytes of the PDF do.
fn pages(opened: &Opened, again: &[u8], found: &mut Verified) {
    let content = |bytes: &[u8]| -> Read<Content> { pdf::content(&mut PdfFile::of(bytes)?) };
    let (archived, again) = match (content(&opened.bytes), content(again)) {
        (Ok(archived), Ok(again)) => (archived, again),
        (Err(reason), _) | (_, Err(reason)) => {
            return found.differences.push(format!("the pages cannot be compared: {reason}"));
        }
    };
    let (count, expected) = (archived.pages.len(), again.pages.len());
    if count != expected {
        found.differences.push(format!("the PDF has {count} pages, computed again {expected}"));
    }
    let pairs = archived.pages.iter().zip(&again.pages).enumerate();
    let other = pairs.filter(|(_, (one, other))| one != other).map(|(at, _)| at + 1);
    found.differences.extend(other.map(|page| format!("page {page} differs from the page computed again")));
    if archived.rest != again.rest {
        found.differences.push("title, bookmarks or other words about the document differ".to_owned());
    }
    if archived == again {
        let said = "the pages show the same, but the file differs in form: another program saved it again";
        found.remarks.push(said.to_owned());
    }
}
