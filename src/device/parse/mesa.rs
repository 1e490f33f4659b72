//! `[mesa]`: the shape.

use crate::diagnostic::Diagnostic;
use crate::diagnostic::Findings;
use crate::quantity::Nanometres;
use crate::syntax::Table;

use crate::device::Mesa;
use crate::device::MesaShape;
use crate::device::Outline;
use crate::device::parse::contact::to_corners;

/// The default pixel of the arrangement, about a magnetic length.
const SNAP_NM: i64 = 10;

/// Shapes with the keys that describe them.
const SHAPES: [(&str, &[&str]); 4] = [
    ("bar", &["length_um", "width_um"]),
    ("cross", &["arm_length_um", "arm_width_um"]),
    ("ring", &["outer_diameter_um", "inner_diameter_um"]),
    ("outline", &["outline_um"]),
];

pub(super) fn read(root: &Table, findings: &mut Findings) -> Option<Mesa> {
    let table = root.table("mesa")?;
    let shape = table.text("shape")?;
    findings.extend(missing_keys(table, &shape));
    findings.extend(foreign_keys(table, &shape));
    let shape = match shape.as_str() {
        "bar" => bar(table),
        "cross" => cross(table),
        "ring" => ring(table, findings),
        _ => outline(table),
    };
    let snap = Nanometres(table.length("snap_nm").unwrap_or(SNAP_NM));
    Some(Mesa { shape: shape?, snap, place: table.place.clone() })
}

fn bar(table: &Table) -> Option<MesaShape> {
    let length = Nanometres(table.length("length_um")?);
    let width = Nanometres(table.length("width_um")?);
    Some(MesaShape::Bar { length, width })
}

fn cross(table: &Table) -> Option<MesaShape> {
    let arm_length = Nanometres(table.length("arm_length_um")?);
    let arm_width = Nanometres(table.length("arm_width_um")?);
    Some(MesaShape::Cross { arm_length, arm_width })
}

fn ring(table: &Table, findings: &mut Findings) -> Option<MesaShape> {
    let outer_diameter = Nanometres(table.length("outer_diameter_um")?);
    let inner_diameter = Nanometres(table.length("inner_diameter_um")?);
    if inner_diameter.0 >= outer_diameter.0 {
        let fault = Diagnostic::fault("ring-size", "`inner_diameter_um` is not below `outer_diameter_um`");
        findings.push(fault.at(table.place_of("inner_diameter_um")).hint("exchange or correct the two diameters"));
        return None;
    }
    Some(MesaShape::Ring { outer_diameter, inner_diameter })
}

fn outline(table: &Table) -> Option<MesaShape> {
    let place = table.place_of("outline_um").clone();
    let outline = Outline { corners: to_corners(table.outline("outline_um")?), place };
    let cutouts = table.outlines("cutouts_um").into_iter();
    let cutouts = cutouts.map(|(corners, place)| Outline { corners: to_corners(corners), place: place.clone() });
    Some(MesaShape::Outline { outline, cutouts: cutouts.collect() })
}

fn missing_keys(table: &Table, shape: &str) -> Vec<Diagnostic> {
    let keys = SHAPES.iter().find(|(name, _)| *name == shape).map_or(&[][..], |(_, keys)| keys);
    let missing = keys.iter().filter(|key| table.lacks(key));
    let fault = |key: &&str| {
        Diagnostic::fault("missing-key", format!("a mesa of shape {shape} has no `{key}`"))
            .at(&table.place)
            .hint(format!("add `{key}` to [mesa]"))
    };
    missing.map(fault).collect()
}

/// Keys of another shape would be ignored, so they are faults.
fn foreign_keys(table: &Table, shape: &str) -> Vec<Diagnostic> {
    let others = SHAPES.iter().filter(|(name, _)| *name != shape);
    let foreign = others.flat_map(|(name, keys)| keys.iter().map(move |key| (*key, *name)));
    let cutouts = (shape != "outline").then_some(("cutouts_um", "outline"));
    let present = foreign.chain(cutouts).filter(|(key, _)| table.node(key).is_some());
    let fault = |(key, owner): (&str, &str)| {
        Diagnostic::fault("other-shape", format!("`{key}` describes the shape {owner}, and this mesa is a {shape}"))
            .at(table.key_place(key))
            .hint(format!("take it out, or write `shape = \"{owner}\"`"))
    };
    present.map(fault).collect()
}
