//! A candidate of the JSON output with the figures of its catalog rows.

use crate::common::repository;
use catalog::{Catalog, ReadOptions, read_folder};
use circuit::parts::{Amplifier, Heatsink, Pot, ResistorLine, Transistor, Zener};
use circuit::rail::Rail;
use serde_json::Value;
use sheet::ShopFile;
use std::path::Path;

/// The sample shop.
pub struct Shop {
    catalogs: catalog::Shop,
    file: ShopFile,
}

impl Shop {
    pub fn sample() -> Self {
        let folder = repository("catalogs-sample");
        let mut notices = Vec::new();
        let text = std::fs::read_to_string(folder.join("shop.toml")).expect("the shop file");
        let file = ShopFile::read("shop.toml", &text, &mut notices).expect("a sound shop file");
        let catalogs = read_folder(&folder, &ReadOptions::default(), &mut notices);
        Self { catalogs: catalogs.expect("sound catalogs"), file }
    }

    /// What a sheet asks for.
    pub fn rail(&self, path: &Path) -> Rail {
        let text = std::fs::read_to_string(path).expect("a sheet");
        let mut notices = Vec::new();
        sheet::read("sheet", &text, &self.file, &[], &mut notices).expect("a sound sheet").rail
    }
}

/// A candidate ready to be drawn as a circuit.
pub struct Stage<'a> {
    pub rail: &'a Rail,
    pub zener: &'a Zener,
    pub bias_line: &'a ResistorLine,
    pub amplifier: &'a Amplifier,
    pub divider_line: &'a ResistorLine,
    pub pot: Option<&'a Pot>,
    pub pass: &'a Transistor,
    /// None: unmounted, or the sheet's own sink.
    pub heatsink: Option<&'a Heatsink>,
    pub rz_ohm: f64,
    /// RF of a fixed output, RX of an adjustable one.
    pub upper_ohm: f64,
    pub ri_ohm: f64,
}

impl<'a> Stage<'a> {
    pub fn new(candidate: &Value, shop: &'a Shop, rail: &'a Rail) -> Self {
        let line = |slot: &str| {
            let slots = candidate["slots"].as_array().expect("slots");
            let slot = slots.iter().find(|s| s["slot"] == slot).expect(slot);
            slot["line"].as_u64()
        };
        let ohm = |name: &str| candidate["values"][name].as_f64();
        let shop = &shop.catalogs;
        Self {
            rail,
            zener: figures(&shop.zeners, line("zener")).expect("a zener"),
            bias_line: figures(&shop.resistors, line("bias_line")).expect("a line"),
            amplifier: figures(&shop.opamps, line("amplifier")).expect("an amplifier"),
            divider_line: figures(&shop.resistors, line("divider_line")).expect("a line"),
            pot: figures(&shop.pots, line("pot")),
            pass: figures(&shop.transistors, line("pass")).expect("a transistor"),
            heatsink: figures(&shop.heatsinks, line("heatsink")).map(|sink| &sink.figures),
            rz_ohm: ohm("rz_ohm").expect("RZ"),
            upper_ohm: ohm("rf_ohm").or(ohm("rx_ohm")).expect("RF or RX"),
            ri_ohm: ohm("ri_ohm").expect("RI"),
        }
    }

    /// The highest current of the transistor, A: the load and all that a divider may draw.
    pub fn full_current_a(&self) -> f64 {
        self.rail.load.max_a + self.rail.divider.max_a
    }
}

/// The figures of the row that begins at a line.
fn figures<T>(catalog: &Catalog<T>, line: Option<u64>) -> Option<&T> {
    let line = line?;
    catalog.rows.iter().find(|row| u64::from(row.line) == line).map(|row| &row.figures)
}
