//! What the terminal shows: answers on standard output, findings on standard error.

use std::io::BufWriter;
use std::io::ErrorKind;
use std::io::Write;
use std::path::PathBuf;
use std::process::ExitCode;

use serde::Serialize;

use crate::cli::Failure;
use crate::cli::Finished;
use crate::diagnostic::Colour;
use crate::diagnostic::Diagnostic;
use crate::diagnostic::Faults;
use crate::diagnostic::show as told;
use crate::files::Refused;
use crate::files::WriteFault;
use crate::files::shown;
use crate::guide::Bold;
use crate::guide::Look;
use crate::report::Report;

/// Columns of a page where the terminal does not say how many it has.
const PAGE: usize = 80;
/// Most columns of a page: longer lines are hard to read.
const WIDEST_PAGE: usize = 100;

/// How the guide is shown: as wide as the terminal, with bold headings there and nowhere else.
pub fn look() -> Look {
    let out = std::io::stdout();
    let width = terminal_size::terminal_size_of(&out).map_or(PAGE, |(width, _)| usize::from(width.0).min(WIDEST_PAGE));
    let bold = match anstream::AutoStream::choice(&out) {
        anstream::ColorChoice::Never => Bold::Nothing,
        _ => Bold::Headings,
    };
    Look { width, bold }
}

/// Answers as text.
pub fn text(text: &str) -> Result<Finished, Failure> {
    let mut out = std::io::stdout().lock();
    ended(out.write_all(text.as_bytes()).and_then(|()| out.flush()))
}

/// Machine output, one JSON value with a line end, written as it is made: it may have hundreds of megabytes.
pub fn json(value: &impl Serialize) -> Result<Finished, Failure> {
    let mut out = BufWriter::new(std::io::stdout().lock());
    let written = serde_json::to_writer_pretty(&mut out, value).map_err(std::io::Error::from);
    ended(written.and_then(|()| out.write_all(b"\n")).and_then(|()| out.flush()))
}

/// A closed pipe is the reader's choice, not a failure; an answer cut short by a full disk is one.
fn ended(written: std::io::Result<()>) -> Result<Finished, Failure> {
    match written {
        Err(error) if error.kind() != ErrorKind::BrokenPipe => {
            let (path, reason) = (PathBuf::from("the answer"), error.kind().to_string());
            let advice = "what it says is not whole: make room where standard output goes, or send it elsewhere";
            Err(Failure::Write(Refused { path, reason, advice }.into(), None))
        }
        _ => Ok(Finished::Fine),
    }
}

/// The verdict and the files written.
pub fn written(report: &Report, paths: &[PathBuf]) -> Result<Finished, Failure> {
    let mut lines = vec![crate::sheet::spoken(&report.verdict.sentence)];
    lines.extend(paths.iter().map(|path| format!("wrote {}", shown(path))));
    text(&(lines.join("\n") + "\n"))
}

/// Files written beside an answer, on standard error: standard output is the answer's.
pub fn drawn(paths: &[PathBuf]) {
    let lines: String = paths.iter().map(|path| format!("wrote {}\n", path.display())).collect();
    let _ = anstream::stderr().lock().write_all(lines.as_bytes());
}

/// Notices, so that nothing a user wrote is passed over in silence.
pub fn notices(notices: &[Diagnostic]) {
    findings(notices);
}

/// Says why a command failed; gives its exit code.
pub fn failure(failure: &Failure) -> ExitCode {
    match failure {
        Failure::Input(Faults(list)) => {
            findings(list);
            ExitCode::from(2)
        }
        Failure::Write(fault, advice) => {
            findings(&[write_fault(fault, advice.as_deref())]);
            ExitCode::from(3)
        }
    }
}

/// Help and version go to standard output, mistakes on the command line to standard error.
pub fn usage(error: &clap::Error) -> ExitCode {
    let printed = error.print();
    if error.use_stderr() {
        return ExitCode::from(2);
    }
    ended(printed).map_or_else(|fault| failure(&fault), |_| ExitCode::SUCCESS)
}

fn write_fault(fault: &WriteFault, advice: Option<&str>) -> Diagnostic {
    let finding = match fault {
        WriteFault::Exists(paths) => {
            let names: Vec<String> = paths.iter().map(|path| shown(path)).collect();
            Diagnostic::fault("file-exists", format!("not replaced: {}", names.join(", ")))
        }
        WriteFault::Refused(Refused { path, reason, advice }) => {
            Diagnostic::fault("cannot-write", format!("cannot write {}: {reason}", shown(path))).hint(*advice)
        }
    };
    match advice {
        Some(advice) => finding.hint(advice),
        None => finding,
    }
}

fn findings(list: &[Diagnostic]) {
    let coloured = anstream::AutoStream::choice(&std::io::stderr()) != anstream::ColorChoice::Never;
    let text = told(list, if coloured { Colour::Coloured } else { Colour::Plain });
    if !list.is_empty() {
        let _ = anstream::stderr().lock().write_all(format!("{text}\n\n").as_bytes());
    }
}
