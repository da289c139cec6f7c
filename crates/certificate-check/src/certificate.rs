//! The file that `railwright shortlist --certificate` writes, format 1.

use crate::rank::Share;
use circuit::slot::Slot;
use serde::Deserialize;
use std::collections::BTreeMap;

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
pub(crate) struct Certificate {
    pub certificate: u32,
    pub sheet_sha256: String,
    pub catalogs_sha256: BTreeMap<String, String>,
    pub set: Vec<String>,
    pub by: Option<String>,
    pub skip_broken_rows: bool,
    pub top: usize,
    pub rows: Vec<Row>,
    pub claims: Claims,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
pub(crate) struct Row {
    pub cost: f64,
    pub loss: f64,
    pub stress: f64,
    /// Maker and name in the order of `Slot::ALL`; null where the slot holds no part.
    pub parts: [Option<[String; 2]>; Slot::COUNT],
    /// RZ, RF or RX, and RI.
    pub values_ohm: [f64; 3],
}

/// What is claimed of the combinations that are not listed.
#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
pub(crate) struct Claims {
    /// Every amplifier, or power side, that is open adds at least one of these.
    pub least_amplifier: Vec<Share>,
    pub least_power: Vec<Share>,
    /// Amplifiers by place in their file, so ordered that groups of them are ranges.
    pub amplifier_order: Vec<usize>,
    pub groups: Vec<Group>,
    /// Open reference, counted from 0, and amplifier: to be tried with every open power side.
    pub pairs: Vec<[usize; 2]>,
}

/// Why no pair of one of some references and one of a group of amplifiers is in the list.
#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
pub(crate) struct Group {
    /// The check that fails, or `rank`: what they are part of ranks after the last row.
    pub because: String,
    /// From the first of `amplifier_order` up to, and without, the second.
    pub amplifiers: [usize; 2],
    /// Ranges of open references, alike.
    pub references: Vec<[usize; 2]>,
}
