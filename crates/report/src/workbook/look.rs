//! How cells of a sheet look: formats of numbers, widths of columns.

use crate::spreadsheet::safe_text;
use crate::table::words::Words;
use crate::table::{Cell, Column, Shown, Table};
use rust_xlsxwriter::{Format, FormatAlign, FormatBorder};
use textwrap::core::display_width;

/// A column is at least so many characters wide: room for the button of the filter.
const LEAST_WIDTH: usize = 8;

/// A column is at most so wide; longer texts are broken into lines.
const MOST_WIDTH: usize = 60;

/// Characters that a lying page of A4 or Letter holds in print of about six points.
const MOST_ON_PAPER: f64 = 220.0;

/// Room for the cell's edges and the filter's button.
const EDGES: usize = 4;

/// The formats of a table's sheet.
pub(super) struct Looks<'t> {
    table: &'t Table,
    words: Words<'t>,
    text: Format,
    like_formula: Format,
    no_number: Format,
}

impl<'t> Looks<'t> {
    pub(super) fn new(table: &'t Table) -> Self {
        // Indented, or it would touch a number in the column before.
        let text = Format::new().set_text_wrap().set_align(FormatAlign::Top).set_indent(1);
        Self {
            table,
            words: Words::new(table),
            // Kept as a text also when somebody edits the cell and enters it again.
            like_formula: text.clone().set_quote_prefix(),
            text,
            no_number: Format::new().set_align(FormatAlign::Right).set_align(FormatAlign::Top),
        }
    }

    pub(super) fn heading(&self, column: &Column) -> Format {
        let side = if column.is_number() { FormatAlign::Right } else { FormatAlign::Left };
        let heading = Format::new().set_bold().set_text_wrap().set_align(FormatAlign::Bottom);
        let indent = u8::from(!column.is_number());
        heading.set_align(side).set_indent(indent).set_border_bottom(FormatBorder::Thin)
    }

    pub(super) fn text(&self, text: &str) -> &Format {
        if safe_text(text) == text { &self.text } else { &self.like_formula }
    }

    /// Of an infinite number, which stands as a word where numbers stand.
    pub(super) fn no_number(&self) -> &Format {
        &self.no_number
    }

    pub(super) fn number(&self, place: usize, value: f64) -> Format {
        let format = self.pattern(place, value);
        Format::new().set_num_format(format).set_align(FormatAlign::Top)
    }

    pub(super) fn total(&self, place: usize, value: f64) -> Format {
        self.total_word().set_num_format(self.pattern(place, value))
    }

    pub(super) fn total_word(&self) -> Format {
        Format::new().set_bold().set_border_top(FormatBorder::Thin)
    }

    /// The format of a number in the language of spreadsheets.
    fn pattern(&self, place: usize, value: f64) -> String {
        let shown = self.table.columns.get(place).map_or(Shown::Number, |column| column.shown);
        match shown {
            Shown::Whole => "#,##0".to_owned(),
            Shown::Share => "0.0%".to_owned(),
            Shown::Money => with_decimals("#,##0", self.words.money_decimals(place)),
            Shown::Number | Shown::Text => {
                let written = self.words.number(place, value);
                match written.split_once('e') {
                    Some((mantissa, _)) => format!("{}E+0", with_decimals("0", decimals(mantissa))),
                    None => with_decimals("0", decimals(&written)),
                }
            }
        }
    }

    /// Sheets of paper that lie side by side, so that print stays large enough to be read.
    pub(super) fn pages_wide(&self) -> u16 {
        let width: f64 = (0..self.table.columns.len()).map(|place| self.width(place)).sum();
        let pages = (width / MOST_ON_PAPER).ceil();
        // A table has far fewer columns than pages can be counted.
        pages.max(1.0) as u16
    }

    /// The width of a column in characters, so that it can be read.
    pub(super) fn width(&self, place: usize) -> f64 {
        let Some(column) = self.table.columns.get(place) else { return LEAST_WIDTH as f64 };
        let heading = self.table.heading(column);
        // A heading of several words may stand on several lines.
        let longest_word = heading.split(' ').map(display_width).max().unwrap_or(0);
        let cells = self.table.rows.iter().filter_map(|row| row.get(place));
        let cells = cells.map(|cell| self.width_of(place, cell));
        let total = self.table.total(column).map(|sum| self.width_of(place, &Cell::Number(sum)));
        let widest = cells.chain(total).max().unwrap_or(0).max(longest_word);
        (widest + EDGES).clamp(LEAST_WIDTH, MOST_WIDTH) as f64
    }

    fn width_of(&self, place: usize, cell: &Cell) -> usize {
        match (cell, cell.number()) {
            (Cell::Text(text), _) => text.lines().map(display_width).max().unwrap_or(0),
            (_, Some(value)) => {
                let written = self.words.number(place, value);
                // A mark between every three digits.
                display_width(&written) + written.len() / 4
            }
            _ => 0,
        }
    }
}

fn with_decimals(whole: &str, decimals: usize) -> String {
    if decimals == 0 { whole.to_owned() } else { format!("{whole}.{}", "0".repeat(decimals)) }
}

fn decimals(written: &str) -> usize {
    written.split_once('.').map_or(0, |(_, decimals)| decimals.len())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_number_shows_its_significant_digits_and_no_more() {
        let columns = [Column::number("asked", "A", ""), Column::money("price", "")];
        let mut table = Table::new("t", &columns);
        table.rows = vec![vec![Cell::Blank, Cell::Number(0.125)]];
        let looks = Looks::new(&table);
        for (value, pattern) in
            [(4700.0, "0"), (0.006123456, "0.0000000"), (1.5, "0.0"), (2.5e-9, "0.0E+0")]
        {
            assert_eq!(looks.pattern(0, value), pattern, "{value}");
        }
        assert_eq!(looks.pattern(1, 12.5), "#,##0.000");
    }

    #[test]
    fn widths_leave_room_and_have_an_end() {
        let mut table = Table::new("t", &[Column::text("part", ""), Column::text("n", "")]);
        table.rows = vec![vec![Cell::from("x".repeat(500)), Cell::Blank]];
        let looks = Looks::new(&table);
        assert_eq!(looks.width(0), MOST_WIDTH as f64);
        assert_eq!(looks.width(1), LEAST_WIDTH as f64);
    }
}
