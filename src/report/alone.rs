//! Which reading shows one region alone, as a line to copy into a logbook.

use serde::Serialize;

use crate::diagnostic::Diagnostic;
use crate::quantity::Polarity;
use crate::report::Beside;
use crate::report::IsolatedRegion;
use crate::report::PointSource;
use crate::report::Printed;
use crate::report::SmallCell;
use crate::report::SmallTable;
use crate::report::Sources;
use crate::report::Texts;
use crate::report::WhySource;
use crate::report::names;
use crate::report::small_table::TableTexts;
use crate::report::why;
use crate::resistance::Expected;

/// The rule for one region.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct AloneRule {
    /// Name of the region.
    pub region: String,
    /// With the field toward the reader; none where no reading shows the region alone.
    pub toward: Option<AloneReading>,
    /// With the field away.
    pub away: Option<AloneReading>,
}

/// The reading to use at one polarity.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct AloneReading {
    /// `I 1→4, V 2−5`.
    pub leads: String,
    /// `= h/e² × (1/ν_{TG}) = 25.8128 kΩ`, and what the meter shows where that differs.
    pub value: String,
    /// The device alone, in kΩ.
    pub device: Option<Printed>,
    /// What the meter shows, in kΩ.
    pub shown: Option<Printed>,
    /// Why it has its number, in a few sentences.
    pub why: Option<String>,
}

/// One rule per region with a filling of its own but the bulk.
pub fn rules(sources: &Sources, point: &PointSource, texts: &Texts) -> Result<Vec<AloneRule>, Diagnostic> {
    let source =
        |polarity| WhySource { device: sources.device, network: sources.network, point: point.point, polarity };
    let of = |polarity: Polarity, beside: &Beside, name: &str| {
        let mine = beside.isolated.iter().find(|region| region.name == name);
        mine.and_then(|region| reading(source(polarity), region, texts).transpose()).transpose()
    };
    let [toward, away] = point.beside;
    let rule = |name: &String| {
        let (toward, away) = (of(Polarity::Toward, toward, name)?, of(Polarity::Away, away, name)?);
        Ok(AloneRule { region: name.clone(), toward, away })
    };
    toward.isolated.iter().map(|region| rule(&region.name)).collect()
}

/// Each rule as one line to copy.
pub fn lines(rules: &[AloneRule], texts: &Texts) -> Result<Vec<String>, Diagnostic> {
    rules.iter().map(|rule| Ok(texts.lines("alone.txt", rule)?.join(" "))).collect()
}

/// The rules as a table, one line each.
pub fn table(rules: &[AloneRule], texts: &TableTexts) -> SmallTable {
    let side = |reading: &Option<AloneReading>| match reading {
        Some(reading) => SmallCell::text(format!("{} {}", reading.leads, reading.value)),
        None => SmallCell::text(texts.no_reading.clone()),
    };
    let row = |rule: &AloneRule| vec![SmallCell::text(rule.region.clone()), side(&rule.toward), side(&rule.away)];
    texts.alone.table(rules.iter().map(row).collect())
}

fn reading(source: WhySource, region: &IsolatedRegion, texts: &Texts) -> Result<Option<AloneReading>, Diagnostic> {
    let Some(expected) = &region.best else { return Ok(None) };
    let why = region.why.as_ref().map(|why| why::short(source, expected, why, texts)).transpose()?;
    Ok(Some(AloneReading {
        leads: names::leads(source.device, &expected.reading),
        value: value(expected),
        device: expected.ohm.map(|ohm| Printed::kilo_ohm(ohm, 4)),
        shown: expected.shown_ohm.map(|ohm| Printed::kilo_ohm(ohm, 4)),
        why: why.flatten(),
    }))
}

/// `= h/e² × (1/ν_{TG}) = 25.8128 kΩ`, or with the exact fraction of h/e² where there is no closed form; then what the
/// meter shows where the print differs.
pub fn value(expected: &Expected) -> String {
    let printed = |ohm: Option<f64>| ohm.map(|ohm| Printed::kilo_ohm(ohm, 4));
    let (device, shown) = (printed(expected.ohm), printed(expected.shown_ohm));
    let form = expected.formula.as_deref().map(|form| format!("h/e² × ({})", names::formula(form)));
    let exact = expected.number().map(|number| Printed::h_per_e2(&number).with_unit());
    let parts: Vec<String> = form.or(exact).into_iter().chain(device.as_ref().map(Printed::with_unit)).collect();
    let text = format!("= {}", parts.join(" = "));
    match (device, shown) {
        (Some(device), Some(shown)) if device.text != shown.text => {
            format!("{text}, meter {}", shown.with_unit())
        }
        _ => text,
    }
}
