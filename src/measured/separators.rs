//! What stands between the digits of a number and is asked about: commas, blanks, points.

use std::ops::Range;

use crate::measured::number_text::NumberFault;
use crate::measured::number_text::shortened;

/// Refuses a number (`digits`: its bytes in `text`) that goes on after a comma, a blank or a second point.
pub fn refuse(text: &str, digits: Range<usize>) -> Result<(), NumberFault> {
    let mut next = text[digits.end..].chars();
    let (Some(mark), Some(follower)) = (next.next(), next.next()) else { return Ok(()) };
    let separates = matches!(mark, ',' | '\'' | '’' | '_' | '.') || mark.is_whitespace();
    // `,5` has its comma before any digit.
    if !separates || !follower.is_ascii_digit() || digits.is_empty() && mark != ',' {
        return Ok(());
    }
    let bytes = digits.start..digits.start + number_like(&text[digits.start..]);
    let written = &text[bytes.clone()];
    let (code, message, hint) = match mark {
        ',' => ("comma-in-number", comma_question(written), comma_answers(written)),
        '.' => ("bad-number", not_one_number(written), "keep one decimal point".to_string()),
        _ => ("bad-number", not_one_number(written), joined_answer(written)),
    };
    Err(NumberFault { code, message, hint, bytes })
}

/// Length of digits with anything that may stand between them.
fn number_like(text: &str) -> usize {
    let part = |c: char| c.is_ascii_digit() || matches!(c, ',' | '.' | '\'' | '’' | '_') || c.is_whitespace();
    text[..text.find(|c| !part(c)).unwrap_or(text.len())].trim_end().len()
}

fn not_one_number(written: &str) -> String {
    format!("`{}` is not one number", shortened(written))
}

fn joined_answer(written: &str) -> String {
    let joined: String = written.chars().filter(|c| c.is_ascii_digit() || *c == '.').collect();
    format!("write the digits without separators, {joined}, if that is meant")
}

fn comma_question(written: &str) -> String {
    if written.contains('.') || written.matches(',').count() > 1 {
        return format!("what do the commas in `{}` mean?", shortened(written));
    }
    format!("is the comma in `{}` a decimal comma or a thousands comma?", shortened(written))
}

fn comma_answers(written: &str) -> String {
    let plain = written.replace(',', "");
    let point = written.replacen(',', ".", 1);
    let (whole, fraction) = written.split_once(',').unwrap_or((written, ""));
    if fraction.contains([',', '.']) || whole.contains('.') {
        return format!("write {plain} if that is meant");
    }
    // A thousands comma stands before three digits and never after a zero.
    let thousands = fraction.len() == 3 && !whole.is_empty() && !whole.starts_with('0');
    if thousands {
        format!("write {point} or {plain}, whichever is meant")
    } else {
        format!("write {point} if that is meant")
    }
}
