//! A table on a terminal.

use super::words::Words;
use super::{Cell, Table};
use crate::look::Look;
use comfy_table::{
    Attribute, Cell as Drawn, CellAlignment, ContentArrangement, Table as Drawing, TableComponent,
};

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
    for row in &table.rows {
        let texts = places.iter().map(|place| {
            let cell = row.get(*place).unwrap_or(&Cell::Blank);
            look.text(&words.cell(*place, cell))
        });
        drawing.add_row(texts);
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
    }
    drawing.trim_fmt() + "\n"
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
}
