//! `[mesa]`: the shape.

use crate::diagnostic::Diagnostic;
use crate::diagnostic::Findings;
use crate::quantity::Nanometres;
use crate::syntax::Table;

use crate::device::Mesa;
use crate::device::MesaShape;

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
    if shape != "bar" {
        findings.push(not_laid_out(table, &shape));
        return None;
    }
    let length = Nanometres(table.length("length_um")?);
    let width = Nanometres(table.length("width_um")?);
    let snap = Nanometres(table.length("snap_nm").unwrap_or(SNAP_NM));
    Some(Mesa { shape: MesaShape::Bar { length, width }, snap, place: table.place.clone() })
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

fn not_laid_out(table: &Table, shape: &str) -> Diagnostic {
    Diagnostic::fault("not-computed-yet", format!("a mesa of shape {shape} is not laid out yet"))
        .at(table.place_of("shape"))
        .hint("`shape = \"bar\"` is laid out, with contacts on arms or of any outline, and gates of any outline")
}
