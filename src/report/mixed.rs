//! Readings that mixing along the rim changes: around a gate of higher filling, or between gates in series.

use crate::device::Device;
use crate::device::Mixing;
use crate::quantity::printed;
use crate::report::PointSource;
use crate::report::Printed;
use crate::report::SmallCell;
use crate::report::SmallTable;
use crate::report::names;
use crate::report::small_table::TableTexts;
use crate::resistance::Expected;

/// Most rows: which of them matters shows at once, the rule in use is named.
const MOST: usize = 14;

/// Every listed reading that differs with and without mixing at either polarity; none where none does.
pub fn table(device: &Device, point: &PointSource, texts: &TableTexts) -> Option<SmallTable> {
    let in_use = [point.toward, point.away].map(|prediction| prediction.expected.as_slice());
    let other = point.beside.map(|beside| beside.other_mixing.as_slice());
    let pairs = in_use[0].iter().zip(other[0]).zip(in_use[1].iter().zip(other[1]));
    let differs = |(here, there): (&Expected, &Expected)| here.exact != there.exact;
    let changed: Vec<_> = pairs.filter(|(toward, away)| differs(*toward) || differs(*away)).collect();
    let full = point.point.edge.rim == Mixing::Full;
    let ordered = |(here, there): (&Expected, &Expected)| {
        let cells = [here, there].map(cell);
        if full {
            let [here, there] = cells;
            [there, here]
        } else {
            cells
        }
    };
    let row = |(toward, away): &((&Expected, &Expected), (&Expected, &Expected))| {
        let name = SmallCell::text(names::reading_name(device, &toward.0.reading));
        [name].into_iter().chain(ordered(*toward)).chain(ordered(*away)).collect::<Vec<_>>()
    };
    let table = texts.mixing.table(changed.iter().take(MOST).map(row).collect());
    (!changed.is_empty()).then(|| SmallTable { notes: notes(full, changed.len()), ..table })
}

fn notes(full: bool, count: usize) -> Vec<String> {
    let (used, other) = if full { ("full", "none") } else { ("none", "full") };
    let rule = format!(
        "h/e² and kΩ of the device alone. In use: mixing = \"{used}\" along the rim. If the device behaves as in the other \
         columns, write mixing = \"{other}\" under [edge], or at the point."
    );
    let left = (count > MOST).then(|| format!("{} more readings differ.", count - MOST));
    std::iter::once(rule).chain(left).collect()
}

fn cell(expected: &Expected) -> SmallCell {
    let number = expected.exact.as_ref().zip(expected.ohm).map(|(exact, ohm)| {
        let kilo_ohm = Printed::kilo_ohm(ohm, 4);
        Printed { text: format!("{} = {}", printed::fraction(exact), kilo_ohm.text), ..kilo_ohm }
    });
    SmallCell::number(number)
}
