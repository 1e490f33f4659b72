//! Edge channels: where they run, where they meet, what share goes where.
//!
//! Owns: [`Network`] (what is beside what, with lengths) and [`Channels`] (the channels of one setting of the fillings at
//! one polarity). Takes a `Layout`, then an [`Operating`] setting; gives [`Channels`]. Must never contain coordinates or SI
//! units: pieces are ids and lengths.

use crate::device::ContactIdx;
use crate::device::Mixing;
pub use crate::layout::FaceIdx;
pub use crate::layout::FaceLabel;
use crate::layout::PieceIdx;
use crate::layout::Topology;
use crate::layout::VertexIdx;
use crate::number::Rational;
use crate::quantity::Polarity;

mod bands;
mod boundary;
mod build;
mod bundles;
mod courses;
mod rim;

pub use build::channels;
pub use build::network;
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
}

/// One setting of the fillings, at one polarity.
#[derive(Clone, Debug, PartialEq)]
pub struct Operating {
    /// Filling of every face, in the order of the topology; zero for vacuum and contacts.
    pub fillings: Vec<Rational>,
    /// Steps of the ladder that enclose partial fillings: (lower, upper) of |ν|, per face; none where ν is a step.
    pub enclosing: Vec<Option<(Rational, Rational)>>,
    /// Mixing along every piece.
    pub mixing: Vec<Mixing>,
    /// Transmission of every contact, outermost ladder step first (the last value repeats).
    pub transmission: Vec<Vec<Rational>>,
    /// Polarity of the field.
    pub polarity: Polarity,
}

/// Index of a level band.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct BandIdx(pub usize);

/// Index of a bundle.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct BundleIdx(pub usize);

/// Carrier of a channel: the sign of the filling.
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
}

/// Where a share of a bundle's potential comes from.
#[derive(Clone, Debug, PartialEq)]
pub enum Feed {
    /// A contact's own potential.
    Contact(ContactIdx),
    /// Another bundle's potential.
    Bundle(BundleIdx),
}

/// A set of channels side by side with one potential: the weighted mean of its feeds.
#[derive(Clone, Debug, PartialEq)]
pub struct Bundle {
    /// Conductance in e²/h.
    pub weight: Rational,
    /// Feeds with their conductance; the conductances sum to `weight`. Empty: a loop that no contact feeds.
    pub feeds: Vec<(Feed, Rational)>,
}

/// What a contact emits and absorbs.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Terminal {
    /// Conductance emitted at the contact's own potential (Σ weight × transmission).
    pub emitted: Rational,
    /// Absorbed from bundles: (bundle, weight × transmission).
    pub absorbed: Vec<(BundleIdx, Rational)>,
}

/// All channels of one setting at one polarity.
#[derive(Clone, Debug, PartialEq)]
pub struct Channels {
    /// Bands: electrons from the outermost inward, then holes.
    pub bands: Vec<Band>,
    /// Courses, band by band.
    pub courses: Vec<Course>,
    /// Bundles.
    pub bundles: Vec<Bundle>,
    /// One per contact.
    pub terminals: Vec<Terminal>,
}
