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
    ///
    /// A conflict meets what every combination misses. So the first and smallest set that meets what
    /// the combinations seen so far miss is the answer if no combination keeps it; else the one that
    /// does is seen too, and the next set is tried.
    pub fn smallest(survey: &Survey<'_>, rail: &Rail) -> Option<Conflict> {
        let mut missed: Vec<u32> = Vec::new();
        let chosen = loop {
            let chosen = (0..=Requirement::ALL.len() as u32)
                .find_map(|members| first_meeting_all(&missed, members))?;
            match survey.holding(asked(&of_bits(chosen), rail)) {
                None => break chosen,
                Some(seen) => {
                    let misses = missed_requirements(seen.failing, rail);
                    if misses == 0 {
                        return None;
                    }
                    missed.push(misses);
                }
            }
        };
        let members = of_bits(chosen);
        let member = |&requirement: &Requirement| {
            let others: Vec<Requirement> =
                members.iter().copied().filter(|r| *r != requirement).collect();
            let without_it = nearest_keeping(survey, &others, rail)?;
            Some(Member { requirement, without_it })
        };
        Some(Conflict { members: members.iter().filter_map(member).collect() })
    }

    /// The requirements alone.
    pub fn requirements(&self) -> Vec<Requirement> {
        self.members.iter().map(|member| member.requirement).collect()
    }
}

/// A combination that keeps these requirements, and of the others as many as can be added one after
/// another in the order of keys; near to keeping the rest.
fn nearest_keeping(survey: &Survey<'_>, kept: &[Requirement], rail: &Rail) -> Option<Miss> {
    let mut kept = kept.to_vec();
    for requirement in Requirement::ALL {
        if !kept.contains(&requirement) {
            kept.push(requirement);
            if survey.holding(asked(&kept, rail)).is_none() {
                kept.pop();
            }
        }
    }
    survey.nearest_within(CheckSet::ALL.without(asked(&kept, rail)))
}

/// The checks that are asked where only these requirements hold.
pub fn asked(requirements: &[Requirement], rail: &Rail) -> CheckSet {
    requirements.iter().fold(CheckSet::EMPTY, |set, r| set.and(r.checks(rail)))
}

fn of_bits(bits: u32) -> Vec<Requirement> {
    Requirement::ALL.into_iter().filter(|&requirement| bits & bit(requirement) != 0).collect()
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
