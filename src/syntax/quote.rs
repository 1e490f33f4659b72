//! A user's own word inside a message.

/// Longest word shown whole; a message stays on one line of a terminal.
const LONGEST: usize = 60;

/// The word in backticks, on one line, cut where it is very long.
pub fn quoted(word: &str) -> String {
    let line: String = word.chars().take(LONGEST).flat_map(visible).collect();
    let dots = if word.chars().count() > LONGEST { "…" } else { "" };
    format!("`{line}{dots}`")
}

fn visible(c: char) -> Vec<char> {
    if c.is_control() { c.escape_default().collect() } else { vec![c] }
}
