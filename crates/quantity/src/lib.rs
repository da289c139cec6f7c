//! Numbers of the trade: comparison at ten significant digits, preferred values, the notation of
//! catalog cells and what spreadsheets make of it, and curves given by points.
//!
//! This crate does not know parts, circuits or files.

pub mod digits;
pub mod notation;
pub mod points;
pub mod preferred;
pub mod spreadsheet;
