//! What pictures are drawn from.

use circuit::check::{Check, Finding};
use circuit::rail::Rail;
use circuit::slot::Slot;
use design::parts::Parts;
use design::proof::{AtRail, Fitted};
use select::candidate::Proof;

/// A set of parts with its values at a rail, complete enough for every check.
#[derive(Debug, Clone)]
pub struct Subject<'a> {
    /// The requirement.
    pub rail: &'a Rail,
    /// The parts' figures.
    pub fitted: Fitted<'a>,
    /// The parts under the conditions of the rail.
    pub at_rail: AtRail<'a>,
    /// Every check.
    pub proof: Proof,
    /// The name of the part in each slot that has one.
    names: Vec<(Slot, &'a str)>,
}

impl<'a> Subject<'a> {
    /// The subject of these parts; None where a blank cell or a wrong polarity leaves checks open.
    pub fn new(parts: &Parts<'a>, rail: &'a Rail) -> Option<Self> {
        let fitted = Fitted::new(parts, rail)?;
        let at_rail = AtRail::new(&fitted, parts, rail)?;
        let proof = at_rail.prove();
        let names = parts.places().iter().map(|place| (place.slot, place.part)).collect();
        Some(Self { rail, fitted, at_rail, proof, names })
    }

    /// The name of the slot's part; None where the slot has none.
    pub fn name(&self, slot: Slot) -> Option<&'a str> {
        self.names.iter().find(|(of, _)| *of == slot).map(|(_, name)| *name)
    }

    /// What a check found; None where the rail does not call for it.
    pub fn finding(&self, check: Check) -> Option<&Finding> {
        self.proof.findings.iter().find(|f| f.check == check)
    }
}

/// A set of parts among others, by what it is ranked by.
#[derive(Debug, Clone, PartialEq)]
pub struct FrontPoint {
    /// Its id.
    pub id: String,
    /// Its rank in the list that is shown; None where it is not in it.
    pub rank: Option<usize>,
    /// Cost of one board.
    pub cost: f64,
    /// 1/η − 1.
    pub loss: f64,
    /// The greatest utilisation of the damage checks.
    pub stress: f64,
}

/// The front, with one set of parts marked.
#[derive(Debug, Clone, PartialEq)]
pub struct Front {
    /// Every set on the front, by rank.
    pub points: Vec<FrontPoint>,
    /// The one to mark, on the front or off it; None: none is marked.
    pub marked: Option<FrontPoint>,
    /// The currency of costs.
    pub currency: Option<String>,
}
