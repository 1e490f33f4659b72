//! The `edgesheet` program: arguments in, diagnostics out, exit code.

use std::process::ExitCode;

fn main() -> ExitCode {
    edgesheet::cli::run(std::env::args_os())
}
