//! A candidate as a design file.

use crate::choice::cells;
use crate::figure::Figure;
use crate::shortlist::{Candidate, Shortlist, SlotRow};
use catalog::{Kind, Shop};
use toml_edit::{DocumentMut, Item, Table, Value, value};

/// The format that [`to_toml`] writes.
pub const FORMAT: i64 = 1;

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
    let mut document = DocumentMut::new();
    document["design"] = value(FORMAT);
    document["name"] = value(list.rail);
    document["sheet"] = value(sheet);
    document["sheet_sha256"] = value(list.sheet_sha256.hex());
    document["boards"] = value(i64::try_from(list.boards).unwrap_or(i64::MAX));

    let filled = || candidate.slots.iter().filter_map(|row| Some((row, row.part?)));
    let mut slots = Table::new();
    for (row, part) in filled() {
        slots[row.slot] = value(full_name(row, part));
    }
    document["slots"] = Item::Table(slots);

    let mut values = Table::new();
    for (name, ohm) in candidate.values.named() {
        if let Some(ohm) = ohm {
            values[name] = number(ohm);
        }
    }
    document["values"] = Item::Table(values);

    let mut proven = Table::new();
    proven.set_implicit(true);
    for (row, _) in filled() {
        proven[row.slot] = Item::Table(proven_cells(row, shop));
    }
    document["proven"] = Item::Table(proven);
    document.to_string()
}

/// `maker/part`, or the part alone where its row names no maker.
fn full_name(row: &SlotRow<'_>, part: &str) -> String {
    match row.maker {
        Some(maker) if !maker.is_empty() => format!("{maker}/{part}"),
        _ => part.to_owned(),
    }
}

/// The cells of a row that a proof can rest on, as the catalog writes them; blank ones are left out.
fn proven_cells(row: &SlotRow<'_>, shop: &Shop) -> Table {
    let mut table = Table::new();
    let (Some((kind, file)), Some(line)) = (row.source, row.line) else { return table };
    for (column, text) in cells(shop, kind, file, line) {
        if !text.is_empty() && bears_on_proof(kind, &column) {
            table[&column] = as_written(&text);
        }
    }
    table
}

/// A column of this kind of catalog alone, or the package that a heatsink has to fit. What every
/// catalog has besides (price, stock, data sheet) proves nothing.
fn bears_on_proof(kind: Kind, column: &str) -> bool {
    let is_shared = || Kind::ALL.into_iter().all(|other| other.column(column).is_some());
    kind.column(column).is_some()
        && (!is_shared() || (column == "package" && kind == Kind::Transistors))
}

/// A cell as a TOML number where it is written like one, digit for digit; else as a text.
fn as_written(cell: &str) -> Item {
    let is_plain = cell.bytes().all(|b| b.is_ascii_digit() || b"+-.eE".contains(&b));
    match cell.parse::<Value>() {
        Ok(number @ (Value::Integer(_) | Value::Float(_))) if is_plain => Item::Value(number),
        _ => value(cell),
    }
}

/// A resistance; a whole one without a decimal point.
fn number(ohm: Figure) -> Item {
    /// Up to here every whole number is an exact double.
    const EXACT: f64 = 9_007_199_254_740_992.0;
    if ohm.0.fract() == 0.0 && ohm.0.abs() <= EXACT { value(ohm.0 as i64) } else { value(ohm.0) }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn cells_stay_as_they_are_written() {
        for (cell, toml) in [
            ("5.60", "5.60"),
            ("3", "3"),
            ("4k7", "\"4k7\""),
            ("6.2 V", "\"6.2 V\""),
            ("0.1:500;1:1000", "\"0.1:500;1:1000\""),
            ("007", "\"007\""),
            ("inf", "\"inf\""),
        ] {
            assert_eq!(as_written(cell).to_string().trim(), toml);
        }
    }

    #[test]
    fn prices_and_stock_prove_nothing() {
        assert!(bears_on_proof(Kind::Zeners, "vz_v"));
        assert!(bears_on_proof(Kind::Transistors, "package"));
        assert!(!bears_on_proof(Kind::Zeners, "package"));
        assert!(!bears_on_proof(Kind::Zeners, "cost"));
        assert!(!bears_on_proof(Kind::Zeners, "drawer"));
    }
}
