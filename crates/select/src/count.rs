//! Exact counts: how many combinations hold, and how many are lost to which check first.
//!
//! The order of checks on the model page is by sides: reference, amplifier, amplifier with reference,
//! transistor on its sink, amplifier with transistor. So the first failing check of a combination is
//! found side by side, and whole products of combinations are counted at once:
//!
//! * a reference side is met by boxes of amplifiers. Every check is monotone in each figure of an
//!   amplifier, so where the best and the worst figures of a box fail at the same check first, every
//!   amplifier of the box does, and where the worst pass, all pass;
//! * an amplifier is met by boxes of transistors in the same way, each transistor weighing as many
//!   combinations as it has sinks on which it holds.

use crate::boxes::{Boxes, Item, Pieces};
use crate::problem::{Ground, Problem};
use crate::sides::power::{better_to_drive, worse_to_drive};
use circuit::amplifier::AmplifierAtRail;
use circuit::assembly::{Network, choose_divider, input_checks, supply_checks};
use circuit::check::{Check, WhileHolding};
use circuit::divider::Choice;
use circuit::drive;
use circuit::pass::{CaseTemperatures, Mounted, PassFigures, Unmounted};
use circuit::reference::{Bias, Chosen, ZenerAtRail, chosen_rz};
use num_bigint::BigUint;
use rayon::prelude::*;
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
    let inputs = Inputs::new(&ground, progress);

    let mut lost: BTreeMap<LostTo, BigUint> = BTreeMap::new();
    let mut lose = |to: LostTo, combinations: BigUint| {
        if combinations > BigUint::ZERO {
            *lost.entry(to).or_default() += combinations;
        }
    };
    let references = inputs.references();
    let before_power = BigUint::from(references) * problem.amplifiers.len();
    let mountings = problem.transistors.len() * problem.heatsink_choices();
    lose(LostTo::HeatsinkFit, &before_power * (mountings as u128 - powers.fitting));
    for (check, pairs) in inputs.lost.0 {
        lose(LostTo::Check(check), BigUint::from(pairs) * powers.fitting);
    }
    let passing: u128 = inputs.passing.iter().copied().map(u128::from).sum();
    for (&check, &mounted) in &powers.lost.0 {
        lose(LostTo::Check(check), BigUint::from(passing) * mounted);
    }
    let (feasible, at_output) = powers.driven_by(&ground, &inputs.passing);
    for (check, combinations) in at_output {
        lose(LostTo::Check(check), combinations);
    }
    Counts { covered: problem.covered(), feasible, lost }
}

/// Every transistor on every mounting that it may have.
struct Powers {
    /// Pairs of transistor and mounting that fit.
    fitting: u128,
    lost: Tally,
    boxes: Boxes<PassExtent>,
}

/// A transistor that holds on some mountings.
struct PassExtent {
    figures: PassFigures,
    mountings: u64,
}

#[derive(Clone, Copy)]
struct PassSpan {
    best: PassFigures,
    worst: PassFigures,
    mountings: u64,
}

impl Item for PassExtent {
    type Best = PassSpan;

    fn best(&self) -> PassSpan {
        PassSpan { best: self.figures, worst: self.figures, mountings: self.mountings }
    }

    fn widen(span: &mut PassSpan, other: &PassSpan) {
        span.best = better_to_drive(&span.best, &other.best);
        span.worst = worse_to_drive(&span.worst, &other.worst);
        span.mountings += other.mountings;
    }

    const AXES: usize = 4;

    fn axis(&self, axis: usize) -> f64 {
        match axis {
            0 => self.figures.base.most_a.clamp(1e-9, 1e9).ln(),
            1 => self.figures.vbe_hi_v.min(1e3),
            2 => self.figures.ileak_a.map_or(-21.0, |i| i.max(1e-9).ln()) * 0.3,
            _ => self.figures.drive_power_w.clamp(1e-9, 1e9).ln() * 0.5,
        }
    }
}

impl Powers {
    fn new(ground: &Ground<'_>) -> Self {
        let rail = ground.rail();
        let duty = &ground.duty;
        let own = CaseTemperatures::on_own_sink(duty, rail);
        let cases: Vec<Vec<CaseTemperatures>> = ground
            .classes
            .sinks
            .iter()
            .map(|places| {
                let sink = |&p: &u32| ground.problem.heatsinks[p as usize].part.figures;
                places.iter().map(|p| CaseTemperatures::on_heatsink(sink(p), duty, rail)).collect()
            })
            .collect();
        let transistors: Vec<(u64, Tally, PassExtent)> = ground
            .problem
            .transistors
            .par_iter()
            .enumerate()
            .map(|(index, t)| {
                let part = t.part.figures;
                let figures = PassFigures::new(part, duty, rail);
                let (mut fitting, mut lost, mut mountings) = (0, Tally::default(), 0);
                let mut mount = |mounted: Mounted| {
                    fitting += 1;
                    match WhileHolding::over(|t| figures.checks(&mounted, duty, rail, t)) {
                        Ok(_) => mountings += 1,
                        Err(check) => lost.add(check, 1),
                    }
                };
                if let Some(case) = own {
                    mount(Mounted::on(case, &figures, duty));
                }
                if ground.problem.can_go_unmounted(part) {
                    Unmounted::new(part, duty, rail).into_iter().for_each(|u| mount(u.into()));
                }
                if let Some(class) = ground.classes.of(index) {
                    for case in &cases[class as usize] {
                        mount(Mounted::on(*case, &figures, duty));
                    }
                }
                (fitting, lost, PassExtent { figures, mountings })
            })
            .collect();
        let (mut fitting, mut lost, mut items) = (0u128, Tally::default(), Vec::new());
        for (fits, lost_here, extent) in transistors {
            fitting += u128::from(fits);
            lost += lost_here;
            if extent.mountings > 0 {
                items.push(extent);
            }
        }
        let mut boxes = Boxes::new(items);
        boxes.grow_fully();
        Self { fitting, lost, boxes }
    }

    /// Feasible and lost combinations where each amplifier meets every mounted transistor, each
    /// amplifier weighing as many combinations as `passing` tells.
    fn driven_by(
        &self,
        ground: &Ground<'_>,
        passing: &[u64],
    ) -> (BigUint, BTreeMap<Check, BigUint>) {
        let rail = ground.rail();
        let per_amplifier: Vec<(u64, u128, Tally)> = ground
            .problem
            .amplifiers
            .par_iter()
            .zip(passing)
            .filter(|(_, references)| **references > 0)
            .map(|(part, &references)| {
                let amp = AmplifierAtRail::new(part.figures, rail);
                let first_failing = |pass: &PassFigures| {
                    WhileHolding::over(|t| drive::checks(&amp, pass, rail, t)).err()
                };
                let (mut feasible, mut lost) = (0u128, Tally::default());
                let mut found = |outcome: Option<Check>, mountings: u64| match outcome {
                    None => feasible += u128::from(mountings),
                    Some(check) => lost.add(check, u128::from(mountings)),
                };
                let mut open: Vec<u32> = self.boxes.root().into_iter().collect();
                while let Some(id) = open.pop() {
                    let PassSpan { best, worst, mountings } = self.boxes.get(id).best;
                    let outcome = first_failing(&worst);
                    if outcome == first_failing(&best) {
                        found(outcome, mountings);
                        continue;
                    }
                    match self.boxes.pieces(id) {
                        Pieces::Halves(a, b) => open.extend([a, b]),
                        Pieces::Items(range) => {
                            for item in &self.boxes.items()[range] {
                                found(first_failing(&item.figures), item.mountings);
                            }
                        }
                    }
                }
                (references, feasible, lost)
            })
            .collect();
        let mut feasible = BigUint::ZERO;
        let mut lost: BTreeMap<Check, BigUint> = BTreeMap::new();
        for (references, holding, lost_here) in per_amplifier {
            feasible += BigUint::from(references) * holding;
            for (check, mountings) in lost_here.0 {
                *lost.entry(check).or_default() += BigUint::from(references) * mountings;
            }
        }
        (feasible, lost)
    }
}

/// Every reference side with every amplifier.
struct Inputs {
    references: u128,
    /// Pairs of reference side and amplifier that are lost.
    lost: Tally,
    /// For each amplifier, with how many reference sides it passes.
    passing: Vec<u64>,
}

/// An amplifier whose supply holds.
struct AmplifierExtent {
    index: u32,
    at_rail: AmplifierAtRail,
}

#[derive(Clone, Copy)]
struct AmplifierSpan {
    best: AmplifierAtRail,
    worst: AmplifierAtRail,
}

impl Item for AmplifierExtent {
    type Best = AmplifierSpan;

    fn best(&self) -> AmplifierSpan {
        AmplifierSpan { best: self.at_rail, worst: self.at_rail }
    }

    fn widen(span: &mut AmplifierSpan, other: &AmplifierSpan) {
        span.best = span.best.better_of(&other.best);
        span.worst = span.worst.worse_of(&other.worst);
    }

    const AXES: usize = 5;

    fn axis(&self, axis: usize) -> f64 {
        let part = &self.at_rail.part;
        match axis {
            0 => self.at_rail.fixed_error_v * 100.0,
            1 => part.vcm_low_v,
            2 => part.vcm_high_v,
            3 => self.at_rail.common_mode * 500.0,
            _ => part.ib_max_a * 1e6,
        }
    }
}

/// What one thread has counted.
#[derive(Clone, Default)]
struct InputTally {
    lost: Tally,
    /// By box: with how many reference sides all its amplifiers pass.
    boxes: Vec<u64>,
    /// The same by item.
    items: Vec<u64>,
}

impl InputTally {
    fn new(boxes: &Boxes<AmplifierExtent>) -> Self {
        Self {
            lost: Tally::default(),
            boxes: vec![0; boxes.count()],
            items: vec![0; boxes.items().len()],
        }
    }

    fn with(mut self, other: Self) -> Self {
        self.lost += other.lost;
        let sum = |into: &mut Vec<u64>, from: Vec<u64>| {
            into.iter_mut().zip(from).for_each(|(a, b)| *a += b);
        };
        sum(&mut self.boxes, other.boxes);
        sum(&mut self.items, other.items);
        self
    }
}

impl Inputs {
    fn new(ground: &Ground<'_>, progress: &(dyn Fn(f64) + Sync)) -> Self {
        let rail = ground.rail();
        let problem = ground.problem;
        let mut lost_supply = Tally::default();
        let mut items = Vec::new();
        for (index, part) in (0u32..).zip(&problem.amplifiers) {
            let at_rail = AmplifierAtRail::new(part.figures, rail);
            match WhileHolding::over(|t| supply_checks(&at_rail, rail, t)) {
                Ok(_) => items.push(AmplifierExtent { index, at_rail }),
                Err(check) => lost_supply.add(check, 1),
            }
        }
        let mut boxes = Boxes::new(items);
        boxes.grow_fully();

        let dividers = ground.divider_lines.len() as u128
            * if rail.is_adjustable() { ground.pots.len() as u128 } else { 1 };
        let done = AtomicU64::new(0);
        let tally = problem
            .zeners
            .par_iter()
            .fold(
                || InputTally::new(&boxes),
                |mut tally, part| {
                    let zener = ZenerAtRail::new(part.figures, rail);
                    for line in &ground.bias_lines {
                        match chosen_rz(&zener, line, rail) {
                            Some(Chosen::Holds(bias, _)) => {
                                for (&check, &amplifiers) in &lost_supply.0 {
                                    tally.lost.add(check, amplifiers * dividers);
                                }
                                meet_dividers(ground, &boxes, &bias, &mut tally);
                            }
                            Some(Chosen::Fails(_, check)) => {
                                let pairs = dividers * problem.amplifiers.len() as u128;
                                tally.lost.add(check, pairs);
                            }
                            None => {}
                        }
                    }
                    let done = done.fetch_add(1, Ordering::Relaxed) + 1;
                    progress(done as f64 / problem.zeners.len() as f64);
                    tally
                },
            )
            .reduce(|| InputTally::new(&boxes), InputTally::with);

        // What all amplifiers of a box pass, each of them passes.
        let mut passing = vec![0; problem.amplifiers.len()];
        let mut open: Vec<(u32, u64)> = boxes.root().into_iter().map(|root| (root, 0)).collect();
        while let Some((id, above)) = open.pop() {
            let here = above + tally.boxes[id as usize];
            match boxes.pieces(id) {
                Pieces::Halves(a, b) => open.extend([(a, here), (b, here)]),
                Pieces::Items(range) => {
                    for place in range {
                        let index = boxes.items()[place].index as usize;
                        passing[index] = here + tally.items[place];
                    }
                }
            }
        }
        let references = problem.zeners.len() as u128 * ground.bias_lines.len() as u128 * dividers;
        Self { references, lost: tally.lost, passing }
    }

    fn references(&self) -> u128 {
        self.references
    }
}

/// A biased zener with every divider line and pot, met by every amplifier.
fn meet_dividers(
    ground: &Ground<'_>,
    boxes: &Boxes<AmplifierExtent>,
    bias: &Bias,
    tally: &mut InputTally,
) {
    let adjustable = ground.rail().is_adjustable();
    let pots: Vec<Option<usize>> =
        if adjustable { (0..ground.pots.len()).map(Some).collect() } else { vec![None] };
    for line in &ground.divider_lines {
        for pot in &pots {
            let pot = pot.map(|p| &ground.pots[p]);
            let choice = choose_divider(&ground.aim, bias, line, pot, ground.rail());
            let first_failing = |amp: &AmplifierAtRail| match &choice {
                Choice::Holds(divider) | Choice::Strained(divider) => {
                    let network = Network { line, divider: *divider, pot };
                    WhileHolding::over(|t| {
                        input_checks(amp, bias, &network, &ground.aim, ground.rail(), t)
                    })
                    .err()
                }
                Choice::OutsideWindow => Some(
                    [
                        amp.amp_input_low(bias.vz_lo_v),
                        amp.amp_input_high(bias.vz_hi_v, ground.rail()),
                    ]
                    .into_iter()
                    .find(|finding| !finding.holds())
                    .map_or(Check::DividerWindow, |finding| finding.check),
                ),
            };
            let mut open: Vec<u32> = boxes.root().into_iter().collect();
            while let Some(id) = open.pop() {
                let part_box = boxes.get(id);
                let outcome = first_failing(&part_box.best.worst);
                if outcome == first_failing(&part_box.best.best) {
                    match outcome {
                        None => tally.boxes[id as usize] += 1,
                        Some(check) => tally.lost.add(check, u128::from(part_box.len())),
                    }
                    continue;
                }
                match boxes.pieces(id) {
                    Pieces::Halves(a, b) => open.extend([a, b]),
                    Pieces::Items(range) => {
                        for place in range {
                            match first_failing(&boxes.items()[place].at_rail) {
                                None => tally.items[place] += 1,
                                Some(check) => tally.lost.add(check, 1),
                            }
                        }
                    }
                }
            }
        }
    }
}
