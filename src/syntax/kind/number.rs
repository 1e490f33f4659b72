//! Numbers, lengths and fillings.

use crate::diagnostic::Diagnostic;
use crate::number::Rational;

use crate::syntax::Node;
use crate::syntax::Value;
use crate::syntax::decimal::RoundedNanometres;
use crate::syntax::keys::Range;
use crate::syntax::keys::split_unit;
use crate::syntax::kind::number_in_quotes;
use crate::syntax::kind::wrong_kind;
use crate::syntax::quoted;

/// Largest length or coordinate: 100 mm, the size of a wafer.
const LARGEST_NM: i64 = 100_000_000;
/// Largest whole number of a count.
const LARGEST_COUNT: i64 = 1_000_000;
/// Largest |ν|; beyond it no plateau is resolved in any material (common practice: a few hundred at most).
const LARGEST_FILLING: i64 = 10_000;

pub(super) fn count(from: i64, key: &str, node: &Node) -> Vec<Diagnostic> {
    match node.count() {
        Some(count) if (from..=LARGEST_COUNT).contains(&count) => Vec::new(),
        _ => vec![
            wrong_kind(key, &format!("a whole number from {from}"), node)
                .hint(format!("write {from} or more, without quotes")),
        ],
    }
}

pub(super) fn number(range: Range, key: &str, node: &Node) -> Vec<Diagnostic> {
    match node.number() {
        Some(number) => outside(range, number, key, node).into_iter().collect(),
        None => vec![no_number(key, node)],
    }
}

pub(super) fn length(range: Range, key: &str, node: &Node) -> Vec<Diagnostic> {
    let Some(number) = node.number() else { return vec![no_number(key, node)] };
    if let Some(fault) = outside(range, number, key, node) {
        return vec![fault];
    }
    match node.length(key) {
        None if number.abs() < LARGEST_NM as f64 => vec![no_number(key, node)],
        None => vec![too_long(key, node)],
        Some(length) if length.nanometres.abs() > LARGEST_NM => vec![too_long(key, node)],
        Some(length) if range == Range::Positive && length.nanometres == 0 => vec![vanishing(key, node)],
        Some(length) => rounded(length, key, node).into_iter().collect(),
    }
}

pub(super) fn filling(key: &str, node: &Node) -> Vec<Diagnostic> {
    match node.exact() {
        Some(filling) if filling.abs() <= Rational::from(LARGEST_FILLING) => Vec::new(),
        Some(_) => {
            let message = format!("the filling of {} is beyond {LARGEST_FILLING}", quoted(key));
            vec![
                Diagnostic::fault("out-of-range", message)
                    .at(&node.place)
                    .hint("no plateau stands there; check the number"),
            ]
        }
        None if node.number_text().is_some() => vec![no_number(key, node)],
        None => {
            let wanted = "a filling factor";
            vec![
                wrong_kind(key, wanted, node)
                    .hint("write an integer, a decimal or a fraction in quotes: 2, 2.5, \"7/3\""),
            ]
        }
    }
}

/// A share from 0 to 1.
pub(super) fn share(key: &str, node: &Node) -> Vec<Diagnostic> {
    let inside = |share: &Rational| (Rational::ZERO..=Rational::ONE).contains(share);
    match node.exact() {
        Some(share) if inside(&share) => Vec::new(),
        None if node.number().is_none() => vec![no_number(key, node)],
        _ => {
            let value = node.number_text().or(node.text()).unwrap_or_default();
            let message = format!("{} is {}, outside 0 to 1", quoted(key), quoted(value));
            let hint = "1 is a perfect contact, 0 one that the channels pass by";
            vec![Diagnostic::fault("out-of-range", message).at(&node.place).hint(hint)]
        }
    }
}

pub(super) fn no_number(key: &str, node: &Node) -> Diagnostic {
    let number = node.number_text().map(|text| text.trim_start_matches(['+', '-']));
    if let Some("nan" | "inf") = number {
        let message = format!("{} is {}, which is no number", quoted(key), node.number_text().unwrap_or_default());
        return Diagnostic::fault("no-number", message)
            .at(&node.place)
            .hint("leave the key out where the value is not known");
    }
    if number.is_some() {
        let message = format!("{} has more digits or a larger exponent than can be kept", quoted(key));
        return Diagnostic::fault("no-number", message).at(&node.place).hint("write at most 18 digits");
    }
    let fault = wrong_kind(key, "a number", node);
    match number_in_quotes(node) {
        Some(_) => fault.hint("take the quotes away"),
        None => fault.hint("write the number alone; the unit stands in the key"),
    }
}

fn outside(range: Range, number: f64, key: &str, node: &Node) -> Option<Diagnostic> {
    let (good, wanted, hint) = match range {
        Range::Any => (true, "", ""),
        Range::Positive => (number > 0.0, "must be above zero", "check the number and its sign"),
        Range::NotNegative => (number >= 0.0, "cannot be below zero", "check the sign"),
        Range::NotZero => (number != 0.0, "cannot be zero", "leave the key out where the value is not known"),
        Range::Magnitude => {
            let hint =
                "write it without a sign: both polarities are always solved, and which one was set is said elsewhere";
            (number > 0.0, "is a magnitude and must be above zero", hint)
        }
    };
    let value = node.number_text().unwrap_or_default();
    let message = format!("{} {wanted}, and {} is given", quoted(key), quoted(value));
    (!good).then(|| Diagnostic::fault("out-of-range", message).at(&node.place).hint(hint))
}

fn too_long(key: &str, node: &Node) -> Diagnostic {
    let unit = split_unit(key).map_or("", |(_, unit)| unit.words);
    let message = format!("{} is beyond 100 mm", quoted(key));
    Diagnostic::fault("out-of-range", message).at(&node.place).hint(format!("the number is taken in {unit}; check it"))
}

fn vanishing(key: &str, node: &Node) -> Diagnostic {
    let message = format!("{} is less than half a nanometre", quoted(key));
    Diagnostic::fault("out-of-range", message)
        .at(&node.place)
        .hint("lengths are kept in whole nanometres; check the unit")
}

fn rounded(length: RoundedNanometres, key: &str, node: &Node) -> Option<Diagnostic> {
    let message = format!(
        "{} is finer than a nanometre: {} is taken as {} nm",
        quoted(key),
        node.number_text().unwrap_or_default(),
        length.nanometres
    );
    length.rounded.then(|| {
        Diagnostic::notice("rounded-length", message).at(&node.place).hint("lengths are kept in whole nanometres")
    })
}

/// Whether a node is any kind of number, also a fraction in quotes.
pub(super) fn is_numeric(node: &Node) -> bool {
    matches!(node.value, Value::Whole(_) | Value::Decimal(_)) || number_in_quotes(node).is_some()
}
