//! How good a set of parts is: efficiency, stress, margin, tightness, slack.
//!
//! Model page, section 5.

use crate::check::{Check, Finding, Kind};
use crate::rail::Rail;
use quantity::digits::compare;
use std::cmp::Ordering;

/// η = V·IL/(VUnom·(IL + side currents)): the share of the feed's power that reaches the load, with
/// nominal parts at the nominal feed.
///
/// `side_a` is IDn + IZn + iq, what divider, zener and amplifier draw, A.
///
/// Source: common practice for a series stage; without side currents it is V/VUnom (A. Malvino and
/// D. Bates, "Electronic Principles", example 24-7: 9.2 V from 15 V, 61.33 %).
pub fn efficiency(rail: &Rail, side_a: f64) -> f64 {
    let il = rail.load.max_a;
    rail.rated_output_v() * il / (rail.feed.nominal_v * (il + side_a))
}

/// loss = 1/η − 1: power lost for each watt delivered.
pub fn loss(rail: &Rail, side_a: f64) -> f64 {
    1.0 / efficiency(rail, side_a) - 1.0
}

/// A greatest utilisation with the check that sets it; the first in page order where several do.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Binding {
    /// The greatest utilisation.
    pub utilisation: f64,
    /// The check that sets it; None where there is no check of the kind.
    pub check: Option<Check>,
}

/// The greatest utilisation among findings of a kind. `divider-window` must hold, but is no measure
/// of slack, so it is left out.
pub fn binding(findings: &[Finding], kind: Kind) -> Binding {
    let mut binding = Binding { utilisation: 0.0, check: None };
    for finding in findings {
        if finding.check.kind() != kind || finding.check == Check::DividerWindow {
            continue;
        }
        let u = finding.utilisation();
        let greater = compare(u, binding.utilisation) == Ordering::Greater;
        if binding.check.is_none() || greater {
            binding.check = Some(finding.check);
        }
        binding.utilisation = binding.utilisation.max(u);
    }
    binding
}
