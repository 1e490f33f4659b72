//! Measured readings set against what was expected of them.

use crate::cli::Failure;
use crate::cli::load::Loaded;
use crate::cli::point::setup;
use crate::cli::select;
use crate::compare::Comparison;
use crate::diagnostic::Diagnostic;
use crate::diagnostic::Faults;
use crate::measured::MeasuredReading;
use crate::quantity::Polarity;
use crate::report::RowSource;
use crate::resistance::Expected;

/// A limit that the user fixes must be one that a difference can exceed.
pub fn check_limit(limit: Option<f64>) -> Result<(), Failure> {
    match limit {
        Some(limit) if !(limit.is_finite() && limit > 0.0) => {
            let fault = Diagnostic::fault("bad-limit", format!("a limit of {limit} u judges nothing"));
            Err(Failure::Input(Faults(vec![fault.hint("give a number above 0, such as --limit 3")])))
        }
        _ => Ok(()),
    }
}

/// A measured reading, what is expected of it, and the uncertainty of that in Ω.
type Judged = (MeasuredReading, Expected, f64);

/// The comparison of all measured readings, in the order of their table, with what the circuit does to each; none where
/// nothing was measured.
pub fn comparison(loaded: &Loaded, limit: Option<f64>) -> Option<(Comparison, Vec<RowSource>)> {
    let meters = select::meter_names(loaded);
    let mut rows: Vec<Option<(Judged, RowSource)>> = vec![None; loaded.measured.len()];
    for (index, point) in loaded.device.points.iter().enumerate() {
        for polarity in Polarity::BOTH {
            let here: Vec<usize> = (0..rows.len()).filter(|&at| is_at(&loaded.measured[at], index, polarity)).collect();
            let taken: Vec<&MeasuredReading> = here.iter().map(|&at| &loaded.measured[at]).collect();
            let setup = setup(loaded, point, polarity);
            let readings = crate::compare::readings(&taken, &meters);
            let prediction = crate::resistance::predict(&loaded.network, &setup, &readings);
            let budgets = prediction.budgets(&setup);
            let corrections = prediction.corrections(&setup);
            let circuit = budgets.into_iter().zip(corrections);
            for ((at, expected), (budget, corrections)) in here.into_iter().zip(prediction.expected).zip(circuit) {
                let u_ohm = budget.as_ref().map_or(0.0, |budget| budget.u_ohm);
                let row = (loaded.measured[at].clone(), expected, u_ohm);
                rows[at] = Some((row, RowSource { budget, corrections }));
            }
        }
    }
    let (rows, circuit): (Vec<_>, Vec<_>) = rows.into_iter().flatten().unzip();
    (!rows.is_empty()).then(|| (crate::compare::compare(rows, limit), circuit))
}

fn is_at(reading: &MeasuredReading, point: usize, polarity: Polarity) -> bool {
    reading.point == point && reading.polarity == polarity
}
