//! What is understood of a file, in words: one part after the other, for a terminal.

mod alone;
mod bench;
mod cooldown;
mod device;
mod output;
mod readings;

use crate::diagnostic::Diagnostic;
use crate::diagnostic::Severity;
use crate::report::table_text::wrapped;

pub use alone::understood_alone;
pub use cooldown::understood_cooldown;
pub use device::understood_device;
pub use output::understood_output;
pub use readings::understood_readings;
pub use readings::understood_table;

/// Columns of a terminal.
const WIDTH: usize = 100;
/// Columns of the labels.
const LABELS: usize = 12;
/// Fewest columns in which words are folded.
const NARROWEST: usize = 24;

/// What is understood of one file.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Understood {
    /// The file, as the user named it.
    file: String,
    /// What kind of file it is, and of what.
    kind: String,
    parts: Vec<Part>,
}

/// Rows under one label; their cells are aligned with one another.
#[derive(Clone, Debug, PartialEq, Eq)]
struct Part {
    label: &'static str,
    rows: Vec<Vec<String>>,
}

impl Understood {
    /// A file of which nothing is said but what it is.
    pub fn new(file: &str, kind: impl Into<String>) -> Self {
        Self { file: file.to_owned(), kind: kind.into(), parts: Vec::new() }
    }

    /// The same with one more part, unless it has no rows.
    fn with(mut self, label: &'static str, rows: Vec<Vec<String>>) -> Self {
        if !rows.is_empty() {
            self.parts.push(Part { label, rows });
        }
        self
    }

    /// The same with a part of sentences.
    fn saying(self, label: &'static str, lines: Vec<String>) -> Self {
        self.with(label, lines.into_iter().map(|line| vec![line]).collect())
    }
}

/// All files one below the other, and how many findings there are.
pub fn checked(files: &[Understood], findings: &[Diagnostic]) -> String {
    let texts: String = files.iter().map(|file| text(file) + "\n").collect();
    let faults = findings.iter().filter(|finding| finding.severity == Severity::Fault).count();
    let notices = findings.len() - faults;
    let mut counts = vec![count(faults, "fault", "no fault")];
    counts.extend((notices > 0).then(|| count(notices, "notice", "")));
    format!("{texts}{}\n", counts.join(", "))
}

/// `no fault`, `1 fault`, `2 faults`.
fn count(number: usize, word: &str, none: &str) -> String {
    match number {
        0 => none.to_owned(),
        1 => format!("1 {word}"),
        _ => format!("{number} {word}s"),
    }
}

fn text(file: &Understood) -> String {
    let head = wrapped(&format!("{}: {}", file.file, file.kind), WIDTH).join("\n    ");
    let lines = file.parts.iter().flat_map(lines).map(|line| line + "\n");
    format!("{head}\n{}", lines.collect::<String>())
}

fn lines(part: &Part) -> Vec<String> {
    let columns = part.rows.iter().map(Vec::len).max().unwrap_or(0).saturating_sub(1);
    let wide = |at: usize| {
        let cells = part.rows.iter().filter(|row| row.len() > at + 1).map(|row| row[at].chars().count());
        cells.max().unwrap_or(0)
    };
    let widths: Vec<usize> = (0..columns).map(wide).collect();
    let mut found: Vec<String> = part.rows.iter().flat_map(|row| row_lines(row, &widths)).collect();
    for (at, line) in found.iter_mut().enumerate() {
        let label = if at == 0 { part.label } else { "" };
        *line = format!("  {label:<LABELS$}{}", line.trim_end());
    }
    found
}

/// A row; its last cell is folded below itself where it is long.
fn row_lines(row: &[String], widths: &[usize]) -> Vec<String> {
    let Some((last, cells)) = row.split_last() else { return Vec::new() };
    let cells = cells.iter().zip(widths).map(|(cell, width)| format!("{cell:<width$}  "));
    let head: String = cells.collect();
    let indent = head.chars().count();
    let folded = wrapped(last, WIDTH.saturating_sub(2 + LABELS + indent).max(NARROWEST));
    let below = folded.iter().skip(1).map(|line| " ".repeat(indent) + line);
    std::iter::once(head.clone() + folded.first().map_or("", String::as_str)).chain(below).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn cells_are_aligned_and_long_ones_folded() {
        let long = "word ".repeat(30);
        let rows = [["TG", "x 250 to 350 µm"], ["long name", long.trim()]];
        let file = Understood::new("a.toml", "device file")
            .with("gates", rows.map(|row| row.map(String::from).to_vec()).to_vec());
        let text = text(&file);
        let lines: Vec<&str> = text.lines().collect();
        assert_eq!(lines[1], "  gates       TG         x 250 to 350 µm");
        assert!(lines[2].starts_with("              long name  word") && lines[3].starts_with(&" ".repeat(25)));
        assert!(lines.iter().all(|line| line.chars().count() <= WIDTH), "{text}");
    }

    #[test]
    fn findings_are_counted() {
        let finding = [Diagnostic::fault("a", "b"), Diagnostic::notice("c", "d"), Diagnostic::notice("e", "f")];
        assert_eq!(checked(&[], &finding), "1 fault, 2 notices\n");
        assert_eq!(checked(&[], &[]), "no fault\n");
    }
}
