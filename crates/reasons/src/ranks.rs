//! Where parts would stand on a list if they were in the catalogs, many of them in one search.
//!
//! Each part is asked for by itself, as if it alone were added. The best candidate of each is found by a
//! search among the candidates that hold one of them, of which each part gives one row. It ranks behind
//! as many rows as the list has before it.

use crate::filled::{put, put_in};
use catalog::Shop;
use circuit::slot::Slot;
use select::SearchError;
use select::candidate::Candidate;
use select::problem::Problem;
use select::ranking::{NO_SPREAD, Spread, shortlist};

/// A list, with what may be chosen for it.
pub(crate) struct Standing<'r, 'p> {
    problem: &'r Problem<'p>,
    boards: u64,
    top: usize,
    rows: Vec<Candidate>,
}

/// Scores nearer to each other than this share may tie at ten digits.
const NEAR: f64 = 1e-9;

/// Rows of the first list of parts: rows behind the last that may be on the list are dear to find, for
/// parts tie there. Twice as many follow as long as there may be more.
const FIRST_ROWS: usize = 1;

impl<'r, 'p> Standing<'r, 'p> {
    /// The list of the first `top`.
    pub fn new(problem: &'r Problem<'p>, boards: u64, top: usize) -> Result<Self, SearchError> {
        Ok(Self { problem, boards, top, rows: shortlist(problem, top, &NO_SPREAD)? })
    }

    /// The score that a candidate must not exceed to be on the list; None where any will do.
    fn worst_score(&self) -> Option<f64> {
        if self.rows.len() < self.top { None } else { self.rows.last().map(|row| row.score) }
    }

    /// For each shop, which holds one part, the rank of the part's best candidate in a slot if the part
    /// were added; None where it would not be on the list.
    pub fn ranks_in(
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
        for candidate in self.best_of_each(slot, &among, numbers.len())? {
            let number = candidate.place(slot).and_then(|place| numbers.get(place));
            let Some((rank, shop)) = number.and_then(|&n| Some((ranks.get_mut(n)?, &shops[n])))
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

    /// The best candidate of each part of a slot, as far as it may be on the list.
    fn best_of_each(
        &self,
        slot: Slot,
        among: &Problem<'_>,
        parts: usize,
    ) -> Result<Vec<Candidate>, SearchError> {
        let mut spread: Spread = NO_SPREAD;
        spread[slot as usize] = Some(1);
        let mut most = FIRST_ROWS;
        loop {
            let rows = shortlist(among, most.min(parts), &spread)?;
            let goes_on = rows.last().is_some_and(|last| {
                self.worst_score().is_none_or(|worst| last.score <= worst * (1.0 + NEAR))
            });
            if !goes_on || rows.len() < most || most >= parts {
                return Ok(rows);
            }
            most *= 2;
        }
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
    pub fn rank_alone(&self, slots: &[Slot], shop: &Shop) -> Result<Option<usize>, SearchError> {
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
