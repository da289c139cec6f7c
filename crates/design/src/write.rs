//! Writing a design file.

use crate::keys;
use circuit::slot::Slot;
use toml_edit::{DocumentMut, Item, Table, Value, value};

/// A candidate that is to be kept as a design.
#[derive(Debug, Clone, PartialEq)]
pub struct Kept<'a> {
    /// What the rail is called.
    pub name: &'a str,
    /// The path of the rail sheet, relative to the design file.
    pub sheet: &'a str,
    /// SHA-256 of the sheet in hexadecimal.
    pub sheet_sha256: String,
    /// Boards to build.
    pub boards: u64,
    /// The slots that hold a part.
    pub slots: Vec<KeptPart<'a>>,
    /// The resistors, each with its key, Ω.
    pub values: Vec<(&'a str, f64)>,
}

/// A part that is to be kept.
#[derive(Debug, Clone, PartialEq)]
pub struct KeptPart<'a> {
    /// Its slot.
    pub slot: Slot,
    /// Its maker; may be empty.
    pub maker: &'a str,
    /// Its name.
    pub part: &'a str,
    /// The cells of its row with the names of their columns. Only those that a proof can rest on are
    /// written ([`keys::bears_on_proof`]), and no blank ones.
    pub cells: Vec<(String, String)>,
}

/// The text of a design file.
pub fn write(kept: &Kept<'_>) -> String {
    let mut document = DocumentMut::new();
    document[keys::DESIGN] = value(keys::FORMAT);
    document[keys::NAME] = value(kept.name);
    document[keys::SHEET] = value(kept.sheet);
    document[keys::SHEET_SHA256] = value(&kept.sheet_sha256);
    document[keys::BOARDS] = value(i64::try_from(kept.boards).unwrap_or(i64::MAX));

    let mut slots = Table::new();
    for part in &kept.slots {
        slots[part.slot.name()] = value(full_name(part.maker, part.part));
    }
    document[keys::SLOTS] = Item::Table(slots);

    let mut values = Table::new();
    for (key, ohm) in &kept.values {
        values[*key] = number(*ohm);
    }
    document[keys::VALUES] = Item::Table(values);

    let mut proven = Table::new();
    proven.set_implicit(true);
    for part in &kept.slots {
        let mut cells = Table::new();
        let kind = eligible::kind_of(part.slot);
        for (column, text) in &part.cells {
            if !text.is_empty() && keys::bears_on_proof(kind, column) {
                cells[column.as_str()] = as_written(text);
            }
        }
        proven[part.slot.name()] = Item::Table(cells);
    }
    document[keys::PROVEN] = Item::Table(proven);
    document.to_string()
}

/// `maker/part`, or the part alone where its row names no maker.
pub(crate) fn full_name(maker: &str, part: &str) -> String {
    if maker.is_empty() { part.to_owned() } else { format!("{maker}/{part}") }
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
fn number(ohm: f64) -> Item {
    /// Up to here every whole number is an exact double.
    const EXACT: f64 = 9_007_199_254_740_992.0;
    if ohm.fract() == 0.0 && ohm.abs() <= EXACT { value(ohm as i64) } else { value(ohm) }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::keys::Resistor;

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
    fn what_is_written_is_read_back() {
        let cell = |column: &str, text: &str| (column.to_owned(), text.to_owned());
        let zener = KeptPart {
            slot: Slot::Zener,
            maker: "Brindlow",
            part: "ZQ/5V6",
            cells: vec![cell("vz_v", "5.60"), cell("cost", "0.06"), cell("zzk_ohm", "")],
        };
        let sink = KeptPart { slot: Slot::Heatsink, maker: "", part: "HS1", cells: Vec::new() };
        let kept = Kept {
            name: "tide \"gauge\"",
            sheet: "../sheets/tide gauge.toml",
            sheet_sha256: "ab".repeat(32),
            boards: 25,
            slots: vec![zener, sink],
            values: vec![("rz_ohm", 3300.0), ("rf_ohm", 0.0), ("ri_ohm", 8.25)],
        };
        let mut notices = Vec::new();
        let design = crate::read("d.toml", &write(&kept), &mut notices).expect("a sound file");
        assert_eq!(notices, []);
        assert_eq!(design.name, kept.name);
        assert_eq!(design.sheet.as_ref().map(|s| s.value.as_str()), Some(kept.sheet));
        assert_eq!(design.sheet_sha256.as_deref(), Some(kept.sheet_sha256.as_str()));
        assert_eq!(design.boards, Some(25));
        let part = |slot| design.slot(slot).part.as_ref().map(|p| p.value.as_str());
        assert_eq!(
            (part(Slot::Zener), part(Slot::Heatsink)),
            (Some("Brindlow/ZQ/5V6"), Some("HS1"))
        );
        assert_eq!(part(Slot::Pot), None);
        let value = |r| design.value(r).map(|v| v.value);
        let values = Resistor::ALL.map(value);
        assert_eq!(values, [Some(3300.0), Some(0.0), Some(8.25), None]);
        let proven = design.slot(Slot::Zener).proven.as_deref();
        assert_eq!(proven, Some([cell("vz_v", "5.60")].as_slice()), "no price, no blank cell");
    }
}
