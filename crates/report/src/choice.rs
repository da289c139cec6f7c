//! The catalog row behind a slot of a candidate.

use catalog::{Catalog, Kind, Row, Shop};
use circuit::slot::Slot;
use eligible::Eligible;

/// A row that was chosen for a slot.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) struct Choice<'a> {
    pub(crate) maker: &'a str,
    pub(crate) part: &'a str,
    /// Of one piece when all boards are built.
    pub(crate) price: f64,
    pub(crate) kind: Kind,
    /// Index into the catalog's files.
    pub(crate) file: u16,
    pub(crate) file_name: &'a str,
    pub(crate) line: u32,
}

/// The row at a place of the slot's list; None where there is no such place.
pub(crate) fn choice<'a>(eligible: &Eligible<'a>, slot: Slot, place: usize) -> Option<Choice<'a>> {
    let shop = eligible.shop;
    let boards = eligible.sheet.boards;
    match slot {
        Slot::Zener => of(&shop.zeners, eligible.zeners.get(place)?, boards),
        Slot::BiasLine => of(&shop.resistors, eligible.bias_lines.get(place)?, boards),
        Slot::Amplifier => of(&shop.opamps, eligible.amplifiers.get(place)?, boards),
        Slot::DividerLine => of(&shop.resistors, eligible.divider_lines.get(place)?, boards),
        Slot::Pot => of(&shop.pots, eligible.pots.get(place)?, boards),
        Slot::Pass => of(&shop.transistors, eligible.transistors.get(place)?, boards),
        Slot::Heatsink => of(&shop.heatsinks, eligible.heatsinks.get(place)?, boards),
    }
}

fn of<'a, T>(catalog: &'a Catalog<T>, row: &'a Row<T>, boards: u64) -> Option<Choice<'a>> {
    let file_name = catalog.file(row.file).map_or(catalog.kind.file_name(), |f| &f.name);
    Some(Choice {
        maker: &row.maker,
        part: &row.part,
        price: row.price.at(boards),
        kind: catalog.kind,
        file: row.file,
        file_name,
        line: row.line,
    })
}

/// The cells of a row with the names of their columns, as they stand in the file.
pub(crate) fn cells(shop: &Shop, kind: Kind, file: u16, line: u32) -> Vec<(String, String)> {
    match kind {
        Kind::Zeners => shop.zeners.cells(file, line),
        Kind::Opamps => shop.opamps.cells(file, line),
        Kind::Transistors => shop.transistors.cells(file, line),
        Kind::Resistors => shop.resistors.cells(file, line),
        Kind::Pots => shop.pots.cells(file, line),
        Kind::Heatsinks => shop.heatsinks.cells(file, line),
    }
}
