//! The best-first search over triples of nodes.
//!
//! A triple (reference node, amplifier node, power node) stands for all candidates whose sides lie in
//! its nodes. Its key is the least key that any of them could have: every part of a key is monotone in
//! the shares of the three sides, and each node's share is at most that of any choice in it. The
//! triple with the least key is taken from the heap and, unless all three are choices made, one of
//! its nodes is replaced by the nodes that it falls into. A triple in which some check fails between
//! best figures holds no feasible candidate and is dropped.
//!
//! So a complete triple comes off the heap only when no other can hold a candidate before it: the
//! search is exact, whatever order nodes are taken apart in. That order only decides how long it
//! takes.

use crate::candidate::Candidate;
use crate::grove::{Grove, Names, Node, Share};
use crate::problem::Ground;
use crate::ranking::{Spread, score};
use crate::rest::Rest;
use crate::sides::amplifier::{AmplifierMark, AmplifierSide};
use crate::sides::power::{Mount, PowerMark, PowerNode, PowerSide};
use crate::sides::reference::{ReferenceFigures, ReferenceNode, ReferenceSide};
use crate::sides::{meet_power, meet_reference};
use circuit::amplifier::AmplifierAtRail;
use circuit::merit;
use circuit::slot::Slot;
use quantity::digits::rounded;
use std::cmp::Ordering;
use std::collections::{BinaryHeap, HashMap};
use std::fmt;

/// Memory that a search may take for itself, bytes.
const MEMORY_LIMIT: usize = 600 << 20;

/// Why a search ended early.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum SearchError {
    /// The parts tie or balance so evenly that the list of what could still be first outgrew memory.
    TooLarge {
        /// How many triples were waiting.
        waiting: usize,
    },
}

impl fmt::Display for SearchError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::TooLarge { waiting } => write!(
                f,
                "the search holds {waiting} sets of candidates of which each could still be first, \
                 and would need more than {} MiB; pin a slot or tighten the sheet",
                MEMORY_LIMIT >> 20
            ),
        }
    }
}

impl std::error::Error for SearchError {}

/// What sides that are not yet looked at add at least.
struct RestOfSides {
    references: Rest,
    amplifiers: Rest,
    /// References and amplifiers together.
    both: Rest,
    /// How many reference nodes there will be when it is worth while to look at them again.
    next_look: usize,
}

impl RestOfSides {
    /// So many reference nodes before the first look.
    const FIRST_LOOK: usize = 512;

    fn new(references: &ReferenceSide<'_, '_>, amplifiers: &AmplifierSide) -> Self {
        let references = Rest::of(references.shares());
        let amplifiers = Rest::of(amplifiers.shares());
        let both = references.with(&amplifiers);
        Self { references, amplifiers, both, next_look: Self::FIRST_LOOK }
    }

    /// Takes in what has become known of the references, whenever their nodes have grown by half.
    fn learn(&mut self, references: &Grove<ReferenceSide<'_, '_>>) {
        if references.count() >= self.next_look {
            self.next_look = references.count() * 3 / 2;
            self.references = Rest::of(references.frontier());
            self.both = self.references.with(&self.amplifiers);
        }
    }
}

/// The node with all choices of a side.
const ROOT: u32 = 0;

/// Some reference side suits an amplifier. Grows the tree of references where it looks.
fn suits_any(
    ground: &Ground<'_>,
    references: &mut Grove<ReferenceSide<'_, '_>>,
    amp: &AmplifierAtRail,
) -> bool {
    let mut open: Vec<u32> = references.root().into_iter().collect();
    while let Some(id) = open.pop() {
        let node = references.get(id);
        if node.share.is_impossible() || meet_reference(ground, &node.figures, amp).is_none() {
            continue;
        }
        if node.size == 1 {
            return true;
        }
        open.extend(references.children(id, |_| true));
    }
    false
}

/// What decides the order of two candidates, at ten significant digits.
#[derive(Clone, Copy, PartialEq)]
pub(crate) struct Key {
    first: f64,
    pub cost: f64,
    pub stress: f64,
    pub loss: f64,
    /// Places by name in the order of [`Slot::BY_NAME`].
    names: Names,
}

impl Eq for Key {}

impl Key {
    const LEAST: Key =
        Key { first: 0.0, cost: 0.0, stress: 0.0, loss: 0.0, names: [0; Slot::COUNT] };
}

impl Ord for Key {
    fn cmp(&self, other: &Self) -> Ordering {
        self.first
            .total_cmp(&other.first)
            .then_with(|| self.cost.total_cmp(&other.cost))
            .then_with(|| self.stress.total_cmp(&other.stress))
            .then_with(|| self.loss.total_cmp(&other.loss))
            .then_with(|| self.names.cmp(&other.names))
    }
}

impl PartialOrd for Key {
    fn partial_cmp(&self, other: &Self) -> Option<Ordering> {
        Some(self.cmp(other))
    }
}

/// What a list is ordered by.
#[derive(Clone, Copy, PartialEq)]
pub(crate) enum Order {
    /// By rank.
    Score,
    /// By cost, stress, loss: a candidate comes after all that beat it.
    Front,
}

#[derive(Clone, Copy)]
struct Triple {
    key: Key,
    reference: u32,
    amplifier: u32,
    power: u32,
    /// Stress where the amplifier meets the reference side.
    at_input: f64,
    /// Stress where the amplifier drives the transistor.
    at_output: f64,
}

/// The heap gives its greatest, so the order is turned round.
impl Ord for Triple {
    fn cmp(&self, other: &Self) -> Ordering {
        other.key.cmp(&self.key).then_with(|| {
            (other.reference, other.amplifier, other.power).cmp(&(
                self.reference,
                self.amplifier,
                self.power,
            ))
        })
    }
}

impl PartialOrd for Triple {
    fn partial_cmp(&self, other: &Self) -> Option<Ordering> {
        Some(self.cmp(other))
    }
}

impl PartialEq for Triple {
    fn eq(&self, other: &Self) -> bool {
        self.cmp(other) == Ordering::Equal
    }
}

impl Eq for Triple {}

/// Which node of a triple is taken apart.
#[derive(Clone, Copy, PartialEq)]
enum SideName {
    Reference,
    Amplifier,
    Power,
}

/// Candidates one after another, in order.
pub(crate) struct Search<'g, 'p> {
    ground: &'g Ground<'p>,
    order: Order,
    references: Grove<ReferenceSide<'g, 'p>>,
    amplifiers: Grove<AmplifierSide>,
    powers: Grove<PowerSide<'g, 'p>>,
    rest: RestOfSides,
    heap: BinaryHeap<Triple>,
    limits: Spread,
    /// Rows that a part (slot, place by name) has in the list so far.
    rows: HashMap<(Slot, u32), u32>,
    taken: u64,
}

impl<'g, 'p> Search<'g, 'p> {
    /// Candidates in rank order.
    pub fn by_score(ground: &'g Ground<'p>, limits: Spread) -> Self {
        Self::new(ground, Order::Score, limits)
    }

    /// Candidates in an order in which each comes after all that beat it.
    pub fn for_front(ground: &'g Ground<'p>) -> Self {
        Self::new(ground, Order::Front, crate::ranking::NO_SPREAD)
    }

    fn new(ground: &'g Ground<'p>, order: Order, limits: Spread) -> Self {
        let amplifiers = AmplifierSide::new(ground);
        let ((references, rest), powers) = rayon::join(
            || {
                let references = ReferenceSide::new(ground, &amplifiers);
                let rest = RestOfSides::new(&references, &amplifiers);
                (references, rest)
            },
            || PowerSide::new(ground, &amplifiers),
        );
        let mut search = Self {
            ground,
            order,
            references: Grove::new(references),
            amplifiers: Grove::new(amplifiers),
            powers: Grove::new(powers),
            rest,
            heap: BinaryHeap::new(),
            limits,
            rows: HashMap::new(),
            taken: 0,
        };
        let roots = (search.references.root(), search.amplifiers.root(), search.powers.root());
        if let (Some(reference), Some(amplifier), Some(power)) = roots {
            search.push(reference, amplifier, power, None, None);
        }
        search
    }

    /// The next candidate; None where there is no other.
    pub fn next(&mut self) -> Result<Option<Candidate>, SearchError> {
        self.next_unless(|_| false)
    }

    /// The next candidate whose key, and that of all sets it came from, is not `beaten`. A set may be
    /// beaten only where every candidate in it is.
    pub fn next_unless(
        &mut self,
        beaten: impl Fn(&Key) -> bool,
    ) -> Result<Option<Candidate>, SearchError> {
        while let Some(mut triple) = self.heap.pop() {
            if beaten(&triple.key) || self.is_full(&triple) {
                continue;
            }
            // More may be known of its nodes than when it was put there.
            let Some(key) = self.key(&triple) else { continue };
            if key > triple.key {
                triple.key = key;
                self.heap.push(triple);
                continue;
            }
            self.taken += 1;
            if self.taken.is_multiple_of(4096) {
                self.check_memory()?;
            }
            match self.side_to_split(&triple) {
                None => {
                    let candidate = self.candidate(&triple);
                    self.count_rows(&triple);
                    return Ok(candidate);
                }
                Some(side) => self.split(&triple, side),
            }
        }
        Ok(None)
    }

    /// Replaces a node of a triple by its parts.
    ///
    /// When a node's parts are made, those are left out for which no amplifier is found at all; an
    /// amplifier is left out that no reference suits. So what can't be in any candidate is found once,
    /// not once for each company.
    fn split(&mut self, triple: &Triple, side: SideName) {
        let Triple { reference, amplifier, power, at_input, at_output, .. } = *triple;
        let ground = self.ground;
        match side {
            SideName::Reference => {
                let amplifiers = &mut self.amplifiers.growth;
                let stands = |child: &ReferenceNode| {
                    amplifiers.any(|amp| meet_reference(ground, &child.figures, amp).is_some())
                };
                let children = self.references.children(reference, stands);
                self.rest.learn(&self.references);
                for child in children {
                    self.push(child, amplifier, power, None, Some(at_output));
                }
            }
            SideName::Amplifier => {
                let references = &mut self.references;
                let amplifiers = self.amplifiers.children(amplifier, |child| {
                    child.size > 1 || suits_any(ground, references, &child.figures)
                });
                for child in amplifiers {
                    self.push(reference, child, power, None, None);
                }
            }
            SideName::Power => {
                let amplifiers = &mut self.amplifiers.growth;
                let is_mounting = self.powers.get(power).decided.has(Slot::Pass);
                let stands = |child: &PowerNode| {
                    // A mounting is driven as the transistor is.
                    is_mounting
                        || amplifiers.any(|amp| meet_power(ground, amp, &child.figures).is_some())
                };
                for child in self.powers.children(power, stands) {
                    self.push(reference, amplifier, child, Some(at_input), None);
                }
            }
        }
    }

    /// Puts a triple on the heap unless it holds no feasible candidate. What is known of the two
    /// meetings is handed over.
    fn push(
        &mut self,
        reference: u32,
        amplifier: u32,
        power: u32,
        at_input: Option<f64>,
        at_output: Option<f64>,
    ) {
        let r = self.references.get(reference);
        let a = self.amplifiers.get(amplifier);
        let p = self.powers.get(power);
        let Some(at_output) = at_output.or_else(|| meet_power(self.ground, &a.figures, &p.figures))
        else {
            return;
        };
        let Some(at_input) =
            at_input.or_else(|| meet_reference(self.ground, &r.figures, &a.figures))
        else {
            return;
        };
        let key = Key::LEAST;
        let mut triple = Triple { key, reference, amplifier, power, at_input, at_output };
        if let Some(key) = self.key(&triple) {
            triple.key = key;
            self.heap.push(triple);
        }
    }

    /// The least key that any candidate of a triple could have; None where a node of it is known to
    /// hold no choice.
    fn key(&self, triple: &Triple) -> Option<Key> {
        let r = self.references.get(triple.reference);
        let a = self.amplifiers.get(triple.amplifier);
        let p = self.powers.get(triple.power);
        let shares = [&r.share, &a.share, &p.share];
        if shares.iter().any(|share| share.is_impossible()) {
            return None;
        }
        let meeting = triple.at_input.max(triple.at_output);
        let mut merits = self.merits(shares, meeting);
        if self.order == Order::Score {
            merits.score = merits.score.max(self.least_score(triple, meeting));
        }
        let cost = rounded(merits.cost);
        Some(Key {
            first: match self.order {
                Order::Score => rounded(merits.score),
                Order::Front => cost,
            },
            cost,
            stress: rounded(merits.stress),
            loss: rounded(merits.loss),
            names: Slot::BY_NAME
                .map(|slot| [r.names, a.names, p.names].iter().map(|n| n[slot as usize]).sum()),
        })
    }

    /// The least score of a triple, of which whole sides may not have been looked at.
    fn least_score(&self, triple: &Triple, meeting: f64) -> f64 {
        let power = self.powers.get(triple.power).share;
        let (known, rest) = match (triple.reference, triple.amplifier) {
            (ROOT, ROOT) => (power, &self.rest.both),
            (ROOT, amplifier) => {
                (self.amplifiers.get(amplifier).share.beside(&power), &self.rest.references)
            }
            _ => return 0.0,
        };
        let scores = rest.shares().iter().map(|share| {
            let together = share.beside(&known);
            let loss = merit::loss(self.ground.rail(), together.current_a);
            score(&self.ground.problem.weights, together.cost, loss, together.stress.max(meeting))
        });
        // The sums are made in another order than those of a candidate: the last bits may differ.
        scores.fold(f64::INFINITY, f64::min) * (1.0 - 1e-14)
    }

    fn merits(&self, [r, a, p]: [&Share; 3], meeting: f64) -> Merits {
        let cost = r.cost + a.cost + p.cost;
        let loss = merit::loss(self.ground.rail(), r.current_a + a.current_a);
        let stress = r.stress.max(a.stress).max(p.stress).max(meeting);
        let score = score(&self.ground.problem.weights, cost, loss, stress);
        Merits { cost, loss, stress, score }
    }

    /// The node to take apart; None where all are choices made.
    ///
    /// The power side weighs most in cost and stress, so a list of what is best is sorted by it first.
    fn side_to_split(&self, triple: &Triple) -> Option<SideName> {
        if self.powers.get(triple.power).size > 1 {
            Some(SideName::Power)
        } else if self.amplifiers.get(triple.amplifier).size > 1 {
            Some(SideName::Amplifier)
        } else if self.references.get(triple.reference).size > 1 {
            Some(SideName::Reference)
        } else {
            None
        }
    }

    fn check_memory(&self) -> Result<(), SearchError> {
        let in_use = self.heap.capacity() * size_of::<Triple>()
            + self.references.memory()
            + self.amplifiers.memory()
            + self.powers.memory();
        if in_use > MEMORY_LIMIT {
            return Err(SearchError::TooLarge { waiting: self.heap.len() });
        }
        Ok(())
    }

    /// The slots in which all candidates of a triple have the same part, with its place by name.
    fn decided(&self, triple: &Triple) -> impl Iterator<Item = (Slot, u32)> {
        fn of<F, M>(node: &Node<F, M>) -> impl Iterator<Item = (Slot, u32)> + use<F, M> {
            let names = node.names;
            node.decided.iter().map(move |slot| (slot, names[slot as usize]))
        }
        of(self.references.get(triple.reference))
            .chain(of(self.amplifiers.get(triple.amplifier)))
            .chain(of(self.powers.get(triple.power)))
            .filter(|&(_, place)| place > 0)
    }

    /// Some part that all candidates of the triple share has as many rows as it may have.
    fn is_full(&self, triple: &Triple) -> bool {
        if self.limits == crate::ranking::NO_SPREAD {
            return false;
        }
        self.decided(triple).any(|(slot, place)| {
            let rows = self.rows.get(&(slot, place)).copied().unwrap_or(0);
            self.limits[slot as usize].is_some_and(|limit| rows >= limit)
        })
    }

    fn count_rows(&mut self, triple: &Triple) {
        let decided: Vec<_> = self.decided(triple).collect();
        for (slot, place) in decided {
            if self.limits[slot as usize].is_some() {
                *self.rows.entry((slot, place)).or_default() += 1;
            }
        }
    }

    /// The candidate that a complete triple stands for.
    fn candidate(&self, triple: &Triple) -> Option<Candidate> {
        let r = self.references.get(triple.reference);
        let a = self.amplifiers.get(triple.amplifier);
        let p = self.powers.get(triple.power);
        let ReferenceFigures::Complete(complete) = &r.figures else { return None };
        let AmplifierMark::One(amplifier) = a.mark else { return None };
        let PowerMark::Done(pass, mount) = p.mark else { return None };
        let mut places = [None; Slot::COUNT];
        places[Slot::Zener as usize] = Some(complete.zener);
        places[Slot::BiasLine as usize] = Some(complete.bias_line);
        places[Slot::Amplifier as usize] = Some(amplifier);
        places[Slot::DividerLine as usize] = Some(complete.divider_line);
        places[Slot::Pot as usize] = complete.pot;
        places[Slot::Pass as usize] = Some(pass);
        places[Slot::Heatsink as usize] = match mount {
            Mount::Sink(sink) => Some(sink),
            Mount::Own | Mount::None => None,
        };
        let meeting = triple.at_input.max(triple.at_output);
        let merits = self.merits([&r.share, &a.share, &p.share], meeting);
        Some(Candidate {
            places,
            rz: complete.bias.rz,
            divider: complete.divider,
            cost: merits.cost,
            loss: merits.loss,
            stress: merits.stress,
            score: merits.score,
        })
    }
}

/// The figures that rank a candidate, in full.
struct Merits {
    cost: f64,
    loss: f64,
    stress: f64,
    score: f64,
}
