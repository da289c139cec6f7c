//! Survey, conflict and losses against the plain way: every combination, every check.

use circuit::check::Check;
use circuit::slot::Slot;
use reasons::check_set::CheckSet;
use reasons::conflict::{Conflict, asked};
use reasons::losses::{concerns, losses};
use reasons::requirement::Requirement;
use reasons::survey::survey;
use select::problem::Problem;
use std::collections::BTreeSet;
use twin::plain::each_combination;
use twin::shops::RandomShop;

/// Shops by seed from 0.
const SEEDS: u64 = 1_500;

/// What fails of every combination that can be built, each set once.
fn all_failing(problem: &Problem<'_>) -> BTreeSet<CheckSet> {
    let mut all = BTreeSet::new();
    each_combination(problem, |combination| {
        if let Some(fitted) = &combination.fitted {
            all.insert(fitted.findings.iter().filter(|f| !f.holds()).map(|f| f.check).collect());
        }
    });
    all
}

#[test]
fn a_survey_is_the_least_that_fails_of_any_combination() {
    for seed in 0..SEEDS {
        let shop = RandomShop::from_seed(seed);
        let problem = shop.problem();
        let all = all_failing(&problem);
        let least: BTreeSet<CheckSet> = all
            .iter()
            .filter(|set| !all.iter().any(|other| other != *set && other.is_within(**set)))
            .copied()
            .collect();
        let survey = survey(&problem).expect("small shops are not too many");
        let found: BTreeSet<CheckSet> = survey.misses.iter().map(|miss| miss.failing).collect();
        assert_eq!(found, least, "seed {seed}");
        for miss in &survey.misses {
            let failing: CheckSet = miss.failures().map(|f| f.check).collect();
            assert_eq!(failing, miss.failing, "seed {seed}: the combination shows its set");
        }
    }
}

#[test]
fn a_conflict_leaves_no_candidate_and_is_minimal_and_none_is_smaller() {
    let (mut seen, mut with_several) = (0, 0);
    for seed in 0..SEEDS {
        let shop = RandomShop::from_seed(seed);
        let problem = shop.problem();
        let rail = problem.rail;
        let all = all_failing(&problem);
        let admits = |requirements: &[Requirement]| {
            let asked = asked(requirements, rail);
            all.iter().any(|failing| !failing.meets(asked))
        };
        let survey = survey(&problem).expect("small shops are not too many");
        let Some(conflict) = Conflict::smallest(&survey, rail) else {
            assert!(all.contains(&CheckSet::EMPTY), "seed {seed}: a candidate");
            continue;
        };
        let members = conflict.requirements();
        assert_eq!(members.len(), conflict.members.len());
        assert!(!admits(&members), "seed {seed}: {members:?} is in conflict");
        for (i, member) in conflict.members.iter().enumerate() {
            let mut rest = members.clone();
            rest.remove(i);
            assert!(admits(&rest), "seed {seed}: {members:?} without {:?}", member.requirement);
            assert!(!member.without_it.failing.meets(asked(&rest, rail)), "seed {seed}");
        }
        seen += 1;
        with_several += usize::from(members.len() > 1);
        // No set with fewer members is a conflict.
        for bits in 0u32..1 << Requirement::ALL.len() {
            if (bits.count_ones() as usize) < members.len() && seen <= 40 {
                let fewer: Vec<Requirement> =
                    Requirement::ALL.into_iter().filter(|r| bits & 1 << *r as u32 != 0).collect();
                assert!(admits(&fewer), "seed {seed}: {fewer:?} is smaller than {members:?}");
            }
        }
    }
    assert!(seen > 100 && with_several > 20, "{seen} conflicts, {with_several} of several");
}

#[test]
fn losses_are_what_one_check_rules_out_in_every_company() {
    for seed in 0..SEEDS / 3 {
        let shop = RandomShop::from_seed(seed);
        let problem = shop.problem();
        // For each part the checks that do not fail in some company; None where it fits nowhere.
        let mut held: Vec<Vec<Option<CheckSet>>> = vec![Vec::new(); Slot::COUNT];
        each_combination(&problem, |combination| {
            for slot in Slot::ALL {
                let Some(place) = combination.places[slot as usize] else { continue };
                let of_slot = &mut held[slot as usize];
                of_slot.resize(of_slot.len().max(place + 1), None);
                let Some(fitted) = &combination.fitted else { continue };
                let failing: CheckSet =
                    fitted.findings.iter().filter(|f| !f.holds()).map(|f| f.check).collect();
                let entry = &mut of_slot[place];
                *entry = Some(entry.unwrap_or_default().and(CheckSet::ALL.without(failing)));
            }
        });
        if held.iter().flatten().all(Option::is_none) {
            continue;
        }
        for row in losses(&problem).expect("small shops are not too many") {
            let of_slot = &held[row.slot as usize];
            for check in Check::ALL.into_iter().filter(|&check| concerns(row.slot, check)) {
                let is_lost = |held: &&Option<CheckSet>| held.is_some_and(|h| !h.contains(check));
                let lost = of_slot.iter().filter(is_lost).count();
                let told = row.lost.iter().find(|(c, _)| *c == check).map_or(0, |(_, n)| *n);
                assert_eq!(told, lost, "seed {seed}: {} {}", row.slot.name(), check.name());
            }
            if row.slot == Slot::Heatsink || row.slot == Slot::Pass {
                let misfits = of_slot.iter().filter(|held| held.is_none()).count();
                assert_eq!(row.misfits, misfits, "seed {seed}: {}", row.slot.name());
            }
        }
    }
}
