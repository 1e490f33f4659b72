//! Every channel line of the chip on one stretched plane, and whether they keep clear of each other.

use std::collections::BTreeSet;

use crate::figure::chip::ChipDrawing;
use crate::figure::chip::area::Area;
use crate::figure::chip::border::Border;
use crate::figure::chip::border::Edge;
use crate::figure::chip::border::edges;
use crate::figure::chip::courses::Lines;
use crate::figure::chip::courses::Nests;
use crate::figure::chip::courses::Part;
use crate::figure::chip::courses::region_on_right;
use crate::figure::chip::courses::walked;
use crate::figure::chip::offset::Bit;
use crate::figure::chip::offset::HIDDEN;
use crate::figure::chip::offset::HIDDEN_MM;
use crate::figure::chip::offset::cut;
use crate::figure::chip::offset::inset;
use crate::figure::chip::round::Centres;
use crate::figure::chip::vector::gap;
use crate::figure::chip::vector::length;
use crate::figure::chip::vector::sub;
use crate::figure::scene::At;
use crate::layout::FaceLabel;
use crate::layout::PieceIdx;
use crate::network::BundleIdx;
use crate::network::Course;

/// One line of a course.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Lane {
    /// Index of the course.
    pub course: usize,
    /// Number in the nest.
    pub number: usize,
    /// Conductance in e²/h that the line stands for.
    pub weight: f64,
    /// From contact to contact, or closed.
    pub bits: Vec<Bit>,
}

/// What is drawn and where: everything about the channels but their style.
pub(super) struct Ground<'a> {
    pub drawing: &'a ChipDrawing<'a>,
    /// Where the corners of every piece lie on the drawing.
    pub chains: &'a [Vec<At>],
    pub lines: &'a [Lines],
    pub nests: &'a Nests,
    pub contacts: &'a [Area],
    /// Bundles in which channels mix.
    pub mixing: &'a BTreeSet<BundleIdx>,
    pub pitch_mm: f64,
}

impl Ground<'_> {
    /// All lines; none where one of them does not reach its contacts.
    pub fn lanes(&self) -> Option<Vec<Lane>> {
        let courses = &self.drawing.channels.courses;
        let borders: Vec<Border> = courses.iter().map(|course| self.border(course).set_back(self.pitch_mm)).collect();
        let mut centres = Centres::default();
        borders.iter().for_each(|border| centres.take(border, self.pitch_mm));
        let mut lanes = Vec::new();
        for (at, (course, border)) in courses.iter().zip(&borders).enumerate() {
            let lines = self.lines[course.band.0];
            for number in lines.first..lines.end() {
                let depth_mm = (number + 1) as f64 * self.pitch_mm;
                let bits = self.finished(course, inset(border, depth_mm, &centres))?;
                lanes.push(Lane { course: at, number, weight: lines.weight, bits });
            }
        }
        Some(lanes)
    }

    fn finished(&self, course: &Course, bits: Vec<Bit>) -> Option<Vec<Bit>> {
        match course.ends {
            None => Some(bits),
            Some(ends) => cut(
                bits,
                HIDDEN_MM.min(HIDDEN * self.pitch_mm),
                (&self.contacts[ends.from.0], &self.contacts[ends.to.0]),
            ),
        }
    }

    fn border(&self, course: &Course) -> Border {
        let carrier = self.drawing.channels.bands[course.band.0].carrier;
        let on_right = region_on_right(carrier, self.drawing.polarity);
        let pieces = walked(course).into_iter().flat_map(|walked| {
            let mut corners = self.chains[walked.piece.0].clone();
            if !walked.forward {
                corners.reverse();
            }
            let nest = self.nests.beside(walked.piece, on_right == walked.forward);
            let (base, deepest) = nest.map_or((0, 0), |nest| (nest.from, nest.to));
            let still = (0.0, 0.0);
            let (inside_mesa, mixing) = (self.is_inside_mesa(walked.piece), self.mixes(course, walked.part));
            let make = |from, to| Edge {
                from,
                to,
                along: still,
                inward: still,
                part: walked.part,
                base,
                deepest,
                inside_mesa,
                mixing,
            };
            edges(&corners, on_right, make)
        });
        Border { edges: pieces.collect(), closed: course.ends.is_none() }
    }

    fn is_inside_mesa(&self, piece: PieceIdx) -> bool {
        let topology = &self.drawing.layout.topology;
        let piece = topology.pieces[piece.0];
        [piece.left, piece.right].iter().all(|face| matches!(topology.faces[face.0], FaceLabel::Mesa(_)))
    }

    fn mixes(&self, course: &Course, part: Part) -> bool {
        match part {
            Part::Step(at) => self.mixing.contains(&course.steps[at].bundle),
            Part::Before | Part::After => false,
        }
    }
}

/// Whether all lines keep half a pitch apart, run the right way along their borders, show where they mix, stay on the
/// chip and keep out of contacts that are not theirs.
pub(super) fn are_clear(ground: &Ground<'_>, lanes: &[Lane], chip: &Area) -> bool {
    let straight: Vec<Vec<(At, At)>> =
        lanes.iter().map(|lane| lane.bits.iter().flat_map(Bit::straightened).collect()).collect();
    let runs_back = lanes.iter().any(|lane| lane.bits.iter().any(|bit| bit.reversed));
    !runs_back
        && lanes.iter().all(|lane| shows_mixing(ground, lane))
        && lanes.iter().all(|lane| stays_home(ground, lane, chip))
        && keep_apart(&straight, ground.pitch_mm / 2.0)
}

/// Whether a line has a visible part wherever its channel mixes.
fn shows_mixing(ground: &Ground<'_>, lane: &Lane) -> bool {
    let course = &ground.drawing.channels.courses[lane.course];
    let is_seen = |part: Part| {
        let own = lane.bits.iter().filter(|bit| bit.part == part);
        own.map(|bit| length(sub(bit.to, bit.from))).sum::<f64>() > 0.1 * ground.pitch_mm
    };
    (0..course.steps.len()).map(Part::Step).all(|part| !ground.mixes(course, part) || is_seen(part))
}

/// Whether the ends and the middle of every bit lie on the chip and in no other contact.
fn stays_home(ground: &Ground<'_>, lane: &Lane, chip: &Area) -> bool {
    let ends = ground.drawing.channels.courses[lane.course].ends;
    let is_own = |contact: usize| ends.is_some_and(|ends| contact == ends.from.0 || contact == ends.to.0);
    let foreign = |point: At| (0..ground.contacts.len()).any(|at| !is_own(at) && ground.contacts[at].holds(point));
    let points = lane.bits.iter().flat_map(|bit| [bit.from, bit.at(0.5)]);
    points.into_iter().all(|point| chip.holds(point) && !foreign(point))
}

/// Whether no two lines come nearer than a limit. Stretches are swept from left to right, so that only neighbours meet.
fn keep_apart(lines: &[Vec<(At, At)>], limit_mm: f64) -> bool {
    let numbered = lines.iter().enumerate().flat_map(|(line, all)| all.iter().map(move |stretch| (line, *stretch)));
    let mut all: Vec<(usize, (At, At))> = numbered.collect();
    let left = |(a, b): (At, At)| a.0.min(b.0);
    let right = |(a, b): (At, At)| a.0.max(b.0);
    all.sort_by(|a, b| left(a.1).total_cmp(&left(b.1)));
    for (at, &(line, stretch)) in all.iter().enumerate() {
        let reach = right(stretch) + limit_mm;
        let near = all[at + 1..].iter().take_while(|(_, other)| left(*other) <= reach);
        for &(other_line, other) in near {
            if line != other_line && overlap_in_y(stretch, other, limit_mm) && gap(stretch, other) < limit_mm {
                return false;
            }
        }
    }
    true
}

fn overlap_in_y((a, b): (At, At), (c, d): (At, At), margin: f64) -> bool {
    a.1.min(b.1) <= c.1.max(d.1) + margin && c.1.min(d.1) <= a.1.max(b.1) + margin
}
