//! Edge channels: where they run, where they meet, what share goes where.
//!
//! Owns: [`Network`] (what is beside what, with lengths) and [`Channels`] (the channels of one setting of the fillings at
//! one polarity). Takes a `Layout`, then an [`Operating`] setting; gives [`Channels`]. Must never contain coordinates or SI
//! units: pieces are ids and lengths.

use crate::device::ContactIdx;
use crate::device::Ladder;
use crate::device::Mixing;
pub use crate::layout::FaceIdx;
pub use crate::layout::FaceLabel;
use crate::layout::PieceIdx;
use crate::layout::Topology;
use crate::layout::VertexIdx;
use crate::number::Number;
use crate::number::Rational;
use crate::quantity::Nanometres;
use crate::quantity::Polarity;

mod bands;
mod boundary;
mod build;
mod bundles;
mod courses;
mod joined;
mod mixing;
mod rim;

pub use build::channels;
pub use build::network;
pub use build::of_device;
pub use build::operating;
pub use rim::rim_order;

/// What is beside what. One network serves every operating point, polarity and hypothesis.
#[derive(Clone, Debug, PartialEq)]
pub struct Network {
    /// Faces, pieces and fans.
    pub topology: Topology,
    /// Length of every piece in µm (float: only mixing over a length reads it).
    pub lengths_um: Vec<f64>,
    /// Number of contacts.
    pub contacts: usize,
    /// On a bench the network of every device by itself, else empty.
    pub parts: Vec<Network>,
    /// Wires between contacts of a bench.
    pub links: Vec<Link<Number>>,
}

/// A wire between two contacts.
#[derive(Clone, Debug, PartialEq)]
pub struct Link<S> {
    /// What it joins.
    pub ends: [ContactIdx; 2],
    /// Its resistance in h/e²; at 0 both have one potential.
    pub resistance: S,
}

/// One setting of the fillings, at one polarity.
#[derive(Clone, Debug, PartialEq)]
pub struct Operating {
    /// Filling of every face, in the order of the topology; zero for vacuum and contacts.
    pub fillings: Vec<Rational>,
    /// Steps of the ladder that enclose partial fillings: (lower, upper) of |ν|, per face; none where ν is a step.
    pub enclosing: Vec<Option<(Rational, Rational)>>,
    /// Which filling each ladder step ends at.
    pub ladder: Ladder,
    /// What channels do to one another along every piece.
    pub coupling: Vec<Coupling>,
    /// Ladder steps that mix with one another, counted from 1 at the outermost; a step in none is its own.
    pub groups: Vec<Vec<usize>>,
    /// Where edge modes stand in place of fillings: `fillings` holds the forward modes of every face, this the backward
    /// ones. Empty elsewhere.
    pub backward: Vec<Rational>,
    /// Transmission of every contact, outermost ladder step first (the last value repeats).
    pub transmission: Vec<Vec<Rational>>,
    /// Polarity of the field.
    pub polarity: Polarity,
    /// In which numbers to solve.
    pub arithmetic: Arithmetic,
    /// On a bench the ladder, groups and backward modes of every device, and those above mean nothing; else empty.
    pub parts: Vec<Ladders>,
}

/// Which levels of one device belong together.
#[derive(Clone, Debug, PartialEq)]
pub struct Ladders {
    /// Which filling each ladder step ends at.
    pub ladder: Ladder,
    /// As in [`Operating`].
    pub groups: Vec<Vec<usize>>,
    /// As in [`Operating`], for the faces of the device.
    pub backward: Vec<Rational>,
}

impl Operating {
    /// The same in fractions, with another rule wherever a length enters.
    pub fn without_lengths(&self, rule: &Mixing) -> Self {
        let coupling = self.coupling.iter().map(|coupling| coupling.without_length(rule)).collect();
        Self { coupling, arithmetic: Arithmetic::Exact, ..self.clone() }
    }
}

/// What channels that run along one piece do to one another.
#[derive(Clone, Debug, PartialEq)]
pub enum Coupling {
    /// All mix alike.
    Alike(Mixing),
    /// Ladder steps of one group mix, and more slowly the groups.
    Grouped {
        /// Within a group.
        within: Mixing,
        /// Between groups.
        between: Mixing,
    },
    /// A forward and a backward mode turn into one another: the length λ over which a stretch adds h/e² to itself.
    Backscatter(Nanometres),
}

impl Coupling {
    /// Whether the length of the piece enters.
    pub fn has_length(&self) -> bool {
        match self {
            Self::Alike(mixing) => mixing.has_length(),
            Self::Grouped { within, between } => within.has_length() || between.has_length(),
            Self::Backscatter(_) => true,
        }
    }

    /// The same with another rule wherever a length enters.
    pub fn without_length(&self, rule: &Mixing) -> Self {
        let replaced = |mixing: &Mixing| if mixing.has_length() { rule.clone() } else { mixing.clone() };
        match self {
            Self::Alike(mixing) => Self::Alike(replaced(mixing)),
            Self::Grouped { within, between } => Self::Grouped { within: replaced(within), between: replaced(between) },
            Self::Backscatter(_) => Self::Alike(rule.clone()),
        }
    }
}

/// In which numbers a setting is solved.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Arithmetic {
    /// In fractions wherever no length enters.
    Exact,
    /// In floats: quicker where many settings are tried.
    Float,
}

/// Index of a level band.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct BandIdx(pub usize);

/// Index of a bundle.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct BundleIdx(pub usize);

/// Carrier of a channel: the sign of the filling. Edge modes count as electrons where they run as those do, forward, and as
/// holes where they run backward.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Carrier {
    /// ν > 0.
    Electron,
    /// ν < 0.
    Hole,
}

/// A band of levels that run everywhere alike: the channel that bounds all regions with |ν| ≥ `to` (of one sign).
#[derive(Clone, Debug, PartialEq)]
pub struct Band {
    /// Sign of the filling.
    pub carrier: Carrier,
    /// Lower |ν|.
    pub from: Rational,
    /// Upper |ν|; the weight in e²/h is `to − from`.
    pub to: Rational,
    /// Place in the nest of its carrier: 0 is outermost, nearest the mesa edge.
    pub rank: usize,
    /// Bands of one ladder step share this number; they always share one potential.
    pub step: usize,
    /// The ladder step that it belongs to, or the first of several: 0 is the outermost of its carrier.
    pub ladder_step: usize,
}

/// One stretch of a channel: from the contact that emits it to the contact that absorbs it, or a closed loop.
#[derive(Clone, Debug, PartialEq)]
pub struct Course {
    /// Which band.
    pub band: BandIdx,
    /// Where it leaves and arrives; none for a closed loop.
    pub ends: Option<CourseEnds>,
    /// The pieces in the order in which carriers of this channel pass them.
    pub steps: Vec<CourseStep>,
}

/// The contacts at both ends of a course, and how the border of (region and contacts) goes on there.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct CourseEnds {
    /// The contact that emits.
    pub from: ContactIdx,
    /// The contact that absorbs.
    pub to: ContactIdx,
    /// The vertex at which the channel leaves `from`, and the piece along which the border of region-and-contacts
    /// comes into it (its walk direction as in [`CourseStep`]).
    pub before: (VertexIdx, PieceIdx, bool),
    /// The vertex at which the channel enters `to`, and the piece along which that border goes on.
    pub after: (VertexIdx, PieceIdx, bool),
}

/// One piece of a course.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct CourseStep {
    /// The piece.
    pub piece: PieceIdx,
    /// Walked from its first to its last point.
    pub forward: bool,
    /// Channels of one bundle share one potential.
    pub bundle: BundleIdx,
    /// The bundle in which it leaves the piece: another one where potentials change along it.
    pub leaving: BundleIdx,
}

impl CourseStep {
    /// Whether the potential changes along the piece.
    pub fn is_changed(&self) -> bool {
        self.leaving != self.bundle
    }
}

/// Where a share of a bundle's potential comes from.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Feed {
    /// A contact's own potential.
    Contact(ContactIdx),
    /// Another bundle's potential.
    Bundle(BundleIdx),
}

/// A set of channels side by side with one potential: the weighted mean of its feeds.
#[derive(Clone, Debug, PartialEq)]
pub struct Bundle<S> {
    /// Conductance in e²/h.
    pub weight: Rational,
    /// Feeds with their conductance; the conductances sum to `weight`. Empty: a loop that no contact feeds.
    pub feeds: Vec<(Feed, S)>,
}

/// What a contact emits and absorbs.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Terminal {
    /// Absorbed from bundles: (bundle, weight × transmission). As much is emitted at the contact's own potential.
    pub absorbed: Vec<(BundleIdx, Rational)>,
}

/// Bundles and contacts, joined by what flows between them, in one kind of number.
#[derive(Clone, Debug, PartialEq)]
pub struct Wired<S> {
    /// Bundles.
    pub bundles: Vec<Bundle<S>>,
    /// One per contact.
    pub terminals: Vec<Terminal>,
    /// Wires between contacts of a bench.
    pub links: Vec<Link<S>>,
}

impl<S> Default for Wired<S> {
    fn default() -> Self {
        Self { bundles: Vec::new(), terminals: Vec::new(), links: Vec::new() }
    }
}

/// What flows where: in fractions, unless something enters that is none.
#[derive(Clone, Debug, PartialEq)]
pub enum Junctions {
    /// In fractions.
    Exact(Wired<Rational>),
    /// In floats.
    Float(Wired<f64>),
}

/// All channels of one setting at one polarity.
#[derive(Clone, Debug, PartialEq)]
pub struct Channels {
    /// Bands: electrons from the outermost inward, then holes.
    pub bands: Vec<Band>,
    /// Courses, band by band.
    pub courses: Vec<Course>,
    /// Bundles and contacts.
    pub junctions: Junctions,
}

impl Channels {
    /// Bundles and contacts in fractions, where they are.
    pub fn exact(&self) -> Option<&Wired<Rational>> {
        match &self.junctions {
            Junctions::Exact(wired) => Some(wired),
            Junctions::Float(_) => None,
        }
    }
}
