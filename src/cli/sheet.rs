//! `edgesheet sheet`: the main job.

use crate::archive::Options;
use crate::cli::Failure;
use crate::cli::Finished;
use crate::cli::args::PaperSize;
use crate::cli::args::SheetOptions;
use crate::cli::judged;
use crate::cli::load::Loaded;
use crate::cli::load::load;
use crate::cli::made::make;
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
    let made = make(&loaded, &kept(options))?;
    show::notices(&loaded.notices);
    show::notices(made.spelled.as_slice());
    let contents = [made.pdf, made.html.into_bytes(), made.record];
    let written = target.write(&contents).map_err(|fault| Failure::Write(fault, None))?;
    show::written(&made.report, &written)?;
    match made.verdict {
        Some(Verdict::Disagrees) if options.judge => Ok(Finished::Disagrees),
        _ => Ok(Finished::Fine),
    }
}

/// The options that change what a sheet holds.
fn kept(options: &SheetOptions) -> Options {
    let paper = match options.paper {
        PaperSize::A4 => "a4",
        PaperSize::Letter => "letter",
    };
    Options { paper: paper.to_owned(), limit_in_u: options.limit }
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
