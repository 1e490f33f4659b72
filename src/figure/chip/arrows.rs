//! Arrowheads: one per route, on the longest straight run of its middle line.

use std::collections::BTreeMap;

use crate::figure::chip::ChipDrawing;
use crate::figure::chip::bit::Bit;
use crate::figure::chip::strokes::Reach;
use crate::figure::chip::style;
use crate::figure::chip::vector::add;
use crate::figure::chip::vector::between;
use crate::figure::chip::vector::cross;
use crate::figure::chip::vector::direction;
use crate::figure::chip::vector::dot;
use crate::figure::chip::vector::length;
use crate::figure::chip::vector::right_of;
use crate::figure::chip::vector::sub;
use crate::figure::chip::vector::times;
use crate::figure::scene::At;
use crate::figure::scene::Mark;
use crate::figure::scene::PathMark;
use crate::figure::scene::Role;
use crate::figure::scene::Segment;

/// An arrowhead by its tip and its two other corners.
pub(super) struct Arrow {
    pub corners: [At; 3],
    pub mark: Mark,
}

/// The arrowheads of all routes.
pub(super) fn arrows(drawing: &ChipDrawing<'_>, reaches: &[Reach<'_>]) -> Vec<Arrow> {
    let mut routes: BTreeMap<Vec<(usize, bool)>, Vec<&Reach<'_>>> = BTreeMap::new();
    for reach in reaches {
        let steps = drawing.channels.courses[reach.lane.course].steps.iter();
        routes.entry(steps.map(|step| (step.piece.0, step.forward)).collect()).or_default().push(reach);
    }
    routes.values().filter_map(|route| arrow(route)).collect()
}

fn arrow(route: &[&Reach<'_>]) -> Option<Arrow> {
    let mut numbers: Vec<usize> = route.iter().map(|reach| reach.lane.number).collect();
    numbers.sort_unstable();
    numbers.dedup();
    let middle = numbers[numbers.len() / 2];
    let own = route.iter().filter(|reach| reach.lane.number == middle);
    let runs = own.flat_map(|reach| runs(&reach.bits).into_iter().map(move |run| (reach, run)));
    // The first of the longest: hundredths of a millimetre decide, so that symmetric runs do not depend on rounding.
    let (reach, (from, to)) = runs.reduce(|best, next| {
        let rank = |run: (At, At)| (length(sub(run.1, run.0)) * 100.0).round();
        if rank(next.1) > rank(best.1) { next } else { best }
    })?;
    let pitch_mm = reach.pitch_mm;
    let room_mm = length(sub(to, from));
    let long_mm = (1.35 * pitch_mm + 0.6).min(2.2).min(0.6 * room_mm);
    let half_mm = (0.68 * pitch_mm).min(0.4 * long_mm);
    let along = direction(from, to);
    let tip = add(between(from, to, 0.5), times(along, long_mm / 2.0));
    let tail = sub(tip, times(along, long_mm));
    let side = times(right_of(along), half_mm);
    let corners = [tip, add(tail, side), sub(tail, side)];
    let segments =
        vec![Segment::Move(corners[0]), Segment::Line(corners[1]), Segment::Line(corners[2]), Segment::Close];
    let fill = Some(style::channel_pen(reach.potential, pitch_mm).colour);
    Some(Arrow { corners, mark: Mark::Path(PathMark { segments, stroke: None, fill, role: Role::Arrow }) })
}

/// Straight runs of a line; bits that go straight on count as one.
pub(super) fn runs(bits: &[Bit]) -> Vec<(At, At)> {
    let mut runs: Vec<(At, At)> = Vec::new();
    for bit in bits.iter().filter(|bit| bit.bend.is_none() && length(sub(bit.to, bit.from)) > 1e-6) {
        match runs.last_mut().filter(|run| goes_on(**run, bit)) {
            Some(run) => run.1 = bit.to,
            None => runs.push((bit.from, bit.to)),
        }
    }
    runs
}

fn goes_on(run: (At, At), bit: &Bit) -> bool {
    let (before, now) = (direction(run.0, run.1), direction(bit.from, bit.to));
    length(sub(run.1, bit.from)) < 1e-6 && cross(before, now).abs() < 1e-6 && dot(before, now) > 0.0
}
