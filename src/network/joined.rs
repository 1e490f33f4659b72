//! Several devices as one network: their settings one after the other, their channels solved device by device.
//!
//! Each device keeps its own ladder, so that levels of one never count in another. Faces follow one another with the
//! unbounded one in common, everything else is counted over the whole, as in a joined layout.

use std::ops::Range;

use crate::device::Bench;
use crate::device::ContactIdx;
use crate::device::OperatingPoint;
use crate::layout::PieceIdx;
use crate::layout::VertexIdx;
use crate::network::Arithmetic;
use crate::network::Band;
use crate::network::BandIdx;
use crate::network::Bundle;
use crate::network::BundleIdx;
use crate::network::Course;
use crate::network::CourseEnds;
use crate::network::CourseStep;
use crate::network::Feed;
use crate::network::Ladders;
use crate::network::Network;
use crate::network::Operating;
use crate::network::Terminal;
use crate::network::Wired;
use crate::network::build::operating;
use crate::number::Number;
use crate::number::Rational;
use crate::quantity::Polarity;

/// The setting of all devices of a bench; posts follow the contacts.
pub(super) fn joined(network: &Network, bench: &Bench, point: &OperatingPoint, polarity: Polarity) -> Operating {
    let mut whole = Operating {
        fillings: vec![Rational::ZERO],
        enclosing: vec![None],
        ladder: Default::default(),
        coupling: Vec::new(),
        groups: Vec::new(),
        backward: Vec::new(),
        transmission: Vec::new(),
        polarity,
        arithmetic: Arithmetic::Exact,
        parts: Vec::new(),
    };
    for ((network, part), point) in network.parts.iter().zip(&bench.parts).zip(&point.parts) {
        let one = operating(network, &part.device, point, polarity);
        whole.fillings.extend(one.fillings.into_iter().skip(1));
        whole.enclosing.extend(one.enclosing.into_iter().skip(1));
        whole.coupling.extend(one.coupling);
        whole.transmission.extend(one.transmission);
        whole.parts.push(Ladders { ladder: one.ladder, groups: one.groups, backward: one.backward });
    }
    whole.transmission.resize(network.contacts, vec![Rational::ONE]);
    whole
}

/// What belongs to one device in the counting of the whole.
#[derive(Clone, Debug)]
struct Span {
    /// Without the unbounded face.
    faces: Range<usize>,
    pieces: Range<usize>,
    vertices: Range<usize>,
    contacts: Range<usize>,
}

fn spans(network: &Network) -> Vec<Span> {
    let mut at = Span { faces: 1..1, pieces: 0..0, vertices: 0..0, contacts: 0..0 };
    let next = |before: &Range<usize>, count: usize| before.end..before.end + count;
    let span = |part: &Network| {
        at = Span {
            faces: next(&at.faces, part.topology.faces.len() - 1),
            pieces: next(&at.pieces, part.topology.pieces.len()),
            vertices: next(&at.vertices, part.topology.fans.len()),
            contacts: next(&at.contacts, part.contacts),
        };
        at.clone()
    };
    network.parts.iter().map(span).collect()
}

impl Operating {
    /// The setting of one device of a bench.
    fn of_part(&self, span: &Span, ladders: &Ladders) -> Self {
        let face = |at: usize| if at == 0 { 0 } else { span.faces.start + at - 1 };
        let faces = 0..span.faces.len() + 1;
        Self {
            fillings: faces.clone().map(|at| self.fillings[face(at)].clone()).collect(),
            enclosing: faces.map(|at| self.enclosing[face(at)].clone()).collect(),
            ladder: ladders.ladder.clone(),
            groups: ladders.groups.clone(),
            backward: ladders.backward.clone(),
            coupling: self.coupling[span.pieces.clone()].to_vec(),
            transmission: self.transmission[span.contacts.clone()].to_vec(),
            polarity: self.polarity,
            arithmetic: self.arithmetic,
            parts: Vec::new(),
        }
    }
}

/// Bands, courses and what flows where, before it is decided in which numbers.
#[derive(Default)]
pub(super) struct Assembled {
    pub bands: Vec<Band>,
    pub courses: Vec<Course>,
    pub wires: Wired<Number>,
}

/// The channels of all devices; `of_one` gives those of one.
pub(super) fn assembled(
    network: &Network,
    setting: &Operating,
    of_one: impl Fn(&Network, &Operating) -> Assembled,
) -> Assembled {
    let mut whole = Assembled::default();
    for ((part, span), ladders) in network.parts.iter().zip(spans(network)).zip(&setting.parts) {
        whole.append(of_one(part, &setting.of_part(&span, ladders)), &span);
    }
    whole.wires.terminals.resize(network.contacts, Terminal::default());
    whole
}

impl Assembled {
    fn append(&mut self, part: Assembled, span: &Span) {
        let place = Place { bands: self.bands.len(), bundles: self.wires.bundles.len(), span };
        let steps = self.bands.iter().map(|band| band.step + 1).max().unwrap_or(0);
        self.bands.extend(part.bands.into_iter().map(|band| Band { step: steps + band.step, ..band }));
        self.courses.extend(part.courses.iter().map(|course| place.course(course)));
        self.wires.bundles.extend(part.wires.bundles.into_iter().map(|bundle| place.fed(bundle)));
        let absorbed = |(bundle, weight): &(BundleIdx, Rational)| (place.bundle(*bundle), weight.clone());
        let terminal = |one: &Terminal| Terminal { absorbed: one.absorbed.iter().map(absorbed).collect() };
        self.wires.terminals.extend(part.wires.terminals.iter().map(terminal));
    }
}

/// Where the counting of a device begins.
struct Place<'a> {
    bands: usize,
    bundles: usize,
    span: &'a Span,
}

impl Place<'_> {
    fn bundle(&self, bundle: BundleIdx) -> BundleIdx {
        BundleIdx(self.bundles + bundle.0)
    }

    fn contact(&self, contact: ContactIdx) -> ContactIdx {
        ContactIdx(self.span.contacts.start + contact.0)
    }

    fn piece(&self, piece: PieceIdx) -> PieceIdx {
        PieceIdx(self.span.pieces.start + piece.0)
    }

    fn course(&self, course: &Course) -> Course {
        let end = |(vertex, piece, forward): (VertexIdx, PieceIdx, bool)| {
            (VertexIdx(self.span.vertices.start + vertex.0), self.piece(piece), forward)
        };
        let ends = |ends: CourseEnds| CourseEnds {
            from: self.contact(ends.from),
            to: self.contact(ends.to),
            before: end(ends.before),
            after: end(ends.after),
        };
        let step = |step: &CourseStep| CourseStep {
            piece: self.piece(step.piece),
            bundle: self.bundle(step.bundle),
            leaving: self.bundle(step.leaving),
            ..*step
        };
        Course {
            band: BandIdx(self.bands + course.band.0),
            ends: course.ends.map(ends),
            steps: course.steps.iter().map(step).collect(),
        }
    }

    fn fed(&self, bundle: Bundle<Number>) -> Bundle<Number> {
        let feed = |feed: Feed| match feed {
            Feed::Contact(contact) => Feed::Contact(self.contact(contact)),
            Feed::Bundle(from) => Feed::Bundle(self.bundle(from)),
        };
        let feeds = bundle.feeds.into_iter().map(|(from, weight)| (feed(from), weight)).collect();
        Bundle { feeds, ..bundle }
    }
}
