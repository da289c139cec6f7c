//! The table of order lines that goes with a shortlist or a proof.

use super::LineRow;
use crate::table::{Cell, Column, Table};
use ::purchase::money::Money;
use ::purchase::order::{Line, Order};
use ::purchase::second_source::{BySlot, SecondSources};

/// The name of the table.
pub const NAME: &str = "Order lines";

const PIECES: &str = "pieces";
const ORDER_PRICE: &str = "order price";
const LINE_TOTAL: &str = "line total";

/// The columns of the table.
pub const COLUMNS: [Column; 21] = [
    Column::text("rail", "the rail that the line is for"),
    Column::text("used as", "the slot, or the resistors that are taken from a line of resistors"),
    Column::text("maker", "who makes the part"),
    Column::text("part", "its name"),
    Column::number("value", "", "resistance, zener voltage, thermal resistance of a heatsink"),
    Column::text("unit", "the unit of the value"),
    Column::share("tolerance", "either way"),
    Column::text("package", "as the catalog writes it"),
    Column::whole("pieces per board", "pieces of the line on one board"),
    Column::whole(PIECES, "for all boards"),
    Column::whole(
        "price quantity",
        "pieces of the part for all boards, whatever their value: RF and RI of one line of resistors are two a board. This quantity sets the order price",
    ),
    Column::money(
        "ranked price",
        "price of one piece where as many as boards set it: what the ranking counts",
    ),
    Column::money(
        ORDER_PRICE,
        "price of one piece at the price quantity; blank where nobody states one",
    ),
    Column::money(LINE_TOTAL, "pieces times order price").totalled(),
    Column::whole("stock", "pieces of the part in stock; blank where the catalog does not say"),
    Column::whole(
        "short by",
        "pieces that the stock lacks of the price quantity; blank where it reaches",
    ),
    Column::number("lead time", "weeks", "until an order arrives"),
    Column::text("status", "life-cycle word"),
    Column::whole(
        "second sources",
        "other parts that the sheet allows and with which every check holds, everything else as it is; blank where that can't be told",
    ),
    Column::whole(
        "same package",
        "how many of these have the same package and, as far as the catalogs tell, the same pinout",
    ),
    Column::text("source", "the file and line that describe the part"),
];

/// The order lines of one rail.
#[derive(Debug, Clone, PartialEq)]
pub struct RailLines {
    rows: Vec<Vec<Cell>>,
    total: Money,
    unpriced: usize,
}

impl RailLines {
    /// The lines of an order for one rail. `second_sources` is None where the rail's parts can't be
    /// proven.
    pub fn new(
        rail: &str,
        order: &Order<'_>,
        boards: u64,
        second_sources: Option<&BySlot>,
    ) -> Self {
        let row = |line: &Line<'_>| row(rail, line, boards, second_sources);
        Self {
            rows: order.lines.iter().map(row).collect(),
            total: order.total.clone(),
            unpriced: order.unpriced(),
        }
    }
}

/// The table of several rails' lines, one rail after another.
pub fn table(rails: &[RailLines], currency: Option<&str>) -> Table {
    let mut table = Table::new(NAME, &COLUMNS);
    table.currency = currency.map(str::to_owned);
    table.rows = rails.iter().flat_map(|rail| rail.rows.iter().cloned()).collect();
    let total: Money = rails.iter().map(|rail| rail.total.clone()).sum();
    if !table.rows.is_empty() {
        table.totals = vec![(LINE_TOTAL, total.amount())];
        table.tell_unpriced(rails.iter().map(|rail| rail.unpriced).sum());
    }
    table
}

fn row(rail: &str, line: &Line<'_>, boards: u64, second_sources: Option<&BySlot>) -> Vec<Cell> {
    let told = LineRow::new(line);
    let places: Vec<String> = told.uses.iter().map(|of| of.places()).collect();
    let per_board: u64 = told.uses.iter().map(|of| of.pieces_per_board).sum();
    let others = second_sources.and_then(|by_slot| fewest(line, by_slot));
    let source = told.source();
    vec![
        rail.into(),
        places.join(", ").into(),
        told.maker.into(),
        told.part.into(),
        told.value.into(),
        told.unit.into(),
        told.tolerance.into(),
        told.package.into(),
        per_board.into(),
        told.pieces.into(),
        told.price_quantity.into(),
        line.ranked_price(boards).map(|price| price.amount()).into(),
        told.unit_price.into(),
        told.line_total.map_or(Cell::Blank, |total| Cell::Product {
            value: total.0,
            of: [PIECES, ORDER_PRICE],
        }),
        told.stock.into(),
        told.short_by.into(),
        told.lead_weeks.into(),
        told.status.into(),
        others.map(|o| o.proven).into(),
        others.map(|o| o.same_package).into(),
        source.into(),
    ]
}

/// The second sources of a line; of one that serves two slots those of the slot that has fewer.
fn fewest(line: &Line<'_>, by_slot: &BySlot) -> Option<SecondSources> {
    let slots = line.uses.iter().flat_map(|of| &of.places).map(|(slot, _)| *slot);
    slots.filter_map(|slot| by_slot[slot as usize]).min_by_key(|others| others.proven)
}
