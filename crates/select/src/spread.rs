//! Lists in which no part of a slot has more rows than it may have.

use crate::candidate::Candidate;
use circuit::slot::Slot;
use std::collections::HashMap;

/// The most rows in which a list may show the same part of a slot.
pub type Spread = [Option<u32>; Slot::COUNT];

/// No limit in any slot.
pub const NO_SPREAD: Spread = [None; Slot::COUNT];

/// Walks down a list and passes over candidates whose part in a limited slot already has as many rows
/// as its limit; rows without a part there are not limited.
pub fn spread_out(list: &[Candidate], spread: &Spread) -> Vec<Candidate> {
    let mut rows: HashMap<(usize, u32), u32> = HashMap::new();
    let mut kept = Vec::new();
    for candidate in list {
        let limited = || {
            let slots = candidate.places.iter().zip(spread).enumerate();
            slots.filter_map(|(slot, (place, limit))| Some(((slot, (*place)?), (*limit)?)))
        };
        if limited().any(|(part, limit)| rows.get(&part).copied().unwrap_or(0) >= limit) {
            continue;
        }
        for (part, _) in limited() {
            *rows.entry(part).or_default() += 1;
        }
        kept.push(*candidate);
    }
    kept
}
