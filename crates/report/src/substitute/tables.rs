//! A substitution as tables.

use super::fit::{Fit, Reading};
use super::mend::{Level, Mend, PartChange, ValueChange};
use super::{Substitution, slot_words};
use crate::figure::Figure;
use crate::table::{Cell, Column, Document, Table};
use ::substitute::change::Board;
use circuit::slot::Slot;
use quantity::notation::resistance;

/// The columns of the replacements.
pub const REPLACEMENTS: [Column; 22] = [
    Column::whole("rank", "place in the order of changes"),
    Column::text("goes in", "what replaces the part that is gone"),
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
    Column::text("level", "nothing, values or parts: what changes beside the replacement"),
    Column::whole("further parts", "parts that change beside the replacement"),
    Column::whole("other packages", "changed parts not known to have the package of before"),
    Column::whole(
        "other pinouts",
        "changed parts of the same package, pinout not known to be the same",
    ),
    Column::whole("values", "resistors of another value"),
    Column::number("score", "", "cost, loss and stress with the weights of the sheet"),
    Column::share("efficiency", "with nominal parts at the nominal feed"),
    Column::text("binding damage", "the damage check used most"),
    Column::text("binding function", "the function check used most"),
    Column::number("junction", "°C", "junction of the transistor at the hottest load"),
];

/// The replacements as a table.
pub fn replacements(of: &Substitution) -> Table {
    let mut table = Table::new("Replacements", &REPLACEMENTS);
    table.currency.clone_from(&of.currency);
    table.rows = of.replacements.iter().map(row).collect();
    table
}

fn row(mend: &Mend) -> Vec<Cell> {
    let mut row = replacement(mend);
    row.extend([
        level_word(mend.level).into(),
        usize::from(mend.extent.further_parts).into(),
        usize::from(mend.extent.other_packages).into(),
        usize::from(mend.extent.other_pinouts).into(),
        usize::from(mend.extent.values).into(),
        mend.score.into(),
        mend.after.efficiency.into(),
        mend.after.binding_damage.into(),
        mend.after.binding_function.into(),
        mend.after.junction_c.into(),
    ]);
    row
}

/// What a table says first of a replacement, here and where many designs are told of.
pub(crate) fn replacement(mend: &Mend) -> Vec<Cell> {
    let first = mend.replacing().next();
    vec![
        mend.rank.into(),
        goes_in(mend).into(),
        also_changes(mend).into(),
        first.map(|part| board_words(part.on_board)).into(),
        money(mend.after.cost),
        mend.after.margin.into(),
        mend.after.slack.into(),
        first.and_then(|part| part.stock).into(),
        first.and_then(|part| part.lead_weeks).into(),
        first.and_then(|part| part.status).into(),
        troubles(mend).join("; ").into(),
        same_numbers(mend).join("; ").into(),
    ]
}

/// A sum of money without what adding up left beyond the tenth digit.
pub(crate) fn money(figure: Option<Figure>) -> Cell {
    figure.map(|f| quantity::digits::rounded(f.0)).into()
}

/// The word of a level, as in JSON.
pub(crate) fn level_word(level: Level) -> &'static str {
    match level {
        Level::Nothing => "nothing",
        Level::Values => "values",
        Level::Parts => "parts",
    }
}

/// What replaces what is gone: each part once.
pub(crate) fn goes_in(mend: &Mend) -> String {
    let mut names: Vec<&str> = Vec::new();
    for part in mend.replacing() {
        let name = part.is.as_deref().unwrap_or("no heatsink");
        if !names.contains(&name) {
            names.push(name);
        }
    }
    names.join(" + ")
}

/// The list for a terminal: makers are left out where the part before has another number.
pub(crate) fn narrow(of: &Substitution) -> Table {
    let mut table = replacements(of);
    let (goes_in, also) = (table.place("goes in"), table.place("also changes"));
    for (row, mend) in table.rows.iter_mut().zip(&of.replacements) {
        for (place, text) in [(goes_in, short_goes_in(mend)), (also, short_also(mend))] {
            if let Some(cell) = place.and_then(|place| row.get_mut(place)) {
                *cell = text.into();
            }
        }
    }
    table
}

/// A part without its maker, unless it bears the number of the part before.
fn short(part: &PartChange) -> &str {
    let name = part.is.as_deref().unwrap_or("none");
    if part.same_number_differs.is_some() {
        return name;
    }
    name.split_once('/').map_or(name, |(_, part)| part)
}

/// As [`goes_in`], in short.
pub(crate) fn short_goes_in(mend: &Mend) -> String {
    let mut names: Vec<&str> = mend.replacing().map(short).collect();
    names.dedup();
    names.join(" + ")
}

/// As [`also_changes`], in short.
pub(crate) fn short_also(mend: &Mend) -> String {
    let parts = mend.further().map(|part| short(part).to_owned());
    parts.chain(mend.values.iter().map(value_words)).collect::<Vec<_>>().join(", ")
}

/// What changes beside it, in words; empty where nothing does.
pub(crate) fn also_changes(mend: &Mend) -> String {
    let parts = mend.further().map(|part| {
        let slot = Slot::named(part.slot).map_or(part.slot, slot_words);
        let is = part.is.as_deref().unwrap_or("none");
        format!("{slot} {is} ({})", board_words(part.on_board))
    });
    parts.chain(mend.values.iter().map(value_words)).collect::<Vec<_>>().join(", ")
}

/// `RZ 680 → 1k`.
pub(crate) fn value_words(change: &ValueChange) -> String {
    let symbol = change.key.strip_suffix("_ohm").unwrap_or(change.key).to_uppercase();
    let (was, is) = (change.was.0, change.is.0);
    format!("{symbol} {} → {}", ohms(was), ohms(is))
}

fn ohms(ohm: f64) -> String {
    if ohm == 0.0 { "link".to_owned() } else { resistance(ohm) }
}

/// What a part does to the board, in words.
pub(crate) fn board_words(board: Board) -> &'static str {
    match board {
        Board::Same => "same",
        Board::OtherPinout => "other pinout",
        Board::PinoutUnknown => "pinout unknown",
        Board::OtherPackage => "other package",
        Board::Unknown => "unknown",
        Board::Added => "added",
        Board::Removed => "removed",
    }
}

/// The same trouble again, with the part that has it.
pub(crate) fn troubles(mend: &Mend) -> Vec<String> {
    let of = |part: &PartChange| {
        let name = part.is.clone().unwrap_or_default();
        (!part.trouble.is_empty()).then(|| format!("{name}: {}", part.trouble.join(", ")))
    };
    let mut list: Vec<String> = mend.parts.iter().filter_map(of).collect();
    list.dedup();
    list
}

/// Other makers' parts of the same number, with what differs.
pub(crate) fn same_numbers(mend: &Mend) -> Vec<String> {
    let of = |part: &PartChange| {
        let differs = part.same_number_differs.as_ref()?;
        let cell = |cell: &Option<String>| cell.clone().unwrap_or_else(|| "blank".to_owned());
        let columns: Vec<String> = differs
            .iter()
            .map(|d| format!("{} {} for {}", d.column, cell(&d.is), cell(&d.was)))
            .collect();
        let name = part.is.clone().unwrap_or_default();
        Some(match columns.as_slice() {
            [] => format!("{name} has the number of the part before, and the same figures"),
            columns => format!(
                "{name} has the number of the part before, but its sheet says {}",
                columns.join(", ")
            ),
        })
    };
    let mut list: Vec<String> = mend.parts.iter().filter_map(of).collect();
    list.dedup();
    list
}

/// The columns of checks before and after.
pub const CHECKS: [Column; 9] = [
    Column::text("check", "name of the check"),
    Column::text("kind", "damage or function"),
    Column::number("used before", "", "asked/allowed as built"),
    Column::number("used after", "", "asked/allowed with the change"),
    Column::text("note", "binds, moved, fails"),
    Column::number("asked before", "", "what is asked as built, in the unit"),
    Column::number("allowed before", "", "what is allowed as built"),
    Column::number("asked after", "", "what is asked with the change"),
    Column::number("allowed after", "", "what is allowed with the change"),
];

/// Every check before and after.
pub fn checks(before: Option<&Fit>, after: &Fit) -> Table {
    let mut table = Table::new("Checks", &CHECKS);
    table.rows = after
        .checks
        .iter()
        .map(|is| {
            let was = before.and_then(|fit| fit.check(is.name));
            vec![
                format!("{} ({})", is.name, is.unit).into(),
                is.kind.into(),
                was.map(|was| was.utilisation).into(),
                is.utilisation.into(),
                notes(before, after, is.name).join(", ").into(),
                was.map(|was| was.asked).into(),
                was.map(|was| was.allowed).into(),
                is.asked.into(),
                is.allowed.into(),
            ]
        })
        .collect();
    table
}

/// What is to be said of a check.
fn notes(before: Option<&Fit>, after: &Fit, name: &str) -> Vec<&'static str> {
    let is = after.check(name);
    let was = before.and_then(|fit| fit.check(name));
    let mut notes = Vec::new();
    if is.is_some_and(|is| !super::fit::row_holds(is)) {
        notes.push("fails");
    }
    if after.is_bound_by(name) {
        notes.push("binds");
    } else if before.is_some_and(|fit| fit.is_bound_by(name)) {
        notes.push("bound before");
    }
    if let (Some(is), Some(was)) = (is, was) {
        match quantity::digits::compare(is.utilisation.0, was.utilisation.0) {
            std::cmp::Ordering::Greater => notes.push("harder"),
            std::cmp::Ordering::Less => notes.push("easier"),
            std::cmp::Ordering::Equal => {}
        }
    }
    notes
}

/// The columns of figures before and after.
pub const FIGURES: [Column; 3] = [
    Column::text("figure", "what it is"),
    Column::text("before", "as built"),
    Column::text("after", "with the change"),
];

/// Output, heat, efficiency and cost before and after.
pub fn figures(before: Option<&Fit>, after: &Fit, currency: Option<&str>) -> Table {
    let mut table = Table::new("Figures", &FIGURES);
    let mut add = |name: &str, of: &dyn Fn(&Fit) -> String| {
        let was = before.map(of).unwrap_or_else(|| "not known".to_owned());
        table.rows.push(vec![name.into(), was.into(), of(after).into()]);
    };
    let volts = |v: f64| quantity::notation::engineering(v, "V", 4);
    add("output", &|fit| match fit.output {
        crate::shortlist::Output::Fixed { low_v, nominal_v, high_v } => {
            format!("{} to {}, nominal {}", volts(low_v.0), volts(high_v.0), volts(nominal_v.0))
        }
        crate::shortlist::Output::Adjustable { low_v, floor_v, reach_v, top_v } => format!(
            "low end {} to {}, high end {} to {}",
            volts(low_v.0),
            volts(floor_v.0),
            volts(reach_v.0),
            volts(top_v.0)
        ),
    });
    add("lowest feed", &|fit| volts(fit.lowest_feed_v.0));
    add("heat of the transistor", &|fit| {
        format!(
            "{}, case {:.1} °C, junction {:.1} °C",
            quantity::notation::engineering(fit.heat_w.0, "W", 4),
            fit.case_c.0,
            fit.junction_c.0
        )
    });
    add("efficiency", &|fit| format!("{:.1} %", fit.efficiency.0 * 100.0));
    add("margin", &|fit| {
        format!("{:.1} % ({})", fit.margin.0 * 100.0, fit.binding_damage.unwrap_or("-"))
    });
    add("slack", &|fit| {
        format!("{:.1} % ({})", fit.slack.0 * 100.0, fit.binding_function.unwrap_or("-"))
    });
    add("cost of a board", &|fit| match (fit.cost, currency) {
        (None, _) => "not known".to_owned(),
        (Some(cost), Some(currency)) => format!("{:.3} {currency}", cost.0),
        (Some(cost), None) => format!("{:.3}", cost.0),
    });
    table
}

/// The columns of what changes.
pub const CHANGES: [Column; 10] = [
    Column::text("place", "slot or resistor"),
    Column::text("was", "what stood there"),
    Column::text("is", "what goes in"),
    Column::text("board", "what that does to the board"),
    Column::money("price", "of one piece for all boards"),
    Column::whole("stock", "pieces in stock"),
    Column::number("weeks", "", "weeks until an order arrives"),
    Column::text("status", "life-cycle word"),
    Column::text("trouble", "the same trouble again"),
    Column::text("source", "file and line that describe the part"),
];

/// What changes, part by part and resistor by resistor.
pub fn changes(mend: &Mend, currency: Option<&String>) -> Table {
    let mut table = Table::new("Changes", &CHANGES);
    table.currency = currency.cloned();
    let source = |part: &PartChange| match (&part.file, part.line) {
        (Some(file), Some(line)) => format!("{file}:{line}"),
        _ => String::new(),
    };
    for part in &mend.parts {
        table.rows.push(vec![
            Slot::named(part.slot).map_or(part.slot, slot_words).into(),
            part.was.clone().unwrap_or_else(|| "none".to_owned()).into(),
            part.is.clone().unwrap_or_else(|| "none".to_owned()).into(),
            board_words(part.on_board).into(),
            money(part.price),
            part.stock.into(),
            part.lead_weeks.into(),
            part.status.into(),
            part.trouble.join(", ").into(),
            source(part).into(),
        ]);
    }
    for value in &mend.values {
        let symbol = value.key.strip_suffix("_ohm").unwrap_or(value.key).to_uppercase();
        let mut row: Vec<Cell> =
            vec![symbol.into(), ohms(value.was.0).into(), ohms(value.is.0).into()];
        row.resize(CHANGES.len(), Cell::Blank);
        table.rows.push(row);
    }
    table
}

/// Room to write by hand.
pub(crate) const ROOM: &str = "............";

/// The columns of what to measure.
pub const READINGS: [Column; 6] = [
    Column::text("measure", "what is measured, and where"),
    Column::text("when", "under which conditions"),
    Column::number("at least", "", "limit at all corners"),
    Column::number("at most", "", "limit at all corners"),
    Column::text("unit", "unit of the limits"),
    Column::text("measured", "room for the reading"),
];

/// What to measure on the bench, with the limits that all corners leave.
pub fn readings(readings: &[Reading]) -> Table {
    let mut table = Table::new("Bench test", &READINGS);
    table.rows = readings
        .iter()
        .map(|r| {
            vec![
                r.what.into(),
                r.when.into(),
                r.least.into(),
                r.most.into(),
                r.unit.into(),
                ROOM.into(),
            ]
        })
        .collect();
    table
}

/// The whole as a document: the list, then what changes with the first, and its checks.
pub fn document(of: &Substitution) -> Document {
    let mut tables = vec![replacements(of)];
    if let Some(first) = of.replacements.first() {
        tables.push(changes(first, of.currency.as_ref()));
        tables.push(checks(of.before.as_ref(), &first.after));
        tables.push(figures(of.before.as_ref(), &first.after, of.currency.as_deref()));
        tables.push(readings(&first.after.bench));
    }
    Document { title: of.name.clone(), tables }
}
