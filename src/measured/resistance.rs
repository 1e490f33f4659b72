//! Value, unit and uncertainty of one row, in Ω.

use crate::diagnostic::Diagnostic;
use crate::diagnostic::Findings;
use crate::measured::columns::Column;
use crate::measured::number_text;
use crate::measured::number_text::LEAVE_OUT;
use crate::measured::number_text::NumberText;
use crate::measured::number_text::shortened;
use crate::measured::row::Row;
use crate::measured::row::fault_in;
use crate::measured::split::Cell;
use crate::measured::unit::Unit;
use crate::quantity::Uncertain;

/// Instruments write about 9.9e37 for an overload (common practice); no resistance comes near.
const OVERLOAD_OHM: f64 = 1e30;

/// The resistance of a row and the value as it was written; none where a cell is at fault.
pub fn of(row: Row, findings: &mut Findings) -> Option<(Uncertain, String)> {
    let unit_of_column = unit_column(row, findings);
    let u_column = row.cell(Column::Uncertainty).map(|cell| (cell, uncertainty_column(cell, findings)));
    let cell = row.filled(Column::Value, findings)?;
    let value = number(cell, findings)?;
    let unit = unit_of(&value, cell, (row.cell(Column::Unit), unit_of_column?), findings)?;
    let ohm = finite(value.ohm(unit), cell, findings)?;
    let u = uncertainty(&value, unit, (cell, u_column), findings)?;
    let u = u.map(|u_ohm| u_ohm / row.names.coverage_factor);
    Some((Uncertain { value: ohm, u }, written(row, &value, cell)))
}

/// The number in a cell, with an uncertainty of its own only if that is positive.
fn number(cell: &Cell, findings: &mut Findings) -> Option<NumberText> {
    let number = number_text::parse(&cell.text).map_err(|fault| findings.push(fault_in(cell, fault))).ok()?;
    number.bare_u().is_none_or(|u| is_positive(u, cell, findings)).then_some(number)
}

/// The number in column `u`.
fn uncertainty_column(cell: &Cell, findings: &mut Findings) -> Option<NumberText> {
    let number = number(cell, findings)?;
    if number.bare_u().is_some() {
        let message = format!("`{}` is an uncertainty with an uncertainty", shortened(&cell.text));
        let fault = Diagnostic::fault("two-uncertainties", message).hint("write one number");
        findings.push(fault.at(&cell.place));
        return None;
    }
    is_positive(number.bare(), cell, findings).then_some(number)
}

fn is_positive(u: f64, cell: &Cell, findings: &mut Findings) -> bool {
    let quoted = shortened(&cell.text);
    let fault = if u < 0.0 {
        Diagnostic::fault("negative-uncertainty", format!("the uncertainty in `{quoted}` is negative"))
            .hint("write its size, without a sign")
    } else if u == 0.0 {
        Diagnostic::fault("zero-uncertainty", format!("the uncertainty in `{quoted}` is zero")).hint(
            "no measurement has none; where it is not known leave it out, and the reading is shown but not judged",
        )
    } else {
        return true;
    };
    findings.push(fault.at(&cell.place));
    false
}

/// The unit column's unit: none inside where the cell is empty.
fn unit_column(row: Row, findings: &mut Findings) -> Option<Option<Unit>> {
    let Some(cell) = row.cell(Column::Unit) else { return Some(None) };
    let message = || format!("`{}` is no unit of resistance", shortened(&cell.text));
    let unit = Unit::from_text(&cell.text);
    let fault = |hint: String| Diagnostic::fault("unknown-unit", message()).at(&cell.place).hint(hint);
    unit.map(Some).map_err(|hint| findings.push(fault(hint))).ok()
}

fn unit_of(
    value: &NumberText,
    cell: &Cell,
    (unit_cell, column): (Option<&Cell>, Option<Unit>),
    findings: &mut Findings,
) -> Option<Unit> {
    let fault = match (value.unit, column) {
        (Some(own), Some(other)) if own != other => {
            let other = unit_cell.map_or("", |cell| &cell.text);
            let message = format!("`{}` has a unit of its own, and the column says `{other}`", shortened(&cell.text));
            Diagnostic::fault("two-units", message).hint("keep one of them")
        }
        (None, None) => {
            let text = shortened(&cell.text);
            let message = format!("which unit has `{text}`?");
            Diagnostic::fault("missing-unit", message)
                .hint(format!("write it, as in `{text} Ω` or `{text} kΩ`, or add a column `unit`"))
        }
        (own, other) => return own.or(other),
    };
    findings.push(fault.at(&cell.place));
    None
}

fn finite(ohm: f64, cell: &Cell, findings: &mut Findings) -> Option<f64> {
    if ohm.abs() < OVERLOAD_OHM {
        return Some(ohm);
    }
    let message = format!("`{}` is too large for a resistance: an overload?", shortened(&cell.text));
    findings.push(Diagnostic::fault("overload", message).at(&cell.place).hint(LEAVE_OUT));
    None
}

type UncertaintyColumn<'a> = Option<(&'a Cell, Option<NumberText>)>;

/// The written uncertainty in Ω, from the value's own cell or from the column, never from both.
fn uncertainty(
    value: &NumberText,
    unit: Unit,
    (cell, column): (&Cell, UncertaintyColumn),
    findings: &mut Findings,
) -> Option<Option<f64>> {
    let unit = value.unit.unwrap_or(unit);
    match (value.u_ohm(unit), column) {
        (None, None) => Some(None),
        (Some(u_ohm), None) => finite(u_ohm, cell, findings).map(Some),
        (None, Some((u_cell, number))) => finite(number?.ohm(unit), u_cell, findings).map(Some),
        (Some(_), Some((u_cell, _))) => {
            let quoted = shortened(&cell.text);
            let message = format!("`{quoted}` has an uncertainty of its own, and column `u` gives one too");
            findings.push(Diagnostic::fault("two-uncertainties", message).at(&u_cell.place).hint("keep one of them"));
            None
        }
    }
}

fn written(row: Row, value: &NumberText, cell: &Cell) -> String {
    match row.cell(Column::Unit).filter(|_| value.unit.is_none()) {
        Some(unit) => format!("{} {}", cell.text, unit.text),
        None => cell.text.clone(),
    }
}
