//! Where parts would stand on a list if they were in the catalogs, many of them in one search.
//!
//! Each part is asked for by itself, as if it alone were added. The best candidate of each is found by a
//! search among the candidates that hold one of them, of which each part gives one row, and that ends
//! where the score exceeds that of the list's last row. It ranks behind as many rows as the list has
//! before it.

use crate::filled::{put, put_in};
use catalog::Shop;
use circuit::slot::Slot;
use rayon::prelude::*;
use select::SearchError;
use select::candidate::Candidate;
use select::problem::Problem;
use select::ranking::{NO_SPREAD, Spread, shortlist, shortlist_up_to};

/// A list, with what may be chosen for it.
pub(crate) struct Standing<'r, 'p> {
    problem: &'r Problem<'p>,
    boards: u64,
    top: usize,
    rows: Vec<Candidate>,
}

/// Scores nearer to each other than this share may tie at ten digits.
const NEAR: f64 = 1e-9;

/// At most so many parts are added at once, so that they need not all be kept.
const AT_ONCE: usize = 20_000;

impl<'r, 'p> Standing<'r, 'p> {
    /// The list of the first `top`.
    pub fn new(problem: &'r Problem<'p>, boards: u64, top: usize) -> Result<Self, SearchError> {
        Ok(Self { problem, boards, top, rows: shortlist(problem, top, &NO_SPREAD)? })
    }

    /// The score that a candidate must not exceed to be on the list; None where any will do.
    fn worst_score(&self) -> Option<f64> {
        if self.rows.len() < self.top { None } else { self.rows.last().map(|row| row.score) }
    }

    /// For each of so many parts the rank of its best candidate if the part were added; None where it
    /// would not be on the list. `read` gives the shop that holds the part alone, where there is one.
    pub fn ranks(
        &self,
        slots: &[Slot],
        parts: usize,
        read: impl Fn(usize) -> Option<Shop> + Sync,
    ) -> Result<Vec<Option<usize>>, SearchError> {
        let mut ranks = Vec::with_capacity(parts);
        for from in (0..parts).step_by(AT_ONCE) {
            let at_once = from..parts.min(from + AT_ONCE);
            let shops: Vec<Option<Shop>> = at_once.into_par_iter().map(&read).collect();
            match slots {
                [slot] => ranks.extend(self.ranks_in(*slot, &shops)?),
                // A line may serve in both of its slots at once, so each is asked for by itself.
                slots => {
                    let alone = |shop: &Option<Shop>| match shop {
                        Some(shop) => self.rank_alone(slots, shop),
                        None => Ok(None),
                    };
                    ranks.extend(shops.iter().map(alone).collect::<Result<Vec<_>, _>>()?);
                }
            }
        }
        Ok(ranks)
    }

    fn ranks_in(
        &self,
        slot: Slot,
        shops: &[Option<Shop>],
    ) -> Result<Vec<Option<usize>>, SearchError> {
        let mut ranks = vec![None; shops.len()];
        // Each part goes by its number, for they may all have one name.
        let names: Vec<String> = (0..shops.len()).map(|n| n.to_string()).collect();
        let mut among = self.problem.clone();
        let mut numbers = Vec::new();
        clear(&mut among, slot);
        for (number, (shop, name)) in shops.iter().zip(&names).enumerate() {
            let Some(shop) = shop else { continue };
            if put_in(&mut among, slot, None, shop, self.boards).is_some() {
                rename_last(&mut among, slot, name);
                numbers.push(number);
            }
        }
        let mut each_once: Spread = NO_SPREAD;
        each_once[slot as usize] = Some(1);
        let most_score = self.worst_score().map_or(f64::INFINITY, |worst| worst * (1.0 + NEAR));
        for candidate in shortlist_up_to(&among, most_score, numbers.len(), &each_once)? {
            let number = candidate.place(slot).and_then(|place| numbers.get(place));
            let Some((rank, shop)) = number.and_then(|&n| Some((ranks.get_mut(n)?, shops.get(n)?)))
            else {
                continue;
            };
            *rank = match (self.clear_rank(&candidate), shop) {
                (Some(rank), _) => Some(rank).filter(|rank| *rank <= self.top),
                (None, Some(shop)) => self.rank_alone(&[slot], shop)?,
                (None, None) => None,
            };
        }
        Ok(ranks)
    }

    /// The rank that scores alone tell; None where one is too near.
    fn clear_rank(&self, candidate: &Candidate) -> Option<usize> {
        let mut before = 0;
        for row in &self.rows {
            if (row.score - candidate.score).abs() <= NEAR * candidate.score.abs() {
                return None;
            }
            before += usize::from(row.score < candidate.score);
        }
        Some(before + 1)
    }

    /// The best rank of the one part of a shop if it were added in these slots, found by searching
    /// among everything.
    fn rank_alone(&self, slots: &[Slot], shop: &Shop) -> Result<Option<usize>, SearchError> {
        let mut with = self.problem.clone();
        for &slot in slots {
            let Some(more) = put(&with, slot, None, shop, self.boards) else { return Ok(None) };
            with = more;
        }
        let list = shortlist(&with, self.top, &NO_SPREAD)?;
        let uses_it = |candidate: &Candidate| {
            slots.iter().any(|&slot| {
                candidate.place(slot).is_some_and(|place| place + 1 == count(&with, slot))
            })
        };
        Ok(list.iter().position(uses_it).map(|place| place + 1))
    }
}

fn count(problem: &Problem<'_>, slot: Slot) -> usize {
    match slot {
        Slot::Zener => problem.zeners.len(),
        Slot::BiasLine => problem.bias_lines.len(),
        Slot::Amplifier => problem.amplifiers.len(),
        Slot::DividerLine => problem.divider_lines.len(),
        Slot::Pot => problem.pots.len(),
        Slot::Pass => problem.transistors.len(),
        Slot::Heatsink => problem.heatsinks.len(),
    }
}

/// Leaves a slot without parts; a slot for heatsinks must then be filled.
fn clear(problem: &mut Problem<'_>, slot: Slot) {
    match slot {
        Slot::Zener => problem.zeners.clear(),
        Slot::BiasLine => problem.bias_lines.clear(),
        Slot::Amplifier => problem.amplifiers.clear(),
        Slot::DividerLine => problem.divider_lines.clear(),
        Slot::Pot => problem.pots.clear(),
        Slot::Pass => problem.transistors.clear(),
        Slot::Heatsink => {
            problem.heatsinks.clear();
            problem.may_go_unmounted = false;
        }
    }
}

fn rename_last<'b>(problem: &mut Problem<'b>, slot: Slot, name: &'b str) {
    let part = match slot {
        Slot::Zener => problem.zeners.last_mut().map(|p| &mut p.part),
        Slot::BiasLine => problem.bias_lines.last_mut().map(|p| &mut p.part),
        Slot::Amplifier => problem.amplifiers.last_mut().map(|p| &mut p.part),
        Slot::DividerLine => problem.divider_lines.last_mut().map(|p| &mut p.part),
        Slot::Pot => problem.pots.last_mut().map(|p| &mut p.part),
        Slot::Pass => problem.transistors.last_mut().map(|t| &mut t.part.part),
        Slot::Heatsink => problem.heatsinks.last_mut().map(|s| &mut s.part.part),
    };
    if let Some(part) = part {
        *part = name;
    }
}
