//! A row of a catalog with some of its cells written anew, read as the catalog reads it.

use catalog::read::read_inline;
use catalog::{Kind, Shop};
use circuit::slot::Slot;
use select::problem::{Part, PassPart, Problem, SinkPart};

/// The cells of one row, with the names of their columns.
#[derive(Debug, Clone)]
pub(crate) struct Cells {
    kind: Kind,
    cells: Vec<(String, String)>,
}

impl Cells {
    /// The row that starts at a line of a file.
    pub fn of(shop: &Shop, kind: Kind, file: u16, line: u32) -> Self {
        let cells = match kind {
            Kind::Zeners => shop.zeners.cells(file, line),
            Kind::Opamps => shop.opamps.cells(file, line),
            Kind::Transistors => shop.transistors.cells(file, line),
            Kind::Resistors => shop.resistors.cells(file, line),
            Kind::Pots => shop.pots.cells(file, line),
            Kind::Heatsinks => shop.heatsinks.cells(file, line),
        };
        Self { kind, cells }
    }

    /// The text of a cell; empty where it is blank or the file has no such column.
    pub fn text(&self, column: &str) -> &str {
        self.cells.iter().find(|(name, _)| name == column).map_or("", |(_, text)| text)
    }

    /// The row with another text in a cell.
    #[must_use]
    pub fn with(&self, column: &str, text: &str) -> Self {
        let mut cells = self.cells.clone();
        match cells.iter_mut().find(|(name, _)| name == column) {
            Some((_, old)) => text.clone_into(old),
            None => cells.push((column.to_owned(), text.to_owned())),
        }
        Self { kind: self.kind, cells }
    }

    /// A shop that holds this row alone; None where something is wrong with it.
    pub fn read(&self) -> Option<Shop> {
        let cells: Vec<(&str, &str)> =
            self.cells.iter().map(|(name, text)| (name.as_str(), text.as_str())).collect();
        let mut faults = Vec::new();
        let shop = read_inline(self.kind, &cells, &mut faults);
        faults.is_empty().then_some(shop)
    }
}

/// The problem with the one row of `shop` at a place of a slot's list, or behind the list's end.
/// None where the shop holds no proven row for the slot.
pub(crate) fn put<'b>(
    problem: &Problem<'b>,
    slot: Slot,
    place: Option<usize>,
    shop: &'b Shop,
    boards: u64,
) -> Option<Problem<'b>> {
    let mut with = problem.clone();
    put_in(&mut with, slot, place, shop, boards)?;
    Some(with)
}

/// The same to a problem itself, which stays as it is where nothing is put.
pub(crate) fn put_in<'b>(
    with: &mut Problem<'b>,
    slot: Slot,
    place: Option<usize>,
    shop: &'b Shop,
    boards: u64,
) -> Option<()> {
    fn set<T>(list: &mut Vec<T>, place: Option<usize>, item: T) -> Option<()> {
        match place {
            Some(place) => *list.get_mut(place)? = item,
            None => list.push(item),
        }
        Some(())
    }
    fn part<'b, T, F>(
        row: &'b catalog::Row<T>,
        figures: &'b F,
        place: usize,
        boards: u64,
    ) -> Part<'b, F> {
        let number = u32::try_from(place).unwrap_or(u32::MAX);
        Part {
            maker: &row.maker,
            part: &row.part,
            price: row.price.at(boards),
            row: number,
            figures,
        }
    }
    macro_rules! put {
        ($catalog:ident, $list:ident) => {{
            let row = shop.$catalog.rows.first()?;
            let at = place.unwrap_or(with.$list.len());
            set(&mut with.$list, place, part(row, &row.figures, at, boards))?;
        }};
    }
    match slot {
        Slot::Zener => put!(zeners, zeners),
        Slot::BiasLine => put!(resistors, bias_lines),
        Slot::Amplifier => put!(opamps, amplifiers),
        Slot::DividerLine => put!(resistors, divider_lines),
        Slot::Pot => put!(pots, pots),
        Slot::Pass => {
            let row = shop.transistors.rows.first()?;
            let at = place.unwrap_or(with.transistors.len());
            let part = part(row, &row.figures, at, boards);
            let package = row.package.as_deref();
            set(&mut with.transistors, place, PassPart { part, package })?;
        }
        Slot::Heatsink => {
            let row = shop.heatsinks.rows.first()?;
            let at = place.unwrap_or(with.heatsinks.len());
            let part = part(row, &row.figures.figures, at, boards);
            let fits = row.figures.fits.iter().map(|p| p.as_str()).collect();
            set(&mut with.heatsinks, place, SinkPart { part, fits })?;
        }
    }
    Some(())
}

/// The slots that a kind of catalog fills.
pub(crate) const fn slots_of(kind: Kind) -> &'static [Slot] {
    match kind {
        Kind::Zeners => &[Slot::Zener],
        Kind::Opamps => &[Slot::Amplifier],
        Kind::Transistors => &[Slot::Pass],
        Kind::Resistors => &[Slot::BiasLine, Slot::DividerLine],
        Kind::Pots => &[Slot::Pot],
        Kind::Heatsinks => &[Slot::Heatsink],
    }
}
