//! Remedies that a designer thinks of, where they would help.

use crate::change::{KeyChanges, Side};
use crate::check_set::CheckSet;
use crate::company::Company;
use crate::limits::Limits;
use crate::scout::find;
use crate::survey::Survey;
use circuit::check::Check;
use circuit::parts::Zener;
use select::problem::{Part, Problem};
use sheet::keys;

/// A remedy that would help.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Remedy {
    /// Zeners like those of the catalog with this tolerance or a better one, %: with them there is a
    /// candidate.
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
pub fn remedies(problem: &Problem<'_>, survey: &Survey<'_>, keys: &[KeyChanges]) -> Vec<Remedy> {
    let mut found = Vec::new();
    if survey.fails_within(OF_TOLERANCE) {
        found.extend(tighter_zener(problem));
    }
    if survey.fails_within(CheckSet::of(&[Check::OutputError])) {
        found.push(Remedy::TrimmedOutput);
    }
    found.extend(lacks_gain(problem, survey).then_some(Remedy::Darlington));
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
    found
}

/// Only the base current of a single transistor is too much for the amplifier, or heats it too much, and
/// everything else would hold with a second base-emitter voltage.
fn lacks_gain(problem: &Problem<'_>, survey: &Survey<'_>) -> bool {
    let of_gain = CheckSet::of(&[Check::BaseDrive, Check::AmpJunction]);
    survey.fails_within(of_gain) && {
        let others = Limits::asking(CheckSet::ALL.without(of_gain));
        find(&Company::with_second_junction(problem), &others).is_some()
    }
}

/// The widest usual tolerance with which some zener, else as it is, would be in a candidate.
fn tighter_zener(problem: &Problem<'_>) -> Option<Remedy> {
    let admits = |tol_pct: &f64| {
        let tighter: Vec<Zener> = problem
            .zeners
            .iter()
            .map(|z| Zener { tol: z.figures.tol.min(tol_pct / 100.0), ..*z.figures })
            .collect();
        let zeners = problem.zeners.iter().zip(&tighter);
        let zeners = zeners.map(|(z, figures)| Part { figures, ..*z }).collect();
        let with_them = Problem { zeners, ..problem.clone() };
        find(&Company::new(&with_them), &Limits::ALL).is_some()
    };
    let tol_pct = USUAL_TOLERANCES_PCT.into_iter().find(admits)?;
    Some(Remedy::TighterZener { tol_pct })
}
