//! What the program says about itself.
//!
//! Owns: the starter files. Must never print, or repeat what a table of keys says.

mod starter;

pub use starter::STARTER;
