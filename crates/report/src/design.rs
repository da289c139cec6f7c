//! A candidate as a design file.

use crate::choice::cells;
use crate::shortlist::{Candidate, Shortlist, SlotRow};
use ::design::{Kept, KeptPart, write};
use catalog::Shop;
use circuit::slot::Slot;

/// A candidate as the text of a design file: its parts and values, and the catalog cells that it was
/// proven with, so that a later run can tell what has changed since.
///
/// `sheet` is the path of the rail sheet relative to the design file.
pub fn to_toml(
    list: &Shortlist<'_>,
    candidate: &Candidate<'_>,
    sheet: &str,
    shop: &Shop,
) -> String {
    let values = candidate.values.named().filter_map(|(name, ohm)| Some((name, ohm?.0)));
    write(&Kept {
        name: list.rail,
        sheet,
        sheet_sha256: list.sheet_sha256.hex(),
        boards: list.boards,
        slots: candidate.slots.iter().filter_map(|row| kept_part(row, shop)).collect(),
        values: values.collect(),
    })
}

/// The part of a slot with the cells of its row; None where the slot holds none.
fn kept_part<'a>(row: &SlotRow<'a>, shop: &Shop) -> Option<KeptPart<'a>> {
    let cells = match (row.source, row.line) {
        (Some((kind, file)), Some(line)) => cells(shop, kind, file, line),
        _ => Vec::new(),
    };
    Some(KeptPart {
        slot: Slot::named(row.slot)?,
        maker: row.maker.unwrap_or_default(),
        part: row.part?,
        cells,
    })
}
