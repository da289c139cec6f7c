//! Remedies that a designer thinks of, where they would help.

use crate::change::{KeyChanges, Side};
use crate::check_set::CheckSet;
use crate::company::at;
use crate::survey::{Miss, Survey};
use circuit::check::{Check, Finding};
use circuit::parts::{Transistor, Zener};
use circuit::pass::{Duty, PassFigures};
use circuit::rail::Rail;
use circuit::slot::Slot;
use select::SearchError;
use select::problem::{Part, Problem};
use select::ranking::{NO_SPREAD, shortlist};
use sheet::keys;

/// A remedy that would help.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Remedy {
    /// Zeners like those of the catalog with this tolerance or a better one, %: the search was run
    /// with them and found a candidate.
    TighterZener {
        /// The widest of the usual tolerances that admits a candidate, %.
        tol_pct: f64,
    },
    /// A combination fails in nothing but the error of its output, which a trimmer on the board would
    /// take out. The tool does not cover trimmed outputs.
    TrimmedOutput,
    /// A combination fails in nothing but the base current of a single transistor, and its headroom
    /// has room for a second base-emitter voltage.
    Darlington,
    /// A heatsink that is not in the catalog: the search was run with it and found a candidate.
    LargerSink {
        /// Its thermal resistance at most, °C/W.
        at_most_c_per_w: f64,
    },
    /// A lower highest feed: the search was run with it and found a candidate.
    LowerFeed {
        /// `feed.max_v` at most.
        at_most_v: f64,
    },
    /// A higher valley of the feed: the search was run with it and found a candidate.
    HigherValley {
        /// `feed.min_v` at least.
        at_least_v: f64,
    },
}

/// Tolerances in which zeners are sold, %.
const USUAL_TOLERANCES_PCT: [f64; 6] = [5.0, 2.0, 1.0, 0.5, 0.2, 0.1];

/// What the tolerance of the reference weighs on.
const OF_TOLERANCE: CheckSet = CheckSet::of(&[
    Check::OutputError,
    Check::ReachHigh,
    Check::ReachLow,
    Check::LowStop,
    Check::Ceiling,
]);

/// The remedies that would help a rail for which nothing qualifies.
///
/// # Errors
/// What the search gives up with.
pub fn remedies(
    problem: &Problem<'_>,
    survey: Option<&Survey>,
    keys: &[KeyChanges],
) -> Result<Vec<Remedy>, SearchError> {
    let mut found = Vec::new();
    let misses = survey.map_or(&[][..], |survey| &survey.misses);
    let misses_only = |checks: CheckSet| misses.iter().any(|miss| miss.failing.is_within(checks));
    if misses_only(OF_TOLERANCE) {
        found.extend(tighter_zener(problem)?);
    }
    if misses_only(CheckSet::of(&[Check::OutputError])) {
        found.push(Remedy::TrimmedOutput);
    }
    let rail = problem.rail;
    let lacks_gain = misses.iter().any(|miss| {
        let transistor = at(&miss.places, Slot::Pass).and_then(|t| problem.transistors.get(t));
        miss.failing.contains(Check::BaseDrive)
            && miss.failing.is_within(CheckSet::of(&[Check::BaseDrive, Check::AmpJunction]))
            && transistor.is_some_and(|t| {
                t.part.figures.junctions == 1
                    && has_room_for_second_junction(t.part.figures, miss, rail)
            })
    });
    found.extend(lacks_gain.then_some(Remedy::Darlington));
    let value = |key: &keys::Key, side: Side| {
        let of_key = keys.iter().find(|k| k.lever.key == key)?;
        of_key.changes.iter().find(|c| c.side == side).map(|c| c.value)
    };
    let sink = value(&keys::THERMAL_SINK_C_PER_W, Side::Below);
    found.extend(sink.map(|at_most_c_per_w| Remedy::LargerSink { at_most_c_per_w }));
    let lower = value(&keys::FEED_MAX_V, Side::Below);
    found.extend(lower.map(|at_most_v| Remedy::LowerFeed { at_most_v }));
    let higher = value(&keys::FEED_MIN_V, Side::Above);
    found.extend(higher.map(|at_least_v| Remedy::HigherValley { at_least_v }));
    Ok(found)
}

/// A darlington's second base-emitter voltage, taken to be as large as the first, leaves the headroom
/// checks of this combination holding. Its saturation voltage is higher by as much.
fn has_room_for_second_junction(transistor: &Transistor, miss: &Miss, rail: &Rail) -> bool {
    let second_v = PassFigures::new(transistor, &Duty::new(rail), rail).vbe_hi_v;
    let headroom = [Check::SwingHigh, Check::Dropout];
    miss.findings
        .iter()
        .filter(|finding| headroom.contains(&finding.check))
        .all(|finding| Finding { asked: finding.asked + second_v, ..*finding }.holds())
}

/// The widest usual tolerance with which some zener, else as it is, would be in a candidate.
fn tighter_zener(problem: &Problem<'_>) -> Result<Option<Remedy>, SearchError> {
    for tol_pct in USUAL_TOLERANCES_PCT {
        let tighter: Vec<Zener> = problem
            .zeners
            .iter()
            .map(|z| Zener { tol: z.figures.tol.min(tol_pct / 100.0), ..*z.figures })
            .collect();
        let zeners = problem.zeners.iter().zip(&tighter);
        let zeners = zeners.map(|(z, figures)| Part { figures, ..*z }).collect();
        let with_them = Problem { zeners, ..problem.clone() };
        if !shortlist(&with_them, 1, &NO_SPREAD)?.is_empty() {
            return Ok(Some(Remedy::TighterZener { tol_pct }));
        }
    }
    Ok(None)
}
