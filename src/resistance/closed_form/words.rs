//! Closed forms in words.

use crate::number::Rational;
use crate::resistance::closed_form::ClosedForm;
use crate::resistance::closed_form::FillingRegion;

/// `1/ν(TG) − 1/ν(bulk)`, `2/ν(bulk) − 1/ν(TG)`, `−1/(2ν(A))`, `0`: what is added comes first.
pub(super) fn words(regions: &[FillingRegion], form: &ClosedForm, (before, after): (&str, &str)) -> String {
    let mut text = String::new();
    let (negative, positive): (Vec<_>, Vec<_>) = form.terms.iter().partition(|(_, a)| a.is_negative());
    for (region, a) in positive.into_iter().chain(negative) {
        text.push_str(match (text.is_empty(), a.is_negative()) {
            (true, true) => "−",
            (true, false) => "",
            (false, true) => " − ",
            (false, false) => " + ",
        });
        text.push_str(&term(&a.abs(), &format!("{before}{}{after}", regions[*region].name)));
    }
    if text.is_empty() { "0".to_owned() } else { text }
}

fn term(a: &Rational, filling: &str) -> String {
    match a.parts() {
        (over, under) if under == "1" => format!("{over}/{filling}"),
        (over, under) => format!("{over}/({under}{filling})"),
    }
}
