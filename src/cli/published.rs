//! What a sheet is published from: finished results, drawings and the files that go in.

use crate::archive::Options;
use crate::cli::load::Loaded;
use crate::cli::point::drawn_current;
use crate::compare::Comparison;
use crate::diagnostic::Diagnostic;
use crate::figure::ChipDrawing;
use crate::figure::scene::Scene;
use crate::layout::Point;
use crate::report::Beside;
use crate::report::Input;
use crate::report::PointReport;
use crate::report::PointSource;
use crate::report::Report;
use crate::report::RowSource;
use crate::report::SolvedPoint;
use crate::report::Sources;
use crate::sheet;
use crate::sheet::Pages;
use crate::sheet::Paper;

/// Greatest height of a drawing on the sheet, in mm.
const DRAWING_HEIGHT_MM: f64 = 76.0;
/// Greatest height of each of two drawings that stand one below the other, in mm.
const WIDE_HEIGHT_MM: f64 = 45.0;
/// Most contacts of which the names and bundles stay apart in a column.
const COLUMN_CONTACTS: usize = 20;
/// Most letters of a contact's name that a column has room for.
const COLUMN_NAME: usize = 12;
/// Least ratio of length to width from which a drawing gains by the whole width of the page.
const LEAST_WIDE_RATIO: f64 = 2.0;

/// What was solved and compared.
#[derive(Clone, Copy)]
pub struct Results<'a> {
    /// Each point at `+`, then at `−`.
    pub solved: &'a [SolvedPoint<'a>],
    /// One per solved point.
    pub beside: &'a [Beside],
    /// The comparison, where readings were measured.
    pub comparison: Option<&'a Comparison>,
    /// One per row of it.
    pub rows: Option<&'a [RowSource]>,
}

/// Everything that the pages, the twin and the record are made from.
pub struct Published<'a> {
    loaded: &'a Loaded,
    results: Results<'a>,
    /// One pair per operating point, field toward first.
    drawings: Vec<[Scene; 2]>,
    options: Vec<String>,
}

impl<'a> Published<'a> {
    /// Draws all points.
    pub fn new(loaded: &'a Loaded, results: Results<'a>, options: &Options) -> Self {
        let drawings = results.solved.chunks_exact(2).map(|pair| draw_both(loaded, pair)).collect();
        Self { loaded, results, drawings, options: used(options) }
    }

    /// The sources of the report.
    pub fn sources(&self) -> Sources<'_> {
        let Results { solved, beside, comparison, rows } = self.results;
        let pairs = solved.chunks_exact(2).zip(beside.chunks_exact(2)).zip(&self.drawings);
        let point = |((pair, beside), drawings): ((&'a [SolvedPoint<'a>], &'a [Beside]), _)| PointSource {
            point: pair[0].point,
            toward: &pair[0].prediction,
            away: &pair[1].prediction,
            names: pair[0].names.clone(),
            drawn_current: drawn_current(&pair[0]),
            drawings: Some(drawings),
            beside: [&beside[0], &beside[1]],
        };
        Sources {
            device: &self.loaded.device,
            network: &self.loaded.network,
            cooldown: self.loaded.cooldown.as_ref(),
            points: pairs.map(point).collect(),
            comparison,
            rows: rows.unwrap_or_default(),
            inputs: self.loaded.inputs.iter().map(|file| Input::of(&file.name, &file.bytes)).collect(),
            notices: &self.loaded.notices,
            options: self.options.clone(),
            program_version: env!("CARGO_PKG_VERSION"),
        }
    }

    /// Every drawing and chart, in the order of [`report::pictures`](crate::report::pictures).
    pub fn scenes(&self, report: &Report) -> Vec<Scene> {
        let of_point = |(point, drawings): (&PointReport, &[Scene; 2])| -> Vec<Scene> {
            drawings.iter().cloned().chain(sheet::chart_scenes(point)).collect()
        };
        report.points.iter().zip(&self.drawings).flat_map(of_point).collect()
    }

    /// The HTML twin.
    pub fn html(&self, report: &Report) -> Result<String, Diagnostic> {
        let pictures: Vec<[String; 2]> =
            self.drawings.iter().map(|pair| [&pair[0], &pair[1]].map(crate::figure::to_svg)).collect();
        sheet::html(report, &pictures)
    }

    /// The pages.
    pub fn pages(&self, report: &Report, paper: Paper) -> Pages {
        sheet::compose(report, &self.drawings, paper)
    }

    /// The PDF of the pages with the inputs and the record attached.
    pub fn pdf(&self, report: &Report, record: &[u8], pages: Pages) -> Vec<u8> {
        let inputs: Vec<(&str, &[u8])> =
            self.loaded.inputs.iter().map(|file| (file.name.as_str(), file.bytes.as_slice())).collect();
        let date = self.loaded.cooldown.as_ref().and_then(|cooldown| cooldown.date.clone());
        sheet::pdf::pdf(&sheet::document(report, pages, date, (&inputs, record)))
    }
}

/// Both polarities at the same time: searching for a drawing that fits is the longest step of a sheet.
fn draw_both(loaded: &Loaded, pair: &[SolvedPoint]) -> [Scene; 2] {
    std::thread::scope(|scope| {
        let toward = scope.spawn(|| draw(loaded, &pair[0]));
        let away = draw(loaded, &pair[1]);
        [toward.join().unwrap_or_else(|panic| std::panic::resume_unwind(panic)), away]
    })
}

fn draw(loaded: &Loaded, solved: &SolvedPoint) -> Scene {
    let current = drawn_current(solved);
    let operating = crate::network::operating(&loaded.network, &loaded.device, solved.point, solved.polarity);
    crate::figure::draw_chip(&ChipDrawing {
        names: &crate::report::chip_names(&loaded.device),
        layout: &loaded.layout,
        channels: &solved.prediction.channels,
        fillings: if solved.point.modes.is_some() { &[] } else { &operating.fillings },
        polarity: solved.polarity,
        potentials: solved.prediction.bundle_potentials(current).as_deref(),
        size_mm: size_mm(loaded),
    })
}

/// A long mesa with many contacts or long names takes the whole width, and its two drawings stand one below the other.
pub fn size_mm(loaded: &Loaded) -> (f64, f64) {
    let contacts = &loaded.device.contacts;
    let crowded = contacts.len() > COLUMN_CONTACTS || contacts.iter().any(|one| one.name.chars().count() > COLUMN_NAME);
    if crowded && length_to_width(loaded) >= LEAST_WIDE_RATIO {
        (sheet::WIDE_DRAWING_MM, WIDE_HEIGHT_MM)
    } else {
        (sheet::DRAWING_WIDTH_MM, DRAWING_HEIGHT_MM)
    }
}

/// Extent of mesa and contacts along x over that along y; 0 where there is nothing.
fn length_to_width(loaded: &Loaded) -> f64 {
    let corners = || loaded.layout.positions.pieces.iter().flatten();
    let extent = |along: fn(&Point) -> i64| {
        let least = corners().map(along).min().unwrap_or_default();
        let most = corners().map(along).max().unwrap_or_default();
        (most - least) as f64
    };
    let (length, width) = (extent(|corner| corner.0), extent(|corner| corner.1));
    if width > 0.0 { length / width } else { 0.0 }
}

/// The options as they are typed.
fn used(options: &Options) -> Vec<String> {
    let limit = options.limit_in_u.map(|limit| format!("--limit {limit}"));
    let paper = (options.paper != "a4").then(|| format!("--paper {}", options.paper));
    limit.into_iter().chain(paper).collect()
}
