//! Every table and sentence of a sheet, typed and rounded.
//!
//! Owns: [`Report`]; its serde image is the record. Takes finished results as [`Sources`]; gives every string that a
//! sheet prints, numbers beside their unrounded values. Sentences come from the parts in `templates/`. Must never contain
//! the layout of pages.
//!
//! Text may carry marks that a writer turns into type, lowered and raised ([`marked`]); no user can type them.

use serde::Serialize;

mod alone;
mod budgets;
mod build;
mod captions;
mod charted;
mod chip_names;
mod closed;
mod closing;
mod contacts;
mod effects;
mod expect;
mod file_names;
mod identity;
mod instruments;
mod marks;
mod mixed;
mod names;
mod numbers;
mod pictures;
mod printed;
mod rows;
mod small_table;
mod sources;
mod started;
mod stated;
mod table;
mod table_text;
mod texts;
mod understood;
mod verdict;
mod why;
mod words;

pub use alone::AloneReading;
pub use alone::AloneRule;
pub use build::build;
pub use chip_names::chip_names;
pub use expect::ExpectedOutput;
pub use expect::ReadingWhy;
pub use expect::SolvedPoint;
pub use expect::expected_output;
pub use expect::state_words;
pub use file_names::file_stem;
pub use file_names::next_revision;
pub use marks::CLOSED;
pub use marks::LOWERED;
pub use marks::RAISED;
pub use marks::marked;
pub use marks::spelled;
pub use names::driver;
pub use numbers::Numbers;
pub use numbers::numbers;
pub use pictures::PictureOrigin;
pub use pictures::PictureWords;
pub use pictures::pictures;
pub use pictures::why_picture;
pub use printed::Printed;
pub use small_table::SmallCell;
pub use small_table::SmallTable;
pub use sources::Beside;
pub use sources::Input;
pub use sources::IsolatedRegion;
pub use sources::PointSource;
pub use sources::RowSource;
pub use sources::Sources;
pub use sources::preferred;
pub use started::NEVER_REPLACED;
pub use started::started;
pub use table_text::IsolatedPoint;
pub use table_text::expected_table;
pub use table_text::is_region;
pub use table_text::isolated_table;
pub use table_text::region_called;
pub use table_text::unknown_region;
pub use texts::Texts;
pub use understood::Understood;
pub use understood::checked;
pub use understood::understood_alone;
pub use understood::understood_cooldown;
pub use understood::understood_device;
pub use understood::understood_output;
pub use understood::understood_readings;
pub use understood::understood_table;
pub use why::WhySource;
pub use why::names as why_names;
pub use why::needs_no_wires as why_needs_no_wires;
pub use why::sentences as why_sentences;
pub use why::text as why_text;
pub use words::Words;

/// Everything a sheet says.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Report {
    /// Version of this shape.
    pub format: u32,
    /// What the sheet is about.
    pub identity: Identity,
    /// The answer.
    pub verdict: VerdictBox,
    /// Index of the operating point that the answer page shows.
    pub answer_point: usize,
    /// One per operating point, in the order of the device file.
    pub points: Vec<PointReport>,
    /// Which way the field points, in words.
    pub field_words: Vec<String>,
    /// One line per contact of which more is known than the tables say: pad, transmission, note.
    pub contacts: Vec<String>,
    /// Loops of measured voltages, per point that has any.
    pub closure: Vec<SmallTable>,
    /// Lines, source and meters.
    pub instruments: Vec<SmallTable>,
    /// What each part of the circuit does alone, per point.
    pub corrections: Vec<SmallTable>,
    /// Uncertainty budgets of single expected values.
    pub budgets: Vec<SmallTable>,
    /// Rules in use: judging, uncertainty, mixing.
    pub rules: Vec<String>,
    /// Where the model holds.
    pub limits: Vec<String>,
    /// What was noticed in the inputs.
    pub notices: Vec<String>,
    /// Cautions, each with its source.
    pub cautions: Vec<CautionLine>,
    /// Where the numbers come from.
    pub provenance: Provenance,
    /// Headings and labels.
    pub words: Words,
}

/// What the sheet is about.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Identity {
    /// Identity of the device.
    pub device: String,
    /// Title and material in one line; may be empty.
    pub title: String,
    /// Lines at the right of the head: cooldown and revision, date and conditions.
    pub lines: Vec<String>,
    /// Device, cooldown and revision in short, for every foot.
    pub foot: String,
    /// One line per operating point: name, field, fillings.
    pub points: Vec<String>,
    /// What the files state beside: layer, gates, cooling, magnet, notes.
    pub stated: Vec<String>,
}

/// The answer in one sentence, and what follows.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct VerdictBox {
    /// `agrees`, `disagrees` or `not tested`.
    pub result: &'static str,
    /// The sentence in large type.
    pub sentence: String,
    /// Why, and what next.
    pub why: Vec<String>,
    /// What may be used.
    pub usable: Vec<String>,
    /// What needs care.
    pub with_care: Vec<String>,
    /// What was not tested.
    pub not_tested: Vec<String>,
    /// The limit in u beyond which a reading disagrees.
    pub limit: Option<Printed>,
    /// Where the readings that disagree, and the one that is off most, stand in the tables; the worst first.
    pub named: Vec<NamedReading>,
}

/// Where a reading stands.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct NamedReading {
    /// Its name.
    pub name: String,
    /// Index of its operating point.
    pub point: usize,
    /// Index of its row in the point's table.
    pub row: usize,
}

/// One operating point at both polarities.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct PointReport {
    /// Name of the point.
    pub title: String,
    /// Fillings, field, and which region is read alone.
    pub subtitle: String,
    /// Drawings, toward first.
    pub drawings: Vec<DrawingWords>,
    /// What the three pens of the drawings stand for: inlet, in between, outlet.
    pub pens: Vec<String>,
    /// What an area in which channels mix stands for, where one is drawn.
    pub mixing_key: Option<String>,
    /// What else stands under both drawings.
    pub key: Vec<String>,
    /// Which reading shows one region alone: one rule per region but the bulk.
    pub alone: Vec<AloneRule>,
    /// The same, each as one line to copy into a logbook.
    pub alone_lines: Vec<String>,
    /// The same as a table, one line each.
    pub alone_table: SmallTable,
    /// Number of readings that the table holds.
    pub readings: String,
    /// Whether any reading of the table was measured.
    pub measured: bool,
    /// Whether what the meters show stands beside the device's own values.
    pub circuit: bool,
    /// All readings, worst first.
    pub rows: Vec<TableRow>,
    /// Rows that each chart shows: the first, and how many.
    pub charts: Vec<[usize; 2]>,
    /// What the charts leave out.
    pub chart_notes: Vec<String>,
    /// Readings that mixing along the rim changes.
    pub mixing: Option<SmallTable>,
    /// What holds for the whole table.
    pub notes: Vec<String>,
}

/// The words round one drawing.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct DrawingWords {
    /// `+` or `-`.
    pub polarity: &'static str,
    /// `Field toward you`.
    pub heading: String,
    /// Which way the carriers run.
    pub sense: String,
    /// The line to copy into the logbook: leads.
    pub leads: String,
    /// Its number, with unit.
    pub value: String,
    /// The same unrounded, in kΩ; none where no reading is named.
    pub expected: Option<Printed>,
    /// What that reading is.
    pub remark: String,
    /// Shares of the voltage between inlet and outlet at which channels run, highest first.
    pub shares: Vec<String>,
    /// Every text inside the drawing, in the order in which it was drawn.
    pub drawn: Vec<String>,
}

/// One reading at both polarities.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct TableRow {
    /// Place in the table, from 1.
    pub place: usize,
    /// `R_{14,25}` or `R(S–D, T1–B2)`.
    pub name: String,
    /// The name that the device file gives it, and the meters, where stated.
    pub label: Option<String>,
    /// Closed form, both polarities where they differ.
    pub formula: Option<String>,
    /// Field toward.
    pub toward: Cell,
    /// Field away.
    pub away: Cell,
}

/// One reading at one polarity.
#[derive(Clone, Debug, Default, PartialEq, Serialize)]
pub struct Cell {
    /// Value in h/e², exact where no path length enters.
    pub exact: Option<Printed>,
    /// The device alone, in kΩ.
    pub device: Option<Printed>,
    /// What the meter should show, in kΩ; what was measured is compared with it.
    pub expected: Option<Printed>,
    /// The part of it in quadrature, in kΩ, where a frequency is given and it is not zero.
    pub quadrature: Option<Printed>,
    /// Why there is no number: `no path`, `floating`.
    pub state: Option<String>,
    /// What was measured, in kΩ, with its u in brackets.
    pub measured: Option<Printed>,
    /// Difference in units of u.
    pub in_u: Option<Printed>,
    /// Difference in 10⁻⁶ of the expected value.
    pub in_1e6: Option<Printed>,
    /// What follows, in a word.
    pub judgement: Option<String>,
    /// Whether this cell is printed bold.
    pub odd: bool,
    /// The mark on the strip from −3 u to +3 u.
    pub strip: Option<Strip>,
}

/// The mark on a strip.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Strip {
    /// Place from −1 (at −3 u) to 1 (at +3 u).
    pub at: f64,
    /// The number beside the triangle where the difference lies beyond the strip.
    pub beyond: Option<Printed>,
}

/// A caution with its source.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct CautionLine {
    /// The caution.
    pub text: String,
    /// Where it comes from.
    pub source: String,
}

/// Where the numbers come from.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Provenance {
    /// Inputs: (name, size, SHA-256).
    pub inputs: Vec<Input>,
    /// Program and version.
    pub program: String,
    /// Constants with value and source.
    pub constants: Vec<String>,
    /// Options in use.
    pub options: Vec<String>,
    /// What the same inputs give.
    pub repeat: String,
}
