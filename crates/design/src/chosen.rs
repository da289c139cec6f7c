//! A candidate of a search as the parts of a design.

use crate::parts::{Found, Part, Parts};
use catalog::{Catalog, Row, Shop};
use circuit::slot::Slot;
use eligible::Eligible;
use select::candidate::Candidate;

/// The parts and values of a candidate; None where it is not one of these rows.
pub fn chosen<'a>(eligible: &Eligible<'a>, candidate: &Candidate) -> Option<Parts<'a>> {
    let shop = eligible.shop;
    let at = |slot| candidate.place(slot);
    Some(Parts {
        zener: of(shop, &shop.zeners, eligible.zeners.get(at(Slot::Zener)?)?),
        bias_line: of(shop, &shop.resistors, eligible.bias_lines.get(at(Slot::BiasLine)?)?),
        amplifier: of(shop, &shop.opamps, eligible.amplifiers.get(at(Slot::Amplifier)?)?),
        divider_line: of(
            shop,
            &shop.resistors,
            eligible.divider_lines.get(at(Slot::DividerLine)?)?,
        ),
        pot: match at(Slot::Pot) {
            Some(place) => Some(of(shop, &shop.pots, eligible.pots.get(place)?)),
            None => None,
        },
        pass: of(shop, &shop.transistors, eligible.transistors.get(at(Slot::Pass)?)?),
        heatsink: match at(Slot::Heatsink) {
            Some(place) => Some(of(shop, &shop.heatsinks, eligible.heatsinks.get(place)?)),
            None => None,
        },
        rz_ohm: candidate.rz.ohm,
        upper_ohm: candidate.divider.upper.ohm,
        ri_ohm: candidate.divider.ri.ohm,
    })
}

fn of<'a, T>(shop: &'a Shop, catalog: &'a Catalog<T>, row: &'a Row<T>) -> Part<'a, T> {
    Part { found: Found::Row(row), catalog, shop, inline: None, is_named_in_slots: true }
}
