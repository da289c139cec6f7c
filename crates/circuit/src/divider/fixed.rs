//! The divider of a fixed output: RF from the output to the − input, RI from there to ground.
//!
//! Model page, section 4.3.

use super::{Choice, Divider, DividerCurrent, window};
use crate::amplifier::InputError;
use crate::check::{Check, Finding, Tally, Worst};
use crate::rail::Rail;
use crate::reference::Bias;
use crate::resistor::{LineAtRail, Resistance};
use quantity::digits::{at_most, compare, rounded};
use std::cmp::Ordering;
use std::ops::ControlFlow::{self, Continue};

/// The output voltage at the corners and with nominal parts, V.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct FixedOutput {
    /// VLlo.
    pub lo_v: f64,
    /// VLn.
    pub nominal_v: f64,
    /// VLhi.
    pub hi_v: f64,
}

/// The output that a divider makes of a reference.
///
/// VLhi = (1 + khi)(VZhi + ε) + ib·RFhi, VLlo = (1 + klo)(VZlo − ε) − ib·RFhi, VLn = (1 + k)·VZn,
/// with khi = RFhi/RIlo, klo = RFlo/RIhi, k = RF/RI.
#[inline]
pub fn output(bias: &Bias, divider: &Divider, input: InputError) -> FixedOutput {
    let Divider { upper: rf, ri } = divider;
    let by_input_v = input.bias_a * rf.hi_ohm;
    FixedOutput {
        lo_v: (1.0 + rf.lo_ohm / ri.hi_ohm) * (bias.vz_lo_v - input.error_v) - by_input_v,
        nominal_v: (1.0 + rf.ohm / ri.ohm) * bias.vz_nominal_v,
        hi_v: (1.0 + rf.hi_ohm / ri.lo_ohm) * (bias.vz_hi_v + input.error_v) + by_input_v,
    }
}

/// The figures of a fixed output that its checks ask for.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct FixedAim {
    /// V, volts.
    pub voltage_v: f64,
    /// τ, as a fraction.
    pub tolerance: f64,
}

/// `output-error`: the further of the two corner outputs from V.
#[inline]
pub fn output_error(aim: &FixedAim, output: &FixedOutput) -> Finding {
    Finding {
        check: Check::OutputError,
        asked: (output.hi_v - aim.voltage_v).max(aim.voltage_v - output.lo_v),
        allowed: aim.tolerance * aim.voltage_v,
    }
}

/// `rf-power`: power in RF.
#[inline]
pub fn rf_power(current: &DividerCurrent, rf: &Resistance, line: &LineAtRail) -> Finding {
    Finding {
        check: Check::RfPower,
        asked: current.hi_a * current.hi_a * rf.hi_ohm,
        allowed: line.allowed_power_w,
    }
}

/// `ri-power`: power in RI.
#[inline]
pub fn ri_power(current: &DividerCurrent, ri: &Resistance, line: &LineAtRail) -> Finding {
    Finding {
        check: Check::RiPower,
        asked: current.hi_a * current.hi_a * ri.lo_ohm,
        allowed: line.allowed_power_w,
    }
}

/// `rf-voltage`: voltage on RF.
#[inline]
pub fn rf_voltage(current: &DividerCurrent, rf: &Resistance, line: &LineAtRail) -> Finding {
    Finding {
        check: Check::RfVoltage,
        asked: current.hi_a * rf.hi_ohm,
        allowed: line.allowed_voltage_v,
    }
}

/// The four checks of the divider itself, in page order.
#[inline]
pub fn checks(
    aim: &FixedAim,
    bias: &Bias,
    divider: &Divider,
    line: &LineAtRail,
    input: InputError,
    tally: &mut impl Tally,
) -> ControlFlow<()> {
    let current = DividerCurrent::new(bias, &divider.ri, input);
    tally.take(output_error(aim, &output(bias, divider, input)))?;
    tally.take(rf_power(&current, &divider.upper, line))?;
    tally.take(ri_power(&current, &divider.ri, line))?;
    tally.take(rf_voltage(&current, &divider.upper, line))?;
    Continue(())
}

/// Chooses RF and RI from a line, with the allowances.
///
/// Of the pairs inside the window for which the four checks hold, the one with the least utilisation
/// of `output-error`; where none holds all four, the one whose greatest utilisation of the four is
/// least. Ties: the least |VLn − V|, then the larger RI, then the larger RF.
pub fn choose(aim: &FixedAim, bias: &Bias, line: &LineAtRail, rail: &Rail) -> Choice {
    let search = PairSearch { aim, bias, line, input: InputError::allowance(rail) };
    let ris = window(bias, line, rail);
    if ris.is_empty() {
        return Choice::OutsideWindow;
    }
    let ris = &line.values[ris];
    // A pair whose greatest utilisation of the four is at most 1 holds, and its `output-error` is no
    // more than that; so the strained search need only run where no pair holds.
    if let Some(divider) = search.best(ris, Aim::Holding) {
        return Choice::Holds(divider);
    }
    search.best(ris, Aim::LeastStrain).map_or(Choice::OutsideWindow, Choice::Strained)
}

/// What makes one pair better than another.
#[derive(Clone, Copy, PartialEq)]
enum Aim {
    /// Least `output-error` among pairs that hold.
    Holding,
    /// Least of the greatest utilisation of all four.
    LeastStrain,
}

/// A pair with what decides between pairs.
#[derive(Clone, Copy)]
struct Contender {
    divider: Divider,
    figure: f64,
}

struct PairSearch<'a> {
    aim: &'a FixedAim,
    bias: &'a Bias,
    line: &'a LineAtRail,
    input: InputError,
}

impl PairSearch<'_> {
    fn best(&self, ris: &[Resistance], aim: Aim) -> Option<Divider> {
        let mut best: Option<Contender> = None;
        // Every value of RF, a link first.
        let rfs = Uppers(&self.line.values);
        // The best RF rises with RI, so the search begins where it ended for the RI before.
        let mut hint = 0;
        for ri in ris {
            if !self.low_side_rises(ri) {
                // With the input current near the divider current the low output falls as RF rises:
                // nothing is ordered, so every RF is tried.
                for i in 0..rfs.len() {
                    self.try_pair(Divider { upper: rfs.get(i), ri: *ri }, aim, &mut best);
                }
                continue;
            }
            let cross = self.crossing(ri, rfs, aim, hint);
            hint = cross;
            // Both ways from the crossing the figure of this RI only grows. Pairs that could still
            // tie at ten digits are tried too.
            for i in cross..rfs.len() {
                if !self.try_pair(Divider { upper: rfs.get(i), ri: *ri }, aim, &mut best) {
                    break;
                }
            }
            for i in (0..cross).rev() {
                if !self.try_pair(Divider { upper: rfs.get(i), ri: *ri }, aim, &mut best) {
                    break;
                }
            }
        }
        best.map(|c| c.divider)
    }

    /// VLlo rises with RF: its slope (1−…)(VZlo − ε)/RIhi of the ratio exceeds what ib takes off.
    fn low_side_rises(&self, ri: &Resistance) -> bool {
        // lo/hi of the line is the same for all its values; the room makes the test safe.
        let Some(value) = self.line.values.last() else { return false };
        let gained = value.lo_ohm / ri.hi_ohm * (self.bias.vz_lo_v - self.input.error_v);
        gained * (1.0 - 1e-6) > self.input.bias_a * value.hi_ohm
    }

    /// The first RF at which what rises with RF has reached what falls with it. What falls is
    /// V − VLlo; what rises is VLhi − V and, for the least strain, the power and voltage checks.
    fn crossing(&self, ri: &Resistance, rfs: Uppers<'_>, aim: Aim, hint: usize) -> usize {
        let current = DividerCurrent::new(self.bias, ri, self.input);
        let crossed = |i: usize| {
            let rf = rfs.get(i);
            let out = output(self.bias, &Divider { upper: rf, ri: *ri }, self.input);
            let high = out.hi_v - self.aim.voltage_v;
            let low = self.aim.voltage_v - out.lo_v;
            if high >= low {
                return true;
            }
            if aim == Aim::Holding {
                return false;
            }
            let falling = Finding {
                check: Check::OutputError,
                asked: low,
                allowed: self.aim.tolerance * self.aim.voltage_v,
            };
            let rising = rf_power(&current, &rf, self.line)
                .utilisation()
                .max(ri_power(&current, ri, self.line).utilisation())
                .max(rf_voltage(&current, &rf, self.line).utilisation());
            rising >= falling.utilisation()
        };
        first_from(hint, rfs.len(), crossed)
    }

    /// Tries a pair; false where pairs further out on its side cannot win any more.
    fn try_pair(&self, divider: Divider, aim: Aim, best: &mut Option<Contender>) -> bool {
        let figure = match aim {
            Aim::Holding => {
                let out = output(self.bias, &divider, self.input);
                let error = output_error(self.aim, &out).utilisation();
                let beaten = best.is_some_and(|b| compare(error, b.figure) == Ordering::Greater);
                if beaten || !at_most(error, 1.0) {
                    return false;
                }
                let rest = self.holds_beside_error(&divider);
                if !rest {
                    // Smaller RF may hold; larger ones won't, and end by their own error.
                    return true;
                }
                error
            }
            Aim::LeastStrain => {
                Worst::of(|t| checks(self.aim, self.bias, &divider, self.line, self.input, t))
            }
        };
        let Some(b) = best else {
            *best = Some(Contender { divider, figure });
            return true;
        };
        match compare(figure, b.figure) {
            Ordering::Greater => return false,
            Ordering::Less => *best = Some(Contender { divider, figure }),
            Ordering::Equal => {
                if self.wins_tie(&divider, &b.divider) {
                    *best = Some(Contender { divider, figure });
                }
            }
        }
        true
    }

    fn holds_beside_error(&self, divider: &Divider) -> bool {
        let current = DividerCurrent::new(self.bias, &divider.ri, self.input);
        rf_power(&current, &divider.upper, self.line).holds()
            && ri_power(&current, &divider.ri, self.line).holds()
            && rf_voltage(&current, &divider.upper, self.line).holds()
    }

    /// At equal figures: the least |VLn − V|, then the larger RI, then the larger RF.
    fn wins_tie(&self, a: &Divider, b: &Divider) -> bool {
        let off = |d: &Divider| self.off_nominal(d);
        compare(off(a), off(b))
            .then_with(|| compare(b.ri.ohm, a.ri.ohm))
            .then_with(|| compare(b.upper.ohm, a.upper.ohm))
            == Ordering::Less
    }

    /// |VLn − V|, which alone is taken between rounded figures.
    fn off_nominal(&self, divider: &Divider) -> f64 {
        let out = output(self.bias, divider, self.input);
        (rounded(out.nominal_v) - rounded(self.aim.voltage_v)).abs()
    }
}

/// The values that may stand above the − input: a link, then every value of the line, rising.
#[derive(Clone, Copy)]
pub(super) struct Uppers<'a>(pub &'a [Resistance]);

impl Uppers<'_> {
    pub fn len(self) -> usize {
        self.0.len() + 1
    }

    pub fn get(self, i: usize) -> Resistance {
        if i == 0 { Resistance::LINK } else { self.0[i - 1] }
    }
}

/// The first place in 0..len where `reached` turns true (len where it never does), given that it
/// stays true from there on. Looks near `hint` first, by doubling steps.
pub(super) fn first_from(hint: usize, len: usize, reached: impl Fn(usize) -> bool) -> usize {
    let hint = hint.min(len);
    let (mut low, mut high) = (0, len);
    if hint < len {
        let mut step = 1;
        if reached(hint) {
            high = hint;
            while high > 0 {
                let probe = high.saturating_sub(step);
                if reached(probe) {
                    high = probe;
                    step *= 2;
                } else {
                    low = probe + 1;
                    break;
                }
            }
            if high == 0 {
                return 0;
            }
        } else {
            low = hint + 1;
            loop {
                let probe = low + step - 1;
                if probe >= len {
                    break;
                }
                if reached(probe) {
                    high = probe;
                    break;
                }
                low = probe + 1;
                step *= 2;
            }
        }
    }
    while low < high {
        let middle = low + (high - low) / 2;
        if reached(middle) {
            high = middle;
        } else {
            low = middle + 1;
        }
    }
    low
}
