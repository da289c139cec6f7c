//! The least that fails of any combination: the sets of failing checks of which none holds another.
//!
//! Where nothing qualifies these sets say everything: a set of checks can be asked in vain exactly
//! where it meets each of them. There are few of them, and each is kept with a combination that shows
//! it; of several one is taken that fails by little.
//!
//! A combination is a reference side, an amplifier and a power side. For each amplifier the least that
//! fails on either side is kept, and the two are joined. A reference side is passed over where the best
//! that any amplifier could make of it is no news; every check is monotone in each figure of an
//! amplifier (model page, section 6).

use crate::antichain::Antichain;
use crate::check_set::{CheckSet, Failing};
use crate::company::{Biased, Company, Places, best_at_input};
use circuit::check::Finding;
use circuit::pass::PassFigures;
use circuit::slot::Slot;
use rayon::prelude::*;
use select::problem::Problem;

/// A combination with a smallest set of checks that fail.
#[derive(Debug, Clone, PartialEq)]
pub struct Miss {
    /// The checks that fail; none for a candidate.
    pub failing: CheckSet,
    /// The greatest utilisation among them.
    pub worst: f64,
    /// Its parts.
    pub places: Places,
    /// Every check of it, in page order, with the values that are chosen for it.
    pub findings: Vec<Finding>,
}

impl Miss {
    /// What was found for the checks that fail.
    pub fn failures(&self) -> impl Iterator<Item = &Finding> {
        self.findings.iter().filter(|finding| !finding.holds())
    }
}

/// The least that fails of any combination of a problem.
#[derive(Debug, Clone, PartialEq)]
pub struct Survey {
    /// By number of failing checks, then by how far they fail. Empty where no transistor can be
    /// mounted or a slot holds no part.
    pub misses: Vec<Miss>,
}

impl Survey {
    /// Some combination fails in these checks at most.
    pub fn fails_within(&self, checks: CheckSet) -> bool {
        self.misses.iter().any(|miss| miss.failing.is_within(checks))
    }
}

/// There are too many combinations to look through.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct TooMany {
    /// Reference sides: zener, bias line, divider line and pot.
    pub references: u64,
    /// Amplifiers that may stand beside them.
    pub amplifiers: usize,
}

/// At most so many reference sides are looked at.
pub const MOST_REFERENCES: u64 = 2_000_000;

/// At most so many meetings of a reference side and an amplifier are worked out.
pub const MOST_MEETINGS: u64 = 40_000_000;

/// So many reference sides are looked at before it is seen which amplifiers are done.
const BATCH: usize = 256;

type PowerPlace = (u32, Option<u32>);
type ReferencePlace = (u32, u32, u32, Option<u32>);

/// An amplifier with the least that fails on either side of it.
struct Middle {
    supply: Failing,
    power: Antichain<PowerPlace>,
    reference: Antichain<ReferencePlace>,
}

/// Finds the least that fails.
///
/// # Errors
/// [`TooMany`] beyond [`MOST_REFERENCES`] or [`MOST_MEETINGS`].
pub fn survey(problem: &Problem<'_>) -> Result<Survey, TooMany> {
    let company = Company::new(problem);
    let too_many =
        TooMany { references: company.references(), amplifiers: company.amplifiers.len() };
    if too_many.references > MOST_REFERENCES {
        return Err(too_many);
    }
    let mut middles = middles(&company);
    meet_references(&company, &mut middles).ok_or(too_many)?;

    let mut least: Antichain<Places> = Antichain::new();
    for (amplifier, middle) in (0u32..).zip(&middles) {
        for (reference, place) in middle.reference.iter() {
            for (power, (pass, sink)) in middle.power.iter() {
                let (zener, bias_line, divider_line, pot) = *place;
                let mut places = [None; Slot::COUNT];
                places[Slot::Zener as usize] = Some(zener);
                places[Slot::BiasLine as usize] = Some(bias_line);
                places[Slot::Amplifier as usize] = Some(amplifier);
                places[Slot::DividerLine as usize] = Some(divider_line);
                places[Slot::Pot as usize] = pot;
                places[Slot::Pass as usize] = Some(*pass);
                places[Slot::Heatsink as usize] = *sink;
                least.insert(middle.supply.and(*reference).and(*power), places);
            }
        }
    }
    let mut misses: Vec<Miss> = least
        .into_vec()
        .into_iter()
        .filter_map(|(Failing { set, worst }, places)| {
            let findings = company.findings(&places)?;
            Some(Miss { failing: set, worst, places, findings })
        })
        .collect();
    misses.sort_by(|a, b| {
        (a.failing.len().cmp(&b.failing.len()))
            .then_with(|| a.worst.total_cmp(&b.worst))
            .then_with(|| a.failing.cmp(&b.failing))
    });
    Ok(Survey { misses })
}

/// A transistor with the least that fails of its mountings.
struct Mounted<'c> {
    place: u32,
    pass: &'c PassFigures,
    mountings: Antichain<Option<u32>>,
}

impl Mounted<'_> {
    /// Whatever amplifier drives them, nothing fails here that does not fail there: each figure that an
    /// amplifier meets is at least as good, and so is some mounting.
    fn is_as_good_as(&self, other: &Self) -> bool {
        let (mine, theirs) = (self.pass, other.pass);
        let past_amplifier = |p: &PassFigures| if p.junctions == 2 { p.ileak_a } else { None };
        let leaks_no_more = match (mine.ileak_a, theirs.ileak_a) {
            (None, _) => true,
            (Some(_), None) => false,
            (Some(a), Some(b)) => a <= b && past_amplifier(mine) <= past_amplifier(theirs),
        };
        leaks_no_more
            && mine.base.most_a <= theirs.base.most_a
            && mine.vbe_hi_v <= theirs.vbe_hi_v
            && mine.drive_power_w <= theirs.drive_power_w
            && other.mountings.iter().all(|(failing, _)| self.mountings.covers(failing))
    }
}

/// The transistors that can be mounted, without those to which another is as good: they bring no news.
fn best_mounted<'c>(company: &'c Company<'_>) -> Vec<Mounted<'c>> {
    let all: Vec<Mounted<'_>> = company
        .passes
        .par_iter()
        .enumerate()
        .map(|(t, pass)| {
            let mut mountings = Antichain::new();
            for (sink, mounted) in company.mountings(t) {
                mountings.insert(company.mounted_failing(pass, &mounted), sink);
            }
            Mounted { place: u32::try_from(t).unwrap_or(u32::MAX), pass, mountings }
        })
        .collect();
    let mut best: Vec<Mounted<'_>> = Vec::new();
    for mounted in all {
        if mounted.mountings.iter().next().is_none()
            || best.iter().any(|known| known.is_as_good_as(&mounted))
        {
            continue;
        }
        best.retain(|known| !mounted.is_as_good_as(known));
        best.push(mounted);
    }
    best
}

/// Every amplifier with the least that fails between it and any mounted transistor.
fn middles(company: &Company<'_>) -> Vec<Middle> {
    let mounted = best_mounted(company);
    company
        .amplifiers
        .par_iter()
        .map(|amp| {
            let mut power = Antichain::new();
            for Mounted { place, pass, mountings } in &mounted {
                if power.is_clear() {
                    break;
                }
                let driven = company.drive_failing(amp, pass);
                for (failing, sink) in mountings.iter() {
                    power.insert(failing.and(driven), (*place, *sink));
                }
            }
            Middle { supply: company.supply_failing(amp), power, reference: Antichain::new() }
        })
        .collect()
}

/// Puts the least that fails between each amplifier and any reference side where it belongs. None
/// where that takes too many meetings.
fn meet_references(company: &Company<'_>, middles: &mut [Middle]) -> Option<()> {
    let Some(best) = best_at_input(&company.amplifiers) else { return Some(()) };
    let mut biased = company.biased();
    // Those of which least fails first: they leave least to look for behind them.
    biased.sort_by(|a, b| {
        let by = |x: &Biased| (x.failing.set.len(), x.zener, x.line);
        by(a).cmp(&by(b))
    });
    let dividers: Vec<(u32, Option<u32>)> = company.dividers().collect();
    let mut open: Vec<usize> = (0..middles.len()).collect();
    let mut meetings = 0u64;
    let mut looked_at = 0usize;
    for biased in &biased {
        for &(line, pot) in &dividers {
            if looked_at.is_multiple_of(BATCH) {
                open = still_open(middles, &open);
            }
            looked_at += 1;
            open.retain(|&a| middles.get(a).is_some_and(|m| !m.reference.is_clear()));
            let news = |failing: Failing, open: &[usize], middles: &[Middle]| {
                open.iter().any(|&a| !middles.get(a).is_some_and(|m| m.reference.covers(&failing)))
            };
            // Nothing that meets this zener can fail in less than it does itself.
            if !news(biased.failing, &open, middles) {
                continue;
            }
            let Some(reference) = company.reference(biased, line, pot) else { continue };
            let at_best = biased.failing.and(company.input_failing(&reference, &best));
            for &a in &open {
                let (Some(middle), Some(amp)) = (middles.get_mut(a), company.amplifiers.get(a))
                else {
                    continue;
                };
                if middle.reference.covers(&at_best) {
                    continue;
                }
                meetings += 1;
                let failing = biased.failing.and(company.input_failing(&reference, amp));
                middle.reference.insert(failing, (biased.zener, biased.line, line, pot));
            }
            if meetings > MOST_MEETINGS {
                return None;
            }
        }
    }
    Some(())
}

/// The amplifiers of which a reference side could still bring news: what fails between them and every
/// transistor is not yet covered by what is known of all.
fn still_open(middles: &[Middle], open: &[usize]) -> Vec<usize> {
    let mut known: Antichain<()> = Antichain::new();
    for middle in middles {
        for (reference, _) in middle.reference.iter() {
            for (power, _) in middle.power.iter() {
                known.insert(middle.supply.and(*reference).and(*power), ());
            }
        }
    }
    let brings_news = |a: &usize| {
        middles.get(*a).is_some_and(|middle| {
            !middle.reference.is_clear()
                && middle.power.iter().any(|(power, _)| !known.covers(&middle.supply.and(*power)))
        })
    };
    open.iter().copied().filter(brings_news).collect()
}
