//! A topic laid out for a terminal: the few marks of its text become lines of at most a given width.
//!
//! Marks: `#` title, `##` section, `-` item, `|` row of a table, three backticks round lines that stay as they are. All
//! other lines are paragraphs, which are folded anew.

/// How a page is shown.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Look {
    /// Columns of the page.
    pub width: usize,
    /// Whether headings are bold, by the control sequence of ECMA-48 (SGR 1).
    pub bold: Bold,
}

/// Whether headings are bold.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Bold {
    /// Bold headings.
    Headings,
    /// No control sequences.
    Nothing,
}

/// A piece of a topic.
#[derive(Clone, Debug, PartialEq, Eq)]
enum Block {
    Heading(String),
    Paragraph(String),
    Item(String),
    Table(Vec<Vec<String>>),
    Verbatim(Vec<String>),
}

/// The page; it ends with one line end.
pub fn page(text: &str, look: Look) -> String {
    let blocks = blocks(text);
    let mut lines: Vec<String> = Vec::new();
    let mut last_was_item = false;
    for block in &blocks {
        let is_item = matches!(block, Block::Item(_));
        if !(lines.is_empty() || is_item && last_was_item) {
            lines.push(String::new());
        }
        last_was_item = is_item;
        lines.extend(shown(block, look));
    }
    lines.iter().map(|line| format!("{}\n", line.trim_end())).collect()
}

fn blocks(text: &str) -> Vec<Block> {
    let mut found: Vec<Block> = Vec::new();
    let mut lines = text.lines();
    let mut open = false;
    while let Some(line) = lines.next() {
        if line.starts_with("```") {
            let inside = lines.by_ref().take_while(|line| !line.starts_with("```"));
            found.push(Block::Verbatim(inside.map(str::to_owned).collect()));
            open = false;
        } else if line.trim().is_empty() {
            open = false;
        } else {
            put(&mut found, line, open);
            open = true;
        }
    }
    found
}

/// Puts a line into the block that is open, or into a new one.
fn put(found: &mut Vec<Block>, line: &str, open: bool) {
    let text = line.trim();
    match (found.last_mut(), text) {
        _ if text.starts_with('#') => found.push(Block::Heading(text.trim_start_matches('#').trim().to_owned())),
        _ if text.starts_with("- ") => found.push(Block::Item(text.trim_start_matches("- ").to_owned())),
        (Some(Block::Table(rows)), _) if open && text.starts_with('|') => rows.extend(row(text)),
        _ if text.starts_with('|') => found.push(Block::Table(row(text).into_iter().collect())),
        (Some(Block::Paragraph(words) | Block::Item(words)), _) if open => *words += &format!(" {text}"),
        _ => found.push(Block::Paragraph(text.to_owned())),
    }
}

/// The cells of a row; none for the line of strokes below the head.
fn row(line: &str) -> Option<Vec<String>> {
    let cells: Vec<String> = line.trim_matches('|').split('|').map(|cell| cell.trim().to_owned()).collect();
    let strokes = cells.iter().all(|cell| cell.chars().all(|sign| matches!(sign, '-' | ':')));
    (!strokes).then_some(cells)
}

fn shown(block: &Block, look: Look) -> Vec<String> {
    match block {
        Block::Heading(text) => heading(text, look),
        Block::Paragraph(text) => folded(text, look.width),
        Block::Item(text) => hanging("- ", &folded(text, look.width.saturating_sub(2))),
        Block::Table(rows) => table(rows, look.width),
        Block::Verbatim(lines) => lines.iter().map(|line| format!("    {line}")).collect(),
    }
}

fn heading(text: &str, look: Look) -> Vec<String> {
    let lines = folded(text, look.width);
    match look.bold {
        Bold::Headings => lines.into_iter().map(|line| format!("\u{1b}[1m{line}\u{1b}[0m")).collect(),
        Bold::Nothing => {
            let longest = lines.iter().map(|line| line.chars().count()).max().unwrap_or(0);
            lines.into_iter().chain(std::iter::once("-".repeat(longest))).collect()
        }
    }
}

/// The first line behind `head`, the others below it.
fn hanging(head: &str, lines: &[String]) -> Vec<String> {
    let blank = " ".repeat(head.chars().count());
    let first = |at: usize| if at == 0 { head } else { blank.as_str() };
    lines.iter().enumerate().map(|(at, line)| format!("{}{line}", first(at))).collect()
}

fn table(rows: &[Vec<String>], width: usize) -> Vec<String> {
    let columns = rows.iter().map(Vec::len).max().unwrap_or(0);
    let wide =
        |at: usize| rows.iter().filter_map(|row| row.get(at)).map(|cell| cell.chars().count()).max().unwrap_or(0);
    let widths: Vec<usize> = (0..columns.saturating_sub(1)).map(wide).collect();
    let before: usize = widths.iter().map(|width| width + 2).sum();
    let rest = width.saturating_sub(before).max(16);
    let line = |row: &Vec<String>| {
        let head: String = row.iter().zip(&widths).map(|(cell, width)| format!("{cell:<width$}  ")).collect();
        hanging(&head, &folded(row.get(columns - 1).map_or("", String::as_str), rest))
    };
    if columns == 0 { Vec::new() } else { rows.iter().flat_map(line).collect() }
}

/// A text folded between words.
fn folded(text: &str, width: usize) -> Vec<String> {
    let mut lines = vec![String::new()];
    for word in text.split_whitespace() {
        let room = lines
            .last()
            .is_some_and(|line| line.is_empty() || line.chars().count() + 1 + word.chars().count() <= width);
        match lines.last_mut().filter(|_| room) {
            Some(line) if line.is_empty() => line.push_str(word),
            Some(line) => *line += &format!(" {word}"),
            None => lines.push(word.to_owned()),
        }
    }
    lines
}

#[cfg(test)]
mod tests {
    use super::*;

    const TEXT: &str = "# A title\n\nOne two three\nfour five.\n\n- first item that is long\n  and goes on\n- second\n\n\
                        | a | b |\n|---|---|\n| 1 | long words here |\n\n```sh\n$ keep   this\n```\n";

    #[test]
    fn every_mark_has_its_form() {
        let shown = page(TEXT, Look { width: 20, bold: Bold::Nothing });
        let wanted = "A title\n-------\n\nOne two three four\nfive.\n\n- first item that is\n  long and goes on\n- second\n\n\
                      a  b\n1  long words here\n\n    $ keep   this\n";
        assert_eq!(shown, wanted);
    }

    #[test]
    fn only_a_terminal_gets_control_sequences() {
        assert!(!page(TEXT, Look { width: 40, bold: Bold::Nothing }).contains('\u{1b}'));
        assert!(page(TEXT, Look { width: 40, bold: Bold::Headings }).contains("\u{1b}[1mA title\u{1b}[0m"));
    }
}
