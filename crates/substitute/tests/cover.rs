//! The cover against plain enumeration: every way to give each design one of its options.

use proptest::prelude::*;
use quantity::digits::compare;
use std::collections::{BTreeMap, BTreeSet};
use substitute::cover::{Cover, CoverOption, cover};

/// Designs left out, parts, cost: less is better, in this order.
type Worth = (usize, usize, f64);

fn order(a: &Worth, b: &Worth) -> std::cmp::Ordering {
    a.0.cmp(&b.0).then(a.1.cmp(&b.1)).then(compare(a.2, b.2))
}

/// The worth of some picks; None where the stock does not reach.
fn worth(
    designs: &[Vec<CoverOption>],
    picks: &[Option<usize>],
    stock: &BTreeMap<u32, f64>,
) -> Option<Worth> {
    let picked: Vec<&CoverOption> =
        designs.iter().zip(picks).filter_map(|(options, pick)| options.get((*pick)?)).collect();
    let mut taken: BTreeMap<u32, f64> = BTreeMap::new();
    for (part, pieces) in picked.iter().flat_map(|o| &o.pieces) {
        *taken.entry(*part).or_default() += *pieces as f64;
    }
    let reaches =
        taken.iter().all(|(part, pieces)| *pieces <= stock.get(part).copied().unwrap_or(0.0));
    let parts: BTreeSet<u32> = picked.iter().flat_map(|o| o.parts.clone()).collect();
    let left_out = picks.iter().filter(|pick| pick.is_none()).count();
    reaches.then(|| (left_out, parts.len(), picked.iter().map(|o| o.cost).sum()))
}

/// The best of all picks. A design whose options count no stock is left out only where it has none.
fn plainly(designs: &[Vec<CoverOption>], stock: &BTreeMap<u32, f64>) -> Worth {
    let mut all: Vec<Vec<Option<usize>>> = vec![Vec::new()];
    for options in designs {
        let mut next = Vec::new();
        for picks in &all {
            for pick in (0..options.len()).map(Some).chain([None]) {
                let mut picks = picks.clone();
                picks.push(pick);
                next.push(picks);
            }
        }
        all = next;
    }
    let worths = all.iter().filter_map(|picks| worth(designs, picks, stock));
    worths.min_by(order).expect("leaving all out is possible")
}

/// Options over six parts; of a design that counts stock every option does.
fn designs() -> impl Strategy<Value = (Vec<Vec<CoverOption>>, BTreeMap<u32, f64>)> {
    let option = (prop::collection::btree_set(0u32..6, 1..=2), 1u32..40, 1u64..8);
    let design = (prop::collection::vec(option, 0..=4), any::<bool>());
    let stock = prop::collection::vec(0u32..14, 6);
    (prop::collection::vec(design, 1..=5), stock).prop_map(|(designs, stock)| {
        let designs = designs
            .into_iter()
            .map(|(options, counts)| {
                options
                    .into_iter()
                    .map(|(parts, cost, pieces)| CoverOption {
                        pieces: if counts {
                            parts.iter().map(|part| (*part, pieces)).collect()
                        } else {
                            Vec::new()
                        },
                        parts: parts.into_iter().collect(),
                        cost: f64::from(cost) / 4.0,
                    })
                    .collect()
            })
            .collect();
        let stock = (0..).zip(stock.into_iter().map(f64::from)).collect();
        (designs, stock)
    })
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 1500, ..ProptestConfig::default() })]

    #[test]
    fn no_picks_are_better(case in designs()) {
        let (designs, stock) = case;
        let Cover { picks, parts, cost, exact } = cover(&designs, &stock);
        prop_assert!(exact);
        let found = worth(&designs, &picks, &stock);
        prop_assert!(found.is_some(), "the stock does not reach for {picks:?}");
        let found = found.unwrap_or((0, 0, 0.0));
        prop_assert!(order(&found, &plainly(&designs, &stock)).is_eq(), "{found:?} {picks:?}");
        prop_assert_eq!(parts.len(), found.1);
        prop_assert!(compare(cost, found.2).is_eq());
    }
}

fn one(part: u32, cost: f64) -> CoverOption {
    CoverOption { parts: vec![part], pieces: Vec::new(), cost }
}

#[test]
fn one_part_for_all_comes_before_a_cheaper_one_for_each() {
    let designs = vec![vec![one(0, 1.0), one(2, 9.0)], vec![one(1, 1.0), one(2, 9.0)]];
    let found = cover(&designs, &BTreeMap::new());
    assert_eq!((found.parts, found.cost), (vec![2], 18.0));
}

#[test]
fn two_rails_do_not_both_get_the_same_hundred_pieces() {
    let counted =
        |part: u32, cost: f64| CoverOption { pieces: vec![(part, 60)], ..one(part, cost) };
    let designs =
        vec![vec![counted(0, 1.0), counted(1, 5.0)], vec![counted(0, 1.0), counted(1, 2.0)]];
    let stock = BTreeMap::from([(0, 100.0), (1, 100.0)]);
    let found = cover(&designs, &stock);
    assert_eq!((found.parts, found.cost), (vec![0, 1], 3.0));
    let short = BTreeMap::from([(0, 100.0), (1, 10.0)]);
    let found = cover(&designs, &short);
    assert_eq!(found.picks.iter().flatten().count(), 1, "the stock reaches for one of the two");
}

#[test]
fn thousands_of_alike_options_are_no_work() {
    let options = |from: u32| (from..from + 3000).map(|p| one(p, f64::from(p % 97))).collect();
    let designs: Vec<Vec<CoverOption>> = (0..200).map(|d| options(d % 5 * 900)).collect();
    let found = cover(&designs, &BTreeMap::new());
    assert!(found.exact);
    assert_eq!(found.parts.len(), 2);
}
