//! What a design file says.

use crate::keys::Resistor;
use crate::text::Mark;
use catalog::Shop;
use circuit::slot::Slot;

/// A value with the place where the file gives it.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Given<T> {
    /// The value.
    pub value: T,
    /// Where it stands.
    pub mark: Mark,
}

/// A design as its file gives it.
#[derive(Debug, Clone)]
pub struct Design {
    /// The file, as the user would name it.
    pub file: String,
    /// What the design is called.
    pub name: String,
    /// The path of its rail sheet, relative to the design file.
    pub sheet: Option<Given<String>>,
    /// SHA-256 of the sheet when the design was kept, in lower-case hexadecimal.
    pub sheet_sha256: Option<String>,
    /// Boards to build, at least 1.
    pub boards: Option<u64>,
    /// What each slot holds, by `Slot as usize`.
    pub slots: [SlotEntry; Slot::COUNT],
    /// The resistors as fitted, Ω, by the order of [`Resistor::ALL`].
    pub values: [Option<Given<f64>>; Resistor::ALL.len()],
}

/// What a design file says of one slot.
#[derive(Debug, Clone, Default)]
pub struct SlotEntry {
    /// The part's name: `maker/part`, or the part alone.
    pub part: Option<Given<String>>,
    /// The part's own cells, for one that no catalog holds.
    pub inline: Option<Inline>,
    /// The cells that the design was proven with, each with the name of its column.
    pub proven: Option<Vec<(String, String)>>,
}

/// A part that no catalog holds: a catalog of one row.
#[derive(Debug, Clone)]
pub struct Inline {
    /// The catalog.
    pub shop: Shop,
    /// Where the section begins.
    pub mark: Mark,
    /// Where each column that is given stands.
    pub cells: Vec<(String, Mark)>,
}

impl Design {
    /// What the file says of a slot.
    pub fn slot(&self, slot: Slot) -> &SlotEntry {
        &self.slots[slot as usize]
    }

    /// A resistor as fitted; None where the file does not give it.
    pub fn value(&self, resistor: Resistor) -> Option<&Given<f64>> {
        self.values[resistor as usize].as_ref()
    }
}
