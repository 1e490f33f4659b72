//! From checked inputs to the bytes of a sheet: the one sequence, for writing a sheet and for verifying one.

use crate::archive;
use crate::archive::Options;
use crate::archive::Parts;
use crate::cli::Failure;
use crate::cli::judged;
use crate::cli::load::Loaded;
use crate::cli::point::solve_all_for_sheet;
use crate::cli::published::Published;
use crate::cli::published::Results;
use crate::cli::select;
use crate::compare::Verdict;
use crate::diagnostic::Diagnostic;
use crate::figure::scene::Scene;
use crate::report;
use crate::report::Beside;
use crate::report::Report;
use crate::report::SolvedPoint;
use crate::sheet::Paper;

/// A sheet, not yet written.
pub struct Made {
    pub report: Report,
    pub record: Vec<u8>,
    pub html: String,
    pub pdf: Vec<u8>,
    /// Where readings were measured.
    pub verdict: Option<Verdict>,
    /// What the fonts lack.
    pub spelled: Option<Diagnostic>,
}

/// What else can be made of a sheet before it is written.
pub struct Making<'a> {
    pub report: &'a Report,
    /// Every drawing and chart.
    pub scenes: Vec<Scene>,
    pub solved: &'a [SolvedPoint<'a>],
    pub beside: &'a [Beside],
}

/// Solves, compares, draws and composes.
pub fn make(loaded: &Loaded, options: &Options) -> Result<Made, Failure> {
    make_with(loaded, options, |_| Ok(())).map(|(made, ())| made)
}

/// The same with something else that is made from the same solutions.
pub fn make_with<T>(
    loaded: &Loaded,
    options: &Options,
    more: impl Fn(&Making) -> Result<T, Diagnostic>,
) -> Result<(Made, T), Failure> {
    let paper = paper(options).map_err(Failure::one)?;
    let (solved, beside) = solve_all_for_sheet(loaded, |point| select::for_sheet(loaded, point));
    let (comparison, rows) = judged::comparison(loaded, options.limit_in_u).unzip();
    let results = Results { solved: &solved, beside: &beside, comparison: comparison.as_ref(), rows: rows.as_deref() };
    let published = Published::new(loaded, results, options);
    let sources = published.sources();
    let report = report::build(&sources).map_err(Failure::one)?;
    let (numbers, version) = (report::numbers(&sources), sources.program_version);
    let parts = Parts { report: &report, numbers: &numbers, inputs: &loaded.inputs, options, version };
    let record = archive::record(parts).map_err(Failure::one)?;
    let html = published.html(&report).map_err(Failure::one)?;
    let pages = published.pages(&report, paper);
    let spelled = crate::sheet::spelled(&pages.scenes);
    let pdf = published.pdf(&report, &record, pages);
    let making = Making { report: &report, scenes: published.scenes(&report), solved: &solved, beside: &beside };
    let more = more(&making).map_err(Failure::one)?;
    let verdict = comparison.map(|comparison| comparison.verdict);
    Ok((Made { record, html, pdf, spelled, verdict, report }, more))
}

fn paper(options: &Options) -> Result<Paper, Diagnostic> {
    match options.paper.as_str() {
        "a4" => Ok(Paper::A4),
        "letter" => Ok(Paper::Letter),
        other => Err(Diagnostic::fault("unknown-paper", format!("there is no paper “{other}”"))
            .hint("the papers are a4 and letter")),
    }
}
