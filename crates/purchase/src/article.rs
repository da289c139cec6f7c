//! What a shop sells: a row of a catalog, or a design's own part, as a buyer sees it.

use catalog::{Catalog, Kind, Price, Row, Sink, Status, Unproven};
use circuit::parts::{Amplifier, Pot, ResistorLine, Transistor, Zener};

/// A part that can be ordered.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Article<'a> {
    /// What it is.
    pub kind: Kind,
    /// Its maker; may be empty.
    pub maker: &'a str,
    /// Its name.
    pub part: &'a str,
    /// The file that describes it: a catalog, or a design.
    pub file: &'a str,
    /// The line in that file.
    pub line: u32,
    /// The place of the design whose own cells describe it and give it no name; None: a name that means
    /// the same everywhere.
    pub nameless_in: Option<usize>,
    /// What one piece costs; None: nobody says.
    pub price: Option<&'a Price>,
    /// Pieces in stock; None: nobody says.
    pub stock: Option<f64>,
    /// Weeks until an order arrives; None: nobody says.
    pub lead_weeks: Option<f64>,
    /// Where it stands in its life; None where its row was not read so far.
    pub status: Option<Status>,
    /// Its package.
    pub package: Option<&'a str>,
    /// The figure by which such parts are asked for; None where a line has many values, or the part is
    /// known by its name alone.
    pub nominal: Option<Nominal>,
    /// Tolerance as a fraction.
    pub tolerance: Option<f64>,
}

/// The figure by which a part is asked for over the counter.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Nominal {
    /// The figure, in SI units.
    pub value: f64,
    /// Its unit.
    pub unit: &'static str,
}

/// Parts that are asked for by a figure.
pub trait Asked {
    /// The figure.
    fn nominal(&self) -> Option<Nominal> {
        None
    }

    /// Its tolerance as a fraction.
    fn tolerance(&self) -> Option<f64> {
        None
    }
}

impl Asked for Zener {
    fn nominal(&self) -> Option<Nominal> {
        Some(Nominal { value: self.vz_v, unit: "V" })
    }

    fn tolerance(&self) -> Option<f64> {
        Some(self.tol)
    }
}

impl Asked for Amplifier {}

impl Asked for Transistor {}

/// The value is that of the resistor, not of the line.
impl Asked for ResistorLine {
    fn tolerance(&self) -> Option<f64> {
        Some(self.tol)
    }
}

impl Asked for Pot {
    fn nominal(&self) -> Option<Nominal> {
        Some(Nominal { value: self.value_ohm, unit: "Ω" })
    }

    fn tolerance(&self) -> Option<f64> {
        Some(self.tol)
    }
}

impl Asked for Sink {
    fn nominal(&self) -> Option<Nominal> {
        Some(Nominal { value: self.figures.rth_sa_c_per_w, unit: "°C/W" })
    }
}

impl<'a> Article<'a> {
    /// A row of a catalog.
    pub fn of_row<T: Asked>(catalog: &'a Catalog<T>, row: &'a Row<T>) -> Self {
        Self {
            price: Some(&row.price),
            stock: row.stock,
            lead_weeks: row.lead_weeks,
            status: Some(row.status),
            package: row.package.as_deref(),
            nominal: row.figures.nominal(),
            tolerance: row.figures.tolerance(),
            ..Self::of_name(catalog, row.file, (&row.maker, &row.part), row.line)
        }
    }

    /// A row of which needed cells are blank: its price may still be known.
    pub fn of_unproven<T>(catalog: &'a Catalog<T>, row: &'a Unproven) -> Self {
        Self {
            price: row.price.as_ref(),
            stock: row.stock,
            lead_weeks: row.lead_weeks,
            status: Some(row.status),
            package: row.package.as_deref(),
            ..Self::of_name(catalog, row.file, (&row.maker, &row.part), row.line)
        }
    }

    /// A row of which no more than its name was read.
    pub fn of_name<T>(
        catalog: &'a Catalog<T>,
        file: u16,
        (maker, part): (&'a str, &'a str),
        line: u32,
    ) -> Self {
        Self {
            kind: catalog.kind,
            maker,
            part,
            file: catalog.file(file).map_or(catalog.kind.file_name(), |f| &f.name),
            line,
            nameless_in: None,
            price: None,
            stock: None,
            lead_weeks: None,
            status: None,
            package: None,
            nominal: None,
            tolerance: None,
        }
    }

    /// By what two articles are the same, and in which order they are listed.
    pub(crate) fn key(&self) -> (Kind, &'a str, &'a str, Option<usize>) {
        (self.kind, self.maker, self.part, self.nameless_in)
    }
}
