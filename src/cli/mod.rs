//! Commands: one file each, about twenty lines that name the rooms in order. The only room that prints.
//!
//! Takes arguments, gives an exit code: 0 done, 1 the data disagree (where the command judges), 2 bad input, 3 could not
//! write. Must never contain formulas, geometry or number formatting.

mod args;
mod beside;
mod check;
mod expect;
mod explained;
mod guide;
mod isolate;
mod judged;
mod load;
mod made;
mod manual;
mod opened;
mod picture;
mod point;
mod published;
mod select;
mod sheet;
mod show;
mod start;
mod verify;

use std::ffi::OsString;
use std::process::ExitCode;

use clap::Parser;

use crate::cli::args::Arguments;
use crate::cli::args::Command;
use crate::diagnostic::Diagnostic;
use crate::diagnostic::Faults;
use crate::files::WriteFault;

/// How a command ends when it cannot do its work.
pub(crate) enum Failure {
    /// Bad input: exit code 2.
    Input(Faults),
    /// Could not write: exit code 3.
    Write(WriteFault, Option<String>),
}

impl Failure {
    /// A single fault.
    fn one(fault: Diagnostic) -> Self {
        Self::Input(Faults(vec![fault]))
    }
}

/// What a finished command means for the exit code.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Finished {
    /// The answer is out: exit code 0.
    Fine,
    /// The data disagree, and the command judges: exit code 1.
    Disagrees,
}

/// Runs the program. The first argument is its own name.
pub fn run(arguments: impl IntoIterator<Item = OsString>) -> ExitCode {
    let arguments = match Arguments::try_parse_from(arguments) {
        Ok(arguments) => arguments,
        Err(error) => return show::usage(&error),
    };
    let outcome = match &arguments.command {
        Command::Sheet(options) => sheet::run(options),
        Command::Expect(options) => expect::run(options),
        Command::Isolate(options) => isolate::run(options),
        Command::Check(options) => check::run(options),
        Command::Start(options) => start::run(options),
        Command::Verify(options) => verify::run(options),
        Command::Guide(options) => guide::run(options),
    };
    match outcome {
        Ok(Finished::Fine) => ExitCode::SUCCESS,
        Ok(Finished::Disagrees) => ExitCode::from(1),
        Err(failure) => show::failure(&failure),
    }
}
