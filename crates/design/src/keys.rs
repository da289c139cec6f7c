//! The names of a design file, declared once: what reads it and what writes it both follow them.

use catalog::Kind;

/// The format that is read and written.
pub const FORMAT: i64 = 1;

/// The format's number.
pub const DESIGN: &str = "design";
/// What the design is called.
pub const NAME: &str = "name";
/// The path of its rail sheet, relative to the design file.
pub const SHEET: &str = "sheet";
/// SHA-256 of the sheet when the design was kept, in hexadecimal.
pub const SHEET_SHA256: &str = "sheet_sha256";
/// Boards to build; else the sheet's.
pub const BOARDS: &str = "boards";
/// The part of each slot.
pub const SLOTS: &str = "slots";
/// The resistors as fitted.
pub const VALUES: &str = "values";
/// Parts that no catalog holds, by slot: catalog columns as keys.
pub const INLINE: &str = "inline";
/// The cells that the design was proven with, by slot.
pub const PROVEN: &str = "proven";

/// Every key and section outside all sections, in the order in which they are written.
pub const OUTSIDE: [&str; 9] =
    [DESIGN, NAME, SHEET, SHEET_SHA256, BOARDS, SLOTS, VALUES, INLINE, PROVEN];

/// A resistor of the circuit.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Resistor {
    /// RZ, between feed and zener.
    Rz,
    /// RF of a fixed output, between output and − input; 0 Ω for a link.
    Rf,
    /// RI, between − input and ground.
    Ri,
    /// RX of an adjustable output, in series with the pot; 0 Ω for a link.
    Rx,
}

impl Resistor {
    /// Every resistor, in the order in which they are written.
    pub const ALL: [Resistor; 4] = [Resistor::Rz, Resistor::Rf, Resistor::Ri, Resistor::Rx];

    /// Its key in `[values]`.
    pub const fn key(self) -> &'static str {
        match self {
            Resistor::Rz => "rz_ohm",
            Resistor::Rf => "rf_ohm",
            Resistor::Ri => "ri_ohm",
            Resistor::Rx => "rx_ohm",
        }
    }

    /// A link may stand in its place.
    pub const fn may_be_link(self) -> bool {
        matches!(self, Resistor::Rf | Resistor::Rx)
    }
}

/// A proof rests on this column: one of this kind of catalog alone, or the package that a heatsink has
/// to fit. What every catalog has besides (price, stock, data sheet) proves nothing.
pub fn bears_on_proof(kind: Kind, column: &str) -> bool {
    let is_shared = || Kind::ALL.into_iter().all(|other| other.column(column).is_some());
    kind.column(column).is_some()
        && (!is_shared() || (column == "package" && kind == Kind::Transistors))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn prices_and_stock_prove_nothing() {
        assert!(bears_on_proof(Kind::Zeners, "vz_v"));
        assert!(bears_on_proof(Kind::Transistors, "package"));
        assert!(!bears_on_proof(Kind::Zeners, "package"));
        assert!(!bears_on_proof(Kind::Zeners, "cost"));
        assert!(!bears_on_proof(Kind::Zeners, "drawer"));
    }
}
