//! `edgesheet expect`: what every reading should be.

use std::path::Path;
use std::path::PathBuf;

use crate::cli::Failure;
use crate::cli::Finished;
use crate::cli::args::ExpectOptions;
use crate::cli::explained;
use crate::cli::explained::explain;
use crate::cli::load::Loaded;
use crate::cli::load::load;
use crate::cli::point::solve_all;
use crate::cli::select;
use crate::cli::show;
use crate::files::Existing;
use crate::files::Target;
use crate::report;
use crate::report::SolvedPoint;

pub fn run(options: &ExpectOptions) -> Result<Finished, Failure> {
    let loaded = load(&options.device, options.cooldown.as_deref())?;
    let chosen = select::written(&loaded.device, &options.reading).map_err(Failure::Input)?;
    let mut solved = solve_all(&loaded, |_| match (options.all, chosen.is_empty()) {
        (true, _) => select::unnamed(crate::resistance::every_reading(loaded.device.contacts.len())),
        (false, false) => select::unnamed(chosen.clone()),
        (false, true) => select::listed(&loaded),
    });
    if options.why {
        report::why_needs_no_wires(&loaded.device).map_err(Failure::one)?;
        solved.iter_mut().try_for_each(|point| explain(&loaded, point)).map_err(Failure::one)?;
    }
    let drawn = options.output.as_ref().map(|folder| draw(options, folder, (&loaded, &solved))).transpose()?;
    show::notices(&loaded.notices);
    show::drawn(&drawn.unwrap_or_default());
    if options.json {
        show::json(&report::expected_output(&loaded.device, &solved))
    } else if options.why {
        show::text(&report::why_text(&loaded.device, &solved))
    } else {
        show::text(&report::expected_table(&loaded.device, loaded.cooldown.as_ref(), &solved))
    }
}

/// The channels that make each number, drawn into a folder.
fn draw(
    options: &ExpectOptions,
    folder: &Path,
    (loaded, solved): (&Loaded, &[SolvedPoint]),
) -> Result<Vec<PathBuf>, Failure> {
    let pictures = explained::pictures(loaded, solved).map_err(Failure::one)?;
    let (names, contents): (Vec<String>, Vec<Vec<u8>>) = pictures.into_iter().unzip();
    let existing = if options.replace { Existing::Replace } else { Existing::Keep };
    let target = Target::test(folder, &names, existing);
    target.and_then(|target| target.write(&contents)).map_err(|fault| Failure::Write(fault, None))
}
