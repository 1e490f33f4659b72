//! The parts in `templates/`, filled with typed fields.

use serde::Serialize;
use tera::Context;
use tera::Tera;

use crate::diagnostic::Diagnostic;
use crate::report::marks::marked;

/// The parts of a sheet's text, each replaceable on its own.
pub struct Texts {
    parts: Tera,
    driver: &'static str,
}

/// Every part with its built-in text.
const PARTS: [(&str, &str); 18] = [
    ("verdict.txt", include_str!("../../templates/verdict.txt")),
    ("why.txt", include_str!("../../templates/why.txt")),
    ("reading-why.txt", include_str!("../../templates/reading-why.txt")),
    ("alone-why.txt", include_str!("../../templates/alone-why.txt")),
    ("usable.txt", include_str!("../../templates/usable.txt")),
    ("with-care.txt", include_str!("../../templates/with-care.txt")),
    ("not-tested.txt", include_str!("../../templates/not-tested.txt")),
    ("drawing.txt", include_str!("../../templates/drawing.txt")),
    ("point.txt", include_str!("../../templates/point.txt")),
    ("pens.txt", include_str!("../../templates/pens.txt")),
    ("alone.txt", include_str!("../../templates/alone.txt")),
    ("chart.txt", include_str!("../../templates/chart.txt")),
    ("key.txt", include_str!("../../templates/key.txt")),
    ("field.txt", include_str!("../../templates/field.txt")),
    ("rules.txt", include_str!("../../templates/rules.txt")),
    ("limits.txt", include_str!("../../templates/limits.txt")),
    ("provenance.txt", include_str!("../../templates/provenance.txt")),
    ("table.txt", include_str!("../../templates/table.txt")),
];

impl Texts {
    /// The built-in parts for channels turned by `driver`: `field`, `magnetisation`. A fault means that a part is no valid
    /// template.
    pub fn built_in(driver: &'static str) -> Result<Self, Diagnostic> {
        let mut tera = Tera::default();
        tera.add_raw_templates(PARTS.map(|(name, part)| (name, marked(part))))
            .map_err(|error| fault("templates", &error))?;
        Ok(Self { parts: tera, driver })
    }

    /// The lines of a part, one entry per line that is not blank.
    pub fn lines<T: Serialize>(&self, part: &str, fields: &T) -> Result<Vec<String>, Diagnostic> {
        let mut context = Context::from_serialize(fields).map_err(|error| fault(part, &error))?;
        context.insert("driver", self.driver);
        let text = self.parts.render(part, &context).map_err(|error| fault(part, &error))?;
        let lines = text.lines().map(|line| line.split_ascii_whitespace().collect::<Vec<_>>().join(" "));
        Ok(lines.filter(|line| !line.is_empty()).collect())
    }
}

fn fault(part: &str, error: &tera::Error) -> Diagnostic {
    Diagnostic::fault("template", format!("the part “{part}” cannot be filled: {error}"))
        .hint("compare its fields with the built-in part of the same name")
}
