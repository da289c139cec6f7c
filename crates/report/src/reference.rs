//! The columns of every table that goes into a file, for the documentation.

use crate::dossier::{designs, notes, shortlist};
use crate::purchase::{lines, list};
use crate::table::{Column, Shown};
use std::fmt::Write as _;

/// Every table by the name that the documentation gives it.
pub fn tables() -> Vec<(&'static str, Vec<Column>)> {
    vec![
        ("a ranking", shortlist::ranking_columns()),
        ("order lines", lines::COLUMNS.to_vec()),
        ("the checks of a shortlist", shortlist::CHECK_COLUMNS.to_vec()),
        ("notes", notes::COLUMNS.to_vec()),
        ("designs", designs::ANSWER_COLUMNS.to_vec()),
        ("the checks of designs", designs::CHECK_COLUMNS.to_vec()),
        ("conditions", designs::CONDITION_COLUMNS.to_vec()),
        ("a purchase list", list::LINE_COLUMNS.to_vec()),
        ("rails", list::RAIL_COLUMNS.to_vec()),
        ("needs", list::NEED_COLUMNS.to_vec()),
    ]
}

/// The columns of a table as Markdown; None where there is no table of this name.
pub fn columns_markdown(table: &str) -> Option<String> {
    let (_, columns) = tables().into_iter().find(|(name, _)| *name == table)?;
    let mut text = String::from("| column | unit | meaning |\n|---|---|---|\n");
    for column in columns {
        let unit = match column.shown {
            Shown::Money => "money",
            Shown::Share => "%",
            _ => column.unit,
        };
        let sum = if column.is_totalled { "; the sum stands below" } else { "" };
        let _ = writeln!(text, "| {} | {unit} | {}{sum} |", column.heading, column.meaning);
    }
    Some(text)
}

#[cfg(test)]
mod tests {
    use super::*;
    use std::collections::BTreeSet;

    #[test]
    fn no_table_has_two_columns_of_one_name() {
        for (name, columns) in tables() {
            let headings: BTreeSet<&str> = columns.iter().map(|c| c.heading).collect();
            assert_eq!(headings.len(), columns.len(), "{name}");
            assert!(columns.iter().all(|c| !c.meaning.is_empty()), "{name}");
        }
    }
}
