//! Explanations for a terminal.

use crate::device::Device;
use crate::quantity::Polarity;
use crate::report::ReadingWhy;
use crate::report::SolvedPoint;
use crate::report::marks;
use crate::report::names::plain_name;
use crate::report::names::side;
use crate::report::table_text::WIDTH;
use crate::report::table_text::closing;
use crate::report::table_text::heading;
use crate::report::table_text::wrapped;

/// Sentences without marks.
pub fn plain(sentences: &[String]) -> Vec<String> {
    sentences.iter().map(|sentence| marks::plain(sentence)).collect()
}

/// Every explanation: point by point, reading by reading, both polarities of a reading together, sentences numbered.
pub fn text(device: &Device, solved: &[SolvedPoint]) -> String {
    let mut text = String::new();
    for both in solved.chunks(2) {
        let Some(first) = both.first() else { continue };
        text.push_str(&format!("{}\n\n", heading(device, first.point)));
        for (row, expected) in first.prediction.expected.iter().enumerate() {
            let reading = plain_name(device, &expected.reading);
            let explained = both.iter().filter_map(|point| Some((point, point.why.get(row)?.as_ref()?)));
            explained.for_each(|(point, why)| {
                text.push_str(&block(&reading, &side(device, point.polarity), (point.polarity, why)))
            });
        }
    }
    text + &closing(device, None)
}

fn block(reading: &str, side: &str, (polarity, why): (Polarity, &ReadingWhy)) -> String {
    let sentences = plain(&why.sentences);
    let lines: String = sentences.iter().enumerate().map(|(at, sentence)| numbered(at + 1, sentence)).collect();
    format!("{reading}, {side} ({})\n{lines}\n", polarity.sign())
}

/// Lines under a number, indented behind it.
fn numbered(number: usize, sentence: &str) -> String {
    let lines = wrapped(sentence, WIDTH - INDENT);
    let head = |at: usize| if at == 0 { format!("{number:>2}. ") } else { " ".repeat(INDENT) };
    lines.iter().enumerate().map(|(at, line)| format!("{}{line}\n", head(at))).collect()
}

const INDENT: usize = 4;
