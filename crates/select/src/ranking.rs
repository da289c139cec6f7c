//! The order of candidates, and the list of the best.

use crate::candidate::Candidate;
use crate::limit::SearchError;
use crate::problem::{Ground, Problem, Weights};
use crate::search::Search;

use circuit::slot::Slot;
use std::collections::HashMap;

/// The most rows in which a list may show the same part of a slot.
pub type Spread = [Option<u32>; Slot::COUNT];

/// No limit in any slot.
pub const NO_SPREAD: Spread = [None; Slot::COUNT];

/// cost^wc · loss^wl · stress^ws, less is better; 0^0 = 1.
///
/// ```
/// use select::problem::Weights;
/// use select::ranking::score;
/// let even = Weights { cost: 1.0, loss: 1.0, stress: 1.0 };
/// assert_eq!(score(&even, 4.0, 0.5, 0.25), 0.5);
/// assert_eq!(score(&Weights { cost: 1.0, loss: 0.0, stress: 0.0 }, 4.0, 0.5, 0.0), 4.0);
/// ```
pub fn score(weights: &Weights, cost: f64, loss: f64, stress: f64) -> f64 {
    power(cost, weights.cost) * power(loss, weights.loss) * power(stress, weights.stress)
}

/// x^w; the usual weights without a rounding of their own. Nothing here is below 0 but a loss that
/// no feasible candidate has, and that counts as 0.
fn power(x: f64, weight: f64) -> f64 {
    if weight == 0.0 {
        1.0
    } else if weight == 1.0 {
        x.max(0.0)
    } else {
        x.max(0.0).powf(weight)
    }
}

/// The best candidates in rank order: by score, cost, stress, loss, then part names.
///
/// Takes the `top` first of those that `spread` lets through: a candidate is passed over whose part
/// in a limited slot already has as many rows as its limit.
///
/// # Errors
/// [`SearchError::TooLarge`] where the search would take more memory than it may.
pub fn shortlist(
    problem: &Problem<'_>,
    top: usize,
    spread: &Spread,
) -> Result<Vec<Candidate>, SearchError> {
    let ground = Ground::new(problem);
    let mut search = Search::new(&ground, *spread)?;
    let mut list = Vec::new();
    while list.len() < top {
        match search.next()? {
            Some(candidate) => list.push(candidate),
            None => break,
        }
    }
    Ok(list)
}

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
