//! Which contacts and mixtures a reading rests on, and in which order they are told.

use std::collections::BTreeSet;

use crate::device::ContactIdx;
use crate::number::Number;
use crate::resistance::why::Arrival;
use crate::resistance::why::CurrentBalance;
use crate::resistance::why::Origin;
use crate::resistance::why::Strand;
use crate::resistance::why::WhyStep;
use crate::resistance::why::chain;
use crate::resistance::why::flow::Flow;

/// The solution for one current pair: 1 at the inlet, 0 at the outlet; none where nothing fixes a potential.
pub(super) struct Potentials {
    pub contacts: Vec<Option<Number>>,
    pub bundles: Vec<Option<Number>>,
    pub current: [ContactIdx; 2],
}

impl Potentials {
    fn of(&self, origin: Origin) -> Option<&Number> {
        match origin {
            Origin::Contact(contact) => self.contacts.get(contact.0)?.as_ref(),
            Origin::Mixture(bundle) => self.bundles.get(bundle.0)?.as_ref(),
        }
    }

    fn height(&self, origin: Origin) -> f64 {
        self.of(origin).map_or(f64::NEG_INFINITY, Number::to_f64)
    }

    /// What arrives, with the potentials that it brings, the highest first; none where one of them is not fixed.
    fn arrivals(&self, flow: &Flow, at: Origin) -> Option<Vec<Arrival>> {
        let arrived = |strand: &Strand| Some(Arrival { share: self.of(strand.from)?.clone(), strand: strand.clone() });
        let mut arrivals: Vec<Arrival> = flow.arrivals(at).map(arrived).collect::<Option<_>>()?;
        arrivals.sort_by(|a, b| b.share.to_f64().total_cmp(&a.share.to_f64()));
        Some(arrivals)
    }

    /// The balance of the inlet or of the outlet, whichever rests on less.
    pub fn balance(&self, flow: &Flow, voltage: [ContactIdx; 2]) -> Option<CurrentBalance> {
        let [inlet, outlet] = self.current.map(|contact| self.balance_of(flow, contact));
        let (inlet, outlet) = (inlet?, outlet?);
        let cost = |balance: &CurrentBalance| self.needed(flow, voltage, balance).len();
        Some(if cost(&outlet) < cost(&inlet) { outlet } else { inlet })
    }

    /// What a contact sends out at its own potential less what it takes in; of the outlet the other way round.
    fn balance_of(&self, flow: &Flow, at: ContactIdx) -> Option<CurrentBalance> {
        let arrivals = self.arrivals(flow, Origin::Contact(at))?;
        let taken: Number = arrivals.iter().map(|one| &one.strand.weight * &one.share).sum();
        let emitted = flow.emitted(at);
        let current = if at == self.current[0] { &emitted - &taken } else { taken };
        Some(CurrentBalance { at, emitted, arrivals, current })
    }

    /// Every contact and mixture of which the potential must be known, but inlet and outlet.
    fn needed(&self, flow: &Flow, voltage: [ContactIdx; 2], balance: &CurrentBalance) -> BTreeSet<Origin> {
        let given = self.current.map(Origin::Contact);
        let mut front: Vec<Origin> = voltage.map(Origin::Contact).to_vec();
        front.extend(balance.arrivals.iter().map(|arrival| arrival.strand.from));
        let mut needed = BTreeSet::new();
        while let Some(origin) = front.pop() {
            if !given.contains(&origin) && needed.insert(origin) {
                front.extend(flow.arrivals(origin).map(|strand| strand.from));
            }
        }
        needed
    }
}

/// The steps: what leaves the inlet, then every potential that is needed, as far as possible after those on which it
/// rests.
pub(super) fn steps(
    flow: &Flow,
    potentials: &Potentials,
    (voltage, balance): ([ContactIdx; 2], &CurrentBalance),
) -> Option<Vec<WhyStep>> {
    let told = ordered(flow, potentials, potentials.needed(flow, voltage, balance))?;
    let rests_on = |contact: ContactIdx| {
        let strands = told.iter().flat_map(|(_, arrivals)| arrivals).chain(&balance.arrivals);
        strands.into_iter().any(|arrival| arrival.strand.from == Origin::Contact(contact))
    };
    let [inlet, outlet] = potentials.current;
    let leaves = |contact: ContactIdx| {
        let share = potentials.of(Origin::Contact(contact)).cloned()?;
        let departures: Vec<Strand> = flow.departures(Origin::Contact(contact)).cloned().collect();
        Some(WhyStep::Leaves { contact, share, departures })
    };
    let mut steps: Vec<WhyStep> = leaves(inlet).into_iter().collect();
    steps.extend(leaves(outlet).filter(|_| rests_on(outlet)));
    for (at, arrivals) in told {
        let share = potentials.of(at)?.clone();
        let (place, departures) = (flow.place(at), telling(flow, at));
        chain::put(&mut steps, WhyStep::Mean { at, place, arrivals, share, departures });
    }
    Some(steps)
}

/// What leaves a place, unless it simply runs along the rim to one end.
fn telling(flow: &Flow, at: Origin) -> Vec<Strand> {
    let departures: Vec<Strand> = flow.departures(at).cloned().collect();
    match departures.as_slice() {
        [only] if only.is_plain() => Vec::new(),
        _ => departures,
    }
}

type Told = (Origin, Vec<Arrival>);

/// Puts behind the last one told what rests on it alone, else what rests only on what was told; where potentials rest on
/// one another in a ring, a mixture. Of several the one of the highest potential comes first.
fn ordered(flow: &Flow, potentials: &Potentials, needed: BTreeSet<Origin>) -> Option<Vec<Told>> {
    let with_arrivals = |at: Origin| Some((at, potentials.arrivals(flow, at)?));
    let mut left: Vec<Told> = needed.into_iter().map(with_arrivals).collect::<Option<_>>()?;
    let [inlet, outlet] = potentials.current.map(Origin::Contact);
    let mut known: Vec<Origin> = vec![outlet, inlet];
    let mut told = Vec::new();
    while !left.is_empty() {
        let ready = |(_, arrivals): &Told| arrivals.iter().all(|arrival| known.contains(&arrival.strand.from));
        let follows = |(_, arrivals): &Told| arrivals.iter().all(|arrival| known.last() == Some(&arrival.strand.from));
        let highest = |told: &dyn Fn(&Told) -> bool| {
            let all = (0..left.len()).rev().filter(|at| told(&left[*at]));
            all.max_by(|a, b| potentials.height(left[*a].0).total_cmp(&potentials.height(left[*b].0)))
        };
        let mixture = |(at, _): &Told| matches!(at, Origin::Mixture(_));
        let in_ring = || highest(&mixture).or_else(|| highest(&|_| true));
        let next = highest(&follows).or_else(|| highest(&ready)).or_else(in_ring)?;
        let next = left.remove(next);
        known.push(next.0);
        told.push(next);
    }
    Some(told)
}
