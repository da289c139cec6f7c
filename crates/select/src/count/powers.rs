//! Transistors on their sinks, and with every amplifier that drives them.

use super::{DRIVE_WORK, Progress, Tally};
use crate::boxes::{Boxes, Item, Pieces};
use crate::problem::Ground;
use crate::sides::power::{better_to_drive, worse_to_drive};
use circuit::amplifier::AmplifierAtRail;
use circuit::check::{Check, WhileHolding};
use circuit::drive;
use circuit::pass::{CaseTemperatures, Mounted, PassFigures, Unmounted};
use num_bigint::BigUint;
use rayon::prelude::*;
use std::collections::BTreeMap;

/// Every transistor on every mounting that it may have.
pub(super) struct Powers {
    /// Pairs of transistor and mounting that fit.
    pub fitting: u128,
    /// Those that fit and fail on their own.
    pub lost: Tally,
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
    pub fn new(ground: &Ground<'_>) -> Self {
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
    pub fn driven_by(
        &self,
        ground: &Ground<'_>,
        passing: &[u64],
        progress: &Progress<'_>,
    ) -> (BigUint, BTreeMap<Check, BigUint>) {
        let rail = ground.rail();
        let idle = passing.iter().filter(|references| **references == 0).count();
        progress.step(DRIVE_WORK * idle as u64);
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
                progress.step(DRIVE_WORK);
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
