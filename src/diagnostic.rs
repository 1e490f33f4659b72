//! Faults and notices: what is wrong, where, and what to do.
//!
//! Owns: [`Source`], [`Place`], [`Diagnostic`] and the collector [`Findings`]. Takes nothing of ours; every room gives
//! its findings in these types, and `cli` prints them. A room collects **all** faults of a file before it gives up.

use std::fmt;
use std::sync::Arc;

mod show;

pub use show::Colour;
pub use show::show;

/// A text that a user wrote, with the name under which the user knows it.
#[derive(PartialEq, Eq)]
pub struct Source {
    /// File name as the user gave it.
    pub name: String,
    /// The whole text.
    pub text: String,
}

impl Source {
    /// A shared source, ready to be pointed into.
    pub fn new(name: impl Into<String>, text: impl Into<String>) -> Arc<Self> {
        Arc::new(Self { name: name.into(), text: text.into() })
    }
}

impl fmt::Debug for Source {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "Source({})", self.name)
    }
}

/// A stretch of a source: bytes `start..end`.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Place {
    /// The text pointed into.
    pub source: Arc<Source>,
    /// First byte.
    pub start: usize,
    /// One past the last byte.
    pub end: usize,
}

impl Place {
    /// Line, counted from 1.
    pub fn line(&self) -> usize {
        self.before().matches('\n').count() + 1
    }

    /// Column in characters, counted from 1.
    pub fn column(&self) -> usize {
        let before = self.before();
        let line_start = before.rfind('\n').map_or(0, |at| at + 1);
        before[line_start..].chars().count() + 1
    }

    /// The first byte of the line on which it begins, and that line.
    fn line_text(&self) -> (usize, &str) {
        let before = self.before();
        let start = before.rfind('\n').map_or(0, |at| at + 1);
        let line = self.source.text[start..].split('\n').next().unwrap_or_default();
        (start, line.strip_suffix('\r').unwrap_or(line))
    }

    fn before(&self) -> &str {
        let mut end = self.start.min(self.source.text.len());
        while !self.source.text.is_char_boundary(end) {
            end -= 1;
        }
        &self.source.text[..end]
    }
}

impl fmt::Display for Place {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}:{}:{}", self.source.name, self.line(), self.column())
    }
}

/// A fault stops the command with exit code 2; a notice is shown and goes onto the sheet.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Severity {
    /// The input cannot be used as it stands.
    Fault,
    /// The input is used, and this is worth knowing.
    Notice,
}

/// One finding, in the user's words: a one-line message without full stop, and a hint that says what to do.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Diagnostic {
    /// Fault or notice.
    pub severity: Severity,
    /// Stable short name of the kind of finding, such as `unknown-key`; tests and the record use it.
    pub code: &'static str,
    /// What is wrong, naming the user's own words.
    pub message: String,
    /// Where; absent only for findings about a whole file that could not be read.
    pub place: Option<Place>,
    /// What to do.
    pub hint: Option<String>,
}

impl Diagnostic {
    /// A fault.
    pub fn fault(code: &'static str, message: impl Into<String>) -> Self {
        Self { severity: Severity::Fault, code, message: message.into(), place: None, hint: None }
    }

    /// A notice.
    pub fn notice(code: &'static str, message: impl Into<String>) -> Self {
        Self { severity: Severity::Notice, ..Self::fault(code, message) }
    }

    /// The same, pointing at `place`.
    pub fn at(mut self, place: &Place) -> Self {
        self.place = Some(place.clone());
        self
    }

    /// The same, with advice.
    pub fn hint(mut self, hint: impl Into<String>) -> Self {
        self.hint = Some(hint.into());
        self
    }
}

/// A value together with what was noticed while it was made.
#[derive(Clone, Debug, PartialEq)]
pub struct Noted<T> {
    /// The value.
    pub value: T,
    /// Notices only, in order of place.
    pub notices: Vec<Diagnostic>,
}

/// Everything that is wrong with an input (at least one fault; notices found on the way are kept).
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Faults(pub Vec<Diagnostic>);

/// The outcome of a step that reads what a user wrote.
pub type Outcome<T> = Result<Noted<T>, Faults>;

/// Collects findings until the end of a step.
#[derive(Debug, Default)]
pub struct Findings {
    list: Vec<Diagnostic>,
}

impl Findings {
    /// Adds one finding.
    pub fn push(&mut self, diagnostic: Diagnostic) {
        self.list.push(diagnostic);
    }

    /// Adds many findings.
    pub fn extend(&mut self, diagnostics: impl IntoIterator<Item = Diagnostic>) {
        self.list.extend(diagnostics);
    }

    /// Takes over an outcome: its value if there is one, its findings in any case.
    pub fn take<T>(&mut self, outcome: Outcome<T>) -> Option<T> {
        match outcome {
            Ok(noted) => {
                self.list.extend(noted.notices);
                Some(noted.value)
            }
            Err(Faults(list)) => {
                self.list.extend(list);
                None
            }
        }
    }

    /// Whether any fault was found.
    pub fn has_faults(&self) -> bool {
        self.list.iter().any(|d| d.severity == Severity::Fault)
    }

    /// The value with its notices, or all findings if one of them is a fault. Sorted by place, each said once.
    pub fn finish<T>(mut self, value: T) -> Outcome<T> {
        self.sort();
        if self.has_faults() { Err(Faults(self.list)) } else { Ok(Noted { value, notices: self.list }) }
    }

    /// The faults of a step that has no value to give; call only after a fault was found.
    pub fn into_faults(mut self) -> Faults {
        self.sort();
        Faults(self.list)
    }

    fn sort(&mut self) {
        self.list.sort_by(|a, b| place_key(a).cmp(&place_key(b)));
        self.list.dedup();
    }
}

fn place_key(d: &Diagnostic) -> (Option<(&str, usize)>, Severity) {
    (d.place.as_ref().map(|p| (p.source.name.as_str(), p.start)), d.severity)
}
