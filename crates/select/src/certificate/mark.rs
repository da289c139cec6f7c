//! The last row of a list, and what surely ranks after it.

use crate::candidate::Candidate;
use crate::grove::Share;
use crate::problem::{Ground, Weights};
use crate::score::score;
use circuit::merit;
use circuit::rail::Rail;
use circuit::slot::Slot;
use quantity::digits::rounded;

/// Places by name in the order of [`Slot::BY_NAME`], or the least of a group; 0 for a slot without a
/// part, and for a slot of another side.
pub(super) type Names = [u32; Slot::COUNT];

/// The names of two sides, which have no slot in common.
pub(super) fn together(a: Names, b: Names) -> Names {
    std::array::from_fn(|i| a[i].max(b[i]))
}

/// The last row of a list that is full; a list that is not full has none, and nothing ranks after
/// its end.
pub(super) struct Mark {
    rail: Rail,
    weights: Weights,
    last: Option<Last>,
    /// The least place by name of each slot.
    first_names: Names,
}

struct Last {
    score: f64,
    key: Key,
}

#[derive(PartialEq, PartialOrd)]
struct Key {
    score: f64,
    cost: f64,
    stress: f64,
    loss: f64,
    names: Names,
}

impl Mark {
    pub fn new(ground: &Ground<'_>, candidates: &[Candidate], top: usize) -> Self {
        let is_full = candidates.len() >= top;
        let last = candidates.last().filter(|_| is_full).map(|last| Last {
            score: last.score,
            key: Key {
                score: rounded(last.score),
                cost: rounded(last.cost),
                stress: rounded(last.stress),
                loss: rounded(last.loss),
                names: Slot::BY_NAME
                    .map(|slot| last.place(slot).map_or(0, |place| ground.ranks.of(slot, place))),
            },
        });
        let first_names = Slot::BY_NAME.map(|slot| match slot {
            Slot::Heatsink => 0,
            Slot::Pot => u32::from(ground.rail().is_adjustable()),
            _ => 1,
        });
        let weights = ground.problem.weights;
        Self { rail: ground.rail().clone(), weights, last, first_names }
    }

    /// Every combination ranks after the last row whose three sides each add at least one of the
    /// shares given for it and whose parts come no sooner by name than `names` (0: any part).
    ///
    /// Sums are made in the order in which a candidate's own are made, so that the sum of lesser
    /// figures is never the greater by a last bit.
    pub fn is_after(&self, r: &[Share], a: &[Share], p: &[Share], names: Names) -> bool {
        let Some(last) = &self.last else { return false };
        let names = together(names, self.first_names);
        r.iter().all(|r| {
            a.iter().all(|a| {
                let beside = r.beside(a);
                let loss = merit::loss(&self.rail, beside.current_a);
                p.iter().all(|p| {
                    let whole = beside.beside(p);
                    let score = score(&self.weights, whole.cost, loss, whole.stress);
                    // So far behind that ten digits can't hide it.
                    score > last.score * (1.0 + 1e-8) || {
                        let key = Key {
                            score: rounded(score),
                            cost: rounded(whole.cost),
                            stress: rounded(whole.stress),
                            loss: rounded(loss),
                            names,
                        };
                        key > last.key
                    }
                })
            })
        })
    }
}
