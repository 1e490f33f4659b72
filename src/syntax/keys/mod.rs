//! The tables of keys: what a device file and a cooldown file may say. Parser, did-you-mean, schema and guide come from
//! these tables alone.

mod cooldown;
mod device;
mod unit;

pub use cooldown::COOLDOWN_FILE;
pub use device::DEVICE_FILE;
pub use unit::UNITS;
pub use unit::Unit;
pub use unit::split_unit;

/// A kind of file.
#[derive(Debug)]
pub struct FileSpec {
    /// What to call it: `device file`.
    pub what: &'static str,
    /// The keys and tables at its top level.
    pub root: &'static TableSpec,
}

/// A table and its keys.
#[derive(Debug)]
pub struct TableSpec {
    /// Its name with those of the tables around it, such as `sweep.trace`; empty for the top level.
    pub name: &'static str,
    /// Its keys.
    pub keys: &'static [Key],
}

/// A key of a table.
#[derive(Clone, Copy, Debug)]
pub struct Key {
    /// The key; its last part is the unit where it has one.
    pub name: &'static str,
    /// What its value must be.
    pub kind: Kind,
    /// Whether the table must have it.
    pub required: bool,
    /// Whether it describes one device and so stands in no bench, where it is not required either.
    pub alone: bool,
    /// What holds where it is absent, as a user would write it; empty where nothing is assumed.
    pub default: &'static str,
    /// One line for the guide.
    pub doc: &'static str,
    /// What the program does with it.
    pub status: Status,
}

/// What the program does with a key.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Status {
    /// It enters the results.
    Applied,
    /// It is read and checked but does not enter yet; nothing comes out wrong by that, and a notice says so.
    Stated,
    /// Results would be wrong without it, so it is a fault for now; the text says what is possible.
    NotYet(&'static str),
}

/// What a value must be.
#[derive(Clone, Copy, Debug)]
pub enum Kind {
    /// Any text in quotes.
    Text,
    /// A text that other places refer to: one line, not empty, at most 60 characters.
    Name,
    /// A text on one line, not empty: a file name, the header of a column.
    Line,
    /// A whole number from the given one up to a million.
    Count(i64),
    /// `true` or `false`.
    Boolean,
    /// A date without quotes, `2026-03-14`.
    Date,
    /// One of these words, in quotes.
    Word(&'static [&'static str]),
    /// A number.
    Number(Range),
    /// Two numbers, the lower first.
    Limits,
    /// A length or coordinate in micrometres (or whole nanometres), kept exactly.
    Length(Range),
    /// A filling factor: integer, decimal or `"p/q"`.
    Filling,
    /// One of these words, or a list of fillings in rising order.
    WordOrFillings(&'static [&'static str]),
    /// A number from 0 to 1, or a list of them.
    Shares,
    /// `"none"`, `"full"` or `{ length_um = 150 }`.
    Mixing,
    /// Two different names in a list.
    NamePair,
    /// At least two different names in a list.
    NameList,
    /// `[x, y]`.
    Corner,
    /// At least three corners in order.
    Outline,
    /// A list of outlines.
    Outlines,
    /// A list of lists of whole numbers, each number once.
    Groups,
    /// A list of names.
    Names,
    /// A list of texts.
    Texts,
    /// A table with keys of the user's choice and values of one kind.
    Open(&'static Kind),
    /// A table `[name]`, or braces within a table.
    One(&'static TableSpec),
    /// Tables `[[name]]`.
    Many(&'static TableSpec),
}

/// Which numbers are allowed.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Range {
    /// Every finite number.
    Any,
    /// Above zero.
    Positive,
    /// Zero or above.
    NotNegative,
    /// Not zero.
    NotZero,
    /// A field magnitude: above zero, the sense being the polarity's business.
    Magnitude,
}

impl Key {
    const fn new(name: &'static str, kind: Kind, doc: &'static str) -> Self {
        Self { name, kind, required: false, alone: false, default: "", doc, status: Status::Applied }
    }

    const fn required(self) -> Self {
        Self { required: true, ..self }
    }

    const fn alone(self) -> Self {
        Self { alone: true, ..self }
    }

    const fn default(self, default: &'static str) -> Self {
        Self { default, ..self }
    }

    const fn stated(self) -> Self {
        Self { status: Status::Stated, ..self }
    }

    const fn not_yet(self, possible: &'static str) -> Self {
        Self { status: Status::NotYet(possible), ..self }
    }

    /// The unit in the key, if it has one.
    pub fn unit(&self) -> Option<&'static Unit> {
        split_unit(self.name).map(|(_, unit)| unit)
    }

    /// The table that the key opens.
    pub fn table(&self) -> Option<&'static TableSpec> {
        match self.kind {
            Kind::One(table) | Kind::Many(table) => Some(table),
            _ => None,
        }
    }
}

impl TableSpec {
    /// The key of this name.
    pub fn key(&self, name: &str) -> Option<&'static Key> {
        self.keys.iter().find(|key| key.name == name)
    }

    /// All names of keys, in order.
    pub fn names(&self) -> impl Iterator<Item = &'static str> {
        self.keys.iter().map(|key| key.name)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn every_table(table: &'static TableSpec, list: &mut Vec<&'static TableSpec>) {
        list.push(table);
        table.keys.iter().filter_map(Key::table).for_each(|inner| every_table(inner, list));
    }

    #[test]
    fn keys_are_named_once_and_explained() {
        let mut tables = Vec::new();
        [&DEVICE_FILE, &COOLDOWN_FILE].iter().for_each(|file| every_table(file.root, &mut tables));
        assert!(tables.len() > 20);
        for table in tables {
            for key in table.keys {
                assert_eq!(table.names().filter(|name| *name == key.name).count(), 1, "{} {}", table.name, key.name);
                assert!(key.doc.len() > 7 && !key.doc.ends_with('.'), "{} {}: {}", table.name, key.name, key.doc);
            }
        }
    }

    /// A number that stands for a quantity says its unit in the key.
    #[test]
    fn lengths_have_a_unit_in_the_key() {
        let mut tables = Vec::new();
        [&DEVICE_FILE, &COOLDOWN_FILE].iter().for_each(|file| every_table(file.root, &mut tables));
        let lengths = tables.iter().flat_map(|table| table.keys).filter(|key| matches!(key.kind, Kind::Length(_)));
        for key in lengths {
            assert!(key.unit().is_some(), "{}", key.name);
        }
    }
}
