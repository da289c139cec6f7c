//! Survey, conflict and losses against the plain way: every combination, every check.

use circuit::check::{Check, Finding};
use circuit::slot::Slot;
use reasons::check_set::CheckSet;
use reasons::conflict::{Conflict, asked};
use reasons::losses::{concerns, losses};
use reasons::requirement::Requirement;
use reasons::survey::Survey;
use select::problem::Problem;
use std::collections::{BTreeMap, BTreeSet};
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

/// Which checks are asked, now few and now many of them, by a number that looks random.
fn some_checks(seed: u64, n: u64) -> CheckSet {
    let mut state =
        seed.wrapping_mul(0x9e37_79b9_7f4a_7c15) ^ n.wrapping_mul(0xd1b5_4a32_d192_ed03);
    let mut next = || {
        state = state.wrapping_mul(0x5851_f42d_4c95_7f2d).wrapping_add(0x1405_7b7e_f767_814f);
        state >> 33
    };
    let share = next() % 9;
    Check::ALL.into_iter().filter(|_| next() % 8 < share).collect()
}

#[test]
fn a_survey_finds_a_combination_that_keeps_checks_exactly_where_there_is_one() {
    let (mut kept, mut in_vain) = (0, 0);
    for seed in 0..SEEDS {
        let shop = RandomShop::from_seed(seed);
        let problem = shop.problem();
        let all = all_failing(&problem);
        let survey = Survey::new(&problem);
        let each = Check::ALL.map(|check| CheckSet::of(&[check]));
        let but_one = each.map(|one| CheckSet::ALL.without(one));
        let random = (0..12).map(|n| some_checks(seed, n));
        let asked = [CheckSet::EMPTY, CheckSet::ALL].into_iter().chain(each).chain(but_one);
        for asked in asked.chain(random) {
            let exists = all.iter().any(|failing| !failing.meets(asked));
            let found = survey.holding(asked);
            assert_eq!(found.is_some(), exists, "seed {seed}: {:?}", Vec::from_iter(asked.iter()));
            if let Some(miss) = found {
                let failing: CheckSet = miss.failures().map(|f| f.check).collect();
                assert_eq!(failing, miss.failing, "seed {seed}: the combination shows its set");
                assert!(!failing.meets(asked), "seed {seed}: what is asked holds");
                assert!(all.contains(&failing), "seed {seed}: there is such a combination");
            }
            kept += usize::from(exists);
            in_vain += usize::from(!exists);
        }
    }
    assert!(kept > 10_000 && in_vain > 10_000, "{kept} {in_vain}");
}

#[test]
fn the_nearest_combinations_fail_in_fewest_checks_and_by_least() {
    let (mut nearest_seen, mut of_several) = (0, 0);
    for seed in 0..SEEDS {
        let shop = RandomShop::from_seed(seed);
        let problem = shop.problem();
        // For each set of failing checks the least of what fails worst.
        let mut all: BTreeMap<CheckSet, f64> = BTreeMap::new();
        each_combination(&problem, |combination| {
            let Some(fitted) = &combination.fitted else { return };
            let failing = fitted.findings.iter().filter(|f| !f.holds());
            let worst = failing.clone().map(Finding::utilisation).fold(0.0, f64::max);
            let least = all.entry(failing.map(|f| f.check).collect()).or_insert(f64::INFINITY);
            *least = least.min(worst);
        });
        let told = Survey::new(&problem).nearest(usize::MAX);
        if all.is_empty() || all.contains_key(&CheckSet::EMPTY) {
            assert!(told.is_empty(), "seed {seed}");
            continue;
        }
        let fewest = all.keys().map(|set| set.len()).min().unwrap_or(0);
        if fewest > 4 {
            assert_eq!(told.len(), 1, "seed {seed}: one is told all the same");
            continue;
        }
        let sets: BTreeSet<CheckSet> = told.iter().map(|miss| miss.failing).collect();
        let with_fewest = all.iter().filter(|(set, _)| set.len() == fewest);
        let expected: BTreeSet<CheckSet> = with_fewest.map(|(set, _)| *set).collect();
        assert_eq!(sets, expected, "seed {seed}");
        for miss in &told {
            let least = all[&miss.failing];
            let near = miss.worst <= least * 1.002 || least.is_infinite();
            assert!(near, "seed {seed}: {} {least}", miss.worst);
        }
        nearest_seen += told.len();
        of_several += usize::from(fewest > 1);
    }
    assert!(nearest_seen > 500 && of_several > 50, "{nearest_seen} {of_several}");
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
        let survey = Survey::new(&problem);
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
        for row in losses(&problem) {
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
