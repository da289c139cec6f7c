//! Why a part is not on the list, or where it is.

use crate::cell::{CellCure, cell_cures};
use crate::change::{KeyChanges, changes};
use crate::check_set::CheckSet;
use crate::filled::{Cells, slots_of};
use crate::lever::Follows;
use crate::names::{Entry, State};
use crate::nothing::levers;
use crate::probe::{Admitted, Name, ShopMarket, keep_only, name_at};
use crate::survey::{Miss, Survey};
use catalog::{Kind, Shop};
use circuit::check::{Check, Finding};
use circuit::slot::Slot;
use eligible::{Eligible, eligible};
use select::SearchError;
use select::problem::Problem;
use select::ranking::{NO_SPREAD, shortlist};
use sheet::Sheet;

/// Rows of a list where nothing else is asked for.
pub const USUAL_ROWS: usize = 10;

/// Ranks beyond this are not counted out.
pub const MOST_RANKS: usize = 1_000;

/// At most so many of the nearest combinations are told.
const MOST_MISSES: usize = 3;

/// What a part's place on the list, or its absence, comes of.
#[derive(Debug, Clone)]
pub enum Reason {
    /// The sheet leaves the slot empty.
    SlotIsEmpty,
    /// It is of another polarity.
    Polarity(String),
    /// Needed cells of it are blank.
    Unproven(Vec<&'static str>),
    /// Rules of the sheet bar it: all that do.
    Barred(Vec<BarredBy>),
    /// It is among the first [`USUAL_ROWS`].
    Listed {
        /// The rank of its best candidate, from 1.
        rank: usize,
        /// Its best candidate.
        best: Box<Admitted>,
    },
    /// It is in candidates, but others come first.
    Outranked(Box<Outranked>),
    /// It is in no candidate.
    Infeasible(Box<Infeasible>),
}

/// A rule that bars a part.
#[derive(Debug, Clone, PartialEq)]
pub enum BarredBy {
    /// Its life-cycle word is not allowed.
    Status(&'static str),
    /// It is banned.
    Ban,
    /// Its slot is pinned to other parts.
    Pin,
    /// Fewer pieces are in stock than are needed; None: the catalog does not say.
    Stock(Option<f64>),
    /// The rail's temperatures leave it no resistance.
    NoResistance,
}

/// A part whose candidates are beaten.
#[derive(Debug, Clone)]
pub struct Outranked {
    /// The rank of its best candidate, from 1; None beyond [`MOST_RANKS`].
    pub rank: Option<usize>,
    /// Its best candidate.
    pub best: Admitted,
    /// The first of the list.
    pub first: Admitted,
    /// The last of the first [`USUAL_ROWS`].
    pub last: Admitted,
    /// How much less a board with it has to cost for its score to equal the last row's; None where
    /// cost does not count or nothing would be left of its price.
    pub cheaper_by: Option<f64>,
}

/// A part that is in no candidate.
#[derive(Debug, Clone)]
pub struct Infeasible {
    /// Checks of which each fails in every company.
    pub alone: Vec<Check>,
    /// Combinations with it that fail in fewest checks.
    pub nearest: Vec<NamedMiss>,
    /// What moving each key of the sheet by itself does.
    pub keys: Vec<KeyChanges>,
    /// Cells of the part that would let it in, whatever stands beside it.
    pub cells: Vec<CellCure>,
}

/// A combination that fails, by name.
#[derive(Debug, Clone, PartialEq)]
pub struct NamedMiss {
    /// By `Slot as usize`; None for no part.
    pub parts: [Option<Name>; Slot::COUNT],
    /// What fails.
    pub failures: Vec<Finding>,
}

impl NamedMiss {
    pub(crate) fn of(miss: &Miss, problem: &Problem<'_>) -> Self {
        let name = |slot: Slot| name_at(problem, slot, miss.places[slot as usize]? as usize);
        Self { parts: Slot::ALL.map(name), failures: miss.failures().copied().collect() }
    }
}

/// Why a row of a catalog is not on the list of a sheet, for each slot that it might fill.
///
/// # Errors
/// What the search gives up with.
pub fn why_not(
    entry: &Entry,
    eligible: &Eligible<'_>,
    problem: &Problem<'_>,
) -> Result<Vec<(Slot, Reason)>, SearchError> {
    slots_of(entry.kind)
        .iter()
        .map(|&slot| Ok((slot, in_slot(entry, slot, eligible, problem)?)))
        .collect()
}

fn in_slot(
    entry: &Entry,
    slot: Slot,
    rows: &Eligible<'_>,
    problem: &Problem<'_>,
) -> Result<Reason, SearchError> {
    let rail = problem.rail;
    let is_empty = match slot {
        Slot::Pot => !rail.is_adjustable(),
        Slot::Heatsink => !rail.chooses_heatsink(),
        _ => false,
    };
    if is_empty {
        return Ok(Reason::SlotIsEmpty);
    }
    match &entry.state {
        State::LeftOut(polarity) => return Ok(Reason::Polarity(polarity.clone())),
        State::Unproven(lacks) => return Ok(Reason::Unproven(lacks.clone())),
        State::Complete => {}
    }
    let is_it = |u: &&eligible::UnprovenPart<'_>| {
        u.kind == entry.kind && u.maker == entry.maker && u.part == entry.part
    };
    if let Some(unproven) = rows.unproven.iter().find(is_it) {
        return Ok(Reason::Unproven(unproven.lacks.clone()));
    }
    if !holds(rows, slot, entry) {
        return Ok(Reason::Barred(barred_by(entry, slot, rows)));
    }
    let mut pinned = problem.clone();
    keep_only(&mut pinned, slot, &entry.maker, &entry.part);
    match shortlist(&pinned, 1, &NO_SPREAD)?.first() {
        Some(best) => ranked(&Admitted::of(best, &pinned), problem),
        None => infeasible(entry, slot, rows, &pinned),
    }
}

/// The row may be chosen for the slot.
fn holds(rows: &Eligible<'_>, slot: Slot, entry: &Entry) -> bool {
    macro_rules! among {
        ($list:ident) => {
            rows.$list.iter().any(|r| r.file == entry.file && r.line == entry.line)
        };
    }
    match slot {
        Slot::Zener => among!(zeners),
        Slot::BiasLine => among!(bias_lines),
        Slot::Amplifier => among!(amplifiers),
        Slot::DividerLine => among!(divider_lines),
        Slot::Pot => among!(pots),
        Slot::Pass => among!(transistors),
        Slot::Heatsink => among!(heatsinks),
    }
}

/// Every rule that bars a row: those which by themselves, all others lifted, still do.
fn barred_by(entry: &Entry, slot: Slot, rows: &Eligible<'_>) -> Vec<BarredBy> {
    let (sheet, shop) = (rows.sheet, rows.shop);
    let lifted = {
        let mut sheet: Sheet = sheet.clone();
        sheet.parts.allow_status = circuit::status::Status::WORDS.map(str::to_owned).to_vec();
        sheet.parts.need_stock = false;
        sheet.parts.pins = Default::default();
        sheet.parts.bans = Vec::new();
        sheet
    };
    let still_barred = |sheet: &Sheet| {
        // Faults of names were told when the rows were sorted out first.
        !holds(&eligible(sheet, shop, true, &mut Vec::new()), slot, entry)
    };
    if still_barred(&lifted) {
        return vec![BarredBy::NoResistance];
    }
    let with = |keep: &dyn Fn(&mut Sheet)| {
        let mut only = lifted.clone();
        keep(&mut only);
        still_barred(&only)
    };
    let (status, stock) = facts(shop, entry);
    let mut barred = Vec::new();
    if with(&|only| only.parts.allow_status.clone_from(&sheet.parts.allow_status)) {
        barred.push(BarredBy::Status(status));
    }
    if with(&|only| only.parts.bans.clone_from(&sheet.parts.bans)) {
        barred.push(BarredBy::Ban);
    }
    if with(&|only| only.parts.pins.clone_from(&sheet.parts.pins)) {
        barred.push(BarredBy::Pin);
    }
    if with(&|only| only.parts.need_stock = sheet.parts.need_stock) {
        barred.push(BarredBy::Stock(stock));
    }
    barred
}

/// The life-cycle word and the stock of a row.
fn facts(shop: &Shop, entry: &Entry) -> (&'static str, Option<f64>) {
    macro_rules! of {
        ($catalog:ident) => {
            shop.$catalog
                .rows
                .iter()
                .find(|r| r.file == entry.file && r.line == entry.line)
                .map(|r| (r.status.name(), r.stock))
        };
    }
    let found = match entry.kind {
        Kind::Zeners => of!(zeners),
        Kind::Opamps => of!(opamps),
        Kind::Transistors => of!(transistors),
        Kind::Resistors => of!(resistors),
        Kind::Pots => of!(pots),
        Kind::Heatsinks => of!(heatsinks),
    };
    found.unwrap_or(("unknown", None))
}

/// Where the best candidate of a part stands.
fn ranked(best: &Admitted, problem: &Problem<'_>) -> Result<Reason, SearchError> {
    let list: Vec<Admitted> = shortlist(problem, MOST_RANKS, &NO_SPREAD)?
        .iter()
        .map(|candidate| Admitted::of(candidate, problem))
        .collect();
    let rank = list.iter().position(|row| row.parts == best.parts).map(|place| place + 1);
    if let Some(rank) = rank.filter(|rank| *rank <= USUAL_ROWS) {
        return Ok(Reason::Listed { rank, best: Box::new(best.clone()) });
    }
    let first = list.first().unwrap_or(best).clone();
    let last = list.get(USUAL_ROWS - 1).or(list.last()).unwrap_or(best).clone();
    let weight = problem.weights.cost;
    let cheaper_by = (weight > 0.0 && best.score > 0.0)
        .then(|| best.cost - best.cost * (last.score / best.score).powf(1.0 / weight));
    Ok(Reason::Outranked(Box::new(Outranked { rank, best: best.clone(), first, last, cheaper_by })))
}

fn infeasible(
    entry: &Entry,
    slot: Slot,
    rows: &Eligible<'_>,
    pinned: &Problem<'_>,
) -> Result<Reason, SearchError> {
    let market = ShopMarket {
        sheet: rows.sheet,
        shop: rows.shop,
        only: Some((slot, &entry.maker, &entry.part)),
    };
    let survey = Survey::new(pinned);
    let keys = changes(&market, Follows::of(rows.sheet), &levers(&market), &survey)?;
    let nearest = survey.nearest(MOST_MISSES);
    let in_all = nearest.iter().map(|miss| miss.failing).reduce(CheckSet::in_both);
    let alone = in_all.unwrap_or_default();
    let fails_always = |check: &Check| survey.holding(CheckSet::of(&[*check])).is_none();
    let cells = Cells::of(rows.shop, entry.kind, entry.file, entry.line);
    let boards = rows.sheet.boards;
    let cured = cell_cures(&cells, entry.kind, slot, pinned, boards);
    Ok(Reason::Infeasible(Box::new(Infeasible {
        alone: alone.iter().filter(fails_always).collect(),
        nearest: nearest.iter().map(|miss| NamedMiss::of(miss, pinned)).collect(),
        keys,
        cells: cured,
    })))
}
