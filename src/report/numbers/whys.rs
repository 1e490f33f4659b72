//! Why a reading has its number, in numbers.

use schemars::JsonSchema;
use serde::Serialize;

use crate::device::ContactIdx;
use crate::device::Device;
use crate::number::Number;
use crate::report::names::contact_name;
use crate::resistance::Arrival;
use crate::resistance::Expected;
use crate::resistance::Explanation;
use crate::resistance::Origin;
use crate::resistance::Why;

/// Why a reading has its number: (share of + less share of −)/current, in h/e². A share is a part of the voltage between the
/// contacts at which the current enters and leaves.
#[derive(Clone, Debug, PartialEq, Serialize, JsonSchema)]
pub struct WhyNumbers {
    /// The voltage contacts, + first.
    pub voltage: Vec<WhyContact>,
    /// Where the current is counted: what that contact sends out at its own share less what it takes up.
    pub current: WhyContact,
    /// The current in e²/h times the voltage, exact where it is a fraction.
    pub current_e2_per_h: String,
}

/// A contact with what it takes up.
#[derive(Clone, Debug, PartialEq, Serialize, JsonSchema)]
pub struct WhyContact {
    /// Name of the contact.
    pub contact: String,
    /// Its share, exact where it is a fraction.
    pub share: String,
    /// What it takes up, as far as the number rests on that.
    pub arrivals: Vec<WhyArrival>,
}

/// Channels that end in a contact.
#[derive(Clone, Debug, PartialEq, Serialize, JsonSchema)]
pub struct WhyArrival {
    /// The contact whose potential they carry; null where they were mixed on the way.
    pub from: Option<String>,
    /// Their conductance, exact where it is a fraction.
    pub conductance_e2_per_h: String,
    /// The share that they bring, exact where it is a fraction.
    pub share: String,
}

/// None for a reading without a number.
pub(super) fn why(device: &Device, expected: &Expected, why: &Why) -> Option<WhyNumbers> {
    let Why::Number(found) = why else { return None };
    let reading = &expected.reading;
    let voltage = reading.voltage.iter().zip(&found.voltage);
    let at = found.balance.at;
    let given = if at == reading.current[0] { "1" } else { "0" };
    Some(WhyNumbers {
        voltage: voltage.map(|(contact, share)| lead(device, found, (*contact, share))).collect(),
        current: WhyContact {
            contact: contact_name(device, at).to_owned(),
            share: given.to_owned(),
            arrivals: arrivals(device, &found.balance.arrivals),
        },
        current_e2_per_h: found.balance.current.to_string(),
    })
}

fn lead(device: &Device, found: &Explanation, (contact, share): (ContactIdx, &Number)) -> WhyContact {
    WhyContact {
        contact: contact_name(device, contact).to_owned(),
        share: share.to_string(),
        arrivals: found.arrivals(contact).map_or_else(Vec::new, |found| arrivals(device, found)),
    }
}

fn arrivals(device: &Device, arrived: &[Arrival]) -> Vec<WhyArrival> {
    let one = |Arrival { strand, share }: &Arrival| WhyArrival {
        from: match strand.from {
            Origin::Contact(contact) => Some(contact_name(device, contact).to_owned()),
            Origin::Mixture(_) => None,
        },
        conductance_e2_per_h: strand.weight.to_string(),
        share: share.to_string(),
    };
    arrived.iter().map(one).collect()
}
