//! What the parts of each slot are lost to: those that a single check rules out in every company.
//!
//! A part is lost to a check *alone* when that check fails with every choice of the other parts,
//! whatever the other checks say. A part may be lost to several checks, each of them alone. A part
//! that is left may still be in no candidate: then it is the checks together that rule it out.

use crate::check_set::CheckSet;
use crate::company::{Company, Reference, best_at_input};
use crate::survey::{MOST_MEETINGS, MOST_REFERENCES, TooMany};
use circuit::check::Check;
use circuit::pass::PassFigures;
use circuit::slot::Slot;
use rayon::prelude::*;
use select::problem::Problem;

/// What the parts of a slot are lost to.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct SlotLosses {
    /// The slot.
    pub slot: Slot,
    /// Parts that may be chosen.
    pub parts: usize,
    /// Parts that find no place at all: a heatsink that fits no transistor, a transistor that no
    /// heatsink fits and that may not go unmounted.
    pub misfits: usize,
    /// For each check how many parts it rules out alone, in page order; only those that do.
    pub lost: Vec<(Check, usize)>,
    /// Parts that no check rules out alone.
    pub left: usize,
}

/// The check speaks of this slot's part: its figures, or values chosen beside it, are compared there.
pub fn concerns(slot: Slot, check: Check) -> bool {
    let checks = match slot {
        Slot::Zener => OF_REFERENCE.and(OF_MEETING),
        Slot::BiasLine => OF_REFERENCE,
        Slot::Amplifier => OF_SUPPLY.and(OF_MEETING).and(OF_DRIVE),
        Slot::DividerLine | Slot::Pot => CheckSet::DIVIDER,
        Slot::Pass => OF_POWER.and(OF_DRIVE),
        Slot::Heatsink => OF_POWER,
    };
    checks.contains(check)
}

/// For each part the checks that have not been seen to hold in any company; None for a misfit.
type Open = Vec<Option<CheckSet>>;

/// What the parts of every slot that the sheet fills are lost to, in the order of slots.
///
/// # Errors
/// [`TooMany`] where there are too many combinations to look through.
pub fn losses(problem: &Problem<'_>) -> Result<Vec<SlotLosses>, TooMany> {
    let company = Company::new(problem);
    let too_many =
        TooMany { references: company.references(), amplifiers: company.amplifiers.len() };
    if too_many.references > MOST_REFERENCES {
        return Err(too_many);
    }
    let mut open = OpenChecks::new(problem);
    open.meet_references(&company).ok_or(too_many)?;
    open.meet_transistors(&company);
    Ok(open.summed(problem))
}

struct OpenChecks {
    zeners: Open,
    bias_lines: Open,
    amplifiers: Open,
    divider_lines: Open,
    pots: Open,
    transistors: Open,
    heatsinks: Open,
}

/// Checks of the reference with its bias line.
const OF_REFERENCE: CheckSet = CheckSet::of(&[
    Check::ZenerBias,
    Check::ZenerPower,
    Check::ZenerJunction,
    Check::RzPower,
    Check::RzVoltage,
]);

/// Checks of the amplifier's supply.
const OF_SUPPLY: CheckSet = CheckSet::of(&[Check::AmpSupplyHigh, Check::AmpSupplyLow]);

/// Checks in which an amplifier meets a reference side, all but those of the divider.
const OF_INPUT: CheckSet = CheckSet::of(&[Check::AmpInputLow, Check::AmpInputHigh]);

/// Checks in which an amplifier meets a reference side.
const OF_MEETING: CheckSet = OF_INPUT.and(CheckSet::DIVIDER);

impl OpenChecks {
    fn new(problem: &Problem<'_>) -> Self {
        let all = |parts: usize, checks: CheckSet| vec![Some(checks); parts];
        let pots = if problem.rail.is_adjustable() { problem.pots.len() } else { 0 };
        let sinks = if problem.rail.chooses_heatsink() { problem.heatsinks.len() } else { 0 };
        Self {
            zeners: all(problem.zeners.len(), OF_REFERENCE.and(OF_MEETING)),
            bias_lines: all(problem.bias_lines.len(), OF_REFERENCE),
            amplifiers: all(problem.amplifiers.len(), OF_SUPPLY.and(OF_MEETING).and(OF_DRIVE)),
            divider_lines: all(problem.divider_lines.len(), CheckSet::DIVIDER),
            pots: all(pots, CheckSet::DIVIDER),
            // Filled in where transistors are mounted.
            transistors: vec![None; problem.transistors.len()],
            heatsinks: vec![None; sinks],
        }
    }

    /// The reference side, and amplifiers beside it. None where that takes too many meetings.
    fn meet_references(&mut self, company: &Company<'_>) -> Option<()> {
        for (open, amp) in self.amplifiers.iter_mut().zip(&company.amplifiers) {
            if let Some(open) = open {
                *open = open.without(OF_SUPPLY.without(company.supply_failing(amp).set));
            }
        }
        // Without amplifiers nothing meets a reference.
        let Some(best) = best_at_input(&company.amplifiers) else { return Some(()) };
        let dividers: Vec<(u32, Option<u32>)> = company.dividers().collect();
        let all: Vec<usize> = (0..company.amplifiers.len()).collect();
        let mut open = all.clone();
        let mut meetings = 0u64;
        for biased in company.biased() {
            let held = OF_REFERENCE.without(biased.failing.set);
            close(&mut self.zeners, biased.zener as usize, held);
            close(&mut self.bias_lines, biased.line as usize, held);
            for &(line, pot) in &dividers {
                let Some(reference) = company.reference(&biased, line, pot) else { continue };
                let may_hold = OF_MEETING.without(company.input_failing(&reference, &best).set);
                // For the reference any amplifier will do beside which a check holds.
                for &a in &all {
                    if !self.open_of(&reference).meets(may_hold) {
                        break;
                    }
                    self.meet(company, &reference, a);
                    meetings += 1;
                }
                // Amplifiers with open checks are tried beside every reference.
                open.retain(|&a| still(&self.amplifiers, Some(a)).meets(OF_MEETING));
                for &a in &open {
                    if still(&self.amplifiers, Some(a)).meets(may_hold) {
                        self.meet(company, &reference, a);
                        meetings += 1;
                    }
                }
                if meetings > MOST_MEETINGS {
                    return None;
                }
            }
        }
        Some(())
    }

    /// The checks that are still open for some part of a reference.
    fn open_of(&self, reference: &Reference<'_>) -> CheckSet {
        still(&self.zeners, Some(reference.biased.zener as usize))
            .and(still(&self.divider_lines, Some(reference.line as usize)))
            .and(still(&self.pots, reference.pot.map(|pot| pot as usize)))
    }

    /// Notes what holds where an amplifier meets a reference.
    fn meet(&mut self, company: &Company<'_>, reference: &Reference<'_>, amplifier: usize) {
        let Some(amp) = company.amplifiers.get(amplifier) else { return };
        let held = OF_MEETING.without(company.input_failing(reference, amp).set);
        close(&mut self.amplifiers, amplifier, held);
        close(&mut self.zeners, reference.biased.zener as usize, held);
        close(&mut self.divider_lines, reference.line as usize, held);
        if let Some(pot) = reference.pot {
            close(&mut self.pots, pot as usize, held);
        }
    }

    /// The power side, and amplifiers that drive it.
    fn meet_transistors(&mut self, company: &Company<'_>) {
        let mounted: Vec<Vec<(Option<u32>, CheckSet)>> = company
            .passes
            .par_iter()
            .enumerate()
            .map(|(t, pass)| {
                let on = |(sink, m)| (sink, company.mounted_failing(pass, &m).set);
                company.mountings(t).into_iter().map(on).collect()
            })
            .collect();
        for (open, mountings) in self.transistors.iter_mut().zip(&mounted) {
            if mountings.is_empty() {
                continue;
            }
            let mut checks = OF_POWER.and(OF_DRIVE);
            for &(sink, failing) in mountings {
                let held = OF_POWER.without(failing);
                checks = checks.without(held);
                if let Some(of_sink) = sink.and_then(|s| self.heatsinks.get_mut(s as usize)) {
                    *of_sink = Some(of_sink.unwrap_or(OF_POWER).without(held));
                }
            }
            *open = Some(checks);
        }
        self.meet_drive(company);
    }

    /// Amplifiers and the transistors that they drive.
    fn meet_drive(&mut self, company: &Company<'_>) {
        let mounted = company.passes.iter().zip(&self.transistors);
        let mounted: Vec<&PassFigures> =
            mounted.filter(|(_, open)| open.is_some()).map(|(pass, _)| pass).collect();
        let best = best_to_drive(&mounted);
        for (amp, open) in company.amplifiers.iter().zip(&mut self.amplifiers) {
            for pass in &best {
                let held = OF_DRIVE.without(company.drive_failing(amp, pass).set);
                *open = open.map(|checks| checks.without(held));
            }
            // Where nothing can be mounted no amplifier is to blame for what it would drive.
            if best.is_empty() {
                *open = open.map(|checks| checks.without(OF_DRIVE));
            }
        }
        // `amp-junction` meets several figures of the amplifier, so each is tried.
        company.passes.par_iter().zip(&mut self.transistors).for_each(|(pass, open)| {
            let Some(checks) = open else { return };
            for amp in &company.amplifiers {
                if !checks.meets(OF_DRIVE) {
                    break;
                }
                *checks = checks.without(OF_DRIVE.without(company.drive_failing(amp, pass).set));
            }
        });
    }

    fn summed(&self, problem: &Problem<'_>) -> Vec<SlotLosses> {
        let rail = problem.rail;
        let of = |slot| match slot {
            Slot::Zener => Some(&self.zeners),
            Slot::BiasLine => Some(&self.bias_lines),
            Slot::Amplifier => Some(&self.amplifiers),
            Slot::DividerLine => Some(&self.divider_lines),
            Slot::Pot => rail.is_adjustable().then_some(&self.pots),
            Slot::Pass => Some(&self.transistors),
            Slot::Heatsink => rail.chooses_heatsink().then_some(&self.heatsinks),
        };
        let slots = Slot::ALL.into_iter().filter_map(|slot| Some((slot, of(slot)?)));
        slots
            .map(|(slot, open)| {
                let by = |check: Check| {
                    open.iter().filter(|o| o.is_some_and(|o| o.contains(check))).count()
                };
                SlotLosses {
                    slot,
                    parts: open.len(),
                    misfits: open.iter().filter(|o| o.is_none()).count(),
                    lost: Check::ALL
                        .into_iter()
                        .map(|check| (check, by(check)))
                        .filter(|(_, parts)| *parts > 0)
                        .collect(),
                    left: open.iter().filter(|o| o.is_some_and(CheckSet::is_empty)).count(),
                }
            })
            .collect()
    }
}

/// Checks of the transistor on its mounting.
const OF_POWER: CheckSet = CheckSet::of(&[
    Check::CollectorVoltage,
    Check::CollectorCurrent,
    Check::PassPower,
    Check::PassJunction,
    Check::SoaLoad,
    Check::SoaFault,
    Check::FaultJunction,
    Check::Dropout,
]);

/// Checks in which an amplifier drives a transistor.
const OF_DRIVE: CheckSet = CheckSet::of(&[
    Check::BaseDrive,
    Check::SwingHigh,
    Check::SwingLow,
    Check::AmpJunction,
    Check::AmpFault,
    Check::LeakageSink,
    Check::NoLoad,
]);

/// Transistors that tell of every check in which an amplifier drives one whether any of these lets it
/// hold. Each of these checks meets one figure of the transistor, so the best of each figure will do.
/// Leakage counts by its size, by whether it is given, and by whether it passes the amplifier, so for
/// each kind there is one.
fn best_to_drive(passes: &[&PassFigures]) -> Vec<PassFigures> {
    let Some(best) = passes.iter().map(|pass| **pass).reduce(|mut best, pass| {
        best.base.most_a = best.base.most_a.min(pass.base.most_a);
        best.vbe_hi_v = best.vbe_hi_v.min(pass.vbe_hi_v);
        best.drive_power_w = best.drive_power_w.min(pass.drive_power_w);
        best
    }) else {
        return Vec::new();
    };
    let mut kinds: Vec<PassFigures> = Vec::new();
    for &&PassFigures { junctions, ileak_a, .. } in passes {
        let is_alike =
            |k: &PassFigures| k.junctions == junctions && k.ileak_a.is_some() == ileak_a.is_some();
        match kinds.iter_mut().find(|k| is_alike(k)) {
            Some(kind) if kind.ileak_a <= ileak_a => {}
            Some(kind) => kind.ileak_a = ileak_a,
            None => kinds.push(PassFigures { junctions, ileak_a, ..best }),
        }
    }
    kinds
}

fn close(open: &mut Open, place: usize, held: CheckSet) {
    if let Some(Some(checks)) = open.get_mut(place) {
        *checks = checks.without(held);
    }
}

fn still(open: &Open, place: Option<usize>) -> CheckSet {
    place.and_then(|p| open.get(p).copied().flatten()).unwrap_or_default()
}
