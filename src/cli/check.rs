//! `edgesheet check`: what is understood of files, and all their faults.

use crate::cli::Failure;
use crate::cli::Finished;
use crate::cli::args::CheckOptions;
use crate::cli::beside;
use crate::cli::opened;
use crate::cli::show;
use crate::diagnostic::Faults;
use crate::diagnostic::Findings;
use crate::report;

pub fn run(options: &CheckOptions) -> Result<Finished, Failure> {
    let mut findings = Findings::default();
    let files = opened::open_all(&options.files, &mut findings);
    let understood = beside::understood(&files, &mut findings);
    match findings.finish(()) {
        Ok(noted) => {
            show::notices(&noted.notices);
            show::text(&report::checked(&understood, &noted.notices))
        }
        Err(Faults(list)) => {
            show::text(&report::checked(&understood, &list))?;
            Err(Failure::Input(Faults(list)))
        }
    }
}
