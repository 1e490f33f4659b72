//! What lies under and around the channels: mesa, gates, steps, contacts, field symbol, orientation mark.

use crate::figure::chip::ChipDrawing;
use crate::figure::chip::OverlayLook;
use crate::figure::chip::area::Area;
use crate::figure::chip::chains::Chains;
use crate::figure::chip::stretch::Frame;
use crate::figure::chip::style;
use crate::figure::chip::vector::add;
use crate::figure::chip::vector::between;
use crate::figure::scene::At;
use crate::figure::scene::Colour;
use crate::figure::scene::Mark;
use crate::figure::scene::PathMark;
use crate::figure::scene::Role;
use crate::figure::scene::Segment;
use crate::figure::scene::Stroke;
use crate::layout::FaceLabel;
use crate::quantity::Polarity;

/// How far a gate is drawn on beyond the mesa, in mm.
const OVERHANG_MM: f64 = 2.4;

/// Distance of the lines of a hatch along x, in mm.
const HATCH_MM: f64 = 3.0;

/// The mesa, the overlays on it and the rim.
pub(super) fn under(drawing: &ChipDrawing<'_>, chains: &Chains, overlays: &[Area]) -> Vec<Mark> {
    let mesa = Area::of(drawing.layout, chains, |_, label| matches!(label, FaceLabel::Mesa(_)));
    let mut marks = vec![shape(&mesa, None, Some(style::MESA))];
    for (overlay, area) in drawing.names.overlays.iter().zip(overlays) {
        let (colour, hatch) = match overlay.look {
            OverlayLook::GateAcross | OverlayLook::Gate => (style::GATE, hatch(area, Slant::Falling)),
            OverlayLook::Step => (style::STEP, hatch(area, Slant::Rising)),
        };
        marks.push(shape(area, None, Some(colour)));
        let dash_mm = if overlay.look == OverlayLook::Step { vec![0.25, 0.9] } else { Vec::new() };
        marks.push(path(hatch, Some(Stroke { dash_mm, ..style::pen(style::HATCH, 0.18) }), None));
    }
    marks.push(shape(&mesa, Some(style::pen(style::RIM, 0.18)), None));
    marks
}

/// The areas of gates and steps; a gate across the bar reaches beyond the mesa, a step does not.
pub(super) fn overlays(drawing: &ChipDrawing<'_>, chains: &Chains) -> Vec<Area> {
    let indices = drawing.names.overlays.iter().enumerate();
    indices
        .map(|(index, overlay)| match overlay.look {
            OverlayLook::GateAcross => overhanging(&covered(drawing, chains, index)),
            OverlayLook::Gate | OverlayLook::Step => covered(drawing, chains, index),
        })
        .collect()
}

/// The part of the mesa under an overlay.
fn covered(drawing: &ChipDrawing<'_>, chains: &Chains, overlay: usize) -> Area {
    Area::of(
        drawing.layout,
        chains,
        |_, label| matches!(label, FaceLabel::Mesa(cover) if cover.iter().any(|under| under.0 == overlay)),
    )
}

fn overhanging(area: &Area) -> Area {
    let Some(frame) = area.frame() else { return Area::default() };
    let (top, bottom) = (frame.top - OVERHANG_MM, frame.bottom + OVERHANG_MM);
    Area { rings: vec![vec![(frame.left, top), (frame.right, top), (frame.right, bottom), (frame.left, bottom)]] }
}

/// The dark areas of the contacts.
pub(super) fn contacts(areas: &[Area]) -> Vec<Mark> {
    let drawn = areas.iter().enumerate().filter(|(_, area)| !area.rings.is_empty());
    drawn
        .map(|(index, area)| {
            let (segments, fill) = (area.segments(), Some(style::DARK));
            Mark::Path(PathMark { segments, stroke: None, fill, role: Role::Contact(index) })
        })
        .collect()
}

#[derive(Clone, Copy)]
enum Slant {
    Falling,
    Rising,
}

/// Lines at 45° inside an area.
fn hatch(area: &Area, slant: Slant) -> Vec<Segment> {
    let Some(frame) = area.frame() else { return Vec::new() };
    let sign = match slant {
        Slant::Falling => 1.0,
        Slant::Rising => -1.0,
    };
    // Along a line of the hatch u = x + sign · y does not change.
    let u = |point: At| point.0 + sign * point.1;
    let corners =
        [(frame.left, frame.top), (frame.right, frame.top), (frame.left, frame.bottom), (frame.right, frame.bottom)];
    let (low, high) = corners
        .iter()
        .fold((f64::INFINITY, f64::NEG_INFINITY), |(low, high), &corner| (low.min(u(corner)), high.max(u(corner))));
    let count = ((high - low) / HATCH_MM) as usize;
    (0..=count).flat_map(|line| stretches(area, low + (line as f64 + 0.5) * HATCH_MM, u)).collect()
}

/// The parts inside an area of the line on which `u` has a value.
fn stretches(area: &Area, value: f64, u: impl Fn(At) -> f64) -> Vec<Segment> {
    let crossing = area.sides().filter(|&(a, b)| (u(a) > value) != (u(b) > value));
    let mut points: Vec<At> = crossing.map(|(a, b)| between(a, b, (value - u(a)) / (u(b) - u(a)))).collect();
    points.sort_by(|a, b| a.0.total_cmp(&b.0));
    points.chunks_exact(2).flat_map(|pair| [Segment::Move(pair[0]), Segment::Line(pair[1])]).collect()
}

/// Radius of the field symbol in mm.
pub(super) const SYMBOL_MM: f64 = 2.0;

/// The field symbol around a point: a dot in a circle for a field toward the reader, a cross for one away.
pub(super) fn field_symbol(polarity: Polarity, centre: At) -> Vec<Mark> {
    let pen = style::pen(style::DARK, 0.3);
    let ring = path(circle(centre, SYMBOL_MM), Some(pen.clone()), None);
    let inner = match polarity {
        Polarity::Toward => path(circle(centre, 0.45), None, Some(style::DARK)),
        Polarity::Away => {
            let arm = SYMBOL_MM * std::f64::consts::FRAC_1_SQRT_2;
            let ends = [(-arm, -arm), (arm, arm), (-arm, arm), (arm, -arm)].map(|end| add(centre, end));
            let moves =
                vec![Segment::Move(ends[0]), Segment::Line(ends[1]), Segment::Move(ends[2]), Segment::Line(ends[3])];
            path(moves, Some(pen), None)
        }
    };
    vec![ring, inner]
}

/// The mark that stands at the lower left of the chip face, so that a mirrored picture is noticed.
pub(super) fn orientation_mark(frame: Frame) -> Mark {
    let (left, top, right, bottom) = (frame.left, frame.top, frame.right, frame.bottom);
    let moves =
        vec![Segment::Move((left, top)), Segment::Line((left, bottom)), Segment::Line((right, bottom)), Segment::Close];
    path(moves, Some(style::pen(style::GREY, 0.2)), None)
}

/// A line of a length with short strokes at its ends.
pub(super) fn scale_bar((x, y): At, mm: f64) -> Mark {
    let ends = [x, x + mm].into_iter().flat_map(|x| [Segment::Move((x, y - 0.7)), Segment::Line((x, y + 0.7))]);
    let moves = [Segment::Move((x, y)), Segment::Line((x + mm, y))].into_iter().chain(ends);
    path(moves.collect(), Some(style::pen(style::GREY, 0.25)), None)
}

/// Four cubic curves; their handles are 4/3 (√2 − 1) of the radius.
fn circle(centre: At, radius: f64) -> Vec<Segment> {
    let handle = 4.0 / 3.0 * (std::f64::consts::SQRT_2 - 1.0) * radius;
    let quarter = |from: At, to: At| {
        let bend = |start: At, end: At| {
            add(centre, add((start.0 * radius, start.1 * radius), (end.0 * handle, end.1 * handle)))
        };
        Segment::Cubic(bend(from, to), bend(to, from), add(centre, (to.0 * radius, to.1 * radius)))
    };
    let (east, south, west, north) = ((1.0, 0.0), (0.0, 1.0), (-1.0, 0.0), (0.0, -1.0));
    let start = Segment::Move(add(centre, (radius, 0.0)));
    vec![start, quarter(east, south), quarter(south, west), quarter(west, north), quarter(north, east), Segment::Close]
}

/// A path of scenery.
pub(super) fn path(segments: Vec<Segment>, stroke: Option<Stroke>, fill: Option<Colour>) -> Mark {
    Mark::Path(PathMark { segments, stroke, fill, role: Role::Scenery })
}

fn shape(area: &Area, stroke: Option<Stroke>, fill: Option<Colour>) -> Mark {
    path(area.segments(), stroke, fill)
}
