//! Where a contact sits: which keys place it on which shape of mesa, one function per rule.

use crate::diagnostic::Diagnostic;
use crate::diagnostic::Findings;
use crate::quantity::Nanometres;
use crate::syntax::Table;

use crate::device::Arc;
use crate::device::Circle;
use crate::device::ContactShape;
use crate::device::Edge;
use crate::device::parse::contact::to_corners;

/// How contacts are placed on the mesas of some shapes.
struct Way {
    shapes: &'static [&'static str],
    /// Keys beside `outline_um`, which places a contact on any mesa.
    keys: &'static [&'static str],
    /// Words that `edge` takes there.
    edges: &'static [&'static str],
    /// What to write.
    advice: &'static str,
}

const WAYS: [Way; 3] = [
    Way {
        shapes: &["bar", "cross"],
        keys: &["edge", "x_um", "y_um", "width_um", "arm_um"],
        edges: &["left", "top", "right", "bottom"],
        advice: "write `edge` as left, top, right or bottom, with `x_um` or `y_um` and `width_um` where it does not take \
                 the whole edge; or its corners in `outline_um`",
    },
    Way {
        shapes: &["ring"],
        keys: &["edge", "angle_deg", "width_um"],
        edges: &["outer", "inner"],
        advice: "write `edge` as outer or inner, with `angle_deg` and `width_um` where it does not take the whole rim; or \
                 its corners in `outline_um`",
    },
    Way {
        shapes: &["outline"],
        keys: &["at_um", "width_um"],
        edges: &[],
        advice: "write `at_um = [x, y]`, a point on the rim, with `width_um`; or its corners in `outline_um`",
    },
];

/// Every key that says where a contact lies, beside `outline_um`.
const KEYS: [&str; 7] = ["edge", "x_um", "y_um", "width_um", "arm_um", "at_um", "angle_deg"];

/// The place of a contact on a mesa of a shape; none where the shape is not known or a fault was found.
pub(super) fn read(table: &Table, mesa: Option<&str>, findings: &mut Findings) -> Option<ContactShape> {
    let faults = match mesa.and_then(|mesa| Some((WAYS.iter().find(|way| way.shapes.contains(&mesa))?, mesa))) {
        Some((way, mesa)) => faults(table, way, mesa),
        None => twice_placed(table),
    };
    let clean = faults.is_empty();
    findings.extend(faults);
    if let Some(corners) = table.outline("outline_um") {
        return Some(ContactShape::Outline(to_corners(corners)));
    }
    if !clean {
        return None;
    }
    match mesa? {
        "bar" | "cross" => on_edge(table),
        "ring" => on_circle(table),
        _ => on_rim(table),
    }
}

fn faults(table: &Table, way: &Way, mesa: &str) -> Vec<Diagnostic> {
    let mut found = other_keys(table, way, mesa);
    found.extend(other_edge(table, way, mesa));
    found.extend(twice_placed(table));
    if found.is_empty() && table.node("outline_um").is_none() {
        found.extend(nowhere(table, way));
    }
    if found.is_empty() && table.node("outline_um").is_none() {
        found.extend(wrong_direction(table));
        found.extend(half_placed(table));
    }
    found
}

/// Keys that place a contact on a mesa of another shape.
fn other_keys(table: &Table, way: &Way, mesa: &str) -> Vec<Diagnostic> {
    let present = KEYS.into_iter().filter(|key| table.node(key).is_some() && !way.keys.contains(key));
    present.map(|key| other_key(table, key, (way, mesa))).collect()
}

fn other_key(table: &Table, key: &str, (way, mesa): (&Way, &str)) -> Diagnostic {
    let owners = WAYS.iter().filter(|other| other.keys.contains(&key)).flat_map(|other| other.shapes);
    let owners: Vec<&str> = owners.copied().collect();
    let message =
        format!("`{key}` places a contact on a mesa of shape {}, and this one is of shape {mesa}", owners.join(" or "));
    let hint = match key {
        "arm_um" => "draw the arm as a part of the mesa's outline, and the contact at its end",
        _ => way.advice,
    };
    Diagnostic::fault("other-shape", message).at(table.key_place(key)).hint(hint)
}

fn other_edge(table: &Table, way: &Way, mesa: &str) -> Option<Diagnostic> {
    let edge = table.text("edge").filter(|edge| way.keys.contains(&"edge") && !way.edges.contains(&edge.as_str()))?;
    let owner = WAYS.iter().find(|other| other.edges.contains(&edge.as_str()))?;
    let message = format!(
        "`edge = \"{edge}\"` belongs to a mesa of shape {}, and this one is of shape {mesa}",
        owner.shapes.join(" or ")
    );
    let fault = Diagnostic::fault("other-shape", message).at(table.place_of("edge"));
    Some(fault.hint(format!("a mesa of shape {mesa} has the edges {}", way.edges.join(", "))))
}

/// An outline and another key that places the contact.
fn twice_placed(table: &Table) -> Vec<Diagnostic> {
    let both = KEYS.into_iter().filter(|key| table.node("outline_um").is_some() && table.node(key).is_some());
    let fault = |key: &str| {
        Diagnostic::fault("contradiction", format!("`{key}` and `outline_um` both say where the contact lies"))
            .at(table.key_place(key))
            .hint("keep one of the two")
    };
    both.map(fault).collect()
}

fn nowhere(table: &Table, way: &Way) -> Option<Diagnostic> {
    let main = way.keys.first()?;
    (table.lacks("outline_um") && table.lacks(main)).then(|| {
        let message = format!("a contact has neither `{main}` nor `outline_um`");
        Diagnostic::fault("missing-key", message).at(&table.place).hint(way.advice)
    })
}

/// The key of the centre along an edge, and the one that would be across it.
fn directions(edge: &str) -> (&'static str, &'static str) {
    if matches!(edge, "left" | "right") { ("y_um", "x_um") } else { ("x_um", "y_um") }
}

fn wrong_direction(table: &Table) -> Option<Diagnostic> {
    let edge = table.text("edge")?;
    let (along, across) = directions(&edge);
    table.node(across)?;
    let message = format!("`{across}` cannot place a contact along the {edge} edge");
    let fault = Diagnostic::fault("wrong-direction", message).at(table.key_place(across));
    Some(fault.hint(format!("write `{along}`, its centre")))
}

/// A centre without a width, or a width without a centre.
fn half_placed(table: &Table) -> Option<Diagnostic> {
    let edge = table.text("edge");
    let centre = match edge.as_deref() {
        Some("outer" | "inner") => "angle_deg",
        Some(edge) => directions(edge).0,
        None => "at_um",
    };
    let (given, absent) = match (table.node(centre).is_some(), table.node("width_um").is_some()) {
        (true, false) => (centre, "width_um"),
        (false, true) => ("width_um", centre),
        _ => return None,
    };
    // A centre under the key of the other direction has been said already.
    let meant = absent == centre && table.node(directions(edge.as_deref()?).1).is_some();
    let hint = match edge.as_deref() {
        Some("outer" | "inner") => format!("add `{absent}`, or leave both out where the contact takes the whole rim"),
        Some(_) => format!("add `{absent}`, or leave both out where the contact takes the whole edge"),
        None => format!("add `{absent}`, its length along the rim"),
    };
    (table.lacks(absent) && !meant).then(|| {
        let fault = Diagnostic::fault("missing-key", format!("a contact with `{given}` has no `{absent}`"));
        fault.at(table.key_place(given)).hint(hint)
    })
}

fn on_edge(table: &Table) -> Option<ContactShape> {
    let word = table.text("edge")?;
    let edge = match word.as_str() {
        "left" => Edge::Left,
        "right" => Edge::Right,
        "top" => Edge::Top,
        _ => Edge::Bottom,
    };
    Some(ContactShape::Edge {
        edge,
        centre: given(table, directions(&word).0)?,
        width: given(table, "width_um")?,
        arm: given(table, "arm_um")?.unwrap_or(Nanometres(0)),
    })
}

fn on_circle(table: &Table) -> Option<ContactShape> {
    let circle = if table.text("edge")? == "outer" { Circle::Outer } else { Circle::Inner };
    let whole = table.lacks("angle_deg") && table.lacks("width_um");
    let arc = || {
        let width = Nanometres(table.length("width_um")?);
        Some(Arc { angle_deg: table.number("angle_deg")?, width })
    };
    let arc = arc();
    (whole || arc.is_some()).then_some(ContactShape::Round { circle, arc })
}

fn on_rim(table: &Table) -> Option<ContactShape> {
    let (x, y) = table.corner("at_um")?;
    Some(ContactShape::Rim { at: (Nanometres(x), Nanometres(y)), width: Nanometres(table.length("width_um")?) })
}

/// A length that may be left out: none outside where it was refused, none inside where it is not given.
fn given(table: &Table, key: &str) -> Option<Option<Nanometres>> {
    let length = table.length(key).map(Nanometres);
    (length.is_some() || table.lacks(key)).then_some(length)
}
