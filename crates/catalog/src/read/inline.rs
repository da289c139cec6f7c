//! A part that stands in no catalog, given cell by cell: read as the one row of a catalog of its own.

use super::ReadOptions;
use super::one_kind::read_bytes;
use crate::kind::Kind;
use crate::shop::{Catalog, Shop};
use notice::{Notice, Severity};

/// The line on which the part stands in its catalog; the header is line 1.
const LINE: u32 = 2;

/// Something that is wrong with a part given cell by cell.
#[derive(Debug, Clone, PartialEq)]
pub struct InlineFault {
    /// The cell that is at fault, by its place among those given; None: the cells together.
    pub cell: Option<usize>,
    /// What is wrong. Its place is one in the catalog of one row, which nobody has seen: the caller
    /// knows the real one.
    pub notice: Notice,
}

/// Reads the cells of one part, each with the name of its column, as a catalog of this kind does.
///
/// The shop that comes back holds one catalog with at most one row (or one unproven part, or one that
/// was left out); the others are empty. Cells of columns that nobody declared are kept, as in a file.
/// `part` and `cost` must be among the columns.
pub fn read_inline(kind: Kind, cells: &[(&str, &str)], faults: &mut Vec<InlineFault>) -> Shop {
    let header = cells.iter().map(|(column, _)| quoted(column)).collect::<Vec<_>>().join(",");
    let row: Vec<String> = cells.iter().map(|(_, text)| quoted(text)).collect();
    let bytes = format!("{header}\n{}\n", row.join(",")).into_bytes();
    let options = ReadOptions::default();
    let mut notices = Vec::new();
    let mut shop = Shop {
        zeners: Catalog::empty(Kind::Zeners),
        opamps: Catalog::empty(Kind::Opamps),
        transistors: Catalog::empty(Kind::Transistors),
        resistors: Catalog::empty(Kind::Resistors),
        pots: Catalog::empty(Kind::Pots),
        heatsinks: Catalog::empty(Kind::Heatsinks),
    };
    match kind {
        Kind::Zeners => shop.zeners = read_bytes(bytes, &options, &mut notices),
        Kind::Opamps => shop.opamps = read_bytes(bytes, &options, &mut notices),
        Kind::Transistors => shop.transistors = read_bytes(bytes, &options, &mut notices),
        Kind::Resistors => shop.resistors = read_bytes(bytes, &options, &mut notices),
        Kind::Pots => shop.pots = read_bytes(bytes, &options, &mut notices),
        Kind::Heatsinks => shop.heatsinks = read_bytes(bytes, &options, &mut notices),
    }
    // Doubts about the header speak of columns that were not given; the row says what it lacks.
    let errors = notices.into_iter().filter(|n| n.severity == Severity::Error);
    faults.extend(errors.map(|notice| InlineFault { cell: cell_at(&notice, &row), notice }));
    shop
}

/// A cell in quotation marks, on one line.
fn quoted(text: &str) -> String {
    let text = text.replace(['\n', '\r'], " ");
    format!("\"{}\"", text.replace('"', "\"\""))
}

/// The cell in which a notice's place lies.
fn cell_at(notice: &Notice, row: &[String]) -> Option<usize> {
    let column = (notice.place.column as usize).checked_sub(1)?;
    if notice.place.line != LINE {
        return None;
    }
    let mut end = 0;
    row.iter().position(|cell| {
        end += cell.chars().count() + 1;
        column < end
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    const SINK: [(&str, &str); 4] =
        [("part", "old rail, \"big\""), ("cost", "0"), ("rth_sa_c_per_w", "2.4"), ("fits", "TO-3")];

    #[test]
    fn a_part_is_read_as_its_catalog_would() {
        let mut faults = Vec::new();
        let shop = read_inline(Kind::Heatsinks, &SINK, &mut faults);
        assert_eq!(faults, []);
        let row = &shop.heatsinks.rows[0];
        assert_eq!((row.part.as_str(), row.figures.figures.rth_sa_c_per_w), (SINK[0].1, 2.4));
        assert!(shop.zeners.rows.is_empty());
    }

    #[test]
    fn a_fault_names_its_cell() {
        let mut cells = SINK;
        cells[2].1 = "2.4 V";
        let mut faults = Vec::new();
        read_inline(Kind::Heatsinks, &cells, &mut faults);
        let [fault] = faults.as_slice() else { panic!("{faults:?}") };
        assert_eq!((fault.cell, fault.notice.code), (Some(2), "cell-unit"));
    }

    #[test]
    fn what_is_blank_is_lacking() {
        let mut faults = Vec::new();
        let shop = read_inline(Kind::Heatsinks, &SINK[..3], &mut faults);
        assert_eq!(faults, []);
        assert_eq!(shop.heatsinks.unproven[0].lacks, ["fits"]);
    }
}
