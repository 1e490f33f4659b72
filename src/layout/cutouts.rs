//! Cut-outs must lie on the mesa and apart from one another; they may touch its rim, and then are a part of the outside.

use std::collections::BTreeMap;

use crate::diagnostic::Diagnostic;
use crate::layout::Owner;
use crate::layout::checks::Drawn;
use crate::layout::edges::Windings;
use crate::layout::grid::Cell;
use crate::layout::grid::dot;
use crate::layout::grid::step;
use crate::layout::half_edges::twin;
use crate::layout::label::Subdivision;
use crate::layout::owner::at_um;

/// What is wrong with cut-outs, each kind said once for every cut-out or pair.
pub(super) fn checks(drawn: &Drawn, arrangement: &Subdivision) -> Vec<Diagnostic> {
    let mut outside: BTreeMap<usize, Face> = BTreeMap::new();
    let mut overlaps: BTreeMap<(usize, usize), Face> = BTreeMap::new();
    for face in faces(drawn, arrangement) {
        let cutouts = cutouts(face.windings);
        if !winds(face.windings, Owner::Mesa) {
            cutouts.iter().for_each(|cutout| keep_largest(&mut outside, *cutout, face));
        } else if let [one, other, ..] = cutouts.as_slice() {
            keep_largest(&mut overlaps, (*one, *other), face);
        }
    }
    let on_mesa = |cutout: usize| {
        let has = |windings: &Windings| winds(windings, Owner::Mesa) && winds(windings, Owner::Cutout(cutout));
        drawn.windings.iter().any(has)
    };
    let out = outside.iter().map(
        |(cutout, face)| {
            if on_mesa(*cutout) { crossing(drawn, *cutout, face) } else { apart(drawn, *cutout) }
        },
    );
    out.chain(overlaps.iter().filter_map(|(pair, face)| overlap(drawn, *pair, face))).collect()
}

/// A bounded face before merging.
#[derive(Clone, Copy)]
struct Face<'a> {
    windings: &'a Windings,
    doubled_area: i128,
    perimeter: i128,
    /// One of its corners, farthest along x.
    corner: Cell,
}

impl Face<'_> {
    /// Whether it is a sliver less than two pixels wide: of a strip, area over length.
    fn is_thin(&self) -> bool {
        self.doubled_area < 2 * self.perimeter
    }
}

fn faces<'a>(drawn: &Drawn<'a>, arrangement: &Subdivision) -> Vec<Face<'a>> {
    let half_edges = &arrangement.half_edges;
    let areas = &half_edges.doubled_areas;
    let mut faces: Vec<Face> = drawn
        .windings
        .iter()
        .zip(areas)
        .map(|(windings, area)| Face { windings, doubled_area: *area, perimeter: 0, corner: (i64::MIN, 0) })
        .collect();
    for (half_edge, face) in half_edges.face.iter().enumerate() {
        let (a, b) = (half_edges.start(half_edge), half_edges.start(twin(half_edge)));
        let along = step(a, b);
        faces[*face].perimeter += dot(along, along).isqrt();
        faces[*face].corner = faces[*face].corner.max(a);
    }
    faces.into_iter().skip(1).collect()
}

fn winds(windings: &Windings, owner: Owner) -> bool {
    windings.iter().any(|(other, winding)| *other == owner && *winding > 0)
}

fn cutouts(windings: &Windings) -> Vec<usize> {
    let inside = windings.iter().filter(|(_, winding)| *winding > 0);
    let cutout = |(owner, _): &(Owner, i32)| if let Owner::Cutout(cutout) = owner { Some(*cutout) } else { None };
    inside.filter_map(cutout).collect()
}

fn keep_largest<'a, K: Ord>(faces: &mut BTreeMap<K, Face<'a>>, key: K, face: Face<'a>) {
    let kept = faces.entry(key).or_insert(face);
    if face.doubled_area > kept.doubled_area {
        *kept = face;
    }
}

fn apart(drawn: &Drawn, cutout: usize) -> Diagnostic {
    let owner = Owner::Cutout(cutout);
    let message = format!("{} lies wholly outside the mesa", owner.words(drawn.device));
    Diagnostic::fault("cutout-outside", message)
        .at(owner.place(drawn.device))
        .hint("correct its corners, or leave it out")
}

fn crossing(drawn: &Drawn, cutout: usize, face: &Face) -> Diagnostic {
    let (owner, grid) = (Owner::Cutout(cutout), drawn.outlines.grid);
    let (who, place, at) = (owner.words(drawn.device), owner.place(drawn.device), at_um(grid, face.corner));
    if face.is_thin() {
        let message = format!("{who} reaches past the rim by less than {} nm, to {at}", 2 * grid.snap);
        let hint = "it is taken to end at the rim, and is a part of the outside there";
        return Diagnostic::notice("near-miss", message).at(place).hint(hint);
    }
    let message = format!("{who} crosses the rim of the mesa: it reaches out to {at}");
    let hint = "keep it inside, or end it on the rim; a notch belongs into the mesa's own outline";
    Diagnostic::fault("cutout-crossing", message).at(place).hint(hint)
}

/// Where cut-outs have more in common than a sliver.
fn overlap(drawn: &Drawn, (one, other): (usize, usize), face: &Face) -> Option<Diagnostic> {
    let [first, second] = [one, other].map(|cutout| Owner::Cutout(cutout).words(drawn.device));
    let message = format!("{first} and {second} overlap near {}", at_um(drawn.outlines.grid, face.corner));
    let fault = Diagnostic::fault("cutouts-overlap", message).at(Owner::Cutout(other).place(drawn.device));
    (!face.is_thin()).then(|| fault.hint("move one of them, or make them one cut-out"))
}
