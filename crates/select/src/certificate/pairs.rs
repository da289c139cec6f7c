//! Groups of amplifiers beside which a check fails.

use super::mark::Names;
use super::sides::Amplifiers;
use super::{Fails, append};
use crate::grove::Share;
use crate::sides::amplifier::better_amplifier;
use circuit::amplifier::AmplifierAtRail;
use circuit::check::Check;
use circuit::slot::Slot;
use std::collections::BTreeMap;
use std::ops::Range;

/// Amplifiers in their order, halved again and again, each group with the best of its figures.
pub(super) struct AmplifierTree(Vec<Group>);

struct Group {
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
        let group = if range.len() == 1 {
            let place = amplifiers.order[range.start as usize];
            let amp = amplifiers.by_place[place as usize].as_ref()?;
            let (best, share, names) = (amp.at_rail, amp.share, amp.names);
            Group { range, best, share, names, only: Some(place), halves: Vec::new() }
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
                best = better_amplifier(&best, &self.0[*half].best);
                share.least(&self.0[*half].share);
            }
            Group { range, best, share, names: [0; Slot::COUNT], only: None, halves }
        };
        self.0.push(group);
        Some(self.0.len() - 1)
    }

    /// The best figures of all amplifiers; None where none is left.
    pub fn best(&self) -> Option<&AmplifierAtRail> {
        self.0.last().map(|group| &group.best)
    }

    /// Some amplifier holds; else `found` has the groups beside which a check fails, which are all.
    pub fn some_holds(
        &self,
        failing: impl Fn(&AmplifierAtRail) -> Option<Check>,
        found: &mut Vec<(Check, Range<u32>)>,
    ) -> bool {
        let mut open: Vec<&Group> = self.0.last().into_iter().collect();
        while let Some(group) = open.pop() {
            match failing(&group.best) {
                Some(check) => found.push((check, group.range.clone())),
                None if group.only.is_some() => return true,
                None => open.extend(group.halves.iter().map(|half| &self.0[*half])),
            }
        }
        false
    }

    /// Tells the places of the amplifiers that are near and hold, and hands the groups of the others
    /// that are near to `fails`.
    pub fn sort_out(
        &self,
        failing: impl Fn(&AmplifierAtRail) -> Option<Check>,
        is_near: impl Fn(Share, Names) -> bool,
        mut fails: impl FnMut(Check, Range<u32>),
    ) -> Vec<u32> {
        let mut holding = Vec::new();
        let mut open: Vec<&Group> = self.0.last().into_iter().collect();
        while let Some(group) = open.pop() {
            if !is_near(group.share, group.names) {
                continue;
            }
            match (failing(&group.best), group.only) {
                (Some(check), _) => fails(check, group.range.clone()),
                (None, Some(place)) => holding.push(place),
                (None, None) => open.extend(group.halves.iter().map(|half| &self.0[*half])),
            }
        }
        holding
    }
}

/// Failing checks gathered by check and group of amplifiers.
#[derive(Default)]
pub(super) struct FailsByGroup(BTreeMap<(Check, u32, u32), Vec<Range<u64>>>);

impl FailsByGroup {
    /// A check fails between a row and a group. Rows of a group rise.
    pub fn add(&mut self, check: Check, group: Range<u32>, row: u64) {
        append(self.0.entry((check, group.start, group.end)).or_default(), row);
    }

    pub fn into_claims(self) -> Vec<Fails> {
        let claim = |((check, from, to), rows)| Fails { check, amplifiers: from..to, rows };
        self.0.into_iter().map(claim).collect()
    }
}
