//! Lines for channels: how many stand for a band, at what depth they run, along which borders.

use std::collections::BTreeMap;

use crate::figure::chip::ChipDrawing;
use crate::figure::chip::vector::dot;
use crate::figure::chip::vector::length;
use crate::layout::PieceIdx;
use crate::network::Carrier;
use crate::network::Channels;
use crate::network::Course;
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

/// Whether the region of a carrier's channel lies on the right hand of its walk: of electrons at `+`, of holes at `−`.
pub(super) fn region_on_right(carrier: Carrier, polarity: Polarity) -> bool {
    (carrier == Carrier::Electron) == (polarity == Polarity::Toward)
}

/// Pairs of piece sides that follow each other on a course without a turn.
fn straight_joints(drawing: &ChipDrawing<'_>) -> Vec<[(PieceIdx, bool); 2]> {
    let mut joints = Vec::new();
    for course in &drawing.channels.courses {
        let on_right = region_on_right(drawing.channels.bands[course.band.0].carrier, drawing.polarity);
        let mut walk = walked(course);
        walk.extend(walk.first().copied().filter(|_| course.ends.is_none()));
        let straight = walk.windows(2).filter(|pair| goes_straight(drawing, pair[0], pair[1]));
        joints.extend(straight.map(|pair| [pair[0], pair[1]].map(|walked| (walked.piece, on_right == walked.forward))));
    }
    joints
}

/// Whether the walk turns by less than about 45° from one piece to the next; the drawing may bend what is nearly straight.
fn goes_straight(drawing: &ChipDrawing<'_>, first: Walked, second: Walked) -> bool {
    let corners = |walked: Walked| {
        let mut corners = drawing.layout.positions.pieces[walked.piece.0].clone();
        if !walked.forward {
            corners.reverse();
        }
        corners
    };
    let (first, second) = (corners(first), corners(second));
    let [.., a, b] = first[..] else { return false };
    let [c, d, ..] = second[..] else { return false };
    let (u, v) = (((b.0 - a.0) as f64, (b.1 - a.1) as f64), ((d.0 - c.0) as f64, (d.1 - c.1) as f64));
    dot(u, v) > 0.7 * length(u) * length(v)
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
    pub fn new(channels: &Channels, lines: &[Lines], polarity: Polarity, pieces: usize) -> Self {
        let mut nests = vec![[None; 2]; pieces];
        for course in &channels.courses {
            let lines = lines[course.band.0];
            let on_right = region_on_right(channels.bands[course.band.0].carrier, polarity);
            for walked in walked(course) {
                let side = &mut nests[walked.piece.0][usize::from(on_right == walked.forward)];
                let held = side.unwrap_or(Nest { from: lines.first, to: lines.end() });
                *side = Some(Nest { from: held.from.min(lines.first), to: held.to.max(lines.end()) });
            }
        }
        Self(nests)
    }

    /// The same with places kept free for absent outer lines, so that no line changes its depth where a border goes
    /// straight on.
    pub fn levelled(&self, drawing: &ChipDrawing<'_>) -> Self {
        let joints: Vec<[(PieceIdx, bool); 2]> = straight_joints(drawing);
        let mut nests = self.clone();
        loop {
            let before = nests.clone();
            for [(first, one), (second, other)] in &joints {
                let [a, b] = [(first, one), (second, other)].map(|(piece, right)| nests.beside(*piece, *right));
                let least = a.into_iter().chain(b).map(|nest| nest.from).min().unwrap_or(0);
                nests.lower(*first, *one, least);
                nests.lower(*second, *other, least);
            }
            if nests == before {
                return nests;
            }
        }
    }

    /// The same with a place for every line along every border.
    pub fn complete(&self) -> Self {
        let complete = |nest: Option<Nest>| nest.map(|nest| Nest { from: 0, ..nest });
        Self(self.0.iter().map(|sides| sides.map(complete)).collect())
    }

    fn lower(&mut self, piece: PieceIdx, on_right: bool, from: usize) {
        if let Some(nest) = &mut self.0[piece.0][usize::from(on_right)] {
            nest.from = nest.from.min(from);
        }
    }

    /// The nest on one side of a piece, if any line runs there.
    pub fn beside(&self, piece: PieceIdx, on_right: bool) -> Option<Nest> {
        self.0[piece.0][usize::from(on_right)]
    }

    /// How many lines run on one side of a piece.
    pub fn count(&self, piece: PieceIdx, on_right: bool) -> usize {
        self.beside(piece, on_right).map_or(0, |nest| nest.to - nest.from)
    }
}
