//! Expected and measured resistances of gated quantum Hall devices: solved, drawn, compared and written to a sheet.
//!
//! The modules stand in reading order, and that order is the path of the data: text becomes a checked
//! `device` and `cooldown`; the device becomes a planar `layout`, the layout a `network` of edge channels, the
//! network a `conductance` matrix; with the `circuit` around it that gives every `resistance`. A table becomes
//! `measured` readings, which `compare` sets against the expected ones. `safety` chooses cautions, `figure` draws,
//! `report` holds every table and sentence, typed and rounded; `sheet` turns a report into pages, `archive` into a
//! record. `guide` holds what the program says of itself. Only `files` touches the disk and only `cli` prints.

pub mod diagnostic;

pub mod number;

pub mod quantity;

pub mod syntax;

pub mod device;

pub mod cooldown;

pub mod layout;

pub mod network;

pub mod conductance;

pub mod circuit;

pub mod resistance;

pub mod measured;

pub mod compare;

pub mod safety;

pub mod figure;

pub mod report;

pub mod sheet;

pub mod archive;

pub mod guide;

pub mod files;

pub mod cli;
