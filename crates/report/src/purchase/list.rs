//! The joint purchase list as tables.

use super::{LineRow, PurchaseList, RailRow};
use crate::proof::Answer;
use crate::table::{Cell, Column, Document, Table};

const PIECES: &str = "pieces";
const UNIT_PRICE: &str = "unit price";
const LINE_TOTAL: &str = "line total";
const TOGETHER: &str = "cost together";
const ALONE: &str = "cost alone";
const SAVED: &str = "saved";

/// The columns of the lines: also those of the CSV file.
pub const LINE_COLUMNS: [Column; 20] = [
    Column::text("kind", "what the part is"),
    Column::text("maker", "who makes it"),
    Column::text("part", "its name"),
    Column::number("value", "", "resistance, zener voltage, thermal resistance of a heatsink"),
    Column::text("unit", "the unit of the value"),
    Column::share("tolerance", "either way"),
    Column::text("package", "as the catalog writes it"),
    Column::whole(PIECES, "for all boards of all rails"),
    Column::whole(
        "price quantity",
        "pieces of the part over all rails and values: this quantity sets the unit price",
    ),
    Column::money(
        UNIT_PRICE,
        "price of one piece at the price quantity; blank where nobody states one",
    ),
    Column::money(LINE_TOTAL, "pieces times unit price").totalled(),
    Column::whole("next break", "the quantity of the part from which on its price changes next"),
    Column::money("next price", "price of one piece there"),
    Column::whole("stock", "pieces of the part in stock; blank where the catalog does not say"),
    Column::whole(
        "short by",
        "pieces that the stock lacks of the price quantity; blank where it reaches",
    ),
    Column::number("lead time", "weeks", "until an order arrives"),
    Column::text("status", "life-cycle word"),
    Column::text("needed by", "the rails with their pieces"),
    Column::text("remark", "why there is no price, or that the stock does not reach"),
    Column::text("source", "the file and line that describe the part"),
];

/// The columns of the rails.
pub const RAIL_COLUMNS: [Column; 9] = [
    Column::text("rail", "what the design is called"),
    Column::text("design", "its file"),
    Column::text("sheet", "its rail sheet"),
    Column::text("answer", "what its checks come to, as `verify` tells it"),
    Column::whole("boards", "to build"),
    Column::money(TOGETHER, "its pieces at the prices that all rails reach together").totalled(),
    Column::money(ALONE, "its pieces at the prices that it reaches by itself").totalled(),
    Column::money(SAVED, "what buying together saves").totalled(),
    Column::whole("unpriced lines", "its lines of which nobody says what they cost"),
];

/// The columns of what each rail needs.
pub const NEED_COLUMNS: [Column; 8] = [
    Column::text("rail", "what the design is called"),
    Column::text("used as", "the slot, or the resistors that are taken from a line of resistors"),
    Column::text("maker", "who makes the part"),
    Column::text("part", "its name"),
    Column::number("value", "", "as in the purchase list"),
    Column::text("unit", "the unit of the value"),
    Column::whole("pieces per board", "pieces on one board"),
    Column::whole(PIECES, "for all boards of the rail"),
];

/// The columns of the notes.
pub const NOTE_COLUMNS: [Column; 2] =
    [Column::text("kind", "what the note is about"), Column::text("note", "in words")];

/// The whole list as a document.
pub fn document(list: &PurchaseList) -> Document {
    Document {
        title: "Purchase list".to_owned(),
        tables: vec![lines(list), rails(list), needs(list), notes(list)],
    }
}

/// The lines alone.
pub fn lines(list: &PurchaseList) -> Table {
    let mut table = Table::new("Lines", &LINE_COLUMNS);
    table.currency.clone_from(&list.currency);
    table.rows = list.lines.iter().map(|line| line_row(line, list)).collect();
    table.totals = vec![(LINE_TOTAL, list.total.0)];
    table.tell_unpriced(list.unpriced);
    table
}

fn line_row(line: &LineRow, list: &PurchaseList) -> Vec<Cell> {
    let total =
        |total: crate::figure::Figure| Cell::Product { value: total.0, of: [PIECES, UNIT_PRICE] };
    vec![
        line.kind.into(),
        line.maker.as_str().into(),
        line.part.as_str().into(),
        line.value.into(),
        line.unit.into(),
        line.tolerance.into(),
        line.package.as_deref().into(),
        line.pieces.into(),
        line.price_quantity.into(),
        line.unit_price.into(),
        line.line_total.map_or(Cell::Blank, total),
        line.next_break.map(|b| b.from).into(),
        line.next_break.map(|b| b.unit_price).into(),
        line.stock.into(),
        line.short_by.into(),
        line.lead_weeks.into(),
        line.status.into(),
        needed_by(line, list).into(),
        remark(line).into(),
        line.source().into(),
    ]
}

/// `Tide gauge 12 V: 50; Mast 12 V: 25`.
fn needed_by(line: &LineRow, list: &PurchaseList) -> String {
    let of_rail = |of: &super::UseRow| format!("{}: {}", rail_name(list, of.rail), of.pieces);
    line.uses.iter().map(of_rail).collect::<Vec<_>>().join("; ")
}

/// What a rail is called in the list; of several of one name with the file.
fn rail_name(list: &PurchaseList, place: usize) -> String {
    let Some(rail) = list.rails.get(place) else { return String::new() };
    let same = list.rails.iter().filter(|other| other.rail == rail.rail).count();
    if same > 1 { format!("{} ({})", rail.rail, rail.file) } else { rail.rail.clone() }
}

/// Said of a line without a price.
const NO_PRICE: &str = "price unknown";
/// Said of a line whose stock does not reach.
const SHORT: &str = "stock does not reach";

fn remark(line: &LineRow) -> String {
    let no_price = line.unit_price.is_none().then_some(NO_PRICE);
    let short = line.short_by.map(|_| SHORT);
    no_price.into_iter().chain(short).collect::<Vec<_>>().join("; ")
}

fn rails(list: &PurchaseList) -> Table {
    let mut table = Table::new("Rails", &RAIL_COLUMNS);
    table.currency.clone_from(&list.currency);
    let row = |rail: &RailRow| -> Vec<Cell> {
        vec![
            rail.rail.as_str().into(),
            rail.file.as_str().into(),
            rail.sheet.as_str().into(),
            rail.answer.to_string().into(),
            rail.boards.into(),
            rail.cost_together.into(),
            rail.cost_alone.into(),
            rail.saved().into(),
            rail.unpriced.into(),
        ]
    };
    table.rows = list.rails.iter().map(row).collect();
    let sum = |of: fn(&RailRow) -> f64| exact_sum(list.rails.iter().map(of));
    table.totals = vec![
        (TOGETHER, sum(|rail| rail.cost_together.0)),
        (ALONE, sum(|rail| rail.cost_alone.0)),
        (SAVED, list.saved()),
    ];
    table
}

impl RailRow {
    /// What buying together saves; below 0 where a larger quantity costs more.
    pub fn saved(&self) -> f64 {
        exact_sum([self.cost_alone.0, -self.cost_together.0].into_iter())
    }
}

impl PurchaseList {
    /// What buying together saves over all rails.
    pub fn saved(&self) -> f64 {
        exact_sum(self.rails.iter().map(RailRow::saved))
    }
}

/// A sum of amounts, decimal.
fn exact_sum(amounts: impl Iterator<Item = f64>) -> f64 {
    use ::purchase::money::Money;
    amounts.filter_map(Money::new).sum::<Money>().amount()
}

fn needs(list: &PurchaseList) -> Table {
    let mut table = Table::new("Needs of the rails", &NEED_COLUMNS);
    for place in 0..list.rails.len() {
        for line in &list.lines {
            for of in line.uses.iter().filter(|of| of.rail == place) {
                table.rows.push(vec![
                    rail_name(list, place).into(),
                    of.places().into(),
                    line.maker.as_str().into(),
                    line.part.as_str().into(),
                    line.value.into(),
                    line.unit.into(),
                    of.pieces_per_board.into(),
                    of.pieces.into(),
                ]);
            }
        }
    }
    table
}

/// What a buyer should know before ordering, a kind and a sentence each.
pub(super) fn cautions(list: &PurchaseList) -> Vec<(&'static str, String)> {
    let mut told = Vec::new();
    for (place, rail) in list.rails.iter().enumerate() {
        let why = match rail.answer {
            Answer::Holds => continue,
            Answer::Fails => "a check or condition fails",
            Answer::Unproven => "a blank cell leaves checks open",
            Answer::Broken => "its files are at fault",
        };
        let name = rail_name(list, place);
        told.push((
            "design",
            format!("{name}: {why}; `railwright verify {}` says more", rail.file),
        ));
    }
    for line in &list.lines {
        let name = line.full_name();
        if line.unit_price.is_none() {
            let source = line.source();
            told.push((NO_PRICE, format!("{name}: {source} states no cost; not in the total")));
        }
        if let (Some(short), Some(stock)) = (line.short_by, line.stock) {
            let asked = line.price_quantity;
            let text = format!("{name}: {asked} needed, {stock} in stock, short by {short}");
            told.push((SHORT, text));
        }
    }
    // An article with several values says the same of each.
    told.dedup();
    told
}

impl LineRow {
    /// `maker/part`, or the part alone.
    pub fn full_name(&self) -> String {
        match self.maker.as_str() {
            "" => self.part.clone(),
            maker => format!("{maker}/{}", self.part),
        }
    }
}

fn notes(list: &PurchaseList) -> Table {
    let mut table = Table::new("Notes", &NOTE_COLUMNS);
    let mut say = |kind: &str, note: String| table.rows.push(vec![kind.into(), note.into()]);
    for (kind, note) in cautions(list) {
        say(kind, note);
    }
    say("prices", PRICES.to_owned());
    say("stock", STOCK.to_owned());
    if let Some(boards) = list.boards {
        say("boards", format!("{boards} of every rail, as asked for"));
    }
    for set in &list.set {
        say("set for this run", set.clone());
    }
    for (file, sha256) in &list.catalogs_sha256.0 {
        say("SHA-256", format!("{file}: {sha256}"));
    }
    table
}

const PRICES: &str = "Every price is that of the part's break at the pieces of all rails and values together. \
     Ask whether the shop counts the values of a line of resistors together.";
const STOCK: &str = "The stock of a line of resistors is that of all its values together, where the catalog states it.";
