//! What the plain way says about a shop is of one piece.

use circuit::slot::Slot;
use quantity::digits::at_most;
use std::collections::BTreeMap;
use twin::plain::{HEATSINK_FIT, Plain, front, spread};
use twin::shops::RandomShop;

#[test]
fn counts_add_up_to_the_product_of_the_slots() {
    let mut lost_to_fit = 0;
    for seed in 0..300 {
        let shop = RandomShop::from_seed(seed);
        let counts = Plain::new(&shop.problem()).counts;
        let lost: u64 = counts.lost.values().sum();
        assert_eq!(counts.covered, counts.feasible + lost, "{seed}");

        let stands_alone = shop.may_go_unmounted
            && shop.transistors.iter().any(|t| t.figures.rth_ja_c_per_w.is_some());
        let sinks = match shop.rail.thermal.sink_c_per_w {
            Some(_) => 1,
            None => shop.heatsinks.len() + usize::from(stands_alone),
        };
        let slots = [
            shop.zeners.len(),
            shop.bias_lines.len(),
            shop.amplifiers.len(),
            shop.divider_lines.len(),
            if shop.rail.is_adjustable() { shop.pots.len() } else { 1 },
            shop.transistors.len(),
            sinks,
        ];
        assert_eq!(counts.covered, slots.iter().product::<usize>() as u64, "{seed}");
        lost_to_fit += counts.lost.get(HEATSINK_FIT).copied().unwrap_or(0);
    }
    assert!(lost_to_fit > 0);
}

#[test]
fn the_front_begins_with_the_first_of_any_list_that_weighs_all() {
    let mut fronts = 0;
    for seed in 0..600 {
        let shop = RandomShop::from_seed(seed);
        let problem = shop.problem();
        let plain = Plain::new(&problem);
        let front = front(&problem, &plain.ranked);
        assert_eq!(front.is_empty(), plain.ranked.is_empty(), "{seed}");
        for candidate in &plain.ranked {
            let is_matched = front.iter().any(|f| {
                at_most(f.cost, candidate.cost)
                    && at_most(f.loss, candidate.loss)
                    && at_most(f.stress, candidate.stress)
            });
            assert!(is_matched, "{seed}: nothing on the front is as good as {candidate:?}");
        }
        let weights = [shop.weights.cost, shop.weights.loss, shop.weights.stress];
        if weights.iter().all(|w| *w > 0.0) && plain.ranked.iter().all(|c| c.score > 0.0) {
            assert_eq!(front.first(), plain.ranked.first(), "{seed}");
            fronts += u64::from(front.len() > 1);
        }
    }
    assert!(fronts > 20, "only {fronts} fronts of more than one candidate");
}

#[test]
fn a_spread_list_keeps_to_its_limits_and_leaves_nothing_out_for_no_reason() {
    let limits = [(Slot::Pass, 2), (Slot::Zener, 3)];
    let mut cut = 0;
    for seed in 0..600 {
        let shop = RandomShop::from_seed(seed);
        let problem = shop.problem();
        let plain = Plain::new(&problem);
        let shown = spread(&problem, &plain.ranked, &limits);
        let mut next = shown.iter().peekable();
        let mut rows: BTreeMap<(Slot, usize), usize> = BTreeMap::new();
        for candidate in &plain.ranked {
            let places = limits.map(|(slot, limit)| {
                (slot, candidate.places[slot as usize].expect("both slots hold a part"), limit)
            });
            let is_shown = next.next_if_eq(&candidate).is_some();
            let is_full = places
                .iter()
                .any(|&(slot, i, limit)| rows.get(&(slot, i)).copied().unwrap_or(0) >= limit);
            assert_eq!(is_shown, !is_full, "{seed}: {candidate:?}");
            if is_shown {
                for (slot, i, _) in places {
                    *rows.entry((slot, i)).or_insert(0) += 1;
                }
            } else {
                cut += 1;
            }
        }
        assert_eq!(next.next(), None, "{seed}");
    }
    assert!(cut > 100, "only {cut} candidates were passed over");
}
