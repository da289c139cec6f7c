//! The joint purchase list on a terminal.

use super::list::cautions;
use super::{LineRow, PurchaseList};
use crate::look::Look;
use crate::table::{Cell, Column, Table, screen};
use quantity::notation::engineering;

const LINE_TOTAL: &str = "line total";

/// The columns that are shown; the files have more.
const COLUMNS: [Column; 8] = [
    Column::text("part", "`maker/part`"),
    Column::text("value", "with its unit"),
    Column::whole("pieces", "for all boards of all rails"),
    Column::money("unit price", "at the quantity of all rails"),
    Column::money(LINE_TOTAL, "pieces times unit price").totalled(),
    Column::whole("short by", "pieces that the stock lacks"),
    Column::number("lead time", "weeks", "until an order arrives"),
    Column::text("for rail", "the numbers of the rails, and how many pieces each needs"),
];

/// The list, and below it what to know before ordering.
pub fn list(list: &PurchaseList, look: &Look) -> String {
    let mut text = look.heading("Purchase list");
    text.push('\n');
    for (number, rail) in (1..).zip(&list.rails) {
        let boards = if rail.boards == 1 { "board" } else { "boards" };
        let rail = format!("{number}  {}, {} {boards}", rail.rail, rail.boards);
        text += &look.paragraph(&rail, 2, 5);
    }
    text.push('\n');
    let mut table = Table::new("Purchase list", &COLUMNS);
    table.currency.clone_from(&list.currency);
    table.rows = list.lines.iter().map(|line| row(line, list.rails.len())).collect();
    table.totals = vec![(LINE_TOTAL, list.total.0)];
    text += &screen::table(&table, &COLUMNS.map(|column| column.heading), look);
    if let Some(sentence) = saved(list) {
        text.push('\n');
        text += &look.paragraph(&sentence, 0, 2);
    }
    let cautions = cautions(list);
    if !cautions.is_empty() {
        text += &format!("\n{}\n", look.heading("Before ordering"));
        for (kind, note) in cautions {
            text += &look.paragraph(&format!("{kind}: {note}"), 2, 4);
        }
    }
    text
}

fn row(line: &LineRow, rails: usize) -> Vec<Cell> {
    let value = line.value.map(|value| engineering(value.0, line.unit.unwrap_or_default(), 6));
    let needs: Vec<String> =
        line.uses.iter().map(|of| format!("{}: {}", of.rail + 1, of.pieces)).collect();
    vec![
        line.full_name().into(),
        value.into(),
        line.pieces.into(),
        line.unit_price.into(),
        line.line_total.into(),
        line.short_by.into(),
        line.lead_weeks.into(),
        // Of a single rail there is nothing to tell.
        if rails > 1 { needs.join(", ").into() } else { Cell::Blank },
    ]
}

/// What buying together saves; None where it makes no difference.
fn saved(list: &PurchaseList) -> Option<String> {
    let saved = list.saved();
    if saved == 0.0 {
        return None;
    }
    let currency = list.currency.as_deref().map(|c| format!(" {c}")).unwrap_or_default();
    let than = if saved > 0.0 { "more" } else { "less" };
    Some(format!("Bought rail by rail they would cost {}{currency} {than}.", saved.abs()))
}
