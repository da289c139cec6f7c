//! A shortage as tables.

use super::{Broken, Shortage};
use crate::substitute::tables::{also_changes, board_words, goes_in, money, replacement};
use crate::table::{Cell, Column, Document, Table};

/// The columns of designs and their replacements.
pub const DESIGNS: [Column; 14] = [
    Column::text("design", "its file"),
    Column::text("gone", "the parts that are gone from it"),
    Column::whole("rank", "place in the order of changes; blank where nothing can go in"),
    Column::text("goes in", "what replaces them"),
    Column::text("also changes", "further parts and resistor values"),
    Column::text("board", "what the replacement does to the board"),
    Column::money("cost", "cost of one board"),
    Column::share("margin", "1 − the greatest utilisation of the damage checks"),
    Column::share("slack", "1 − the greatest utilisation of the function checks"),
    Column::whole("stock", "pieces of the replacement in stock"),
    Column::number("weeks", "", "weeks until an order of it arrives"),
    Column::text("status", "its life-cycle word"),
    Column::text("trouble", "the same trouble again, of any part that goes in"),
    Column::text("same number", "another maker's part of the same number: the cells that differ"),
];

/// The columns of the new parts.
pub const COVER: [Column; 8] = [
    Column::text("new part", "a part that goes in"),
    Column::text("catalog", "where it stands"),
    Column::whole("designs", "designs that take it"),
    Column::whole("pieces", "pieces for all their boards"),
    Column::whole("stock", "pieces in stock; blank where the catalog tells none"),
    Column::number("weeks", "", "weeks until an order arrives"),
    Column::text("status", "life-cycle word"),
    Column::text("trouble", "too few pieces in stock for all boards, or a part that is going"),
];

/// The columns of what is taken for each design.
pub const PICKS: [Column; 6] = [
    Column::text("design", "its file"),
    Column::text("takes", "the new parts that it takes"),
    Column::text("also changes", "further parts and resistor values"),
    Column::text("board", "what the replacement does to the board"),
    Column::money("cost", "cost of one board"),
    Column::whole("rank", "place among the replacements of the design"),
];

/// The columns of files at fault.
pub const BROKEN: [Column; 2] = [
    Column::text("file", "a design file that is at fault"),
    Column::text("fault", "what is wrong"),
];

/// The file of a design as seen from the folder.
pub(super) fn within<'f>(file: &'f str, folder: &str) -> &'f str {
    let rest = file.strip_prefix(folder.trim_end_matches('/'));
    rest.map_or(file, |rest| rest.trim_start_matches('/'))
}

/// The designs with their replacements, a row each; a design that nothing can save has one row.
pub fn designs(of: &Shortage) -> Table {
    let mut table = Table::new("Designs", &DESIGNS);
    table.currency.clone_from(&of.currency);
    for design in &of.designs {
        let file = within(&design.file, &of.folder);
        let gone: Vec<&str> = design.gone.iter().map(|g| g.part.as_str()).collect();
        let mut gone = gone;
        gone.dedup();
        let first: Vec<Cell> = vec![file.into(), gone.join(" + ").into()];
        let mut push = |mut row: Vec<Cell>| {
            row.resize(DESIGNS.len(), Cell::Blank);
            table.rows.push(row);
        };
        if design.is_lost() {
            let mut row = first.clone();
            row.extend([Cell::Blank, "nothing".into()]);
            push(row);
        }
        for mend in &design.replacements {
            let mut row = first.clone();
            row.extend(replacement(mend));
            push(row);
        }
    }
    table
}

/// The new parts.
pub fn cover(of: &Shortage) -> Table {
    let mut table = Table::new("New parts", &COVER);
    let parts = of.cover.iter().flat_map(|cover| &cover.parts);
    table.rows = parts
        .map(|part| {
            vec![
                part.part.clone().into(),
                part.file.into(),
                part.designs.into(),
                part.pieces.into(),
                part.stock.into(),
                part.lead_weeks.into(),
                part.status.into(),
                part.trouble.join("; ").into(),
            ]
        })
        .collect();
    table
}

/// What is taken for each design.
pub fn picks(of: &Shortage) -> Table {
    let mut table = Table::new("Taken", &PICKS);
    table.currency.clone_from(&of.currency);
    let picks = of.cover.iter().flat_map(|cover| &cover.picks);
    table.rows = picks
        .map(|pick| {
            let mend = &pick.mend;
            let first = mend.replacing().next();
            vec![
                within(&pick.file, &of.folder).into(),
                goes_in(mend).into(),
                also_changes(mend).into(),
                first.map(|part| board_words(part.on_board)).into(),
                money(mend.after.cost),
                mend.rank.into(),
            ]
        })
        .collect();
    table
}

/// Files at fault.
pub fn broken(files: &[Broken]) -> Table {
    let mut table = Table::new("Files at fault", &BROKEN);
    table.rows = files
        .iter()
        .map(|file| vec![file.file.clone().into(), file.faults.join("; ").into()])
        .collect();
    table
}

/// As a document.
pub fn document(of: &Shortage) -> Document {
    let mut tables = vec![designs(of), cover(of), picks(of)];
    if !of.broken.is_empty() {
        tables.push(broken(&of.broken));
    }
    Document { title: format!("Shortage of {}", of.gone.join(", ")), tables }
}
