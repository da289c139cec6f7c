//! The three sides of a candidate, each as a tree of choices.
//!
//! This is where slots become a search: each side says which slots it fills, in which order, and
//! what its parts add to cost, loss and stress. The search itself knows no slot.

pub(crate) mod amplifier;
pub(crate) mod power;
pub(crate) mod reference;

use crate::problem::Ground;
use circuit::amplifier::AmplifierAtRail;
use circuit::assembly::{self, Network};
use circuit::check::{Check, WhileHolding};
use circuit::drive;
use circuit::pass::PassFigures;
use reference::{CompleteReference, ReferenceFigures};

/// Stress where an amplifier meets a reference side; None where some check fails.
///
/// Every check here is monotone in each figure of the amplifier, so the answer for the best figures
/// of a box bounds that of every amplifier in it. Of a reference side whose values are not yet
/// chosen only necessary conditions are asked.
pub(crate) fn meet_reference(
    ground: &Ground<'_>,
    reference: &ReferenceFigures,
    amp: &AmplifierAtRail,
) -> Option<f64> {
    match reference {
        ReferenceFigures::Outlook(outlook) => outlook.may_suit(amp, ground).then_some(0.0),
        ReferenceFigures::Complete(complete) => input_stress(ground, complete, amp).ok(),
    }
}

/// Stress where a complete reference side feeds an amplifier, or the first check that fails.
pub(crate) fn input_stress(
    ground: &Ground<'_>,
    complete: &CompleteReference,
    amp: &AmplifierAtRail,
) -> Result<f64, Check> {
    let network = Network {
        line: &ground.divider_lines[complete.divider_line as usize],
        divider: complete.divider,
        pot: complete.pot.map(|p| &ground.pots[p as usize]),
    };
    WhileHolding::over(|t| {
        assembly::input_checks(amp, &complete.bias, &network, &ground.aim, ground.rail(), t)
    })
}

/// Stress where an amplifier drives a transistor; None where some check fails. Monotone in each
/// figure of both.
pub(crate) fn meet_power(
    ground: &Ground<'_>,
    amp: &AmplifierAtRail,
    pass: &PassFigures,
) -> Option<f64> {
    WhileHolding::over(|t| drive::checks(amp, pass, ground.rail(), t)).ok()
}
