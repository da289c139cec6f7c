//! Tables as a workbook (`.xlsx`): a sheet a table.
//!
//! Numbers are numbers with a format, texts are texts whatever they begin with. The header row stays in
//! sight and carries filters; sums and products are formulas that hold their value already, so that
//! programs that do not calculate show it too. The same tables give the same bytes.
//!
//! Source: ECMA-376, Office Open XML, by way of the crate `rust_xlsxwriter`.

mod look;

use crate::look::acts_on_terminal;
use crate::table::{Cell, Document, Table};
use look::Looks;
use rust_xlsxwriter::{DocProperties, ExcelDateTime, Formula, Workbook, Worksheet, XlsxError};
use std::fmt;

/// Rows of a sheet: more than these a spreadsheet can't open.
/// Source: ECMA-376 part 1, 18.3.1.73, as the format's programs apply it.
const MOST_ROWS: usize = 1_048_576;

/// Characters of a cell, likewise.
const MOST_CHARACTERS: usize = 32_767;

/// The moment that every workbook gives for its making, so that bytes do not depend on the clock: the
/// earliest that the container of the file knows.
const MADE_IN: (u16, u8, u8) = (1980, 1, 1);

/// Why a workbook could not be made: a table that no sheet holds.
#[derive(Debug)]
pub struct WorkbookFault(XlsxError);

impl fmt::Display for WorkbookFault {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "the workbook can't be made: {}", self.0)
    }
}

impl std::error::Error for WorkbookFault {
    fn source(&self) -> Option<&(dyn std::error::Error + 'static)> {
        Some(&self.0)
    }
}

impl From<XlsxError> for WorkbookFault {
    fn from(fault: XlsxError) -> Self {
        Self(fault)
    }
}

/// The bytes of a workbook with a sheet for each table.
///
/// Rows beyond the most that a sheet holds are left out, and the last one says so.
///
/// # Errors
/// Where a table's name is none that a sheet may have, or two tables have the same.
pub fn document(document: &Document) -> Result<Vec<u8>, WorkbookFault> {
    let mut workbook = Workbook::new();
    let (year, month, day) = MADE_IN;
    let made_in = ExcelDateTime::from_ymd(year, month, day)?;
    let properties = DocProperties::new().set_title(&document.title);
    workbook.set_properties(&properties.set_creation_datetime(&made_in));
    for table in &document.tables {
        workbook.push_worksheet(sheet(table)?);
    }
    Ok(workbook.save_to_buffer()?)
}

fn sheet(table: &Table) -> Result<Worksheet, XlsxError> {
    let looks = Looks::new(table);
    let mut sheet = Worksheet::new();
    sheet.set_name(table.name)?;
    for (place, column) in (0u16..).zip(&table.columns) {
        let width = looks.width(usize::from(place));
        sheet.set_column_width(place, width)?;
        let heading = harmless(&table.heading(column));
        sheet.write_string_with_format(0, place, heading, &looks.heading(column))?;
    }
    // The header and the sums take a row each.
    let room = MOST_ROWS - 2;
    for (row, cells) in (1u32..).zip(table.rows.iter().take(room)) {
        for (place, cell) in (0u16..).zip(cells) {
            write(&mut sheet, table, &looks, (row, place), cell)?;
        }
    }
    let last = table.rows.len().min(room) as u32;
    if table.rows.len() > room {
        let left_out = format!("{} more rows do not fit a sheet", table.rows.len() - room + 1);
        sheet.write_string(last, 0, left_out)?;
    }
    write_totals(&mut sheet, table, &looks, last)?;
    let last_column = table.columns.len().saturating_sub(1) as u16;
    sheet.set_freeze_panes(1, 0)?;
    sheet.autofilter(0, 0, last, last_column)?;
    // Printed on paper: lying, on as few pages side by side as can be read, with the headings on each.
    sheet.set_landscape().set_print_fit_to_pages(looks.pages_wide(), 0).set_repeat_rows(0, 0)?;
    Ok(sheet)
}

fn write(
    sheet: &mut Worksheet,
    table: &Table,
    looks: &Looks<'_>,
    (row, place): (u32, u16),
    cell: &Cell,
) -> Result<(), XlsxError> {
    let at = usize::from(place);
    match (cell, cell.number()) {
        (Cell::Blank, _) => {}
        (Cell::Text(text), _) => {
            sheet.write_string_with_format(row, place, harmless(text), looks.text(text))?;
        }
        (_, Some(value)) if !value.is_finite() => {
            sheet.write_string_with_format(row, place, value.to_string(), looks.no_number())?;
        }
        (Cell::Product { value, of: [left, right] }, _) => {
            let format = looks.number(at, *value);
            match (table.place(left), table.place(right)) {
                (Some(left), Some(right)) => {
                    let formula = format!("={}*{}", address(left, row), address(right, row));
                    let formula = Formula::new(formula).set_result(value.to_string());
                    sheet.write_formula_with_format(row, place, formula, &format)?;
                }
                _ => {
                    sheet.write_number_with_format(row, place, *value, &format)?;
                }
            }
        }
        (_, Some(value)) => {
            sheet.write_number_with_format(row, place, value, &looks.number(at, value))?;
        }
        (_, None) => {}
    }
    Ok(())
}

/// The sums, below the last row.
fn write_totals(
    sheet: &mut Worksheet,
    table: &Table,
    looks: &Looks<'_>,
    last: u32,
) -> Result<(), XlsxError> {
    if table.totals.is_empty() || last == 0 {
        return Ok(());
    }
    let below = last + 1;
    for (place, column) in (0u16..).zip(&table.columns) {
        let at = usize::from(place);
        if let Some(sum) = table.total(column) {
            let format = looks.total(at, sum);
            let formula = format!("=SUM({}:{})", address(at, 1), address(at, last));
            let formula = Formula::new(formula).set_result(sum.to_string());
            sheet.write_formula_with_format(below, place, formula, &format)?;
        } else {
            let word = if place == 0 { table.total_word.as_str() } else { "" };
            sheet.write_string_with_format(below, place, word, &looks.total_word())?;
        }
    }
    Ok(())
}

/// The address of a cell, both counted from 0: column 27, row 4 is `AB5`.
fn address(column: usize, row: u32) -> String {
    let mut letters = Vec::new();
    let mut left = column + 1;
    while left > 0 {
        letters.push(char::from(b'A' + ((left - 1) % 26) as u8));
        left = (left - 1) / 26;
    }
    letters.reverse();
    let letters: String = letters.into_iter().collect();
    format!("{letters}{}", row + 1)
}

/// A text that a sheet can hold: no control characters, which XML does not know, and not too long.
fn harmless(text: &str) -> String {
    let is_unwritable = |c: char| acts_on_terminal(c) || matches!(c, '\u{fffe}' | '\u{ffff}');
    let shown = text.chars().map(|c| if is_unwritable(c) { '\u{fffd}' } else { c });
    // Spreadsheets count in UTF-16.
    let mut left = MOST_CHARACTERS;
    shown
        .take_while(|c| {
            let fits = c.len_utf16() <= left;
            left = left.saturating_sub(c.len_utf16());
            fits
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::table::Column;

    #[test]
    fn columns_are_counted_in_letters() {
        let letters = |column| address(column, 4);
        assert_eq!(letters(0), "A5");
        assert_eq!(letters(25), "Z5");
        assert_eq!(letters(26), "AA5");
        assert_eq!(letters(701), "ZZ5");
        assert_eq!(letters(702), "AAA5");
    }

    #[test]
    fn texts_fit_a_cell() {
        assert_eq!(harmless("a\u{0}b\n\u{202e}c\u{ffff}"), "a\u{fffd}b\u{fffd}\u{fffd}c\u{fffd}");
        assert_eq!(harmless(&"𝛀".repeat(MOST_CHARACTERS)).chars().count(), MOST_CHARACTERS / 2);
    }

    #[test]
    fn the_same_tables_give_the_same_bytes() {
        let mut table = Table::new("Parts", &[Column::text("part", ""), Column::whole("n", "")]);
        table.rows.push(vec![Cell::from("=1+1"), Cell::from(3u64)]);
        let of = Document { title: "x".to_owned(), tables: vec![table] };
        assert_eq!(document(&of).unwrap(), document(&of).unwrap());
    }

    #[test]
    fn a_name_that_no_sheet_may_have_is_a_fault() {
        let of = |name| Document { title: String::new(), tables: vec![Table::new(name, &[])] };
        assert!(document(&of("a/b")).is_err());
    }
}
