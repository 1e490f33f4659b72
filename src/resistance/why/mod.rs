//! Why a reading has its number: the channels that make it, told from the solution itself.
//!
//! Nothing is solved here. The potentials are those of the contacts and bundles that were solved, scaled so that the inlet
//! is at 1 and the outlet at 0; every mean that is stated is one of the equations that the solver solved (in floats to
//! nine digits).

mod chain;
mod flow;
mod route;
mod steps;

use crate::conductance::Conductance;
use crate::device::ContactIdx;
use crate::network::BundleIdx;
use crate::network::Carrier;
use crate::network::FaceIdx;
use crate::network::Network;
use crate::number::Number;
use crate::number::Scalar;
use crate::resistance::Expected;
use crate::resistance::Prediction;
use crate::resistance::ReadingState;
use crate::resistance::Setup;
use crate::resistance::islands::Islands;
use crate::resistance::why::flow::Flow;
use crate::resistance::why::steps::Potentials;

/// Where a potential is made.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Origin {
    /// A contact, which takes the mean of what it absorbs, unless a current is driven there.
    Contact(ContactIdx),
    /// Channels that take the mean of what runs into them.
    Mixture(BundleIdx),
}

/// A stretch of border along which channels run.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Stretch {
    /// The outer rim of a region.
    Rim(FaceIdx),
    /// The rim of a region at a cut-out.
    CutOut(FaceIdx),
    /// The border between two regions, in the order of their faces.
    Border(FaceIdx, FaceIdx),
    /// By a contact that does not take them up.
    Past(ContactIdx),
}

/// Channels that carry one potential from where it is made to where they end.
#[derive(Clone, Debug, PartialEq)]
pub struct Strand {
    /// Where their potential is made.
    pub from: Origin,
    /// Where they are absorbed, or mix.
    pub to: Origin,
    /// Their conductance in e²/h.
    pub weight: Number,
    /// Sign of the filling; none where channels of both signs run together.
    pub carrier: Option<Carrier>,
    /// Where they run, in order, without repeats; empty where they leave and end at one place.
    pub route: Vec<Stretch>,
    /// The bundles in which they run.
    pub bundles: Vec<BundleIdx>,
}

/// Channels that arrive, with the potential that they bring.
#[derive(Clone, Debug, PartialEq)]
pub struct Arrival {
    /// The channels.
    pub strand: Strand,
    /// Their potential as a share of the voltage between inlet and outlet.
    pub share: Number,
}

/// One step of an explanation.
#[derive(Clone, Debug, PartialEq)]
pub enum WhyStep {
    /// The channels that leave the inlet at share 1, or the outlet at share 0.
    Leaves {
        /// Inlet or outlet.
        contact: ContactIdx,
        /// Its share.
        share: Number,
        /// Where the channels run and end.
        departures: Vec<Strand>,
    },
    /// Contacts that take over one potential, each from the one before, along the rim.
    HandedOn {
        /// Where the potential comes from.
        from: Origin,
        /// The contacts in the order in which the channels reach them.
        contacts: Vec<ContactIdx>,
        /// What arrives at each.
        arrivals: Vec<Vec<Arrival>>,
        /// The potential.
        share: Number,
        /// What the last of them sends out, where that does not simply run along the rim to one contact.
        departures: Vec<Strand>,
    },
    /// A contact or a mixture that takes the mean of what arrives.
    Mean {
        /// Which.
        at: Origin,
        /// Where the mixture is; none for a contact.
        place: Option<MixturePlace>,
        /// What arrives.
        arrivals: Vec<Arrival>,
        /// The mean, weighted by conductance.
        share: Number,
        /// What it sends out, where that does not simply run along the rim to one contact.
        departures: Vec<Strand>,
    },
}

/// Where channels mix.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum MixturePlace {
    /// Behind a contact that lets a part of them pass.
    Behind(ContactIdx),
    /// Along a border.
    Along(Stretch),
    /// In part, as far as the length of a border lets them.
    Partly(Stretch),
}

/// The current that flows at share 1 of the inlet and 0 of the outlet: what a contact sends out less what it takes in.
#[derive(Clone, Debug, PartialEq)]
pub struct CurrentBalance {
    /// Inlet or outlet, whichever takes fewer steps to explain.
    pub at: ContactIdx,
    /// Conductance in e²/h of the channels that it sends out, at its own share.
    pub emitted: Number,
    /// What arrives.
    pub arrivals: Vec<Arrival>,
    /// The current from inlet to outlet, in e²/h times the voltage between them.
    pub current: Number,
}

/// Why a reading has its number.
#[derive(Clone, Debug, PartialEq)]
pub struct Explanation {
    /// The steps, each resting on those before it where it can.
    pub steps: Vec<WhyStep>,
    /// Potentials of the voltage contacts as shares of the voltage between inlet and outlet: (V_k, V_l).
    pub voltage: [Number; 2],
    /// The current at that voltage.
    pub balance: CurrentBalance,
    /// (V_k − V_l) / current in h/e²: the reading.
    pub h_per_e2: Number,
}

/// Why a reading has no number.
#[derive(Clone, Debug, PartialEq)]
pub enum NoNumber {
    /// The lead of the contact is broken.
    Open(ContactIdx),
    /// No channel begins or ends in the contact.
    PassesNothing(ContactIdx),
    /// No channels lead from the inlet to the contact, directly or over others; with the contacts that they do reach.
    Apart {
        /// The contact that is not reached.
        contact: ContactIdx,
        /// Those that are, the inlet first.
        reached: Vec<ContactIdx>,
    },
}

/// What can be said of a reading.
#[derive(Clone, Debug, PartialEq)]
pub enum Why {
    /// It has a number.
    Number(Box<Explanation>),
    /// No current can flow.
    NoPath(NoNumber),
    /// A voltage contact is not held.
    Floating(NoNumber),
}

impl Why {
    /// The bundles whose potentials make the reading; none for a reading without a number.
    pub fn bundles(&self) -> Vec<BundleIdx> {
        let Self::Number(explanation) = self else { return Vec::new() };
        let mut bundles: Vec<BundleIdx> = explanation.strands().flat_map(|strand| strand.bundles.clone()).collect();
        bundles.extend(explanation.steps.iter().filter_map(|step| match step {
            WhyStep::Mean { at: Origin::Mixture(bundle), .. } => Some(*bundle),
            _ => None,
        }));
        bundles.sort_unstable();
        bundles.dedup();
        bundles
    }
}

impl Why {
    /// Potentials of the bundles that make the reading, as drawings show them; none for all others. None altogether where
    /// no current can flow.
    pub fn potentials(&self, prediction: &Prediction, current: [ContactIdx; 2]) -> Option<Vec<Option<Number>>> {
        let bundles = self.bundles();
        let mut potentials = prediction.bundle_potentials(current)?;
        let others = potentials.iter_mut().enumerate().filter(|(at, _)| !bundles.contains(&BundleIdx(*at)));
        others.for_each(|(_, potential)| *potential = None);
        Some(potentials)
    }
}

impl Explanation {
    /// All channels that the steps and the balance speak of.
    pub fn strands(&self) -> impl Iterator<Item = &Strand> {
        let balance = self.balance.arrivals.iter().map(|one| &one.strand);
        self.steps.iter().flat_map(WhyStep::strands).chain(balance)
    }

    /// What a contact takes up, where its share rests on that; none for inlet and outlet.
    pub fn arrivals(&self, contact: ContactIdx) -> Option<&[Arrival]> {
        self.steps.iter().find_map(|step| match step {
            WhyStep::Leaves { .. } => None,
            WhyStep::HandedOn { contacts, arrivals, .. } => {
                let place = contacts.iter().position(|one| *one == contact)?;
                arrivals.get(place).map(Vec::as_slice)
            }
            WhyStep::Mean { at, arrivals, .. } => (*at == Origin::Contact(contact)).then_some(arrivals.as_slice()),
        })
    }
}

impl Strand {
    /// Whether there is nothing to say of the way: along one rim.
    pub fn is_plain(&self) -> bool {
        matches!(self.route.as_slice(), [] | [Stretch::Rim(_)])
    }
}

impl WhyStep {
    /// The channels that arrive at what the step speaks of.
    fn strands(&self) -> Vec<&Strand> {
        match self {
            Self::Leaves { .. } => Vec::new(),
            Self::HandedOn { arrivals, .. } => arrivals.iter().flatten().map(|one| &one.strand).collect(),
            Self::Mean { arrivals, .. } => arrivals.iter().map(|one| &one.strand).collect(),
        }
    }
}

/// Why reading `row` of a prediction is what it is. `setup` is the one that was solved. None where wires join devices: the
/// steps follow channels, and a contact with a wire takes no mean of its channels alone.
pub fn why(network: &Network, setup: &Setup, prediction: &Prediction, row: usize) -> Option<Why> {
    if !network.links.is_empty() {
        return None;
    }
    let expected = prediction.expected.get(row)?;
    match expected.state {
        ReadingState::NoPath => missing(setup, prediction, expected).map(Why::NoPath),
        ReadingState::Floating => missing(setup, prediction, expected).map(Why::Floating),
        ReadingState::Fine => explanation(network, prediction, expected).map(|found| Why::Number(Box::new(found))),
    }
}

fn explanation(network: &Network, prediction: &Prediction, expected: &Expected) -> Option<Explanation> {
    let current = expected.reading.current;
    let flow = Flow::of(network, &prediction.channels);
    let potentials = Potentials {
        contacts: prediction.contact_potentials(current)?,
        bundles: prediction.bundle_potentials(current)?,
        current,
    };
    let balance = potentials.balance(&flow, expected.reading.voltage)?;
    let steps = steps::steps(&flow, &potentials, (expected.reading.voltage, &balance))?;
    let h_per_e2 = expected.exact.clone().map(Number::Exact).or(expected.h_per_e2.map(Number::Float))?;
    let [plus, minus] = expected.reading.voltage.map(|contact| potentials.contacts[contact.0].clone());
    Some(Explanation { steps, voltage: [plus?, minus?], balance, h_per_e2 })
}

fn missing(setup: &Setup, prediction: &Prediction, expected: &Expected) -> Option<NoNumber> {
    match &prediction.conductance {
        Conductance::Exact(solved) => lost(setup, &Islands::of(solved), expected),
        Conductance::Float(solved) => lost(setup, &Islands::of(solved), expected),
    }
}

/// The first contact of the reading that stands in the way: inlet, outlet, then the voltage contacts.
fn lost<S: Scalar>(setup: &Setup, islands: &Islands<S>, expected: &Expected) -> Option<NoNumber> {
    let [inlet, outlet] = expected.reading.current;
    let unusable = |contact: ContactIdx| match (setup.is_open(contact), islands.passes(contact)) {
        (true, _) => Some(NoNumber::Open(contact)),
        (_, false) => Some(NoNumber::PassesNothing(contact)),
        _ => None,
    };
    let apart = |contact: ContactIdx| {
        (!islands.together(inlet, contact)).then(|| {
            let others = (0..islands.contacts()).map(ContactIdx).filter(|other| *other != inlet);
            let near = others.filter(|other| islands.together(inlet, *other));
            NoNumber::Apart { contact, reached: std::iter::once(inlet).chain(near).collect() }
        })
    };
    let [plus, minus] = expected.reading.voltage;
    let current = unusable(inlet).or_else(|| unusable(outlet)).or_else(|| apart(outlet));
    let held = |contact: ContactIdx| unusable(contact).or_else(|| apart(contact));
    current.or_else(|| held(plus)).or_else(|| held(minus))
}
