//! Marks in the texts of a sheet: what stands lowered or raised.
//!
//! The marks are noncharacters, which Unicode sets aside for use inside a program and of which it says that they stand
//! for no text (Unicode Standard, section 23.7). Input files that hold one are refused. So nothing that a user writes is
//! ever taken for a mark: a title `a_{b}` is printed as it was typed. In the program's own texts, and in the record,
//! the marks are spelled `_{…}` and `^{…}`.

/// From here on lowered.
pub const LOWERED: char = '\u{FDD0}';

/// From here on raised.
pub const RAISED: char = '\u{FDD1}';

/// Back on the line.
pub const CLOSED: char = '\u{FDD2}';

/// A text of the program with `_{…}` and `^{…}` turned into marks. Not for texts that hold a user's words.
pub fn marked(own: &str) -> String {
    let mut text = String::new();
    let mut rest = own;
    while let Some((before, mark, inside, after)) = first_spelled(rest) {
        text += &format!("{before}{mark}{inside}{CLOSED}");
        rest = after;
    }
    text + rest
}

/// What stands before the first spelled mark, the mark, what it holds, and the rest.
fn first_spelled(text: &str) -> Option<(&str, char, &str, &str)> {
    let spelled = [("_{", LOWERED), ("^{", RAISED)];
    let (start, mark) = spelled.into_iter().filter_map(|(sign, mark)| Some((text.find(sign)?, mark))).min()?;
    let (inside, after) = text[start + 2..].split_once('}')?;
    Some((&text[..start], mark, inside, after))
}

/// For the record: `R_{14,25}`, h/e^{2}.
pub fn spelled(marked: &str) -> String {
    marked.replace(LOWERED, "_{").replace(RAISED, "^{").replace(CLOSED, "}")
}

/// For a terminal and for data of pictures: `R_14,25`, `10^−6`.
pub fn plain(marked: &str) -> String {
    marked.replace(LOWERED, "_").replace(RAISED, "^").replace(CLOSED, "")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn marks_are_spelled_in_own_texts_and_in_the_record_alone() {
        let own = "R_{14,25} in h/e^{2}, a_{";
        assert_eq!(marked(own), "R\u{FDD0}14,25\u{FDD2} in h/e\u{FDD1}2\u{FDD2}, a_{");
        assert_eq!(spelled(&marked(own)), own);
        assert_eq!(plain(&marked("R_{14,25}, 10^{−6}, ")) + "typed_{x}^{y}", "R_14,25, 10^−6, typed_{x}^{y}");
    }
}
