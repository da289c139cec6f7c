//! Exact counts: how many combinations hold, and how many are lost to which check first.
//!
//! The order of checks on the model page is by sides: reference, amplifier, amplifier with reference,
//! transistor on its sink, amplifier with transistor. So the first failing check of a combination is
//! found side by side, and whole products of combinations are counted at once:
//!
//! * a reference side is met by boxes of amplifiers (`inputs`);
//! * an amplifier is met by boxes of transistors (`powers`), each transistor weighing as many
//!   combinations as it has sinks on which it holds;
//! * parts that no check tells apart are counted once with their number (`classes`).

mod classes;
mod inputs;
mod powers;

use crate::problem::{Ground, Problem};
use circuit::check::Check;
use inputs::Inputs;
use num_bigint::BigUint;
use powers::Powers;
use std::collections::BTreeMap;
use std::ops::AddAssign;
use std::sync::atomic::{AtomicU64, Ordering};

/// What combinations are lost to, in page order.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum LostTo {
    /// The heatsink does not fit the transistor's package, or a transistor that may not go unmounted
    /// would have to.
    HeatsinkFit,
    /// This check is the first that fails.
    Check(Check),
}

impl LostTo {
    /// The name used in results.
    pub const fn name(self) -> &'static str {
        match self {
            LostTo::HeatsinkFit => "heatsink-fit",
            LostTo::Check(check) => check.name(),
        }
    }
}

/// Exact counts of combinations; covered = feasible + the sum of lost.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Counts {
    /// All combinations of rows that may be chosen.
    pub covered: BigUint,
    /// Those for which every check holds.
    pub feasible: BigUint,
    /// Those that are lost, by what they are lost to first; only where some are.
    pub lost: BTreeMap<LostTo, BigUint>,
}

/// Combinations by the check that they are lost to first.
#[derive(Clone, Default)]
struct Tally(BTreeMap<Check, u128>);

impl Tally {
    fn add(&mut self, check: Check, combinations: u128) {
        if combinations > 0 {
            *self.0.entry(check).or_default() += combinations;
        }
    }
}

impl AddAssign for Tally {
    fn add_assign(&mut self, other: Self) {
        for (check, combinations) in other.0 {
            self.add(check, combinations);
        }
    }
}

/// Counts every combination of a problem. `progress` is told the share of the work that is done,
/// 0 … 1, from any thread.
pub fn count(problem: &Problem<'_>, progress: &(dyn Fn(f64) + Sync)) -> Counts {
    let ground = Ground::new(problem);
    let powers = Powers::new(&ground);
    let progress = Progress::new(progress);
    progress.expect(problem.amplifiers.len() as u64 * DRIVE_WORK);
    let inputs = Inputs::new(&ground, &progress);

    let mut lost: BTreeMap<LostTo, BigUint> = BTreeMap::new();
    let mut lose = |to: LostTo, combinations: BigUint| {
        if combinations > BigUint::ZERO {
            *lost.entry(to).or_default() += combinations;
        }
    };
    let before_power = BigUint::from(inputs.references) * problem.amplifiers.len();
    let mountings = problem.transistors.len() * problem.heatsink_choices();
    lose(LostTo::HeatsinkFit, &before_power * (mountings as u128 - powers.fitting));
    for (check, pairs) in inputs.lost.0 {
        lose(LostTo::Check(check), BigUint::from(pairs) * powers.fitting);
    }
    let passing: u128 = inputs.passing.iter().copied().map(u128::from).sum();
    for (&check, &mounted) in &powers.lost.0 {
        lose(LostTo::Check(check), BigUint::from(passing) * mounted);
    }
    let (feasible, at_output) = powers.driven_by(&ground, &inputs.passing, &progress);
    for (check, combinations) in at_output {
        lose(LostTo::Check(check), combinations);
    }
    Counts { covered: problem.covered(), feasible, lost }
}

/// Tells how much of the work is done, over both stages.
struct Progress<'a> {
    tell: &'a (dyn Fn(f64) + Sync),
    whole: AtomicU64,
    done: AtomicU64,
}

/// The work of choosing one divider and asking amplifiers about it, in the unit of [`Progress`].
const DIVIDER_WORK: u64 = 1;

/// The work of asking one amplifier about all transistors, in the same unit: about what it is in large shops,
/// for it only weighs the two stages of the progress against each other.
const DRIVE_WORK: u64 = 300;

impl<'a> Progress<'a> {
    fn new(tell: &'a (dyn Fn(f64) + Sync)) -> Self {
        Self { tell, whole: AtomicU64::new(0), done: AtomicU64::new(0) }
    }

    /// So much work lies ahead. All of it is announced before the first step is.
    fn expect(&self, work: u64) {
        self.whole.fetch_add(work, Ordering::Relaxed);
    }

    /// So much of it is done.
    fn step(&self, work: u64) {
        let done = self.done.fetch_add(work, Ordering::Relaxed) + work;
        (self.tell)(done as f64 / self.whole.load(Ordering::Relaxed) as f64);
    }
}
