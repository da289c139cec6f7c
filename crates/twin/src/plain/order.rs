//! Rank, front and spread of candidates.
//!
//! Model page, section 5. Every comparison is made on figures rounded to ten significant digits.

use super::PlainCandidate;
use circuit::slot::Slot;
use quantity::digits::{compare, rounded};
use select::problem::{Part, Problem};
use std::cmp::Ordering;
use std::collections::HashMap;

/// Maker and part of a candidate in a slot; None where it has no part there.
type Name<'a> = Option<(&'a str, &'a str)>;

/// The order of the ranking: score, cost, stress, loss, then names.
pub fn rank_order(problem: &Problem<'_>, a: &PlainCandidate, b: &PlainCandidate) -> Ordering {
    compare(a.score, b.score)
        .then_with(|| compare(a.cost, b.cost))
        .then_with(|| compare(a.stress, b.stress))
        .then_with(|| compare(a.loss, b.loss))
        .then_with(|| name_order(problem, a, b))
}

/// Names by code points, maker before part, slot after slot; no part sorts first.
fn name_order(problem: &Problem<'_>, a: &PlainCandidate, b: &PlainCandidate) -> Ordering {
    const ORDER: [Slot; Slot::COUNT] = [
        Slot::Zener,
        Slot::Amplifier,
        Slot::Pass,
        Slot::Heatsink,
        Slot::BiasLine,
        Slot::DividerLine,
        Slot::Pot,
    ];
    ORDER
        .into_iter()
        // UTF-8 sorts byte by byte as its code points do.
        .map(|slot| name(problem, a, slot).cmp(&name(problem, b, slot)))
        .find(|order| order.is_ne())
        .unwrap_or(Ordering::Equal)
}

fn name<'a>(problem: &Problem<'a>, candidate: &PlainCandidate, slot: Slot) -> Name<'a> {
    fn of<'a, F>(part: &Part<'a, F>) -> (&'a str, &'a str) {
        (part.maker, part.part)
    }
    candidate.places[slot as usize].map(|i| match slot {
        Slot::Zener => of(&problem.zeners[i]),
        Slot::BiasLine => of(&problem.bias_lines[i]),
        Slot::Amplifier => of(&problem.amplifiers[i]),
        Slot::DividerLine => of(&problem.divider_lines[i]),
        Slot::Pot => of(&problem.pots[i]),
        Slot::Pass => of(&problem.transistors[i].part),
        Slot::Heatsink => of(&problem.heatsinks[i].part),
    })
}

/// The candidates that no other equals or beats on cost, loss and stress at once with at least one
/// strictly better; of several with equal figures the first by name. In the order of `ranked`.
pub fn front(problem: &Problem<'_>, ranked: &[PlainCandidate]) -> Vec<PlainCandidate> {
    let figures: Vec<[f64; 3]> =
        ranked.iter().map(|c| [c.cost, c.loss, c.stress].map(rounded)).collect();
    let is_beaten = |i: usize| {
        (0..ranked.len()).any(|j| {
            let (mine, other) = (&figures[i], &figures[j]);
            let at_least_as_good = mine.iter().zip(other).all(|(m, o)| o <= m);
            let better = mine.iter().zip(other).any(|(m, o)| o < m);
            at_least_as_good
                && (better || name_order(problem, &ranked[j], &ranked[i]) == Ordering::Less)
        })
    };
    (0..ranked.len()).filter(|&i| !is_beaten(i)).map(|i| ranked[i]).collect()
}

/// Walks down a list and passes over a candidate whose part in a limited slot has as many rows
/// already as the limit allows. A candidate without a part there is not limited.
///
/// A slot may be given several limits; the least of them counts.
pub fn spread(
    problem: &Problem<'_>,
    list: &[PlainCandidate],
    limits: &[(Slot, usize)],
) -> Vec<PlainCandidate> {
    let mut rows: HashMap<(Slot, (&str, &str)), usize> = HashMap::new();
    let mut shown = Vec::new();
    for candidate in list {
        let is_full = limits.iter().any(|&(slot, limit)| {
            name(problem, candidate, slot)
                .is_some_and(|name| rows.get(&(slot, name)).copied().unwrap_or(0) >= limit)
        });
        if is_full {
            continue;
        }
        for slot in Slot::ALL {
            if let Some(name) = name(problem, candidate, slot) {
                *rows.entry((slot, name)).or_insert(0) += 1;
            }
        }
        shown.push(*candidate);
    }
    shown
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::shops::RandomShop;

    /// A shop with two zeners and two transistors, named and weighted as the tests need them.
    fn shop() -> RandomShop {
        let mut shop = RandomShop::from_seed(0);
        let (zener, transistor) = (shop.zeners[0].clone(), shop.transistors[0].clone());
        shop.zeners = vec![zener.clone(), zener];
        shop.transistors = vec![transistor.clone(), transistor];
        let names = [("Ash", "2"), ("Ash", "10")];
        for (row, (maker, part)) in shop.zeners.iter_mut().zip(names) {
            (row.maker, row.part) = (maker.to_owned(), part.to_owned());
        }
        for (row, (maker, part)) in shop.transistors.iter_mut().zip(names) {
            (row.maker, row.part) = (maker.to_owned(), part.to_owned());
        }
        shop
    }

    fn candidate(zener: usize, pass: usize, cost: f64, loss: f64, stress: f64) -> PlainCandidate {
        let mut places = [None; Slot::COUNT];
        places[Slot::Zener as usize] = Some(zener);
        places[Slot::Pass as usize] = Some(pass);
        let score = cost * loss * stress;
        PlainCandidate {
            places,
            rz_ohm: 1.0,
            upper_ohm: 1.0,
            ri_ohm: 1.0,
            cost,
            loss,
            stress,
            score,
        }
    }

    #[test]
    fn equal_scores_rank_by_cost_then_stress_then_names() {
        let shop = shop();
        let problem = shop.problem();
        let order = |a: &PlainCandidate, b: &PlainCandidate| rank_order(&problem, a, b);
        let cheap = candidate(0, 0, 1.0, 4.0, 1.0);
        let dear = candidate(0, 0, 2.0, 2.0, 1.0);
        assert_eq!(order(&cheap, &dear), Ordering::Less);
        let calm = candidate(0, 0, 1.0, 8.0, 0.5);
        assert_eq!(order(&calm, &cheap), Ordering::Less);
        // "10" stands before "2", and the eleventh digit of the cost decides nothing.
        let ten = candidate(1, 0, 1.0 + 1e-12, 4.0, 1.0);
        assert_eq!(order(&ten, &cheap), Ordering::Less);
        // The zener's name weighs before the transistor's.
        let late_pass = candidate(1, 0, 1.0, 4.0, 1.0);
        let early_pass = candidate(0, 1, 1.0, 4.0, 1.0);
        assert_eq!(order(&late_pass, &early_pass), Ordering::Less);
        // No heatsink stands before any.
        let mut mounted = cheap;
        mounted.places[Slot::Heatsink as usize] = (!shop.heatsinks.is_empty()).then_some(0);
        assert!(!shop.heatsinks.is_empty(), "this seed has heatsinks");
        assert_eq!(order(&cheap, &mounted), Ordering::Less);
    }

    #[test]
    fn the_front_holds_what_nothing_beats_and_one_of_equals() {
        let shop = shop();
        let problem = shop.problem();
        let best_cost = candidate(0, 0, 1.0, 2.0, 0.5);
        let its_equal_named_first = candidate(1, 0, 1.0, 2.0, 0.5);
        let best_loss = candidate(0, 0, 2.0, 1.0, 0.5);
        let beaten = candidate(0, 0, 2.0, 2.0, 0.5);
        let list = [best_cost, its_equal_named_first, best_loss, beaten];
        assert_eq!(front(&problem, &list), [its_equal_named_first, best_loss]);
    }

    #[test]
    fn the_spread_passes_over_parts_that_are_shown_often_enough() {
        let shop = shop();
        let problem = shop.problem();
        let of = |zener, pass| candidate(zener, pass, 1.0, 1.0, 1.0);
        let list = [of(0, 0), of(0, 1), of(1, 0), of(1, 1)];
        let one_a_pass = spread(&problem, &list, &[(Slot::Pass, 1)]);
        assert_eq!(one_a_pass, [of(0, 0), of(0, 1)]);
        // Only rows that are shown count: the third is passed over for its transistor alone.
        let both = spread(&problem, &list, &[(Slot::Pass, 1), (Slot::Zener, 1)]);
        assert_eq!(both, [of(0, 0), of(1, 1)]);
        // No candidate has a heatsink, so none is limited by it.
        assert_eq!(spread(&problem, &list, &[(Slot::Heatsink, 0)]), list);
    }
}
