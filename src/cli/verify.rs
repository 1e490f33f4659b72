//! `edgesheet verify`: whether the archived inputs still give the archived numbers.

use std::path::Path;

use crate::archive;
use crate::archive::Again;
use crate::archive::Kept;
use crate::archive::Needed;
use crate::archive::Opened;
use crate::archive::Verified;
use crate::cli::Failure;
use crate::cli::Finished;
use crate::cli::args::VerifyOptions;
use crate::cli::load::load_kept;
use crate::cli::made::make;
use crate::cli::show;
use crate::diagnostic::Diagnostic;
use crate::files;

pub fn run(options: &VerifyOptions) -> Result<Finished, Failure> {
    let name = options.sheet.display().to_string();
    let bytes = files::read_up_to(&options.sheet, archive::LARGEST_SHEET).map_err(Failure::one)?;
    let opened = archive::opened(bytes).map_err(|fault| Failure::one(named(&name, fault)))?;
    let inputs = inputs(&opened, options.data.as_deref())?;
    let verified = match load_kept(&inputs).and_then(|loaded| make(&loaded, opened.options())) {
        Ok(made) => {
            let again = Again { record: &made.record, pdf: &made.pdf, version: env!("CARGO_PKG_VERSION") };
            archive::verified(&opened, &inputs, again)
        }
        Err(failure) => not_computed(&opened, failure)?,
    };
    show::text(&verified.text(&name))?;
    Ok(if verified.is_same() { Finished::Fine } else { Finished::Disagrees })
}

/// The files that went in: from the sheet, or from the folder of originals.
fn inputs(opened: &Opened, data: Option<&Path>) -> Result<Vec<Kept>, Failure> {
    let one = |needed| match needed {
        Needed::Here(kept) => Ok(kept),
        Needed::Elsewhere(name) => original(opened, name, data),
    };
    opened.needed().into_iter().map(one).collect::<Result<_, _>>().map_err(Failure::one)
}

/// A name in a record may be anything; only a plain one is looked up in the folder.
fn original(opened: &Opened, name: &str, data: Option<&Path>) -> Result<Kept, Diagnostic> {
    let plain = Path::new(name).file_name().is_some_and(|last| last == name);
    let fault =
        Diagnostic::fault("input-not-kept", format!("the sheet does not hold “{name}”, from which it was computed"));
    match data {
        Some(folder) if plain => opened.original(name, files::read(&folder.join(name))?),
        _ => Err(fault.hint("name the folder in which the original lies: --data DIR")),
    }
}

/// Where an input was changed, that is what differs; else the faults of the inputs are the answer.
fn not_computed(opened: &Opened, failure: Failure) -> Result<Verified, Failure> {
    let differences = archive::verified_inputs(opened);
    if differences.is_empty() {
        return Err(failure);
    }
    show::failure(&failure);
    let remarks = vec!["nothing was computed again: the inputs as they are have faults".to_owned()];
    Ok(Verified { answer: "not the same".to_owned(), differences, remarks })
}

fn named(name: &str, fault: Diagnostic) -> Diagnostic {
    Diagnostic { message: format!("{name}: {}", fault.message), ..fault }
}
