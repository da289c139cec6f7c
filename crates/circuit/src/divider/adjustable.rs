//! The divider of an adjustable output: a fixed part RX and a pot in series, RI to ground.
//!
//! Model page, section 4.4. The pot is wired as a rheostat, its wiper strapped to the free end of
//! the track.

use super::fixed::{Uppers, first_from, ri_power};
use super::{Choice, Divider, DividerCurrent, window};
use crate::amplifier::InputError;
use crate::check::{Check, Finding, Tally, WhileHolding, Worst};
use crate::rail::Rail;
use crate::reference::Bias;
use crate::resistor::{LineAtRail, PotAtRail, Resistance};
use quantity::digits::compare;
use std::cmp::Ordering;
use std::ops::ControlFlow::{self, Continue};

/// The range that is asked of the knob, V.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct AdjustableAim {
    /// The lowest output that must be reached.
    pub from_v: f64,
    /// The highest output that must be reached.
    pub to_v: f64,
    /// The lowest output that the knob may be turned to.
    pub low_stop_v: f64,
    /// Never exceeded; None: not checked.
    pub ceiling_v: Option<f64>,
}

/// The outputs at the ends of the knob, at the corners, V.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct AdjustableOutput {
    /// Vlow: the lowest output that the knob may give.
    pub low_v: f64,
    /// Vfloor: the lowest output that it gives for certain.
    pub floor_v: f64,
    /// Vreach: the highest output that it gives for certain.
    pub reach_v: f64,
    /// Vtop: the highest output that the knob may give.
    pub top_v: f64,
}

/// The outputs that a divider with a pot makes of a reference.
#[inline]
pub fn output(
    bias: &Bias,
    divider: &Divider,
    pot: &PotAtRail,
    input: InputError,
) -> AdjustableOutput {
    let Divider { upper: rx, ri } = divider;
    let least_v = bias.vz_lo_v - input.error_v;
    let most_v = bias.vz_hi_v + input.error_v;
    let max_hi = rx.hi_ohm + pot.track.hi_ohm;
    let max_lo = rx.lo_ohm + pot.track.lo_ohm;
    let end = rx.hi_ohm + pot.end_ohm;
    AdjustableOutput {
        low_v: (1.0 + rx.lo_ohm / ri.hi_ohm) * least_v - input.bias_a * rx.lo_ohm,
        floor_v: (1.0 + end / ri.lo_ohm) * most_v + input.bias_a * end,
        reach_v: (1.0 + max_lo / ri.hi_ohm) * least_v - input.bias_a * max_lo,
        top_v: (1.0 + max_hi / ri.lo_ohm) * most_v + input.bias_a * max_hi,
    }
}

/// `reach-high`: the top of the range is reached.
pub fn reach_high(aim: &AdjustableAim, output: &AdjustableOutput) -> Finding {
    Finding { check: Check::ReachHigh, asked: aim.to_v, allowed: output.reach_v }
}

/// `reach-low`: the bottom of the range is reached.
pub fn reach_low(aim: &AdjustableAim, output: &AdjustableOutput) -> Finding {
    Finding { check: Check::ReachLow, asked: output.floor_v, allowed: aim.from_v }
}

/// `low-stop`: the knob stops above the low stop.
pub fn low_stop(aim: &AdjustableAim, output: &AdjustableOutput) -> Finding {
    Finding { check: Check::LowStop, asked: aim.low_stop_v, allowed: output.low_v }
}

/// `ceiling`: the knob stops below the ceiling; None where there is none.
pub fn ceiling(aim: &AdjustableAim, output: &AdjustableOutput) -> Option<Finding> {
    let allowed = aim.ceiling_v?;
    Some(Finding { check: Check::Ceiling, asked: output.top_v, allowed })
}

/// `rx-power`: power in the fixed part.
pub fn rx_power(current: &DividerCurrent, rx: &Resistance, line: &LineAtRail) -> Finding {
    Finding {
        check: Check::RxPower,
        asked: current.hi_a * current.hi_a * rx.hi_ohm,
        allowed: line.allowed_power_w,
    }
}

/// `rx-voltage`: voltage on the fixed part.
pub fn rx_voltage(current: &DividerCurrent, rx: &Resistance, line: &LineAtRail) -> Finding {
    Finding {
        check: Check::RxVoltage,
        asked: current.hi_a * rx.hi_ohm,
        allowed: line.allowed_voltage_v,
    }
}

/// `pot-power`: power in the whole track.
pub fn pot_power(current: &DividerCurrent, pot: &PotAtRail) -> Finding {
    Finding {
        check: Check::PotPower,
        asked: current.hi_a * current.hi_a * pot.track.hi_ohm,
        allowed: pot.allowed_power_w,
    }
}

/// `pot-voltage`: voltage on the whole track; None where the pot gives no limit.
pub fn pot_voltage(current: &DividerCurrent, pot: &PotAtRail) -> Option<Finding> {
    let allowed = pot.allowed_voltage_v?;
    Some(Finding { check: Check::PotVoltage, asked: current.hi_a * pot.track.hi_ohm, allowed })
}

/// All checks of the divider itself, in page order.
#[inline]
pub fn checks(
    aim: &AdjustableAim,
    bias: &Bias,
    divider: &Divider,
    line: &LineAtRail,
    pot: &PotAtRail,
    input: InputError,
    tally: &mut impl Tally,
) -> ControlFlow<()> {
    let out = output(bias, divider, pot, input);
    let current = DividerCurrent::new(bias, &divider.ri, input);
    tally.take(reach_high(aim, &out))?;
    tally.take(reach_low(aim, &out))?;
    tally.take(low_stop(aim, &out))?;
    if let Some(finding) = ceiling(aim, &out) {
        tally.take(finding)?;
    }
    tally.take(rx_power(&current, &divider.upper, line))?;
    tally.take(ri_power(&current, &divider.ri, line))?;
    tally.take(rx_voltage(&current, &divider.upper, line))?;
    tally.take(pot_power(&current, pot))?;
    if let Some(finding) = pot_voltage(&current, pot) {
        tally.take(finding)?;
    }
    Continue(())
}

/// How far the knob overshoots the range that is asked, as a fraction of its ends:
/// (Vtop − adjust_to)/adjust_to + (adjust_from − Vlow)/adjust_from.
pub fn overshoot(aim: &AdjustableAim, output: &AdjustableOutput) -> f64 {
    (output.top_v - aim.to_v) / aim.to_v + (aim.from_v - output.low_v) / aim.from_v
}

/// Chooses RX and RI from a line beside a pot, with the allowances.
///
/// Of the pairs inside the window for which all checks hold, the one that overshoots least; where
/// none holds all of them, the one whose greatest utilisation is least. Ties: the larger RI, then
/// the larger RX.
pub fn choose(
    aim: &AdjustableAim,
    bias: &Bias,
    line: &LineAtRail,
    pot: &PotAtRail,
    rail: &Rail,
) -> Choice {
    let search = PairSearch { aim, bias, line, pot, input: InputError::allowance(rail) };
    let ris = window(bias, line, rail);
    if ris.is_empty() {
        return Choice::OutsideWindow;
    }
    let ris = &line.values[ris];
    if let Some(divider) = search.least_overshoot(ris) {
        return Choice::Holds(divider);
    }
    search.least_strain(ris).map_or(Choice::OutsideWindow, Choice::Strained)
}

/// Some pair inside the window holds all checks beside the error `input`. Where none does for an
/// amplifier with less error than any other, none does for any amplifier, whatever is chosen.
pub fn some_pair_holds(
    aim: &AdjustableAim,
    bias: &Bias,
    line: &LineAtRail,
    pot: &PotAtRail,
    input: InputError,
    rail: &Rail,
) -> bool {
    let search = PairSearch { aim, bias, line, pot, input };
    // The cheaper condition first: most pots fail it.
    let spanning = search.spanning(&line.values, 1.0);
    if spanning.is_empty() {
        return false;
    }
    let window = &line.values[window(bias, line, rail)];
    search.least_overshoot(window).is_some()
}

/// a − b, at least as far below as comparison at ten digits of either leaves room for.
pub(crate) fn room_below(a: f64, b: f64) -> f64 {
    a - b - ROUNDING_ROOM * (a.abs() + b.abs())
}

/// a − b, at least as far above.
pub(crate) fn room_above(a: f64, b: f64) -> f64 {
    a - b + ROUNDING_ROOM * (a.abs() + b.abs())
}

/// Room left for rounding where a necessary condition turns something away.
const ROUNDING_ROOM: f64 = 1e-8;

struct PairSearch<'a> {
    aim: &'a AdjustableAim,
    bias: &'a Bias,
    line: &'a LineAtRail,
    pot: &'a PotAtRail,
    input: InputError,
}

/// A pair with what decides between pairs: less is better.
#[derive(Clone, Copy)]
struct Contender {
    divider: Divider,
    figure: f64,
}

/// The checks that get harder as RX rises, and those that get easier.
struct Sides {
    rising: f64,
    falling: f64,
}

impl PairSearch<'_> {
    fn least_overshoot(&self, ris: &[Resistance]) -> Option<Divider> {
        let ris = self.spanning(ris, 1.0);
        let mut best = None;
        let rxs = Uppers(&self.line.values);
        let mut hint = (0, 0);
        for ri in ris {
            if !self.low_side_rises(ri) {
                for i in 0..rxs.len() {
                    self.try_holding(Divider { upper: rxs.get(i), ri: *ri }, &mut best);
                }
                continue;
            }
            // What gets easier with RX (reach, low stop) holds from some place on, what gets harder
            // (bottom of the range, ceiling, powers, voltages) up to some place: between the two
            // all hold. The overshoot is a straight line in RX, so it is least at one of the ends.
            let from =
                first_from(hint.0, rxs.len(), |i| self.sides(ri, rxs.get(i)).falling_holds());
            let to = first_from(hint.1, rxs.len(), |i| !self.sides(ri, rxs.get(i)).rising_holds());
            hint = (from, to);
            if from >= to {
                continue;
            }
            let figure = |i: usize| {
                let divider = Divider { upper: rxs.get(i), ri: *ri };
                overshoot(self.aim, &output(self.bias, &divider, self.pot, self.input))
            };
            if figure(to - 1) <= figure(from) {
                self.walk_while_tied(ri, rxs, (from..to).rev(), &mut best);
            } else {
                self.walk_while_tied(ri, rxs, from..to, &mut best);
            }
        }
        best.map(|c: Contender| c.divider)
    }

    /// The values of RI with which no check is strained beyond `strain`, by necessary conditions, for
    /// a utilisation u ≤ strain of each check eases adjust_to and low_stop to a strain-th of
    /// themselves and raises adjust_from and ceiling by it: reach-high and reach-low then leave
    /// plo/RIhi ≥ adjust_to/(VZlo − ε) − adjust_from/(VZhi + ε); ceiling and low-stop leave
    /// phi/RIlo ≤ ceiling/(VZhi + ε) − low_stop/(VZlo − ε).
    fn spanning<'r>(&self, ris: &'r [Resistance], strain: f64) -> &'r [Resistance] {
        let (from, to) = self.span_of(ris, strain);
        ris.get(from..to).unwrap_or_default()
    }

    /// The same as places: from the first that is large enough to the first that is too large. Where
    /// none is both, the end is not behind the start.
    fn span_of(&self, ris: &[Resistance], strain: f64) -> (usize, usize) {
        let (least_v, most_v) =
            (self.bias.vz_lo_v - self.input.error_v, self.bias.vz_hi_v + self.input.error_v);
        let can_tell = least_v > 0.0 && strain.is_finite();
        if !can_tell {
            return (0, ris.len());
        }
        let (ease, raise) = (1.0 / strain, strain);
        let track = &self.pot.track;
        let least_ratio =
            room_below(self.aim.to_v * ease / least_v, self.aim.from_v * raise / most_v);
        let to = ris.partition_point(|ri| ri.hi_ohm * least_ratio <= track.lo_ohm);
        // The input current helps Vlow nowhere and lifts Vtop, so it can be left out here.
        let from = self.aim.ceiling_v.map_or(0, |ceiling| {
            let most_ratio =
                room_above(ceiling * raise / most_v, self.aim.low_stop_v * ease / least_v);
            ris.partition_point(|ri| ri.lo_ohm * most_ratio < track.hi_ohm)
        });
        (from, to)
    }

    /// Tries pairs from one end of those that hold until the next is clearly no better.
    fn walk_while_tied(
        &self,
        ri: &Resistance,
        rxs: Uppers<'_>,
        places: impl Iterator<Item = usize>,
        best: &mut Option<Contender>,
    ) {
        let mut first = None;
        for i in places {
            let Some(figure) = self.try_holding(Divider { upper: rxs.get(i), ri: *ri }, best)
            else {
                continue;
            };
            let first = *first.get_or_insert(figure);
            // A straight line that has risen by a unit in the tenth digit goes on rising.
            if compare(figure, first) == Ordering::Greater {
                break;
            }
        }
    }

    /// Takes a pair that holds if it is better; tells its overshoot.
    fn try_holding(&self, divider: Divider, best: &mut Option<Contender>) -> Option<f64> {
        WhileHolding::over(|t| {
            checks(self.aim, self.bias, &divider, self.line, self.pot, self.input, t)
        })
        .ok()?;
        let figure = overshoot(self.aim, &output(self.bias, &divider, self.pot, self.input));
        keep_better(Contender { divider, figure }, best);
        Some(figure)
    }

    fn least_strain(&self, ris: &[Resistance]) -> Option<Divider> {
        // A pair in the middle of those that are strained least, or where the span of a pot that is too
        // short or too long for all of them would lie, tells how much strain need be looked at.
        let mut best = None;
        let (from, to) = self.span_of(ris, 1.05);
        let probe = ris.get((from + to) / 2).or(ris.last())?;
        self.strain_beside(probe, self.likely_cross(probe), &mut best);
        let bound = best.map_or(f64::INFINITY, |c: Contender| c.figure);
        let spanning = self.spanning(ris, bound.max(1.0));
        let mut hint = spanning.first().map_or(0, |ri| self.likely_cross(ri));
        for ri in spanning {
            hint = self.strain_beside(ri, hint, &mut best);
        }
        best.map(|c: Contender| c.divider)
    }

    /// About where, among the values of RX beside one RI, what rises crosses what falls: a place to
    /// begin at. Without tolerances and input current reach-high and reach-low are used alike where
    /// Vreach·Vfloor = adjust_to·adjust_from: with x = RI + RX and the nominal track p,
    /// x² + (p + end)·x + p·end = adjust_to·adjust_from·(RI/VZ)².
    fn likely_cross(&self, ri: &Resistance) -> usize {
        let (track, end) = (self.pot.track.ohm, self.pot.end_ohm);
        let vz_v = 0.5 * (self.bias.vz_lo_v + self.bias.vz_hi_v);
        let product = self.aim.to_v * self.aim.from_v * (ri.ohm / vz_v).powi(2);
        let half = 0.5 * (track + end);
        let rx_ohm = (half * half - track * end + product).sqrt() - half - ri.ohm;
        // The first of the values of RX is the link.
        self.line.values.partition_point(|r| r.ohm < rx_ohm) + usize::from(rx_ohm > 0.0)
    }

    /// Tries the values of RX beside one RI; tells where what rises crosses what falls.
    fn strain_beside(&self, ri: &Resistance, hint: usize, best: &mut Option<Contender>) -> usize {
        let rxs = Uppers(&self.line.values);
        if !self.low_side_rises(ri) {
            for i in 0..rxs.len() {
                self.try_strained(Divider { upper: rxs.get(i), ri: *ri }, best);
            }
            return hint;
        }
        // The greatest of what rises and what falls is least where they cross.
        let cross = first_from(hint, rxs.len(), |i| {
            let sides = self.sides(ri, rxs.get(i));
            sides.rising >= sides.falling
        });
        for i in cross..rxs.len() {
            if !self.try_strained(Divider { upper: rxs.get(i), ri: *ri }, best) {
                break;
            }
        }
        for i in (0..cross).rev() {
            if !self.try_strained(Divider { upper: rxs.get(i), ri: *ri }, best) {
                break;
            }
        }
        cross
    }

    /// Takes a pair if it is strained less; false where pairs further out can't be.
    fn try_strained(&self, divider: Divider, best: &mut Option<Contender>) -> bool {
        let figure = Worst::of(|t| {
            checks(self.aim, self.bias, &divider, self.line, self.pot, self.input, t)
        });
        let beaten = best.is_some_and(|b| compare(figure, b.figure) == Ordering::Greater);
        if !beaten {
            keep_better(Contender { divider, figure }, best);
        }
        !beaten
    }

    /// Vlow and Vreach rise with RX: what the ratio gains exceeds what the input current takes off.
    fn low_side_rises(&self, ri: &Resistance) -> bool {
        let gained = (self.bias.vz_lo_v - self.input.error_v) / ri.hi_ohm;
        gained * (1.0 - 1e-6) > self.input.bias_a
    }

    fn sides(&self, ri: &Resistance, rx: Resistance) -> Sides {
        let divider = Divider { upper: rx, ri: *ri };
        let mut sides = Sides { rising: 0.0, falling: 0.0 };
        let _ = checks(self.aim, self.bias, &divider, self.line, self.pot, self.input, &mut sides);
        sides
    }
}

impl Tally for Sides {
    fn take(&mut self, finding: Finding) -> ControlFlow<()> {
        let side = match finding.check {
            Check::ReachHigh | Check::LowStop => &mut self.falling,
            _ => &mut self.rising,
        };
        *side = side.max(finding.utilisation());
        Continue(())
    }
}

impl Sides {
    fn falling_holds(&self) -> bool {
        quantity::digits::at_most(self.falling, 1.0)
    }

    fn rising_holds(&self) -> bool {
        quantity::digits::at_most(self.rising, 1.0)
    }
}

fn keep_better(new: Contender, best: &mut Option<Contender>) {
    let better = best.is_none_or(|old| {
        compare(new.figure, old.figure)
            .then_with(|| compare(old.divider.ri.ohm, new.divider.ri.ohm))
            .then_with(|| compare(old.divider.upper.ohm, new.divider.upper.ohm))
            == Ordering::Less
    });
    if better {
        *best = Some(new);
    }
}
