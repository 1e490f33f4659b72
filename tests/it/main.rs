//! The tests of the whole path: files in, answers out.

mod around;
mod bar;
mod circuit;
mod circuit_laws;
mod hand;
mod invariants;
mod literature;
mod random_bar;
mod shown;
mod tableau;
