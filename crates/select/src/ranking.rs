//! The order of candidates, and the list of the best.

use crate::candidate::Candidate;
use crate::limit::SearchError;
use crate::problem::{Ground, Problem};
use crate::search::Search;
pub use crate::spread::{NO_SPREAD, Spread, spread_out};

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
    first(Search::new(&ground, *spread)?, top)
}

/// The same list, ended before the first candidate whose score exceeds `score` at ten digits: what could
/// only be behind costs nothing.
///
/// # Errors
/// As for [`shortlist`].
pub fn shortlist_up_to(
    problem: &Problem<'_>,
    score: f64,
    top: usize,
    spread: &Spread,
) -> Result<Vec<Candidate>, SearchError> {
    let ground = Ground::new(problem);
    first(Search::new(&ground, *spread)?.up_to(score), top)
}

fn first(mut search: Search<'_, '_>, top: usize) -> Result<Vec<Candidate>, SearchError> {
    let mut list = Vec::new();
    while list.len() < top {
        match search.next()? {
            Some(candidate) => list.push(candidate),
            None => break,
        }
    }
    Ok(list)
}
