//! Headings and labels, from the part `words.toml`.

use serde::Deserialize;
use serde::Serialize;

use crate::compare::Judgement;
use crate::diagnostic::Diagnostic;
use crate::report::marks::marked;

/// Headings and labels of a sheet.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
#[allow(missing_docs, reason = "each field is the English word that it holds by default")]
pub struct Words {
    pub kind: String,
    pub not_a_certificate: String,
    pub page: String,
    pub of: String,
    pub end_of_sheet: String,
    pub continued: String,
    pub usable: String,
    pub with_care: String,
    pub not_tested: String,
    pub more: String,
    pub drawings: String,
    pub chart: String,
    pub remarks: String,
    pub expected_and_measured: String,
    pub expected_only: String,
    pub table_units: String,
    pub table_units_expected: String,
    pub full_table_units: String,
    pub whole_table: String,
    pub from_first_page: String,
    pub contacts: String,
    pub chart_numbers: String,
    pub mixing_band: String,
    pub instruments: String,
    pub device_value: String,
    pub shown: String,
    pub quadrature: String,
    pub strip_scale: [String; 3],
    pub toward: String,
    pub away: String,
    pub reading: String,
    pub alone_why: String,
    pub alone_why_key: String,
    pub closed_form: String,
    pub exact: String,
    pub expected: String,
    pub measured: String,
    pub in_u: String,
    pub in_1e6: String,
    pub judgement_head: String,
    pub agrees: String,
    pub wide: String,
    pub disagrees: String,
    pub no_uncertainty: String,
    pub no_expectation: String,
    pub no_path: String,
    pub floating: String,
    pub field: String,
    pub rules: String,
    pub limits: String,
    pub notices: String,
    pub no_notices: String,
    pub cautions: String,
    pub caution_source: String,
    pub provenance: String,
    pub inputs: String,
    pub bytes: String,
    pub sha256: String,
    pub constants: String,
    pub options: String,
    pub points: String,
    pub sign_off: String,
    pub sign_off_lines: Vec<String>,
}

impl Words {
    /// The built-in words for channels turned by `driver`: `field`, `magnetisation`. A fault means that the part is no valid TOML or lacks a word.
    pub fn built_in(driver: &str) -> Result<Self, Diagnostic> {
        toml::from_str(&marked(&include_str!("../../templates/words.toml").replace("{driver}", driver)))
            .map_err(|error| Diagnostic::fault("template", format!("the part “words.toml” cannot be read: {error}")))
    }

    /// The word for what follows from a reading.
    pub fn judgement(&self, judgement: Judgement) -> &str {
        match judgement {
            Judgement::Agrees => &self.agrees,
            Judgement::Wide => &self.wide,
            Judgement::Disagrees => &self.disagrees,
            Judgement::NoUncertainty => &self.no_uncertainty,
            Judgement::NoExpectation => &self.no_expectation,
        }
    }
}
