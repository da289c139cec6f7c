//! Many designs at once: which are affected, what mends each, and the fewest new parts for all.

use crate::built::Choice;
use crate::cover::{Cover, CoverOption, cover};
use crate::desk::{Desk, Names};
use crate::exposed::replacements_at_once;
use crate::replace::{Replacement, Replacements, Until, replacements};
use catalog::Kind;
use circuit::slot::Slot;
use design::parts::Parts;
use eligible::kind_of;
use rayon::prelude::*;
use std::collections::{BTreeMap, BTreeSet};
use std::sync::atomic::{AtomicUsize, Ordering};

/// A design among many.
#[derive(Debug, Clone, Copy)]
pub struct Entry<'a> {
    /// The place of its sheet's desk.
    pub desk: usize,
    /// Its parts and values.
    pub parts: Parts<'a>,
}

/// A design that uses a part that is gone.
#[derive(Debug)]
pub struct Affected {
    /// Its place among the entries.
    pub entry: usize,
    /// What can go in: every replacement with as few further parts as any.
    pub found: Replacements,
}

/// Tells which share of the work is done, 0 … 1.
pub type Tell<'t> = dyn Fn(f64) + Sync + 't;

/// The designs that use parts that are gone, each with its replacements.
pub fn affected(
    desks: &[Desk<'_>],
    entries: &[Entry<'_>],
    gone: &Names,
    tell: &Tell<'_>,
) -> Vec<Affected> {
    let uses = |entry: &Entry<'_>| {
        entry.parts.places().iter().any(|place| gone.mean(place.maker, place.part))
    };
    let hit: Vec<usize> = (0..entries.len()).filter(|at| uses(&entries[*at])).collect();
    let done = AtomicUsize::new(0);
    hit.par_iter()
        .filter_map(|at| {
            let entry = entries.get(*at)?;
            let desk = desks.get(entry.desk)?;
            let found = replacements(&desk.case(&entry.parts, gone, None), Until::Found(1));
            tell((done.fetch_add(1, Ordering::Relaxed) + 1) as f64 / hit.len() as f64);
            Some(Affected { entry: *at, found })
        })
        .collect()
}

/// A part by the catalog that holds it: maker and name.
#[derive(Debug, Clone, PartialEq, Eq, PartialOrd, Ord)]
pub struct PartName {
    /// Its catalog.
    pub kind: Kind,
    /// Its maker; may be empty.
    pub maker: String,
    /// Its name.
    pub part: String,
}

/// The fewest new parts for all affected designs that can be mended.
#[derive(Debug)]
pub struct CoverOfAll {
    /// What was found; picks stand in the order of the affected designs.
    pub cover: Cover,
    /// The new parts, in the order of their names.
    pub parts: Vec<PartName>,
}

/// A new part: its slot, its place in the slot's list, its catalog, maker and name.
type NewPart<'a> = (Slot, u32, (Kind, &'a str, &'a str));

/// The parts that a replacement puts in.
fn new_parts<'a>(desk: &Desk<'a>, replacement: &Replacement) -> Vec<NewPart<'a>> {
    let changed = Slot::ALL.into_iter().filter_map(|slot| {
        let Choice::Row(place) = replacement.choices[slot as usize] else { return None };
        let (maker, part) = desk.ground.name(slot, place)?;
        Some((slot, place, (kind_of(slot), maker, part)))
    });
    changed.collect()
}

/// Finds the fewest new parts for all affected designs that can be mended, among those the cheapest over
/// all boards. Where a sheet asks for parts from stock, designs share what there is.
pub fn cover_all<'a>(
    desks: &[Desk<'a>],
    entries: &[Entry<'_>],
    affected: &[Affected],
) -> CoverOfAll {
    let of_entry = |affected: &Affected| desks.get(entries.get(affected.entry)?.desk);
    // Numbers in the order of names, so that of equal parts the first by name is taken.
    let mut named: BTreeSet<(Kind, &'a str, &'a str)> = BTreeSet::new();
    for design in affected {
        let Some(desk) = of_entry(design) else { continue };
        for replacement in &design.found.list {
            named.extend(new_parts(desk, replacement).into_iter().map(|(_, _, name)| name));
        }
    }
    let names: Vec<(Kind, &'a str, &'a str)> = named.into_iter().collect();
    let number = |name: &(Kind, &str, &str)| {
        names.binary_search(name).ok().and_then(|at| u32::try_from(at).ok()).unwrap_or(u32::MAX)
    };
    let mut stock: BTreeMap<u32, f64> = BTreeMap::new();
    let mut designs: Vec<Vec<CoverOption>> = Vec::new();
    for design in affected {
        let Some(desk) = of_entry(design) else {
            designs.push(Vec::new());
            continue;
        };
        let sheet = desk.eligible.sheet;
        let option = |replacement: &Replacement| {
            let mut pieces: BTreeMap<u32, u64> = BTreeMap::new();
            let mut parts: Vec<u32> = Vec::new();
            for (slot, place, name) in new_parts(desk, replacement) {
                let number = number(&name);
                parts.push(number);
                // Lines are not counted: a catalog tells no stock of each of their values.
                let is_line = matches!(slot, Slot::BiasLine | Slot::DividerLine);
                if sheet.parts.need_stock && !is_line {
                    *pieces.entry(number).or_insert(0) += sheet.boards;
                    let offer = desk.offer(slot, Choice::Row(place));
                    stock.insert(number, offer.and_then(|o| o.stock).unwrap_or(0.0));
                }
            }
            parts.sort_unstable();
            parts.dedup();
            let cost = replacement.cost * sheet.boards as f64;
            CoverOption { parts, pieces: pieces.into_iter().collect(), cost }
        };
        designs.push(design.found.list.iter().map(option).collect());
    }
    let mut cover = cover(&designs, &stock);
    // Nothing is proven over pairs that were not looked at.
    cover.exact &= !affected.iter().any(|design| design.found.paired_in_part);
    let name = |number: &u32| names.get(*number as usize).copied();
    let parts = cover.parts.iter().filter_map(name).map(|(kind, maker, part)| PartName {
        kind,
        maker: maker.to_owned(),
        part: part.to_owned(),
    });
    let parts = parts.collect();
    CoverOfAll { cover, parts }
}

/// A part in use, and how many replacements each design has for it.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct ExposedPart {
    /// The part.
    pub part: PartName,
    /// The designs that use it, by their places among the entries, each with the number of parts that
    /// can go in while no further part changes.
    pub designs: Vec<(usize, usize)>,
}

impl ExposedPart {
    /// The fewest replacements that any of its designs has.
    pub fn fewest(&self) -> usize {
        self.designs.iter().map(|(_, replacements)| *replacements).min().unwrap_or(0)
    }

    /// How many of its designs have none.
    pub fn without(&self) -> usize {
        self.designs.iter().filter(|(_, replacements)| *replacements == 0).count()
    }
}

/// Every part in use: those first that some design has no replacement for, and of these those first
/// that more designs depend on without any; then by how few replacements there are.
pub fn exposed(desks: &[Desk<'_>], entries: &[Entry<'_>], tell: &Tell<'_>) -> Vec<ExposedPart> {
    let mut users: BTreeMap<PartName, BTreeSet<usize>> = BTreeMap::new();
    for (at, entry) in entries.iter().enumerate() {
        for place in entry.parts.places() {
            let (maker, part) = (place.maker.to_owned(), place.part.to_owned());
            let name = PartName { kind: kind_of(place.slot), maker, part };
            users.entry(name).or_default().insert(at);
        }
    }
    let asked: Vec<(&PartName, usize)> =
        users.iter().flat_map(|(name, at)| at.iter().map(move |at| (name, *at))).collect();
    let done = AtomicUsize::new(0);
    let counts: Vec<usize> = asked
        .par_iter()
        .map(|(name, at)| {
            let count = entries.get(*at).and_then(|entry| {
                let desk = desks.get(entry.desk)?;
                let gone = Names(vec![name.full_name()]);
                Some(replacements_at_once(&desk.case(&entry.parts, &gone, None)))
            });
            tell((done.fetch_add(1, Ordering::Relaxed) + 1) as f64 / asked.len() as f64);
            count.unwrap_or(0)
        })
        .collect();
    let mut of_part: BTreeMap<&PartName, Vec<(usize, usize)>> = BTreeMap::new();
    for ((name, at), count) in asked.iter().zip(counts) {
        of_part.entry(name).or_default().push((*at, count));
    }
    let mut parts: Vec<ExposedPart> = of_part
        .into_iter()
        .map(|(name, designs)| ExposedPart { part: name.clone(), designs })
        .collect();
    // A stable sort: equals stay in the order of their names.
    parts.sort_by_key(|p| {
        let without = std::cmp::Reverse(p.without());
        (without, p.fewest(), std::cmp::Reverse(p.designs.len()))
    });
    parts
}

impl PartName {
    /// `maker/part`, or the part alone where it has no maker.
    pub fn full_name(&self) -> String {
        match self.maker.as_str() {
            "" => self.part.clone(),
            maker => format!("{maker}/{}", self.part),
        }
    }
}
