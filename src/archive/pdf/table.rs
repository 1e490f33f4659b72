//! Where in a file its objects stand (ISO 32000-1, 7.5.4 and 7.5.8).

use std::collections::BTreeMap;
use std::collections::BTreeSet;

use crate::archive::pdf::Read;
use crate::archive::pdf::file::indirect;
use crate::archive::pdf::filter::decoded;
use crate::archive::pdf::lexer::Budget;
use crate::archive::pdf::lexer::Lexer;
use crate::archive::pdf::object::Dict;
use crate::archive::pdf::object::Object;

/// Most objects that a file may have.
const MOST_OBJECTS: usize = 100_000;
/// Most tables that a file may have: one for each time it was added to.
const MOST_TABLES: usize = 64;

/// Where one object stands.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Entry {
    /// Nowhere.
    Free,
    /// At this byte of the file.
    At(usize),
    /// In the stream of this number, at this place.
    In(u32, usize),
}

/// All objects of a file by their number, and what its newest table says of the whole.
#[derive(Debug, Default)]
pub struct Table {
    pub entries: BTreeMap<u32, Entry>,
    pub trailer: Dict,
}

/// Reads all tables, the newest first: what it says of an object counts.
pub fn table(bytes: &[u8], budget: &Budget) -> Read<Table> {
    let mark = b"startxref";
    let at = bytes.windows(mark.len()).rposition(|window| window == mark).ok_or("it has no table of its objects")?;
    let mut table = Table::default();
    let mut seen = BTreeSet::new();
    let mut next = vec![Lexer::new(bytes, at + mark.len(), budget).int()?];
    while let Some(offset) = next.pop() {
        let offset = usize::try_from(offset).ok().filter(|offset| *offset < bytes.len());
        let offset = offset.ok_or("a table of its objects lies outside of it")?;
        if !seen.insert(offset) || seen.len() > MOST_TABLES {
            return Err("the tables of its objects go in a circle".to_owned());
        }
        let trailer = section((bytes, offset), budget, &mut table)?;
        // What a table hides for old readers comes before what it replaces.
        next.extend(["Prev", "XRefStm"].iter().filter_map(|name| trailer.get(name).int()));
        if table.trailer.0.is_empty() {
            table.trailer = trailer;
        }
    }
    Ok(table)
}

fn section((bytes, offset): (&[u8], usize), budget: &Budget, table: &mut Table) -> Read<Dict> {
    let mut lexer = Lexer::new(bytes, offset, budget);
    if lexer.word("xref") { plain(lexer, table) } else { packed((bytes, offset), budget, table) }
}

fn add(table: &mut Table, number: i64, entry: Entry) -> Read<()> {
    let number = u32::try_from(number).map_err(|_| "an object has an impossible number")?;
    table.entries.entry(number).or_insert(entry);
    if table.entries.len() > MOST_OBJECTS {
        return Err("it holds more objects than any sheet".to_owned());
    }
    Ok(())
}

fn plain(mut lexer: Lexer, table: &mut Table) -> Read<Dict> {
    while !lexer.word("trailer") {
        let (first, count) = (lexer.int()?, lexer.int()?);
        for at in 0..count {
            let (offset, _) = (lexer.int()?, lexer.int()?);
            let used = lexer.word("n");
            if !used && !lexer.word("f") {
                return Err("the table of its objects cannot be read".to_owned());
            }
            let place = usize::try_from(offset).map_err(|_| "an object lies outside of it")?;
            add(table, first.saturating_add(at), if used { Entry::At(place) } else { Entry::Free })?;
        }
    }
    let trailer = lexer.object()?;
    trailer.dict().cloned().ok_or_else(|| "the table of its objects has no end".to_owned())
}

/// A table in a stream: rows of three numbers with as many bytes as `W` says.
fn packed((bytes, offset): (&[u8], usize), budget: &Budget, table: &mut Table) -> Read<Dict> {
    let fault = || "the table of its objects cannot be read".to_owned();
    let Object::Stream(dict, range) = indirect((bytes, offset), budget, None)?.1 else { return Err(fault()) };
    let widths: Vec<usize> = whole(dict.get("W")).into_iter().map(|width| width as usize).collect();
    let [kind_width, first_width, second_width] = widths[..] else { return Err(fault()) };
    let row = kind_width + first_width + second_width;
    if row == 0 || widths.iter().any(|width| *width > 8) {
        return Err(fault());
    }
    let data = decoded(&dict, &bytes[range], budget)?;
    let mut rows = data.chunks_exact(row);
    let size = dict.get("Size").int().unwrap_or(0);
    let index = whole(dict.get("Index"));
    let ranges = if index.is_empty() { vec![0, size] } else { index };
    for range in ranges.chunks_exact(2) {
        for number in range[0]..range[0].saturating_add(range[1]) {
            let Some(row) = rows.next() else { return Ok(dict) };
            let (kind, rest) = row.split_at(kind_width);
            let (first, second) = rest.split_at(first_width);
            let entry = match if kind.is_empty() { 1 } else { big_endian(kind) } {
                1 => Entry::At(big_endian(first) as usize),
                2 => Entry::In(big_endian(first) as u32, big_endian(second) as usize),
                _ => Entry::Free,
            };
            add(table, number, entry)?;
        }
    }
    Ok(dict)
}

fn whole(object: &Object) -> Vec<i64> {
    object.array().unwrap_or_default().iter().filter_map(Object::int).filter(|value| *value >= 0).collect()
}

fn big_endian(bytes: &[u8]) -> u64 {
    bytes.iter().fold(0, |value, byte| value << 8 | u64::from(*byte))
}
