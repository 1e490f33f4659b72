//! What can be said of a readings table before its words mean anything: columns, separator, rows, units.

use std::collections::BTreeMap;
use std::sync::Arc;

use crate::diagnostic::Findings;
use crate::diagnostic::Source;
use crate::measured::columns::COLUMNS;
use crate::measured::columns::Column;
use crate::measured::split::Line;
use crate::measured::split::lines;

/// A header with fewer columns of ours is that of another table.
const FEWEST_COLUMNS: usize = 3;

/// The outside of a readings table.
#[derive(Clone, Debug, PartialEq)]
pub struct Overview {
    /// The columns found, in their order in the file.
    pub columns: Vec<Column>,
    /// What stands between columns: `comma`, `semicolon` or `tab`.
    pub separator: &'static str,
    /// Rows below the header.
    pub rows: usize,
    /// Lines of the file, counted from 1, that begin with `#`.
    pub comments: Vec<usize>,
    /// How many lines are empty.
    pub empty: usize,
    /// Every unit written in a cell of its own, or `in the value`, with the number of its rows.
    pub units: BTreeMap<String, usize>,
}

/// Whether a text begins like a readings table.
pub fn is_table(source: &Arc<Source>) -> bool {
    let all = lines(source, &mut Findings::default());
    all.first().is_some_and(|header| columns(header).flatten().count() >= FEWEST_COLUMNS)
}

/// The overview of a table; faults in it are found by [`from_source`](crate::measured::from_source).
pub fn overview(source: &Arc<Source>) -> Overview {
    let all = lines(source, &mut Findings::default());
    let (header, rows) = match all.split_first() {
        Some((header, rows)) => (Some(header), rows),
        None => (None, &[][..]),
    };
    let numbered = || source.text.lines().map(str::trim).enumerate();
    Overview {
        columns: header.into_iter().flat_map(columns).flatten().collect(),
        separator: header.map_or("comma", separator),
        rows: rows.len(),
        comments: numbered().filter(|(_, line)| line.starts_with('#')).map(|(at, _)| at + 1).collect(),
        empty: numbered().filter(|(_, line)| line.is_empty()).count(),
        units: header.map(|header| units(header, rows)).unwrap_or_default(),
    }
}

fn columns(header: &Line) -> impl Iterator<Item = Option<Column>> {
    header.cells.iter().map(|cell| COLUMNS.iter().find(|(_, name)| *name == cell.text).map(|(column, _)| *column))
}

fn separator(header: &Line) -> &'static str {
    let text = &header.place.source.text[header.place.start..header.place.end];
    match text {
        _ if text.contains(',') => "comma",
        _ if text.contains(';') => "semicolon",
        _ => "tab",
    }
}

fn units(header: &Line, rows: &[Line]) -> BTreeMap<String, usize> {
    let at = columns(header).position(|column| column == Some(Column::Unit));
    let mut counted = BTreeMap::new();
    for row in rows {
        let cell = at.and_then(|at| row.cells.get(at)).filter(|cell| !cell.text.is_empty());
        let unit = cell.map_or_else(|| "in the value".to_owned(), |cell| cell.text.clone());
        *counted.entry(unit).or_default() += 1;
    }
    counted
}

#[cfg(test)]
mod tests {
    use super::*;

    const HEADER: &str = "polarity;i_in;i_out;v_plus;v_minus;value;unit";

    #[test]
    fn rows_comments_and_units_are_counted() {
        let text = format!("# taken at night\n{HEADER}\n+;1;4;2;6;8.6;kΩ\n\n# no good\n-;1;4;2;6;8600 Ω;\n");
        let found = overview(&Source::new("a.csv", text));
        assert_eq!((found.separator, found.rows, found.empty), ("semicolon", 2, 1));
        assert_eq!(found.comments, [1, 5]);
        assert_eq!(found.units, [("in the value".to_owned(), 1), ("kΩ".to_owned(), 1)].into());
        assert_eq!(found.columns.len(), 7);
    }

    #[test]
    fn other_tables_and_files_are_no_readings() {
        for (text, readings) in [
            (HEADER, true),
            ("value,unit,u\n", true),
            ("B,Vxx,Vxy\n1,2,3\n", false),
            ("value,time\n", false),
            ("format = 1\n", false),
            ("", false),
        ] {
            assert_eq!(is_table(&Source::new("a", text)), readings, "{text}");
        }
    }
}
