//! Where channels run: borders in the words of faces and contacts.

use crate::network::Carrier;
use crate::network::Channels;
use crate::network::CourseStep;
use crate::network::FaceIdx;
use crate::network::FaceLabel;
use crate::network::Network;
use crate::resistance::why::Stretch;

/// The border along which every bundle runs, and its carrier; none where a bundle holds both signs.
pub(super) fn places(
    network: &Network,
    channels: &Channels,
    bundles: usize,
) -> Vec<(Option<Stretch>, Option<Carrier>)> {
    let mut places: Vec<Option<(Option<Stretch>, Option<Carrier>)>> = vec![None; bundles];
    for course in &channels.courses {
        let carrier = channels.bands[course.band.0].carrier;
        for (step, bundle) in course.steps.iter().flat_map(|step| [(step, step.bundle), (step, step.leaving)]) {
            let place = &mut places[bundle.0];
            match place {
                Some((_, known)) if *known != Some(carrier) => *known = None,
                Some(_) => {}
                None => *place = Some((stretch(network, step), Some(carrier))),
            }
        }
    }
    places.into_iter().map(Option::unwrap_or_default).collect()
}

/// The border along which a step of a course runs; the two regions of an inner border in the order of their faces.
fn stretch(network: &Network, step: &CourseStep) -> Option<Stretch> {
    let piece = &network.topology.pieces[step.piece.0];
    let label = |face: FaceIdx| &network.topology.faces[face.0];
    let along = |region: FaceIdx, outside: FaceIdx| {
        if outside == OUTSIDE { Stretch::Rim(region) } else { Stretch::CutOut(region) }
    };
    match (label(piece.left), label(piece.right)) {
        (FaceLabel::Mesa(_), FaceLabel::Vacuum) => Some(along(piece.left, piece.right)),
        (FaceLabel::Vacuum, FaceLabel::Mesa(_)) => Some(along(piece.right, piece.left)),
        (FaceLabel::Mesa(_), FaceLabel::Mesa(_)) => {
            Some(Stretch::Border(piece.left.min(piece.right), piece.left.max(piece.right)))
        }
        _ => None,
    }
}

/// The unbounded face of a layout.
const OUTSIDE: FaceIdx = FaceIdx(0);

/// Appends a stretch unless the channels are on it already.
pub(super) fn push(route: &mut Vec<Stretch>, stretch: Stretch) {
    if route.last() != Some(&stretch) {
        route.push(stretch);
    }
}
