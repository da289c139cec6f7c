//! Groups of amplifiers that are out beside a reference.

use super::mark::Names;
use super::sides::Amplifiers;
use super::{Because, Group};
use crate::grove::Share;
use circuit::amplifier::AmplifierAtRail;
use circuit::check::Check;
use circuit::slot::Slot;
use std::collections::BTreeMap;
use std::ops::Range;

/// Amplifiers in their order, halved again and again, each group with the best of its figures.
pub(super) struct AmplifierTree(Vec<Node>);

struct Node {
    /// Places in the order of the amplifiers.
    range: Range<u32>,
    best: AmplifierAtRail,
    share: Share,
    /// The amplifier's own where there is one only, else nothing is known.
    names: Names,
    /// Place of the amplifier in a group of one.
    only: Option<u32>,
    halves: Vec<usize>,
}

impl AmplifierTree {
    /// The tree of the amplifiers that are left.
    pub fn new(amplifiers: &Amplifiers) -> Self {
        let mut tree = Self(Vec::new());
        tree.add(amplifiers, 0..amplifiers.order.len() as u32);
        tree
    }

    /// Adds a group behind its halves; None where none of its amplifiers is left.
    fn add(&mut self, amplifiers: &Amplifiers, range: Range<u32>) -> Option<usize> {
        let node = if range.len() == 1 {
            let place = amplifiers.order[range.start as usize];
            let amp = amplifiers.by_place[place as usize].as_ref()?;
            let (best, share, names) = (amp.at_rail, amp.share, amp.names);
            Node { range, best, share, names, only: Some(place), halves: Vec::new() }
        } else {
            if range.is_empty() {
                return None;
            }
            let middle = range.start + range.len() as u32 / 2;
            let halves: Vec<usize> = [range.start..middle, middle..range.end]
                .into_iter()
                .filter_map(|half| self.add(amplifiers, half))
                .collect();
            let (first, rest) = halves.split_first()?;
            let (mut best, mut share) = (self.0[*first].best, self.0[*first].share);
            for half in rest {
                best = best.better_of(&self.0[*half].best);
                share.least(&self.0[*half].share);
            }
            Node { range, best, share, names: [0; Slot::COUNT], only: None, halves }
        };
        self.0.push(node);
        Some(self.0.len() - 1)
    }

    /// The best figures of all amplifiers; None where none is left.
    pub fn best(&self) -> Option<&AmplifierAtRail> {
        self.0.last().map(|node| &node.best)
    }

    /// Hands groups that are out, and why, to `out`, the largest that a bound on all of the group
    /// tells of; gives the places of the other amplifiers.
    pub fn sort_out(
        &self,
        failing: impl Fn(&AmplifierAtRail) -> Option<Check>,
        ranks_after: impl Fn(Share, Names) -> bool,
        mut out: impl FnMut(Because, Range<u32>),
    ) -> Vec<u32> {
        let mut left = Vec::new();
        let mut open: Vec<&Node> = self.0.last().into_iter().collect();
        while let Some(node) = open.pop() {
            if ranks_after(node.share, node.names) {
                out(Because::RanksAfter, node.range.clone());
            } else if let Some(check) = failing(&node.best) {
                out(Because::Fails(check), node.range.clone());
            } else if let Some(place) = node.only {
                left.push(place);
            } else {
                open.extend(node.halves.iter().map(|half| &self.0[*half]));
            }
        }
        left
    }
}

/// References gathered by group of amplifiers and why it is out.
#[derive(Default)]
pub(super) struct Groups(BTreeMap<(Because, u32, u32), Vec<Range<u32>>>);

impl Groups {
    /// A group is out beside a reference, counted upwards.
    pub fn add(&mut self, because: Because, group: Range<u32>, reference: u32) {
        let references = self.0.entry((because, group.start, group.end)).or_default();
        match references.last_mut() {
            Some(last) if last.end == reference => last.end = reference + 1,
            _ => references.push(reference..reference + 1),
        }
    }

    pub fn into_claims(self) -> Vec<Group> {
        let claim =
            |((because, from, to), references)| Group { because, amplifiers: from..to, references };
        self.0.into_iter().map(claim).collect()
    }
}
