//! How many replacements a part has for which no further part changes.

use crate::built::{Case, Standing};
use crate::power::Powers;
use crate::reference::References;
use circuit::amplifier::AmplifierAtRail;
use circuit::assembly::supply_checks;
use circuit::check::WhileHolding;
use circuit::drive;
use circuit::slot::Slot;
use rayon::prelude::*;
use std::collections::HashSet;

/// How many parts can go in for what is gone while no further part changes, with the resistors as
/// built or with other values of the same lines.
pub fn replacements_at_once(case: &Case<'_, '_>) -> usize {
    let standing = Standing::new(case);
    let rail = case.ground.rail();
    let references = References { case, standing: &standing };
    let powers = Powers { case, standing: &standing }.holding(0);
    let combinations = references.combinations(0);
    let beside = |amplifier: &AmplifierAtRail| {
        if WhileHolding::over(|t| supply_checks(amplifier, rail, t)).is_err() {
            return 0;
        }
        let driven = powers.iter().filter(|power| {
            WhileHolding::over(|t| drive::checks(amplifier, &power.figures, rail, t)).is_ok()
        });
        let on_power: HashSet<_> = driven.map(|power| case.label(&power.choices)).collect();
        if on_power.is_empty() {
            return 0;
        }
        let holds = |of: &&_| references.some_values_hold(of, amplifier);
        on_power.len() * combinations.par_iter().filter(holds).count()
    };
    if case.is_gone(Slot::Amplifier) {
        let rows = case.places(Slot::Amplifier).par_iter();
        rows.filter_map(|place| case.ground.amplifiers.get(*place as usize)).map(beside).sum()
    } else {
        standing.amplifier.as_ref().map_or(0, beside)
    }
}
