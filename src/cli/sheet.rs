//! `edgesheet sheet`: the main job.

use crate::archive::Options;
use crate::cli::Failure;
use crate::cli::Finished;
use crate::cli::args::PaperSize;
use crate::cli::args::SheetOptions;
use crate::cli::explained;
use crate::cli::judged;
use crate::cli::load::Loaded;
use crate::cli::load::load;
use crate::cli::made::Making;
use crate::cli::made::make_with;
use crate::cli::picture;
use crate::cli::picture::Named;
use crate::cli::show;
use crate::compare::Verdict;
use crate::diagnostic::Diagnostic;
use crate::files::Existing;
use crate::files::Target;
use crate::files::WriteFault;
use crate::report;
use crate::report::PictureOrigin;

pub fn run(options: &SheetOptions) -> Result<Finished, Failure> {
    judged::check_limit(options.limit)?;
    let loaded = load(&options.device, options.cooldown.as_deref())?;
    target(options, &loaded, &[])?;
    let figures = |making: &Making| if options.figures { figures(&loaded, making) } else { Ok(Vec::new()) };
    let (made, figures) = make_with(&loaded, &kept(options), figures)?;
    show::notices(&loaded.notices);
    show::notices(made.spelled.as_slice());
    let (names, pictures): (Vec<String>, Vec<Vec<u8>>) = figures.into_iter().unzip();
    let contents = [vec![made.pdf, made.html.into_bytes(), made.record], pictures].concat();
    let target = target(options, &loaded, &names)?;
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

/// The three files of the sheet, tested before the work, and again with the pictures, whose names come with it.
fn target(options: &SheetOptions, loaded: &Loaded, pictures: &[String]) -> Result<Target, Failure> {
    let stem = report::file_stem(&loaded.device, loaded.cooldown.as_ref());
    let sheet = ["pdf", "html", "json"].map(|extension| format!("{stem}.{extension}"));
    let names: Vec<String> = sheet.into_iter().chain(pictures.iter().map(|name| format!("{stem}_{name}"))).collect();
    let existing = if options.replace { Existing::Replace } else { Existing::Keep };
    Target::test(&options.output, &names, existing).map_err(|fault| {
        let advice = matches!(fault, WriteFault::Exists(_)).then(|| report::next_revision(loaded.cooldown.as_ref()));
        Failure::Write(fault, advice)
    })
}

/// Every drawing and chart as SVG and PNG, and why the readings that show one region alone do so.
fn figures(loaded: &Loaded, making: &Making) -> Result<Vec<Named>, Diagnostic> {
    let pictures = report::pictures(making.report);
    let drawn = pictures.iter().zip(&making.scenes).map(|(picture, scene)| picture::files(picture, scene));
    let mut files = drawn.collect::<Result<Vec<_>, _>>()?.concat();
    let origin = PictureOrigin::of(making.report);
    for both in making.solved.iter().zip(making.beside) {
        files.extend(explained::isolating(loaded, both, &origin)?);
    }
    // One reading may show several regions.
    files.sort();
    files.dedup();
    Ok(files)
}
