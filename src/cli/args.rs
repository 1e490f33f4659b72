//! The command line.

use std::path::PathBuf;

use clap::Args;
use clap::Parser;
use clap::Subcommand;
use clap::ValueEnum;

/// Expected and measured resistances of gated quantum Hall devices, on one sheet.
#[derive(Debug, Parser)]
#[command(version, about, disable_help_subcommand = true, max_term_width = 100)]
pub struct Arguments {
    /// What to do.
    #[command(subcommand)]
    pub command: Command,
}

/// The commands.
#[derive(Debug, Subcommand)]
pub enum Command {
    /// Solve, compare, draw and write the characterisation sheet (PDF, HTML) with its record (JSON)
    Sheet(SheetOptions),
    /// Print what every reading should be, at both polarities
    Expect(ExpectOptions),
    /// Print which readings show one region alone, at each polarity
    Isolate(IsolateOptions),
    /// Say what is understood of device files, cooldown files, readings, records and sheets; all faults at once
    Check(CheckOptions),
    /// Write a commented device file, cooldown file and readings to begin with
    Start(StartOptions),
    /// Check that the inputs kept in a sheet still give its numbers, words and pages
    Verify(VerifyOptions),
    /// Show the user's guide; print schemas, completions or the manual page
    Guide(GuideOptions),
}

/// Options of `sheet`.
#[derive(Debug, Args)]
#[command(after_help = "Example:\n  edgesheet sheet demo-devices/top-gated-bar/device.toml \
                        demo-devices/top-gated-bar/cooldown.toml -o target/sheets --replace")]
pub struct SheetOptions {
    /// Device file
    pub device: PathBuf,
    /// Cooldown file
    pub cooldown: Option<PathBuf>,
    /// Folder to write into; made if it is missing
    #[arg(short, long, value_name = "DIR")]
    pub output: PathBuf,
    /// Replace a sheet of the same name
    #[arg(long)]
    pub replace: bool,
    /// Write every drawing and chart also as SVG and PNG, beside the sheet
    #[arg(long)]
    pub figures: bool,
    /// Paper of the PDF
    #[arg(long, value_enum, default_value_t = PaperSize::A4)]
    pub paper: PaperSize,
    /// Fixed limit in u beyond which a reading disagrees, in place of the one that fits the number of readings
    #[arg(long, value_name = "U")]
    pub limit: Option<f64>,
    /// Exit with code 1 when the data disagree
    #[arg(long)]
    pub judge: bool,
}

/// Options of `expect`.
#[derive(Debug, Args)]
#[command(after_help = "Example:\n  edgesheet expect demo-devices/top-gated-bar/device.toml --reading 1-4,2-5 --why")]
pub struct ExpectOptions {
    /// Device file
    pub device: PathBuf,
    /// Cooldown file: adds what its meters will show
    pub cooldown: Option<PathBuf>,
    /// Every unordered current pair with every unordered voltage pair
    #[arg(long)]
    pub all: bool,
    /// Only this reading: current pair, voltage pair, such as 1-4,2-5; may be given again
    #[arg(long, value_name = "I-J,K-L", conflicts_with = "all")]
    pub reading: Vec<String>,
    /// Say step by step why each reading is what it is
    #[arg(long, conflicts_with = "all")]
    pub why: bool,
    /// With --why: folder into which to draw, as SVG and PNG, the channels that make each number
    #[arg(short, long, value_name = "DIR", requires = "why")]
    pub output: Option<PathBuf>,
    /// Replace drawings of the same names
    #[arg(long, requires = "output")]
    pub replace: bool,
    /// Machine output
    #[arg(long)]
    pub json: bool,
}

/// Options of `isolate`.
#[derive(Debug, Args)]
#[command(after_help = "Example:\n  edgesheet isolate demo-devices/top-gated-bar/device.toml TG")]
pub struct IsolateOptions {
    /// Device file
    pub device: PathBuf,
    /// Gate, step, overlap such as TG+BG, or bulk
    pub region: String,
    /// All readings that show it alone, not only the best
    #[arg(long)]
    pub all: bool,
}

/// Options of `check`.
#[derive(Debug, Args)]
#[command(after_help = "Example:\n  edgesheet check demo-devices/top-gated-bar/device.toml \
                        demo-devices/top-gated-bar/cooldown.toml")]
pub struct CheckOptions {
    /// Files to check: device, cooldown, readings, record or sheet
    #[arg(required = true, value_name = "FILE")]
    pub files: Vec<PathBuf>,
}

/// Options of `start`.
#[derive(Debug, Args)]
#[command(after_help = "Example:\n  edgesheet start my-device")]
pub struct StartOptions {
    /// Folder to write into; made if it is missing. Files that exist are never replaced
    #[arg(value_name = "DIR")]
    pub folder: PathBuf,
}

/// Options of `verify`.
#[derive(Debug, Args)]
#[command(
    after_help = "Ends with 0 when everything is the same, with 1 when a number, a word or a byte differs, with 2 when \
                        this is no sheet or a damaged one.\n\n\
                        Example:\n  edgesheet verify tests/kept/0.2.0-dev/KR-0417_KR-0417-c3_r1.pdf"
)]
pub struct VerifyOptions {
    /// The PDF or the JSON file of a sheet
    pub sheet: PathBuf,
    /// Folder of original inputs, for those that the sheet does not hold
    #[arg(long, value_name = "DIR")]
    pub data: Option<PathBuf>,
}

/// Options of `guide`.
#[derive(Debug, Args)]
#[command(after_help = "Example:\n  edgesheet guide polarity")]
#[group(multiple = false)]
pub struct GuideOptions {
    /// Topic; without one the list of topics
    pub topic: Option<String>,
    /// JSON Schema of a file, for editors and programs
    #[arg(long, value_enum, value_name = "FILE")]
    pub schema: Option<SchemaOf>,
    /// Completions for a shell
    #[arg(long, value_enum, value_name = "SHELL")]
    pub completions: Option<clap_complete::Shell>,
    /// Manual page, for man
    #[arg(long)]
    pub man: bool,
}

/// Files with a schema.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub enum SchemaOf {
    /// Device file
    Device,
    /// Cooldown file
    Cooldown,
    /// Record of a sheet
    Record,
}

/// Paper sizes.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub enum PaperSize {
    /// 210 × 297 mm
    A4,
    /// 8.5 × 11 inches
    Letter,
}
