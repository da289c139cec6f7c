//! The choices of one side that no other beats beside a node of amplifiers.
//!
//! They are found by walking the side's tree, what adds least first. A node is cut off where a choice that
//! was found beats all that it could hold, and that choice remembers it. So for a part of the amplifier
//! node nothing is walked again but what was cut off by choices that count for less beside the part:
//! most of them count as much beside every amplifier.

use crate::beside::Beside;
use crate::company::{ROOT, Sides};
use crate::grove::{Names, Share};
use crate::limit::{self, SearchError};
use crate::problem::Problem;
use circuit::slot::Slot;
use std::cmp::{Ordering, Reverse};
use std::collections::BinaryHeap;
use std::rc::Rc;

/// A choice of one side, or a node of choices, beside amplifiers.
#[derive(Debug, Clone, Copy)]
pub(crate) struct Choice {
    pub node: u32,
    /// What it adds at least; its stress is that of the whole beside the amplifiers.
    pub share: Share,
    pub names: Names,
}

/// Differences of cost and current that show at ten digits in any candidate.
#[derive(Debug, Clone, Copy)]
pub(crate) struct Clearly {
    pub cost: f64,
    /// A fraction of all the current that a candidate draws.
    pub fraction_of_current: f64,
    /// At least what a candidate draws without its reference, A.
    pub drawn_a: f64,
}

/// A difference of this fraction of a sum shows at ten significant digits.
const CLEARLY: f64 = 1e-8;

impl Clearly {
    /// Differences that show at ten digits in the cost and loss of any candidate.
    pub fn of(problem: &Problem<'_>) -> Self {
        fn most(figures: impl Iterator<Item = f64>) -> f64 {
            figures.fold(0.0, f64::max)
        }
        let divider_line = most(problem.divider_lines.iter().map(|p| p.price));
        let cost = most(problem.zeners.iter().map(|p| p.price))
            + most(problem.bias_lines.iter().map(|p| p.price))
            + most(problem.amplifiers.iter().map(|p| p.price))
            + 2.0 * divider_line
            + most(problem.pots.iter().map(|p| p.price))
            + most(problem.transistors.iter().map(|t| t.part.price))
            + most(problem.heatsinks.iter().map(|s| s.part.price));
        let quiescent_a = most(problem.amplifiers.iter().map(|p| p.figures.iq_max_a));
        Self {
            cost: CLEARLY * cost,
            fraction_of_current: CLEARLY,
            drawn_a: problem.rail.load.max_a + quiescent_a,
        }
    }
}

impl Choice {
    /// Every candidate with the other is beaten by one with this in its place.
    ///
    /// Of candidates with equal figures the first by name stays. So the other has to be clearly dearer,
    /// or clearly draw more, or come later by name. More stress is not enough, for another part may set
    /// the stress of both.
    pub fn beats(&self, other: &Choice, clearly: &Clearly) -> bool {
        let (a, b) = (&self.share, &other.share);
        let no_worse = a.cost <= b.cost && a.current_a <= b.current_a && a.stress <= b.stress;
        let clear_a = clearly.fraction_of_current * (clearly.drawn_a + b.current_a);
        no_worse
            && (b.cost - a.cost > clearly.cost
                || b.current_a - a.current_a > clear_a
                || by_name(&self.names) < by_name(&other.names))
    }
}

/// Places by name in the order of the ranking.
pub(crate) fn by_name(names: &Names) -> Names {
    Slot::BY_NAME.map(|slot| names[slot as usize])
}

/// The choices that no other beats, each with the nodes of which it beats all.
#[derive(Clone, Default)]
pub(crate) struct Unbeaten(Vec<Kept>);

#[derive(Clone)]
struct Kept {
    choice: Choice,
    /// Nodes that were cut off on its account.
    cut: Vec<Rc<[u32]>>,
    /// The same, of the walk that is going on.
    cut_now: Vec<u32>,
}

impl Unbeaten {
    /// The choices.
    pub fn choices(&self) -> impl Iterator<Item = &Choice> + Clone {
        self.0.iter().map(|kept| &kept.choice)
    }

    /// The choices of a side that nothing beats beside a node of amplifiers. `above` is the same for a
    /// node that this one is a part of. Choices that are `useless` are left out, and so is what they
    /// beat; what is useless must stay so for every part of the node.
    ///
    /// *Why what was cut off stays cut off.* Let k have cut off x above. Beside the part x has at least
    /// the stress that it had above, and at least the part's own least stress. As long as k has no more
    /// than the greater of these two for itself, it still has no more stress than x, and cost, current
    /// and names are what they were. Where another choice beats k it beats x too, and where k is useless
    /// so is x.
    ///
    /// # Errors
    /// [`SearchError::TooLarge`] where the walk would take more memory than it may.
    pub fn beside(
        sides: &mut Sides<'_, '_>,
        beside: &impl Beside,
        above: Option<&Unbeaten>,
        clearly: &Clearly,
        useless: impl Fn(&Choice) -> bool,
    ) -> Result<Self, SearchError> {
        let mut unbeaten = Unbeaten::default();
        let mut waiting = BinaryHeap::new();
        let to_walk = match above {
            None => vec![ROOT],
            Some(above) => unbeaten.inherit(above, sides, beside, clearly, &useless),
        };
        let on_its_way = |sides: &Sides<'_, '_>, node: u32| {
            beside.choice(sides, node).map(|choice| Reverse(Waiting::new(choice, clearly)))
        };
        waiting.extend(to_walk.into_iter().filter_map(|node| on_its_way(sides, node)));
        while let Some(Reverse(Waiting { choice: next, .. })) = waiting.pop() {
            if unbeaten.cuts_off(&next, beside.shares(sides, next.node), clearly, &useless) {
                continue;
            }
            if beside.is_made(sides, next.node) {
                unbeaten.keep(next);
                continue;
            }
            for part in beside.parts(sides, next.node) {
                waiting.extend(on_its_way(sides, part));
            }
            let in_use = waiting.len() * size_of::<Waiting>() + sides.memory();
            limit::check(in_use, waiting.len())?;
        }
        for kept in &mut unbeaten.0 {
            let cut = std::mem::take(&mut kept.cut_now);
            if !cut.is_empty() {
                kept.cut.push(cut.into());
            }
        }
        Ok(unbeaten)
    }

    /// Takes over what counts beside the part as it did above. Hands back the nodes that are to be walked
    /// again: what does not count as it did, and what was cut off on its account.
    fn inherit(
        &mut self,
        above: &Unbeaten,
        sides: &Sides<'_, '_>,
        beside: &impl Beside,
        clearly: &Clearly,
        useless: &impl Fn(&Choice) -> bool,
    ) -> Vec<u32> {
        let mut to_walk = Vec::new();
        for Kept { choice: before, cut, .. } in &above.0 {
            let now = beside.choice(sides, before.node);
            let most = before.share.stress.max(beside.least_stress());
            match now {
                Some(now) if now.share.stress <= most => {
                    if useless(&now) {
                        continue;
                    }
                    match self.0.iter_mut().find(|kept| kept.choice.beats(&now, clearly)) {
                        Some(kept) => {
                            kept.cut.extend(cut.iter().cloned());
                            kept.cut_now.push(now.node);
                        }
                        None => {
                            self.0.push(Kept { choice: now, cut: cut.clone(), cut_now: Vec::new() })
                        }
                    }
                }
                _ => {
                    to_walk.push(before.node);
                    cut.iter().for_each(|nodes| to_walk.extend_from_slice(nodes));
                }
            }
        }
        to_walk
    }

    /// All that a node could hold, by a few shares of which it adds one at least, is useless or beaten;
    /// the choices that beat it then remember the node.
    fn cuts_off(
        &mut self,
        node: &Choice,
        shares: &[Share],
        clearly: &Clearly,
        useless: &impl Fn(&Choice) -> bool,
    ) -> bool {
        let mut beaten_by = Vec::new();
        let is_cut = shares.iter().all(|share| {
            let share = Share { stress: share.stress.max(node.share.stress), ..*share };
            let at_least = Choice { node: node.node, share, names: node.names };
            let place = self.0.iter().position(|kept| kept.choice.beats(&at_least, clearly));
            beaten_by.extend(place);
            place.is_some() || useless(&at_least)
        });
        if is_cut {
            beaten_by.sort_unstable();
            beaten_by.dedup();
            beaten_by.iter().for_each(|&place| self.0[place].cut_now.push(node.node));
        }
        is_cut
    }

    /// Keeps a choice. What was cut off by two choices may be walked twice, so it may be there already.
    fn keep(&mut self, choice: Choice) {
        if self.0.iter().all(|kept| kept.choice.node != choice.node) {
            self.0.push(Kept { choice, cut: Vec::new(), cut_now: Vec::new() });
        }
    }
}

/// A choice on its way. That with the least cost, current and stress taken together comes first: what
/// beats much is found early, and what beats a choice never comes after it.
#[derive(Clone, Copy)]
struct Waiting {
    product: f64,
    choice: Choice,
}

impl Waiting {
    fn new(choice: Choice, clearly: &Clearly) -> Self {
        let Share { cost, current_a, stress } = choice.share;
        Self { product: cost * (clearly.drawn_a + current_a) * stress, choice }
    }
}

impl Ord for Waiting {
    fn cmp(&self, other: &Self) -> Ordering {
        let (a, b) = (&self.choice, &other.choice);
        let (x, y) = (&a.share, &b.share);
        self.product
            .total_cmp(&other.product)
            .then_with(|| x.cost.total_cmp(&y.cost))
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
