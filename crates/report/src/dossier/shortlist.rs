//! A shortlist as tables: the ranking, what to order for one candidate, notes, every check.

use super::left;
use super::notes::Notes;
use crate::purchase::lines::{self, RailLines};
use crate::shortlist::{Candidate, Shortlist, Unproven};
use crate::table::{Cell, Column, Document, Table};
use circuit::slot::Slot;

/// The columns of the ranking that come before the parts.
const MERITS: [Column; 10] = [
    Column::whole("rank", "the number of the row"),
    Column::text("id", "made from parts and values alone"),
    Column::number("score", "", "ratio to the first row's; less is better"),
    Column::money("cost", "of one board, at the prices that as many pieces as boards reach"),
    Column::share("efficiency", "at the nominal feed and full load"),
    Column::number("loss", "", "watts lost for each watt delivered"),
    Column::share("margin", "1 − the greatest utilisation of a damage check"),
    Column::share("slack", "1 − the greatest utilisation of a function check"),
    Column::text("set margin by", "the damage check used most"),
    Column::text("set slack by", "the function check used most"),
];

/// The parts and values.
const CHOICES: [Column; 11] = [
    Column::text("zener", "`maker/part`"),
    Column::text("bias line", "the line that RZ is taken from"),
    Column::text("amplifier", "`maker/part`"),
    Column::text("divider line", "the line that RF, RX and RI are taken from"),
    Column::text("pot", "of an adjustable output"),
    Column::text("pass", "`maker/part`"),
    Column::text("heatsink", "`maker/part`; blank: unmounted, or the sheet's own sink"),
    Column::number("RZ", "Ω", "bias resistor"),
    Column::number("RF", "Ω", "of a fixed output; 0 for a link"),
    Column::number("RI", "Ω", "from the divider node to ground"),
    Column::number("RX", "Ω", "fixed part of an adjustable output; 0 for a link"),
];

/// The output of a fixed rail.
const FIXED: [Column; 3] = [
    Column::number("output low", "V", "fixed output: the lowest that a corner gives"),
    Column::number("output nominal", "V", "fixed output: with nominal parts"),
    Column::number("output high", "V", "fixed output: the highest"),
];

/// The output of an adjustable rail.
const ADJUSTABLE: [Column; 4] = [
    Column::number("output low", "V", "adjustable output: the lowest that the knob may give"),
    Column::number("output floor", "V", "adjustable output: it always comes down to this"),
    Column::number("output reach", "V", "adjustable output: it always comes up to this"),
    Column::number("output top", "V", "adjustable output: the highest that the knob may give"),
];

/// What comes after the output.
const DESIGNERS: [Column; 3] = [
    Column::number("lowest feed", "V", "with headroom for everything"),
    Column::number(
        "least gain",
        "",
        "current gain of the transistor with which the amplifier drives full load",
    ),
    Column::text("leans on", "stand-ins for blank cells, and checks that blank cells leave out"),
];

/// The columns of the checks.
pub const CHECK_COLUMNS: [Column; 9] = [
    Column::whole("rank", "the candidate"),
    Column::text("id", "the candidate's id"),
    Column::text("check", "as on the page of the model"),
    Column::text(
        "kind",
        "`damage`: past the limit a part is destroyed or ages; `function`: the rail fails to do its work",
    ),
    Column::number("asked", "", "in the unit of the row"),
    Column::number("allowed", "", "likewise"),
    Column::text("unit", "of asked and allowed"),
    Column::share("utilisation", "asked/allowed; the check holds up to 100 %"),
    Column::number("left", "", "allowed − asked, in the unit of the row"),
];

/// Every column that a ranking may have, for the documentation.
pub fn ranking_columns() -> Vec<Column> {
    let output = FIXED.into_iter().chain(ADJUSTABLE);
    let unlike = output.filter(|c| c.heading != "output low" || c.meaning.starts_with("fixed"));
    MERITS.into_iter().chain(CHOICES).chain(unlike).chain(DESIGNERS).collect()
}

/// A shortlist with the order lines of one of its candidates; None where the list is empty.
pub fn document(list: &Shortlist<'_>, order: Option<&Ordered<'_>>) -> Document {
    let lines: Vec<RailLines> = order.map(|order| order.lines.clone()).into_iter().collect();
    Document {
        title: list.rail.to_owned(),
        tables: vec![
            ranking(list),
            lines::table(&lines, list.currency),
            notes(list, order.map(|order| order.candidate)),
            checks(list),
        ],
    }
}

/// The candidate that order lines are for.
#[derive(Debug, Clone)]
pub struct Ordered<'a> {
    /// The candidate.
    pub candidate: &'a Candidate<'a>,
    /// Its order lines.
    pub lines: RailLines,
}

fn ranking(list: &Shortlist<'_>) -> Table {
    let output = if list.sheet.rail.is_adjustable() { &ADJUSTABLE[..] } else { &FIXED };
    let columns: Vec<Column> =
        MERITS.iter().chain(&CHOICES).chain(output).chain(&DESIGNERS).copied().collect();
    let mut table = Table::new("Ranking", &columns);
    table.currency = list.currency.map(str::to_owned);
    table.rows = list.candidates.iter().map(ranking_row).collect();
    table
}

fn ranking_row(candidate: &Candidate<'_>) -> Vec<Cell> {
    let c = candidate;
    let mut row: Vec<Cell> = vec![
        c.rank.into(),
        c.id.as_str().into(),
        c.score.into(),
        c.cost.into(),
        c.efficiency.into(),
        c.loss.into(),
        c.margin.into(),
        c.slack.into(),
        c.binding.damage.into(),
        c.binding.function.into(),
    ];
    row.extend(Slot::ALL.map(|slot| {
        let part = c.slot(slot).and_then(|row| Some(full_name(row.maker?, row.part?)));
        Cell::from(part)
    }));
    row.extend(c.values.named().map(|(_, ohm)| Cell::from(ohm)));
    row.extend(c.output.figures().into_iter().map(Cell::from));
    row.extend([c.lowest_feed_v.into(), c.least_gain.into(), c.assumed.join("; ").into()]);
    row
}

fn full_name(maker: &str, part: &str) -> String {
    if maker.is_empty() { part.to_owned() } else { format!("{maker}/{part}") }
}

fn checks(list: &Shortlist<'_>) -> Table {
    let mut table = Table::new("Checks", &CHECK_COLUMNS);
    for candidate in &list.candidates {
        table.rows.extend(candidate.checks.iter().map(|check| -> Vec<Cell> {
            vec![
                candidate.rank.into(),
                candidate.id.as_str().into(),
                check.name.into(),
                check.kind.into(),
                check.asked.into(),
                check.allowed.into(),
                check.unit.into(),
                check.utilisation.into(),
                left(check.asked, check.allowed),
            ]
        }));
    }
    table
}

fn notes(list: &Shortlist<'_>, ordered: Option<&Candidate<'_>>) -> Table {
    let mut notes = Notes::new();
    let boards = if list.boards == 1 { "board" } else { "boards" };
    match ordered {
        Some(c) => {
            let note = format!("for candidate {} ({}), {} {boards}", c.rank, c.id, list.boards);
            notes.say("", "order lines", note);
        }
        None => notes.say("", "order lines", "none: no set of parts holds"),
    }
    let combinations = &list.combinations;
    notes.say("", "counted", format!("{} combinations covered", combinations.covered));
    if let Some(feasible) = &combinations.feasible {
        notes.say("", "counted", format!("{feasible} of them hold"));
    }
    for (to, count) in combinations.lost.iter().flat_map(|lost| &lost.0) {
        notes.say("", "counted", format!("{count} lost first to {to}"));
    }
    notes.say_each("", "set for this run", list.set);
    notes.say_each("", "assumed", &list.assumed);
    for candidate in &list.candidates {
        let about = format!("{} ({})", candidate.rank, candidate.id);
        notes.say_each(&about, "assumed", &candidate.assumed);
    }
    notes.say_each("", "not checked", &list.not_checked);
    for part in &list.unproven {
        let Unproven { file, line, maker, part, lacks } = part;
        let name = full_name(maker, part);
        let note = format!("{file}:{line}: {name} lacks {}; never chosen", lacks.join(", "));
        notes.say("", "unproven part", note);
    }
    notes.say_each("", "caution", &list.cautions);
    notes.say("", "SHA-256", format!("rail sheet: {}", list.sheet_sha256.hex()));
    for (file, hash) in &list.catalogs_sha256.0 {
        notes.say("", "SHA-256", format!("{file}: {}", hash.hex()));
    }
    notes.into_table()
}
