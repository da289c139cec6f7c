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
use crate::company::{ROOT, Sides};
use crate::grove::{Names, Node, Share};
use crate::limit::{self, SearchError};
use crate::problem::Ground;
use crate::score::score;
use crate::sides::{meet_power, meet_reference};
use crate::spread::{NO_SPREAD, Spread};
use crate::suited::Suited;
use circuit::merit;
use circuit::slot::Slot;
use quantity::digits::rounded;
use std::cmp::Ordering;
use std::collections::{BinaryHeap, HashMap};

/// What decides the order of two candidates, at ten significant digits.
#[derive(Clone, Copy, PartialEq)]
pub(crate) struct Key {
    score: f64,
    cost: f64,
    stress: f64,
    loss: f64,
    /// Places by name in the order of [`Slot::BY_NAME`].
    names: Names,
}

impl Eq for Key {}

impl Key {
    const LEAST: Key =
        Key { score: 0.0, cost: 0.0, stress: 0.0, loss: 0.0, names: [0; Slot::COUNT] };
}

impl Ord for Key {
    fn cmp(&self, other: &Self) -> Ordering {
        self.score
            .total_cmp(&other.score)
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
    sides: Sides<'g, 'p>,
    heap: BinaryHeap<Triple>,
    limits: Spread,
    /// Candidates with a greater score are not looked for.
    most_score: f64,
    /// Rows that a part (slot, place by name) has in the list so far.
    rows: HashMap<(Slot, u32), u32>,
    taken: u64,
    /// What suits each amplifier, once the search has gone on for long.
    suited: Option<Suited>,
}

impl<'g, 'p> Search<'g, 'p> {
    /// Candidates in rank order, of which `limits` lets so many share a part.
    pub fn new(ground: &'g Ground<'p>, limits: Spread) -> Result<Self, SearchError> {
        let mut search = Self {
            ground,
            sides: Sides::new(ground),
            heap: BinaryHeap::new(),
            limits,
            most_score: f64::INFINITY,
            rows: HashMap::new(),
            taken: 0,
            suited: None,
        };
        if let Some(roots) = search.sides.roots() {
            search.push(roots, None, None, Key::LEAST);
            search.sound()?;
            search.heap.clear();
            search.push(roots, None, None, Key::LEAST);
        }
        Ok(search)
    }

    /// Ends the list where the next candidate has a greater score than this, at ten digits. Nothing that
    /// could only be behind is taken apart, so a list that ends early is found early.
    pub fn up_to(mut self, score: f64) -> Self {
        self.most_score = rounded(score);
        self.heap.retain(|triple| triple.key.score <= self.most_score);
        self
    }

    /// Follows one promising power side and amplifier down to the best reference beside them.
    ///
    /// What is known of references before their values are chosen is too hopeful. As long as it is,
    /// every power side looks as if it could be first. One sounding makes the references that matter
    /// known, and the search proper can tell power sides apart from the start.
    fn sound(&mut self) -> Result<(), SearchError> {
        while let Some(triple) = self.heap.pop() {
            self.step()?;
            match self.side_to_split(&triple) {
                None => break,
                Some(SideName::Reference) => self.split(&triple, SideName::Reference),
                Some(side) => {
                    self.heap.clear();
                    self.split(&triple, side);
                }
            }
        }
        self.sides.learn();
        Ok(())
    }

    /// The next candidate in rank order; None where there is no other.
    pub fn next(&mut self) -> Result<Option<Candidate>, SearchError> {
        while let Some(mut triple) = self.heap.pop() {
            if self.is_full(&triple) {
                continue;
            }
            self.find_what_suits(&triple)?;
            // More may be known of its nodes than when it was put there.
            let Some(key) = self.key(&triple) else { continue };
            if key > triple.key {
                triple.key = key;
                if key.score <= self.most_score {
                    self.heap.push(triple);
                }
                continue;
            }
            self.step()?;
            match self.side_to_split(&triple) {
                None => {
                    let meeting = triple.at_input.max(triple.at_output);
                    let nodes = [triple.reference, triple.amplifier, triple.power];
                    let candidate = self.sides.candidate(nodes, meeting);
                    self.count_rows(&triple);
                    return Ok(candidate);
                }
                Some(side) => self.split(&triple, side),
            }
        }
        Ok(None)
    }

    /// Finds out what suits the amplifiers of a triple, where the search has gone on for long.
    fn find_what_suits(&mut self, triple: &Triple) -> Result<(), SearchError> {
        if self.taken < LONG || triple.reference != ROOT {
            return Ok(());
        }
        let suited = self.suited.get_or_insert_with(|| Suited::new(self.ground));
        suited.find(self.ground, &mut self.sides, triple.amplifier)
    }

    /// Replaces a node of a triple by its parts.
    fn split(&mut self, triple: &Triple, side: SideName) {
        let Triple { reference, amplifier, power, at_input, at_output, .. } = *triple;
        match side {
            SideName::Reference => {
                for child in self.sides.reference_parts(reference) {
                    self.push([child, amplifier, power], None, Some(at_output), triple.key);
                }
            }
            SideName::Amplifier => {
                for child in self.sides.amplifier_parts(amplifier) {
                    self.push([reference, child, power], None, None, triple.key);
                }
            }
            SideName::Power => {
                for child in self.sides.power_parts(power) {
                    self.push([reference, amplifier, child], Some(at_input), None, triple.key);
                }
            }
        }
    }

    /// Puts a triple on the heap unless it holds no feasible candidate. What is known of the two
    /// meetings is handed over, and so is the key of the triple that it is a part of: no candidate of a
    /// part comes before all of the whole.
    fn push(
        &mut self,
        [reference, amplifier, power]: [u32; 3],
        at_input: Option<f64>,
        at_output: Option<f64>,
        of_whole: Key,
    ) {
        let r = self.sides.references.get(reference);
        let a = self.sides.amplifiers.get(amplifier);
        let p = self.sides.powers.get(power);
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
            triple.key = key.max(of_whole);
            if triple.key.score > self.most_score {
                return;
            }
            if self.heap.len() == self.heap.capacity() {
                self.heap.reserve_exact(self.heap.len() / 4 + 1024);
            }
            self.heap.push(triple);
        }
    }

    /// The least key that any candidate of a triple could have; None where a node of it is known to
    /// hold no choice.
    ///
    /// Of each side one of a few shares is added at least, together where sides have not been looked
    /// into; so the key is at least that of one of these sums, and the least of them bounds it. That it
    /// is the least as a whole, not figure by figure, matters where many candidates tie in score.
    fn key(&self, triple: &Triple) -> Option<Key> {
        let r = self.sides.references.get(triple.reference);
        let a = self.sides.amplifiers.get(triple.amplifier);
        let p = self.sides.powers.get(triple.power);
        if [&r.share, &a.share, &p.share].iter().any(|share| share.is_impossible()) {
            return None;
        }
        let meeting = triple.at_input.max(triple.at_output);
        let suited = self.suited.as_ref().and_then(|suited| suited.shares(triple.amplifier));
        let (known, others) = match (triple.reference == ROOT, triple.amplifier == ROOT, suited) {
            (true, false, Some(suited)) => (a.share, suited),
            (true, false, None) => (a.share, self.sides.rest.references.shares()),
            (true, true, _) => (Share::NOTHING, self.sides.rest.both.shares()),
            _ => (a.share, self.sides.references.shares(triple.reference)),
        };
        // Sums in another order than a candidate's may differ in the last bits; a candidate's own are
        // made in its order.
        let is_complete = [r.size, a.size, p.size] == [1; 3];
        let lowered = if is_complete { 1.0 } else { LAST_BITS };
        let names = Slot::BY_NAME
            .map(|slot| [r.names, a.names, p.names].iter().map(|n| n[slot as usize]).sum());
        let mut least: Option<(f64, Key)> = None;
        for other in others {
            let beside = other.beside(&known);
            // Power sides draw nothing beside the load, so the loss is the same for all of them.
            let loss = merit::loss(self.ground.rail(), beside.current_a);
            for power in self.sides.powers.shares(triple.power) {
                let cost = beside.cost + power.cost;
                let stress = beside.stress.max(power.stress).max(meeting);
                let score = score(&self.ground.problem.weights, cost, loss, stress);
                // Far behind, so that rounding can't bring it to the front.
                if least.is_some_and(|(so_far, _)| score > so_far * (1.0 + 1e-8)) {
                    continue;
                }
                let key = Key {
                    score: rounded(score * lowered),
                    cost: rounded(cost * lowered),
                    stress: rounded(stress),
                    loss: rounded(loss * lowered),
                    names,
                };
                if least.is_none_or(|(_, so_far)| key < so_far) {
                    let lesser = least.map_or(score, |(so_far, _)| so_far.min(score));
                    least = Some((lesser, key));
                }
            }
        }
        least.map(|(_, key)| key)
    }

    /// The node to take apart; None where all are choices made.
    ///
    /// The power side weighs most in cost and stress, so a list of what is best is sorted by it first.
    fn side_to_split(&self, triple: &Triple) -> Option<SideName> {
        if self.sides.powers.get(triple.power).size > 1 {
            Some(SideName::Power)
        } else if self.sides.amplifiers.get(triple.amplifier).size > 1 {
            Some(SideName::Amplifier)
        } else if self.sides.references.get(triple.reference).size > 1 {
            Some(SideName::Reference)
        } else {
            None
        }
    }

    /// Counts a triple that is taken apart, and looks at the memory now and then.
    fn step(&mut self) -> Result<(), SearchError> {
        self.taken += 1;
        if !self.taken.is_multiple_of(4096) {
            return Ok(());
        }
        let in_use = self.heap.capacity() * size_of::<Triple>() + self.sides.memory();
        limit::check(in_use, self.heap.len())
    }

    /// The slots in which all candidates of a triple have the same part, with its place by name.
    fn decided(&self, triple: &Triple) -> impl Iterator<Item = (Slot, u32)> {
        fn of<F, M>(node: &Node<F, M>) -> impl Iterator<Item = (Slot, u32)> + use<F, M> {
            let names = node.names;
            node.decided.iter().map(move |slot| (slot, names[slot as usize]))
        }
        of(self.sides.references.get(triple.reference))
            .chain(of(self.sides.amplifiers.get(triple.amplifier)))
            .chain(of(self.sides.powers.get(triple.power)))
            .filter(|&(_, place)| place > 0)
    }

    /// Some part that all candidates of the triple share has as many rows as it may have.
    fn is_full(&self, triple: &Triple) -> bool {
        if self.limits == NO_SPREAD {
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
}

/// After so many triples a search goes on for long: what suits each amplifier is then worth finding out.
/// Lists of ordinary shops of 100 000 rows a catalog are found with fewer. Programs under test begin with
/// it at once, so that the small shops of the tests get there.
const LONG: u64 = if cfg!(debug_assertions) { 20 } else { 100_000 };

/// Lowers a bound whose sums were made in another order than those of a candidate.
const LAST_BITS: f64 = 1.0 - 1e-14;
