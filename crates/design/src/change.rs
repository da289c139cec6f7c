//! What has changed since a design was kept: cells of its parts' rows.

use crate::file::Design;
use crate::keys::bears_on_proof;
use crate::parts::PartPlace;
use catalog::column::Cell;
use circuit::slot::Slot;
use eligible::kind_of;
use quantity::notation::parse;

/// A cell that differs from the one that the design was proven with.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Change {
    /// The slot.
    pub slot: Slot,
    /// The column.
    pub column: String,
    /// The cell then; None: it was blank.
    pub was: Option<String>,
    /// The cell now; None: it is blank.
    pub is: Option<String>,
}

/// The cells of a part's row that differ from those that the design was proven with, in the order of
/// the catalog's columns. None for a part without a record, or one that no catalog holds.
pub fn changes(design: &Design, place: &PartPlace<'_>) -> Vec<Change> {
    let Some(proven) = &design.slot(place.slot).proven else { return Vec::new() };
    if place.inline.is_some() {
        return Vec::new();
    }
    let now = place.cells();
    let text = |cells: &[(String, String)], column: &str| {
        let cell = cells.iter().find(|(name, _)| name == column);
        cell.map(|(_, text)| text.clone()).filter(|text| !text.is_empty())
    };
    let kind = kind_of(place.slot);
    kind.columns()
        .iter()
        .filter(|column| bears_on_proof(kind, column.name))
        .filter_map(|column| {
            let (was, is) = (text(proven, column.name), text(&now, column.name));
            let same = match (&was, &is) {
                (Some(was), Some(is)) => means_the_same(&column.cell, was, is),
                (was, is) => was == is,
            };
            let changed = || Change { slot: place.slot, column: column.name.to_owned(), was, is };
            (!same).then(changed)
        })
        .collect()
}

/// Two cells say the same, be it in another notation: `5.60`, `5.6` and `5.6 V`.
fn means_the_same(cell: &Cell, was: &str, is: &str) -> bool {
    let same_figure = || match cell {
        Cell::Number(figure) => match (parse(was, figure.unit), parse(is, figure.unit)) {
            (Ok(was), Ok(is)) => was == is,
            _ => false,
        },
        _ => false,
    };
    was == is || same_figure()
}

#[cfg(test)]
mod tests {
    use super::*;
    use catalog::Kind;

    #[test]
    fn another_notation_is_no_change() {
        let cell = Kind::Zeners.column("vz_v").unwrap().cell;
        assert!(means_the_same(&cell, "5.60", "5.6 V"));
        assert!(!means_the_same(&cell, "5.6", "5.61"));
        let curve = Kind::Transistors.column("soa_dc").unwrap().cell;
        assert!(!means_the_same(&curve, "10:3;60:0.5", "10:3;60:0.4"));
    }
}
