//! A table as CSV: a header row and a row a row, without totals.

use super::{Cell, Table};
use crate::figure::Figure;
use crate::spreadsheet::safe_text;

/// The text of a CSV file. Numbers are written in full, texts so that no spreadsheet runs them.
///
/// # Errors
/// As the CSV writer does; writing to memory gives it no reason to.
pub fn table(table: &Table) -> Result<Vec<u8>, csv::Error> {
    let mut writer = csv::Writer::from_writer(Vec::new());
    writer.write_record(table.columns.iter().map(|column| column.csv_name()))?;
    for row in &table.rows {
        writer.write_record(row.iter().map(field))?;
    }
    writer.into_inner().map_err(|e| csv::Error::from(e.into_error()))
}

fn field(cell: &Cell) -> String {
    match (cell, cell.number()) {
        (Cell::Text(text), _) => safe_text(text).into_owned(),
        (_, Some(value)) => Figure(value).to_string(),
        _ => String::new(),
    }
}

#[cfg(test)]
mod tests {
    use super::super::Column;
    use super::*;

    #[test]
    fn texts_are_harmless_and_numbers_whole() {
        let mut of = Table::new("t", &[Column::text("part name", ""), Column::money("price", "")]);
        of.rows = vec![
            vec![Cell::from("=1+1"), Cell::Number(-0.1)],
            vec![Cell::from("a,\"b\""), Cell::Blank],
        ];
        let text = String::from_utf8(table(&of).unwrap()).unwrap();
        assert_eq!(text, "part_name,price\n'=1+1,-0.1\n\"a,\"\"b\"\"\",\n");
    }
}
