//! `edgesheet isolate`: which readings show one region alone.

use std::collections::BTreeSet;

use crate::cli::Failure;
use crate::cli::Finished;
use crate::cli::args::IsolateOptions;
use crate::cli::load::load;
use crate::cli::point;
use crate::cli::show;
use crate::quantity::Polarity;
use crate::report;
use crate::resistance::Candidates;

pub fn run(options: &IsolateOptions) -> Result<Finished, Failure> {
    let loaded = load(&options.device, None)?;
    let mut lists = Vec::new();
    let mut known = BTreeSet::new();
    for point in &loaded.device.points {
        for polarity in Polarity::BOTH {
            let setup = point::setup(&loaded, point, polarity);
            let forms = point::forms(&loaded, point, &setup);
            let region = report::region_called(&forms, &options.region);
            let found =
                region.map(|at| crate::resistance::isolating(&loaded.network, &setup, &forms, (at, Candidates::Every)));
            known.extend(forms.regions().iter().map(|region| region.name.clone()));
            lists.push(report::IsolatedPoint::new(point, polarity, &forms, found));
        }
    }
    if !report::is_region(&loaded.device, &lists, &options.region) {
        return Err(Failure::Input(report::unknown_region(&options.region, &known)));
    }
    show::notices(&loaded.notices);
    show::text(&report::isolated_table(&loaded.device, &lists, &options.region, options.all))
}
