//! The kinds of objects in a PDF (ISO 32000-1, 7.3).

use std::ops::Range;

/// One object.
#[derive(Clone, Debug, PartialEq)]
pub enum Object {
    Null,
    Bool(bool),
    Int(i64),
    /// Its text: nothing here computes with it.
    Real(Vec<u8>),
    Name(Vec<u8>),
    Text(Vec<u8>),
    Array(Vec<Object>),
    Dict(Dict),
    /// Entries, and where in the file its bytes lie.
    Stream(Dict, Range<usize>),
    /// An object elsewhere, by its number.
    Ref(u32),
}

/// Names with objects, in the order of the file. Most have few entries.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Dict(pub Vec<(Vec<u8>, Object)>);

impl Dict {
    /// The entry of this name, null where there is none. Of doubled names the last counts.
    pub fn get(&self, name: &str) -> &Object {
        let found = self.0.iter().rev().find(|(key, _)| key == name.as_bytes());
        found.map_or(&Object::Null, |(_, object)| object)
    }
}

impl Object {
    /// The entries of a table or of a stream.
    pub fn dict(&self) -> Option<&Dict> {
        match self {
            Self::Dict(dict) | Self::Stream(dict, _) => Some(dict),
            _ => None,
        }
    }

    pub fn int(&self) -> Option<i64> {
        if let Self::Int(value) = self { Some(*value) } else { None }
    }

    pub fn name(&self) -> Option<&[u8]> {
        if let Self::Name(name) = self { Some(name) } else { None }
    }

    pub fn text(&self) -> Option<&[u8]> {
        if let Self::Text(text) = self { Some(text) } else { None }
    }

    pub fn array(&self) -> Option<&[Object]> {
        if let Self::Array(list) = self { Some(list) } else { None }
    }

    pub fn is_null(&self) -> bool {
        *self == Self::Null
    }
}
