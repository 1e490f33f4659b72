//! Rules in use, limits of the model, notices and provenance.

use std::path::Path;

use serde::Serialize;

use crate::device::EdgeRules;
use crate::device::Mixing;
use crate::diagnostic::Diagnostic;
use crate::diagnostic::Place;
use crate::quantity::Constant;
use crate::quantity::KLITZING;
use crate::quantity::KLITZING_1990;
use crate::quantity::printed;
use crate::quantity::printed::as_given;
use crate::report::Provenance;
use crate::report::Sources;
use crate::report::Texts;

/// Rules in use: sign, uncertainty, limit, mixing.
pub fn rules(sources: &Sources, texts: &Texts) -> Result<Vec<String>, Diagnostic> {
    let comparison = sources.comparison;
    let factor = sources.cooldown.map_or(1.0, |cooldown| cooldown.coverage_factor);
    let fields = RuleFields {
        limit: comparison.and_then(|c| c.limit_u).map(|limit| printed::decimals(limit, 1)),
        fixed: comparison.is_some_and(|comparison| comparison.limit_is_fixed),
        judged: comparison.map_or(0, |comparison| comparison.judged),
        coverage_factor: (factor != 1.0).then(|| as_given(factor)),
        mixing: mixing(sources),
    };
    texts.lines("rules.txt", &fields)
}

/// Where the model holds.
pub fn limits(texts: &Texts) -> Result<Vec<String>, Diagnostic> {
    texts.lines("limits.txt", &LimitFields {})
}

/// Every notice with its place and advice. Folders are left out of names and of the order, so that a sheet does not
/// depend on where its inputs lay.
pub fn notices(notices: &[Diagnostic]) -> Vec<String> {
    ordered(notices).into_iter().map(notice_line).collect()
}

/// Notices by the file without its folder, the place in it, and what they say.
pub fn ordered(notices: &[Diagnostic]) -> Vec<&Diagnostic> {
    let mut ordered: Vec<&Diagnostic> = notices.iter().collect();
    ordered.sort_by_key(|notice| (notice.place.as_ref().map(|place| (file_name(place), place.start)), &notice.message));
    ordered
}

fn notice_line(notice: &Diagnostic) -> String {
    let at = |place: &Place| format!("{}:{}:{}: ", file_name(place), place.line(), place.column());
    let place = notice.place.as_ref().map(at).unwrap_or_default();
    let hint = notice.hint.as_ref().map(|hint| format!(" ({hint})")).unwrap_or_default();
    format!("{place}{}{hint}", notice.message)
}

/// The name of a file without its folder.
pub fn file_name(place: &Place) -> &str {
    let name = &place.source.name;
    Path::new(name).file_name().and_then(|name| name.to_str()).unwrap_or(name)
}

/// Inputs, program, constants, options.
pub fn provenance(sources: &Sources, texts: &Texts) -> Result<Provenance, Diagnostic> {
    let mut lines = texts.lines("provenance.txt", &ProvenanceFields { version: sources.program_version })?.into_iter();
    Ok(Provenance {
        inputs: sources.inputs.clone(),
        program: lines.next().unwrap_or_default(),
        constants: vec![constants()],
        options: sources.options.clone(),
        repeat: lines.next().unwrap_or_default(),
    })
}

/// The conventional value is named so that nobody wonders which one was used.
fn constants() -> String {
    let (now, then) = (printed::decimals(KLITZING.value, 10), printed::decimals(KLITZING_1990.value, 3));
    let Constant { symbol, unit, source, .. } = KLITZING;
    format!("{symbol} = {now} {unit}: {source}. Not used: {} = {then} {unit} of 1990", KLITZING_1990.symbol)
}

#[derive(Serialize)]
struct RuleFields {
    limit: Option<String>,
    fixed: bool,
    judged: usize,
    coverage_factor: Option<String>,
    mixing: Vec<MixingFields>,
}

#[derive(PartialEq, Serialize)]
struct MixingFields {
    points: Vec<String>,
    rim: String,
    interface: String,
    opposite: String,
}

#[derive(Serialize)]
struct LimitFields {}

#[derive(Serialize)]
struct ProvenanceFields<'a> {
    version: &'a str,
}

/// One entry per distinct rule, with the points that use it; no names where all use one.
fn mixing(sources: &Sources) -> Vec<MixingFields> {
    let mut rules: Vec<(&EdgeRules, Vec<String>)> = Vec::new();
    for point in &sources.device.points {
        match rules.iter_mut().find(|(rule, _)| **rule == point.edge) {
            Some((_, points)) => points.push(point.name.clone()),
            None => rules.push((&point.edge, vec![point.name.clone()])),
        }
    }
    let alone = rules.len() == 1;
    let fields = |(rule, points): (&EdgeRules, Vec<String>)| MixingFields {
        points: if alone { Vec::new() } else { points },
        rim: mixing_word(&rule.rim),
        interface: mixing_word(&rule.interface),
        opposite: mixing_word(&rule.opposite),
    };
    rules.into_iter().map(fields).collect()
}

fn mixing_word(mixing: &Mixing) -> String {
    match mixing {
        Mixing::None => "none".to_string(),
        Mixing::Full => "full".to_string(),
        Mixing::Over(length) => format!("over ℓ = {} µm", printed::as_given(length.to_um())),
    }
}
