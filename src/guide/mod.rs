//! The user's guide, the schemas and the starter files: what the program says about itself.
//!
//! Owns: the topics (`*.md` in this folder), the starter files, and what is made from the tables of keys in `syntax` and
//! the columns in `measured`: the reference inside the topics and the JSON Schemas. Takes a topic and a look; gives text.
//! Must never repeat what a table of keys says, and never print.

use crate::diagnostic::Diagnostic;
use crate::diagnostic::Faults;
use crate::syntax::did_you_mean;

mod page;
mod reference;
mod schema;
mod starter;
mod words;

pub use page::Bold;
pub use page::Look;
pub use schema::schema;
pub use starter::STARTER;

/// Every topic with its text, in the order in which a new user reads them.
const TOPICS: [(&str, &str); 16] = [
    ("start", include_str!("start.md")),
    ("conventions", include_str!("conventions.md")),
    ("polarity", include_str!("polarity.md")),
    ("device", include_str!("device.md")),
    ("contacts", include_str!("contacts.md")),
    ("mixing", include_str!("mixing.md")),
    ("cooldown", include_str!("cooldown.md")),
    ("meters", include_str!("meters.md")),
    ("readings", include_str!("readings.md")),
    ("verdict", include_str!("verdict.md")),
    ("sheet", include_str!("sheet.md")),
    ("verify", include_str!("verify.md")),
    ("units", include_str!("units.md")),
    ("editors", include_str!("editors.md")),
    ("limits", include_str!("limits.md")),
    ("safety", include_str!("safety.md")),
];

/// The list of topics with one line each.
pub fn topics(look: Look) -> String {
    let rows: String = TOPICS.iter().map(|(name, text)| format!("| {name} | {} |\n", title(text))).collect();
    let list = format!("# Topics of the guide\n\n{rows}\n`edgesheet guide TOPIC` shows one of them.\n");
    page::page(&list, look)
}

/// A topic; a word that is none is a fault with the topic that was meant.
pub fn topic(word: &str, look: Look) -> Result<String, Faults> {
    let found = TOPICS.iter().find(|(name, _)| name.eq_ignore_ascii_case(word));
    found.map(|(_, text)| page::page(&with_reference(text), look)).ok_or_else(|| Faults(vec![unknown(word)]))
}

/// The title says in one line what a topic is about.
fn title(text: &str) -> &str {
    text.lines().next().unwrap_or_default().trim_start_matches('#').trim()
}

fn with_reference(text: &str) -> String {
    text.lines().map(|line| reference::expanded(line).unwrap_or_else(|| line.to_owned()) + "\n").collect()
}

fn unknown(word: &str) -> Diagnostic {
    let names = || TOPICS.iter().map(|(name, _)| *name);
    let hint = match did_you_mean(word, names()) {
        Some(meant) => format!("did you mean `{meant}`?"),
        None => format!("the topics are {}", names().collect::<Vec<_>>().join(", ")),
    };
    Diagnostic::fault("unknown-topic", format!("the guide has no topic `{word}`")).hint(hint)
}
