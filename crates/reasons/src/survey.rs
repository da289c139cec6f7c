//! What fails of the combinations of a problem, asked in questions: does any combination keep these
//! checks, which one fails in fewest, by how little.

use crate::check_set::{CheckSet, Failing};
use crate::company::{Company, Places};
use crate::limits::Limits;
use crate::scout::{OF_DRIVE, OF_MEETING, OF_POWER, OF_REFERENCE, OF_SUPPLY, find};
use circuit::check::{Check, Finding, Tally};
use select::problem::Problem;
use std::collections::HashMap;
use std::sync::Mutex;

/// A combination with the checks that fail.
#[derive(Debug, Clone, PartialEq)]
pub struct Miss {
    /// The checks that fail; none for a candidate.
    pub failing: CheckSet,
    /// The greatest utilisation among them; 0 where none fails.
    pub worst: f64,
    /// Its parts.
    pub places: Places,
    /// Every check of it, in page order, with the values that are chosen for it.
    pub findings: Vec<Finding>,
}

impl Miss {
    /// What was found for the checks that fail.
    pub fn failures(&self) -> impl Iterator<Item = &Finding> {
        self.findings.iter().filter(|finding| !finding.holds())
    }
}

/// The combinations of a problem, and what has been asked of them.
pub struct Survey<'a> {
    company: Company<'a>,
    /// For each set of checks that was asked a combination that keeps them, or none.
    answers: Mutex<HashMap<CheckSet, Option<Places>>>,
}

/// A combination is brought nearer so often at most.
const MOST_STEPS: usize = 14;

/// A combination is near enough where nothing is nearer by more than this share of its utilisation.
const NEAR: f64 = 1e-3;

/// Sets of failing checks with more members than this are not looked for.
pub const MOST_FAILING: usize = 4;

impl<'a> Survey<'a> {
    /// Of a problem.
    pub fn new(problem: &'a Problem<'a>) -> Self {
        Self { company: Company::new(problem), answers: Mutex::default() }
    }

    pub(crate) fn company(&self) -> &Company<'a> {
        &self.company
    }

    /// A combination for which these checks hold, whatever others find; None where there is none.
    pub fn holding(&self, asked: CheckSet) -> Option<Miss> {
        self.miss(&self.places_holding(asked)?)
    }

    /// Some combination fails in these checks at most.
    pub fn fails_within(&self, checks: CheckSet) -> bool {
        self.places_holding(CheckSet::ALL.without(checks)).is_some()
    }

    fn places_holding(&self, asked: CheckSet) -> Option<Places> {
        let lock = || self.answers.lock().unwrap_or_else(std::sync::PoisonError::into_inner);
        let known = lock().get(&asked).copied();
        known.unwrap_or_else(|| {
            let found = find(&self.company, &Limits::asking(asked));
            lock().insert(asked, found);
            found
        })
    }

    fn miss(&self, places: &Places) -> Option<Miss> {
        let findings = self.company.findings(places)?;
        let mut failing = Failing::default();
        for finding in &findings {
            // It never ends the asking.
            let _ = failing.take(*finding);
        }
        Some(Miss { failing: failing.set, worst: failing.worst, places: *places, findings })
    }

    /// Of the combinations that fail in these checks at most, one of which no check less fails, and that
    /// fails by as little as others with these checks, to a thousandth; None where there is none.
    pub fn nearest_within(&self, checks: CheckSet) -> Option<Miss> {
        let mut nearest = self.holding(CheckSet::ALL.without(checks))?;
        for check in Check::ALL {
            if nearest.failing.contains(check) {
                let fewer = nearest.failing.without(CheckSet::of(&[check]));
                nearest = self.holding(CheckSet::ALL.without(fewer)).unwrap_or(nearest);
            }
        }
        Some(self.drawn_nearer(nearest))
    }

    /// The combination that fails in the same checks, or fewer, by least.
    fn drawn_nearer(&self, mut nearest: Miss) -> Miss {
        let checks = nearest.failing;
        let mut too_little = 1.0;
        for _ in 0..MOST_STEPS {
            if nearest.worst <= too_little * (1.0 + NEAR) {
                break;
            }
            // Where nothing is allowed at all a utilisation is infinite.
            let most = if nearest.worst.is_finite() {
                (too_little * nearest.worst).sqrt()
            } else {
                1e3 * too_little
            };
            let found = find(&self.company, &Limits::straining(checks, most));
            match found.and_then(|places| self.miss(&places)) {
                Some(nearer) => nearest = nearer,
                None => too_little = most,
            }
        }
        nearest
    }

    /// Combinations that fail in the fewest checks, each in other checks, by as little as they can: at
    /// most so many. Where more than [`MOST_FAILING`] checks fail of each, one that fails in no more
    /// checks than it must. None where nothing can be built or a candidate exists.
    pub fn nearest(&self, most: usize) -> Vec<Miss> {
        if self.places_holding(CheckSet::EMPTY).is_none() || self.fails_within(CheckSet::EMPTY) {
            return Vec::new();
        }
        // Sets of checks of which no combination keeps all: something fails in each of them.
        let mut vain = vec![self.least_in_vain(CheckSet::ALL)];
        for size in 1..=MOST_FAILING {
            let mut nearest = Vec::new();
            let mut tried: Vec<CheckSet> = Vec::new();
            while nearest.len() < most
                && let Some(checks) = next_meeting(&vain, size, &tried)
            {
                tried.push(checks);
                let asked = CheckSet::ALL.without(checks);
                match self.holding(asked) {
                    Some(miss) => nearest.push(self.drawn_nearer(miss)),
                    None => vain.push(self.least_in_vain(asked)),
                }
            }
            if !nearest.is_empty() {
                nearest.sort_by(|a, b| a.worst.total_cmp(&b.worst));
                return nearest;
            }
        }
        self.nearest_within(CheckSet::ALL).into_iter().collect()
    }

    /// The least of a set of checks of which no combination keeps all that is still kept by none.
    fn least_in_vain(&self, mut asked: CheckSet) -> CheckSet {
        let sides = [OF_POWER, OF_REFERENCE, OF_MEETING, OF_SUPPLY, OF_DRIVE];
        let each = Check::ALL.map(|check| CheckSet::of(&[check]));
        for part in sides.into_iter().chain(each) {
            if asked.meets(part) && self.places_holding(asked.without(part)).is_none() {
                asked = asked.without(part);
            }
        }
        asked
    }
}

/// The first set of so many checks, in page order, that meets all of these sets and was not tried.
fn next_meeting(vain: &[CheckSet], size: usize, tried: &[CheckSet]) -> Option<CheckSet> {
    fn extend(
        vain: &[CheckSet],
        chosen: CheckSet,
        left: usize,
        accept: &impl Fn(CheckSet) -> bool,
    ) -> Option<CheckSet> {
        match vain.iter().find(|set| !set.meets(chosen)) {
            // A set that is not met decides which checks may come next.
            Some(_) if left == 0 => None,
            Some(open) => open.iter().find_map(|check| {
                extend(vain, chosen.and(CheckSet::of(&[check])), left - 1, accept)
            }),
            None => (left == 0 && accept(chosen)).then_some(chosen),
        }
    }
    extend(vain, CheckSet::EMPTY, size, &|set| !tried.contains(&set))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn sets_that_meet_all_come_one_after_another() {
        use Check::{BaseDrive, Dropout, NoLoad, SwingHigh};
        let of = CheckSet::of;
        let vain = [of(&[Dropout, SwingHigh]), of(&[SwingHigh, NoLoad]), of(&[BaseDrive])];
        let mut tried = Vec::new();
        while let Some(set) = next_meeting(&vain, 2, &tried) {
            tried.push(set);
        }
        assert_eq!(tried, [of(&[SwingHigh, BaseDrive])]);
        assert_eq!(next_meeting(&vain, 1, &[]), None);
    }
}
