//! Why nothing qualifies.

use crate::change::{KeyChanges, changes};
use crate::conflict::Conflict;
use crate::lever::{self, Follows, Lever};
use crate::losses::{SlotLosses, losses};
use crate::probe::{Market, ShopMarket};
use crate::remedy::{Remedy, remedies};
use crate::survey::{Survey, TooMany, survey};
use circuit::slot::Slot;
use select::SearchError;
use select::problem::Problem;

/// Why nothing qualifies for a sheet.
#[derive(Debug, Clone)]
pub struct Nothing {
    /// What the parts of each slot are lost to.
    pub losses: Result<Vec<SlotLosses>, TooMany>,
    /// The least that fails of any combination.
    pub survey: Result<Survey, TooMany>,
    /// A smallest conflict; None where the combinations are too many to look through.
    pub conflict: Option<Conflict>,
    /// What moving each key by itself does.
    pub keys: Vec<KeyChanges>,
    /// What a designer could do.
    pub remedies: Vec<Remedy>,
}

/// The reasons why nothing qualifies; `problem` is that of the market's sheet.
///
/// # Errors
/// What the search gives up with.
pub fn why_nothing(market: &ShopMarket<'_>, problem: &Problem<'_>) -> Result<Nothing, SearchError> {
    let sheet = market.sheet;
    let survey = survey(problem);
    let known = survey.as_ref().ok();
    let conflict = known.and_then(|survey| Conflict::smallest(survey, problem.rail));
    let levers = levers(market);
    let keys = changes(market, &sheet.rail, Follows::of(sheet), &levers, known)?;
    let remedies = remedies(problem, known, &keys)?;
    Ok(Nothing { losses: losses(problem), survey, conflict, keys, remedies })
}

/// The keys of the market's sheet that can be moved.
pub(crate) fn levers(market: &ShopMarket<'_>) -> Vec<&'static Lever> {
    let pinned = market.sheet.parts.pins[Slot::Heatsink as usize].is_some();
    let only_sink = market.only.is_some_and(|(slot, ..)| slot == Slot::Heatsink);
    lever::on_rail(&market.sheet.rail, pinned || only_sink).collect()
}

/// The keys that change something for a market, tried one at a time, where nothing qualifies.
///
/// # Errors
/// What the search gives up with.
pub(crate) fn cures(market: &ShopMarket<'_>) -> Result<(Survey, Vec<KeyChanges>), Cures> {
    let sheet = market.sheet;
    let survey = market.with_problem(&sheet.rail, survey).map_err(Cures::TooMany)?;
    let found = changes(market, &sheet.rail, Follows::of(sheet), &levers(market), Some(&survey));
    Ok((survey, found.map_err(Cures::Search)?))
}

/// Why no cure could be looked for.
pub(crate) enum Cures {
    TooMany(TooMany),
    Search(SearchError),
}
