//! The front: candidates that no other equals or beats on cost, loss and stress at once.
//!
//! Beside one amplifier the reference sides that suit it and the power sides that it drives are
//! independent of each other, and cost, loss and stress are each monotone in what either adds. So only
//! those reference sides matter that no other beats in cost, current and stress, and only those power
//! sides that no other beats in cost and stress: few of each, whose pairs are all looked at.
//! Amplifiers are taken in the order of the best that they could do, and one is left out when
//! something on the front already beats every pair that it could have.
//!
//! *Equal figures.* Of candidates with equal figures the first by name stays. A choice is therefore
//! only beaten by one that is clearly cheaper or draws clearly less, so that any candidate with it is
//! beaten for certain, or by one that also comes first by name. A choice that is better in stress
//! alone does not beat one that comes first by name: another part may set the stress of both.

use crate::candidate::Candidate;
use crate::company::{ROOT, Sides};
use crate::grove::{Names, Share};
use crate::limit::{self, SearchError};
use crate::problem::{Ground, Problem};
use crate::rest::Rest;
use crate::sides::amplifier::AmplifierMark;
use crate::sides::{meet_power, meet_reference};
use circuit::merit;
use circuit::slot::Slot;
use quantity::digits::{compare, rounded};
use std::cmp::{Ordering, Reverse};
use std::collections::BinaryHeap;
use std::ops::RangeInclusive;
use std::rc::Rc;

/// The front in rank order. Of several candidates with equal figures the first by name stays.
///
/// # Errors
/// [`SearchError::TooLarge`] where the search would take more memory than it may.
pub fn front(problem: &Problem<'_>) -> Result<Vec<Candidate>, SearchError> {
    let ground = Ground::new(problem);
    let mut survey = Survey {
        ground: &ground,
        sides: Sides::new(&ground),
        clearly: clear_differences(problem),
        found: Vec::new(),
    };
    survey.run()?;
    let mut front: Vec<Candidate> = survey.found.into_iter().map(|f| f.candidate).collect();
    front.sort_by(|a, b| {
        compare(a.score, b.score)
            .then_with(|| compare(a.cost, b.cost))
            .then_with(|| compare(a.stress, b.stress))
            .then_with(|| compare(a.loss, b.loss))
    });
    Ok(front)
}

/// A difference of this fraction of a sum shows at ten significant digits.
const CLEARLY: f64 = 1e-8;

/// A difference that shows at ten digits in the cost of any candidate.
fn clear_differences(problem: &Problem<'_>) -> Share {
    fn most(prices: impl Iterator<Item = f64>) -> f64 {
        prices.fold(0.0, f64::max)
    }
    let divider_line = most(problem.divider_lines.iter().map(|p| p.price));
    let cost = most(problem.zeners.iter().map(|p| p.price))
        + most(problem.bias_lines.iter().map(|p| p.price))
        + most(problem.amplifiers.iter().map(|p| p.price))
        + 2.0 * divider_line
        + most(problem.pots.iter().map(|p| p.price))
        + most(problem.transistors.iter().map(|t| t.part.price))
        + most(problem.heatsinks.iter().map(|s| s.part.price));
    Share { cost: CLEARLY * cost, current_a: 0.0, stress: 0.0 }
}

/// Cost, loss and stress at ten digits, with the places by name in the order of the ranking.
#[derive(Debug, Clone, Copy, PartialEq)]
struct Figures {
    cost: f64,
    loss: f64,
    stress: f64,
    names: Names,
}

impl Figures {
    /// No candidate with figures and names no better than the other's belongs on the front.
    fn beats(&self, other: &Figures) -> bool {
        self.cost <= other.cost
            && self.loss <= other.loss
            && self.stress <= other.stress
            && (self.cost < other.cost
                || self.loss < other.loss
                || self.stress < other.stress
                || self.names < other.names)
    }
}

/// A choice of one side beside a given amplifier.
#[derive(Debug, Clone, Copy)]
struct Choice {
    node: u32,
    share: Share,
    names: Names,
}

impl Choice {
    /// Every candidate with the other is beaten by one with this in its place.
    fn beats(&self, other: &Choice, clearly: &Share) -> bool {
        let (a, b) = (&self.share, &other.share);
        let no_worse = a.cost <= b.cost && a.current_a <= b.current_a && a.stress <= b.stress;
        no_worse
            && (b.cost - a.cost > clearly.cost
                || b.current_a - a.current_a > clearly.current_a
                || by_name(&self.names) < by_name(&other.names))
    }
}

/// Places by name in the order of the ranking.
fn by_name(names: &Names) -> Names {
    Slot::BY_NAME.map(|slot| names[slot as usize])
}

/// A choice on its way: the cheapest first, then by current, stress and name.
#[derive(Clone, Copy)]
struct Waiting(Choice);

impl Ord for Waiting {
    fn cmp(&self, other: &Self) -> Ordering {
        let (a, b) = (&self.0, &other.0);
        let (x, y) = (&a.share, &b.share);
        x.cost
            .total_cmp(&y.cost)
            .then_with(|| x.current_a.total_cmp(&y.current_a))
            .then_with(|| x.stress.total_cmp(&y.stress))
            .then_with(|| by_name(&a.names).cmp(&by_name(&b.names)))
            .then_with(|| a.node.cmp(&b.node))
    }
}

impl PartialOrd for Waiting {
    fn partial_cmp(&self, other: &Self) -> Option<Ordering> {
        Some(self.cmp(other))
    }
}

impl PartialEq for Waiting {
    fn eq(&self, other: &Self) -> bool {
        self.cmp(other) == Ordering::Equal
    }
}

impl Eq for Waiting {}

/// An amplifier node with the least score, at even weights, that it could have part in.
struct Promising {
    least: f64,
    node: u32,
    company: Rc<Rest>,
}

impl Ord for Promising {
    fn cmp(&self, other: &Self) -> Ordering {
        self.least.total_cmp(&other.least).then_with(|| self.node.cmp(&other.node))
    }
}

impl PartialOrd for Promising {
    fn partial_cmp(&self, other: &Self) -> Option<Ordering> {
        Some(self.cmp(other))
    }
}

impl PartialEq for Promising {
    fn eq(&self, other: &Self) -> bool {
        self.cmp(other) == Ordering::Equal
    }
}

impl Eq for Promising {}

/// A box of so many amplifiers is given a company of its own: once on the way down to each.
const CLOSER_LOOK: RangeInclusive<u32> = 24..=47;

struct Found {
    figures: Figures,
    candidate: Candidate,
}

struct Survey<'g, 'p> {
    ground: &'g Ground<'p>,
    sides: Sides<'g, 'p>,
    /// Differences that show at ten digits in any candidate's cost.
    clearly: Share,
    found: Vec<Found>,
}

impl Survey<'_, '_> {
    fn run(&mut self) -> Result<(), SearchError> {
        if self.sides.roots().is_none() {
            return Ok(());
        }
        let company = self.best_company(ROOT)?;
        let mut waiting = BinaryHeap::new();
        waiting.extend(self.promise(ROOT, &company).map(Reverse));
        while let Some(Reverse(Promising { least, node, company })) = waiting.pop() {
            // More may be found since.
            let Some(now) = self.promise(node, &company) else { continue };
            if now.least > least {
                waiting.push(Reverse(now));
                continue;
            }
            if let AmplifierMark::One(_) = self.sides.amplifiers.get(node).mark {
                self.pair_off(node)?;
            } else {
                let size = self.sides.amplifiers.get(node).size;
                let company =
                    if CLOSER_LOOK.contains(&size) { self.best_company(node)? } else { company };
                for part in self.sides.amplifier_parts(node) {
                    waiting.extend(self.promise(part, &company).map(Reverse));
                }
            }
            self.check_memory(waiting.len())?;
        }
        Ok(())
    }

    fn check_memory(&self, waiting: usize) -> Result<(), SearchError> {
        let in_use = waiting * size_of::<Waiting>() + self.sides.memory();
        limit::check(in_use, waiting)
    }

    /// What reference and power sides together add at least beside any amplifier of a node: the pairs of
    /// those that nothing beats beside the best figures of the node. Whatever suits one amplifier suits
    /// those figures, with no more stress, so one of the pairs is at least as good.
    fn best_company(&mut self, node: u32) -> Result<Rc<Rest>, SearchError> {
        /// So many pairs are kept apart: an amplifier costs much more to look into than to bound.
        const MOST: usize = 512;
        let powers = self.powers_beside(node)?;
        let least = powers.iter().map(|p| p.share.stress).fold(f64::INFINITY, f64::min);
        let references = self.references_beside(node, least)?;
        let pairs = references.iter().flat_map(|r| powers.iter().map(|p| r.share.beside(&p.share)));
        Ok(Rc::new(Rest::of_at_most(pairs, MOST)))
    }

    /// What an amplifier node could do at best; None where all of it is beaten.
    fn promise(&self, node: u32, company: &Rc<Rest>) -> Option<Promising> {
        let amplifier = self.sides.amplifiers.get(node);
        let root = self.sides.references.get(ROOT);
        let power = self.sides.powers.get(ROOT);
        let names: Names = std::array::from_fn(|slot| {
            amplifier.names[slot] + root.names[slot] + power.names[slot]
        });
        meet_power(self.ground, &amplifier.figures, &power.figures)?;
        meet_reference(self.ground, &root.figures, &amplifier.figures)?;
        let mut least: Option<f64> = None;
        for share in company.shares() {
            let together = share.beside(&amplifier.share);
            let figures = self.figures(&together, names);
            if !self.is_beaten(&figures) {
                let score = figures.cost * figures.loss * figures.stress;
                least = Some(least.map_or(score, |l| l.min(score)));
            }
        }
        least.map(|least| Promising { least, node, company: Rc::clone(company) })
    }

    fn figures(&self, share: &Share, names: Names) -> Figures {
        // Sums made in another order than a candidate's may differ in the last bits.
        const LAST_BITS: f64 = 1.0 - 1e-14;
        Figures {
            cost: rounded(share.cost * LAST_BITS),
            loss: rounded(merit::loss(self.ground.rail(), share.current_a) * LAST_BITS),
            stress: rounded(share.stress),
            names: by_name(&names),
        }
    }

    fn is_beaten(&self, figures: &Figures) -> bool {
        self.found.iter().any(|f| f.figures.beats(figures))
    }

    /// All pairs of the reference and power sides that matter beside an amplifier.
    fn pair_off(&mut self, amplifier: u32) -> Result<(), SearchError> {
        let powers = self.powers_beside(amplifier)?;
        let Some(least_stress) = powers.iter().map(|p| p.share.stress).min_by(f64::total_cmp)
        else {
            return Ok(());
        };
        let references = self.references_beside(amplifier, least_stress)?;
        let amp = *self.sides.amplifiers.get(amplifier);
        for p in &powers {
            for r in &references {
                let nodes = [r.node, amplifier, p.node];
                let meeting = r.share.stress.max(p.share.stress);
                let Some(candidate) = self.sides.candidate(nodes, meeting) else { continue };
                let names: Names =
                    std::array::from_fn(|slot| r.names[slot] + amp.names[slot] + p.names[slot]);
                let figures = Figures {
                    cost: rounded(candidate.cost),
                    loss: rounded(candidate.loss),
                    stress: rounded(candidate.stress),
                    names: by_name(&names),
                };
                if !self.is_beaten(&figures) {
                    self.found.retain(|f| !figures.beats(&f.figures));
                    self.found.push(Found { figures, candidate });
                }
            }
        }
        Ok(())
    }

    /// The power sides that an amplifier drives and no other beats beside it.
    fn powers_beside(&mut self, amplifier: u32) -> Result<Vec<Choice>, SearchError> {
        let amp = *self.sides.amplifiers.get(amplifier);
        let (ground, clearly) = (self.ground, self.clearly);
        let mut waiting = BinaryHeap::new();
        let mut kept: Vec<Choice> = Vec::new();
        let choice = |sides: &Sides<'_, '_>, id: u32| {
            let node = sides.powers.get(id);
            let meeting = meet_power(ground, &amp.figures, &node.figures)?;
            let stress = node.share.stress.max(amp.share.stress).max(meeting);
            (!node.share.is_impossible()).then_some(Waiting(Choice {
                node: id,
                share: Share { stress, ..node.share },
                names: node.names,
            }))
        };
        waiting.extend(choice(&self.sides, ROOT).map(Reverse));
        while let Some(Reverse(Waiting(next))) = waiting.pop() {
            if kept.iter().any(|k| k.beats(&next, &clearly)) {
                continue;
            }
            if self.sides.powers.get(next.node).size == 1 {
                kept.push(next);
                continue;
            }
            for part in self.sides.power_parts(next.node) {
                waiting.extend(choice(&self.sides, part).map(Reverse));
            }
            self.check_memory(waiting.len())?;
        }
        Ok(kept)
    }

    /// The reference sides that suit an amplifier and no other beats beside it, where stress below
    /// `least_stress` is of no use.
    fn references_beside(
        &mut self,
        amplifier: u32,
        least_stress: f64,
    ) -> Result<Vec<Choice>, SearchError> {
        let amp = *self.sides.amplifiers.get(amplifier);
        let ground = self.ground;
        let mut waiting = BinaryHeap::new();
        let mut kept: Vec<Choice> = Vec::new();
        let choice = |sides: &Sides<'_, '_>, id: u32| {
            let node = sides.references.get(id);
            let meeting = meet_reference(ground, &node.figures, &amp.figures)?;
            let stress = node.share.stress.max(meeting).max(least_stress);
            (!node.share.is_impossible()).then_some(Waiting(Choice {
                node: id,
                share: Share { stress, ..node.share },
                names: node.names,
            }))
        };
        // Beside this current a difference of current has to show in the loss.
        let drawn_a = ground.rail().load.max_a + amp.share.current_a;
        let clear_differences = self.clearly;
        waiting.extend(choice(&self.sides, ROOT).map(Reverse));
        while let Some(Reverse(Waiting(next))) = waiting.pop() {
            let clearly = Share {
                current_a: CLEARLY * (drawn_a + next.share.current_a),
                ..clear_differences
            };
            if kept.iter().any(|k| k.beats(&next, &clearly)) {
                continue;
            }
            if self.sides.references.get(next.node).size == 1 {
                kept.push(next);
                continue;
            }
            for part in self.sides.reference_parts(next.node) {
                waiting.extend(choice(&self.sides, part).map(Reverse));
            }
            self.check_memory(waiting.len())?;
        }
        Ok(kept)
    }
}
