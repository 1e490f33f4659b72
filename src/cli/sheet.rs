//! `edgesheet sheet`: the main job.

use crate::archive;
use crate::cli::Failure;
use crate::cli::Finished;
use crate::cli::args::SheetOptions;
use crate::cli::judged;
use crate::cli::load::Loaded;
use crate::cli::load::load;
use crate::cli::point::solve_all_for_sheet;
use crate::cli::published::Published;
use crate::cli::published::Results;
use crate::cli::select;
use crate::cli::show;
use crate::compare::Verdict;
use crate::files::Existing;
use crate::files::Target;
use crate::files::WriteFault;
use crate::report;

pub fn run(options: &SheetOptions) -> Result<Finished, Failure> {
    judged::check_limit(options.limit)?;
    let loaded = load(&options.device, options.cooldown.as_deref())?;
    let target = target(options, &loaded)?;
    let (solved, beside) = solve_all_for_sheet(&loaded, |point| select::for_sheet(&loaded, point));
    let (comparison, rows) = judged::comparison(&loaded, options.limit).unzip();
    let results = Results { solved: &solved, beside: &beside, comparison: comparison.as_ref(), rows: rows.as_deref() };
    let published = Published::new(&loaded, results, options);
    let report = report::build(&published.sources()).map_err(Failure::one)?;
    let record = archive::record(&report).map_err(Failure::one)?;
    let html = published.html(&report).map_err(Failure::one)?;
    let pages = published.pages(&report, options.paper);
    show::notices(&loaded.notices);
    show::notices(crate::sheet::spelled(&pages.scenes).as_slice());
    let pdf = published.pdf(&report, &record, pages);
    let written = target.write(&[pdf, html.into_bytes(), record]).map_err(|fault| Failure::Write(fault, None))?;
    show::written(&report, &written)?;
    match comparison.map(|comparison| comparison.verdict) {
        Some(Verdict::Disagrees) if options.judge => Ok(Finished::Disagrees),
        _ => Ok(Finished::Fine),
    }
}

/// The three files of the sheet, tested before the work.
fn target(options: &SheetOptions, loaded: &Loaded) -> Result<Target, Failure> {
    let stem = report::file_stem(&loaded.device, loaded.cooldown.as_ref());
    let names = ["pdf", "html", "json"].map(|extension| format!("{stem}.{extension}"));
    let existing = if options.replace { Existing::Replace } else { Existing::Keep };
    Target::test(&options.output, &names, existing).map_err(|fault| {
        let advice = matches!(fault, WriteFault::Exists(_)).then(|| report::next_revision(loaded.cooldown.as_ref()));
        Failure::Write(fault, advice)
    })
}
