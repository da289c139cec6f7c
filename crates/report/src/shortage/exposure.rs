//! Every part in use, how many designs hang on it, and how many replacements each of them has.

use super::Broken;
use super::tables::{BROKEN, broken};
use crate::figure::Pairs;
use crate::look::Look;
use crate::table::{Column, Document, Table, screen};
use ::substitute::shortage::ExposedPart;
use serde::Serialize;

/// The format that these types write.
pub const FORMAT: u32 = 1;

/// Every part in use in a folder of designs.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Exposure {
    /// [`FORMAT`].
    pub format: u32,
    /// The folder.
    pub folder: String,
    /// What `--set` changed.
    pub set: Vec<String>,
    /// Hashes of the catalogs, and of the shop file where there is one.
    pub catalogs_sha256: Pairs<String, String>,
    /// Designs that were read.
    pub read: usize,
    /// Design files that are at fault.
    pub broken: Vec<Broken>,
    /// The parts: those without a replacement somewhere first.
    pub parts: Vec<PartInUse>,
}

/// A part in use.
#[derive(Debug, Clone, PartialEq, Eq, Serialize)]
pub struct PartInUse {
    /// `maker/part`.
    pub part: String,
    /// The kind of catalog that holds such parts.
    pub catalog: &'static str,
    /// Designs that have no replacement for it, unless further parts change.
    pub designs_without: usize,
    /// The fewest replacements that any design has.
    pub fewest: usize,
    /// The designs that use it, each with its number of replacements.
    pub designs: Vec<DesignOfPart>,
}

/// A design that uses a part.
#[derive(Debug, Clone, PartialEq, Eq, Serialize)]
pub struct DesignOfPart {
    /// Its file.
    pub file: String,
    /// Parts that can go in while no further part changes.
    pub replacements: usize,
}

impl PartInUse {
    /// A part with the files of its designs; `files` by their places.
    pub fn new(part: &ExposedPart, files: &[&str]) -> Self {
        let design = |(at, replacements): &(usize, usize)| DesignOfPart {
            file: files.get(*at).map(|file| (*file).to_owned()).unwrap_or_default(),
            replacements: *replacements,
        };
        Self {
            part: part.part.full_name(),
            catalog: part.part.kind.file_name(),
            designs_without: part.without(),
            fewest: part.fewest(),
            designs: part.designs.iter().map(design).collect(),
        }
    }
}

/// The columns of parts in use.
pub const PARTS: [Column; 6] = [
    Column::text("part", "the part in use"),
    Column::text("catalog", "the catalog of its kind"),
    Column::whole("designs", "designs that use it"),
    Column::whole("without", "designs that have no replacement for it"),
    Column::whole("fewest", "the fewest replacements that any of them has"),
    Column::text("hit", "the designs without a replacement"),
];

/// The parts in use as a table.
pub fn table(of: &Exposure) -> Table {
    let mut table = Table::new("Parts in use", &PARTS);
    table.rows = of
        .parts
        .iter()
        .map(|part| {
            let without = part.designs.iter().filter(|d| d.replacements == 0);
            let hit: Vec<&str> =
                without.map(|d| super::tables::within(&d.file, &of.folder)).collect();
            vec![
                part.part.clone().into(),
                part.catalog.into(),
                part.designs.len().into(),
                part.designs_without.into(),
                part.fewest.into(),
                hit.join(", ").into(),
            ]
        })
        .collect();
    table
}

/// As a document: parts, and files at fault.
pub fn document(of: &Exposure) -> Document {
    let mut tables = vec![table(of)];
    if !of.broken.is_empty() {
        tables.push(broken(&of.broken));
    }
    Document { title: format!("Parts in use in {}", of.folder), tables }
}

/// For people.
pub fn terminal(of: &Exposure, look: &Look) -> String {
    let mut text = look.heading(&format!("Parts in use in {}", of.folder));
    text.push('\n');
    text += &look.paragraph(&super::terminal::read(of.read, &of.broken), 0, 2);
    text.push('\n');
    text += &screen::table(&table(of), &["part", "designs", "without", "fewest", "hit"], look);
    if !of.broken.is_empty() {
        text.push('\n');
        text += &screen::table(&broken(&of.broken), &BROKEN.map(|c| c.heading), look);
    }
    text.push('\n');
    let meaning = "Without: designs for which nothing can go in unless a further part changes; hit: which \
                   they are. Fewest: the least number of parts that can go in, among its designs.";
    text + &look.paragraph(meaning, 0, 2)
}
