//! The HTML twin: the same report in one file that needs nothing else, for screens and phones.

use serde::Serialize;
use tera::Context;
use tera::Kwargs;
use tera::State;
use tera::Tera;

use crate::diagnostic::Diagnostic;
use crate::figure::scene::Level;
use crate::figure::scene::Run;
use crate::report::Report;
use crate::sheet::charts;
use crate::sheet::columns;
use crate::sheet::drawings as drawings_of;
use crate::sheet::typeset;

const PAGE: &str = include_str!("../../templates/sheet.html");
const SMALL_TABLE: &str = include_str!("../../templates/small-table.html");
const STYLE: &str = include_str!("../../templates/sheet.css");

/// The page. `drawings` holds one pair of SVG texts per operating point, field toward first; a point without a pair
/// goes without. A fault means that the template cannot be filled.
pub fn html(report: &Report, drawings: &[[String; 2]]) -> Result<String, Diagnostic> {
    let fault = |error: tera::Error| {
        Diagnostic::fault("template", format!("the part “sheet.html” cannot be filled: {error}"))
            .hint("compare its fields with the built-in part of the same name")
    };
    let mut tera = Tera::default();
    tera.register_filter("marked", Marked);
    tera.add_raw_templates([("small-table.html", SMALL_TABLE), ("sheet.html", PAGE)]).map_err(fault)?;
    let svg = |point| charts::scenes(point).iter().map(crate::figure::to_svg).collect();
    let charts: Vec<Vec<String>> = report.points.iter().map(svg).collect();
    let numbered: Vec<bool> = report.points.iter().map(charts::is_numbered).collect();
    let spans: Vec<usize> = report.points.iter().map(columns::twin_columns).collect();
    let told = |(at, point)| at < drawings.len() && drawings_of::tell_rule(point);
    let told: Vec<bool> = report.points.iter().enumerate().map(told).collect();
    let fields =
        Fields { report, drawings, charts: &charts, numbered: &numbered, told: &told, spans: &spans, style: STYLE };
    let context = Context::from_serialize(&fields).map_err(fault)?;
    tera.render("sheet.html", &context).map_err(fault)
}

#[derive(Serialize)]
struct Fields<'a> {
    report: &'a Report,
    drawings: &'a [[String; 2]],
    charts: &'a [Vec<String>],
    /// Whether each point's charts number their readings.
    numbered: &'a [bool],
    /// Whether the words below each point's drawings say which reading shows its only region alone.
    told: &'a [bool],
    /// Columns of either half of each point's table.
    spans: &'a [usize],
    style: &'static str,
}

/// Marked text as HTML: lowered and raised become `<sub>` and `<sup>`, everything else is escaped.
struct Marked;

impl tera::Filter<String, String> for Marked {
    fn call(&self, marked: String, _: Kwargs, _: &State) -> String {
        marked_html(&marked)
    }

    fn is_safe(&self) -> bool {
        true
    }
}

fn marked_html(marked: &str) -> String {
    let run = |run: Run| {
        let text = escaped(&run.text);
        match run.level {
            Level::Normal => text,
            Level::Sub => format!("<sub>{text}</sub>"),
            Level::Super => format!("<sup>{text}</sup>"),
        }
    };
    typeset::runs(marked).into_iter().map(run).collect()
}

fn escaped(text: &str) -> String {
    text.replace('&', "&amp;").replace('<', "&lt;").replace('>', "&gt;").replace('"', "&quot;").replace('\'', "&#39;")
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::report::marked;

    #[test]
    fn marks_become_elements_and_the_rest_is_escaped() {
        assert_eq!(
            marked_html(&(marked("R_{14,25} < h/e^{2}") + " & \"x_{y}\"")),
            "R<sub>14,25</sub> &lt; h/e<sup>2</sup> &amp; &quot;x_{y}&quot;"
        );
        assert_eq!(marked_html(&marked("_{<b>}")), "<sub>&lt;b&gt;</sub>");
    }
}
