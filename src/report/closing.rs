//! Rules in use, limits of the model, notices and provenance.

use std::path::Path;

use serde::Serialize;

use crate::device::Device;
use crate::device::EdgeRules;
use crate::device::Mixing;
use crate::device::Overlay;
use crate::device::joined_name;
use crate::diagnostic::Diagnostic;
use crate::diagnostic::Place;
use crate::quantity::Constant;
use crate::quantity::KLITZING;
use crate::quantity::KLITZING_1990;
use crate::quantity::Nanometres;
use crate::quantity::printed;
use crate::quantity::printed::as_given;
use crate::report::Provenance;
use crate::report::Sources;
use crate::report::Texts;
use crate::report::marks::marked;

/// Rules in use: sign, uncertainty, limit, mixing.
pub fn rules(sources: &Sources, texts: &Texts) -> Result<Vec<String>, Diagnostic> {
    let (device, comparison) = (sources.device, sources.comparison);
    let factor = sources.cooldown.map_or(1.0, |cooldown| cooldown.coverage_factor);
    let fields = RuleFields {
        limit: comparison.and_then(|c| c.limit_u).map(|limit| printed::decimals(limit, 1)),
        fixed: comparison.is_some_and(|comparison| comparison.limit_is_fixed),
        judged: comparison.map_or(0, |comparison| comparison.judged),
        coverage_factor: (factor != 1.0).then(|| as_given(factor)),
        mixing: mixing(sources),
        groups: device
            .groups
            .as_ref()
            .map(|groups| groups.steps.iter().map(|steps| group(steps)).collect::<Vec<_>>().join(", ")),
        between: device.groups.as_ref().map_or_else(String::new, |groups| mixing_word(&groups.between)),
        lengths: mixings(device).any(|mixing| mixing.has_length()),
        modes: device.points.iter().any(|point| point.modes.is_some()),
        backscatter: backscatter(device),
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

/// Program and version.
pub fn program(version: &str, texts: &Texts) -> Result<String, Diagnostic> {
    let lines = texts.lines("provenance.txt", &ProvenanceFields { version })?;
    Ok(lines.into_iter().next().unwrap_or_default())
}

/// The conventional value is named so that nobody wonders which one was used.
fn constants() -> String {
    let (now, then) = (printed::decimals(KLITZING.value, 10), printed::decimals(KLITZING_1990.value, 3));
    let Constant { symbol, unit, source, .. } = KLITZING;
    format!("{symbol} = {now} {unit}: {source}. Not used: {} = {then} {unit} of 1990", marked(KLITZING_1990.symbol))
}

#[derive(Serialize)]
struct RuleFields {
    limit: Option<String>,
    fixed: bool,
    judged: usize,
    coverage_factor: Option<String>,
    mixing: Vec<MixingFields>,
    /// `1 with 3, 2 with 4`, and the mixing between them.
    groups: Option<String>,
    between: String,
    /// Some rule is a length.
    lengths: bool,
    /// Edge modes stand in place of fillings at some point.
    modes: bool,
    backscatter: Option<String>,
}

#[derive(PartialEq, Serialize)]
struct MixingFields {
    points: Vec<String>,
    rim: String,
    interface: String,
    opposite: String,
    own: Vec<String>,
}

#[derive(Serialize)]
struct LimitFields {}

#[derive(Serialize)]
struct ProvenanceFields<'a> {
    version: &'a str,
}

/// All rules that points, gates and groups use.
fn mixings(device: &Device) -> impl Iterator<Item = &Mixing> {
    let filled = device.points.iter().filter(|point| point.modes.is_none());
    let of_points = filled.flat_map(|point| [&point.edge.rim, &point.edge.interface, &point.edge.opposite]);
    let own = device.overlays.iter().filter_map(|overlay| overlay.mixing.as_ref());
    of_points.chain(own).chain(device.groups.as_ref().map(|groups| &groups.between))
}

/// `1 with 3`.
fn group(steps: &[usize]) -> String {
    steps.iter().map(usize::to_string).collect::<Vec<_>>().join(" with ")
}

/// The lengths in use, `20 µm`.
fn backscatter(device: &Device) -> Option<String> {
    let modes = device.points.iter().filter_map(|point| point.modes);
    let mut lengths: Vec<Nanometres> = modes.filter_map(|modes| modes.backscatter).collect();
    lengths.sort();
    lengths.dedup();
    let texts: Vec<String> = lengths.iter().map(|length| format!("{} µm", as_given(length.to_um()))).collect();
    (!texts.is_empty()).then(|| texts.join(", "))
}

/// Gates and steps that state a rule for their own borders.
fn own(device: &Device) -> Vec<String> {
    let stated = |overlay: &Overlay| Some(format!("{} {}", overlay.name, mixing_word(overlay.mixing.as_ref()?)));
    device.overlays.iter().filter_map(stated).collect()
}

/// One entry per distinct rule, with the points that use it; no names where all use one.
fn mixing(sources: &Sources) -> Vec<MixingFields> {
    let mut rules: Vec<(&EdgeRules, Vec<String>)> = Vec::new();
    let points = sources.device.points.iter().flat_map(|point| sources.device.singles(point));
    for (part, _, point) in points.filter(|(_, _, point)| point.modes.is_none()) {
        let name = part.map_or_else(|| point.name.clone(), |part| joined_name(part, &point.name));
        match rules.iter_mut().find(|(rule, _)| **rule == point.edge) {
            Some((_, points)) => points.push(name),
            None => rules.push((&point.edge, vec![name])),
        }
    }
    let alone = rules.len() == 1;
    let fields = |(rule, points): (&EdgeRules, Vec<String>)| MixingFields {
        points: if alone { Vec::new() } else { points },
        rim: mixing_word(&rule.rim),
        interface: mixing_word(&rule.interface),
        opposite: mixing_word(&rule.opposite),
        own: own(sources.device),
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
