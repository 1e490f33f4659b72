//! Why a reading has its number, short enough for a page.

use serde::Serialize;

use crate::device::ContactIdx;
use crate::diagnostic::Diagnostic;
use crate::report::Texts;
use crate::report::why::NumberFields;
use crate::report::why::WhySource;
use crate::report::why::mean;
use crate::report::why::number_fields;
use crate::report::why::phrases::Phrases;
use crate::report::why::phrases::number;
use crate::report::why::spoken_signs;
use crate::resistance::Arrival;
use crate::resistance::Expected;
use crate::resistance::Explanation;
use crate::resistance::Why;

/// What arrives is listed up to this many channels or groups of channels; of more only the sum is said.
const FEW: usize = 2;

/// What arrives at the voltage leads, the current, and the number; none for a reading without one. Names carry marks.
pub fn short(source: WhySource, expected: &Expected, why: &Why, texts: &Texts) -> Result<Option<String>, Diagnostic> {
    let Why::Number(found) = why else { return Ok(None) };
    let lines = texts.lines("alone-why.txt", &fields(source, expected, found))?;
    Ok(Some(lines.join(" ")))
}

#[derive(Serialize)]
struct ShortFields {
    inlet: String,
    outlet: String,
    leads: [LeadFields; 2],
    /// Whether what arrives where the current is counted is listed.
    few: bool,
    number: NumberFields,
}

#[derive(Serialize)]
struct LeadFields {
    sign: &'static str,
    contact: String,
    /// What fixes the share, where that is the source.
    given: Option<&'static str>,
    /// What arrives, where that is listed.
    arrivals: Option<String>,
    mean: Option<String>,
    share: String,
}

fn fields(
    WhySource { device, network, point, .. }: WhySource,
    expected: &Expected,
    found: &Explanation,
) -> ShortFields {
    let phrases = Phrases { device, network, signs: spoken_signs(device, point), mixtures: &[] };
    let [inlet, outlet] = expected.reading.current;
    let given = |contact: ContactIdx| match contact {
        at if at == inlet => Some("where the current enters"),
        at if at == outlet => Some("where the current leaves"),
        _ => None,
    };
    let lead = |side: usize, sign: &'static str| {
        let contact = expected.reading.voltage[side];
        let arrivals = found.arrivals(contact).filter(|arrivals| is_few(arrivals));
        LeadFields {
            sign,
            contact: phrases.contact(contact),
            given: given(contact),
            arrivals: arrivals.map(|arrivals| phrases.arrivals(arrivals)),
            mean: arrivals.and_then(mean),
            share: number(&found.voltage[side]),
        }
    };
    ShortFields {
        inlet: phrases.contact(inlet),
        outlet: phrases.contact(outlet),
        leads: [lead(0, "+"), lead(1, "−")],
        few: is_few(&found.balance.arrivals),
        number: number_fields(expected, found, phrases),
    }
}

fn is_few(arrivals: &[Arrival]) -> bool {
    (1..=FEW).contains(&arrivals.len())
}
