//! All parts of a rail together, with their values: every check in page order, and the figures that
//! a designer asks for.

use crate::amplifier::{AmplifierAtRail, InputError};
use crate::check::Tally;
use crate::divider::adjustable::{self, AdjustableAim, AdjustableOutput};
use crate::divider::fixed::{self, FixedAim, FixedOutput};
use crate::divider::{self, Choice, Divider, DividerCurrent};
use crate::drive;
use crate::pass::{Duty, Mounted, PassFigures};
use crate::rail::{Output, Rail};
use crate::reference::{Bias, ZenerAtRail};
use crate::resistor::{LineAtRail, PotAtRail};
use std::ops::ControlFlow::{self, Continue};

/// What the output asks of its divider.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Aim {
    /// A fixed output.
    Fixed(FixedAim),
    /// An adjustable one.
    Adjustable(AdjustableAim),
}

impl Aim {
    /// The aim of a rail.
    pub fn of(rail: &Rail) -> Self {
        match rail.output {
            Output::Fixed { voltage_v, tolerance } => Aim::Fixed(FixedAim { voltage_v, tolerance }),
            Output::Adjustable { from_v, to_v, low_stop_v, ceiling_v } => {
                Aim::Adjustable(AdjustableAim { from_v, to_v, low_stop_v, ceiling_v })
            }
        }
    }
}

/// The output's figures in the form of the rail.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum OutputFigures {
    /// A fixed output.
    Fixed(FixedOutput),
    /// An adjustable one.
    Adjustable(AdjustableOutput),
}

/// The divider network: its line, the resistors taken from it, and the pot where there is one.
#[derive(Debug, Clone, Copy)]
pub struct Network<'a> {
    /// The line that the resistors are taken from.
    pub line: &'a LineAtRail,
    /// The resistors.
    pub divider: Divider,
    /// The pot of an adjustable output.
    pub pot: Option<&'a PotAtRail>,
}

/// Chooses the divider for a reference, a line and, for an adjustable output, a pot.
///
/// An adjustable output without a pot has no divider, nor has a line without a value in the window.
pub fn choose_divider(
    aim: &Aim,
    bias: &Bias,
    line: &LineAtRail,
    pot: Option<&PotAtRail>,
    rail: &Rail,
) -> Choice {
    match (aim, pot) {
        (Aim::Fixed(aim), _) => fixed::choose(aim, bias, line, rail),
        (Aim::Adjustable(aim), Some(pot)) => adjustable::choose(aim, bias, line, pot, rail),
        (Aim::Adjustable(_), None) => Choice::OutsideWindow,
    }
}

/// The checks of the amplifier's supply: sections 4.2 as far as no other part takes part.
#[inline]
pub fn supply_checks(
    amp: &AmplifierAtRail,
    rail: &Rail,
    tally: &mut impl Tally,
) -> ControlFlow<()> {
    tally.take(amp.amp_supply_high(rail))?;
    tally.take(amp.amp_supply_low(rail))
}

/// The checks in which the amplifier meets the reference side: input range, divider window, divider.
#[inline]
pub fn input_checks(
    amp: &AmplifierAtRail,
    bias: &Bias,
    network: &Network<'_>,
    aim: &Aim,
    rail: &Rail,
    tally: &mut impl Tally,
) -> ControlFlow<()> {
    tally.take(amp.amp_input_low(bias))?;
    tally.take(amp.amp_input_high(bias, rail))?;
    let input = amp.input_error(bias.vz_hi_v);
    let current = DividerCurrent::new(bias, &network.divider.ri, input);
    tally.take(current.divider_window(&rail.divider))?;
    match (aim, network.pot) {
        (Aim::Fixed(aim), _) => {
            fixed::checks(aim, bias, &network.divider, network.line, input, tally)
        }
        (Aim::Adjustable(aim), Some(pot)) => {
            adjustable::checks(aim, bias, &network.divider, network.line, pot, input, tally)
        }
        (Aim::Adjustable(_), None) => tally.take(divider::NO_VALUE_IN_WINDOW),
    }
}

/// A complete set of parts with its values, under a rail's conditions.
#[derive(Debug, Clone, Copy)]
pub struct Assembly<'a> {
    /// The requirement.
    pub rail: &'a Rail,
    /// The zener.
    pub zener: &'a ZenerAtRail,
    /// The line that RZ is taken from.
    pub bias_line: &'a LineAtRail,
    /// The zener with RZ.
    pub bias: Bias,
    /// The amplifier.
    pub amplifier: &'a AmplifierAtRail,
    /// The divider.
    pub network: Network<'a>,
    /// The transistor.
    pub pass: &'a PassFigures,
    /// Where it is mounted.
    pub mounted: Mounted,
    /// The duty of the rail.
    pub duty: &'a Duty,
}

impl Assembly<'_> {
    /// Every check that the rail calls for, in page order.
    pub fn checks(&self, tally: &mut impl Tally) -> ControlFlow<()> {
        let rail = self.rail;
        self.zener.checks(&self.bias, self.bias_line, tally)?;
        supply_checks(self.amplifier, rail, tally)?;
        input_checks(self.amplifier, &self.bias, &self.network, &Aim::of(rail), rail, tally)?;
        self.pass.checks(&self.mounted, self.duty, rail, tally)?;
        drive::checks(self.amplifier, self.pass, rail, tally)?;
        Continue(())
    }

    /// εa and ib of the amplifier beside this reference.
    pub fn input_error(&self) -> InputError {
        self.amplifier.input_error(self.bias.vz_hi_v)
    }

    /// The output at the corners.
    pub fn output(&self) -> OutputFigures {
        let input = self.input_error();
        let Network { divider, pot, .. } = &self.network;
        match pot {
            Some(pot) => {
                OutputFigures::Adjustable(adjustable::output(&self.bias, divider, pot, input))
            }
            None => OutputFigures::Fixed(fixed::output(&self.bias, divider, input)),
        }
    }

    /// IDn + IZn + iq: what divider, zener and amplifier draw, A.
    pub fn side_current_a(&self) -> f64 {
        let divider_a = divider::nominal_current_a(&self.bias, &self.network.divider);
        divider_a + self.bias.iz_nominal_a + self.amplifier.part.iq_max_a
    }

    /// The lowest feed with which every function check that speaks of headroom still holds, V.
    ///
    /// The greatest of VLmax + VBEhi + swing_high, VZhi + vcm_high, VLmax + vce_sat, vs_min,
    /// V0hi − zzt·izt + iz_min·(RZhi + zzt) and V0hi + iz_min·RZhi.
    pub fn lowest_feed_v(&self) -> f64 {
        let highest_v = self.rail.highest_output_v();
        let amp = &self.amplifier.part;
        let zener = self.zener.zener();
        let Bias { v0_hi_v, vz_hi_v, rz, .. } = self.bias;
        [
            highest_v + self.pass.vbe_hi_v + amp.swing_high_v,
            vz_hi_v + amp.vcm_high_v,
            highest_v + self.pass.vce_sat_v,
            amp.vs_min_v,
            v0_hi_v - zener.zzt_ohm * zener.izt_a + zener.iz_min_a * (rz.hi_ohm + zener.zzt_ohm),
            v0_hi_v + zener.iz_min_a * rz.hi_ohm,
        ]
        .into_iter()
        .fold(f64::NEG_INFINITY, f64::max)
    }

    /// The least current gain with which this amplifier drives full load.
    pub fn least_gain(&self) -> f64 {
        drive::least_gain(self.amplifier, self.rail)
    }
}
