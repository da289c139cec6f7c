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
use crate::company::{Merits, ROOT, Sides};
use crate::grove::{Names, Node, Share};
use crate::limit::{self, SearchError};
use crate::problem::Ground;
use crate::ranking::{Spread, score};
use crate::rest::Rest;
use crate::sides::{meet_power, meet_reference};
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
    /// Rows that a part (slot, place by name) has in the list so far.
    rows: HashMap<(Slot, u32), u32>,
    taken: u64,
}

impl<'g, 'p> Search<'g, 'p> {
    /// Candidates in rank order, of which `limits` lets so many share a part.
    pub fn new(ground: &'g Ground<'p>, limits: Spread) -> Self {
        let mut search = Self {
            ground,
            sides: Sides::new(ground),
            heap: BinaryHeap::new(),
            limits,
            rows: HashMap::new(),
            taken: 0,
        };
        if let Some([reference, amplifier, power]) = search.sides.roots() {
            search.push(reference, amplifier, power, None, None);
            search.sound();
            search.heap.clear();
            search.push(reference, amplifier, power, None, None);
        }
        search
    }

    /// Follows one promising power side and amplifier down to the best reference beside them.
    ///
    /// What is known of references before their values are chosen is too hopeful. As long as it is,
    /// every power side looks as if it could be first. One sounding makes the references that matter
    /// known, and the search proper can tell power sides apart from the start.
    fn sound(&mut self) {
        while let Some(triple) = self.heap.pop() {
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
    }

    /// The next candidate in rank order; None where there is no other.
    pub fn next(&mut self) -> Result<Option<Candidate>, SearchError> {
        while let Some(mut triple) = self.heap.pop() {
            if self.is_full(&triple) {
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

    /// Replaces a node of a triple by its parts.
    fn split(&mut self, triple: &Triple, side: SideName) {
        let Triple { reference, amplifier, power, at_input, at_output, .. } = *triple;
        match side {
            SideName::Reference => {
                for child in self.sides.reference_parts(reference) {
                    self.push(child, amplifier, power, None, Some(at_output));
                }
            }
            SideName::Amplifier => {
                for child in self.sides.amplifier_parts(amplifier) {
                    self.push(reference, child, power, None, None);
                }
            }
            SideName::Power => {
                for child in self.sides.power_parts(power) {
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
            triple.key = key;
            self.heap.push(triple);
        }
    }

    /// The least key that any candidate of a triple could have; None where a node of it is known to
    /// hold no choice.
    fn key(&self, triple: &Triple) -> Option<Key> {
        let r = self.sides.references.get(triple.reference);
        let a = self.sides.amplifiers.get(triple.amplifier);
        let p = self.sides.powers.get(triple.power);
        let shares = [&r.share, &a.share, &p.share];
        if shares.iter().any(|share| share.is_impossible()) {
            return None;
        }
        let meeting = triple.at_input.max(triple.at_output);
        let mut merits: Merits = self.sides.merits(shares, meeting);
        merits.score = merits.score.max(self.least_score(triple, meeting));
        Some(Key {
            score: rounded(merits.score),
            cost: rounded(merits.cost),
            stress: rounded(merits.stress),
            loss: rounded(merits.loss),
            names: Slot::BY_NAME
                .map(|slot| [r.names, a.names, p.names].iter().map(|n| n[slot as usize]).sum()),
        })
    }

    /// What a triple's known nodes add, beside the rest of the sides that have not been looked into;
    /// None where there is none such.
    fn known_and_rest(&self, triple: &Triple) -> Option<(Share, &Rest)> {
        if triple.reference != ROOT {
            return None;
        }
        let power = self.sides.powers.get(triple.power).share;
        if triple.amplifier == ROOT {
            return Some((power, &self.sides.rest.both));
        }
        let amplifier = self.sides.amplifiers.get(triple.amplifier).share;
        Some((amplifier.beside(&power), &self.sides.rest.references))
    }

    /// The least score of a triple, of which whole sides may not have been looked into.
    fn least_score(&self, triple: &Triple, meeting: f64) -> f64 {
        let Some((known, rest)) = self.known_and_rest(triple) else { return 0.0 };
        let scores = rest.shares().iter().map(|share| {
            let together = share.beside(&known);
            let loss = merit::loss(self.ground.rail(), together.current_a);
            score(&self.ground.problem.weights, together.cost, loss, together.stress.max(meeting))
        });
        // The sums are made in another order than those of a candidate: the last bits may differ.
        scores.fold(f64::INFINITY, f64::min) * LAST_BITS
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

    fn check_memory(&self) -> Result<(), SearchError> {
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
}

/// Lowers a bound whose sums were made in another order than those of a candidate.
const LAST_BITS: f64 = 1.0 - 1e-14;
