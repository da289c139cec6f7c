//! Why a part is not on the list, told in words.

use super::words::{self, Currency, INDENT};
use crate::look::{Look, grouped};
use catalog::Shop;
use circuit::slot::Slot;
use quantity::digits::rounded;
use reasons::names::Entry;
use reasons::part::{BarredBy, Infeasible, MOST_RANKS, Outranked, Reason, USUAL_ROWS};
use reasons::probe::{Admitted, Name};
use sheet::Sheet;

/// Why a row of a catalog is not on the list, for each slot that it might fill.
pub fn part(
    entry: &Entry,
    reasons: &[(Slot, Reason)],
    sheet: &Sheet,
    shop: &Shop,
    look: &Look,
) -> String {
    let name = Name { maker: entry.maker.clone(), part: entry.part.clone() };
    let file = eligible::file_name(shop, entry.kind, entry.file);
    let heading = format!("{} ({file}:{})", words::full_name(&name), entry.line);
    let mut text = format!("{}\n", look.heading(&heading));
    for (slot, reason) in reasons {
        text += &in_slot(*slot, reason, sheet, look);
    }
    text
}

fn in_slot(slot: Slot, reason: &Reason, sheet: &Sheet, look: &Look) -> String {
    let chooses_sink = sheet.rail.chooses_heatsink();
    let currency = Currency(sheet.currency.as_deref());
    let candidate = |admitted: &Admitted| words::candidate(admitted, chooses_sink, &currency);
    let says =
        |what: &str| look.paragraph(&format!("As {}: {what}", slot.name()), INDENT, 2 * INDENT);
    match reason {
        Reason::SlotIsEmpty => says("the sheet leaves this slot empty."),
        Reason::Polarity(polarity) => {
            says(&format!("it is {polarity}; the circuit takes npn transistors alone."))
        }
        Reason::Unproven(lacks) => says(&format!(
            "unproven, for these cells are blank: {}. `railwright catalog gaps` tells what they would have \
             to hold.",
            lacks.join(", ")
        )),
        Reason::Barred(rules) => {
            let rules: Vec<String> = rules.iter().map(|rule| barred(rule, slot, sheet)).collect();
            says(&format!("not eligible: {}.", rules.join("; ")))
        }
        Reason::Listed { rank, best } => {
            says(&format!("on the list, at rank {rank}.")) + &look.paragraph(&candidate(best), 4, 6)
        }
        Reason::Outranked(outranked) => {
            says(&format!("in candidates, but outranked. {}", rank(outranked)))
                + &outranked_by(outranked, candidate, &currency, look)
        }
        Reason::Infeasible(infeasible) => {
            says("in no candidate.") + &told_infeasible(infeasible, sheet, &currency, look)
        }
    }
}

fn barred(rule: &BarredBy, slot: Slot, sheet: &Sheet) -> String {
    match rule {
        BarredBy::Status(word) => format!(
            "its status is `{word}`, and parts.allow_status lets in {}",
            sheet.parts.allow_status.join(", ")
        ),
        BarredBy::Ban => "parts.ban names it".to_owned(),
        BarredBy::Pin => format!("parts.use.{} pins the slot to other parts", slot.name()),
        BarredBy::Stock(Some(pieces)) => format!(
            "{pieces} in stock, and parts.need_stock asks for {}",
            grouped(&sheet.boards.to_string())
        ),
        BarredBy::Stock(None) => {
            "its stock is blank, and parts.need_stock asks for pieces in stock".to_owned()
        }
        BarredBy::NoResistance => {
            "its tolerance and drift leave it no resistance at the rail's temperatures".to_owned()
        }
    }
}

fn rank(outranked: &Outranked) -> String {
    match outranked.rank {
        Some(rank) => format!("Its best candidate has rank {rank}."),
        None => {
            format!("Its best candidate stands behind rank {}.", grouped(&MOST_RANKS.to_string()))
        }
    }
}

fn outranked_by(
    outranked: &Outranked,
    candidate: impl Fn(&Admitted) -> String,
    currency: &Currency<'_>,
    look: &Look,
) -> String {
    let Outranked { best, first, last, cheaper_by, .. } = outranked;
    let mut text = look.paragraph(&candidate(best), 4, 6);
    let against = |other: &Admitted| {
        let percent = |mine: f64, theirs: f64| match theirs {
            0.0 => "from 0".to_owned(),
            theirs => format!("{:+.1} %", (mine / theirs - 1.0) * 100.0),
        };
        format!(
            "score {}, cost {}, loss {}, stress {}",
            percent(best.score, other.score),
            percent(best.cost, other.cost),
            percent(best.loss, other.loss),
            percent(best.stress, other.stress)
        )
    };
    let rows = [("rank 1".to_owned(), first), (format!("rank {USUAL_ROWS}"), last)];
    for (what, row) in rows {
        let told = format!("Against {what}, {}: {}.", differs(row, best, currency), against(row));
        text += &look.paragraph(&told, 2 * INDENT, 3 * INDENT);
    }
    if let Some(cheaper_by) = cheaper_by {
        let told = format!(
            "Its score would equal that of rank {USUAL_ROWS} if a board cost {} less.",
            currency.cost(*cheaper_by)
        );
        text += &look.paragraph(&told, 2 * INDENT, 3 * INDENT);
    }
    text
}

/// `at 3.87 EUR with Fenwrack/FNK314 + Grindlemoor/GDL-B5`: the cost of a candidate and those of its parts
/// that another does not have.
fn differs(candidate: &Admitted, other: &Admitted, currency: &Currency<'_>) -> String {
    let names = candidate.parts.iter().zip(&other.parts);
    let own = names.filter(|(mine, theirs)| mine != theirs).map(|(mine, _)| match mine {
        Some(name) => words::full_name(name),
        // Only heatsinks may be there or not.
        None => "unmounted".to_owned(),
    });
    let own = own.collect::<Vec<_>>().join(" + ");
    format!("at {} with {own}", currency.cost(candidate.cost))
}

fn told_infeasible(
    infeasible: &Infeasible,
    sheet: &Sheet,
    currency: &Currency<'_>,
    look: &Look,
) -> String {
    let chooses_sink = sheet.rail.chooses_heatsink();
    let mut text = String::new();
    let mut line = |told: &str| text += &look.paragraph(told, 2 * INDENT, 3 * INDENT);
    if !infeasible.alone.is_empty() {
        let names: Vec<&str> = infeasible.alone.iter().map(|check| check.name()).collect();
        line(&format!("Fails with every choice of the other parts: {}.", names.join(", ")));
    }
    for (n, miss) in infeasible.nearest.iter().enumerate() {
        let which = if n == 0 { "Nearest" } else { "Also near" };
        line(&format!(
            "{which}: {}, which fails {}.",
            words::parts(&miss.parts, chooses_sink),
            words::failures(&miss.failures)
        ));
    }
    for cure in &infeasible.cells {
        let side = if cure.value > cure.from { "up to" } else { "down to" };
        let near = if cure.is_nearest {
            "the least change of this cell that does"
        } else {
            "a narrow range that is nearer may be missed"
        };
        line(&format!(
            "Cell `{}` from {} {side} {} would let it in ({near}): for one {}.",
            cure.column,
            words::figure(cure.from, cure.unit),
            words::figure(rounded(cure.value), cure.unit),
            words::parts(&cure.company.parts, chooses_sink)
        ));
    }
    if infeasible.cells.is_empty() {
        line("No single figure of its row would let it in.");
    }
    let changes = words::key_changes(&infeasible.keys, &sheet.rail, currency, 3 * INDENT, look);
    if changes.is_empty() {
        line("No single key of the sheet was found that would let it in.");
        return text;
    }
    line("Any one of these keys of the sheet would let it in:");
    text + &changes
}
