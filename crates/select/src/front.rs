//! The front: candidates that no other equals or beats on cost, loss and stress at once.

use crate::candidate::Candidate;
use crate::problem::{Ground, Problem};
use crate::search::{Key, Search, SearchError};
use quantity::digits::{compare, rounded};
use std::collections::BTreeMap;

/// The front in rank order. Of several candidates with equal figures the first by name stays.
///
/// The search gives candidates by cost, then stress, then loss, so that whatever beats a candidate
/// has come before it, and a set of candidates is dropped as soon as one that came before is at least
/// as good as the best that the set could hold.
///
/// # Errors
/// [`SearchError::TooLarge`] where the search would take more memory than it may.
pub fn front(problem: &Problem<'_>) -> Result<Vec<Candidate>, SearchError> {
    let ground = Ground::new(problem);
    let mut search = Search::for_front(&ground);
    let mut stairs = Stairs::default();
    let mut front: Vec<Candidate> = Vec::new();
    while let Some(candidate) = search.next_unless(|key| stairs.is_beaten(key))? {
        stairs.add(&candidate);
        front.push(candidate);
    }
    // The search has put equals in order of name, and a stable sort leaves them so. Where figures
    // that rank tie at ten digits, so do cost, stress and loss, or they decide.
    front.sort_by(|a, b| {
        compare(a.score, b.score)
            .then_with(|| compare(a.cost, b.cost))
            .then_with(|| compare(a.stress, b.stress))
            .then_with(|| compare(a.loss, b.loss))
    });
    Ok(front)
}

/// What came before, by stress and loss alone: all of it costs no more than what comes next.
#[derive(Default)]
struct Stairs {
    /// Stress (as ordered bits) → the least loss at that stress or less. Losses fall as stress rises.
    steps: BTreeMap<u64, f64>,
}

/// Figures ≥ 0 order as their bits do.
fn bits(x: f64) -> u64 {
    x.max(0.0).to_bits()
}

impl Stairs {
    /// Something that came before is at least as good on stress and loss too.
    fn is_beaten(&self, key: &Key) -> bool {
        self.steps.range(..=bits(key.stress)).next_back().is_some_and(|(_, loss)| *loss <= key.loss)
    }

    fn add(&mut self, candidate: &Candidate) {
        let (stress, loss) = (bits(rounded(candidate.stress)), rounded(candidate.loss));
        let covered: Vec<u64> = self
            .steps
            .range(stress..)
            .take_while(|(_, other)| **other >= loss)
            .map(|(stress, _)| *stress)
            .collect();
        for step in covered {
            self.steps.remove(&step);
        }
        self.steps.insert(stress, loss);
    }
}
