//! What is to be bought, as typed values: order lines of one rail, and the list over several rails.
//!
//! | module | what it holds |
//! |---|---|
//! | [`lines`] | the table of order lines that goes with a shortlist or a proof |
//! | [`list`] | the joint list as tables, and with them as workbook, Markdown and CSV |
//! | [`screen`] | it on a terminal |
//!
//! # JSON, format 1
//!
//! [`PurchaseList`] is written as it stands. Money is a number in `currency`; what nobody states is null.
//!
//! * `boards`: what `--boards` asks for, for every rail; null where each rail has its own.
//! * `total`, `unpriced` (lines of which nobody says what they cost), `short` (lines whose stock does not
//!   reach).
//! * `rails`: `rail`, `file`, `sheet`, `answer` (as `verify` gives it), `boards`, `cost_together`,
//!   `cost_alone`, `unpriced`.
//! * `lines`: `kind`, `maker`, `part`, `value`, `unit`, `tolerance`, `package`, `pieces`,
//!   `price_quantity`, `unit_price`, `line_total`, `next_break` (`from`, `unit_price`), `stock`,
//!   `short_by`, `lead_weeks`, `status`, `file`, `line`, and `uses`: `rail` (its place in `rails`, from
//!   0), `places`, `pieces_per_board`, `pieces`.

pub mod lines;
pub mod list;
pub mod screen;

use crate::figure::{Figure, Pairs};
use crate::proof::Answer;
use ::purchase::money::Money;
use ::purchase::order::{Line, Order, Supply, Use};
use catalog::Kind;
use circuit::slot::Slot;
use design::keys::Resistor;
use serde::Serialize;

/// The format that these types write.
pub const FORMAT: u32 = 1;

/// What is to be bought for several rails.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct PurchaseList {
    /// [`FORMAT`].
    pub format: u32,
    /// The currency of the shop.
    pub currency: Option<String>,
    /// Boards of every rail, where the user asks for a number.
    pub boards: Option<u64>,
    /// What `--set` changed.
    pub set: Vec<String>,
    /// Hashes of the catalogs, and of the shop file where there is one.
    pub catalogs_sha256: Pairs<String, String>,
    /// The sum of the line totals that are known.
    pub total: Figure,
    /// Lines of which nobody says what they cost.
    pub unpriced: usize,
    /// Lines whose stock does not reach.
    pub short: usize,
    /// The rails, in the order in which their designs were named.
    pub rails: Vec<RailRow>,
    /// The lines, sorted by kind, maker, part and value.
    pub lines: Vec<LineRow>,
}

/// A rail of the list.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct RailRow {
    /// What its design is called.
    pub rail: String,
    /// The design's file.
    pub file: String,
    /// Its rail sheet.
    pub sheet: String,
    /// What its checks come to.
    pub answer: Answer,
    /// Boards to build.
    pub boards: u64,
    /// Its pieces at the prices that all rails reach together.
    pub cost_together: Figure,
    /// Its pieces at the prices that it reaches by itself.
    pub cost_alone: Figure,
    /// Its lines of which nobody says what they cost.
    pub unpriced: usize,
}

/// An order line.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct LineRow {
    /// What it is: `zener`, `amplifier`, `pass transistor`, `resistor`, `pot`, `heatsink`.
    pub kind: &'static str,
    /// The maker; may be empty.
    pub maker: String,
    /// The part.
    pub part: String,
    /// The figure by which it is ordered.
    pub value: Option<Figure>,
    /// The unit of the value.
    pub unit: Option<&'static str>,
    /// Tolerance as a fraction.
    pub tolerance: Option<Figure>,
    /// The package.
    pub package: Option<String>,
    /// Pieces in all.
    pub pieces: u64,
    /// Pieces of the part in all, whatever their value: the quantity that sets the price.
    pub price_quantity: u64,
    /// The price of one piece at that quantity.
    pub unit_price: Option<Figure>,
    /// What the line costs.
    pub line_total: Option<Figure>,
    /// Where the price changes next.
    pub next_break: Option<Break>,
    /// Pieces in stock.
    pub stock: Option<Figure>,
    /// Pieces that the stock lacks; None where it reaches or nobody says.
    pub short_by: Option<Figure>,
    /// Weeks until an order arrives.
    pub lead_weeks: Option<Figure>,
    /// The life-cycle word; None where the row was not read so far.
    pub status: Option<&'static str>,
    /// The file that describes the part.
    pub file: String,
    /// Its line.
    pub line: u32,
    /// Which rail needs how many.
    pub uses: Vec<UseRow>,
}

/// A price break.
#[derive(Debug, Clone, Copy, PartialEq, Serialize)]
pub struct Break {
    /// From this quantity on …
    pub from: u64,
    /// … one piece costs this.
    pub unit_price: Figure,
}

/// What a rail needs of a line.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct UseRow {
    /// The rail, by its place in the list.
    pub rail: usize,
    /// Where the pieces go on a board: `zener`, `RZ`, `RF`.
    pub places: Vec<&'static str>,
    /// Pieces of one board.
    pub pieces_per_board: u64,
    /// Pieces for all its boards.
    pub pieces: u64,
}

/// A rail with its design, as the list shows it.
#[derive(Debug, Clone, PartialEq)]
pub struct Rail {
    /// What its design is called.
    pub name: String,
    /// The design's file.
    pub file: String,
    /// Its rail sheet.
    pub sheet: String,
    /// What its checks come to.
    pub answer: Answer,
    /// Boards to build.
    pub boards: u64,
}

/// What all rails of a list share.
#[derive(Debug, Clone, PartialEq)]
pub struct Frame {
    /// The currency of the shop.
    pub currency: Option<String>,
    /// Boards of every rail, where the user asks for a number.
    pub boards: Option<u64>,
    /// What `--set` changed.
    pub set: Vec<String>,
    /// Hashes of the catalogs, and of the shop file where there is one.
    pub catalogs_sha256: Pairs<String, String>,
}

impl PurchaseList {
    /// Tells an order; `rails` are in the order of its needs.
    pub fn new(frame: Frame, order: &Order<'_>, rails: Vec<Rail>) -> Self {
        let Frame { currency, boards, set, catalogs_sha256 } = frame;
        let lines: Vec<LineRow> = order.lines.iter().map(LineRow::new).collect();
        Self {
            format: FORMAT,
            currency,
            boards,
            set,
            catalogs_sha256,
            total: Figure(order.total.amount()),
            unpriced: order.unpriced(),
            short: lines.iter().filter(|line| line.short_by.is_some()).count(),
            rails: rails
                .into_iter()
                .zip(&order.rails)
                .map(|(rail, cost)| RailRow {
                    rail: rail.name,
                    file: rail.file,
                    sheet: rail.sheet,
                    answer: rail.answer,
                    boards: rail.boards,
                    cost_together: Figure(cost.together.amount()),
                    cost_alone: Figure(cost.alone.amount()),
                    unpriced: cost.unpriced,
                })
                .collect(),
            lines,
        }
    }
}

impl LineRow {
    /// A line in the words of outputs.
    pub fn new(line: &Line<'_>) -> Self {
        let article = &line.article;
        let money = |money: &Option<Money>| money.as_ref().map(|m| Figure(m.amount()));
        Self {
            kind: kind_word(article.kind),
            maker: article.maker.to_owned(),
            part: article.part.to_owned(),
            value: line.nominal.map(|n| Figure(n.value)),
            unit: line.nominal.map(|n| n.unit),
            tolerance: article.tolerance.map(Figure),
            package: article.package.map(str::to_owned),
            pieces: line.pieces,
            price_quantity: line.article_pieces,
            unit_price: money(&line.unit_price),
            line_total: money(&line.total),
            next_break: line
                .next_break
                .as_ref()
                .map(|(from, price)| Break { from: *from, unit_price: Figure(price.amount()) }),
            stock: article.stock.map(Figure),
            short_by: match line.supply {
                Supply::ShortBy(pieces) => Some(Figure(pieces)),
                Supply::Enough | Supply::Unknown => None,
            },
            lead_weeks: article.lead_weeks.map(Figure),
            status: article.status.map(|status| status.name()),
            file: article.file.to_owned(),
            line: article.line,
            uses: line.uses.iter().map(UseRow::new).collect(),
        }
    }

    /// `zeners.csv:12`.
    fn source(&self) -> String {
        format!("{}:{}", self.file, self.line)
    }
}

impl UseRow {
    fn new(of: &Use) -> Self {
        Self {
            rail: of.rail,
            places: of.places.iter().map(|(slot, resistor)| place(*slot, *resistor)).collect(),
            pieces_per_board: of.per_board(),
            pieces: of.pieces,
        }
    }

    /// `RF, RI`.
    fn places(&self) -> String {
        self.places.join(", ")
    }
}

/// Where a piece goes, as a drawing of the circuit calls it.
fn place(slot: Slot, resistor: Option<Resistor>) -> &'static str {
    match resistor {
        Some(Resistor::Rz) => "RZ",
        Some(Resistor::Rf) => "RF",
        Some(Resistor::Ri) => "RI",
        Some(Resistor::Rx) => "RX",
        None => slot.name(),
    }
}

fn kind_word(kind: Kind) -> &'static str {
    match kind {
        Kind::Zeners => "zener",
        Kind::Opamps => "amplifier",
        Kind::Transistors => "pass transistor",
        Kind::Resistors => "resistor",
        Kind::Pots => "pot",
        Kind::Heatsinks => "heatsink",
    }
}

/// The text of a JSON file: indented, ending in a line break.
///
/// # Errors
/// As serde_json does; values of this crate give it no reason to.
pub fn json(list: &PurchaseList) -> Result<Vec<u8>, serde_json::Error> {
    let mut text = serde_json::to_vec_pretty(list)?;
    text.push(b'\n');
    Ok(text)
}
