//! `edgesheet guide`: the user's guide, and what editors, shells and man read.

use clap::CommandFactory;

use crate::archive;
use crate::cli::Failure;
use crate::cli::Finished;
use crate::cli::args::Arguments;
use crate::cli::args::GuideOptions;
use crate::cli::args::SchemaOf;
use crate::cli::manual;
use crate::cli::show;
use crate::guide;
use crate::syntax::keys::COOLDOWN_FILE;
use crate::syntax::keys::DEVICE_FILE;

pub fn run(options: &GuideOptions) -> Result<Finished, Failure> {
    if let Some(file) = options.schema {
        return match file {
            SchemaOf::Device => show::text(&guide::schema(&DEVICE_FILE)),
            SchemaOf::Cooldown => show::text(&guide::schema(&COOLDOWN_FILE)),
            SchemaOf::Record => show::json(&archive::schema()),
        };
    }
    if let Some(shell) = options.completions {
        return show::text(&manual::completions(shell, Arguments::command()));
    }
    if options.man {
        return show::text(&manual::page(Arguments::command()));
    }
    match &options.topic {
        Some(word) => show::text(&guide::topic(word, show::look()).map_err(Failure::Input)?),
        None => show::text(&guide::topics(show::look())),
    }
}
