//! Device and cooldown files read with places, against one table of keys.
//!
//! Owns: the tables of keys ([`keys`]), the reading of TOML with the place of every word, and all findings that need no
//! meaning: faults of syntax, unknown keys, wrong kinds, wrong units, missing keys. Takes a [`Source`] and a [`FileSpec`],
//! gives a [`Checked`] tree in which every value is of the kind that the table of keys names. Must never contain meaning:
//! which contact a name refers to, or whether a filling is a step, is found by `device` and `cooldown`.
//!
//! [`Source`]: crate::diagnostic::Source

pub mod keys;

mod access;
mod check;
mod decimal;
mod kind;
mod lookup;
mod node;
mod quote;
mod read;
mod recognise;
mod suggest;
mod toml_fault;
mod value;

pub use decimal::exact_decimal;
pub use decimal::nanometres;
pub use keys::FileSpec;
pub use kind::is_noncharacter;
pub use node::Entry;
pub use node::Node;
pub use node::Table;
pub use node::Value;
pub use quote::quoted;
pub use read::Checked;
pub use read::from_bytes;
pub use read::read;
pub use recognise::recognise;
pub use recognise::text_at;
pub use suggest::did_you_mean;
pub use value::Filling;
pub use value::Length;
