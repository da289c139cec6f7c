//! What can go into a design in place of a part that is gone, as one typed value.
//!
//! | module | what it holds |
//! |---|---|
//! | [`fit`] | parts and values with their checks, output, heat and cost |
//! | [`mend`] | one way to mend a design: what changes, and what comes of it |
//! | [`tables`] | both as tables, for CSV and workbook |
//! | [`terminal`] | it for people |
//! | [`note`] | a change note, for sign-off |
//!
//! # JSON, format 1
//!
//! [`Substitution`] is written as it stands. Numbers are full precision, an infinite one is the text
//! `inf` or `-inf`; what is not known is null. `level` is `nothing` (no further change), `values` or
//! `parts`; `board` is `same-package-and-pinout`, `same-package-other-pinout`,
//! `same-package-pinout-unknown`, `other-package`, `unknown`, `added` or `removed`.

pub mod fit;
pub mod mend;
pub mod note;
pub mod tables;
pub mod terminal;

use crate::figure::{Figure, Pairs};
use crate::remark;
use ::substitute::desk::{Desk, Names, not_stocked};
use ::substitute::replace::Replacements;
use circuit::slot::Slot;
use design::parts::Parts;
use fit::Fit;
use mend::Mend;
use serde::Serialize;

/// The format that these types write.
pub const FORMAT: u32 = 1;

/// What was asked and what was found.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Substitution {
    /// [`FORMAT`].
    pub format: u32,
    /// The design's file.
    pub file: String,
    /// What it is called.
    pub name: String,
    /// Its rail sheet.
    pub sheet: String,
    /// Boards to build.
    pub boards: u64,
    /// The currency of the shop.
    pub currency: Option<String>,
    /// What `--set` changed.
    pub set: Vec<String>,
    /// Hashes of the catalogs, and of the shop file where there is one.
    pub catalogs_sha256: Pairs<String, String>,
    /// The parts that are gone.
    #[serde(rename = "for")]
    pub gone: Vec<GonePart>,
    /// The part that was to go in, where one was named.
    pub with: Option<String>,
    /// The design as built; None where figures are not known.
    pub before: Option<Fit>,
    /// The part that was named, and nothing else changed; None where none was named, or its figures
    /// are not known.
    pub alone: Option<Fit>,
    /// Resistors of the design that a line that goes in by itself would not stock: key and Ω.
    pub not_stocked: Pairs<&'static str, Figure>,
    /// How far it was looked.
    pub looked: Looked,
    /// The replacements, the smallest change first.
    pub replacements: Vec<Mend>,
    /// What is not checked.
    pub not_checked: Vec<String>,
    /// Cautions that apply.
    pub cautions: Vec<&'static str>,
}

/// A part that is gone from a slot.
#[derive(Debug, Clone, PartialEq, Eq, Serialize)]
pub struct GonePart {
    /// The slot.
    pub slot: &'static str,
    /// `maker/part`.
    pub part: String,
}

/// How far replacements were looked for.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize)]
pub struct Looked {
    /// All changes with at most so many further parts; None: none, for the parts that are gone make too
    /// many combinations.
    pub further_parts: Option<u8>,
    /// That is every change there is.
    pub everything: bool,
    /// More further parts were left out because they make too many combinations.
    pub too_many: bool,
    /// Several parts are gone, and of too many pairs of replacements only those of the best were looked
    /// at: a better pair may be missing.
    pub paired_in_part: bool,
    /// How many replacements there are as far as it was looked, those left out of the list among them.
    pub found: usize,
}

impl Looked {
    /// What the search says of itself.
    pub fn new(found: &Replacements) -> Self {
        Self {
            further_parts: found.looked_further,
            everything: found.nothing_else_helps(),
            too_many: found.too_many,
            paired_in_part: found.paired_in_part,
            found: found.list.len(),
        }
    }
}

/// A design and what it was read with.
#[derive(Clone, Copy)]
pub struct Subject<'s, 'a> {
    /// Its file, as the user named it.
    pub file: &'s str,
    /// What it is called.
    pub name: &'s str,
    /// Its rail sheet, as a person would name it.
    pub sheet_file: &'s str,
    /// Its parts and values.
    pub parts: &'s Parts<'a>,
    /// What may be chosen for its sheet.
    pub desk: &'s Desk<'a>,
}

/// What belongs to the run: from the shop and the command line.
#[derive(Debug, Clone, PartialEq)]
pub struct Run {
    /// What `--set` changed.
    pub set: Vec<String>,
    /// Hashes of the catalogs, and of the shop file where there is one.
    pub catalogs_sha256: Pairs<String, String>,
}

impl Substitution {
    /// What was found for a design. `alone` are its parts with the part that was to go in and nothing
    /// else changed; at most `top` replacements are told.
    pub fn new(
        subject: &Subject<'_, '_>,
        (gone, with): (&Names, Option<&Names>),
        alone: Option<&Parts<'_>>,
        (found, top): (&Replacements, usize),
        run: &Run,
    ) -> Self {
        let Subject { file, name, sheet_file, parts, desk } = *subject;
        let sheet = desk.eligible.sheet;
        let gone_slots = Desk::gone(parts, gone);
        let mends = found.list.iter().take(top).zip(1..);
        let told = |(mend, rank)| Mend::new(rank, mend, subject, gone);
        Self {
            format: FORMAT,
            file: file.to_owned(),
            name: name.to_owned(),
            sheet: sheet_file.to_owned(),
            boards: sheet.boards,
            currency: sheet.currency.clone(),
            set: run.set.clone(),
            catalogs_sha256: run.catalogs_sha256.clone(),
            gone: gone_parts(parts, gone),
            with: with.map(|names| names.0.join(" ")),
            before: Fit::of(parts, sheet),
            alone: alone.and_then(|parts| Fit::of(parts, sheet)),
            not_stocked: Pairs(alone.map(|a| lost_values(a, gone_slots)).unwrap_or_default()),
            looked: Looked::new(found),
            replacements: mends.filter_map(told).collect(),
            not_checked: remark::not_checked(&sheet.rail),
            cautions: remark::cautions(&sheet.rail),
        }
    }
}

/// The parts of a design that names mean.
pub fn gone_parts(parts: &Parts<'_>, gone: &Names) -> Vec<GonePart> {
    let places = parts.places();
    let gone = places.iter().filter(|place| gone.mean(place.maker, place.part));
    gone.map(|place| GonePart { slot: place.slot.name(), part: place.full_name() }).collect()
}

/// The resistors that lines which go in for gone ones do not stock.
fn lost_values(alone: &Parts<'_>, gone: [bool; Slot::COUNT]) -> Vec<(&'static str, Figure)> {
    let of_bias = |key: &str| key == design::keys::Resistor::Rz.key();
    not_stocked(alone)
        .into_iter()
        .filter(|(key, _)| {
            let slot = if of_bias(key) { Slot::BiasLine } else { Slot::DividerLine };
            gone[slot as usize]
        })
        .map(|(key, ohm)| (key, Figure(ohm)))
        .collect()
}

/// What a slot is called on a terminal.
pub(crate) fn slot_words(slot: Slot) -> &'static str {
    match slot {
        Slot::BiasLine => "bias line",
        Slot::DividerLine => "divider line",
        other => other.name(),
    }
}

/// The text of a JSON file: indented, ending in a line break.
///
/// # Errors
/// As serde_json does; values of this crate give it no reason to.
pub fn json<T: Serialize>(value: &T) -> Result<Vec<u8>, serde_json::Error> {
    let mut text = serde_json::to_vec_pretty(value)?;
    text.push(b'\n');
    Ok(text)
}
