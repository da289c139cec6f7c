//! Every reference side met by every amplifier.
//!
//! Every check is monotone in each figure of an amplifier. So where the best and the worst figures of a
//! box of amplifiers fail at the same check first, every amplifier of the box does, and where the worst
//! pass, all pass. The input range comes before the divider and does not depend on it: which amplifiers
//! it leaves is found out once for each reference.

use super::classes::{self, Class};
use super::{DIVIDER_WORK, Progress, Tally};
use crate::boxes::{Boxes, Item, Pieces};
use crate::problem::Ground;
use circuit::amplifier::AmplifierAtRail;
use circuit::assembly::{Network, choose_divider, input_checks, input_range_checks, supply_checks};
use circuit::check::{Check, WhileHolding};
use circuit::reference::{Bias, Chosen, ZenerAtRail, chosen_rz};
use circuit::resistor::{LineAtRail, PotAtRail};
use rayon::prelude::*;

/// Every reference side with every amplifier.
pub(super) struct Inputs {
    pub references: u128,
    /// Pairs of reference side and amplifier that are lost.
    pub lost: Tally,
    /// For each amplifier, with how many reference sides it passes.
    pub passing: Vec<u64>,
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

/// Amplifiers of a tree: a box, or one of its items by place.
#[derive(Clone, Copy)]
enum Members {
    Box(u32),
    Item(usize),
}

/// The first check that fails for all amplifiers between a best and a worst one, if it is the same for
/// all; None where they have to be told apart. The inner None: all pass.
fn common_outcome(
    span: &AmplifierSpan,
    first_failing: &impl Fn(&AmplifierAtRail) -> Option<Check>,
) -> Option<Option<Check>> {
    let outcome = first_failing(&span.worst);
    (outcome == first_failing(&span.best)).then_some(outcome)
}

/// Takes boxes of amplifiers apart until each part has one outcome, and tells what was found.
fn outcomes(
    boxes: &Boxes<AmplifierExtent>,
    open: &mut Vec<Members>,
    first_failing: &impl Fn(&AmplifierAtRail) -> Option<Check>,
    mut found: impl FnMut(Members, Option<Check>),
) {
    while let Some(members) = open.pop() {
        let id = match members {
            Members::Box(id) => id,
            Members::Item(place) => {
                found(members, first_failing(&boxes.items()[place].at_rail));
                continue;
            }
        };
        if let Some(outcome) = common_outcome(&boxes.get(id).best, first_failing) {
            found(members, outcome);
            continue;
        }
        match boxes.pieces(id) {
            Pieces::Halves(a, b) => open.extend([Members::Box(a), Members::Box(b)]),
            Pieces::Items(range) => open.extend(range.map(Members::Item)),
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

    fn pass(&mut self, members: Members, references: u64) {
        match members {
            Members::Box(id) => self.boxes[id as usize] += references,
            Members::Item(place) => self.items[place] += references,
        }
    }
}

impl Inputs {
    pub fn new(ground: &Ground<'_>, progress: &Progress<'_>) -> Self {
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

        let lines = classes::lines(ground);
        let pots = classes::pots(ground);
        let dividers = ground.divider_lines.len() as u128
            * pots.iter().map(|class| u128::from(class.many)).sum::<u128>();
        let (biases, lost_reference) = biased(ground);
        let biased = biases.len() as u128;
        let references = classes::references(biases.into_iter());
        let meeting = Meeting { ground, boxes: &boxes, lines, pots, dividers };

        let work = DIVIDER_WORK * (meeting.lines.len() * meeting.pots.len()) as u64;
        progress.expect(work * references.len() as u64);
        let mut tally = references
            .par_iter()
            .fold(
                || InputTally::new(&boxes),
                |mut tally, class| {
                    meeting.count(class, &mut tally);
                    progress.step(work);
                    tally
                },
            )
            .reduce(|| InputTally::new(&boxes), InputTally::with);
        for (check, biases) in lost_reference.0 {
            tally.lost.add(check, biases * dividers * problem.amplifiers.len() as u128);
        }
        for (check, amplifiers) in lost_supply.0 {
            tally.lost.add(check, amplifiers * dividers * biased);
        }

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
}

/// Every zener on every bias line: those that hold, and the others by the check that fails first.
fn biased(ground: &Ground<'_>) -> (Vec<Bias>, Tally) {
    let rail = ground.rail();
    let chosen: Vec<Result<Bias, Check>> = ground
        .problem
        .zeners
        .par_iter()
        .flat_map_iter(|part| {
            let zener = ZenerAtRail::new(part.figures, rail);
            ground.bias_lines.iter().filter_map(move |line| {
                chosen_rz(&zener, line, rail).map(|chosen| match chosen {
                    Chosen::Holds(bias, _) => Ok(bias),
                    Chosen::Fails(_, check) => Err(check),
                })
            })
        })
        .collect();
    let mut lost = Tally::default();
    let mut biases = Vec::with_capacity(chosen.len());
    for outcome in chosen {
        match outcome {
            Ok(bias) => biases.push(bias),
            Err(check) => lost.add(check, 1),
        }
    }
    (biases, lost)
}

/// What biased zeners meet: every divider line, pot and amplifier.
struct Meeting<'a> {
    ground: &'a Ground<'a>,
    boxes: &'a Boxes<AmplifierExtent>,
    lines: Vec<Class<&'a LineAtRail>>,
    pots: Vec<Class<Option<PotAtRail>>>,
    /// Pairs of line and pot.
    dividers: u128,
}

impl Meeting<'_> {
    /// Counts a class of biased zeners with every divider line, pot and amplifier.
    fn count(&self, reference: &Class<Bias>, tally: &mut InputTally) {
        let Class { one: bias, many } = reference;
        let (members, span) = self.in_range(reference, tally);
        let Some(span) = span else { return };
        let in_range: u128 = members.iter().map(|m| self.amplifiers(*m)).sum();
        let mut open = Vec::new();
        let mut all_pass = 0;
        for (line, pot) in self.lines.iter().flat_map(|l| self.pots.iter().map(move |p| (l, p))) {
            let sides = many * line.many * pot.many;
            let rail = self.ground.rail();
            let choice = choose_divider(&self.ground.aim, bias, line.one, pot.one.as_ref(), rail);
            let Some(divider) = choice.divider() else {
                tally.lost.add(Check::DividerWindow, in_range * u128::from(sides));
                continue;
            };
            let network = Network { line: line.one, divider, pot: pot.one.as_ref() };
            let first_failing = |amp: &AmplifierAtRail| {
                let aim = &self.ground.aim;
                WhileHolding::over(|t| input_checks(amp, bias, &network, aim, rail, t)).err()
            };
            match common_outcome(&span, &first_failing) {
                Some(None) => all_pass += sides,
                Some(Some(check)) => tally.lost.add(check, in_range * u128::from(sides)),
                None => {
                    open.extend_from_slice(&members);
                    outcomes(
                        self.boxes,
                        &mut open,
                        &first_failing,
                        |found, outcome| match outcome {
                            None => tally.pass(found, sides),
                            Some(check) => {
                                tally.lost.add(check, self.amplifiers(found) * u128::from(sides));
                            }
                        },
                    );
                }
            }
        }
        members.into_iter().for_each(|m| tally.pass(m, all_pass));
    }

    /// The amplifiers in whose input range the reference lies, with their best and worst figures. The
    /// others are counted as lost, whatever the divider.
    fn in_range(
        &self,
        reference: &Class<Bias>,
        tally: &mut InputTally,
    ) -> (Vec<Members>, Option<AmplifierSpan>) {
        let rail = self.ground.rail();
        let first_failing = |amp: &AmplifierAtRail| {
            WhileHolding::over(|t| input_range_checks(amp, &reference.one, rail, t)).err()
        };
        let mut open: Vec<Members> = self.boxes.root().into_iter().map(Members::Box).collect();
        let mut members = Vec::new();
        let mut span: Option<AmplifierSpan> = None;
        outcomes(self.boxes, &mut open, &first_failing, |found, outcome| match outcome {
            Some(check) => {
                let pairs = self.amplifiers(found) * u128::from(reference.many) * self.dividers;
                tally.lost.add(check, pairs);
            }
            None => {
                let of_found = match found {
                    Members::Box(id) => self.boxes.get(id).best,
                    Members::Item(place) => self.boxes.items()[place].best(),
                };
                match &mut span {
                    Some(span) => AmplifierExtent::widen(span, &of_found),
                    None => span = Some(of_found),
                }
                members.push(found);
            }
        });
        (members, span)
    }

    fn amplifiers(&self, members: Members) -> u128 {
        match members {
            Members::Box(id) => u128::from(self.boxes.get(id).len()),
            Members::Item(_) => 1,
        }
    }
}
