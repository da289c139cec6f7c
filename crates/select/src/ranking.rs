//! The order of candidates, and the list of the best.

use crate::candidate::Candidate;
use crate::problem::{Ground, Problem, Weights};
use crate::search::{Search, SearchError};
use circuit::slot::Slot;

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
    let mut search = Search::by_score(&ground, *spread);
    let mut list = Vec::new();
    while list.len() < top {
        match search.next()? {
            Some(candidate) => list.push(candidate),
            None => break,
        }
    }
    if std::env::var_os("RW_STAT").is_some() {
        eprintln!("taken {}", search.taken());
    }
    Ok(list)
}
