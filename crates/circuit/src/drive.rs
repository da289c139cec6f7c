//! The amplifier driving the transistor.
//!
//! Model page, section 4.6.

use crate::amplifier::AmplifierAtRail;
use crate::check::{Check, Finding, Tally};
use crate::pass::PassFigures;
use crate::rail::Rail;
use std::ops::ControlFlow::{self, Continue};

/// `base-drive`: the base current against the amplifier's sourcing current.
pub fn base_drive(amp: &AmplifierAtRail, pass: &PassFigures, rail: &Rail) -> Finding {
    Finding {
        check: Check::BaseDrive,
        asked: pass.base.most_a,
        allowed: rail.derating.amp_current * amp.part.iout_a,
    }
}

/// `swing-high`: output, base-emitter voltage and the amplifier's own headroom against the feed.
pub fn swing_high(amp: &AmplifierAtRail, pass: &PassFigures, rail: &Rail) -> Finding {
    Finding {
        check: Check::SwingHigh,
        asked: rail.highest_output_v() + pass.vbe_hi_v + amp.part.swing_high_v,
        allowed: rail.feed.min_v,
    }
}

/// `swing-low`: how low the amplifier's output reaches; the least base-emitter voltage is taken as 0.
pub fn swing_low(amp: &AmplifierAtRail, rail: &Rail) -> Finding {
    Finding { check: Check::SwingLow, asked: amp.part.swing_low_v, allowed: rail.lowest_output_v() }
}

/// `amp-junction`: the amplifier's junction above Tmax.
pub fn amp_junction(amp: &AmplifierAtRail, pass: &PassFigures, rail: &Rail) -> Finding {
    Finding {
        check: Check::AmpJunction,
        asked: (rail.feed.max_v * amp.part.iq_max_a + pass.drive_power_w) * amp.part.rth_ja_c_per_w,
        allowed: amp.allowed_rise_c,
    }
}

/// `amp-fault`: the amplifier's junction while its output is shorted; None without a fault over 1 s.
pub fn amp_fault(amp: &AmplifierAtRail, rail: &Rail) -> Option<Finding> {
    rail.fault.is_some_and(|f| f.heats_junctions()).then_some(Finding {
        check: Check::AmpFault,
        asked: amp.fault_rise_c,
        allowed: amp.allowed_fault_rise_c,
    })
}

/// `leakage-sink`: the amplifier sinks the collector leakage; None where either is not given.
///
/// Collector-base leakage that the amplifier can't sink is multiplied by the gain and lifts the
/// output up to the feed.
pub fn leakage_sink(amp: &AmplifierAtRail, pass: &PassFigures, rail: &Rail) -> Option<Finding> {
    let (asked, isink) = (pass.ileak_a?, amp.part.isink_a?);
    Some(Finding { check: Check::LeakageSink, asked, allowed: rail.derating.amp_current * isink })
}

/// `no-load`: divider and least load take what leaks past the amplifier; None where the leakage is
/// not given. A darlington's second device leaks past the amplifier.
pub fn no_load(amp: &AmplifierAtRail, pass: &PassFigures, rail: &Rail) -> Option<Finding> {
    let ileak = pass.ileak_a?;
    let past_amplifier = if pass.junctions == 2 { ileak } else { 0.0 };
    Some(Finding {
        check: Check::NoLoad,
        asked: amp.part.ib_max_a + past_amplifier,
        allowed: rail.load.min_a + rail.divider.min_a,
    })
}

/// All checks of the amplifier with the transistor, in page order.
#[inline]
pub fn checks(
    amp: &AmplifierAtRail,
    pass: &PassFigures,
    rail: &Rail,
    tally: &mut impl Tally,
) -> ControlFlow<()> {
    tally.take(base_drive(amp, pass, rail))?;
    tally.take(swing_high(amp, pass, rail))?;
    tally.take(swing_low(amp, rail))?;
    tally.take(amp_junction(amp, pass, rail))?;
    for finding in [amp_fault(amp, rail), leakage_sink(amp, pass, rail), no_load(amp, pass, rail)]
        .into_iter()
        .flatten()
    {
        tally.take(finding)?;
    }
    Continue(())
}

/// IE/(amp_current·iout) − 1: the least current gain with which this amplifier drives full load.
pub fn least_gain(amp: &AmplifierAtRail, rail: &Rail) -> f64 {
    rail.emitter_current_a() / (rail.derating.amp_current * amp.part.iout_a) - 1.0
}
