//! Contacts that hand one potential on along the rim, as one step.

use crate::resistance::why::Arrival;
use crate::resistance::why::Origin;
use crate::resistance::why::WhyStep;

/// Puts a contact behind the step before where it takes over the same potential from the contact before it, or makes a
/// step of its own.
pub(super) fn put(steps: &mut Vec<WhyStep>, step: WhyStep) {
    let WhyStep::Mean { at: Origin::Contact(contact), ref arrivals, .. } = step else { return steps.push(step) };
    let Some(from) = one_origin(arrivals) else { return steps.push(step) };
    let WhyStep::Mean { arrivals, share, departures: sent, .. } = step else { return };
    match steps.last_mut() {
        Some(WhyStep::HandedOn { contacts, arrivals: arrived, departures, .. })
            if departures.is_empty() && contacts.last().map(|last| Origin::Contact(*last)) == Some(from) =>
        {
            contacts.push(contact);
            arrived.push(arrivals);
            departures.extend(sent);
        }
        _ => {
            let (contacts, arrivals) = (vec![contact], vec![arrivals]);
            steps.push(WhyStep::HandedOn { from, contacts, arrivals, share, departures: sent });
        }
    }
}

/// The origin of all that arrives, where that is one and all comes along the rim.
fn one_origin(arrivals: &[Arrival]) -> Option<Origin> {
    let first = arrivals.first()?.strand.from;
    arrivals.iter().all(|arrival| arrival.strand.from == first && arrival.strand.is_plain()).then_some(first)
}
