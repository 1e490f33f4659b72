//! The tests of the whole path: files in, answers out.

mod bar;
mod invariants;
mod literature;
mod random_bar;
