//! What the parts of each slot are lost to: those that a single check rules out in every company.
//!
//! A part is lost to a check *alone* when that check fails with every choice of the other parts,
//! whatever the other checks say. A part may be lost to several checks, each of them alone. A part
//! that is left may still be in no candidate: then it is the checks together that rule it out.

use crate::check_set::CheckSet;
use crate::company::{Biased, Company};
use crate::limits::Limits;
use crate::scout::{
    Meeting, OF_DRIVE, OF_MEETING, OF_POWER, OF_REFERENCE, OF_SUPPLY, best_figures_to_drive,
    undominated,
};
use circuit::amplifier::AmplifierAtRail;
use circuit::check::Check;
use circuit::pass::PassFigures;
use circuit::slot::Slot;
use rayon::prelude::*;
use select::problem::Problem;
use std::sync::OnceLock;

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
pub fn losses(problem: &Problem<'_>) -> Vec<SlotLosses> {
    let company = Company::new(problem);
    let mut open = OpenChecks::new(problem);
    open.meet_references(&company);
    open.meet_transistors(&company);
    open.summed(problem)
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

    /// The reference side, and amplifiers beside it.
    fn meet_references(&mut self, company: &Company<'_>) {
        let references = References::new(company);
        for biased in &references.well {
            close(&mut self.bias_lines, biased.line as usize, OF_REFERENCE);
        }
        if self.bias_lines.iter().any(|open| open.is_some_and(|checks| !checks.is_empty())) {
            for biased in references.badly() {
                let held = OF_REFERENCE.without(biased.failing.set);
                close(&mut self.bias_lines, biased.line as usize, held);
            }
        }
        for (open, amp) in self.amplifiers.iter_mut().zip(company.amplifiers()) {
            let held = OF_SUPPLY.without(company.supply_failing(amp).set);
            *open = open.map(|checks| checks.without(held));
        }
        let meetings = Meetings::of_all_amplifiers(company);
        self.meet_zeners(company, &references, &meetings);
        self.meet_dividers(&references, &meetings);
        self.meet_amplifiers(company, &references);
    }

    /// Each zener beside the amplifiers.
    fn meet_zeners(
        &mut self,
        company: &Company<'_>,
        references: &References<'_, '_>,
        meetings: &Meetings<'_, '_>,
    ) {
        let still_open = |(zener, open): (usize, &Option<CheckSet>)| {
            let zener = u32::try_from(zener).unwrap_or(u32::MAX);
            let well = references.of_zener(zener);
            let open = meetings.open_beside(open.unwrap_or_default(), well, company);
            if open.is_empty() {
                return Some(open);
            }
            Some(meetings.open_beside(open, &company.biased_badly(zener), company))
        };
        self.zeners = self.zeners.par_iter().enumerate().map(still_open).collect();
    }

    /// Each divider line and each pot beside zeners and amplifiers.
    fn meet_dividers(&mut self, references: &References<'_, '_>, meetings: &Meetings<'_, '_>) {
        let open_beside = |line: Option<u32>, pot: Option<u32>| {
            let holds = |check: &Check| {
                let suits = |meeting: &Meeting<'_, '_>| {
                    references.any(|biased| meeting.suits(biased, line, pot))
                };
                meetings.of(*check).is_some_and(suits)
            };
            let held: CheckSet = CheckSet::DIVIDER.iter().filter(holds).collect();
            Some(CheckSet::DIVIDER.without(held))
        };
        let lines = 0..u32::try_from(self.divider_lines.len()).unwrap_or(u32::MAX);
        self.divider_lines = lines.map(|line| open_beside(Some(line), None)).collect();
        let pots = 0..u32::try_from(self.pots.len()).unwrap_or(u32::MAX);
        self.pots = pots.map(|pot| open_beside(None, Some(pot))).collect();
    }

    /// Each amplifier beside all reference sides.
    fn meet_amplifiers(&mut self, company: &Company<'_>, references: &References<'_, '_>) {
        let held_by = |check: Check| -> Vec<CheckSet> {
            let only = CheckSet::of(&[check]);
            // One that is no worse than one that holds, holds; one that is no better than one that
            // fails, fails. So few are held against the references themselves.
            let mut holding: Vec<&AmplifierAtRail> = Vec::new();
            let mut failing: Vec<&AmplifierAtRail> = Vec::new();
            let mut holds = |(place, amp): (u32, _)| {
                if holding.iter().any(|known| is_as_good(check, amp, known)) {
                    return true;
                }
                if failing.iter().any(|known| is_as_good(check, known, amp)) {
                    return false;
                }
                let limits = Limits::asking(only);
                let meeting = Meeting::of_amplifiers(company, &limits, std::iter::once(place));
                let holds =
                    meeting.is_some_and(|m| references.any(|biased| m.suits(biased, None, None)));
                if holds {
                    holding.push(amp)
                } else {
                    failing.push(amp)
                }
                holds
            };
            let amplifiers = (0u32..).zip(company.amplifiers());
            amplifiers.map(|amp| if holds(amp) { only } else { CheckSet::EMPTY }).collect()
        };
        for held in OF_MEETING.iter().map(held_by) {
            for (place, held) in held.into_iter().enumerate() {
                close(&mut self.amplifiers, place, held);
            }
        }
    }

    /// The power side, and amplifiers that drive it.
    fn meet_transistors(&mut self, company: &Company<'_>) {
        let of_transistor = |(t, pass): (usize, &PassFigures)| {
            // What fails on the best mountings fails on all.
            let mountings = company.best_mountings(t);
            let failing = |(_, mounted): &(_, _)| company.mounted_failing(pass, mounted).set;
            let fails = mountings.iter().map(failing).reduce(CheckSet::in_both)?;
            Some(OF_POWER.in_both(fails).and(OF_DRIVE))
        };
        self.transistors = company.passes().par_iter().enumerate().map(of_transistor).collect();
        let places = 0..u32::try_from(self.heatsinks.len()).unwrap_or(u32::MAX);
        self.heatsinks = places
            .into_par_iter()
            .map(|sink| {
                let mut open = None;
                for (pass, mounted) in company.on_heatsink(sink) {
                    let fails = company.mounted_failing(pass, &mounted).set;
                    let still: CheckSet = OF_POWER.in_both(open.unwrap_or(OF_POWER)).in_both(fails);
                    open = Some(still);
                    if still.is_empty() {
                        break;
                    }
                }
                open
            })
            .collect();
        self.meet_drive(company);
    }

    /// Amplifiers and the transistors that they drive.
    fn meet_drive(&mut self, company: &Company<'_>) {
        let mounted = company.passes().iter().zip(&self.transistors);
        let mounted: Vec<&PassFigures> =
            mounted.filter(|(_, open)| open.is_some()).map(|(pass, _)| pass).collect();
        let best = best_figures_to_drive(&mounted);
        for (amp, open) in company.amplifiers().iter().zip(&mut self.amplifiers) {
            for pass in &best {
                let held = OF_DRIVE.without(company.drive_failing(amp, pass).set);
                *open = open.map(|checks| checks.without(held));
            }
            // Where nothing can be mounted no amplifier is to blame for what it would drive.
            if best.is_empty() {
                *open = open.map(|checks| checks.without(OF_DRIVE));
            }
        }
        // Where a check holds with any amplifier it holds with one of the best for it.
        let best_for = |check: Check| {
            let amplifiers = company.amplifiers().iter();
            undominated(amplifiers, |a, b| is_as_good(check, a, b))
        };
        let best: Vec<(Check, Vec<&AmplifierAtRail>)> =
            OF_DRIVE.iter().map(|check| (check, best_for(check))).collect();
        company.passes().par_iter().zip(&mut self.transistors).for_each(|(pass, open)| {
            let Some(checks) = open else { return };
            for (check, amplifiers) in &best {
                let holds =
                    |amp: &&AmplifierAtRail| !company.drive_failing(amp, pass).set.contains(*check);
                if amplifiers.iter().any(holds) {
                    *checks = checks.without(CheckSet::of(&[*check]));
                }
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

/// What an amplifier lets this check find is no worse than what the other does, whatever stands beside
/// them. Only for checks that an amplifier takes part in.
fn is_as_good(check: Check, mine: &AmplifierAtRail, theirs: &AmplifierAtRail) -> bool {
    let (a, b) = (&mine.part, &theirs.part);
    match check {
        Check::AmpInputLow => a.vcm_low_v <= b.vcm_low_v,
        Check::AmpInputHigh => a.vcm_high_v <= b.vcm_high_v,
        Check::BaseDrive => a.iout_a >= b.iout_a,
        Check::SwingHigh => a.swing_high_v <= b.swing_high_v,
        Check::SwingLow => a.swing_low_v <= b.swing_low_v,
        Check::AmpJunction => {
            a.iq_max_a <= b.iq_max_a
                && a.rth_ja_c_per_w <= b.rth_ja_c_per_w
                && mine.allowed_rise_c >= theirs.allowed_rise_c
        }
        Check::AmpFault => {
            mine.fault_rise_c <= theirs.fault_rise_c
                && mine.allowed_fault_rise_c >= theirs.allowed_fault_rise_c
        }
        // Where a data sheet is silent the check is not made.
        Check::LeakageSink => match (a.isink_a, b.isink_a) {
            (None, _) => true,
            (Some(_), None) => false,
            (Some(a), Some(b)) => a >= b,
        },
        Check::NoLoad => a.ib_max_a <= b.ib_max_a,
        _ => {
            mine.fixed_error_v <= theirs.fixed_error_v
                && mine.common_mode <= theirs.common_mode
                && a.ib_max_a <= b.ib_max_a
        }
    }
}

/// For each check in which an amplifier meets a reference side, that check alone asked of all
/// amplifiers.
struct Meetings<'m, 'c>(Vec<(Check, Meeting<'m, 'c>)>);

impl<'m, 'c> Meetings<'m, 'c> {
    /// Empty without amplifiers.
    fn of_all_amplifiers(company: &'m Company<'c>) -> Self {
        let all = 0..u32::try_from(company.amplifiers().len()).unwrap_or(u32::MAX);
        let of_check = |check: Check| {
            let limits = Limits::asking(CheckSet::of(&[check]));
            Some((check, Meeting::of_amplifiers(company, &limits, all.clone())?))
        };
        Self(OF_MEETING.iter().filter_map(of_check).collect())
    }

    fn of(&self, check: Check) -> Option<&Meeting<'m, 'c>> {
        self.0.iter().find(|(c, _)| *c == check).map(|(_, meeting)| meeting)
    }

    /// The checks of these that hold beside none of these references of one zener, whatever divider
    /// and amplifier stand there.
    fn open_beside(&self, open: CheckSet, biased: &[Biased], company: &Company<'_>) -> CheckSet {
        let held_alone = |b: &Biased| OF_REFERENCE.without(b.failing.set);
        let mut open = biased.iter().fold(open, |open, b| open.without(held_alone(b)));
        // Most checks hold beside the first divider already.
        if let (Some((_, meeting)), Some(biased)) = (self.0.first(), biased.first())
            && let Some((line, pot)) = company.dividers().next()
            && let Some(reference) = company.reference(biased, line, pot)
        {
            let failing = meeting.always_failing(&reference, open.in_both(OF_MEETING));
            open = open.without(OF_MEETING.without(failing));
        }
        let holds = |check: &Check| {
            self.of(*check).is_some_and(|m| biased.iter().any(|b| m.suits(b, None, None)))
        };
        let held: CheckSet = open.in_both(OF_MEETING).iter().filter(holds).collect();
        open.without(held)
    }
}

/// Every zener on every bias line: first those of which a value holds, then the others.
struct References<'m, 'c> {
    company: &'m Company<'c>,
    well: Vec<Biased>,
    badly: OnceLock<Vec<Biased>>,
}

impl<'m, 'c> References<'m, 'c> {
    fn new(company: &'m Company<'c>) -> Self {
        Self { company, well: company.biased_well(), badly: OnceLock::new() }
    }

    fn of_zener(&self, zener: u32) -> &[Biased] {
        let from = self.well.partition_point(|b| b.zener < zener);
        let to = self.well.partition_point(|b| b.zener <= zener);
        self.well.get(from..to).unwrap_or_default()
    }

    /// Worked out when they are first asked for, and not from within other work that is shared out.
    fn badly(&self) -> &[Biased] {
        self.badly.get_or_init(|| {
            let zeners = 0..u32::try_from(self.company.zeners().len()).unwrap_or(u32::MAX);
            zeners.into_par_iter().flat_map_iter(|z| self.company.biased_badly(z)).collect()
        })
    }

    fn any(&self, suits: impl Fn(&Biased) -> bool + Sync) -> bool {
        self.well.par_iter().any(&suits) || self.badly().par_iter().any(&suits)
    }
}

fn close(open: &mut Open, place: usize, held: CheckSet) {
    if let Some(Some(checks)) = open.get_mut(place) {
        *checks = checks.without(held);
    }
}
