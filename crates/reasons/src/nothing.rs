//! Why nothing qualifies.

use crate::change::{KeyChanges, changes};
use crate::check_set::CheckSet;
use crate::conflict::Conflict;
use crate::lever::{self, Follows, Lever};
use crate::losses::{SlotLosses, losses};
use crate::probe::ShopMarket;
use crate::remedy::{Remedy, remedies};
use crate::survey::{Miss, Survey};
use circuit::slot::Slot;
use select::SearchError;
use select::problem::Problem;

/// Combinations that fail in fewest checks are told at most so many.
const MOST_MISSES: usize = 3;

/// Why nothing qualifies for a sheet.
#[derive(Debug, Clone)]
pub struct Nothing {
    /// What the parts of each slot are lost to.
    pub losses: Vec<SlotLosses>,
    /// A smallest conflict; None where a combination holds every check after all.
    pub conflict: Option<Conflict>,
    /// Combinations that fail in fewest checks.
    pub nearest: Vec<Miss>,
    /// What moving each key by itself does.
    pub keys: Vec<KeyChanges>,
    /// What a designer could do.
    pub remedies: Vec<Remedy>,
}

/// Some combination holds every check. Unlike a search for the best it ends at the first that it meets.
pub fn something_qualifies(problem: &Problem<'_>) -> bool {
    Survey::new(problem).fails_within(CheckSet::EMPTY)
}

/// The reasons why nothing qualifies; `problem` is that of the market's sheet.
///
/// # Errors
/// What the search gives up with.
pub fn why_nothing(market: &ShopMarket<'_>, problem: &Problem<'_>) -> Result<Nothing, SearchError> {
    let survey = Survey::new(problem);
    let (losses, reasons) = rayon::join(
        || losses(problem),
        || {
            let conflict = Conflict::smallest(&survey, problem.rail);
            let nearest = survey.nearest(MOST_MISSES);
            let follows = Follows::of(market.sheet);
            let keys = changes(market, follows, &levers(market), &survey)?;
            let remedies = remedies(problem, &survey, &keys);
            Ok((conflict, nearest, keys, remedies))
        },
    );
    let (conflict, nearest, keys, remedies) = reasons?;
    Ok(Nothing { losses, conflict, nearest, keys, remedies })
}

/// The keys of the market's sheet that can be moved.
pub(crate) fn levers(market: &ShopMarket<'_>) -> Vec<&'static Lever> {
    let pinned = market.sheet.parts.pins[Slot::Heatsink as usize].is_some();
    let only_sink = market.only.is_some_and(|(slot, ..)| slot == Slot::Heatsink);
    lever::on_rail(&market.sheet.rail, pinned || only_sink).collect()
}
