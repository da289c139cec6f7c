//! Designs: the parts and values of one rail, chosen by a search or already on the bench.
//!
//! A design file (TOML) names a part for each slot and gives the resistors as fitted. Nothing is chosen
//! again: a design is checked as it is. [`read`] turns the file into a [`Design`], [`write()`] writes one;
//! both follow the names of [`keys`]. [`parts`] finds the catalog row that each name means, or reads the
//! part's own cells where no catalog holds it; [`proof`] makes every check of the circuit with them,
//! [`condition`] the demands that are not electrical, and [`change`] tells which cells differ from those
//! that the design was proven with.
//!
//! | module | what it holds |
//! |---|---|
//! | [`keys`] | the names of the format, declared once |
//! | [`mod@file`] | what a design file says |
//! | [`read`] | reading one, with every fault at its place |
//! | [`write()`] | writing one |
//! | [`parts`] | what the names mean |
//! | [`mod@chosen`] | a candidate of a search as the parts of a design |
//! | [`proof`] | parts and values at a rail: every check |
//! | [`condition`] | status, ban, pin, stock, polarity, blank cells, the heatsink's fit |
//! | [`change`] | cells that have changed since a design was kept |
//! | `text` | places in a file |
//!
//! This crate does not open files, print, choose a value or hold a formula.

pub mod change;
pub mod chosen;
pub mod condition;
pub mod file;
pub mod keys;
pub mod parts;
pub mod proof;
mod read;
mod text;
mod write;

pub use chosen::chosen;
pub use file::Design;
pub use read::{is_design, read};
pub use text::Mark;
pub use write::{Kept, KeptPart, write};
