//! Lists: names, corners, shares, ladders.

use crate::diagnostic::Diagnostic;
use crate::number::Rational;

use crate::syntax::Node;
use crate::syntax::Value;
use crate::syntax::keys::Range;
use crate::syntax::kind::number;
use crate::syntax::kind::word;
use crate::syntax::kind::wrong_kind;
use crate::syntax::quoted;

/// Judges every value of a list.
pub(super) fn each(key: &str, node: &Node, judge: fn(&str, &Node) -> Vec<Diagnostic>) -> Vec<Diagnostic> {
    match node.list() {
        Some([]) => vec![empty(key, node)],
        Some(list) => list.iter().flat_map(|item| judge(key, item)).collect(),
        None => vec![wrong_kind(key, "a list", node).hint("write the values in square brackets")],
    }
}

pub(super) fn shares(key: &str, node: &Node) -> Vec<Diagnostic> {
    if number::is_numeric(node) { number::share(key, node) } else { each(key, node, number::share) }
}

pub(super) fn fillings(key: &str, node: &Node) -> Vec<Diagnostic> {
    each(key, node, number::filling)
}

/// Ladder steps by their number, from 1 at the outermost; each at most once.
pub(super) fn groups(key: &str, node: &Node) -> Vec<Diagnostic> {
    let mut found = each(key, node, |key, group| each(key, group, |key, step| number::count(1, key, step)));
    let steps = node.list().unwrap_or_default().iter().flat_map(|group| group.list().unwrap_or_default());
    let mut seen = Vec::new();
    for (step, number) in steps.filter_map(|step| Some((step, step.count()?))) {
        if seen.contains(&number) {
            let message = format!("{} holds step {number} twice", quoted(key));
            found.push(
                Diagnostic::fault("doubled-step", message).at(&step.place).hint("a step is in one group at most"),
            );
        }
        seen.push(number);
    }
    found
}

/// A named ladder or a list of fillings in rising order.
pub(super) fn ladder(words: &[&str], key: &str, node: &Node) -> Vec<Diagnostic> {
    let Value::List(list) = &node.value else { return word::one_of(words, key, node) };
    let found = fillings(key, node);
    if !found.is_empty() {
        return found;
    }
    let steps: Vec<Rational> = list.iter().filter_map(Node::exact).collect();
    match steps.windows(2).position(|pair| pair[0] >= pair[1]) {
        None => Vec::new(),
        Some(at) => {
            let message = format!("{} does not rise: {} stands before {}", quoted(key), steps[at], steps[at + 1]);
            let place = &list.get(at + 1).unwrap_or(node).place;
            vec![Diagnostic::fault("order", message).at(place).hint("write each filling once, the lowest first")]
        }
    }
}

pub(super) fn limits(key: &str, node: &Node) -> Vec<Diagnostic> {
    let Some([low, high]) = node.list() else {
        return vec![wrong_kind(key, "two numbers", node).hint("write the lower and the higher one: [-0.8, 0.2]")];
    };
    let found: Vec<Diagnostic> =
        [low, high].into_iter().flat_map(|item| number::number(Range::Any, key, item)).collect();
    if !found.is_empty() || low.number() < high.number() {
        return found;
    }
    vec![
        Diagnostic::fault("order", format!("{} does not rise", quoted(key)))
            .at(&node.place)
            .hint("write the lower one first"),
    ]
}

pub(super) fn name_pair(key: &str, node: &Node) -> Vec<Diagnostic> {
    match node.list() {
        Some([_, _]) => names(key, node),
        _ => vec![wrong_kind(key, "two names of contacts", node).hint("write them in a list: [\"1\", \"4\"]")],
    }
}

pub(super) fn name_list(key: &str, node: &Node) -> Vec<Diagnostic> {
    match node.list() {
        Some([_, _, ..]) => names(key, node),
        _ => vec![wrong_kind(key, "at least two names of contacts", node).hint("write them in a list: [\"2\", \"6\"]")],
    }
}

fn names(key: &str, node: &Node) -> Vec<Diagnostic> {
    let mut found = each(key, node, word::name);
    let list = node.list().unwrap_or_default();
    for (at, item) in list.iter().enumerate() {
        let Some(name) = item.text() else { continue };
        if list[..at].iter().any(|earlier| earlier.text() == Some(name)) {
            let message = format!("{} names {} twice", quoted(key), quoted(name));
            found.push(Diagnostic::fault("same-contact", message).at(&item.place).hint("name different contacts"));
        }
    }
    found
}

pub(super) fn corner(key: &str, node: &Node) -> Vec<Diagnostic> {
    match node.list() {
        Some([x, y]) => [x, y].into_iter().flat_map(|item| number::length(Range::Any, key, item)).collect(),
        _ => vec![wrong_kind(key, "corners [x, y]", node).hint("write two numbers in square brackets")],
    }
}

pub(super) fn outline(key: &str, node: &Node) -> Vec<Diagnostic> {
    match node.list() {
        Some([_, _, _, ..]) => each(key, node, corner),
        _ => {
            let wanted = "at least three corners";
            vec![wrong_kind(key, wanted, node).hint("write them in order: [[0, 0], [10, 0], [10, 5]]")]
        }
    }
}

fn empty(key: &str, node: &Node) -> Diagnostic {
    Diagnostic::fault("empty-list", format!("{} is an empty list", quoted(key)))
        .at(&node.place)
        .hint("write at least one value, or leave the key out")
}
