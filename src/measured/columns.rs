//! The columns of a readings table and its header line.

use std::collections::BTreeMap;

use crate::cooldown::Names;
use crate::diagnostic::Diagnostic;
use crate::diagnostic::Findings;
use crate::diagnostic::Place;

use crate::measured::split::Cell;
use crate::measured::split::Line;
use crate::syntax::did_you_mean;
use crate::syntax::quoted;

/// A column.
#[allow(missing_docs, reason = "each is explained by its meaning")]
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Column {
    Point,
    Polarity,
    Field,
    CurrentIn,
    CurrentOut,
    VoltagePlus,
    VoltageMinus,
    Value,
    Unit,
    Uncertainty,
    Meter,
    Set,
    Note,
}

/// Every column with its name in the header. They may stand in any order.
pub const COLUMNS: [(Column, &str); 13] = [
    (Column::Point, "point"),
    (Column::Polarity, "polarity"),
    (Column::Field, "field_T"),
    (Column::CurrentIn, "i_in"),
    (Column::CurrentOut, "i_out"),
    (Column::VoltagePlus, "v_plus"),
    (Column::VoltageMinus, "v_minus"),
    (Column::Value, "value"),
    (Column::Unit, "unit"),
    (Column::Uncertainty, "u"),
    (Column::Meter, "meter"),
    (Column::Set, "set"),
    (Column::Note, "note"),
];

/// Columns that every table has; with them one of `polarity` and `field_T`, and `point` where there are several.
const REQUIRED: [Column; 5] =
    [Column::CurrentIn, Column::CurrentOut, Column::VoltagePlus, Column::VoltageMinus, Column::Value];

impl Column {
    /// What stands in it, in one line.
    pub fn meaning(self) -> &'static str {
        match self {
            Self::Point => "operating point of the device file; may be left out where there is one",
            Self::Polarity => "+ or toward: field toward you; - or away: field away from you",
            Self::Field => "field in T with the sign on the console, in place of polarity",
            Self::CurrentIn => "contact where the current enters: name, pin or plug",
            Self::CurrentOut => "contact where the current leaves",
            Self::VoltagePlus => "contact on the + input of the meter",
            Self::VoltageMinus => "contact on the - input of the meter",
            Self::Value => "resistance; its unit and uncertainty may stand with it: 12.906(3) kΩ",
            Self::Unit => "unit of value and u, such as Ω, kΩ, MΩ, ohm, kohm, h/e2",
            Self::Uncertainty => "uncertainty of the value; a reading without one is shown, not judged",
            Self::Meter => "meter, as the cooldown file names it; the first where the cell is empty",
            Self::Set => "readings of one set were taken with all its meters connected at once",
            Self::Note => "free text, printed on the sheet",
        }
    }

    /// Its name in the header.
    pub fn name(self) -> &'static str {
        COLUMNS.iter().find(|(column, _)| *column == self).map_or("", |(_, name)| name)
    }
}

/// Where each column stands.
#[derive(Clone, Debug)]
pub struct Header {
    places: BTreeMap<Column, usize>,
    words: Vec<String>,
}

impl Header {
    /// Reads the header line; faults about it go into `findings`.
    pub fn read(line: &Line, names: &Names, findings: &mut Findings) -> Self {
        let words = line.cells.iter().map(|cell| cell.text.clone()).collect();
        let mut header = Self { places: BTreeMap::new(), words };
        for (at, cell) in line.cells.iter().enumerate() {
            header.note(at, cell, findings);
        }
        findings.extend(header.missing(names).map(|fault| fault.at(&line.place)));
        header
    }

    /// How many columns there are.
    pub fn width(&self) -> usize {
        self.words.len()
    }

    /// Whether `line` is this header once more.
    pub fn is_repeated_by(&self, line: &Line) -> bool {
        line.cells.iter().map(|cell| &cell.text).eq(&self.words)
    }

    /// Whether the table has this column.
    pub fn has(&self, column: Column) -> bool {
        self.places.contains_key(&column)
    }

    /// The cell of `line` in this column; none where the column is absent or the cell empty.
    pub fn cell<'a>(&self, line: &'a Line, column: Column) -> Option<&'a Cell> {
        line.cells.get(*self.places.get(&column)?).filter(|cell| !cell.text.is_empty())
    }

    /// Where the cell of this column stands, or the line where the column is absent.
    pub fn place<'a>(&self, line: &'a Line, column: Column) -> &'a Place {
        let cell = self.places.get(&column).and_then(|at| line.cells.get(*at));
        cell.map_or(&line.place, |cell| &cell.place)
    }

    fn note(&mut self, at: usize, cell: &Cell, findings: &mut Findings) {
        if cell.text.is_empty() {
            let hint = "give it a name, or remove the separator";
            findings.push(Diagnostic::fault("unnamed-column", "a column has no name").at(&cell.place).hint(hint));
            return;
        }
        let Some((column, name)) = COLUMNS.iter().find(|(_, name)| *name == cell.text) else {
            findings.push(unknown(cell));
            return;
        };
        if self.places.insert(*column, at).is_some() {
            let message = format!("column `{name}` stands twice in the header");
            findings.push(Diagnostic::fault("repeated-column", message).at(&cell.place).hint("keep one of them"));
        }
    }

    fn missing<'a>(&'a self, names: &'a Names) -> impl Iterator<Item = Diagnostic> + 'a {
        let required = REQUIRED.into_iter().filter(|column| !self.has(*column)).map(|column| {
            let name = column.name();
            missing(format!("the header has no column `{name}`"), format!("add a column `{name}`"))
        });
        required.chain(self.direction(names)).chain(self.point(names))
    }

    fn direction(&self, names: &Names) -> Option<Diagnostic> {
        match (self.has(Column::Polarity), self.has(Column::Field)) {
            (false, false) => Some(missing(
                "the header has neither `polarity` nor `field_T`".to_string(),
                "add a column `polarity` (+ is a field toward you), or `field_T` with the sign on the console"
                    .to_string(),
            )),
            (true, true) => Some(
                Diagnostic::fault("two-polarities", "the header has both `polarity` and `field_T`")
                    .hint("keep one of them; the field's magnitude belongs to the point"),
            ),
            (false, true) if names.is_magnetised() => Some(
                Diagnostic::fault(
                    "no-polarity",
                    "the sign of `field_T` does not say which way the magnetisation points",
                )
                .hint("write `polarity` in place of `field_T`: + is a magnetisation toward you"),
            ),
            _ => None,
        }
    }

    fn point(&self, names: &Names) -> Option<Diagnostic> {
        if self.has(Column::Point) || names.points.len() == 1 {
            return None;
        }
        let message = format!("the header has no column `point`, and the device has {} points", names.points.len());
        Some(missing(message, "add a column `point`".to_string()))
    }
}

fn missing(message: String, hint: String) -> Diagnostic {
    Diagnostic::fault("missing-column", message).hint(hint)
}

fn unknown(cell: &Cell) -> Diagnostic {
    let known: Vec<&str> = COLUMNS.iter().map(|(_, name)| *name).collect();
    let hint = match did_you_mean(&cell.text, known.iter().copied()) {
        Some(name) => format!("did you mean `{name}`?"),
        None => format!("the columns are {}", known.join(", ")),
    };
    let message = format!("no column is called {}", quoted(&cell.text));
    Diagnostic::fault("unknown-column", message).at(&cell.place).hint(hint)
}
