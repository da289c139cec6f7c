//! Which columns a table has, and how it is drawn.

use super::columns::{Column, Columns};
use crate::look::Look;
use crate::shortlist::Shortlist;
use comfy_table::{Attribute, Cell, CellAlignment, ContentArrangement, Table, TableComponent};

/// Blank columns between two columns of the table: padding and a vertical line.
const GAP: usize = 2;

/// On a terminal narrower than this candidates are told in paragraphs where a table does not fit; on a
/// wider one a long name is broken within its cell.
const LEAST_TABLE: usize = 72;

/// The candidates in a table with the columns that fit, and a line that says what was left out.
///
/// A candidate takes one line where the terminal is wide enough for that, otherwise several, and is a
/// paragraph where the terminal is too narrow for a table.
pub(super) fn table(list: &Shortlist<'_>, look: &Look) -> String {
    let all = Columns::new(list, look);
    let one_line = all.in_one_line();
    let is_wide = taken(&one_line) <= look.width;
    let mut shown = if is_wide { one_line } else { all.stacked() };
    if look.width < LEAST_TABLE && taken(&shown) > look.width {
        return paragraphs(&all.in_one_line(), list.candidates.len(), look);
    }
    let mut left_out: Vec<&str> = Vec::new();
    for column in all.if_room(is_wide) {
        if taken(&shown) + GAP + column.width() <= look.width {
            shown.push(column);
        } else {
            left_out.push(column.name);
        }
    }
    left_out.extend(["makers", "each check"]);
    let mut text = drawn(&shown, list.candidates.len(), is_wide, look);
    text += "\n\n";
    let left_out = format!("Columns left out: {}; --out FILE has them.", left_out.join(", "));
    text + &look.paragraph(&left_out, 0, 2)
}

/// Each candidate as a paragraph of names and values, its rank first.
fn paragraphs(columns: &[Column], rows: usize, look: &Look) -> String {
    let mut text = String::new();
    for row in 0..rows {
        let named = |column: &Column| {
            let cell = column.cells.get(row).map_or("", |cell| cell.trim());
            format!("{} {cell}", column.name)
        };
        let items: Vec<String> = columns.iter().map(named).collect();
        text += &look.items(&items, 0, 2);
        text.push('\n');
    }
    text + &look.paragraph("Left out: id, makers, each check; --out FILE has them.", 0, 2)
}

fn taken(columns: &[Column]) -> usize {
    let gaps = GAP * columns.len().saturating_sub(1);
    columns.iter().map(Column::width).sum::<usize>() + gaps
}

fn drawn(columns: &[Column], rows: usize, is_wide: bool, look: &Look) -> String {
    let mut table = Table::new();
    table
        .load_preset(comfy_table::presets::NOTHING)
        .set_content_arrangement(ContentArrangement::Dynamic);
    table.set_width(u16::try_from(look.width).unwrap_or(u16::MAX));
    let rule = if look.ascii { '-' } else { '─' };
    table.set_style(TableComponent::HeaderLines, rule);
    table.set_style(TableComponent::MiddleHeaderIntersections, rule);
    table.set_style(TableComponent::VerticalLines, ' ');
    if !is_wide {
        // A blank line keeps candidates of several lines apart.
        table.set_style(TableComponent::HorizontalLines, ' ');
        table.set_style(TableComponent::MiddleIntersections, ' ');
    }
    if look.colour {
        table.enforce_styling();
    } else {
        table.force_no_tty();
    }
    let title = |c: &Column| {
        let cell = Cell::new(&c.title);
        if look.colour { cell.add_attribute(Attribute::Bold) } else { cell }
    };
    table.set_header(columns.iter().map(title));
    for row in 0..rows {
        table.add_row(columns.iter().map(|c| c.cells.get(row).map_or("", String::as_str)));
    }
    let last = columns.len().saturating_sub(1);
    for (place, column) in columns.iter().enumerate() {
        let Some(drawn) = table.column_mut(place) else { continue };
        // The blank vertical line is the other half of the gap.
        drawn.set_padding((0, if place == last { 0 } else { 1 }));
        if column.is_number {
            drawn.set_cell_alignment(CellAlignment::Right);
        }
    }
    table.trim_fmt()
}
