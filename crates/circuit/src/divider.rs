//! The divider between output, − input and ground: its current, and how its values are chosen.
//!
//! Model page, section 4.2. A divider is chosen for its reference, its line and its pot, not for the
//! amplifier: the choice uses the allowances εd and ibd, so a better amplifier never meets another
//! divider. The checks are then made with the amplifier's own εa and ib.

pub mod adjustable;
pub mod fixed;

use crate::amplifier::InputError;
use crate::check::{Check, Finding};
use crate::rail::{DividerRules, Rail};
use crate::reference::Bias;
use crate::resistor::{LineAtRail, Resistance};
use quantity::digits::{at_most, compare};
use std::cmp::Ordering;
use std::ops::Range;

/// The resistors of a divider: RI to ground, and above it RF, or RX in series with a pot.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Divider {
    /// RF of a fixed output, RX of an adjustable one; a link where none is fitted.
    pub upper: Resistance,
    /// RI.
    pub ri: Resistance,
}

/// The divider current at the corners, A.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct DividerCurrent {
    /// IDlo = (VZlo − ε)/RIhi − ib.
    pub lo_a: f64,
    /// IDhi = (VZhi + ε)/RIlo + ib.
    pub hi_a: f64,
}

impl DividerCurrent {
    /// The current through `ri` beside a reference and an amplifier error.
    #[inline]
    pub fn new(bias: &Bias, ri: &Resistance, input: InputError) -> Self {
        Self {
            lo_a: (bias.vz_lo_v - input.error_v) / ri.hi_ohm - input.bias_a,
            hi_a: (bias.vz_hi_v + input.error_v) / ri.lo_ohm + input.bias_a,
        }
    }

    /// `divider-window`: the low or the high side, whichever is used more; the low side where both
    /// are used alike.
    #[inline]
    pub fn divider_window(&self, rules: &DividerRules) -> Finding {
        let check = Check::DividerWindow;
        let low = Finding { check, asked: rules.min_a, allowed: self.lo_a };
        let high = Finding { check, asked: self.hi_a, allowed: rules.max_a };
        if compare(high.utilisation(), low.utilisation()) == Ordering::Greater { high } else { low }
    }
}

/// `divider-window` where no value of the line lies in the window: nothing is allowed.
pub const NO_VALUE_IN_WINDOW: Finding =
    Finding { check: Check::DividerWindow, asked: f64::INFINITY, allowed: 0.0 };

/// IDn = VZn/RI: the nominal divider current, A.
pub fn nominal_current_a(bias: &Bias, divider: &Divider) -> f64 {
    bias.vz_nominal_v / divider.ri.ohm
}

/// Some value of a line serves as RI: with the allowances it keeps the divider current in its window.
pub fn has_value_in_window(bias: &Bias, line: &LineAtRail, rail: &Rail) -> bool {
    !window(bias, line, rail).is_empty()
}

/// The places of `line.values` that may serve as RI: with the allowances the divider current stays
/// in its window. Both corner currents fall as RI rises, so these places lie together.
fn window(bias: &Bias, line: &LineAtRail, rail: &Rail) -> Range<usize> {
    let input = InputError::allowance(rail);
    let current = |ri: &Resistance| DividerCurrent::new(bias, ri, input);
    let from = line.values.partition_point(|ri| !at_most(current(ri).hi_a, rail.divider.max_a));
    let to = line.values.partition_point(|ri| at_most(rail.divider.min_a, current(ri).lo_a));
    from..to.max(from)
}

/// The divider that was chosen, with what the choice found.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Choice {
    /// With the allowances all checks of the divider hold.
    Holds(Divider),
    /// With the allowances some check fails; an amplifier with less error may still do.
    Strained(Divider),
    /// No value of the line lies in the window for the divider current.
    OutsideWindow,
}

impl Choice {
    /// The divider, where there is one.
    pub fn divider(&self) -> Option<Divider> {
        match self {
            Choice::Holds(d) | Choice::Strained(d) => Some(*d),
            Choice::OutsideWindow => None,
        }
    }
}
