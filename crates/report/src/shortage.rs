//! A shortage over a folder of designs, and which parts a shortage would hit hardest.
//!
//! | module | what it holds |
//! |---|---|
//! | [`exposure`] | every part in use and how many replacements it has |
//! | [`tables`] | a shortage as tables, for CSV, workbook and Markdown |
//! | [`terminal`] | it for people |
//!
//! # JSON, format 1
//!
//! [`Shortage`] is written as it stands: `designs` in the order of the report (those that nothing can
//! save first), each with its best replacements as in a substitution; `cover` with the fewest new
//! parts, what all boards cost with them, and for each design the replacement that is taken.

pub mod exposure;
pub mod tables;
pub mod terminal;

use crate::figure::{Figure, Pairs};
use crate::substitute::fit::Fit;
use crate::substitute::mend::{Mend, trouble};
use crate::substitute::{GonePart, Looked, Subject, gone_parts};
use ::substitute::desk::{Names, Offer, changed_slots};
use ::substitute::shortage::{Affected, CoverOfAll, PartName};
use circuit::slot::Slot;
use eligible::kind_of;
use serde::Serialize;

/// The format that these types write.
pub const FORMAT: u32 = 1;

/// A shortage and what it does to the designs of a folder.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Shortage {
    /// [`FORMAT`].
    pub format: u32,
    /// The folder.
    pub folder: String,
    /// The parts that are gone, as they were named.
    #[serde(rename = "for")]
    pub gone: Vec<String>,
    /// The currency of the shop.
    pub currency: Option<String>,
    /// What `--set` changed.
    pub set: Vec<String>,
    /// Hashes of the catalogs, and of the shop file where there is one.
    pub catalogs_sha256: Pairs<String, String>,
    /// Designs that were read.
    pub read: usize,
    /// Design files that are at fault.
    pub broken: Vec<Broken>,
    /// The designs that use parts that are gone: those first that nothing can save.
    pub designs: Vec<AffectedDesign>,
    /// The fewest new parts for all of them; None where none can be mended.
    pub cover: Option<CoverFound>,
}

/// A design file that is at fault.
#[derive(Debug, Clone, PartialEq, Eq, Serialize)]
pub struct Broken {
    /// The file.
    pub file: String,
    /// Its faults, a line each.
    pub faults: Vec<String>,
}

/// A design that uses parts that are gone.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct AffectedDesign {
    /// Its file.
    pub file: String,
    /// What it is called.
    pub name: String,
    /// Its rail sheet.
    pub sheet: String,
    /// Boards to build.
    pub boards: u64,
    /// The parts that are gone from it.
    pub gone: Vec<GonePart>,
    /// The design as built; None where figures are not known.
    pub before: Option<Fit>,
    /// How far it was looked.
    pub looked: Looked,
    /// Its best replacements.
    pub replacements: Vec<Mend>,
    /// Why nothing can save it; empty where something can.
    pub why_nothing: String,
}

/// The fewest new parts for all designs.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct CoverFound {
    /// The new parts.
    pub parts: Vec<CoverPart>,
    /// What all boards of the designs that are mended cost.
    pub cost: Figure,
    /// No fewer parts do, and no as many cost less. False where the search gave up.
    pub exact: bool,
    /// Designs that can be mended, but not all at once from the joint stock.
    pub left_out: Vec<String>,
    /// What is taken for each design, in the order of files.
    pub picks: Vec<Pick>,
}

/// A new part.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct CoverPart {
    /// `maker/part`.
    pub part: String,
    /// The catalog that holds it.
    pub file: &'static str,
    /// The designs that take it.
    pub designs: usize,
    /// Pieces for all their boards.
    pub pieces: u64,
    /// Pieces in stock; None: blank.
    pub stock: Option<Figure>,
    /// Weeks until an order arrives; None: blank.
    pub lead_weeks: Option<Figure>,
    /// The life-cycle word.
    pub status: Option<&'static str>,
    /// What is amiss with it for all boards together: see [`trouble`].
    pub trouble: Vec<String>,
}

/// What is taken for a design.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Pick {
    /// The design's file.
    pub file: String,
    /// How it is mended.
    pub mend: Mend,
}

impl AffectedDesign {
    /// What was found for a design; at most `top` replacements are told.
    pub fn new(
        subject: &Subject<'_, '_>,
        gone: &Names,
        found: &Affected,
        top: usize,
        why_nothing: String,
    ) -> Self {
        let sheet = subject.desk.eligible.sheet;
        let mends = found.found.list.iter().take(top).zip(1..);
        Self {
            file: subject.file.to_owned(),
            name: subject.name.to_owned(),
            sheet: subject.sheet_file.to_owned(),
            boards: sheet.boards,
            gone: gone_parts(subject.parts, gone),
            before: Fit::of(subject.parts, sheet),
            looked: Looked::new(&found.found),
            replacements: mends
                .filter_map(|(mend, rank)| Mend::new(rank, mend, subject, gone))
                .collect(),
            why_nothing,
        }
    }

    /// Nothing can go in.
    pub fn is_lost(&self) -> bool {
        self.replacements.is_empty()
    }
}

impl CoverFound {
    /// What was found for all affected designs, which stand in the same order as `subjects`. None where
    /// no design can be mended.
    pub fn new(
        all: &CoverOfAll,
        affected: &[Affected],
        subjects: &[Subject<'_, '_>],
        gone: &Names,
    ) -> Option<Self> {
        let mut picks = Vec::new();
        let mut left_out = Vec::new();
        for ((pick, affected), subject) in all.cover.picks.iter().zip(affected).zip(subjects) {
            let picked = pick.and_then(|place| {
                let replacement = affected.found.list.get(place)?;
                Mend::new(place + 1, replacement, subject, gone)
            });
            match picked {
                Some(mend) => picks.push((Pick { file: subject.file.to_owned(), mend }, subject)),
                None if affected.found.list.is_empty() => {}
                None => left_out.push(subject.file.to_owned()),
            }
        }
        let part = |name: &PartName| {
            let full = name.full_name();
            let takes = |(pick, subject): &&(Pick, &Subject<'_, '_>)| {
                let slots = pick.mend.parts.iter().filter(|p| p.is.as_deref() == Some(&full));
                (slots.count() as u64, subject.desk.eligible.sheet.boards)
            };
            let taken: Vec<(u64, u64)> =
                picks.iter().map(|p| takes(&p)).filter(|(slots, _)| *slots > 0).collect();
            let pieces = taken.iter().map(|(slots, boards)| slots * boards).sum();
            let offer = offered(name, affected, &all.cover.picks, subjects);
            CoverPart {
                stock: offer.as_ref().and_then(|(_, o)| o.stock).map(Figure),
                lead_weeks: offer.as_ref().and_then(|(_, o)| o.lead_weeks).map(Figure),
                status: offer.as_ref().map(|(_, o)| o.status.name()),
                trouble: offer.map(|(slot, o)| trouble(slot, &o, pieces)).unwrap_or_default(),
                part: full.clone(),
                file: name.kind.file_name(),
                designs: taken.len(),
                pieces,
            }
        };
        let parts: Vec<CoverPart> = all.parts.iter().map(part).collect();
        let cost = Figure(all.cover.cost);
        let picks: Vec<Pick> = picks.into_iter().map(|(pick, _)| pick).collect();
        let any = !picks.is_empty() || !left_out.is_empty();
        any.then_some(Self { parts, cost, exact: all.cover.exact, left_out, picks })
    }
}

/// The row of a part that some pick puts in, with the slot that it goes into there.
fn offered(
    name: &PartName,
    affected: &[Affected],
    picks: &[Option<usize>],
    subjects: &[Subject<'_, '_>],
) -> Option<(Slot, Offer)> {
    let picked = picks.iter().zip(affected).zip(subjects);
    picked
        .filter_map(|((pick, affected), subject)| {
            Some((affected.found.list.get((*pick)?)?, subject.desk))
        })
        .find_map(|(replacement, desk)| {
            changed_slots(&replacement.choices).find_map(|slot| {
                let offer = desk.offer(slot, replacement.choices[slot as usize])?;
                let is_it = offer.maker == name.maker && offer.part == name.part;
                (is_it && kind_of(slot) == name.kind).then_some((slot, offer))
            })
        })
}
