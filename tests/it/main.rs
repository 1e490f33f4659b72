//! The tests of the whole path: files in, answers out.

mod around;
mod bar;
mod circuit;
mod circuit_laws;
mod forms;
mod hand;
mod invariants;
mod literature;
mod pixel_bar;
mod pixel_dice;
mod random_bar;
mod raster;
mod shares;
mod shown;
mod tableau;
