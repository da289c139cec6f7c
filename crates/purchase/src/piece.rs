//! The pieces of one board.

use crate::article::{Article, Asked, Nominal};
use catalog::{Catalog, Row};
use circuit::slot::Slot;
use design::keys::Resistor;
use design::parts::{Found, Part, Parts};
use design::proof::Ohms;
use eligible::Eligible;

/// A piece on a board.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Piece<'a> {
    /// Its slot.
    pub slot: Slot,
    /// Which resistor of the circuit it is; None for every other part.
    pub resistor: Option<Resistor>,
    /// What is ordered.
    pub article: Article<'a>,
    /// The figure by which it is ordered.
    pub nominal: Option<Nominal>,
}

/// The pieces of a candidate, given the place of each slot's part in the list of eligible rows.
///
/// None where a place is not in its list.
pub fn of_candidate<'a>(
    eligible: &Eligible<'a>,
    place: impl Fn(Slot) -> Option<usize>,
    ohms: Ohms,
) -> Option<Vec<Piece<'a>>> {
    let shop = eligible.shop;
    let adjustable = eligible.sheet.rail.is_adjustable();
    let mut pieces = Vec::with_capacity(9);
    for slot in Slot::ALL {
        let Some(at) = place(slot) else { continue };
        let article = match slot {
            Slot::Zener => article(&shop.zeners, &eligible.zeners, at)?,
            Slot::BiasLine => article(&shop.resistors, &eligible.bias_lines, at)?,
            Slot::Amplifier => article(&shop.opamps, &eligible.amplifiers, at)?,
            Slot::DividerLine => article(&shop.resistors, &eligible.divider_lines, at)?,
            Slot::Pot => article(&shop.pots, &eligible.pots, at)?,
            Slot::Pass => article(&shop.transistors, &eligible.transistors, at)?,
            Slot::Heatsink => article(&shop.heatsinks, &eligible.heatsinks, at)?,
        };
        add(&mut pieces, slot, article, ohms, adjustable);
    }
    Some(pieces)
}

/// The pieces of a design; `place` is its place among the designs that are bought for together.
pub fn of_design<'a>(parts: &Parts<'a>, adjustable: bool, place: usize) -> Vec<Piece<'a>> {
    let ohms = parts.ohms();
    let mut pieces = Vec::with_capacity(9);
    let mut take = |slot, article| add(&mut pieces, slot, article, ohms, adjustable);
    take(Slot::Zener, article_of(&parts.zener, place));
    take(Slot::BiasLine, article_of(&parts.bias_line, place));
    take(Slot::Amplifier, article_of(&parts.amplifier, place));
    take(Slot::DividerLine, article_of(&parts.divider_line, place));
    if let Some(pot) = &parts.pot {
        take(Slot::Pot, article_of(pot, place));
    }
    take(Slot::Pass, article_of(&parts.pass, place));
    if let Some(heatsink) = &parts.heatsink {
        take(Slot::Heatsink, article_of(heatsink, place));
    }
    pieces
}

fn article<'a, T: Asked>(
    catalog: &'a Catalog<T>,
    rows: &[&'a Row<T>],
    place: usize,
) -> Option<Article<'a>> {
    Some(Article::of_row(catalog, rows.get(place)?))
}

/// The part of a design; of one that the design's own cells describe the price counts only where they
/// give one.
fn article_of<'a, T: Asked>(part: &Part<'a, T>, place: usize) -> Article<'a> {
    let article = match part.found {
        Found::Row(row) => Article::of_row(part.catalog, row),
        Found::Unproven(row) => Article::of_unproven(part.catalog, row),
        Found::LeftOut(row) => {
            Article::of_name(part.catalog, row.file, (&row.maker, &row.part), row.line)
        }
    };
    let Some(inline) = part.inline else { return article };
    let gives = |column: &str| inline.cells.iter().any(|(name, _)| name == column);
    Article {
        file: &inline.mark.place.file,
        line: inline.mark.place.line,
        nameless_in: (!part.is_named_in_slots && !gives("part")).then_some(place),
        price: article.price.filter(|_| gives("cost")),
        ..article
    }
}

/// Adds the pieces of a slot. A line of resistors gives one piece for each resistor taken from it; a
/// link is a piece of wire that nobody orders.
fn add<'a>(
    pieces: &mut Vec<Piece<'a>>,
    slot: Slot,
    article: Article<'a>,
    ohms: Ohms,
    adjustable: bool,
) {
    let upper = if adjustable { Resistor::Rx } else { Resistor::Rf };
    let resistors = match slot {
        Slot::BiasLine => &[(Resistor::Rz, ohms.rz)][..],
        Slot::DividerLine => &[(upper, ohms.upper), (Resistor::Ri, ohms.ri)],
        _ => {
            pieces.push(Piece { slot, resistor: None, article, nominal: article.nominal });
            return;
        }
    };
    for &(resistor, ohm) in resistors.iter().filter(|(_, ohm)| *ohm != 0.0) {
        let nominal = Some(Nominal { value: ohm, unit: "Ω" });
        pieces.push(Piece { slot, resistor: Some(resistor), article, nominal });
    }
}
