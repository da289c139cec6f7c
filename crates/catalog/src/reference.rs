//! The reference page of all columns, made from their declarations.

use crate::column::{Cell, Column, Need};
use crate::kind::Kind;
use crate::tables::common;
use std::fmt::Write as _;

/// A page in Markdown that tells every column: what a cell holds, whether it may be blank, what it
/// means.
pub fn reference_markdown() -> String {
    let mut page = String::from(
        "# Columns of the catalogs\n\n\
         Made from the declarations that the reader itself follows.\n\n\
         ## Every catalog\n\n",
    );
    let shared = common::COUNT;
    table(&mut page, Kind::Zeners.columns().get(..shared).unwrap_or_default());
    for kind in Kind::ALL {
        // Writing to a text can't fail.
        let _ = write!(page, "\n## `{}`\n\n", kind.file_name());
        table(&mut page, kind.columns().get(shared..).unwrap_or_default());
    }
    page
}

fn table(page: &mut String, columns: &[Column]) {
    page.push_str("| column | cell | blank | meaning |\n|---|---|---|---|\n");
    for column in columns {
        let blank = match column.need {
            Need::Always => "an error".to_owned(),
            Need::ToProve => "unproven".to_owned(),
            Need::ToProveIf(condition) => format!("unproven if {condition}"),
            Need::Optional(meaning) => meaning.to_owned(),
            Need::Default(figure) => match column.cell {
                Cell::Number(number) => format!("{figure} {}", number.unit.symbol()),
                _ => figure.to_string(),
            },
        };
        let cell = column.cell.to_string();
        let _ = writeln!(page, "| `{}` | {cell} | {blank} | {} |", column.name, column.meaning);
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_column_has_its_line() {
        let page = reference_markdown();
        for kind in Kind::ALL {
            for column in kind.columns() {
                assert!(page.contains(&format!("\n| `{}` | ", column.name)), "{}", column.name);
            }
        }
        assert!(page.contains("| `full_power_to_c` | a temperature in °C | 70 °C |"));
    }

    #[test]
    fn no_cell_of_the_page_breaks_its_table() {
        for line in reference_markdown().lines().filter(|l| l.starts_with('|')) {
            assert_eq!(line.matches('|').count(), 5, "{line}");
        }
    }
}
