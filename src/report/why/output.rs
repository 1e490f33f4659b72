//! Why a reading has its number, for machines: every mean and the balance with their terms, exact.

use serde::Serialize;

use crate::device::Device;
use crate::number::Number;
use crate::report::names::contact_name;
use crate::resistance::Arrival;
use crate::resistance::Origin;
use crate::resistance::Why;
use crate::resistance::WhyStep;

/// The key `why` of a reading.
#[derive(Debug, Serialize)]
pub struct WhyOutput {
    sentences: Vec<String>,
    #[serde(skip_serializing_if = "Option::is_none")]
    number: Option<NumberOutput>,
}

#[derive(Debug, Serialize)]
struct NumberOutput {
    means: Vec<MeanOutput>,
    balance: BalanceOutput,
    voltage_shares: [String; 2],
    current_e2_per_h: String,
}

#[derive(Debug, Serialize)]
struct MeanOutput {
    at: PlaceOutput,
    share: String,
    arrivals: Vec<ArrivalOutput>,
}

#[derive(Debug, Serialize)]
struct BalanceOutput {
    at: PlaceOutput,
    emitted_e2_per_h: String,
    arrivals: Vec<ArrivalOutput>,
}

#[derive(Debug, Serialize)]
struct ArrivalOutput {
    from: PlaceOutput,
    conductance_e2_per_h: String,
    share: String,
}

#[derive(Debug, Serialize)]
#[serde(rename_all = "lowercase")]
enum PlaceOutput {
    Contact(String),
    /// Any number: the same one wherever the same mixture is meant.
    Mixture(usize),
}

/// The machine form of an explanation beside its sentences (without marks).
pub fn output(device: &Device, why: &Why, sentences: Vec<String>) -> WhyOutput {
    let Why::Number(explanation) = why else { return WhyOutput { sentences, number: None } };
    let balance = &explanation.balance;
    let number = NumberOutput {
        means: explanation.steps.iter().flat_map(|step| means(device, step)).collect(),
        balance: BalanceOutput {
            at: place(device, Origin::Contact(balance.at)),
            emitted_e2_per_h: balance.emitted.to_string(),
            arrivals: arrivals(device, &balance.arrivals),
        },
        voltage_shares: explanation.voltage.each_ref().map(Number::to_string),
        current_e2_per_h: balance.current.to_string(),
    };
    WhyOutput { sentences, number: Some(number) }
}

fn means(device: &Device, step: &WhyStep) -> Vec<MeanOutput> {
    match step {
        WhyStep::Leaves { .. } => Vec::new(),
        WhyStep::HandedOn { contacts, arrivals: arrived, share, .. } => {
            let each = contacts.iter().zip(arrived);
            each.map(|(contact, arrived)| mean(device, (Origin::Contact(*contact), share), arrived)).collect()
        }
        WhyStep::Mean { at, arrivals, share, .. } => vec![mean(device, (*at, share), arrivals)],
    }
}

fn mean(device: &Device, (at, share): (Origin, &Number), arrived: &[Arrival]) -> MeanOutput {
    MeanOutput { at: place(device, at), share: share.to_string(), arrivals: arrivals(device, arrived) }
}

fn arrivals(device: &Device, arrivals: &[Arrival]) -> Vec<ArrivalOutput> {
    let one = |arrival: &Arrival| ArrivalOutput {
        from: place(device, arrival.strand.from),
        conductance_e2_per_h: arrival.strand.weight.to_string(),
        share: arrival.share.to_string(),
    };
    arrivals.iter().map(one).collect()
}

fn place(device: &Device, origin: Origin) -> PlaceOutput {
    match origin {
        Origin::Contact(contact) => PlaceOutput::Contact(contact_name(device, contact).to_owned()),
        Origin::Mixture(bundle) => PlaceOutput::Mixture(bundle.0),
    }
}
