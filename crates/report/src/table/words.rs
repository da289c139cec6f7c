//! A cell as a person reads it.

use super::{Cell, Shown, Table};
use crate::proof::book::spelled;

/// Significant digits of a number.
pub const DIGITS: usize = 5;

/// Money is shown with at least so many decimals.
pub const LEAST_MONEY_DECIMALS: usize = 2;

/// No more decimals of money are shown: prices finer than that come from a division, not from a shop.
pub const MOST_MONEY_DECIMALS: usize = 6;

/// The cells of a table in words. Made once a table: what money looks like depends on all of a column.
pub struct Words<'t> {
    table: &'t Table,
    money_decimals: Vec<usize>,
}

impl<'t> Words<'t> {
    /// Looks a table's cells through.
    pub fn new(table: &'t Table) -> Self {
        let decimals = (0..table.columns.len()).map(|place| table.money_decimals(place));
        Self { table, money_decimals: decimals.collect() }
    }

    /// A cell of a column; empty where it is blank.
    pub fn cell(&self, place: usize, cell: &Cell) -> String {
        match (cell, cell.number()) {
            (Cell::Text(text), _) => text.clone(),
            (_, Some(value)) => self.number(place, value),
            _ => String::new(),
        }
    }

    /// A number of a column, without the unit that its heading tells.
    pub fn number(&self, place: usize, value: f64) -> String {
        let Some(column) = self.table.columns.get(place) else { return String::new() };
        if !value.is_finite() {
            return value.to_string();
        }
        match column.shown {
            Shown::Whole => format!("{value:.0}"),
            Shown::Share => format!("{:.1} %", value * 100.0),
            Shown::Money => format!("{value:.*}", self.money_decimals(place)),
            Shown::Number | Shown::Text => spelled(value, DIGITS),
        }
    }

    /// The sum below a column; None where none is shown.
    pub fn total(&self, place: usize) -> Option<String> {
        let sum = self.table.total(self.table.columns.get(place)?)?;
        Some(self.number(place, sum))
    }

    /// Decimals of the money in a column.
    pub fn money_decimals(&self, place: usize) -> usize {
        self.money_decimals.get(place).copied().unwrap_or(LEAST_MONEY_DECIMALS)
    }
}

/// Decimals that it takes to write a number in full.
///
/// ```
/// use report::table::words::decimals_of;
/// assert_eq!(decimals_of(4700.0), 0);
/// assert_eq!(decimals_of(0.0125), 4);
/// ```
pub fn decimals_of(value: f64) -> usize {
    let written = value.to_string();
    written.split_once('.').map_or(0, |(_, decimals)| decimals.len())
}
