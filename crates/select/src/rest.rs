//! What the sides that are not yet looked at add at least, taken together.
//!
//! The least cost and the least stress of a side seldom belong to one part, so the corner of both is a
//! weak bound. A few shares that no choice of the side undercuts all at once bound it better: each
//! choice is at least as much as *one* of them in every figure.

use crate::grove::Share;

/// More shares than this are joined into coarser ones.
const USUAL: usize = 48;

/// Shares such that every choice adds at least one of them in each figure.
#[derive(Debug, Clone)]
pub(crate) struct Rest(Vec<Share>);

impl Rest {
    /// From the shares of all choices of a side.
    pub fn of(shares: impl Iterator<Item = Share>) -> Self {
        Self::of_at_most(shares, USUAL)
    }

    /// The same with at most so many shares kept apart: the more, the closer the bound.
    pub fn of_at_most(shares: impl Iterator<Item = Share>, most: usize) -> Self {
        let mut shares: Vec<Share> = shares.collect();
        keep_few(&mut shares, most);
        Self(shares)
    }

    /// Of two sides together.
    pub fn with(&self, other: &Rest) -> Self {
        Self::of(self.0.iter().flat_map(|a| other.0.iter().map(move |b| a.beside(b))))
    }

    pub fn shares(&self) -> &[Share] {
        &self.0
    }
}

/// Leaves at most so many shares such that each of those given is at least one of them in every figure.
pub(crate) fn keep_few(shares: &mut Vec<Share>, most: usize) {
    shares.sort_unstable_by(|a, b| {
        a.cost
            .total_cmp(&b.cost)
            .then_with(|| a.current_a.total_cmp(&b.current_a))
            .then_with(|| a.stress.total_cmp(&b.stress))
    });
    // What is kept costs no more than what comes, so only current and stress can tell. Few are kept,
    // and the first of them beat most of what comes.
    let mut kept = 0;
    for place in 0..shares.len() {
        let share = shares[place];
        let beats = |k: &Share| k.current_a <= share.current_a && k.stress <= share.stress;
        if !shares[..kept].iter().any(beats) {
            shares[kept] = share;
            kept += 1;
        }
    }
    shares.truncate(kept);
    while shares.len() > most {
        let pairs = shares.len().div_ceil(2);
        for pair in 0..pairs {
            let mut joined = shares[2 * pair];
            if let Some(other) = shares.get(2 * pair + 1).copied() {
                joined.least(&other);
            }
            shares[pair] = joined;
        }
        shares.truncate(pairs);
    }
}
