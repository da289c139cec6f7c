//! A smallest set of requirements that can't hold together.

use crate::check_set::CheckSet;
use crate::requirement::Requirement;
use crate::survey::{Miss, Survey};
use circuit::rail::Rail;

/// Requirements under which no candidate is left; without any one of them there is one.
#[derive(Debug, Clone, PartialEq)]
pub struct Conflict {
    /// Its members in the order of the sheet's keys, each with a combination that would do without it.
    /// Empty where no combination can be built at all, whatever is asked.
    pub members: Vec<Member>,
}

/// A requirement of a conflict.
#[derive(Debug, Clone, PartialEq)]
pub struct Member {
    /// The requirement.
    pub requirement: Requirement,
    /// A combination for which every check of the other members holds.
    pub without_it: Miss,
}

impl Conflict {
    /// A conflict with the fewest members; of several the first in the order of keys. None where a
    /// combination holds every check.
    pub fn smallest(survey: &Survey, rail: &Rail) -> Option<Conflict> {
        let missed: Vec<u32> =
            survey.misses.iter().map(|miss| missed_requirements(miss.failing, rail)).collect();
        if missed.contains(&0) {
            return None;
        }
        let chosen = (0..=Requirement::ALL.len() as u32)
            .find_map(|members| first_meeting_all(&missed, members))?;
        let members = Requirement::ALL
            .into_iter()
            .filter(|&requirement| chosen & bit(requirement) != 0)
            .filter_map(|requirement| {
                let only_it = |m: &u32| m & chosen == bit(requirement);
                let place = missed.iter().position(only_it)?;
                Some(Member { requirement, without_it: survey.misses.get(place)?.clone() })
            })
            .collect();
        Some(Conflict { members })
    }

    /// The requirements alone.
    pub fn requirements(&self) -> Vec<Requirement> {
        self.members.iter().map(|member| member.requirement).collect()
    }
}

/// The checks that are asked where only these requirements hold.
pub fn asked(requirements: &[Requirement], rail: &Rail) -> CheckSet {
    requirements.iter().fold(CheckSet::EMPTY, |set, r| set.and(r.checks(rail)))
}

const fn bit(requirement: Requirement) -> u32 {
    1 << requirement as u32
}

fn missed_requirements(failing: CheckSet, rail: &Rail) -> u32 {
    failing.iter().fold(0, |bits, check| bits | bit(Requirement::of(check, rail)))
}

/// The first set of so many requirements that meets every one of `missed`, by the order of keys.
fn first_meeting_all(missed: &[u32], members: u32) -> Option<u32> {
    fn extend(missed: &[u32], chosen: u32, from: u32, members: u32) -> Option<u32> {
        if missed.iter().all(|m| m & chosen != 0) {
            return Some(chosen);
        }
        if members == 0 {
            return None;
        }
        (from..Requirement::ALL.len() as u32)
            .find_map(|next| extend(missed, chosen | 1 << next, next + 1, members - 1))
    }
    extend(missed, 0, 0, members)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_fewest_that_meet_all() {
        let all = |missed: &[u32]| (0..5).find_map(|n| first_meeting_all(missed, n));
        assert_eq!(all(&[]), Some(0));
        assert_eq!(all(&[0b011, 0b110]), Some(0b010));
        assert_eq!(all(&[0b001, 0b110, 0b100]), Some(0b101));
        assert_eq!(all(&[0b0011, 0b1100, 0b0101, 0b1010]), Some(0b1001));
    }
}
