//! The search finds what trying every combination finds: lists, front, spread and counts, in any
//! small shop.

use circuit::parts::{Pot, ResistorLine};
use circuit::slot::Slot;
use proptest::prelude::*;
use select::candidate::Candidate;
use select::problem::{Problem, Weights};
use select::ranking::{NO_SPREAD, Spread, shortlist, spread_out};
use std::collections::BTreeMap;
use twin::alike::{Listed, counts_alike, ranks_alike};
use twin::plain::{Plain, PlainCandidate, front, spread};
use twin::shops::{RandomShop, Row, Sizes, shops};

/// Shops of the long run, by seed from 0.
const SEEDS: u64 = 3_000;

fn listed(list: &[Candidate]) -> impl Iterator<Item = Listed> + '_ {
    list.iter().map(|c| {
        let values = [c.rz.ohm, c.divider.upper.ohm, c.divider.ri.ohm];
        (Slot::ALL.map(|slot| c.place(slot)), values, c.cost, c.loss, c.stress)
    })
}

/// Limits that suit a seed, so that every slot is limited now and then, and sometimes two.
fn limits_of(seed: u64) -> Vec<(Slot, usize)> {
    let slot = |n: u64| Slot::ALL[(n % Slot::COUNT as u64) as usize];
    let first = (slot(seed), 1 + (seed / 7 % 3) as usize);
    if seed.is_multiple_of(3) { vec![first, (slot(seed / 3 + 1), 2)] } else { vec![first] }
}

fn spread_of(limits: &[(Slot, usize)]) -> Spread {
    let mut spread = NO_SPREAD;
    for &(slot, rows) in limits {
        let limit = &mut spread[slot as usize];
        *limit = Some(limit.map_or(rows as u32, |l: u32| l.min(rows as u32)));
    }
    spread
}

fn in_context<T>(what: &str, seed: u64, result: Result<T, String>) -> Result<T, String> {
    result.map_err(|difference| format!("seed {seed}, {what}: {difference}"))
}

/// The counts of a problem, against the plain way.
fn compare_counts(problem: &Problem<'_>, plain: &Plain) -> Result<(), String> {
    let counts = select::count::count(problem, &|_| {});
    let number = |n: &dyn ToString| n.to_string().parse::<u64>().map_err(|e| e.to_string());
    let mut lost = BTreeMap::new();
    for (to, combinations) in &counts.lost {
        lost.insert(to.name().to_owned(), number(combinations)?);
    }
    let (covered, feasible) = (number(&counts.covered)?, number(&counts.feasible)?);
    counts_alike(&plain.counts, covered, feasible, &lost)
}

/// Everything that the search answers for a problem, against the plain way.
fn compare(shop: &RandomShop, problem: &Problem<'_>) -> Result<usize, String> {
    let seed = shop.seed;
    let plain = Plain::new(problem);
    let search = |top, spread| shortlist(problem, top, spread).map_err(|e| e.to_string());

    let whole = search(usize::MAX, &NO_SPREAD)?;
    in_context("whole list", seed, ranks_alike(&plain.ranked, listed(&whole)))?;
    let top = 1 + (seed % 9) as usize;
    let some = search(top, &NO_SPREAD)?;
    in_context("first rows", seed, ranks_alike(plain.top(top), listed(&some)))?;

    let limits = limits_of(seed);
    let spread_rows = spread(problem, &plain.ranked, &limits);
    let rows: &[PlainCandidate] = &spread_rows[..spread_rows.len().min(top)];
    let spread_list = search(top, &spread_of(&limits))?;
    in_context("spread", seed, ranks_alike(rows, listed(&spread_list)))?;

    let plain_front = front(problem, &plain.ranked);
    let quick_front = select::front::front(problem).map_err(|e| e.to_string())?;
    in_context("front", seed, ranks_alike(&plain_front, listed(&quick_front)))?;
    let spread_front = spread(problem, &plain_front, &limits);
    let quick_spread = spread_out(&quick_front, &spread_of(&limits));
    in_context("front spread", seed, ranks_alike(&spread_front, listed(&quick_spread)))?;

    in_context("counts", seed, compare_counts(problem, &plain))?;
    Ok(plain.ranked.len())
}

#[test]
fn search_finds_what_trying_every_combination_finds() {
    let mut feasible = 0;
    for seed in 0..SEEDS {
        let shop = RandomShop::from_seed(seed);
        let found = compare(&shop, &shop.problem()).unwrap_or_else(|d| panic!("{d}"));
        feasible += u64::from(found > 0);
    }
    assert!(feasible * 5 > SEEDS, "only {feasible} of {SEEDS} shops have a candidate");
}

/// Many amplifiers, of which each refuses some references; many pots, of which many serve. Boxes of
/// amplifiers then fall into boxes, and pots are taken a few at a time.
#[test]
fn the_front_of_many_amplifiers_and_pots_is_what_trying_every_combination_finds() {
    let sizes = Sizes {
        zeners: 4,
        bias_lines: 2,
        amplifiers: 20,
        divider_lines: 2,
        pots: 14,
        transistors: 4,
        heatsinks: 2,
    };
    let (mut longest, mut adjustable) = (0, 0);
    for seed in 0..SEEDS / 15 {
        let shop = RandomShop::new(seed, sizes);
        let problem = shop.problem();
        let plain = Plain::new(&problem);
        let plain_front = front(&problem, &plain.ranked);
        let quick_front = select::front::front(&problem).expect("small shops fit in memory");
        ranks_alike(&plain_front, listed(&quick_front))
            .unwrap_or_else(|d| panic!("seed {seed}, front: {d}"));
        let list = shortlist(&problem, 12, &NO_SPREAD).expect("small shops fit in memory");
        ranks_alike(plain.top(12), listed(&list))
            .unwrap_or_else(|d| panic!("seed {seed}, first rows: {d}"));
        longest = longest.max(quick_front.len());
        adjustable += usize::from(problem.rail.is_adjustable() && quick_front.len() > 3);
    }
    assert!(longest > 12, "the longest front has {longest} rows");
    assert!(adjustable > 10, "only {adjustable} adjustable rails have a front worth the name");
}

/// Counts work out once what no check tells apart. Here much is the same, and what differs does so in one
/// figure alone.
#[test]
fn parts_that_differ_in_one_figure_are_counted_apart() {
    let mut told_apart = 0;
    for seed in 0..SEEDS / 10 {
        let mut shop = RandomShop::from_seed(seed);
        let Some(first) = shop.pots.first().cloned() else { continue };
        let mut add = |name: &str, change: fn(&mut Pot)| {
            let mut row = first.clone();
            row.part = name.to_owned();
            change(&mut row.figures);
            shop.pots.push(row);
        };
        add("the same", |_| {});
        add("end", |pot| pot.end_ohm = 0.05 * pot.value_ohm);
        add("tolerance", |pot| pot.tol *= 0.9);
        add("power", |pot| pot.rating.power_w *= 0.05);
        add("voltage", |pot| pot.vmax_v = Some(2.0));
        let mut add = |name: &str, change: fn(&mut ResistorLine)| {
            let mut row = shop.divider_lines[0].clone();
            row.part = name.to_owned();
            change(&mut row.figures);
            shop.divider_lines.push(row);
        };
        add("the same", |_| {});
        add("power", |line| line.rating.power_w *= 0.05);
        let zener = Row { part: "the same".to_owned(), ..shop.zeners[0].clone() };
        shop.zeners.push(zener);

        let problem = shop.problem();
        let plain = Plain::new(&problem);
        compare_counts(&problem, &plain).unwrap_or_else(|d| panic!("seed {seed}: {d}"));
        told_apart += usize::from(plain.counts.feasible > 0);
    }
    assert!(told_apart > 20, "only {told_apart} shops have a candidate");
}

#[test]
fn one_criterion_alone_ranks_as_trying_every_combination_does() {
    for seed in 0..SEEDS / 4 {
        let shop = RandomShop::from_seed(seed);
        for alone in 0..3 {
            let weight = |n| if n == alone { 1.0 } else { 0.0 };
            let weights = Weights { cost: weight(0), loss: weight(1), stress: weight(2) };
            let problem = Problem { weights, ..shop.problem() };
            let plain = Plain::new(&problem);
            let list = shortlist(&problem, 7, &NO_SPREAD).expect("small shops fit in memory");
            ranks_alike(plain.top(7), listed(&list)).unwrap_or_else(|d| panic!("seed {seed}: {d}"));
        }
    }
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(400))]

    #[test]
    fn search_agrees_in_any_shop(shop in shops()) {
        if let Err(difference) = compare(&shop, &shop.problem()) {
            return Err(TestCaseError::fail(difference));
        }
    }

    #[test]
    fn a_part_that_no_row_uses_may_go(shop in shops()) {
        let problem = shop.problem();
        let before = shortlist(&problem, 5, &NO_SPREAD).expect("small shops fit in memory");
        let used: Vec<_> = before.iter().filter_map(|c| c.place(Slot::Amplifier)).collect();
        if let Some(unused) = (0..problem.amplifiers.len()).find(|i| !used.contains(i)) {
            let mut fewer = problem.clone();
            fewer.amplifiers.remove(unused);
            let after = shortlist(&fewer, 5, &NO_SPREAD).expect("small shops fit in memory");
            let name = |p: &Problem<'_>, c: &Candidate| {
                c.place(Slot::Amplifier).map(|i| p.amplifiers[i].part.to_owned())
            };
            prop_assert_eq!(before.len(), after.len());
            for (b, a) in before.iter().zip(&after) {
                prop_assert_eq!(name(&problem, b), name(&fewer, a));
                prop_assert_eq!((b.cost, b.loss, b.stress), (a.cost, a.loss, a.stress));
            }
        }
    }
}
