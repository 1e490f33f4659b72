//! Expected readings and isolating readings as tables for a terminal, at most 100 columns wide.

use std::collections::BTreeSet;

use crate::conductance::Conductance;
use crate::cooldown::Cooldown;
use crate::device::Device;
use crate::device::Drive;
use crate::device::OperatingPoint;
use crate::diagnostic::Diagnostic;
use crate::diagnostic::Faults;
use crate::quantity::KLITZING;
use crate::quantity::Polarity;
use crate::quantity::printed;
use crate::report::SolvedPoint;
use crate::report::identity::point_line;
use crate::report::names;
use crate::report::names::leads;
use crate::report::names::plain_name;
use crate::report::names::side;
use crate::report::state_words;
use crate::resistance::ClosedForms;
use crate::resistance::Expected;
use crate::resistance::Isolating;
use crate::resistance::ReadingState;

/// Columns of a terminal.
pub(super) const WIDTH: usize = 100;

/// One table per operating point, both polarities side by side; `solved` holds each point at `+`, then at `−`.
pub fn expected_table(device: &Device, cooldown: Option<&Cooldown>, solved: &[SolvedPoint]) -> String {
    let mut text = String::new();
    for both in solved.chunks(2) {
        if let [toward, away] = both {
            text.push_str(&point_table(device, cooldown, toward, away));
        }
    }
    text.extend(names::wires(device).map(|wires| wrapped(&format!("Wires: {wires}."), WIDTH).join("\n") + "\n"));
    text.push_str(&closing(device, cooldown));
    let formless = solved.iter().filter(|solved| solved.prediction.expected.iter().any(is_formless));
    let reasons: BTreeSet<&str> = formless.map(reason).collect();
    reasons.into_iter().for_each(|reason| text.push_str(reason));
    text
}

/// Why a reading may have no closed form.
const FORMLESS: &str = "\u{2013}: no closed form; within this ordering of the fillings the reading is no sum of \
                        a/\u{3bd}.\n";

/// Why the readings of a point that have no closed form have none.
fn reason(solved: &SolvedPoint) -> &'static str {
    match (solved.point.modes, &solved.prediction.conductance) {
        (Some(_), Conductance::Exact(_)) => "\u{2013}: no closed form; edge modes have no fillings.\n",
        (_, conductance) if conductance.links().iter().any(|link| link.resistance > 0.0) => {
            "\u{2013}: no closed form; the resistance of wires is in the reading.\n"
        }
        (_, Conductance::Float(_)) => "\u{2013}: no closed form; the reading depends on path lengths.\n",
        _ => FORMLESS,
    }
}

fn is_formless(expected: &Expected) -> bool {
    expected.h_per_e2.is_some() && expected.formula.is_none()
}

pub(super) fn closing(device: &Device, cooldown: Option<&Cooldown>) -> String {
    let klitzing = printed::significant(KLITZING.value, 12);
    let polarity = match device.driven_by {
        Drive::Field => "Field +: out of the chip face, toward you. ",
        Drive::Magnetisation => "Magnetisation +: out of the chip face, toward you.\n",
    };
    let meters = match cooldown {
        Some(_) => "\"shows\": what the first meter shows behind this cooldown's lines.\n",
        None => "",
    };
    format!(
        "{meters}{polarity}R_ij,kl = (V_k - V_l)/I, current in at i and out at j.\n\
         h/e\u{b2} = {klitzing} \u{3a9} (exact h and e of the SI, 2019).\n"
    )
}

fn point_table(device: &Device, cooldown: Option<&Cooldown>, toward: &SolvedPoint, away: &SolvedPoint) -> String {
    let shows = cooldown.is_some();
    let head = if shows { ["h/e\u{b2}", "k\u{3a9}", "shows"].as_slice() } else { ["h/e\u{b2}", "k\u{3a9}"].as_slice() };
    let heads: Vec<String> = head.iter().chain(head).map(|word| (*word).to_owned()).collect();
    let mut table = vec![("reading".to_owned(), heads, "closed form, + | \u{2212}".to_owned())];
    let pairs = toward.prediction.expected.iter().zip(&away.prediction.expected).zip(&toward.names);
    table.extend(pairs.map(|((plus, minus), name)| reading_row(device, name.as_deref(), (plus, minus), shows)));
    let driver = names::driver(device);
    let columns = format!("the first columns hold for the {driver} toward you (+), the next for the {driver} away (−)");
    format!("{}\n{columns}\n{}\n\n", heading(device, toward.point), aligned(&table).join("\n"))
}

pub(super) fn heading(device: &Device, point: &OperatingPoint) -> String {
    wrapped(&point_line(device, point), WIDTH).join("\n")
}

type TableLine = (String, Vec<String>, String);

fn reading_row(device: &Device, name: Option<&str>, (plus, minus): (&Expected, &Expected), shows: bool) -> TableLine {
    let label = plain_name(device, &plus.reading);
    let label = name.map_or(label.clone(), |name| format!("{label} {name}"));
    let cells = [plus, minus].into_iter().flat_map(|expected| cells(expected, shows)).collect();
    let form = match (&plus.formula, &minus.formula) {
        (Some(plus), Some(minus)) if plus == minus => plus.clone(),
        (None, None) if plus.state != ReadingState::Fine && minus.state != ReadingState::Fine => String::new(),
        (plus, minus) => {
            let side = |form: &Option<String>| form.clone().unwrap_or_else(|| "\u{2013}".to_owned());
            format!("{} | {}", side(plus), side(minus))
        }
    };
    (label, cells, form)
}

fn cells(expected: &Expected, shows: bool) -> Vec<String> {
    if expected.state != ReadingState::Fine {
        let mut cells = vec![state_words(expected.state).to_owned(), "\u{2013}".to_owned()];
        cells.extend(shows.then(|| "\u{2013}".to_owned()));
        return cells;
    }
    let exact = expected.h_per_e2.map(|value| match &expected.exact {
        Some(exact) => printed::fraction(exact),
        None => printed::h_per_e2(value),
    });
    let exact = exact.unwrap_or_default();
    let kilo_ohm = |ohm: Option<f64>| ohm.map_or("\u{2013}".to_owned(), printed::kilo_ohm);
    let mut cells = vec![exact, kilo_ohm(expected.ohm)];
    cells.extend(shows.then(|| kilo_ohm(expected.shown_ohm)));
    cells
}

/// Lines of a table: names to the left, numbers to the right; a closed form that finds no room goes onto a line of its
/// own.
fn aligned(table: &[TableLine]) -> Vec<String> {
    let columns = table.iter().map(|(_, cells, _)| cells.len()).max().unwrap_or(0);
    let wide = |at: usize| table.iter().filter_map(|(_, cells, _)| cells.get(at)).map(|c| c.chars().count()).max();
    let widths: Vec<usize> = (0..columns).map(|at| wide(at).unwrap_or(0)).collect();
    let numbers: usize = widths.iter().map(|width| width + 2).sum();
    let longest = table.iter().map(|(name, _, _)| name.chars().count()).max().unwrap_or(0);
    let first = longest.min(WIDTH.saturating_sub(numbers));
    table.iter().flat_map(|line| table_line(line, first, &widths)).collect()
}

fn table_line((name, cells, form): &TableLine, first: usize, widths: &[usize]) -> Vec<String> {
    let mut lines = Vec::new();
    let mut head = name.clone();
    if head.chars().count() > first {
        lines.push(std::mem::take(&mut head));
    }
    let mut line = format!("{head:<first$}");
    cells.iter().zip(widths).for_each(|(cell, width)| line.push_str(&format!("  {cell:>width$}")));
    match line.chars().count() + 3 + form.chars().count() {
        _ if form.is_empty() => lines.push(line),
        room if room <= WIDTH => lines.push(format!("{line}   {form}")),
        _ => {
            lines.push(line);
            lines.extend(wrapped(form, WIDTH - 4).into_iter().map(|part| format!("    {part}")));
        }
    }
    lines
}

pub(super) fn wrapped(text: &str, width: usize) -> Vec<String> {
    let mut lines = vec![String::new()];
    for word in text.split(' ') {
        let last =
            lines.last_mut().filter(|line| line.is_empty() || line.chars().count() + 1 + word.chars().count() <= width);
        match last {
            Some(line) if line.is_empty() => line.push_str(word),
            Some(line) => line.push_str(&format!(" {word}")),
            None => lines.push(word.to_owned()),
        }
    }
    lines
}

/// The readings that show a region alone, at one point and polarity.
#[derive(Clone, Debug)]
pub struct IsolatedPoint<'a> {
    point: &'a OperatingPoint,
    polarity: Polarity,
    /// None where the region has no filling of its own here.
    found: Option<Vec<(Isolating, String)>>,
}

impl<'a> IsolatedPoint<'a> {
    /// Best first, each with its closed form in words.
    pub fn new(
        point: &'a OperatingPoint,
        polarity: Polarity,
        forms: &ClosedForms,
        found: Option<Vec<Isolating>>,
    ) -> Self {
        let words = |entry: Isolating| {
            let form = forms.words(&entry.form);
            (entry, form)
        };
        let found = found.map(|list| list.into_iter().map(words).collect());
        Self { point, polarity, found }
    }
}

/// The region of a name, if it has a filling of its own.
pub fn region_called(forms: &ClosedForms, name: &str) -> Option<usize> {
    let named = |known: &str| known.split(", ").any(|part| part == name) || known == name;
    forms.regions().iter().position(|region| named(&region.name))
}

/// Whether the region that was asked for has a filling of its own at any point, or is a part of a device that has edge
/// modes in place of fillings.
pub fn is_region(device: &Device, lists: &[IsolatedPoint], name: &str) -> bool {
    let modes = device.points.iter().any(|point| point.modes.is_some());
    let named = name == BULK || device.overlays.iter().any(|overlay| overlay.name == name);
    lists.iter().any(|list| list.found.is_some()) || modes && named
}

/// The ungated mesa, as closed forms call it.
const BULK: &str = "bulk";

/// No point has a region of this name; `known` are those that there are.
pub fn unknown_region(name: &str, known: &BTreeSet<String>) -> Faults {
    let known: Vec<&str> = known.iter().map(String::as_str).collect();
    let fault = Diagnostic::fault("unknown-region", format!("no region with a filling of its own is called `{name}`"));
    Faults(vec![fault.hint(format!("the regions are {}", known.join(", ")))])
}

/// How many readings are shown where not all are asked for.
const BEST: usize = 3;

/// One block per point: for each polarity the rule to copy into a logbook and the next best readings.
pub fn isolated_table(device: &Device, lists: &[IsolatedPoint], region: &str, all: bool) -> String {
    let mut text = String::new();
    for both in lists.chunks(2) {
        let Some(first) = both.first() else { continue };
        text.push_str(&format!("{}\n", heading(device, first.point)));
        if both.iter().all(|list| list.found.is_none()) {
            text.push_str(&match first.point.modes {
                Some(_) => format!("{region} has no filling at this point: edge modes follow the rim alone\n\n"),
                None => format!("{region} has no filling of its own at this point\n\n"),
            });
            continue;
        }
        text.push_str(&rules(device, both, region));
        for list in both {
            text.push_str(&isolated_rows(device, list, if all { usize::MAX } else { BEST }));
        }
        text.push('\n');
    }
    text
}

/// The rules of both polarities on one line, or on lines of their own where names are long.
fn rules(device: &Device, both: &[IsolatedPoint], region: &str) -> String {
    let rules: Vec<String> = both.iter().map(|list| rule(device, list)).collect();
    let line = format!("{region} alone: {}\n", rules.join("; "));
    if line.chars().count() <= WIDTH {
        return line;
    }
    let below = rules.iter().flat_map(|rule| wrapped(rule, WIDTH - 4)).map(|part| format!("    {part}\n"));
    format!("{region} alone:\n{}", below.collect::<String>())
}

fn rule(device: &Device, list: &IsolatedPoint) -> String {
    let best = list.found.iter().flatten().next().map(|(entry, _)| leads(device, &entry.reading));
    format!("{}: {}", side(device, list.polarity), best.unwrap_or_else(|| "no reading shows it alone".to_owned()))
}

fn isolated_rows(device: &Device, list: &IsolatedPoint, most: usize) -> String {
    let line = |(entry, form): &(Isolating, String)| -> TableLine {
        let ohm = printed::kilo_ohm(entry.exact.to_f64() * KLITZING.value);
        (format!("  {}", leads(device, &entry.reading)), vec![printed::fraction(&entry.exact), ohm], form.clone())
    };
    let found = list.found.as_deref().unwrap_or_default();
    if found.is_empty() {
        return String::new();
    }
    let table: Vec<TableLine> = found.iter().take(most).map(line).collect();
    let left = found.len().saturating_sub(most);
    let more = if left > 0 { format!("  and {left} more (--all)\n") } else { String::new() };
    format!("{} ({})\n{}\n{more}", side(device, list.polarity), list.polarity.sign(), aligned(&table).join("\n"))
}
