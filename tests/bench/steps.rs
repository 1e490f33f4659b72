//! The steps of a sheet one by one, each with the time it took.

use std::time::Duration;
use std::time::Instant;

use edgesheet::archive::Kept;
use edgesheet::archive::Options;
use edgesheet::archive::Parts;
use edgesheet::archive::Role;
use edgesheet::circuit::Budget;
use edgesheet::circuit::Circuit;
use edgesheet::compare::Comparison;
use edgesheet::cooldown::Cooldown;
use edgesheet::cooldown::Names;
use edgesheet::device::ContactIdx;
use edgesheet::device::Device;
use edgesheet::diagnostic::Source;
use edgesheet::figure::ChipDrawing;
use edgesheet::figure::scene::Scene;
use edgesheet::layout::Layout;
use edgesheet::measured::MeasuredReading;
use edgesheet::network::Network;
use edgesheet::quantity::Polarity;
use edgesheet::report::Beside;
use edgesheet::report::Input;
use edgesheet::report::IsolatedRegion;
use edgesheet::report::Numbers;
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
use edgesheet::sheet::Paper;

/// Times by the name of their step, in the order of the first call.
#[derive(Default)]
pub struct Clock {
    pub steps: Vec<(&'static str, Duration)>,
}

impl Clock {
    /// Does the work and adds its time to the step.
    pub fn time<T>(&mut self, step: &'static str, work: impl FnOnce() -> T) -> T {
        let start = Instant::now();
        let value = work();
        let took = start.elapsed();
        match self.steps.iter_mut().find(|(name, _)| *name == step) {
            Some((_, sum)) => *sum += took,
            None => self.steps.push((step, took)),
        }
        value
    }
}

/// Texts of one run.
pub struct Texts {
    pub device: String,
    pub cooldown: Option<String>,
    pub readings: Option<String>,
}

/// A device read and laid out.
pub struct Solver {
    pub device: Device,
    pub layout: Layout,
    pub network: Network,
    pub cooldown: Option<Cooldown>,
}

impl Solver {
    /// Reads the texts.
    pub fn of(texts: &Texts, clock: &mut Clock) -> Self {
        let device = clock.time("device", || {
            edgesheet::device::from_source(&Source::new("device.toml", texts.device.as_str())).expect("device").value
        });
        let cooldown = texts.cooldown.as_ref().map(|text| {
            clock.time("cooldown", || {
                edgesheet::cooldown::from_source(&Source::new("cooldown.toml", text.as_str()), &device)
                    .expect("cooldown")
                    .value
            })
        });
        let layout = clock.time("layout", || edgesheet::layout::layout(&device).expect("layout").value);
        let network = clock.time("network", || edgesheet::network::network(&layout, device.contacts.len()));
        Self { device, layout, network, cooldown }
    }

    /// The setting of a point.
    pub fn setup(&self, point: usize, polarity: Polarity) -> Setup {
        let point = &self.device.points[point];
        let operating = edgesheet::network::operating(&self.network, &self.device, point, polarity);
        Setup { operating, circuit: self.cooldown.as_ref().map(Circuit::of) }
    }

    /// Everything that is expected at a point. The matrix is also solved apart, to see its share; that time is not
    /// taken off the readings.
    pub fn solve(&self, point: usize, polarity: Polarity, readings: &[Reading], clock: &mut Clock) -> Prediction {
        let setup = self.setup(point, polarity);
        let channels = clock.time("channels", || edgesheet::network::channels(&self.network, &setup.operating));
        clock.time("conductance", || edgesheet::conductance::conductance(&channels));
        let ideal = Setup { operating: setup.operating.clone(), circuit: None };
        clock.time("readings, ideal", || edgesheet::resistance::predict(&self.network, &ideal, readings));
        let mut solved =
            clock.time("readings, shown", || edgesheet::resistance::predict(&self.network, &setup, readings));
        let forms = clock.time("closed forms: fit", || {
            let point = &self.device.points[point];
            let regions = edgesheet::resistance::filling_regions(&self.network, &self.device, point);
            ClosedForms::of(&self.network, &setup.operating, regions)
        });
        clock.time("closed forms: words", || solved.put_closed_forms(&forms));
        solved
    }

    /// Measured readings compared.
    pub fn compare(&self, measured: &[MeasuredReading]) -> Comparison {
        let row = |reading: &MeasuredReading| {
            let setup = self.setup(reading.point, reading.polarity);
            let asked = [Reading::new(reading.current, reading.voltage)];
            let mut solved = edgesheet::resistance::predict(&self.network, &setup, &asked);
            let budget = solved.budgets(&setup).remove(0).map_or(0.0, |budget| budget.u_ohm);
            (reading.clone(), solved.expected.remove(0), budget)
        };
        edgesheet::compare::compare(measured.iter().map(row).collect(), None)
    }

    /// What a sheet says beside a solution.
    fn beside(&self, point: usize, polarity: Polarity, solved: &Prediction, clock: &mut Clock) -> Beside {
        let setup = self.setup(point, polarity);
        let isolated = clock.time("isolating readings", || self.isolated(point, &setup, solved));
        clock.time("corrections and budgets", || Beside {
            isolated,
            unmixed: solved.expected.clone(),
            mixed: solved.expected.clone(),
            corrections: solved.corrections(&setup),
            as_taken: Vec::new(),
            two_terminal: self.two_terminal(&setup, solved),
        })
    }

    fn two_terminal(&self, setup: &Setup, solved: &Prediction) -> Option<(Expected, Budget)> {
        let mut readings = solved.expected.iter().map(|expected| &expected.reading);
        let reading = readings.find(|reading| reading.current == reading.voltage)?.clone();
        let mut solved = edgesheet::resistance::predict(&self.network, setup, &[reading]);
        let budget = solved.budgets(setup).remove(0)?;
        Some((solved.expected.remove(0), budget))
    }

    fn isolated(&self, point: usize, setup: &Setup, solved: &Prediction) -> Vec<IsolatedRegion> {
        let regions = edgesheet::resistance::filling_regions(&self.network, &self.device, &self.device.points[point]);
        let forms = ClosedForms::of(&self.network, &setup.operating, regions);
        let candidates = Candidates::usual(self.device.contacts.len(), solved.expected[0].reading.current);
        let regions = forms.regions().iter().enumerate().filter(|(_, region)| !region.is_bulk());
        let best = |region| {
            let found = edgesheet::resistance::isolating(&self.network, setup, &forms, (region, candidates));
            let reading = found.into_iter().next()?.reading;
            edgesheet::resistance::predict(&self.network, setup, &[reading]).expected.pop()
        };
        regions.map(|(at, region)| IsolatedRegion { name: region.name.clone(), best: best(at), why: None }).collect()
    }

    fn draw(&self, point: usize, side: usize, solved: &Prediction, current: [ContactIdx; 2]) -> Scene {
        let polarity = Polarity::BOTH[side];
        edgesheet::figure::draw_chip(&ChipDrawing {
            names: &edgesheet::report::chip_names(&self.device),
            layout: &self.layout,
            channels: &solved.channels,
            fillings: &self.setup(point, polarity).operating.fillings,
            polarity,
            potentials: solved.bundle_potentials(current).as_deref(),
            size_mm: (sheet::DRAWING_WIDTH_MM, 76.0),
        })
    }
}

/// One pair per operating point, field toward first.
type Both<'a, T> = &'a [[T; 2]];

/// A whole sheet; gives the sizes of PDF, twin and record in bytes.
pub fn sheet(texts: &Texts, clock: &mut Clock) -> [usize; 3] {
    let solver = Solver::of(texts, clock);
    let readings = edgesheet::resistance::standard_readings(&solver.network);
    let points = solver.device.points.len();
    let solved: Vec<[Prediction; 2]> = (0..points)
        .map(|point| Polarity::BOTH.map(|polarity| solver.solve(point, polarity, &readings, clock)))
        .collect();
    let comparison = texts.readings.as_ref().map(|text| {
        let names = Names::of(&solver.device, solver.cooldown.as_ref());
        let source = Source::new("readings.csv", text.as_str());
        let measured =
            clock.time("measured", || edgesheet::measured::from_source(&source, &names).expect("readings").value);
        clock.time("compare (each reading alone)", || solver.compare(&measured))
    });
    let current = readings[0].current;
    let drawings: Vec<[Scene; 2]> = clock.time("drawing", || {
        (0..points).map(|at| [0, 1].map(|side| solver.draw(at, side, &solved[at][side], current))).collect()
    });
    let beside: Vec<[Beside; 2]> = (0..points)
        .map(|at| [0, 1].map(|side| solver.beside(at, Polarity::BOTH[side], &solved[at][side], clock)))
        .collect();
    let parts = (solved.as_slice(), drawings.as_slice(), beside.as_slice());
    let (report, numbers) = clock.time("report", || report(&solver, parts, comparison.as_ref(), readings.len()));
    let record = clock.time("record", || record(&report, &numbers, texts));
    let html = clock.time("twin", || {
        let pictures: Vec<[String; 2]> =
            drawings.iter().map(|pair| [0, 1].map(|side| edgesheet::figure::to_svg(&pair[side]))).collect();
        sheet::html(&report, &pictures).expect("twin")
    });
    let pages = clock.time("pages", || sheet::compose(&report, &drawings, Paper::A4));
    let pdf = clock.time("PDF", || {
        let inputs = [("device.toml", texts.device.as_bytes())];
        sheet::pdf::pdf(&sheet::document(&report, pages, None, (&inputs, &record)))
    });
    [pdf.len(), html.len(), record.len()]
}

fn report(
    solver: &Solver,
    (solved, drawings, beside): (Both<Prediction>, Both<Scene>, Both<Beside>),
    comparison: Option<&Comparison>,
    readings: usize,
) -> (Report, Numbers) {
    let rows = vec![RowSource::default(); comparison.map_or(0, |comparison| comparison.rows.len())];
    let points = solver.device.points.iter().enumerate().map(|(index, point)| PointSource {
        point,
        toward: &solved[index][0],
        away: &solved[index][1],
        names: vec![None; readings],
        drawn_current: solved[index][0].expected[0].reading.current,
        drawings: Some(&drawings[index]),
        beside: [&beside[index][0], &beside[index][1]],
    });
    let sources = Sources {
        device: &solver.device,
        network: &solver.network,
        cooldown: solver.cooldown.as_ref(),
        points: points.collect(),
        comparison,
        rows: &rows,
        inputs: vec![Input::of("device.toml", b"")],
        notices: &[],
        options: Vec::new(),
        program_version: "bench",
    };
    (edgesheet::report::build(&sources).expect("report"), edgesheet::report::numbers(&sources))
}

fn record(report: &Report, numbers: &Numbers, texts: &Texts) -> Vec<u8> {
    let inputs = [Kept { role: Role::Device, name: "device.toml".to_owned(), bytes: texts.device.as_bytes().to_vec() }];
    let options = Options { paper: "a4".to_owned(), limit_in_u: None };
    let parts = Parts { report, numbers, inputs: &inputs, options: &options, version: "bench" };
    edgesheet::archive::record(parts).expect("record")
}
