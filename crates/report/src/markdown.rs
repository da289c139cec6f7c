//! Tables as Markdown: headings and pipe tables, aligned so that the file reads well as plain text too.
//!
//! Source: GitHub Flavored Markdown 0.29, section 4.10, for tables; CommonMark 0.31, section 2.4, for
//! what a backslash takes the meaning from.
//!
//! Whatever came from a file stands in a heading or a cell, where no block can begin, and is escaped: no
//! name of a part can open a tag, a link, a picture or another cell.

use crate::look::acts_on_terminal;
use crate::table::words::Words;
use crate::table::{Cell, Document, Table};
use std::fmt::Write as _;
use textwrap::core::display_width;

/// Cells longer than this do not widen their column: the table would be blank for the most part.
const WIDEST: usize = 60;

/// The text of a Markdown file.
///
/// ```
/// use report::markdown::document;
/// use report::table::{Cell, Column, Document, Table};
/// let mut table = Table::new("Parts", &[Column::text("part", ""), Column::whole("pieces", "")]);
/// table.rows.push(vec![Cell::from("Q|1"), Cell::from(25u64)]);
/// let text = document(&Document { title: "Tide gauge".to_owned(), tables: vec![table] });
/// assert!(text.contains("| Q\\|1 |     25 |"), "{text}");
/// ```
pub fn document(document: &Document) -> String {
    let mut text = format!("# {}\n", escaped(&document.title));
    for table in &document.tables {
        let _ = write!(text, "\n## {}\n", escaped(table.name));
        if !table.about.is_empty() {
            let _ = write!(text, "\n{}\n", escaped(&table.about));
        }
        text.push('\n');
        if table.rows.is_empty() {
            text += "None.\n";
        } else {
            text += &self::table(table);
        }
    }
    text
}

/// A table without the columns in which no cell is filled, to save width.
fn table(table: &Table) -> String {
    let words = Words::new(table);
    let filled: Vec<_> =
        (0..).zip(&table.columns).filter(|(place, _)| table.is_filled(*place)).collect();
    let texts: Vec<Vec<String>> = filled
        .iter()
        .map(|&(place, column)| {
            let mut texts = vec![escaped(&table.heading(column))];
            let cells = table.rows.iter().map(|row| row.get(place).unwrap_or(&Cell::Blank));
            texts.extend(cells.map(|cell| escaped(&words.cell(place, cell))));
            texts.extend(total(table, &words, place));
            texts
        })
        .collect();
    let widths: Vec<usize> = texts.iter().map(|column| width(column)).collect();
    let mut lines = String::new();
    let rows = texts.first().map_or(0, Vec::len);
    for row in 0..rows {
        for (((_, column), texts), width) in filled.iter().zip(&texts).zip(&widths) {
            let text = texts.get(row).map_or("", String::as_str);
            let room = " ".repeat(width.saturating_sub(display_width(text)));
            let _ = match column.is_number() {
                true => write!(lines, "| {room}{text} "),
                false => write!(lines, "| {text}{room} "),
            };
        }
        lines += "|\n";
        if row == 0 {
            for ((_, column), width) in filled.iter().zip(&widths) {
                let end = if column.is_number() { ':' } else { '-' };
                let _ = write!(lines, "| {}{end} ", "-".repeat(width.saturating_sub(1)));
            }
            lines += "|\n";
        }
    }
    lines
}

/// The last row of a column, where the table shows sums: the sum, or the word in the first column.
fn total(table: &Table, words: &Words<'_>, place: usize) -> Option<String> {
    if table.totals.is_empty() {
        return None;
    }
    let total = || format!("**{}**", escaped(&table.total_word));
    let word = || if place == 0 { total() } else { String::new() };
    Some(words.total(place).map_or_else(word, |sum| format!("**{sum}**")))
}

fn width(texts: &[String]) -> usize {
    let fitting = texts.iter().map(|text| display_width(text)).filter(|width| *width <= WIDEST);
    fitting.max().unwrap_or(0).max(3)
}

/// A text without any meaning to Markdown or HTML, on one line.
///
/// ```
/// use report::markdown::escaped;
/// assert_eq!(escaped("<b>|![x](y)"), "&lt;b&gt;\\|!\\[x\\](y)");
/// assert_eq!(escaped("QK_5V1 & co\nnext"), "QK_5V1 &amp; co next");
/// assert_eq!(escaped("_both_"), "\\_both\\_");
/// ```
pub fn escaped(text: &str) -> String {
    let mut safe = String::with_capacity(text.len());
    let mut before = None;
    let mut rest = text.chars().peekable();
    while let Some(c) = rest.next() {
        match c {
            '<' => safe.push_str("&lt;"),
            '>' => safe.push_str("&gt;"),
            '&' => safe.push_str("&amp;"),
            '\\' | '|' | '`' | '*' | '[' | ']' | '~' | '$' => safe.extend(['\\', c]),
            // Within a word it means nothing, and part names read better without the backslash.
            '_' => {
                let is_within = |c: Option<char>| c.is_some_and(char::is_alphanumeric);
                let means_nothing = is_within(before) && is_within(rest.peek().copied());
                safe.extend((!means_nothing).then_some('\\'));
                safe.push('_');
            }
            c if acts_on_terminal(c) => safe.push(' '),
            c => safe.push(c),
        }
        before = Some(c);
    }
    safe
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::table::Column;

    fn priced() -> Table {
        let columns = [
            Column::text("part", ""),
            Column::money("price", "").totalled(),
            Column::text("n", ""),
        ];
        let mut table = Table::new("Order", &columns);
        table.rows = vec![
            vec![Cell::from("Ω10"), Cell::Number(0.125), Cell::Blank],
            vec![Cell::from("b"), Cell::Number(12.5), Cell::from("x")],
        ];
        table.totals = vec![("price", 12.625)];
        table
    }

    #[test]
    fn columns_stand_under_their_headings_and_sums_below() {
        let expected = "\
| part      |      price | n   |
| --------- | ---------: | --- |
| Ω10       |      0.125 |     |
| b         |     12.500 | x   |
| **total** | **12.625** |     |
";
        assert_eq!(table(&priced()), expected);
    }

    #[test]
    fn a_long_cell_does_not_widen_the_column() {
        let mut long = priced();
        long.rows[1][2] = Cell::from("x".repeat(WIDEST + 1));
        let text = table(&long);
        assert!(text.contains("| n   |"), "{text}");
    }

    #[test]
    fn a_table_without_rows_says_so() {
        let empty = Table::new("Order", &[Column::text("part", "")]);
        let text = document(&Document { title: "a <b>".to_owned(), tables: vec![empty] });
        assert_eq!(text, "# a &lt;b&gt;\n\n## Order\n\nNone.\n");
    }
}
