//! A table on a terminal.

use super::words::Words;
use super::{Cell, Table};
use crate::look::Look;
use comfy_table::{
    Attribute, Cell as Drawn, CellAlignment, ColumnConstraint, ContentArrangement,
    Table as Drawing, TableComponent, Width,
};
use textwrap::core::display_width;

/// Blanks between two columns.
const GAP: usize = 2;

/// The columns with these headings as a table as wide as the terminal at most; columns without a cell
/// are left out. Ends in a line break. Sums stand in the last row.
pub fn table(table: &Table, headings: &[&str], look: &Look) -> String {
    let mut drawing = Drawing::new();
    drawing
        .load_preset(comfy_table::presets::NOTHING)
        .set_content_arrangement(ContentArrangement::Dynamic)
        .set_width(u16::try_from(look.width).unwrap_or(u16::MAX));
    let rule = if look.ascii { '-' } else { '─' };
    drawing.set_style(TableComponent::HeaderLines, rule);
    drawing.set_style(TableComponent::MiddleHeaderIntersections, rule);
    drawing.set_style(TableComponent::VerticalLines, ' ');
    if look.colour {
        drawing.enforce_styling();
    } else {
        drawing.force_no_tty();
    }
    let places = headings.iter().filter_map(|heading| table.place(heading));
    let places: Vec<usize> = places.filter(|place| table.is_filled(*place)).collect();
    let columns: Vec<_> = places.iter().filter_map(|place| table.columns.get(*place)).collect();
    drawing.set_header(columns.iter().map(|column| {
        let cell = Drawn::new(look.text(&table.heading(column)));
        if look.colour { cell.add_attribute(Attribute::Bold) } else { cell }
    }));
    let words = Words::new(table);
    let row_of = |row: &Vec<Cell>| -> Vec<String> {
        let cells = places.iter().map(|place| (place, row.get(*place).unwrap_or(&Cell::Blank)));
        cells.map(|(place, cell)| look.text(&words.cell(*place, cell))).collect()
    };
    let mut rows: Vec<Vec<String>> = table.rows.iter().map(row_of).collect();
    let headings: Vec<String> =
        columns.iter().map(|column| look.text(&table.heading(column))).collect();
    let least = least_widths(&headings, &mut rows, look.width);
    for row in rows {
        drawing.add_row(row);
    }
    if !table.totals.is_empty() {
        let texts = places.iter().enumerate().map(|(at, place)| {
            let word = || if at == 0 { table.total_word.clone() } else { String::new() };
            words.total(*place).unwrap_or_else(word)
        });
        drawing.add_row(texts);
    }
    for (at, column) in columns.iter().enumerate() {
        let Some(drawn) = drawing.column_mut(at) else { continue };
        drawn.set_padding((0, if at + 1 == columns.len() { 0 } else { 1 }));
        if column.is_number() {
            drawn.set_cell_alignment(CellAlignment::Right);
        }
        if let Some(width) = least.get(at) {
            drawn.set_constraint(ColumnConstraint::LowerBoundary(Width::Fixed(*width)));
        }
    }
    drawing.trim_fmt() + "\n"
}

/// How wide each column has to be at least, so that no word is torn. Where the table would be wider than
/// the terminal, `maker/part` goes on two lines. Empty where even that has no room: then words are torn.
fn least_widths(headings: &[String], rows: &mut [Vec<String>], width: usize) -> Vec<u16> {
    let widest = |rows: &[Vec<String>], of: fn(&str) -> usize| -> Vec<usize> {
        let column = |(at, heading): (usize, &String)| {
            let cells = rows.iter().filter_map(|row| row.get(at)).map(|cell| of(cell));
            cells.chain([of(heading)]).max().unwrap_or(0)
        };
        headings.iter().enumerate().map(column).collect()
    };
    let total = |widths: &[usize]| widths.iter().sum::<usize>() + GAP * widths.len();
    if total(&widest(rows, display_width)) <= width {
        return Vec::new();
    }
    for cell in rows.iter_mut().flatten() {
        if let Some((maker, part)) = cell.rsplit_once('/')
            && !cell.contains(char::is_whitespace)
        {
            *cell = format!("{maker}/\n{part}");
        }
    }
    let longest_word = |text: &str| text.split_whitespace().map(display_width).max().unwrap_or(0);
    let least = widest(rows, longest_word);
    if total(&least) > width {
        return Vec::new();
    }
    least.into_iter().map(|w| u16::try_from(w + GAP - 1).unwrap_or(u16::MAX)).collect()
}

#[cfg(test)]
mod tests {
    use super::super::Column;
    use super::*;

    #[test]
    fn blank_columns_are_left_out_and_sums_stand_below() {
        let columns = [
            Column::text("part", ""),
            Column::whole("stock", ""),
            Column::money("price", "").totalled(),
        ];
        let mut of = Table::new("t", &columns);
        of.rows = vec![vec![Cell::from("Q\u{1b}1"), Cell::Blank, Cell::Number(1.25)]];
        of.totals = vec![("price", 1.25)];
        let look = Look { width: 60, colour: false, ascii: true };
        let text = table(&of, &["part", "stock", "price"], &look);
        assert_eq!(text, "part   price\n------------\nQ?1     1.25\ntotal   1.25\n");
    }

    #[test]
    fn names_are_not_torn_where_there_is_little_room() {
        let columns = [Column::text("part", ""), Column::text("design", "")];
        let mut of = Table::new("t", &columns);
        let words = "a b c d e f g h i j k l m n o p q r s t u v w x y z";
        of.rows = vec![vec![Cell::from("Grindlemoor/GDL-B5"), Cell::from(words)]];
        for width in [24, 30, 40] {
            let look = Look { width, colour: false, ascii: true };
            let text = table(&of, &["part", "design"], &look);
            assert!(text.contains("Grindlemoor/ ") && text.contains("GDL-B5 "), "{text}");
            assert!(text.lines().all(|line| line.len() <= width), "{text}");
        }
    }
}
