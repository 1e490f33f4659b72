//! One row of a table into one reading.

use crate::cooldown::ContactIdx;
use crate::cooldown::MagnetSense;
use crate::cooldown::Names;
use crate::diagnostic::Diagnostic;
use crate::diagnostic::Findings;
use crate::diagnostic::Place;
use crate::measured::MeasuredReading;
use crate::measured::columns::Column;
use crate::measured::columns::Header;
use crate::measured::number_text;
use crate::measured::number_text::NumberFault;
use crate::measured::number_text::shortened;
use crate::measured::resistance;
use crate::measured::split::Cell;
use crate::measured::split::Line;
use crate::quantity::Polarity;

/// What a row is read with.
#[derive(Clone, Copy)]
pub struct Row<'a> {
    /// Where the columns stand.
    pub header: &'a Header,
    /// What words mean.
    pub names: &'a Names,
    /// The row.
    pub line: &'a Line,
}

impl Row<'_> {
    /// The reading; none where any cell is at fault. Every cell is read, so that all faults are said at once.
    pub fn reading(self, findings: &mut Findings) -> Option<MeasuredReading> {
        let point = self.point(findings);
        let polarity = self.polarity(findings);
        let current = self.pair(Column::CurrentIn, Column::CurrentOut, findings);
        let voltage = self.pair(Column::VoltagePlus, Column::VoltageMinus, findings);
        let resistance = resistance::of(self, findings);
        let meter = self.meter(findings);
        let (value_ohm, written) = resistance?;
        Some(MeasuredReading {
            point: point?,
            polarity: polarity?,
            current: current?,
            voltage: voltage?,
            value_ohm,
            written,
            meter: meter?,
            set: self.text(Column::Set),
            note: self.text(Column::Note),
            place: self.line.place.clone(),
        })
    }

    /// The cell in this column, unless it is empty.
    pub fn cell(&self, column: Column) -> Option<&Cell> {
        self.header.cell(self.line, column)
    }

    /// The cell in this column; an empty one is a fault.
    pub fn filled(&self, column: Column, findings: &mut Findings) -> Option<&Cell> {
        let cell = self.cell(column);
        // A column that the table lacks was said once, at the header.
        if cell.is_none() && self.header.has(column) {
            let fault = Diagnostic::fault("empty-cell", format!("`{}` is empty in this row", column.name()));
            findings.push(fault.at(self.header.place(self.line, column)).hint("fill it, or put # before the row"));
        }
        cell
    }

    fn text(&self, column: Column) -> Option<String> {
        self.cell(column).map(|cell| cell.text.clone())
    }

    fn point(&self, findings: &mut Findings) -> Option<usize> {
        let only_one = self.names.points.len() == 1;
        if only_one && self.cell(Column::Point).is_none() {
            return Some(0);
        }
        let cell = self.filled(Column::Point, findings)?;
        noted(self.names.point(&cell.text), &cell.place, findings)
    }

    fn meter(&self, findings: &mut Findings) -> Option<Option<String>> {
        match self.cell(Column::Meter) {
            None => Some(None),
            Some(cell) => noted(self.names.meter(&cell.text), &cell.place, findings).map(Some),
        }
    }

    fn pair(&self, first: Column, second: Column, findings: &mut Findings) -> Option<[ContactIdx; 2]> {
        let (a, b) = (self.contact(first, findings), self.contact(second, findings));
        let pair = [a?, b?];
        if pair[0] != pair[1] {
            return Some(pair);
        }
        let name = &self.names.contacts.get(pair[0].0)?.name;
        let message = format!("`{}` and `{}` are the same contact, `{name}`", first.name(), second.name());
        let fault = Diagnostic::fault("same-contact", message).hint("a reading needs two contacts here");
        findings.push(fault.at(self.header.place(self.line, second)));
        None
    }

    fn contact(&self, column: Column, findings: &mut Findings) -> Option<ContactIdx> {
        let cell = self.filled(column, findings)?;
        noted(self.names.contact(&cell.text), &cell.place, findings)
    }

    fn polarity(&self, findings: &mut Findings) -> Option<Polarity> {
        if self.header.has(Column::Field) {
            return self.polarity_of_field(findings);
        }
        let cell = self.filled(Column::Polarity, findings)?;
        noted(polarity_word(&cell.text), &cell.place, findings)
    }

    fn polarity_of_field(&self, findings: &mut Findings) -> Option<Polarity> {
        let cell = self.filled(Column::Field, findings)?;
        let field = noted(field_t(&cell.text).map_err(|fault| fault_in(cell, fault)), &cell.place, findings)?;
        if field == 0.0 || !field.is_finite() {
            let fault = Diagnostic::fault("no-polarity", format!("`{}` has no polarity", shortened(&cell.text)));
            findings
                .push(fault.at(&cell.place).hint("write the field of this reading in T, with the sign on the console"));
            return None;
        }
        polarity_of(field, self.names.magnet)
    }
}

/// The polarity of a console field; none where the sense of the magnet is not known (said once, at the header).
fn polarity_of(field_t: f64, positive: MagnetSense) -> Option<Polarity> {
    let at_positive = match positive {
        MagnetSense::Toward => Polarity::Toward,
        MagnetSense::Away => Polarity::Away,
        MagnetSense::Unknown => return None,
    };
    Some(if field_t > 0.0 { at_positive } else { at_positive.reversed() })
}

fn polarity_word(word: &str) -> Result<Polarity, Diagnostic> {
    match word {
        "+" | "toward" => Ok(Polarity::Toward),
        "-" | "−" | "away" => Ok(Polarity::Away),
        _ => Err(Diagnostic::fault("bad-polarity", format!("`{}` is no polarity", shortened(word))).hint(
            "write + or toward (field out of the chip face, toward you), - or away; a field in T goes into `field_T`",
        )),
    }
}

/// A field in T; the unit may stand in the cell.
fn field_t(text: &str) -> Result<f64, NumberFault> {
    let number = text.strip_suffix('T').unwrap_or(text).trim_end();
    match number_text::parse(number) {
        Ok(field) if field.is_bare() => Ok(field.bare()),
        Err(fault) if fault.code == "comma-in-number" => Err(fault),
        _ => Err(NumberFault {
            code: "bad-field",
            message: format!("`{}` is no field in T", shortened(text)),
            hint: "write a number in T with the sign on the console, such as -3.1".to_string(),
            bytes: 0..text.len(),
        }),
    }
}

/// A fault about bytes of a cell, at its place in the text.
pub fn fault_in(cell: &Cell, fault: NumberFault) -> Diagnostic {
    let start = (cell.place.start + fault.bytes.start).min(cell.place.end);
    let end = (cell.place.start + fault.bytes.end).clamp(start, cell.place.end);
    let place = Place { source: cell.place.source.clone(), start, end };
    Diagnostic::fault(fault.code, fault.message).hint(fault.hint).at(&place)
}

/// The value, or its fault noted at `place` unless it has a place already.
fn noted<T>(result: Result<T, Diagnostic>, place: &Place, findings: &mut Findings) -> Option<T> {
    result.map_err(|fault| findings.push(if fault.place.is_some() { fault } else { fault.at(place) })).ok()
}
