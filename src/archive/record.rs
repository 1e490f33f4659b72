//! Writing a record.

use schemars::JsonSchema;
use serde::Deserialize;
use serde::Serialize;
use serde_json::Value;

use crate::archive::input::Kept;
use crate::archive::input::KeptText;
use crate::archive::text;
use crate::diagnostic::Diagnostic;
use crate::quantity::Constant;
use crate::quantity::ELEMENTARY_CHARGE;
use crate::quantity::KLITZING;
use crate::report::Numbers;
use crate::report::Report;
use crate::report::spelled;

/// The number of the record's format. Another number is another format.
pub const FORMAT: u32 = 1;

/// What a stranger reads first.
const ABOUT: &str = "Everything that a characterisation sheet of a quantum Hall device states. `inputs` holds the files from \
    which it was computed, `points` the numbers: fractions of h/e² as texts, resistances in Ω, the unit in the name of each \
    key. R_ij,kl = (V_k − V_l)/I with the current in at i and out at j; polarity + is the field, or a magnetisation that \
    stands in its place, toward the reader of the drawing. `printed` holds the sentences and tables as they stand on the pages. Computing again from `inputs` with \
    `options` gives the same numbers.";

/// What the reading half of the pages needs and a reader of the record does not: headings, and measures of drawings.
const LAYOUT_ONLY: &[&str] =
    &["words", "charts", "strip", "drawn", "odd", "circuit", "answer_point", "format", "named"];

/// The record of a sheet, format 1. Keys may be added; none is taken away or changes its meaning, its unit or its kind.
#[derive(Debug, Serialize, JsonSchema)]
#[schemars(rename = "Record of a characterisation sheet")]
pub(super) struct Record<'a> {
    /// Number of this format: 1.
    format: u32,
    /// What this is, for a person.
    about: &'static str,
    /// The program that computed it.
    program: Program<'a>,
    /// The options in use. Computing again needs them.
    options: &'a Options,
    /// The files from which the sheet was computed, in the order in which they were read.
    inputs: Vec<KeptText<'a>>,
    /// Constants in use.
    constants: Vec<Constant>,
    #[serde(flatten)]
    numbers: &'a Numbers,
    /// The sentences and tables of the pages, as printed, for people. What is in here may change with every version of the
    /// program, and no number stands here alone.
    printed: Value,
}

#[derive(Debug, Serialize, JsonSchema)]
struct Program<'a> {
    /// Name of the program.
    name: &'static str,
    /// Version of the program.
    version: &'a str,
}

/// Options of a sheet, typed so that they can be applied again.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct Options {
    /// Paper of the PDF: `a4` or `letter`.
    pub paper: String,
    /// Fixed limit in u beyond which a reading disagrees; null for the one that fits the number of readings.
    #[serde(default)]
    pub limit_in_u: Option<f64>,
}

/// What a record is made from.
#[derive(Clone, Copy, Debug)]
pub struct Parts<'a> {
    /// What the pages say.
    pub report: &'a Report,
    /// The unrounded numbers.
    pub numbers: &'a Numbers,
    /// The files that went in.
    pub inputs: &'a [Kept],
    /// The options in use.
    pub options: &'a Options,
    /// Version of the program.
    pub version: &'a str,
}

/// The record as JSON text in UTF-8: keys in a fixed order, short lists on one line, one line end at the end.
pub fn record(parts: Parts) -> Result<Vec<u8>, Diagnostic> {
    let fault =
        |error: serde_json::Error| Diagnostic::fault("record", format!("the record cannot be written: {error}"));
    let mut printed = serde_json::to_value(parts.report).map_err(fault)?;
    for_people(&mut printed);
    let record = Record {
        format: FORMAT,
        about: ABOUT,
        program: Program { name: env!("CARGO_PKG_NAME"), version: parts.version },
        options: parts.options,
        inputs: parts.inputs.iter().map(Kept::text).collect(),
        constants: vec![KLITZING, ELEMENTARY_CHARGE],
        numbers: parts.numbers,
        printed,
    };
    Ok(text::laid_out(&serde_json::to_value(&record).map_err(fault)?).into_bytes())
}

/// Without what is layout alone, and with marks spelled.
fn for_people(value: &mut Value) {
    match value {
        Value::Object(fields) => {
            fields.retain(|key, _| !LAYOUT_ONLY.contains(&key.as_str()));
            fields.values_mut().for_each(for_people);
        }
        Value::Array(list) => list.iter_mut().for_each(for_people),
        Value::String(text) => *text = spelled(text),
        _ => {}
    }
}
