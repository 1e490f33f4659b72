//! What flows from where to where: the feeds of the solution, followed back to the contacts and mixtures that made their
//! potentials.

use std::collections::BTreeMap;
use std::collections::BTreeSet;

use crate::device::ContactIdx;
use crate::network::Bundle;
use crate::network::BundleIdx;
use crate::network::Carrier;
use crate::network::Channels;
use crate::network::Feed;
use crate::network::Junctions;
use crate::network::Network;
use crate::network::Terminal;
use crate::number::Number;
use crate::resistance::why::MixturePlace;
use crate::resistance::why::Origin;
use crate::resistance::why::Strand;
use crate::resistance::why::Stretch;
use crate::resistance::why::route;

/// All channels as strands between contacts and mixtures.
pub(super) struct Flow {
    bundles: Vec<Bundle<Number>>,
    terminals: Vec<Terminal>,
    /// Bundles in which channels leave a border over whose length they mix.
    blends: BTreeSet<BundleIdx>,
    places: Vec<(Option<Stretch>, Option<Carrier>)>,
    /// The contact from which a course begins in the bundle, and that at which one ends.
    begins: BTreeMap<BundleIdx, ContactIdx>,
    ends: BTreeMap<BundleIdx, ContactIdx>,
    strands: Vec<Strand>,
}

impl Flow {
    /// Looks through the channels that were solved.
    pub fn of(network: &Network, channels: &Channels) -> Self {
        let (mut begins, mut ends) = (BTreeMap::new(), BTreeMap::new());
        for course in &channels.courses {
            let Some(contacts) = course.ends else { continue };
            begins.extend(course.steps.first().map(|step| (step.bundle, contacts.from)));
            ends.extend(course.steps.last().map(|step| (step.leaving, contacts.to)));
        }
        let (bundles, terminals) = match &channels.junctions {
            Junctions::Exact(wired) => (numbers(&wired.bundles), wired.terminals.clone()),
            Junctions::Float(wired) => (numbers(&wired.bundles), wired.terminals.clone()),
        };
        let steps = channels.courses.iter().flat_map(|course| &course.steps);
        let blends = steps.filter(|step| step.leaving != step.bundle).map(|step| step.leaving).collect();
        let places = route::places(network, channels, bundles.len());
        let mut flow = Self { bundles, terminals, blends, places, begins, ends, strands: Vec::new() };
        let contacts = (0..flow.terminals.len()).map(|at| Origin::Contact(ContactIdx(at)));
        let bundles = (0..flow.bundles.len()).map(BundleIdx);
        let mixtures = bundles.filter(|at| flow.is_mixture(*at)).map(Origin::Mixture);
        flow.strands = contacts.chain(mixtures).flat_map(|at| flow.ending_at(at)).collect();
        flow
    }

    /// Conductance that a contact sends out at its own potential: as much as it absorbs.
    pub fn emitted(&self, contact: ContactIdx) -> Number {
        self.terminals[contact.0].absorbed.iter().map(|(_, weight)| Number::Exact(weight.clone())).sum()
    }

    /// What is absorbed by a contact, or runs into a mixture.
    pub fn arrivals(&self, at: Origin) -> impl Iterator<Item = &Strand> {
        self.strands.iter().filter(move |strand| strand.to == at)
    }

    /// What leaves a contact or a mixture.
    pub fn departures(&self, from: Origin) -> impl Iterator<Item = &Strand> {
        self.strands.iter().filter(move |strand| strand.from == from)
    }

    /// Where a mixture is; none for a contact.
    pub fn place(&self, at: Origin) -> Option<MixturePlace> {
        let Origin::Mixture(bundle) = at else { return None };
        let contact = self.begins.get(&bundle).filter(|contact| self.passes_by(bundle, **contact));
        let kind = if self.blends.contains(&bundle) { MixturePlace::Partly } else { MixturePlace::Along };
        contact.copied().map(MixturePlace::Behind).or_else(|| self.places[bundle.0].0.map(kind))
    }

    /// Whether a part of the bundle came by a contact and another part from the contact itself.
    fn passes_by(&self, bundle: BundleIdx, contact: ContactIdx) -> bool {
        self.bundle(bundle).feeds.iter().any(|(feed, _)| match feed {
            Feed::Contact(_) => false,
            Feed::Bundle(before) => self.ends.get(before) == Some(&contact),
        })
    }

    /// Strands that end at a place; those with one origin and one route are one.
    fn ending_at(&self, at: Origin) -> Vec<Strand> {
        let mut strands: Vec<Strand> = Vec::new();
        for (feed, weight) in self.feeds(at) {
            let strand = self.followed(&feed, weight, at);
            let alike = |other: &&mut Strand| other.from == strand.from && other.route == strand.route;
            match strands.iter_mut().find(alike) {
                Some(known) => join(known, strand),
                None => strands.push(strand),
            }
        }
        strands
    }

    fn bundle(&self, at: BundleIdx) -> &Bundle<Number> {
        &self.bundles[at.0]
    }

    fn feeds(&self, at: Origin) -> Vec<(Feed, Number)> {
        match at {
            Origin::Mixture(bundle) => self.bundle(bundle).feeds.clone(),
            Origin::Contact(contact) => {
                let absorbed = self.terminals[contact.0].absorbed.iter();
                let arriving = absorbed.filter(|(_, weight)| !weight.is_zero());
                arriving.map(|(bundle, weight)| (Feed::Bundle(*bundle), weight.clone().into())).collect()
            }
        }
    }

    /// Whether several feeds run into the bundle.
    fn is_mixture(&self, at: BundleIdx) -> bool {
        self.only_feed(at).is_none() && !self.bundle(at).feeds.is_empty()
    }

    /// The feed of a bundle that has one alone.
    fn only_feed(&self, at: BundleIdx) -> Option<&Feed> {
        let feeds = &self.bundle(at).feeds;
        let (first, _) = feeds.first()?;
        feeds.iter().all(|(feed, _)| feed == first).then_some(first)
    }

    /// Follows a feed back to where its potential was made. Ends for every bundle that a contact feeds; a ring of single
    /// feeds would be a closed loop, and those feed nothing.
    fn followed(&self, feed: &Feed, weight: Number, to: Origin) -> Strand {
        let mut back = vec![];
        let mut contact_or_bundle = feed;
        let from = loop {
            match contact_or_bundle {
                Feed::Contact(contact) => break Origin::Contact(*contact),
                Feed::Bundle(bundle) => {
                    back.push(*bundle);
                    match self.only_feed(*bundle).filter(|_| back.len() <= self.bundles.len()) {
                        Some(before) => contact_or_bundle = before,
                        None => break Origin::Mixture(*bundle),
                    }
                }
            }
        };
        back.reverse();
        Strand { from, to, weight, carrier: self.carrier(&back), route: self.route(&back, to), bundles: back }
    }

    fn carrier(&self, bundles: &[BundleIdx]) -> Option<Carrier> {
        bundles.last().and_then(|bundle| self.places[bundle.0].1)
    }

    fn route(&self, bundles: &[BundleIdx], to: Origin) -> Vec<Stretch> {
        let mut stretches = Vec::new();
        for pair in bundles.windows(2) {
            self.append(&mut stretches, pair[0], self.begins.get(&pair[1]).copied());
        }
        let next = match to {
            Origin::Mixture(bundle) => self.begins.get(&bundle).copied(),
            Origin::Contact(_) => None,
        };
        bundles.last().into_iter().for_each(|last| self.append(&mut stretches, *last, next));
        stretches
    }

    /// The border of a bundle, and the contact by which it goes on if one lies in its way.
    fn append(&self, stretches: &mut Vec<Stretch>, bundle: BundleIdx, next: Option<ContactIdx>) {
        self.places[bundle.0].0.into_iter().for_each(|place| route::push(stretches, place));
        let passed = self.ends.get(&bundle).filter(|end| Some(**end) == next);
        passed.into_iter().for_each(|contact| route::push(stretches, Stretch::Past(*contact)));
    }
}

fn numbers<S: Clone + Into<Number>>(bundles: &[Bundle<S>]) -> Vec<Bundle<Number>> {
    let number = |(feed, weight): &(Feed, S)| (*feed, weight.clone().into());
    let bundle =
        |bundle: &Bundle<S>| Bundle { weight: bundle.weight.clone(), feeds: bundle.feeds.iter().map(number).collect() };
    bundles.iter().map(bundle).collect()
}

fn join(known: &mut Strand, other: Strand) {
    known.weight = &known.weight + &other.weight;
    known.carrier = known.carrier.filter(|carrier| other.carrier == Some(*carrier));
    known.bundles.extend(other.bundles);
}
