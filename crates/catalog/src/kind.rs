//! The six catalogs.

use crate::column::Column;
use crate::tables;

/// A kind of catalog.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Kind {
    /// Zeners and shunt references.
    Zeners,
    /// Operational amplifiers.
    Opamps,
    /// Power transistors.
    Transistors,
    /// Lines of fixed resistors.
    Resistors,
    /// Potentiometers.
    Pots,
    /// Heatsinks.
    Heatsinks,
}

impl Kind {
    /// Every kind, in the order of the model page.
    pub const ALL: [Kind; 6] = [
        Kind::Zeners,
        Kind::Opamps,
        Kind::Transistors,
        Kind::Resistors,
        Kind::Pots,
        Kind::Heatsinks,
    ];

    /// The name of the file in the folder of catalogs.
    pub const fn file_name(self) -> &'static str {
        match self {
            Kind::Zeners => "zeners.csv",
            Kind::Opamps => "opamps.csv",
            Kind::Transistors => "transistors.csv",
            Kind::Resistors => "resistors.csv",
            Kind::Pots => "pots.csv",
            Kind::Heatsinks => "heatsinks.csv",
        }
    }

    /// The folder, within the folder of catalogs, that may hold several files of this kind.
    pub const fn folder_name(self) -> &'static str {
        match self {
            Kind::Zeners => "zeners",
            Kind::Opamps => "opamps",
            Kind::Transistors => "transistors",
            Kind::Resistors => "resistors",
            Kind::Pots => "pots",
            Kind::Heatsinks => "heatsinks",
        }
    }

    /// The columns of this catalog: those that every catalog has, then its own.
    pub const fn columns(self) -> &'static [Column] {
        match self {
            Kind::Zeners => &tables::zeners::COLUMNS,
            Kind::Opamps => &tables::opamps::COLUMNS,
            Kind::Transistors => &tables::transistors::COLUMNS,
            Kind::Resistors => &tables::resistors::COLUMNS,
            Kind::Pots => &tables::pots::COLUMNS,
            Kind::Heatsinks => &tables::heatsinks::COLUMNS,
        }
    }

    /// The column of this name.
    pub fn column(self, name: &str) -> Option<&'static Column> {
        self.columns().iter().find(|c| c.name == name)
    }
}

/// Any catalog has a column of this name.
pub fn is_known_column(name: &str) -> bool {
    Kind::ALL.into_iter().any(|kind| kind.column(name).is_some())
}

/// The column of any catalog whose name is nearest to this one, where one is near.
pub fn nearest_column(name: &str) -> Option<&'static str> {
    let names = Kind::ALL.into_iter().flat_map(|kind| kind.columns().iter().map(|c| c.name));
    crate::near::nearest(name, names)
}
