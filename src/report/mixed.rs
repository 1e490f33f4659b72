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
    let [toward, away] = point.beside.map(|beside| beside.unmixed.iter().zip(&beside.mixed));
    let differs = |(unmixed, mixed): (&Expected, &Expected)| match (unmixed.h_per_e2, mixed.h_per_e2) {
        (Some(unmixed), Some(mixed)) => (unmixed - mixed).abs() > ROUNDING,
        (unmixed, mixed) => unmixed != mixed,
    };
    let changed: Vec<_> = toward.zip(away).filter(|(toward, away)| differs(*toward) || differs(*away)).collect();
    let row = |(toward, away): &((&Expected, &Expected), (&Expected, &Expected))| {
        let name = SmallCell::text(names::reading_name(device, &toward.0.reading));
        let cells = [toward.0, toward.1, away.0, away.1].map(cell);
        [name].into_iter().chain(cells).collect::<Vec<_>>()
    };
    let table = texts.mixing.table(changed.iter().take(MOST).map(row).collect());
    (!changed.is_empty()).then(|| SmallTable { notes: notes(&point.point.edge.rim, changed.len()), ..table })
}

/// Difference in h/e² that only rounding makes.
const ROUNDING: f64 = 1e-9;

fn notes(rim: &Mixing, count: usize) -> Vec<String> {
    const ADVICE: &str = "If the device behaves as in the other columns, write";
    let used = match rim {
        Mixing::None => format!(
            "In use: mixing = \"none\" along the rim. {ADVICE} mixing = \"full\" under [edge], or at the point."
        ),
        Mixing::Full => format!(
            "In use: mixing = \"full\" along the rim. {ADVICE} mixing = \"none\" under [edge], or at the point."
        ),
        Mixing::Over(length) => format!(
            "In use: mixing over ℓ = {} µm along the rim, with values between the two that stand in the table of readings.",
            printed::as_given(length.to_um())
        ),
    };
    let left = (count > MOST).then(|| format!("{} more readings differ.", count - MOST));
    [format!("h/e² and kΩ of the device alone. {used}"), UNMIXED.to_owned()].into_iter().chain(left).collect()
}

/// What keeps a channel at its level; common practice.
const UNMIXED: &str = "Without mixing every channel keeps its level from one gate or contact to the next: gate edges \
                       smoother than about five magnetic lengths, and no scatterers on the way.";

fn cell(expected: &Expected) -> SmallCell {
    let number = expected.number().zip(expected.ohm).map(|(number, ohm)| {
        let kilo_ohm = Printed::kilo_ohm(ohm, 4);
        Printed { text: format!("{} = {}", Printed::h_per_e2(&number).text, kilo_ohm.text), ..kilo_ohm }
    });
    SmallCell::number(number)
}
