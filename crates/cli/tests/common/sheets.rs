//! Workbooks read back.

use calamine::{Data, Reader};
use std::collections::BTreeMap;
use std::path::Path;

/// A cell as a test compares it.
#[derive(Debug, Clone, PartialEq)]
pub enum Read {
    Blank,
    Text(String),
    Number(f64),
}

/// The sheets of a workbook, each as rows of cells; `.xlsx` or `.ods`.
pub fn sheets(path: &Path) -> BTreeMap<String, Vec<Vec<Read>>> {
    let mut book = calamine::open_workbook_auto(path).expect("a workbook");
    let names = book.sheet_names();
    let rows = |range: calamine::Range<Data>| {
        let row = |cells: &[Data]| cells.iter().map(read).collect();
        range.rows().map(row).collect()
    };
    names
        .into_iter()
        .map(|name| {
            let range = book.worksheet_range(&name).expect("the sheet is there");
            (name, rows(range))
        })
        .collect()
}

/// The formulas of a sheet of an `.xlsx` file, without the cells that hold none.
pub fn formulas(path: &Path, sheet: &str) -> Vec<String> {
    let mut book = calamine::open_workbook_auto(path).expect("a workbook");
    let range = book.worksheet_formula(sheet).expect("the sheet is there");
    range.rows().flatten().filter(|formula| !formula.is_empty()).cloned().collect()
}

fn read(cell: &Data) -> Read {
    match cell {
        Data::Empty => Read::Blank,
        Data::String(text) if text.is_empty() => Read::Blank,
        Data::String(text) => Read::Text(text.clone()),
        Data::Float(number) => Read::Number(*number),
        Data::Int(number) => Read::Number(*number as f64),
        other => panic!("no cell of ours is {other:?}"),
    }
}

/// The cells of a column below its heading; `heading` may lack the unit in brackets.
pub fn column(rows: &[Vec<Read>], heading: &str) -> Vec<Read> {
    let is_it = |cell: &Read| match cell {
        Read::Text(text) => {
            text == heading || text.strip_prefix(heading).is_some_and(|unit| unit.starts_with(" ("))
        }
        _ => false,
    };
    let header = rows.first().expect("a header");
    let place = header.iter().position(is_it).unwrap_or_else(|| panic!("{heading}: {header:?}"));
    let cells = rows.iter().skip(1).map(|row| row.get(place).cloned().unwrap_or(Read::Blank));
    cells.collect()
}

/// The numbers of a column; 0 where it is blank.
pub fn numbers(rows: &[Vec<Read>], heading: &str) -> Vec<f64> {
    let number = |cell: Read| match cell {
        Read::Number(number) => number,
        Read::Blank => 0.0,
        Read::Text(text) => panic!("{heading} holds the text {text}"),
    };
    column(rows, heading).into_iter().map(number).collect()
}

/// The texts of a column; empty where it is blank.
pub fn texts(rows: &[Vec<Read>], heading: &str) -> Vec<String> {
    let text = |cell: Read| match cell {
        Read::Text(text) => text,
        Read::Blank => String::new(),
        Read::Number(number) => panic!("{heading} holds the number {number}"),
    };
    column(rows, heading).into_iter().map(text).collect()
}
