//! Every channel line of the chip on one plane. Where lines come too near to each other they are drawn closer together,
//! there and only there, until all keep clear.

use std::collections::BTreeSet;

use crate::figure::chip::ChipDrawing;
use crate::figure::chip::area::Area;
use crate::figure::chip::bit::Bit;
use crate::figure::chip::border::Border;
use crate::figure::chip::border::Origin;
use crate::figure::chip::chains::Chains;
use crate::figure::chip::clashes::Clash;
use crate::figure::chip::clashes::Other;
use crate::figure::chip::clashes::clashes;
use crate::figure::chip::courses::Lines;
use crate::figure::chip::courses::Nests;
use crate::figure::chip::courses::Part;
use crate::figure::chip::courses::Walked;
use crate::figure::chip::courses::region_side;
use crate::figure::chip::courses::walked;
use crate::figure::chip::ends::cut;
use crate::figure::chip::offset::Inset;
use crate::figure::chip::offset::inset;
use crate::figure::chip::offset::keeps_sense;
use crate::figure::chip::pitches::Pitches;
use crate::figure::chip::pitches::Place;
use crate::figure::chip::pitches::Side;
use crate::figure::chip::pitches::Track;
use crate::figure::chip::pitches::tracks;
use crate::figure::chip::round::Centres;
use crate::figure::chip::round::Cornered;
use crate::figure::chip::vector::between;
use crate::figure::chip::vector::distance;
use crate::figure::chip::vector::dot;
use crate::figure::chip::vector::length;
use crate::figure::chip::vector::sub;
use crate::figure::chip::walls::Walls;
use crate::figure::scene::At;
use crate::network::BundleIdx;

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
    /// Where the pieces lie on the drawing.
    pub chains: &'a Chains,
    pub lines: &'a [Lines],
    pub nests: &'a Nests,
    pub contacts: &'a [Area],
    pub walls: &'a Walls,
    /// Bundles in which channels mix.
    pub mixing: &'a BTreeSet<BundleIdx>,
    /// Distance of neighbouring lines where nothing narrows them.
    pub pitch_mm: f64,
}

/// All lines, and what may still be wrong with them.
pub(super) struct Laid {
    pub lanes: Vec<Lane>,
    /// The narrowest pitch.
    pub least_mm: f64,
    /// The mean of the narrowest pitches along all borders, each counted once for every line.
    pub mean_mm: f64,
    /// Lines that cross, do not arrive, or come too near, after all that could be done.
    pub crossings: usize,
    pub near: usize,
}

/// After so many rounds of narrowing lines are drawn as they are.
const ROUNDS: usize = 24;

/// Lines are never drawn closer than this, in mm.
const FLOOR_MM: f64 = 0.004;

/// Narrowing of a place where nothing says how much is needed.
const STEP: f64 = 0.8;

/// No place is narrowed to less than this share at once.
const MOST_AT_ONCE: f64 = 0.6;

/// A narrowing to take: the place and the pitch there in mm.
type Narrowing = (Place, f64);

impl Ground<'_> {
    /// All lines.
    pub fn lanes(&self) -> Laid {
        let mut pitches = self.pitches();
        let mut best: Option<Laid> = None;
        for _ in 0..ROUNDS {
            let (lanes, mut narrowings) = self.tried(&pitches);
            let lost = narrowings.len();
            let found = clashes(&lanes, self.chains.all(), |lane, piece| self.walls.stop(lane.course, piece));
            for clash in &found {
                narrowings.extend(self.resolved(&pitches, &lanes, clash));
            }
            let crossings = lost + found.iter().filter(|clash| clash.crossing).count();
            let narrowest = || pitches.narrowest();
            let lines = narrowest().map(|(_, count)| count).sum::<usize>().max(1) as f64;
            let laid = Laid {
                lanes,
                least_mm: narrowest().map(|(mm, _)| mm).fold(f64::INFINITY, f64::min),
                mean_mm: narrowest().map(|(mm, count)| mm * count as f64).sum::<f64>() / lines,
                crossings,
                near: found.len(),
            };
            let rank = |laid: &Laid| (laid.crossings, laid.near);
            if best.as_ref().is_none_or(|best| rank(&laid) < rank(best)) {
                best = Some(laid);
            }
            if narrowings.is_empty() {
                break;
            }
            narrowings.into_iter().for_each(|(place, mm)| pitches.narrow(place, mm.max(FLOOR_MM)));
            pitches.settle();
        }
        best.unwrap_or(Laid { lanes: Vec::new(), least_mm: 0.0, mean_mm: 0.0, crossings: 1, near: 1 })
    }

    fn pitches(&self) -> Pitches {
        let tracks = tracks(self.chains);
        let (joints, straight) = self.joints(&tracks);
        let nest = |side: Side| self.nests.beside(side).map(|nest| (nest.from, nest.to));
        Pitches::new(tracks, self.pitch_mm, nest, (joints, &straight))
    }

    /// Knots at which a course goes on from one piece to the next, and those of them where it goes straight on.
    fn joints(&self, tracks: &[Track]) -> (Vec<[Place; 2]>, Vec<[Place; 2]>) {
        let (mut all, mut straight) = (BTreeSet::new(), BTreeSet::new());
        for course in 0..self.drawing.channels.courses.len() {
            let mut walk = self.walk(course);
            walk.extend(walk.first().copied().filter(|_| self.drawing.channels.courses[course].ends.is_none()));
            for pair in walk.windows(2) {
                let joint = [(pair[0], true), (pair[1], false)];
                all.insert(joint.map(|((walked, side), at_end)| (side, walked.forward == at_end)));
                if self.goes_straight(pair[0].0, pair[1].0) {
                    straight.insert(joint.map(|((walked, side), at_end)| (side, walked.forward == at_end)));
                }
            }
        }
        let end = |side: Side| tracks[side.piece].knots.len() - 1;
        let place = |(side, last): (Side, bool)| Place { side, knot: if last { end(side) } else { 0 } };
        let places = |joints: BTreeSet<[(Side, bool); 2]>| joints.into_iter().map(|joint| joint.map(place)).collect();
        (places(all), places(straight))
    }

    /// Whether the walk turns by less than about 45° from one piece to the next.
    fn goes_straight(&self, first: Walked, second: Walked) -> bool {
        let corners = |walked: Walked| {
            let mut corners = self.chains.of(walked.piece).to_vec();
            if !walked.forward {
                corners.reverse();
            }
            corners
        };
        let (first, second) = (corners(first), corners(second));
        let [.., a, b] = first[..] else { return false };
        let [c, d, ..] = second[..] else { return false };
        let (u, v) = (sub(b, a), sub(d, c));
        dot(u, v) > 0.7 * length(u) * length(v)
    }

    /// The pieces of a course with the sides on which its region lies.
    fn walk(&self, course: usize) -> Vec<(Walked, Side)> {
        let course = &self.drawing.channels.courses[course];
        walked(course).into_iter().map(|walked| (walked, region_side(self.drawing, course.band, walked))).collect()
    }

    /// The lines at these pitches, with what must be narrowed because a line is lost.
    fn tried(&self, pitches: &Pitches) -> (Vec<Lane>, Vec<Narrowing>) {
        let courses = &self.drawing.channels.courses;
        let mut sharp: Vec<(usize, usize, Inset)> = Vec::new();
        let mut narrowings = Vec::new();
        for (at, course) in courses.iter().enumerate() {
            let lines = self.lines[course.band.0];
            let border = Border::new(pitches, self.walk(at).into_iter(), course.ends.is_none());
            for number in lines.first..lines.end() {
                let inset = inset(&border, number);
                let turned = border.closed && !keeps_sense(&border, &inset.bits);
                if turned || inset.bits.is_empty() {
                    narrowings.extend(border.edges.iter().flat_map(|edge| whole(pitches, edge.origin)));
                }
                narrowings.extend(inset.skips.iter().flat_map(|skip| far_skip(pitches, skip, number)));
                sharp.push((at, number, inset));
            }
        }
        let mut lanes = Vec::new();
        let rounded = self.rounded(pitches, &sharp);
        for ((course, number, _), bits) in sharp.iter().zip(rounded) {
            let cut = match courses[*course].ends {
                None => Some(bits.clone()),
                Some(ends) => cut(&bits, (&self.contacts[ends.from.0], &self.contacts[ends.to.0])),
            };
            if cut.is_none() {
                narrowings.extend(bits.iter().flat_map(|bit| whole(pitches, bit.origin)));
            }
            let bits = cut.unwrap_or(bits);
            narrowings.extend(self.hidden(*course, &bits).flat_map(|origin| whole(pitches, origin)));
            let weight = self.lines[courses[*course].band.0].weight;
            lanes.push(Lane { course: *course, number: *number, weight, bits });
        }
        (lanes, narrowings)
    }

    fn rounded(&self, pitches: &Pitches, sharp: &[(usize, usize, Inset)]) -> Vec<Vec<Bit>> {
        let depths = |number: usize| {
            move |bit: &Bit| {
                let place = Place { side: bit.origin.side, knot: bit.origin.knots.0 };
                let deepest = self.nests.beside(bit.origin.side).map_or(number + 1, |nest| nest.to.max(number + 1));
                let set_back = pitches.set_back(place);
                (number as f64 + 1.0 - set_back, deepest as f64 - set_back)
            }
        };
        let held = |course: usize| {
            move |into: &Bit, out: &Bit| {
                into.part != out.part && (self.mixes(course, into.part) || self.mixes(course, out.part))
            }
        };
        let on_right =
            |course: usize| self.walk(course).first().is_some_and(|(walked, side)| side.on_right == walked.forward);
        let mut centres = Centres::default();
        let with = |course: usize, number: usize, inset: &Inset, work: &mut dyn FnMut(&Cornered<'_>)| {
            work(&Cornered {
                bits: &inset.bits,
                region_on_right: on_right(course),
                depths: &depths(number),
                holds: &held(course),
            });
        };
        for (course, number, inset) in sharp {
            with(*course, *number, inset, &mut |line| centres.take(line));
        }
        let mut all = Vec::new();
        for (course, number, inset) in sharp {
            with(*course, *number, inset, &mut |line| all.push(centres.rounded(line)));
        }
        all
    }

    /// Where a course mixes but its line shows nothing.
    fn hidden<'b>(&'b self, course: usize, bits: &'b [Bit]) -> impl Iterator<Item = Origin> + 'b {
        let is_seen = |part: Part| {
            let own = bits.iter().filter(|bit| bit.part == part);
            own.map(|bit| bit.length() / bit.pitch_mm).sum::<f64>() > 0.1
        };
        let steps = (0..self.drawing.channels.courses[course].steps.len()).map(Part::Step);
        let lost = steps.filter(move |&part| self.mixes(course, part) && !is_seen(part));
        lost.flat_map(move |part| {
            let walk = self.walk(course);
            let own = walk.into_iter().filter(move |(walked, _)| walked.part == part);
            own.map(|(_, side)| Origin { side, straight: 0, knots: (0, usize::MAX) })
        })
    }

    fn mixes(&self, course: usize, part: Part) -> bool {
        match part {
            Part::Step(at) => self.mixing.contains(&self.drawing.channels.courses[course].steps[at].bundle),
            Part::Before | Part::After => false,
        }
    }

    /// The narrowings that end a clash.
    fn resolved(&self, pitches: &Pitches, lanes: &[Lane], clash: &Clash) -> Vec<Narrowing> {
        let bit = |(line, bit): (usize, usize)| &lanes[line].bits[bit];
        let own = bit(clash.line);
        match clash.other {
            Other::Border(border) => {
                let lines = lanes[clash.line.0].number as f64 + 1.7 - set_back(pitches, own.origin);
                along(pitches, own, (border, border), lines)
            }
            Other::Line(other) => {
                let other = bit(other);
                let lines = (pitches.count(own.origin.side) + pitches.count(other.origin.side) + 1) as f64;
                let first = along(pitches, own, ((other.from, other.to), stretch(pitches, other.origin)), lines);
                let second = along(pitches, other, ((own.from, own.to), stretch(pitches, own.origin)), lines);
                first.into_iter().chain(second).collect()
            }
        }
    }
}

fn set_back(pitches: &Pitches, origin: Origin) -> f64 {
    pitches.set_back(Place { side: origin.side, knot: origin.knots.0 })
}

/// The straight stretch of border that an origin names.
fn stretch(pitches: &Pitches, origin: Origin) -> (At, At) {
    let knots = &pitches.tracks[origin.side.piece].knots;
    (knots[origin.knots.0], knots[origin.knots.1.min(knots.len() - 1)])
}

/// Narrows the knots of a bit where another line is near, so that so many lines fit between both borders: by no more than
/// some at once, and by a little at least somewhere.
fn along(pitches: &Pitches, bit: &Bit, (line, border): ((At, At), (At, At)), lines: f64) -> Vec<Narrowing> {
    let knots = &pitches.tracks[bit.origin.side.piece].knots;
    let (low, high) = bit.origin.knots;
    let to_line = |knot: usize| distance(nearest(knots[knot], (bit.from, bit.to)), line);
    let of_knot = |knot: usize| {
        let place = Place { side: bit.origin.side, knot };
        let held = pitches.at(place);
        let allowed = distance(knots[knot], border) / lines;
        let narrow = allowed < 0.95 * held && to_line(knot) < 1.2 * held;
        narrow.then_some((place, allowed.max(MOST_AT_ONCE * held)))
    };
    let narrowed: Vec<Narrowing> = (low..=high).filter_map(of_knot).collect();
    if !narrowed.is_empty() {
        return narrowed;
    }
    let nearest = (low..=high).reduce(|best, next| if to_line(next) < to_line(best) { next } else { best });
    let place = nearest.map(|knot| Place { side: bit.origin.side, knot });
    place.map(|place| (place, STEP * pitches.at(place))).into_iter().collect()
}

/// The point of a straight stretch that is nearest to another point.
fn nearest(point: At, (a, b): (At, At)) -> At {
    let along = sub(b, a);
    let square = dot(along, along).max(1e-12);
    between(a, b, (dot(sub(point, a), along) / square).clamp(0.0, 1.0))
}

/// Narrows all knots of an origin.
fn whole(pitches: &Pitches, origin: Origin) -> Vec<Narrowing> {
    let last = pitches.tracks[origin.side.piece].knots.len() - 1;
    let knots = origin.knots.0..=origin.knots.1.min(last);
    knots.map(|knot| Place { side: origin.side, knot }).map(|place| (place, STEP * pitches.at(place))).collect()
}

/// A line may cut a corner short, but not a whole bay.
fn far_skip(pitches: &Pitches, (bits, passed_mm): &([Bit; 2], f64), number: usize) -> Vec<Narrowing> {
    let depth_mm = (number + 1) as f64 * bits[0].pitch_mm.max(bits[1].pitch_mm);
    if *passed_mm <= 10.0 * depth_mm {
        return Vec::new();
    }
    let lines = (pitches.count(bits[0].origin.side) + pitches.count(bits[1].origin.side) + 1) as f64;
    let other = |at: usize| ((bits[1 - at].from, bits[1 - at].to), stretch(pitches, bits[1 - at].origin));
    [0, 1].into_iter().flat_map(|at| along(pitches, &bits[at], other(at), lines)).collect()
}
