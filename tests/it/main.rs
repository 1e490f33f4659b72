//! The tests of the whole path: files in, answers out.

mod around;
mod bad;
mod bad_tables;
mod bar;
mod circuit;
mod circuit_laws;
mod damage;
mod drawing;
mod forms;
mod good;
mod hand;
mod invariants;
mod literature;
mod pages;
mod paper;
mod pixel_bar;
mod pixel_dice;
mod random_bar;
mod raster;
mod reading_back;
mod shares;
mod sheet;
mod shown;
mod tableau;
