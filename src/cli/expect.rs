//! `edgesheet expect`: what every reading should be.

use crate::cli::Failure;
use crate::cli::Finished;
use crate::cli::args::ExpectOptions;
use crate::cli::load::load;
use crate::cli::point::explain;
use crate::cli::point::solve_all;
use crate::cli::select;
use crate::cli::show;
use crate::report;

pub fn run(options: &ExpectOptions) -> Result<Finished, Failure> {
    let loaded = load(&options.device, options.cooldown.as_deref())?;
    let chosen = select::written(&loaded.device, &options.reading).map_err(Failure::Input)?;
    let mut solved = solve_all(&loaded, |_| match (options.all, chosen.is_empty()) {
        (true, _) => select::unnamed(crate::resistance::every_reading(loaded.device.contacts.len())),
        (false, false) => select::unnamed(chosen.clone()),
        (false, true) => select::listed(&loaded),
    });
    if options.why {
        solved.iter_mut().try_for_each(|point| explain(&loaded, point)).map_err(Failure::one)?;
    }
    show::notices(&loaded.notices);
    if options.json {
        show::json(&report::expected_output(&loaded.device, &solved))
    } else if options.why {
        show::text(&report::why_text(&loaded.device, &solved))
    } else {
        show::text(&report::expected_table(&loaded.device, loaded.cooldown.as_ref(), &solved))
    }
}
