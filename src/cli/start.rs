//! `edgesheet start`: a commented starter pair with readings.

use crate::cli::Failure;
use crate::cli::Finished;
use crate::cli::args::StartOptions;
use crate::cli::show;
use crate::files::Existing;
use crate::files::Target;
use crate::files::WriteFault;
use crate::guide::STARTER;
use crate::report;

pub fn run(options: &StartOptions) -> Result<Finished, Failure> {
    let names = STARTER.map(|(name, _)| name.to_owned());
    let contents = STARTER.map(|(_, text)| text.as_bytes().to_vec());
    let target = Target::test(&options.folder, &names, Existing::Keep).map_err(failure)?;
    let written = target.write(&contents).map_err(failure)?;
    show::text(&report::started(&written))
}

fn failure(fault: WriteFault) -> Failure {
    let advice = matches!(fault, WriteFault::Exists(_)).then(|| report::NEVER_REPLACED.to_owned());
    Failure::Write(fault, advice)
}
