//! Lists and designs as what pictures are drawn from.

use crate::identity;
use crate::shortlist::{Candidate, Shortlist};
use circuit::rail::Rail;
use design::keys::Resistor;
use design::parts::Parts;
use picture::{Front, FrontPoint, Subject};
use purchase::piece;

/// The front as points, in its order. `front` tells its candidates, `list` the rows that are shown.
pub fn points(front: &Shortlist<'_>, list: &Shortlist<'_>) -> Vec<FrontPoint> {
    let rank = |id: &str| list.candidates.iter().find(|c| c.id == id).map(|c| c.rank);
    front.candidates.iter().map(|c| point(c, rank(&c.id))).collect()
}

/// The front with a candidate of the list marked.
pub fn front_of(points: &[FrontPoint], list: &Shortlist<'_>, marked: &Candidate<'_>) -> Front {
    Front {
        points: points.to_vec(),
        marked: Some(point(marked, Some(marked.rank))),
        currency: list.currency.map(str::to_owned),
    }
}

/// The front with the parts of a design marked, where their cost is known.
pub fn front_with(
    points: &[FrontPoint],
    parts: &Parts<'_>,
    subject: &Subject<'_>,
    boards: u64,
    currency: Option<&str>,
) -> Front {
    let id = id_of(parts, subject.rail);
    let rank = points.iter().find(|p| p.id == id).and_then(|p| p.rank);
    let marked = board_cost(parts, subject.rail, boards).map(|cost| FrontPoint {
        id,
        rank,
        cost,
        loss: subject.proof.loss,
        stress: subject.proof.stress.utilisation,
    });
    Front { points: points.to_vec(), marked, currency: currency.map(str::to_owned) }
}

/// What the pieces of one board cost when `boards` are built, each at its own price; None where a part
/// has none.
fn board_cost(parts: &Parts<'_>, rail: &Rail, boards: u64) -> Option<f64> {
    let pieces = piece::of_design(parts, rail.is_adjustable(), 0);
    pieces.iter().map(|piece| Some(piece.article.price?.at(boards))).sum()
}

fn point(candidate: &Candidate<'_>, rank: Option<usize>) -> FrontPoint {
    FrontPoint {
        id: candidate.id.clone(),
        rank,
        cost: candidate.cost.0,
        loss: candidate.loss.0,
        stress: candidate.stress.0,
    }
}

/// The id that these parts and values have as a candidate.
pub fn id_of(parts: &Parts<'_>, rail: &Rail) -> String {
    let upper = if rail.is_adjustable() { Resistor::Rx } else { Resistor::Rf };
    let places = parts.places();
    let named = places.iter().map(|p| (p.slot.name(), p.maker, p.part));
    // In the order in which a candidate's values are named.
    let mut values = vec![(Resistor::Rz.key(), parts.rz_ohm), (Resistor::Ri.key(), parts.ri_ohm)];
    values.insert(if rail.is_adjustable() { 2 } else { 1 }, (upper.key(), parts.upper_ohm));
    identity::id(named, values.into_iter())
}
