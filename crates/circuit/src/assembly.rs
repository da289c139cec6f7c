//! All parts of a rail together, with their values: every check in page order, and the figures that
//! a designer asks for.

use crate::amplifier::{AmplifierAtRail, InputError};
use crate::check::Tally;
use crate::divider::adjustable::{self, AdjustableAim, AdjustableOutput, room_above, room_below};
use crate::divider::fixed::{self, FixedAim, FixedOutput};
use crate::divider::{self, Choice, Divider, DividerCurrent};
use crate::drive;
use crate::pass::{Duty, Mounted, PassFigures};
use crate::rail::{DividerRules, Output, Rail};
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

/// Room left for rounding where a necessary condition turns something away.
const ROUNDING_ROOM: f64 = 1e-8;

impl Aim {
    /// The band (bottom, top) that bounds a reference whatever divider follows it, V.
    ///
    /// A divider multiplies the highest reference voltage by at least as much as the lowest one, and
    /// by at least 1. Fixed output: VLlo ≥ V(1 − τ) and VLhi ≤ V(1 + τ). Adjustable, at the low end
    /// of the knob: Vlow ≥ low_stop and Vfloor ≤ adjust_from.
    fn band_v(&self) -> (f64, f64) {
        match self {
            Aim::Fixed(FixedAim { voltage_v, tolerance }) => {
                (voltage_v * (1.0 - tolerance), voltage_v * (1.0 + tolerance))
            }
            Aim::Adjustable(AdjustableAim { from_v, low_stop_v, .. }) => (*low_stop_v, *from_v),
        }
    }

    /// A reference between `vz_lo_v` and `vz_hi_v` may suit this output beside an amplifier error,
    /// as far as can be told before a divider is chosen: false only where no divider does.
    ///
    /// `line_spread` is the least (hi/lo)² of the lines that a divider may come from: khi ≥
    /// line_spread·klo. With κ the least klo that lifts the low end to the bottom of the band,
    /// (1 + κ·line_spread)(VZhi + ε) must not exceed the top.
    pub fn may_suit(&self, vz_lo_v: f64, vz_hi_v: f64, error_v: f64, line_spread: f64) -> bool {
        let (bottom, top) = self.band_v();
        let (least, most) = (vz_lo_v - error_v, vz_hi_v + error_v);
        let gain = if bottom > 0.0 { bottom / least } else { 1.0 };
        let kappa = (gain - 1.0).max(0.0);
        least > 0.0 && (1.0 + kappa * line_spread) * most <= top * (1.0 + ROUNDING_ROOM)
    }

    /// The same for a set of references of which only the least relative width `spread` = VZhi/VZlo
    /// and the highest `vz_lo_v` and lowest `vz_hi_v` of any of them are known.
    pub fn may_suit_any(&self, vz_lo_v: f64, vz_hi_v: f64, spread: f64, error_v: f64) -> bool {
        let (bottom, top) = self.band_v();
        let least = vz_lo_v - error_v;
        // (s·VZlo + ε)/(VZlo − ε) falls as VZlo rises, so the highest VZlo gives a bound for all.
        let wide = (spread * vz_lo_v + error_v) * bottom <= top * least * (1.0 + ROUNDING_ROOM);
        least > 0.0 && wide && vz_hi_v + error_v <= top * (1.0 + ROUNDING_ROOM)
    }

    /// What a pot is asked beside a reference between `vz_lo_v` and `vz_hi_v`, whatever the amplifier
    /// and the divider line; None with a fixed output.
    ///
    /// Vreach ≥ adjust_to and Vfloor ≤ adjust_from leave plo/RIhi ≥ adjust_to/VZlo − adjust_from/VZhi
    /// for the track; Vtop ≤ ceiling and Vlow ≥ low_stop leave phi/RIlo ≤ ceiling/VZhi −
    /// low_stop/VZlo. RI itself lies in the window for the divider current.
    /// `error_v` is at most the amplifier's error, `line_spread` the least (hi/lo)² of the lines that
    /// RI may come from.
    pub fn pot_span(
        &self,
        (vz_lo_v, vz_hi_v): (f64, f64),
        error_v: f64,
        rules: &DividerRules,
        line_spread: f64,
    ) -> Option<PotSpan> {
        let Aim::Adjustable(aim) = self else { return None };
        let (least_v, most_v) = (vz_lo_v - error_v, vz_hi_v + error_v);
        let least_ratio = room_below(aim.to_v / least_v, aim.from_v / most_v).max(0.0);
        let most_ratio = aim.ceiling_v.map_or(f64::INFINITY, |ceiling| {
            room_above(ceiling / most_v, aim.low_stop_v / least_v)
        });
        let least_ri_ohm = (vz_hi_v + rules.allow_error_v) / (rules.max_a - rules.allow_bias_a);
        let most_ri_ohm = (vz_lo_v - rules.allow_error_v) / (rules.min_a + rules.allow_bias_a);
        let ri_spread = line_spread.sqrt();
        Some(PotSpan { vz_hi_v, least_ratio, most_ratio, least_ri_ohm, most_ri_ohm, ri_spread })
    }

    /// A link may serve as RF or RX: the reference itself may lie in the band.
    pub fn may_follow(&self, vz_lo_v: f64, vz_hi_v: f64) -> bool {
        let (bottom, top) = self.band_v();
        vz_hi_v <= top * (1.0 + ROUNDING_ROOM) && vz_lo_v >= bottom * (1.0 - ROUNDING_ROOM)
    }
}

/// What a pot is asked beside a reference, before RX and RI are chosen.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct PotSpan {
    vz_hi_v: f64,
    /// Least plo/RIhi.
    least_ratio: f64,
    /// Most phi/RIlo.
    most_ratio: f64,
    least_ri_ohm: f64,
    most_ri_ohm: f64,
    /// Least RIhi/RIlo.
    ri_spread: f64,
}

impl PotSpan {
    /// The pot may serve: false only where it never does.
    pub fn may_serve(&self, pot: &PotAtRail) -> bool {
        let room = 1.0 + ROUNDING_ROOM;
        let track = &pot.track;
        // IDhi ≥ VZhi/RIlo ≥ VZhi·least_ratio/plo, which heats the track.
        let heating_a = self.vz_hi_v * self.least_ratio / track.lo_ohm;
        // phi/most_ratio ≤ RIlo and RIhi ≤ plo/least_ratio.
        let spans = track.hi_ohm * self.least_ratio * self.ri_spread
            <= track.lo_ohm * self.most_ratio * room;
        spans
            && self.least_ratio * self.least_ri_ohm <= track.lo_ohm * room
            && track.hi_ohm <= self.most_ratio * self.most_ri_ohm * room
            && heating_a * heating_a * track.hi_ohm <= pot.allowed_power_w * room
            && pot.allowed_voltage_v.is_none_or(|v| heating_a * track.hi_ohm <= v * room)
    }

    /// At most the nominal divider current with a track of at most `track_lo_ohm`, A: VZn/RI ≥
    /// VZn/RIhi ≥ VZn·least_ratio/plo.
    pub fn least_current_a(&self, vz_nominal_v: f64, track_lo_ohm: f64) -> f64 {
        (vz_nominal_v * self.least_ratio / track_lo_ohm * (1.0 - ROUNDING_ROOM)).max(0.0)
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

/// Some amplifier with at least the error `input` may hold beside a divider of this line and pot:
/// false only where no pair of values does. Always true of a fixed output, whose choice is quick.
pub fn may_hold(
    aim: &Aim,
    bias: &Bias,
    line: &LineAtRail,
    pot: Option<&PotAtRail>,
    input: InputError,
    rail: &Rail,
) -> bool {
    match (aim, pot) {
        (Aim::Adjustable(aim), Some(pot)) => {
            adjustable::some_pair_holds(aim, bias, line, pot, input, rail)
        }
        _ => true,
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

/// The checks in which no part but the amplifier takes part, of sections 4.2 and 4.6.
#[inline]
pub fn amplifier_checks(
    amp: &AmplifierAtRail,
    rail: &Rail,
    tally: &mut impl Tally,
) -> ControlFlow<()> {
    supply_checks(amp, rail, tally)?;
    tally.take(drive::swing_low(amp, rail))?;
    drive::amp_fault(amp, rail).map_or(Continue(()), |finding| tally.take(finding))
}

/// The checks in which the amplifier meets the reference alone, whatever the divider: input range.
#[inline]
pub fn input_range_checks(
    amp: &AmplifierAtRail,
    bias: &Bias,
    rail: &Rail,
    tally: &mut impl Tally,
) -> ControlFlow<()> {
    tally.take(amp.amp_input_low(bias.vz_lo_v))?;
    tally.take(amp.amp_input_high(bias.vz_hi_v, rail))
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
    input_range_checks(amp, bias, rail, tally)?;
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
        match (Aim::of(self.rail), pot) {
            (Aim::Adjustable(_), Some(pot)) => {
                OutputFigures::Adjustable(adjustable::output(&self.bias, divider, pot, input))
            }
            _ => OutputFigures::Fixed(fixed::output(&self.bias, divider, input)),
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
