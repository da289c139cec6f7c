//! Whether any combination keeps certain limits, and one that does.
//!
//! Unlike the search it ranks nothing and stops at the first combination that it meets; and it may be
//! asked for some of the checks alone, or for checks that are strained up to a utilisation. Values of
//! resistors are those that are chosen with all checks, whatever is asked.
//!
//! Three steps, each over what the one before has left: transistors that can be mounted, amplifiers that
//! drive one of them, reference sides that suit one of these amplifiers. A transistor or an amplifier
//! to which another is as good in every figure is left out, for every check is monotone in each of these
//! figures (model page, section 6). A reference is passed over where necessary conditions already fail
//! beside the best figures of all amplifiers that are left: those of the search, asked of the limits in
//! place of the checks.

use crate::check_set::CheckSet;
use crate::company::{Biased, Company, Places, Reference, best_at_input};
use crate::limits::Limits;
use circuit::amplifier::AmplifierAtRail;
use circuit::assembly::{Aim, may_hold, supply_checks};
use circuit::check::Check;
use circuit::divider::has_value_in_window;
use circuit::drive;
use circuit::pass::PassFigures;
use circuit::reference::{Chosen, ZenerAtRail, choose_rz, chosen_rz};
use circuit::resistor::{LineAtRail, PotAtRail};
use circuit::slot::Slot;
use rayon::prelude::*;
use std::collections::HashSet;
use std::sync::Mutex;

/// Checks of the reference with its bias line.
pub(crate) const OF_REFERENCE: CheckSet = CheckSet::of(&[
    Check::ZenerBias,
    Check::ZenerPower,
    Check::ZenerJunction,
    Check::RzPower,
    Check::RzVoltage,
]);

/// Checks of the amplifier's supply.
pub(crate) const OF_SUPPLY: CheckSet = CheckSet::of(&[Check::AmpSupplyHigh, Check::AmpSupplyLow]);

/// Checks in which an amplifier meets a reference side.
pub(crate) const OF_MEETING: CheckSet =
    CheckSet::of(&[Check::AmpInputLow, Check::AmpInputHigh]).and(CheckSet::DIVIDER);

/// Checks of the transistor on its mounting.
pub(crate) const OF_POWER: CheckSet = CheckSet::of(&[
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
pub(crate) const OF_DRIVE: CheckSet = CheckSet::of(&[
    Check::BaseDrive,
    Check::SwingHigh,
    Check::SwingLow,
    Check::AmpJunction,
    Check::AmpFault,
    Check::LeakageSink,
    Check::NoLoad,
]);

/// A transistor on a mounting, by their places.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) struct Power {
    pass: u32,
    sink: Option<u32>,
}

/// An amplifier with a mounted transistor that it drives.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) struct Driver {
    amplifier: u32,
    power: Power,
}

/// Zener, bias line, divider line and pot, by their places.
type ReferencePlaces = (u32, u32, u32, Option<u32>);

/// The amplifiers that no reference side suits, as far as has been seen. Good for one set of limits, as
/// long as nothing moves that a reference side meets.
///
/// What suits an amplifier is not kept: which answer comes first depends on how work is shared out, and
/// the same one is to be found whenever it is asked for.
#[derive(Debug, Default)]
pub(crate) struct Unsuited(Mutex<HashSet<u32>>);

/// What is known from another rail that differs in nothing that matters for it; None where it may.
#[derive(Clone, Copy, Default)]
pub(crate) struct Known<'k> {
    pub powers: Option<&'k [Power]>,
    pub drivers: Option<&'k [Driver]>,
    pub unsuited: Option<&'k Unsuited>,
}

/// Some combination that keeps the limits; None where none does. The same one whenever it is asked.
pub(crate) fn find(company: &Company<'_>, limits: &Limits) -> Option<Places> {
    find_knowing(company, limits, Known::default())
}

/// The same with what is known already.
pub(crate) fn find_knowing(
    company: &Company<'_>,
    limits: &Limits,
    known: Known<'_>,
) -> Option<Places> {
    let found;
    let drivers = match known.drivers {
        Some(drivers) => drivers,
        None => {
            found = match known.powers {
                Some(powers) => drivers_of(company, limits, powers),
                None => drivers_of(company, limits, &powers(company, limits)),
            };
            &found
        }
    };
    let (driver, reference) = match known.unsuited {
        Some(unsuited) => unsuited.reference(company, limits, drivers)?,
        None => reference_beside(company, limits, drivers)?,
    };
    let (zener, bias_line, divider_line, pot) = reference;
    let mut places = [None; Slot::COUNT];
    places[Slot::Zener as usize] = Some(zener);
    places[Slot::BiasLine as usize] = Some(bias_line);
    places[Slot::Amplifier as usize] = Some(driver.amplifier);
    places[Slot::DividerLine as usize] = Some(divider_line);
    places[Slot::Pot as usize] = pot;
    places[Slot::Pass as usize] = Some(driver.power.pass);
    places[Slot::Heatsink as usize] = driver.power.sink;
    Some(places)
}

/// The transistors that keep the limits on some mounting, each with the first.
pub(crate) fn powers(company: &Company<'_>, limits: &Limits) -> Vec<Power> {
    let on_first = |(pass, figures): (usize, &PassFigures)| {
        let mountings = company.best_mountings(pass);
        let keeps = |(_, mounted): &(_, _)| {
            limits.let_all(|t| figures.checks(mounted, &company.duty, company.rail(), t))
        };
        let (sink, _) = mountings.into_iter().find(keeps)?;
        Some(Power { pass: u32::try_from(pass).ok()?, sink })
    };
    company.passes().par_iter().enumerate().filter_map(on_first).collect()
}

/// Whatever drives the one would drive the other with nothing failing that did not.
fn drives_as_well(mine: &PassFigures, theirs: &PassFigures) -> bool {
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
}

/// The transistors to which no other is as good to drive.
fn best_to_drive<'c>(company: &'c Company<'_>, powers: &[Power]) -> Vec<(Power, &'c PassFigures)> {
    let with_figures = |power: &Power| Some((*power, company.passes().get(power.pass as usize)?));
    undominated(powers.iter().filter_map(with_figures), |(_, a), (_, b)| drives_as_well(a, b))
}

/// Transistors that tell of every check in which an amplifier drives one whether any of these lets it
/// hold. Each of these checks meets one figure of the transistor, so the best of each figure will do.
/// Leakage counts by its size, by whether it is given, and by whether it passes the amplifier, so for
/// each kind there is one.
pub(crate) fn best_figures_to_drive(passes: &[&PassFigures]) -> Vec<PassFigures> {
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

/// The items to which no other is as good; of equals the first.
pub(crate) fn undominated<T: Copy>(
    items: impl Iterator<Item = T>,
    as_good: impl Fn(&T, &T) -> bool,
) -> Vec<T> {
    let mut best: Vec<T> = Vec::new();
    for item in items {
        match best.iter().position(|known| as_good(known, &item)) {
            // What beats one beats the next as well, mostly.
            Some(place) => best.swap(0, place),
            None => {
                best.retain(|known| !as_good(&item, known));
                best.push(item);
            }
        }
    }
    best
}

/// The amplifiers that keep the limits by themselves and with one of these transistors, each with the
/// first.
pub(crate) fn drivers_of(company: &Company<'_>, limits: &Limits, powers: &[Power]) -> Vec<Driver> {
    let best = best_to_drive(company, powers);
    let rail = company.rail();
    let figures: Vec<&PassFigures> = best.iter().map(|(_, pass)| *pass).collect();
    let bounds = best_figures_to_drive(&figures);
    let driver = |(place, amp): (usize, &AmplifierAtRail)| {
        if !limits.let_all(|t| supply_checks(amp, rail, t)) {
            return None;
        }
        let drives = |(_, pass): &&(Power, &PassFigures)| {
            limits.let_all(|t| drive::checks(amp, pass, rail, t))
        };
        // What fails with the best figures of all fails with each.
        if !bounds.iter().any(|pass| limits.let_all(|t| drive::checks(amp, pass, rail, t))) {
            return None;
        }
        let (power, _) = best.iter().find(drives)?;
        Some(Driver { amplifier: u32::try_from(place).ok()?, power: *power })
    };
    company.amplifiers().par_iter().enumerate().filter_map(driver).collect()
}

impl Unsuited {
    /// A reference side beside one of these amplifiers.
    fn reference(
        &self,
        company: &Company<'_>,
        limits: &Limits,
        drivers: &[Driver],
    ) -> Option<(Driver, ReferencePlaces)> {
        // Not held while searching: a thread that waits for others may come back here.
        let lock = || self.0.lock().unwrap_or_else(std::sync::PoisonError::into_inner);
        let open: Vec<Driver> = {
            let known = lock();
            drivers.iter().filter(|d| !known.contains(&d.amplifier)).copied().collect()
        };
        let found = reference_beside(company, limits, &open);
        if found.is_none() {
            lock().extend(open.iter().map(|driver| driver.amplifier));
        }
        found
    }
}

/// The amplifiers that are left, and what bounds a reference beside them.
pub(crate) struct Meeting<'m, 'c> {
    company: &'m Company<'c>,
    limits: Limits,
    drivers: Vec<(Driver, &'m AmplifierAtRail)>,
    /// The best figures of all of them.
    best: AmplifierAtRail,
    aim: Option<Aim>,
    /// Pots as the limits ask of them.
    pots: Vec<PotAtRail>,
    line_spread: f64,
}

/// A reference side that keeps the limits beside one of these amplifiers.
fn reference_beside(
    company: &Company<'_>,
    limits: &Limits,
    drivers: &[Driver],
) -> Option<(Driver, ReferencePlaces)> {
    let meeting = Meeting::new(company, limits, drivers)?;
    let mut zeners: Vec<(f64, u32, &ZenerAtRail)> = (0u32..)
        .zip(company.zeners())
        .filter_map(|(place, zener)| Some((meeting.cold_spread(zener)?, place, zener)))
        .collect();
    // The narrowest first: they suit most.
    zeners.sort_by(|(a, p, _), (b, q, _)| a.total_cmp(b).then_with(|| p.cmp(q)));
    zeners.par_iter().find_map_first(|(_, place, zener)| meeting.beside_zener(*place, zener))
}

/// Whatever reference side suits the one suits the other as well.
fn meets_as_well(mine: &AmplifierAtRail, theirs: &AmplifierAtRail) -> bool {
    mine.part.vcm_low_v <= theirs.part.vcm_low_v
        && mine.part.vcm_high_v <= theirs.part.vcm_high_v
        && mine.part.ib_max_a <= theirs.part.ib_max_a
        && mine.fixed_error_v <= theirs.fixed_error_v
        && mine.common_mode <= theirs.common_mode
}

impl<'m, 'c> Meeting<'m, 'c> {
    /// None without amplifiers.
    ///
    /// Those that stay are in the order of their places: an amplifier more or less that suits nothing
    /// leaves the first that suits the same.
    fn new(company: &'m Company<'c>, limits: &Limits, drivers: &[Driver]) -> Option<Self> {
        let amplifiers = company.amplifiers();
        let with_figures = |d: &Driver| Some((*d, amplifiers.get(d.amplifier as usize)?));
        let drivers: Vec<(Driver, &AmplifierAtRail)> =
            drivers.iter().filter_map(with_figures).collect();
        let figures: Vec<AmplifierAtRail> = drivers.iter().map(|(_, amp)| **amp).collect();
        let best = best_at_input(&figures)?;
        let spreads = company.divider_lines.iter().map(LineAtRail::spread);
        let mut drivers = undominated(drivers.into_iter(), |(_, a), (_, b)| meets_as_well(a, b));
        drivers.sort_by_key(|(driver, _)| driver.amplifier);
        Some(Self {
            company,
            limits: *limits,
            drivers,
            best,
            aim: limits.aim(&company.aim),
            pots: company.pots.iter().map(|pot| limits.pot(pot)).collect(),
            line_spread: spreads.fold(f64::INFINITY, f64::min),
        })
    }

    /// These amplifiers, whatever they drive.
    pub fn of_amplifiers(
        company: &'m Company<'c>,
        limits: &Limits,
        amplifiers: impl Iterator<Item = u32>,
    ) -> Option<Self> {
        let undriven = Power { pass: 0, sink: None };
        let drivers: Vec<Driver> =
            amplifiers.map(|amplifier| Driver { amplifier, power: undriven }).collect();
        Self::new(company, limits, &drivers)
    }

    /// What fails of these checks beside every amplifier.
    pub fn always_failing(&self, reference: &Reference<'_>, mut checks: CheckSet) -> CheckSet {
        for (_, amp) in &self.drivers {
            if checks.is_empty() {
                break;
            }
            checks = checks.in_both(self.company.input_failing(reference, amp).set);
        }
        checks
    }

    /// A reference side of this biased zener keeps the limits: with any divider line and pot, or with
    /// those that are given.
    pub fn suits(&self, biased: &Biased, line: Option<u32>, pot: Option<u32>) -> bool {
        self.may_suit(biased.bias.vz_lo_v, biased.bias.vz_hi_v, self.has_divider())
            && self.beside_biased(biased, line, pot).is_some()
    }

    /// VZhi/VZlo before RZ is chosen; None where no RZ and no divider lets the zener in.
    fn cold_spread(&self, zener: &ZenerAtRail) -> Option<f64> {
        let rail = self.company.rail();
        if OF_REFERENCE.is_within(self.limits.asked_to_hold()) {
            let largest = zener.largest_rz_ohm(rail);
            if !(largest > 0.0 && zener.smallest_rz_ohm(rail) <= largest) {
                return None;
            }
        }
        // V0hi never falls and V0lo never rises with the zener's own heat.
        let v0 = zener.test_voltage(0.0, rail);
        self.may_suit(v0.lo_v, v0.hi_v, self.has_divider()).then_some(v0.hi_v / v0.lo_v)
    }

    /// A reference between these voltages, or a wider one, may suit the best of the amplifiers: with a
    /// divider inside the window, or where that is not sure with or without one.
    fn may_suit(&self, lo_v: f64, hi_v: f64, has_divider: bool) -> bool {
        let rail = self.company.rail();
        let lets = |finding| self.limits.lets(&finding);
        if !lets(self.best.amp_input_low(lo_v)) || !lets(self.best.amp_input_high(hi_v, rail)) {
            return false;
        }
        let error_v = self.best.input_error(hi_v).error_v;
        // A divider that does not exist breaks no band.
        let can_tell = has_divider && lo_v > error_v;
        !can_tell || self.aim.is_none_or(|aim| aim.may_suit(lo_v, hi_v, error_v, self.line_spread))
    }

    /// A reference side keeps the limits only with a divider inside the window.
    fn has_divider(&self) -> bool {
        self.limits.bounded().contains(Check::DividerWindow)
    }

    fn beside_zener(&self, place: u32, zener: &ZenerAtRail) -> Option<(Driver, ReferencePlaces)> {
        (0u32..).zip(&self.company.bias_lines).find_map(|(line, at_rail)| {
            let rail = self.company.rail();
            let bias = if OF_REFERENCE.is_within(self.limits.asked_to_hold()) {
                choose_rz(zener, at_rail, rail)?.0
            } else {
                let bias = match chosen_rz(zener, at_rail, rail)? {
                    Chosen::Holds(bias, _) | Chosen::Fails(bias, _) => bias,
                };
                self.limits.let_all(|t| zener.checks(&bias, at_rail, t)).then_some(bias)?
            };
            if !self.may_suit(bias.vz_lo_v, bias.vz_hi_v, self.has_divider()) {
                return None;
            }
            let biased = Biased { zener: place, line, bias, failing: Default::default() };
            self.beside_biased(&biased, None, None)
        })
    }

    /// With any divider line and pot, or with those that are given.
    fn beside_biased(
        &self,
        biased: &Biased,
        line: Option<u32>,
        pot: Option<u32>,
    ) -> Option<(Driver, ReferencePlaces)> {
        let company = self.company;
        if !self.limits.bounded().meets(CheckSet::DIVIDER) {
            // Any divider will do.
            let (line, pot) = company.dividers().next()?;
            return self.met(&company.reference(biased, line, pot)?);
        }
        let lines = (0u32..).zip(&company.divider_lines);
        lines
            .filter(|(place, _)| line.is_none_or(|line| line == *place))
            .find_map(|(line, at_rail)| self.beside_line(biased, line, at_rail, pot))
    }

    /// With a divider line and any pot, or with the one that is given.
    fn beside_line(
        &self,
        biased: &Biased,
        line: u32,
        at_rail: &LineAtRail,
        pot: Option<u32>,
    ) -> Option<(Driver, ReferencePlaces)> {
        let (company, bias) = (self.company, &biased.bias);
        let is_adjustable = company.rail().is_adjustable();
        if !has_value_in_window(bias, at_rail, company.rail()) {
            // Without a divider all pots are alike.
            let first = is_adjustable.then(|| pot.unwrap_or(0));
            return self.met(&company.reference(biased, line, first)?);
        }
        if !self.may_suit(bias.vz_lo_v, bias.vz_hi_v, true) {
            return None;
        }
        if !is_adjustable {
            return self.met(&company.reference(biased, line, None)?);
        }
        let may_serve = |(place, relaxed): &(u32, &PotAtRail)| {
            pot.is_none_or(|pot| pot == *place)
                && self.pot_may_serve(biased, at_rail, *place, relaxed)
        };
        (0u32..)
            .zip(&self.pots)
            .filter(may_serve)
            .find_map(|(pot, _)| self.met(&company.reference(biased, line, Some(pot))?))
    }

    /// A pot may serve beside a biased zener and the best of the amplifiers.
    fn pot_may_serve(
        &self,
        biased: &Biased,
        line: &LineAtRail,
        pot: u32,
        relaxed: &PotAtRail,
    ) -> bool {
        let (company, bias) = (self.company, &biased.bias);
        let rail = company.rail();
        let track_ohm = relaxed.track.hi_ohm;
        // With the allowances the divider current is at least this, and so is its highest with less.
        let least_a = rail.divider.min_a * (1.0 - 1e-8);
        if least_a * least_a * track_ohm > relaxed.allowed_power_w
            || relaxed.allowed_voltage_v.is_some_and(|v| least_a * track_ohm > v)
        {
            return false;
        }
        let input = self.best.input_error(bias.vz_hi_v);
        if bias.vz_lo_v - input.error_v <= 0.0 {
            return true;
        }
        let volts = (bias.vz_lo_v, bias.vz_hi_v);
        let span = self
            .aim
            .as_ref()
            .and_then(|aim| aim.pot_span(volts, input.error_v, &rail.divider, line.spread()));
        if span.is_some_and(|span| !span.may_serve(relaxed)) {
            return false;
        }
        let all_asked = CheckSet::DIVIDER.is_within(self.limits.asked_to_hold());
        let at_rail = company.pots.get(pot as usize);
        !all_asked || may_hold(&company.aim, bias, line, at_rail, input, rail)
    }

    /// The first of the amplifiers beside which a reference side keeps the limits.
    fn met(&self, reference: &Reference<'_>) -> Option<(Driver, ReferencePlaces)> {
        let keeps = |amp: &AmplifierAtRail| {
            self.limits.let_all(|t| self.company.input_checks(reference, amp, t))
        };
        if !keeps(&self.best) {
            return None;
        }
        let (driver, _) = self.drivers.iter().find(|(_, amp)| keeps(amp))?;
        let Reference { biased, line, pot, .. } = *reference;
        Some((*driver, (biased.zener, biased.line, line, pot)))
    }
}
