//! Lines for channels: how many stand for a band, at what depth they run, along which borders.

use std::collections::BTreeMap;

use crate::figure::chip::ChipDrawing;
use crate::figure::chip::pitches::Side;
use crate::layout::FaceIdx;
use crate::layout::FaceLabel;
use crate::layout::PieceIdx;
use crate::network::BandIdx;
use crate::network::Carrier;
use crate::network::Channels;
use crate::network::Course;
use crate::network::CourseStep;
use crate::quantity::Polarity;

/// Up to so many units of conductance of one carrier every unit has a line of its own.
const SINGLE_LINES: usize = 8;

/// The lines that stand for one band.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Lines {
    /// Number in the nest of its carrier: 0 is nearest to the border.
    pub first: usize,
    /// How many there are.
    pub count: usize,
    /// Conductance in e²/h that each stands for.
    pub weight: f64,
}

impl Lines {
    /// Number of the first line further in.
    pub fn end(self) -> usize {
        self.first + self.count
    }
}

/// The lines of every band.
pub(super) fn lines(channels: &Channels) -> Vec<Lines> {
    let weight = |band: usize| (&channels.bands[band].to - &channels.bands[band].from).to_f64();
    let units = |band: usize| (weight(band).floor() as usize).max(1);
    let of_carrier = |carrier: Carrier| {
        let bands = channels.bands.iter().enumerate().filter(move |(_, band)| band.carrier == carrier);
        bands.map(|(band, _)| units(band)).sum::<usize>()
    };
    let single = [Carrier::Electron, Carrier::Hole].into_iter().all(|carrier| of_carrier(carrier) <= SINGLE_LINES);
    let shared = runs_side_by_side(channels);
    let mut next = [0, 0];
    let bands = channels.bands.iter().enumerate();
    bands
        .map(|(index, band)| {
            let first = &mut next[usize::from(band.carrier == Carrier::Hole && !shared)];
            let count = if single { units(index) } else { 1 };
            let lines = Lines { first: *first, count, weight: weight(index) / count as f64 };
            *first += count;
            lines
        })
        .collect()
}

/// Whether channels of both carriers run along one side of a piece, as edge modes do: then their lines form one nest.
fn runs_side_by_side(channels: &Channels) -> bool {
    let mut sides: BTreeMap<(PieceIdx, bool), Carrier> = BTreeMap::new();
    let mut steps = channels.courses.iter().flat_map(|course| {
        let carrier = channels.bands[course.band.0].carrier;
        course.steps.iter().map(move |step| ((step.piece, step.forward == (carrier == Carrier::Electron)), carrier))
    });
    steps.any(|(side, carrier)| *sides.entry(side).or_insert(carrier) != carrier)
}

/// Which part of a course a border belongs to.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub(super) enum Part {
    /// Along the contact that emits, up to where the channel leaves it.
    Before,
    /// One step of the course.
    Step(usize),
    /// Along the contact that absorbs.
    After,
}

/// A piece walked by a course or by the border beyond its ends.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) struct Walked {
    pub piece: PieceIdx,
    pub forward: bool,
    pub part: Part,
}

/// The pieces of a course, with those beyond its ends.
pub(super) fn walked(course: &Course) -> Vec<Walked> {
    let steps = course.steps.iter().enumerate();
    let mut all: Vec<Walked> =
        steps.map(|(at, step)| Walked { piece: step.piece, forward: step.forward, part: Part::Step(at) }).collect();
    if let Some(ends) = course.ends {
        let (_, piece, forward) = ends.before;
        all.insert(0, Walked { piece, forward, part: Part::Before });
        let (_, piece, forward) = ends.after;
        all.push(Walked { piece, forward, part: Part::After });
    }
    all
}

/// Whether a channel of a band runs inside a face: its filling is of the band's sign and high enough. Edge modes, which
/// have no fillings, run on the whole mesa.
pub(super) fn holds(drawing: &ChipDrawing<'_>, band: BandIdx, face: FaceIdx) -> bool {
    let band = &drawing.channels.bands[band.0];
    let Some(filling) = drawing.fillings.get(face.0) else {
        return matches!(drawing.layout.topology.faces[face.0], FaceLabel::Mesa(_));
    };
    match band.carrier {
        Carrier::Electron => *filling >= band.to,
        Carrier::Hole => -filling.clone() >= band.to,
    }
}

/// The side of a walked piece on which the channel's region lies. Beside contacts, which belong to every region's border,
/// and for channels that run both ways, the carrier and the field say it: electrons at `+` and holes at `−` have their
/// region on the right hand.
pub(super) fn region_side(drawing: &ChipDrawing<'_>, band: BandIdx, walked: Walked) -> Side {
    let piece = drawing.layout.topology.pieces[walked.piece.0];
    let is_contact = |face: FaceIdx| matches!(drawing.layout.topology.faces[face.0], FaceLabel::Contact(_));
    let inside = |face: FaceIdx| is_contact(face) || holds(drawing, band, face);
    let is_mesa = |face: FaceIdx| matches!(drawing.layout.topology.faces[face.0], FaceLabel::Mesa(_));
    let side = |right: bool, left: bool| (right != left).then_some(right);
    let of_carrier =
        (drawing.channels.bands[band.0].carrier == Carrier::Electron) == (drawing.polarity == Polarity::Toward);
    let on_right = side(inside(piece.right), inside(piece.left))
        .or(side(is_mesa(piece.right), is_mesa(piece.left)))
        .unwrap_or(of_carrier == walked.forward);
    Side { piece: walked.piece.0, on_right }
}

/// The face in which the channel of a step runs.
pub(super) fn region_of(drawing: &ChipDrawing<'_>, band: BandIdx, step: CourseStep) -> FaceIdx {
    let walked = Walked { piece: step.piece, forward: step.forward, part: Part::Before };
    let piece = drawing.layout.topology.pieces[step.piece.0];
    if region_side(drawing, band, walked).on_right { piece.right } else { piece.left }
}

/// Which lines run along one side of a piece: numbers `from..to` in the nest.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) struct Nest {
    pub from: usize,
    pub to: usize,
}

/// The nests along both sides of every piece: on the left and on the right hand of the piece.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Nests(Vec<[Option<Nest>; 2]>);

impl Nests {
    /// Collects what runs where.
    pub fn new(drawing: &ChipDrawing<'_>, lines: &[Lines]) -> Self {
        let mut nests = vec![[None; 2]; drawing.layout.topology.pieces.len()];
        for course in &drawing.channels.courses {
            let lines = lines[course.band.0];
            for walked in walked(course) {
                let Side { piece, on_right } = region_side(drawing, course.band, walked);
                let side = &mut nests[piece][usize::from(on_right)];
                let held = side.unwrap_or(Nest { from: lines.first, to: lines.end() });
                *side = Some(Nest { from: held.from.min(lines.first), to: held.to.max(lines.end()) });
            }
        }
        Self(nests)
    }

    /// The nest on one side of a piece, if any line runs there.
    pub fn beside(&self, side: Side) -> Option<Nest> {
        self.0[side.piece][usize::from(side.on_right)]
    }

    /// How many lines run on one side of a piece.
    pub fn count(&self, side: Side) -> usize {
        self.beside(side).map_or(0, |nest| nest.to - nest.from)
    }
}
