//! The search without any cleverness: every combination, every check, a full sort.
//!
//! Model page, sections 4 (which values are taken) and 5 (candidates, ranking, counts).

mod combinations;
mod order;
mod values;

pub use combinations::{Combination, Fitted, Mounting, each_combination};
pub use order::{front, rank_order, spread};
pub use values::{PlainDivider, PlainRz, State, plain_divider, plain_rz};

use circuit::slot::Slot;
use select::problem::{Problem, Weights};
use std::collections::BTreeMap;

/// A feasible set of parts with its values and figures.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct PlainCandidate {
    /// For each slot (`Slot as usize`) the place of its part in the problem's list for that slot;
    /// None where the slot holds no part (fixed output: no pot; unmounted or own sink: no heatsink).
    pub places: [Option<usize>; Slot::COUNT],
    /// RZ, Ω.
    pub rz_ohm: f64,
    /// RF of a fixed output, RX of an adjustable one, Ω; 0 for a link.
    pub upper_ohm: f64,
    /// RI, Ω.
    pub ri_ohm: f64,
    /// Cost of one board.
    pub cost: f64,
    /// 1/η − 1.
    pub loss: f64,
    /// Greatest utilisation of the damage checks.
    pub stress: f64,
    /// cost^wc · loss^wl · stress^ws.
    pub score: f64,
}

/// What became of all combinations.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct Counts {
    /// All combinations.
    pub covered: u64,
    /// Those for which every check holds.
    pub feasible: u64,
    /// The others by what they were lost to: `heatsink-fit`, or the first check that fails.
    pub lost: BTreeMap<String, u64>,
}

/// The name under which combinations are counted whose heatsink does not fit.
pub const HEATSINK_FIT: &str = "heatsink-fit";

/// Everything that the plain way finds out about a problem.
#[derive(Debug, Clone, PartialEq)]
pub struct Plain {
    /// Every feasible candidate in rank order.
    pub ranked: Vec<PlainCandidate>,
    /// What became of all combinations.
    pub counts: Counts,
}

impl Plain {
    /// Tries every combination of a problem and sorts those that hold.
    ///
    /// Every line must hold at least one value, as every line of a catalog does: a combination with
    /// an empty one could not be counted under any check.
    pub fn new(problem: &Problem<'_>) -> Self {
        let mut ranked = Vec::new();
        let mut counts = Counts::default();
        each_combination(problem, |combination| {
            counts.covered += 1;
            match lost_to(combination) {
                Some(cause) => *counts.lost.entry(cause.to_owned()).or_insert(0) += 1,
                None => {
                    counts.feasible += 1;
                    ranked.extend(candidate(combination, &problem.weights));
                }
            }
        });
        ranked.sort_by(|a, b| rank_order(problem, a, b));
        Self { ranked, counts }
    }

    /// The first `n` of the ranking; all of it where it is shorter.
    pub fn top(&self, n: usize) -> &[PlainCandidate] {
        &self.ranked[..n.min(self.ranked.len())]
    }
}

/// What a combination is lost to; None for a feasible one.
fn lost_to(combination: &Combination) -> Option<&'static str> {
    match &combination.fitted {
        None => Some(HEATSINK_FIT),
        Some(fitted) => fitted.findings.iter().find(|f| !f.holds()).map(|f| f.check.name()),
    }
}

/// A feasible combination as a candidate. None where it has no mounting or no divider, which no
/// feasible one lacks.
fn candidate(combination: &Combination, weights: &Weights) -> Option<PlainCandidate> {
    let fitted = combination.fitted.as_ref()?;
    let divider = fitted.divider?;
    let (cost, loss, stress) = (fitted.cost, fitted.loss?, fitted.stress());
    Some(PlainCandidate {
        places: combination.places,
        rz_ohm: fitted.rz.bias.rz.ohm,
        upper_ohm: divider.upper.ohm,
        ri_ohm: divider.ri.ohm,
        cost,
        loss,
        stress,
        // In Rust as on the page 0^0 is 1.
        score: cost.powf(weights.cost) * loss.powf(weights.loss) * stress.powf(weights.stress),
    })
}
