//! Mixing: which channels of a piece share one potential at once, and how the others come nearer over its length.

use std::collections::BTreeMap;

use crate::device::Mixing;
use crate::layout::PieceIdx;
use crate::network::Band;
use crate::network::Bundle;
use crate::network::BundleIdx;
use crate::network::Coupling;
use crate::network::Course;
use crate::network::Feed;
use crate::network::Network;
use crate::network::Operating;
use crate::number::Number;
use crate::number::Rational;

/// What has one potential along a piece at once.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub(super) enum Key {
    /// All that runs there.
    All,
    /// A group of ladder steps.
    Group(usize),
    /// One ladder step: its parts always share one potential.
    Step(usize),
}

/// The key of a band along a piece.
pub(super) fn key(operating: &Operating, piece: PieceIdx, band: &Band) -> Key {
    match operating.coupling[piece.0] {
        Coupling::Alike(Mixing::Full) | Coupling::Grouped { between: Mixing::Full, .. } => Key::All,
        Coupling::Grouped { within: Mixing::Full, .. } => group(operating, band),
        _ => Key::Step(band.step),
    }
}

/// The group of a band's ladder step; a step in no group is its own.
fn group(operating: &Operating, band: &Band) -> Key {
    let holds = |group: &Vec<usize>| group.contains(&(band.ladder_step + 1));
    operating.groups.iter().position(holds).map_or(Key::Step(band.step), Key::Group)
}

/// The bundles in which channels leave pieces that change their potentials.
#[derive(Default)]
pub(super) struct Blends {
    pub bundles: Vec<Bundle<Number>>,
}

/// Channels of one potential as they enter a piece.
struct Entering {
    bundle: BundleIdx,
    /// What mixes with it first; for all channels alike everything.
    group: Key,
    weight: Rational,
    /// The steps of courses that run in it: (course, step).
    steps: Vec<(usize, usize)>,
}

impl Blends {
    /// Gives every step of a course along such a piece the bundle in which it leaves. Bundles are numbered on from those
    /// of the steps.
    pub fn along(bands: &[Band], courses: &mut [Course], (network, operating): (&Network, &Operating)) -> Self {
        let steps = courses.iter().flat_map(|course| &course.steps);
        let first = steps.map(|step| step.bundle.0 + 1).max().unwrap_or(0);
        let mut blends = Self::default();
        for (piece, entering) in entering(bands, courses, operating) {
            let Some(rule) = Rule::of(&operating.coupling[piece.0], network.lengths_um[piece.0]) else { continue };
            let leaving = entering.len() > 1;
            for (own, bundle) in entering.iter().enumerate().filter(|_| leaving) {
                let next = BundleIdx(first + blends.bundles.len());
                bundle.steps.iter().for_each(|&(course, step)| courses[course].steps[step].leaving = next);
                blends.bundles.push(Bundle { weight: bundle.weight.clone(), feeds: rule.feeds(&entering, own) });
            }
        }
        blends
    }
}

/// What runs along every piece whose coupling depends on its length.
fn entering(bands: &[Band], courses: &[Course], operating: &Operating) -> BTreeMap<PieceIdx, Vec<Entering>> {
    let mut pieces: BTreeMap<PieceIdx, Vec<Entering>> = BTreeMap::new();
    for (at, course) in courses.iter().enumerate() {
        let band = &bands[course.band.0];
        for (place, step) in course.steps.iter().enumerate() {
            if !operating.coupling[step.piece.0].has_length() {
                continue;
            }
            let here = pieces.entry(step.piece).or_default();
            let found = here.iter().position(|entering| entering.bundle == step.bundle).unwrap_or_else(|| {
                let group = match &operating.coupling[step.piece.0] {
                    Coupling::Grouped { .. } => group(operating, band),
                    _ => Key::All,
                };
                here.push(Entering { bundle: step.bundle, group, weight: Rational::ZERO, steps: Vec::new() });
                here.len() - 1
            });
            here[found].weight += &(&band.to - &band.from);
            here[found].steps.push((at, place));
        }
    }
    pieces
}

/// How channels leave a piece of some length.
enum Rule {
    /// By mixing: what is left of a channel's departure from the mean of its group, and of that from the mean of all.
    Mixed { within: Kept, between: Kept },
    /// By backscattering: the share of each mode that passes.
    Turned { passed: f64, turned: f64 },
}

/// exp(−x), and 1 − exp(−x) with all its digits.
struct Kept {
    kept: f64,
    lost: f64,
}

impl Kept {
    fn over(length_um: f64, mixing: &Mixing) -> Self {
        match mixing {
            Mixing::None => Self { kept: 1.0, lost: 0.0 },
            Mixing::Full => Self { kept: 0.0, lost: 1.0 },
            Mixing::Over(length) => {
                let ratio = length_um / length.to_um();
                Self { kept: libm::exp(-ratio), lost: -libm::expm1(-ratio) }
            }
        }
    }
}

impl Rule {
    /// The departure of each channel from the mean, weighted by conductance, decays as exp(−L/ℓ); with groups
    /// dμ_i/dx = −(μ_i − m_group)/ℓ − (μ_i − m_all)/ℓ_g. None where the length does not enter.
    ///
    /// Modes that run against each other exchange carriers: a stretch of length L passes 1/(1 + L/λ) of each, which makes
    /// it a resistor (h/e²)(1 + L/λ) between contacts.
    fn of(coupling: &Coupling, length_um: f64) -> Option<Self> {
        match coupling {
            Coupling::Alike(mixing @ Mixing::Over(_)) => {
                let between = Kept::over(length_um, &Mixing::None);
                Some(Self::Mixed { within: Kept::over(length_um, mixing), between })
            }
            Coupling::Grouped { within, between } if coupling.has_length() => {
                Some(Self::Mixed { within: Kept::over(length_um, within), between: Kept::over(length_um, between) })
            }
            Coupling::Backscatter(length) => {
                let ratio = length_um / length.to_um();
                Some(Self::Turned { passed: 1.0 / (1.0 + ratio), turned: ratio / (1.0 + ratio) })
            }
            Coupling::Alike(_) | Coupling::Grouped { .. } => None,
        }
    }

    /// What feeds the bundle that leaves in place of number `own`, with no difference of two numbers in it.
    fn feeds(&self, entering: &[Entering], own: usize) -> Vec<(Feed, Number)> {
        let weight = entering[own].weight.to_f64();
        let feed = |(other, from): (usize, &Entering)| {
            let share = self.share(entering, own, other);
            (share > 0.0).then(|| (Feed::Bundle(from.bundle), Number::Float(weight * share)))
        };
        entering.iter().enumerate().filter_map(feed).collect()
    }

    /// Share of the potential of `other` as it enters in that of `own` as it leaves:
    /// out_i = m_all + (m_g − m_all) a + (μ_i − m_g) a b, sorted by what feeds it.
    fn share(&self, entering: &[Entering], own: usize, other: usize) -> f64 {
        match self {
            Self::Turned { passed, .. } if own == other => *passed,
            Self::Turned { turned, .. } => *turned,
            Self::Mixed { within, between } => {
                let weight = entering[other].weight.to_f64();
                let sum = |group: Option<Key>| -> f64 {
                    let held = entering.iter().filter(|entering| group.is_none_or(|group| entering.group == group));
                    held.map(|entering| entering.weight.to_f64()).sum()
                };
                let group = entering[own].group;
                let of_all = between.lost * weight / sum(None);
                let same = entering[other].group == group;
                let of_group = if same { between.kept * within.lost * weight / sum(Some(group)) } else { 0.0 };
                let of_own = if own == other { between.kept * within.kept } else { 0.0 };
                of_all + of_group + of_own
            }
        }
    }
}
