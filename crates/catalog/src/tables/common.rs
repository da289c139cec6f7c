//! The columns that every catalog has.

use super::columns;
use crate::column::{Cell, Column, Need, Range, Unit, number};
use circuit::status::Status;

const NUMBER_FROM_ZERO: Cell = number(Unit::Plain, Range::FROM_ZERO);

/// Nothing comes before these.
const NOTHING: [Column; 0] = [];

/// How many columns every catalog has.
pub(crate) const COUNT: usize = OWN.len();

/// The same, for the tables of the six catalogs.
pub(crate) const SHARED: [Column; COUNT] = OWN;

columns! {
    first 0, after NOTHING;
    part: needed(Cell::Text, "the part's name as it is ordered; with `maker` once in all files of a kind")
        .need(Need::Always);
    maker: optional(Cell::Text, "no maker", "who makes it");
    cost: needed(Cell::Price, "what one piece costs, or price breaks `1:0.42;100:0.31`: from that quantity on; below the first break its price")
        .plausible(0.0, 1e5);
    stock: optional(NUMBER_FROM_ZERO, "not stated", "pieces in stock");
    lead_weeks: optional(NUMBER_FROM_ZERO, "not stated", "weeks until an order arrives")
        .plausible(0.0, 104.0);
    status: optional(Cell::Word(&Status::WORDS), "unknown", "where the part stands in its life");
    package: optional(Cell::Text, "not stated", "its package, written the same way in every catalog: transistors need it to find a heatsink that fits");
    pinout: optional(Cell::Text, "not stated", "the order of its pins, so that a substitute can be compared");
    source: optional(Cell::Text, "not stated", "data sheet, revision and page that the figures come from");
    notes: optional(Cell::Text, "none", "anything else");
}
