//! `[[point]]`: operating points.

use crate::diagnostic::Diagnostic;
use crate::diagnostic::Findings;
use crate::number::Rational;
use crate::syntax::Entry;
use crate::syntax::Table;
use crate::syntax::quoted;

use crate::device::OperatingPoint;
use crate::device::OverlayIdx;
use crate::device::names::doubled;
use crate::device::parse::Scope;
use crate::device::parse::filling;
use crate::device::parse::filling::Between;
use crate::device::parse::filling::Stated;
use crate::device::parse::mixing;
use crate::device::parse::modes;
use crate::device::parse::noted;

pub(super) fn read(root: &Table, scope: &Scope<'_>, findings: &mut Findings) -> Option<Vec<OperatingPoint>> {
    let tables = root.tables("point");
    findings.extend(doubled("operating point", "name", &tables));
    let points: Vec<Option<OperatingPoint>> = tables.iter().map(|table| point(root, table, scope, findings)).collect();
    points.into_iter().collect()
}

fn point(root: &Table, table: &Table, scope: &Scope<'_>, findings: &mut Findings) -> Option<OperatingPoint> {
    findings.extend(beside_modes(table));
    let modes = modes::read(table, findings);
    let bulk = bulk(table, scope, findings);
    let fillings = fillings(table, scope, findings);
    let gates_v = gates(table, scope, findings);
    findings.extend(steps_without_filling(table, &fillings, (root, scope)));
    let edge = mixing::edge(root);
    Some(OperatingPoint {
        name: table.text("name")?,
        field_t: table.number("field_T"),
        bulk: bulk.or(modes.map(|_| Rational::ZERO))?,
        fillings,
        gates_v,
        edge: mixing::overridden(table, &edge),
        modes,
        parts: Vec::new(),
        place: table.place.clone(),
    })
}

/// Edge modes stand in place of fillings, and nothing joins them between contacts.
fn beside_modes(table: &Table) -> Vec<Diagnostic> {
    if table.node("modes").is_none() {
        return Vec::new();
    }
    let stands = |key: &&str| table.node(key).is_some();
    let fault = |key: &str, message: String, hint: &str| {
        Diagnostic::fault("contradiction", message).at(table.key_place(key)).hint(hint)
    };
    let fillings = ["bulk", "bulk_partial", "fillings"].into_iter().filter(stands).map(|key| {
        let message = format!("`{key}` stands beside `modes`, which take its place");
        fault(key, message, "keep `modes`, or `bulk` with `fillings`")
    });
    let mixings = ["mixing", "interface_mixing", "opposite_mixing"].into_iter().filter(stands).map(|key| {
        let message = format!("`{key}` stands beside `modes`, which are joined at contacts only");
        fault(key, message, "leave it out; `backscatter_um` joins one mode each way along the rim")
    });
    fillings.chain(mixings).collect()
}

fn bulk(table: &Table, scope: &Scope<'_>, findings: &mut Findings) -> Option<Rational> {
    if table.lacks("bulk") && table.lacks("modes") {
        let fault = Diagnostic::fault("missing-key", "[[point]] has no `bulk`").at(&table.place);
        findings.push(fault.hint("add `bulk`, the filling of the ungated mesa"));
    }
    let written = table.filling("bulk")?;
    let between = if table.boolean("bulk_partial") == Some(true) { Between::Allowed } else { Between::Refused };
    let stated = Stated { what: "`bulk`", written: &written, between };
    findings.extend(filling::judge(&stated, scope.ladder, table.place_of("bulk")));
    Some(written.value)
}

fn fillings(table: &Table, scope: &Scope<'_>, findings: &mut Findings) -> Vec<(Vec<OverlayIdx>, Rational)> {
    let mut found: Vec<(Vec<OverlayIdx>, Rational)> = Vec::new();
    for entry in table.open_entries("fillings") {
        let Some(cover) = cover(entry, scope, findings) else { continue };
        let Some(written) = entry.node.filling() else { continue };
        let what = format!("the filling of {}", quoted(&entry.key));
        let stated = Stated { what: &what, written: &written, between: Between::Allowed };
        findings.extend(filling::judge(&stated, scope.ladder, &entry.node.place));
        if found.iter().any(|(earlier, _)| *earlier == cover) {
            findings.push(doubled_entry(entry));
        }
        found.push((cover, written.value));
    }
    found
}

fn doubled_entry(entry: &Entry) -> Diagnostic {
    Diagnostic::fault("doubled-name", format!("{} names an overlap that has its filling already", quoted(&entry.key)))
        .at(&entry.key_place)
        .hint("the order of names makes no difference; keep one entry")
}

/// The gates and steps that a key such as `TG+BG` names, sorted.
fn cover(entry: &Entry, scope: &Scope<'_>, findings: &mut Findings) -> Option<Vec<OverlayIdx>> {
    let parts = entry.key.split('+').map(str::trim);
    let found: Vec<Option<usize>> =
        parts.map(|name| noted(scope.overlays.find(name, &entry.key_place), findings)).collect();
    let mut cover: Vec<OverlayIdx> = found.into_iter().map(|at| at.map(OverlayIdx)).collect::<Option<_>>()?;
    cover.sort();
    if cover.windows(2).any(|pair| pair[0] == pair[1]) {
        findings.push(
            Diagnostic::fault("doubled-name", format!("{} names a gate or step twice", quoted(&entry.key)))
                .at(&entry.key_place)
                .hint("name each once"),
        );
        return None;
    }
    Some(cover)
}

/// A step has no voltage that could leave it at the bulk filling, so its filling must be said.
fn steps_without_filling(
    table: &Table,
    fillings: &[(Vec<OverlayIdx>, Rational)],
    (root, scope): (&Table, &Scope<'_>),
) -> Vec<Diagnostic> {
    if !table.lacks("modes") || table.entries.iter().all(|entry| entry.key != "fillings") && !table.lacks("fillings") {
        return Vec::new();
    }
    let refused = |name: &str| table.table("fillings").is_some_and(|inner| !inner.lacks(name));
    let steps = root.tables("step").into_iter().enumerate();
    let named = steps.filter_map(|(at, step)| Some((OverlayIdx(scope.gates + at), step.text("name")?)));
    let absent = named.filter(|(at, name)| !fillings.iter().any(|(cover, _)| cover == &[*at]) && !refused(name));
    let point = table.text_or_empty("name");
    let fault = |name: String| {
        Diagnostic::fault(
            "step-without-filling",
            format!("the step {} has no filling at the point {}", quoted(&name), quoted(&point)),
        )
        .at(&table.place)
        .hint(format!("add it to `fillings`: {{ \"{name}\" = … }}"))
    };
    absent.map(|(_, name)| fault(name)).collect()
}

fn gates(table: &Table, scope: &Scope<'_>, findings: &mut Findings) -> Vec<(OverlayIdx, f64)> {
    let mut found = Vec::new();
    for entry in table.open_entries("gates_V") {
        let Some(at) = noted(scope.overlays.find(&entry.key, &entry.key_place), findings) else { continue };
        if at >= scope.gates {
            findings.push(voltage_on_step(entry));
        }
        found.extend(entry.node.number().map(|volts| (OverlayIdx(at), volts)));
    }
    found
}

fn voltage_on_step(entry: &Entry) -> Diagnostic {
    Diagnostic::fault("no-gate", format!("{} is a step and has no voltage", quoted(&entry.key)))
        .at(&entry.key_place)
        .hint("`gates_V` takes gates alone")
}
