//! Operating points solved at a polarity: the middle of every command.

use crate::circuit::Budget;
use crate::cli::load::Loaded;
use crate::cli::select;
use crate::device::ContactIdx;
use crate::device::Mixing;
use crate::device::OperatingPoint;
use crate::quantity::Polarity;
use crate::report;
use crate::report::Beside;
use crate::report::IsolatedRegion;
use crate::report::SolvedPoint;
use crate::resistance::Candidates;
use crate::resistance::ClosedForms;
use crate::resistance::Expected;
use crate::resistance::FillingRegion;
use crate::resistance::Reading;
use crate::resistance::Setup;

/// The setting of a point at a polarity, with the circuit of the cooldown if there is one.
pub fn setup(loaded: &Loaded, point: &OperatingPoint, polarity: Polarity) -> Setup {
    let operating = crate::network::operating(&loaded.network, &loaded.device, point, polarity);
    Setup { operating, circuit: loaded.cooldown.as_ref().map(crate::circuit::Circuit::of) }
}

/// The closed forms of a setting.
pub fn forms(loaded: &Loaded, point: &OperatingPoint, setup: &Setup) -> ClosedForms {
    let regions = crate::resistance::filling_regions(&loaded.network, &loaded.device, point);
    ClosedForms::of(&loaded.network, &setup.operating, regions)
}

/// Every point at both polarities, `+` first, with the readings asked for at each.
pub fn solve_all<'a>(loaded: &'a Loaded, asked: impl Fn(usize) -> Asked) -> Vec<SolvedPoint<'a>> {
    solved(loaded, asked).into_iter().map(|solution| solution.solved).collect()
}

/// The same with what a sheet says beside the solutions.
pub fn solve_all_for_sheet<'a>(
    loaded: &'a Loaded,
    asked: impl Fn(usize) -> Asked,
) -> (Vec<SolvedPoint<'a>>, Vec<Beside>) {
    let with_beside = |solution: Solution<'a>| {
        let beside = beside(loaded, &solution);
        (solution.solved, beside)
    };
    solved(loaded, asked).into_iter().map(with_beside).unzip()
}

/// Readings with their names, if they have one.
pub struct Asked {
    pub readings: Vec<Reading>,
    pub names: Vec<Option<String>>,
}

struct Solution<'a> {
    solved: SolvedPoint<'a>,
    setup: Setup,
    forms: ClosedForms,
}

fn solved<'a>(loaded: &'a Loaded, asked: impl Fn(usize) -> Asked) -> Vec<Solution<'a>> {
    let points = loaded.device.points.iter().enumerate();
    let both = points.flat_map(|(at, point)| Polarity::BOTH.map(|polarity| (at, point, polarity)));
    both.map(|(at, point, polarity)| solve(loaded, point, polarity, asked(at))).collect()
}

fn solve<'a>(loaded: &'a Loaded, point: &'a OperatingPoint, polarity: Polarity, asked: Asked) -> Solution<'a> {
    let setup = setup(loaded, point, polarity);
    let forms = forms(loaded, point, &setup);
    let mut prediction = crate::resistance::predict(&loaded.network, &setup, &asked.readings);
    prediction.put_closed_forms(&forms);
    Solution { solved: SolvedPoint { point, polarity, prediction, names: asked.names, why: Vec::new() }, setup, forms }
}

fn beside(loaded: &Loaded, solution: &Solution) -> Beside {
    let prediction = &solution.solved.prediction;
    Beside {
        isolated: isolated(loaded, solution),
        unmixed: with_rim(loaded, &solution.solved, Mixing::None),
        mixed: with_rim(loaded, &solution.solved, Mixing::Full),
        corrections: prediction.corrections(&solution.setup),
        as_taken: as_taken(loaded, solution),
        two_terminal: two_terminal(loaded, solution),
    }
}

/// Budgets cost two solutions for every line, so that only one reading gets one.
fn two_terminal(loaded: &Loaded, solution: &Solution) -> Option<(Expected, Budget)> {
    let readings = solution.solved.prediction.expected.iter().map(|expected| &expected.reading);
    let whole = |reading: &&Reading| reading.voltage.iter().all(|contact| reading.current.contains(contact));
    let reading = readings.into_iter().find(whole)?.clone();
    let mut prediction = crate::resistance::predict(&loaded.network, &solution.setup, &[reading]);
    let budget = prediction.budgets(&solution.setup).pop()??;
    prediction.expected.pop().zip(Some(budget))
}

/// One per region but the bulk: the reading to use.
fn isolated(loaded: &Loaded, Solution { solved, setup, forms }: &Solution) -> Vec<IsolatedRegion> {
    let drawn = drawn_current(solved);
    let candidates = Candidates::usual(loaded.device.contacts.len(), drawn);
    let best = |region| {
        let found = crate::resistance::isolating(&loaded.network, setup, forms, (region, candidates));
        let (reading, formula) = report::preferred(forms, &found, drawn)?;
        let mut prediction = crate::resistance::predict(&loaded.network, setup, &[reading]);
        let why = crate::resistance::why(&loaded.network, setup, &prediction, 0);
        prediction.expected.pop().map(|expected| (Expected { formula: Some(formula), ..expected }, why))
    };
    let region = |(at, region): (usize, &FillingRegion)| {
        let (best, why) = best(at).unzip();
        IsolatedRegion { name: region.name.clone(), best, why: why.flatten() }
    };
    forms.regions().iter().enumerate().filter(|(_, region)| !region.is_bulk()).map(region).collect()
}

/// What was measured at the other polarity, with the same meters and sets at this one.
fn as_taken(loaded: &Loaded, Solution { solved, setup, forms }: &Solution) -> Vec<Expected> {
    let readings = select::taken_elsewhere(loaded, solved.point, solved.polarity);
    let mut prediction = crate::resistance::predict(&loaded.network, setup, &readings);
    prediction.put_closed_forms(forms);
    prediction.expected
}

/// The same readings with another mixing along the rim. The devices of a bench change together; where they differ there is
/// no other way, and the readings are those in use.
fn with_rim(loaded: &Loaded, solved: &SolvedPoint, rim: Mixing) -> Vec<Expected> {
    let mut point = solved.point.clone();
    if point.edge.rim == rim || point.parts.iter().any(|part| part.edge.rim != point.edge.rim) {
        return solved.prediction.expected.clone();
    }
    point.parts.iter_mut().for_each(|part| part.edge.rim = rim.clone());
    point.edge.rim = rim;
    let readings: Vec<Reading> = solved.prediction.expected.iter().map(|expected| expected.reading.clone()).collect();
    crate::resistance::predict(&loaded.network, &setup(loaded, &point, solved.polarity), &readings).expected
}

/// The drawing shows the current leads of the first reading.
pub fn drawn_current(solved: &SolvedPoint) -> [ContactIdx; 2] {
    let first = solved.prediction.expected.first();
    first.map_or([ContactIdx(0), ContactIdx(1)], |expected| expected.reading.current)
}
