//! The whole path from texts to pages, as the `sheet` command goes it.

use std::sync::Arc;

use edgesheet::circuit::Budget;
use edgesheet::circuit::Circuit;
use edgesheet::compare::Comparison;
use edgesheet::cooldown::Cooldown;
use edgesheet::cooldown::Names;
use edgesheet::device::ContactIdx;
use edgesheet::device::Device;
use edgesheet::device::Mixing;
use edgesheet::diagnostic::Source;
use edgesheet::figure::ChipDrawing;
use edgesheet::figure::scene::Scene;
use edgesheet::layout::Layout;
use edgesheet::network::Network;
use edgesheet::quantity::Polarity;
use edgesheet::report;
use edgesheet::report::Beside;
use edgesheet::report::Input;
use edgesheet::report::IsolatedRegion;
use edgesheet::report::PointSource;
use edgesheet::report::Report;
use edgesheet::report::RowSource;
use edgesheet::report::Sources;
use edgesheet::resistance::Candidates;
use edgesheet::resistance::ClosedForms;
use edgesheet::resistance::Expected;
use edgesheet::resistance::Prediction;
use edgesheet::resistance::Reading;
use edgesheet::resistance::Setup;
use edgesheet::sheet;
use edgesheet::sheet::Pages;
use edgesheet::sheet::Paper;

/// A report with its drawings.
pub struct Made {
    pub report: Report,
    pub drawings: Vec<[Scene; 2]>,
}

impl Made {
    /// The pages on A4.
    pub fn pages(&self) -> Vec<Scene> {
        self.pages_on(Paper::A4)
    }

    /// The pages on a paper.
    pub fn pages_on(&self, paper: Paper) -> Vec<Scene> {
        self.guided(paper).scenes
    }

    /// The pages with the ways through them.
    pub fn guided(&self, paper: Paper) -> Pages {
        sheet::compose(&self.report, &self.drawings, paper)
    }
}

/// Which readings a sheet lists.
#[derive(Clone, Copy)]
pub enum Listed {
    Standard,
    /// The first so many of all.
    First(usize),
}

/// Reads the texts, solves, draws, compares and reports.
pub fn make(device: &str, cooldown: Option<(&str, &str)>, listed: Listed) -> Made {
    let source = |name: &str, text: &str| -> Arc<Source> { Source::new(name, text) };
    let device = edgesheet::device::from_source(&source("device.toml", device)).expect("device").value;
    let layout = edgesheet::layout::layout(&device).expect("layout").value;
    let network = edgesheet::network::network(&layout, device.contacts.len());
    let read = cooldown.map(|(text, _)| {
        edgesheet::cooldown::from_source(&source("cooldown.toml", text), &device).expect("cooldown").value
    });
    let solver = Solver { device: &device, layout: &layout, network: &network, cooldown: read.as_ref() };
    let readings = match listed {
        Listed::Standard => edgesheet::resistance::standard_readings(&network),
        Listed::First(count) => {
            edgesheet::resistance::every_reading(device.contacts.len()).into_iter().take(count).collect()
        }
    };
    let current = readings[0].current;
    let solved: Vec<[Prediction; 2]> = (0..device.points.len()).map(|point| solver.both(point, &readings)).collect();
    let beside: Vec<[Beside; 2]> = (0..device.points.len()).map(|at| solver.beside(at, &solved[at], current)).collect();
    let drawings: Vec<[Scene; 2]> = (0..device.points.len()).map(|p| solver.drawings(p, &solved[p], current)).collect();
    let (comparison, rows) = cooldown.map(|(_, text)| solver.compare(&source("readings.csv", text))).unzip();
    let rows: Vec<RowSource> = rows.unwrap_or_default();
    let points = device.points.iter().enumerate().map(|(index, point)| PointSource {
        point,
        toward: &solved[index][0],
        away: &solved[index][1],
        names: vec![None; readings.len()],
        drawn_current: current,
        drawings: Some(&drawings[index]),
        beside: [&beside[index][0], &beside[index][1]],
    });
    let input = |name: &str, bytes| Input { name: name.to_string(), bytes, sha256: "0f".repeat(32) };
    let report = report::build(&Sources {
        device: &device,
        network: &network,
        cooldown: read.as_ref(),
        points: points.collect(),
        comparison: comparison.as_ref(),
        rows: &rows,
        inputs: vec![input("device.toml", 1741), input("cooldown.toml", 861), input("readings.csv", 702)],
        notices: &[],
        options: Vec::new(),
        program_version: "0.1.0",
    });
    Made { report: report.expect("report"), drawings }
}

struct Solver<'a> {
    device: &'a Device,
    layout: &'a Layout,
    network: &'a Network,
    cooldown: Option<&'a Cooldown>,
}

impl Solver<'_> {
    fn setup(&self, point: usize, polarity: Polarity, cooldown: Option<&Cooldown>) -> Setup {
        let point = &self.device.points[point];
        let operating = edgesheet::network::operating(self.network, self.device, point, polarity);
        Setup { operating, circuit: cooldown.map(Circuit::of) }
    }

    fn both(&self, point: usize, readings: &[Reading]) -> [Prediction; 2] {
        Polarity::BOTH.map(|polarity| {
            let setup = self.setup(point, polarity, self.cooldown);
            let mut prediction = edgesheet::resistance::predict(self.network, &setup, readings);
            let regions = edgesheet::resistance::filling_regions(self.network, self.device, &self.device.points[point]);
            let forms = ClosedForms::of(self.network, &setup.operating, regions);
            for expected in &mut prediction.expected {
                expected.formula = forms.form(&expected.reading).map(|form| forms.words(&form));
            }
            prediction
        })
    }

    /// Many contacts and long names take the whole width, as on the sheets of long mesas.
    fn size_mm(&self) -> (f64, f64) {
        let contacts = &self.device.contacts;
        let wide = contacts.len() > 20 || contacts.iter().any(|contact| contact.name.len() > 12);
        if wide { (sheet::WIDE_DRAWING_MM, 45.0) } else { (sheet::DRAWING_WIDTH_MM, 60.0) }
    }

    fn drawings(&self, point: usize, solved: &[Prediction; 2], current: [ContactIdx; 2]) -> [Scene; 2] {
        [0, 1].map(|side| {
            let potentials = solved[side].bundle_potentials(current);
            edgesheet::figure::draw_chip(&ChipDrawing {
                names: &edgesheet::report::chip_names(self.device),
                layout: self.layout,
                channels: &solved[side].channels,
                fillings: &self.setup(point, Polarity::BOTH[side], None).operating.fillings,
                polarity: Polarity::BOTH[side],
                potentials: potentials.as_deref(),
                size_mm: self.size_mm(),
            })
        })
    }

    fn beside(&self, point: usize, solved: &[Prediction; 2], current: [ContactIdx; 2]) -> [Beside; 2] {
        [0, 1].map(|side| {
            let given = &self.device.points[point];
            let setup = self.setup(point, Polarity::BOTH[side], self.cooldown);
            let regions = edgesheet::resistance::filling_regions(self.network, self.device, given);
            let forms = ClosedForms::of(self.network, &setup.operating, regions);
            let candidates = Candidates::usual(self.device.contacts.len(), current);
            let best = |region| {
                let found = edgesheet::resistance::isolating(self.network, &setup, &forms, (region, candidates));
                let (reading, formula) = report::preferred(&forms, &found, current)?;
                let mut prediction = edgesheet::resistance::predict(self.network, &setup, &[reading]);
                let why = edgesheet::resistance::why(self.network, &setup, &prediction, 0);
                Some((Expected { formula: Some(formula), ..prediction.expected.remove(0) }, why))
            };
            let regions = forms.regions().iter().enumerate().filter(|(_, region)| !region.is_bulk());
            let isolated = regions.map(|(at, region)| {
                let (best, why) = best(at).unzip();
                IsolatedRegion { name: region.name.clone(), best, why: why.flatten() }
            });
            Beside {
                isolated: isolated.collect(),
                unmixed: self.with_rim(point, (side, &solved[side]), Mixing::None),
                mixed: self.with_rim(point, (side, &solved[side]), Mixing::Full),
                corrections: solved[side].corrections(&setup),
                as_taken: Vec::new(),
                two_terminal: self.two_terminal(&setup, &solved[side]),
            }
        })
    }

    fn two_terminal(&self, setup: &Setup, solved: &Prediction) -> Option<(Expected, Budget)> {
        let reading =
            solved.expected.iter().map(|expected| &expected.reading).find(|r| r.current == r.voltage)?.clone();
        let mut prediction = edgesheet::resistance::predict(self.network, setup, &[reading]);
        let budget = prediction.budgets(setup).remove(0)?;
        Some((prediction.expected.remove(0), budget))
    }

    fn with_rim(&self, point: usize, (side, solved): (usize, &Prediction), rim: Mixing) -> Vec<Expected> {
        let mut other = self.device.points[point].clone();
        other.edge.rim = rim;
        let operating = edgesheet::network::operating(self.network, self.device, &other, Polarity::BOTH[side]);
        let setup = Setup { operating, circuit: None };
        let readings: Vec<Reading> = solved.expected.iter().map(|expected| expected.reading.clone()).collect();
        edgesheet::resistance::predict(self.network, &setup, &readings).expected
    }

    fn compare(&self, readings: &Arc<Source>) -> (Comparison, Vec<RowSource>) {
        let measured =
            edgesheet::measured::from_source(readings, &Names::of(self.device, self.cooldown)).expect("readings").value;
        let rows = measured.into_iter().map(|reading| {
            let setup = self.setup(reading.point, reading.polarity, self.cooldown);
            let asked = [Reading::new(reading.current, reading.voltage)];
            let mut prediction = edgesheet::resistance::predict(self.network, &setup, &asked);
            let budget = prediction.budgets(&setup).remove(0);
            let corrections = prediction.corrections(&setup).remove(0);
            ((reading, prediction.expected.remove(0), 0.0), RowSource { budget, corrections })
        });
        let (rows, circuit): (Vec<_>, Vec<_>) = rows.unzip();
        (edgesheet::compare::compare(rows, None), circuit)
    }
}
