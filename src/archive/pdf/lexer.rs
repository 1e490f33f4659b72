//! From bytes to objects (ISO 32000-1, 7.2 and 7.3).

use std::cell::Cell;

use crate::archive::pdf::Read;
use crate::archive::pdf::object::Dict;
use crate::archive::pdf::object::Object;

/// Arrays and tables within one another.
const DEEPEST: usize = 40;

/// What may still be read of a file.
#[derive(Debug)]
pub struct Budget {
    objects: Cell<usize>,
    bytes: Cell<usize>,
    steps: Cell<usize>,
}

/// Numbers of tables and stretches of blanks that are passed over.
const MOST_STEPS: usize = 4_000_000;
/// So many bytes of a text, or of blanks, count like one object or one step.
const BYTES_PER_OBJECT: usize = 64;

impl Budget {
    /// For a whole file: so many objects, so many bytes unpacked.
    pub fn new(objects: usize, bytes: usize) -> Self {
        Self { objects: Cell::new(objects), bytes: Cell::new(bytes), steps: Cell::new(MOST_STEPS) }
    }

    fn spend_objects(&self, count: usize) -> Read<()> {
        let left = self.objects.get().checked_sub(count).filter(|_| self.steps.get() > 0);
        self.objects.set(left.ok_or("it holds more objects than any sheet")?);
        Ok(())
    }

    fn step(&self, count: usize) {
        self.steps.set(self.steps.get().saturating_sub(count));
    }

    /// How many more bytes may be unpacked.
    pub fn bytes_left(&self) -> usize {
        self.bytes.get()
    }

    /// Takes note of bytes that were unpacked.
    pub fn spend_bytes(&self, count: usize) -> Read<()> {
        let left = self.bytes.get().checked_sub(count).ok_or("it unpacks to more than any sheet")?;
        self.bytes.set(left);
        Ok(())
    }
}

/// A place in bytes from which objects are read.
#[derive(Clone, Debug)]
pub struct Lexer<'a> {
    bytes: &'a [u8],
    /// The next byte.
    pub at: usize,
    budget: &'a Budget,
}

impl<'a> Lexer<'a> {
    pub fn new(bytes: &'a [u8], at: usize, budget: &'a Budget) -> Self {
        Self { bytes, at: at.min(bytes.len()), budget }
    }

    /// The next object; `n g R` is a reference.
    pub fn object(&mut self) -> Read<Object> {
        self.nested(0)
    }

    /// A whole number that does not end in a reference.
    pub fn int(&mut self) -> Read<i64> {
        self.budget.step(1);
        self.budget.spend_objects(0)?;
        self.space();
        match self.number()? {
            Object::Int(value) => Ok(value),
            _ => Err("a number is not whole".to_owned()),
        }
    }

    /// Whether this word comes next; then it is passed over.
    pub fn word(&mut self, word: &str) -> bool {
        self.space();
        let found = self.rest().starts_with(word.as_bytes());
        if found {
            self.at += word.len();
        }
        found
    }

    /// Passes over the line end behind `stream`.
    pub fn line_end(&mut self) {
        if self.rest().starts_with(b"\r\n") {
            self.at += 2;
        } else if self.rest().starts_with(b"\n") {
            self.at += 1;
        }
    }

    fn nested(&mut self, depth: usize) -> Read<Object> {
        self.budget.spend_objects(1)?;
        if depth > DEEPEST {
            return Err("its objects are nested too deeply".to_owned());
        }
        self.space();
        match self.rest() {
            [b'/', ..] => self.name().map(Object::Name),
            [b'(', ..] => self.literal().map(Object::Text),
            [b'<', b'<', ..] => self.dict(depth).map(Object::Dict),
            [b'<', ..] => self.hexadecimal().map(Object::Text),
            [b'[', ..] => self.array(depth).map(Object::Array),
            [b'0'..=b'9' | b'+' | b'-' | b'.', ..] => self.number_or_reference(),
            _ => self.keyword(),
        }
    }

    fn rest(&self) -> &'a [u8] {
        self.bytes.get(self.at..).unwrap_or_default()
    }

    /// Passes over blanks and remarks.
    fn space(&mut self) {
        let from = self.at;
        loop {
            match self.rest() {
                [byte, ..] if is_space(*byte) => self.at += 1,
                [b'%', ..] => {
                    let line = self.rest().iter().position(|byte| matches!(byte, b'\r' | b'\n'));
                    self.at += line.unwrap_or(self.rest().len());
                }
                _ => break,
            }
        }
        self.budget.step((self.at - from) / BYTES_PER_OBJECT);
    }

    fn keyword(&mut self) -> Read<Object> {
        for (word, object) in [("null", Object::Null), ("true", Object::Bool(true)), ("false", Object::Bool(false))] {
            if self.rest().starts_with(word.as_bytes()) {
                self.at += word.len();
                return Ok(object);
            }
        }
        Err("something stands where an object should".to_owned())
    }

    fn name(&mut self) -> Read<Vec<u8>> {
        self.at += 1;
        let mut name = Vec::new();
        while let [byte, rest @ ..] = self.rest() {
            if is_space(*byte) || is_delimiter(*byte) {
                break;
            }
            let pair = (*byte == b'#')
                .then(|| rest.get(..2))
                .flatten()
                .and_then(|pair| Some((digit(pair[0])?, digit(pair[1])?)));
            name.push(pair.map_or(*byte, |(high, low)| high * 16 + low));
            self.at += if pair.is_some() { 3 } else { 1 };
        }
        self.budget.spend_objects(name.len() / BYTES_PER_OBJECT)?;
        Ok(name)
    }

    fn number(&mut self) -> Read<Object> {
        let part = |byte: &u8| byte.is_ascii_digit() || matches!(byte, b'+' | b'-' | b'.');
        let length = self.rest().iter().take_while(|byte| part(byte)).count();
        let text = &self.rest()[..length];
        self.at += length;
        if text.is_empty() || length > 30 {
            return Err("a number cannot be read".to_owned());
        }
        let whole = std::str::from_utf8(text).ok().and_then(|text| text.parse().ok());
        Ok(whole.map_or_else(|| Object::Real(text.to_vec()), Object::Int))
    }

    fn number_or_reference(&mut self) -> Read<Object> {
        let first = self.number()?;
        let Object::Int(number) = first else { return Ok(first) };
        let mut ahead = self.clone();
        let follows = ahead.int().is_ok() && ahead.word("R");
        match u32::try_from(number) {
            Ok(number) if follows => {
                self.at = ahead.at;
                Ok(Object::Ref(number))
            }
            _ => Ok(first),
        }
    }

    fn array(&mut self, depth: usize) -> Read<Vec<Object>> {
        self.at += 1;
        let mut list = Vec::new();
        while !self.word("]") {
            list.push(self.nested(depth + 1)?);
        }
        Ok(list)
    }

    fn dict(&mut self, depth: usize) -> Read<Dict> {
        // A table costs more memory than its entries.
        self.budget.spend_objects(3)?;
        self.at += 2;
        let mut entries = Vec::new();
        while !self.word(">>") {
            let Some(b'/') = self.rest().first() else { return Err("a table has an entry without a name".to_owned()) };
            let name = self.name()?;
            entries.push((name, self.nested(depth + 1)?));
        }
        Ok(Dict(entries))
    }

    fn hexadecimal(&mut self) -> Read<Vec<u8>> {
        let end = self.rest().iter().position(|byte| *byte == b'>').ok_or("a text has no end")?;
        let mut digits: Vec<u8> = self.rest()[1..end].iter().filter_map(|byte| digit(*byte)).collect();
        if digits.len() % 2 == 1 {
            digits.push(0);
        }
        self.at += end + 1;
        self.budget.spend_objects(end / BYTES_PER_OBJECT)?;
        Ok(digits.chunks_exact(2).map(|pair| pair[0] * 16 + pair[1]).collect())
    }

    fn literal(&mut self) -> Read<Vec<u8>> {
        let (mut text, mut open) = (Vec::new(), 0_usize);
        loop {
            let [byte, rest @ ..] = self.rest() else { return Err("a text has no end".to_owned()) };
            self.at += 1;
            match byte {
                b'(' => {
                    open += 1;
                    if open > 1 {
                        text.push(b'(');
                    }
                }
                b')' => {
                    open -= 1;
                    if open == 0 {
                        self.budget.spend_objects(text.len() / BYTES_PER_OBJECT)?;
                        return Ok(text);
                    }
                    text.push(b')');
                }
                b'\\' => self.escape(rest, &mut text),
                other => text.push(*other),
            }
        }
    }

    /// What stands behind a backslash.
    fn escape(&mut self, rest: &[u8], text: &mut Vec<u8>) {
        let octal = rest.iter().take(3).take_while(|byte| (b'0'..=b'7').contains(byte)).count();
        if octal > 0 {
            let value = rest[..octal].iter().fold(0_u32, |value, byte| value * 8 + u32::from(byte - b'0'));
            text.push((value & 0xFF) as u8);
            self.at += octal;
            return;
        }
        let Some(byte) = rest.first() else { return };
        self.at += 1;
        match byte {
            b'n' => text.push(b'\n'),
            b'r' => text.push(b'\r'),
            b't' => text.push(b'\t'),
            b'b' => text.push(8),
            b'f' => text.push(12),
            b'\r' if rest.get(1) == Some(&b'\n') => self.at += 1,
            b'\r' | b'\n' => {}
            other => text.push(*other),
        }
    }
}

fn is_space(byte: u8) -> bool {
    matches!(byte, 0 | b'\t' | b'\n' | 12 | b'\r' | b' ')
}

fn is_delimiter(byte: u8) -> bool {
    b"()<>[]{}/%".contains(&byte)
}

fn digit(byte: u8) -> Option<u8> {
    char::from(byte).to_digit(16).map(|value| value as u8)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn read(text: &[u8]) -> Read<Object> {
        let budget = Budget::new(1000, 0);
        Lexer::new(text, 0, &budget).object()
    }

    /// Names, texts and numbers from the examples of ISO 32000-1, 7.3.3 to 7.3.5; value from memory.
    #[test]
    fn objects_are_read_as_the_standard_writes_them() {
        assert_eq!(read(b"/Lime#20Green ").unwrap(), Object::Name(b"Lime Green".to_vec()));
        assert_eq!(
            read(b"% a remark\n(a (balanced) \\(text\\)\\053\\\nx)").unwrap(),
            Object::Text(b"a (balanced) (text)+x".to_vec())
        );
        assert_eq!(read(b"<901FA>").unwrap(), Object::Text(vec![0x90, 0x1F, 0xA0]));
        assert_eq!(read(b"-17").unwrap(), Object::Int(-17));
        assert_eq!(read(b"-.002").unwrap(), Object::Real(b"-.002".to_vec()));
        assert_eq!(read(b"[12 0 R 3 0 true]").unwrap().array().unwrap().len(), 4);
        let dict = read(b"<</A/B/C[1 2]/A 3>>").unwrap();
        assert_eq!(dict.dict().unwrap().get("A"), &Object::Int(3));
    }

    #[test]
    fn what_has_no_end_is_refused() {
        for text in
            ["(", "<", "[", "<<", "<</A", "[[[", "", "nul", "/A <<", "<< 1 2 >>", "99999999999999999999999999999999"]
        {
            assert!(read(text.as_bytes()).is_err() || text == "/A <<", "{text}");
        }
        assert!(read("[".repeat(100_000).as_bytes()).is_err());
        assert!(read(format!("[{}]", "1 ".repeat(2000)).as_bytes()).is_err());
    }
}
