//! Objects of a file by their number, read when they are asked for.

use std::collections::BTreeMap;

use crate::archive::pdf::Read;
use crate::archive::pdf::filter;
use crate::archive::pdf::lexer::Budget;
use crate::archive::pdf::lexer::Lexer;
use crate::archive::pdf::object::Dict;
use crate::archive::pdf::object::Object;
use crate::archive::pdf::table::Entry;
use crate::archive::pdf::table::Table;
use crate::archive::pdf::table::table;

/// Most objects that are read of one file; a sheet of many pages has some ten thousand.
const MOST_READ: usize = 300_000;
/// Most bytes that the streams of one file unpack to.
const MOST_BYTES: usize = 24 << 20;
/// References from one object to the next before one that is none.
const LONGEST_CHAIN: usize = 8;

/// A file whose table of objects could be read.
#[derive(Debug)]
pub struct PdfFile<'a> {
    bytes: &'a [u8],
    table: Table,
    budget: Budget,
    /// Streams that hold objects, unpacked, by their number: their entries and bytes.
    packed: BTreeMap<u32, (Dict, Vec<u8>)>,
}

impl<'a> PdfFile<'a> {
    /// Reads where the objects are.
    pub fn of(bytes: &'a [u8]) -> Read<Self> {
        let budget = Budget::new(MOST_READ, MOST_BYTES);
        let table = table(bytes, &budget)?;
        if !table.trailer.get("Encrypt").is_null() {
            return Err("it is locked with a password".to_owned());
        }
        Ok(Self { bytes, table, budget, packed: BTreeMap::new() })
    }

    /// What the newest table says of the whole.
    pub fn trailer(&self) -> &Dict {
        &self.table.trailer
    }

    /// The object behind references; itself where it is none.
    pub fn resolved(&mut self, object: &Object) -> Read<Object> {
        let mut found = object.clone();
        for _ in 0..LONGEST_CHAIN {
            let Object::Ref(number) = found else { return Ok(found) };
            found = self.object(number)?;
        }
        Err("its objects point at one another in a circle".to_owned())
    }

    /// The table that stands behind an entry; an empty one where there is none.
    pub fn dict(&mut self, dict: &Dict, name: &str) -> Read<Dict> {
        let found = self.resolved(dict.get(name))?;
        Ok(found.dict().cloned().unwrap_or_default())
    }

    /// The object of this number; null where there is none.
    pub fn object(&mut self, number: u32) -> Read<Object> {
        match self.table.entries.get(&number) {
            None | Some(Entry::Free) => Ok(Object::Null),
            Some(Entry::At(offset)) => self.at(number, *offset),
            Some(Entry::In(stream, place)) => self.packed(number, *stream, *place),
        }
    }

    /// The bytes of a stream, unpacked.
    pub fn bytes(&mut self, stream: &Object) -> Read<Vec<u8>> {
        let Object::Stream(dict, range) = stream else { return Err("a stream is missing".to_owned()) };
        let mut plain = dict.clone();
        for name in ["Filter", "DecodeParms"] {
            let resolved = self.resolved(dict.get(name))?;
            plain.0.retain(|(key, _)| key != name.as_bytes());
            plain.0.push((name.as_bytes().to_vec(), resolved));
        }
        filter::decoded(&plain, &self.bytes[range.clone()], &self.budget)
    }

    fn at(&mut self, number: u32, offset: usize) -> Read<Object> {
        if offset >= self.bytes.len() {
            return Err(format!("object {number} lies outside of it"));
        }
        let (found, object) = indirect((self.bytes, offset), &self.budget, Some(&self.table))?;
        if found != i64::from(number) { Err(format!("object {number} is not where it should be")) } else { Ok(object) }
    }

    fn packed(&mut self, number: u32, stream: u32, place: usize) -> Read<Object> {
        if !self.packed.contains_key(&stream) {
            // A stream of objects never lies in another one.
            let Some(Entry::At(offset)) = self.table.entries.get(&stream).copied() else {
                return Err(format!("object {number} is not where it should be"));
            };
            let holder = self.at(stream, offset)?;
            let bytes = self.bytes(&holder)?;
            self.packed.insert(stream, (holder.dict().cloned().unwrap_or_default(), bytes));
        }
        let fault = || format!("object {number} is not where it should be");
        let (dict, bytes) = self.packed.get(&stream).ok_or_else(fault)?;
        let first = dict.get("First").int().and_then(|first| usize::try_from(first).ok()).ok_or_else(fault)?;
        let count = dict.get("N").int().and_then(|count| usize::try_from(count).ok()).ok_or_else(fault)?;
        if place >= count {
            return Err(fault());
        }
        let mut head = Lexer::new(bytes, 0, &self.budget);
        for _ in 0..place {
            head.int()?;
            head.int()?;
        }
        let (found, offset) = (head.int()?, usize::try_from(head.int()?).map_err(|_| fault())?);
        if found != i64::from(number) {
            return Err(fault());
        }
        Lexer::new(bytes, first.saturating_add(offset), &self.budget).object()
    }
}

/// `n g obj … endobj` at a place: its number and the object. `table` finds the length of a stream where that is an object
/// of its own; a table of objects is read before there is one.
pub fn indirect((bytes, offset): (&[u8], usize), budget: &Budget, table: Option<&Table>) -> Read<(i64, Object)> {
    let mut lexer = Lexer::new(bytes, offset, budget);
    let (number, _) = (lexer.int()?, lexer.int()?);
    if !lexer.word("obj") {
        return Err("an object is not where it should be".to_owned());
    }
    let object = lexer.object()?;
    let Object::Dict(dict) = object else { return Ok((number, object)) };
    if !lexer.word("stream") {
        return Ok((number, Object::Dict(dict)));
    }
    lexer.line_end();
    let fault = || "a stream has another length than it says".to_owned();
    let length = match dict.get("Length") {
        Object::Int(length) => *length,
        Object::Ref(other) => length_elsewhere((bytes, budget), table, *other).ok_or_else(fault)?,
        _ => return Err(fault()),
    };
    let end = usize::try_from(length).ok().and_then(|length| lexer.at.checked_add(length)).ok_or_else(fault)?;
    if end > bytes.len() || !Lexer::new(bytes, end, budget).word("endstream") {
        return Err(fault());
    }
    Ok((number, Object::Stream(dict, lexer.at..end)))
}

/// A length that is an object of its own: a plain number at a place in the file.
fn length_elsewhere((bytes, budget): (&[u8], &Budget), table: Option<&Table>, number: u32) -> Option<i64> {
    let Some(Entry::At(offset)) = table?.entries.get(&number) else { return None };
    let mut lexer = Lexer::new(bytes, *offset, budget);
    let found = lexer.int().ok()?;
    lexer.int().ok()?;
    (found == i64::from(number) && lexer.word("obj")).then(|| lexer.int().ok()).flatten()
}
