//! What stands beside the contacts of a drawing that explains a reading.

use crate::device::ContactIdx;
use crate::device::Device;
use crate::figure::ChipNames;
use crate::report::chip_names::chip_names;
use crate::report::why::phrases::number;
use crate::resistance::Expected;
use crate::resistance::Why;

/// The chip's names; in place of pins the four leads of the reading: `I in`, `I out`, and `V+: 1`, `V−: 2/3` with the shares.
pub fn names(device: &Device, expected: &Expected, why: &Why) -> ChipNames {
    let mut names = chip_names(device);
    let [inlet, outlet] = expected.reading.current;
    let [plus, minus] = expected.reading.voltage;
    let share = |side: usize| match why {
        Why::Number(explanation) => format!(": {}", number(&explanation.voltage[side])),
        Why::NoPath(_) | Why::Floating(_) => String::new(),
    };
    let leads = [
        (inlet, "I in".to_owned()),
        (outlet, "I out".to_owned()),
        (plus, format!("V+{}", share(0))),
        (minus, format!("V−{}", share(1))),
    ];
    for (at, contact) in names.contacts.iter_mut().enumerate() {
        let mine = leads.iter().filter(|(lead, _)| *lead == ContactIdx(at)).map(|(_, words)| words.as_str());
        let words: Vec<&str> = mine.collect();
        contact.pin = (!words.is_empty()).then(|| words.join(", "));
    }
    names
}
