//! The joint purchase list on a terminal.

use super::PurchaseList;
use super::list::{cautions, lines};
use crate::look::Look;
use crate::table::screen;

/// The columns that are shown; the files have them all.
const SHOWN: [&str; 10] = [
    "maker",
    "part",
    "value",
    "unit",
    "pieces",
    "unit price",
    "line total",
    "short by",
    "lead time",
    "needed by",
];

/// The list, and below it what to know before ordering.
pub fn list(list: &PurchaseList, look: &Look) -> String {
    let rails: Vec<String> = list
        .rails
        .iter()
        .map(|rail| {
            let boards = if rail.boards == 1 { "board" } else { "boards" };
            format!("{} ({} {boards})", rail.rail, rail.boards)
        })
        .collect();
    let mut text = look.heading("Purchase list");
    text.push('\n');
    text += &look.items(&rails, 0, 2);
    text.push('\n');
    text += &screen::table(&lines(list), &SHOWN, look);
    let saved = list.saved();
    if saved != 0.0 {
        let currency = list.currency.as_deref().map(|c| format!(" {c}")).unwrap_or_default();
        let (by, than) = (saved.abs(), if saved > 0.0 { "more" } else { "less" });
        let said = format!("Bought rail by rail they would cost {by}{currency} {than}.");
        text.push('\n');
        text += &look.paragraph(&said, 0, 2);
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
