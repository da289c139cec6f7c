//! The smallest single changes of a sheet that admit a candidate.
//!
//! For each key that can be moved the nearest value on either side with which there is a candidate,
//! values chosen again. Feasibility is not monotone in any key (model page, section 6), so
//! nothing is concluded from one value to another. Values are looked at on a grid that goes away from
//! the sheet's own; between the first that admits a candidate and its neighbour the nearer end is
//! refined:
//!
//! * with a candidate's parts and values fixed, its checks are solved for the key. Where there is a
//!   candidate at the solution and none just short of it, the change is *exact*;
//! * where values are chosen otherwise in between, the interval is halved, a candidate being looked for
//!   at each half. Such a change is a *bracket*.
//!
//! On the way any candidate will do; the best is searched for once, at the value that is told.

use crate::check_set::CheckSet;
use crate::company::Company;
use crate::fixed::Fixed;
use crate::lever::{Follows, Lever};
use crate::limits::Limits;
use crate::probe::{Admitted, Market, best};
use crate::scout::{
    Driver, Known, OF_DRIVE, OF_MEETING, OF_POWER, OF_REFERENCE, OF_SUPPLY, Power, Unsuited,
    drivers_of, find_knowing, powers,
};
use crate::survey::Survey;
use circuit::check::Check;
use circuit::rail::Rail;
use quantity::notation::Unit;
use rayon::prelude::*;
use select::SearchError;
use select::problem::Problem;
use sheet::bounds::{Bounds, End};

/// A way in which a key can be moved.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Side {
    /// To a lesser value.
    Below,
    /// To a greater value.
    Above,
}

/// How near the value of a change is known.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Threshold {
    /// A check of the candidate, solved for the key, decides.
    Exact {
        /// The figure from which on the check holds, in the unit of the key.
        at: f64,
        /// Just short of it, by [`JUST_SHORT`]: nothing qualifies here.
        short: f64,
        /// The check that decides.
        check: Check,
    },
    /// Nothing qualifies at `short`, a candidate does at the change's value.
    Bracket {
        /// The nearer end, in the unit of the key.
        short: f64,
    },
}

/// The nearest value of one key, on one side of the sheet's own, that admits a candidate.
#[derive(Debug, Clone, PartialEq)]
pub struct Change {
    /// Which way.
    pub side: Side,
    /// A value that admits a candidate, in the unit of the key, rounded to the side that holds.
    pub value: f64,
    /// How near it is.
    pub threshold: Threshold,
    /// The best candidate with this value.
    pub candidate: Admitted,
}

/// What moving one key does.
#[derive(Debug, Clone)]
pub struct KeyChanges {
    /// The key.
    pub lever: &'static Lever,
    /// The sheet's own value, in the unit of the key; None where it has none.
    pub from: Option<f64>,
    /// The nearest values, at most one on each side.
    pub changes: Vec<Change>,
    /// False where every combination fails in some check that the key does not touch: then no value
    /// was tried, for none would do.
    pub was_tried: bool,
}

/// Just short of a threshold: nearer to the sheet's own value by this share of the threshold, or of
/// its distance from the neighbour that admits nothing where that is more.
pub const JUST_SHORT: f64 = 1e-7;

/// A candidate is looked for at most so often for each side of a key.
pub const MOST_PROBES: usize = 64;

/// A bracket is narrowed until its ends differ by this share, as long as probes are left.
const NARROW: f64 = 1e-4;

/// Digits to which values are rounded for people; more where fewer would overshoot the range.
const DIGITS: [i32; 4] = [4, 6, 8, 10];

/// Shares of the sheet's own value by which a grid goes up.
const UP: [f64; 20] = [
    0.002, 0.005, 0.01, 0.02, 0.03, 0.05, 0.075, 0.1, 0.15, 0.2, 0.3, 0.4, 0.6, 0.8, 1.0, 1.5, 2.0,
    3.0, 5.0, 9.0,
];

/// Shares of the sheet's own value by which a grid goes down.
const DOWN: [f64; 20] = [
    0.002, 0.005, 0.01, 0.02, 0.03, 0.05, 0.075, 0.1, 0.15, 0.2, 0.25, 0.3, 0.4, 0.5, 0.6, 0.7,
    0.8, 0.9, 0.95, 0.99,
];

/// Degrees by which the grid of a temperature goes away.
const DEGREES: [f64; 15] =
    [0.5, 1.0, 2.0, 3.0, 5.0, 7.5, 10.0, 15.0, 20.0, 25.0, 30.0, 40.0, 50.0, 60.0, 80.0];

/// A grid that comes down from no limit at all: for durations in s and for sinks in °C/W.
const FROM_ABOVE: [f64; 19] = [
    100.0, 50.0, 30.0, 20.0, 15.0, 10.0, 7.0, 5.0, 3.0, 2.0, 1.0, 0.5, 0.2, 0.1, 0.05, 0.02, 0.01,
    0.005, 0.001,
];

/// A grid that goes up from 0, in V or A.
const FROM_ZERO: [f64; 14] =
    [1e-7, 1e-6, 1e-5, 5e-5, 1e-4, 2e-4, 5e-4, 1e-3, 2e-3, 5e-3, 1e-2, 2e-2, 5e-2, 0.1];

/// What each of these keys can do for the rail of a problem for which nothing qualifies.
///
/// `survey`, of the same problem, spares keys that touch too little. The keys are looked at side by
/// side.
///
/// # Errors
/// What the search gives up with.
pub fn changes(
    market: &(impl Market + Sync),
    follows: Follows,
    levers: &[&'static Lever],
    survey: &Survey<'_>,
) -> Result<Vec<KeyChanges>, SearchError> {
    let at_rest = AtRest::new(survey.company());
    let rail = survey.company().rail();
    let of_key = |&lever: &&'static Lever| {
        let from = lever.value(rail);
        let was_tried = lever.moves_eligibility || survey.fails_within(lever.touches);
        let sides: &[Side] = if was_tried { &[Side::Below, Side::Above] } else { &[] };
        let nearest = |&side: &Side| {
            let at_rest = &at_rest;
            Walk { market, at_rest, rail, follows, lever, from, side, probes: 0 }.nearest()
        };
        let found: Result<Vec<Option<Change>>, SearchError> =
            sides.par_iter().map(nearest).collect();
        let changes = found?.into_iter().flatten().collect();
        Ok(KeyChanges { lever, from, changes, was_tried })
    };
    levers.par_iter().map(of_key).collect()
}

/// What stands at the rail as it is, for keys that leave it alone.
struct AtRest<'b, 'p> {
    company: &'b Company<'p>,
    powers: Vec<Power>,
    drivers: Vec<Driver>,
    unsuited: Unsuited,
}

impl<'b, 'p> AtRest<'b, 'p> {
    fn new(company: &'b Company<'p>) -> Self {
        let powers = powers(company, &Limits::ALL);
        let drivers = drivers_of(company, &Limits::ALL, &powers);
        Self { company, powers, drivers, unsuited: Unsuited::default() }
    }

    /// What stays as it is when a key moves: what meets only checks that the key does not touch.
    fn known(&self, lever: &Lever) -> Known<'_> {
        if lever.moves_eligibility {
            return Known::default();
        }
        let moves = |checks: CheckSet| lever.touches.meets(checks);
        let moves_drive = moves(OF_POWER) || moves(OF_DRIVE) || moves(OF_SUPPLY);
        Known {
            powers: (!moves(OF_POWER)).then_some(&self.powers[..]),
            drivers: (!moves_drive).then_some(&self.drivers[..]),
            unsuited: (!moves(OF_REFERENCE.and(OF_MEETING))).then_some(&self.unsuited),
        }
    }
}

/// The values of a grid, nearest first, within the bounds and with a closed end of theirs.
fn grid(lever: &Lever, from: Option<f64>, side: Side, bounds: Bounds) -> Vec<f64> {
    let mut values: Vec<f64> = match (from, side) {
        (None, Side::Below) => FROM_ABOVE.to_vec(),
        (None, Side::Above) => Vec::new(),
        (Some(from), Side::Below) if from == f64::INFINITY => FROM_ABOVE.to_vec(),
        (Some(from), side) if lever.key.unit == Unit::Celsius => {
            let sign = if side == Side::Above { 1.0 } else { -1.0 };
            DEGREES.iter().map(|d| from + sign * d).collect()
        }
        (Some(0.0), Side::Above) => FROM_ZERO.to_vec(),
        (Some(from), Side::Above) => UP.iter().map(|s| from * (1.0 + s)).collect(),
        (Some(from), Side::Below) => DOWN.iter().map(|s| from * (1.0 - s)).collect(),
    };
    values.retain(|&v| bounds.contain(v));
    let end = match side {
        Side::Below => bounds.low,
        Side::Above => bounds.high,
    };
    if let Some(End::Closed(end)) = end
        && from != Some(end)
        && (from.is_some() || side == Side::Below)
        && values.last() != Some(&end)
    {
        values.push(end);
    }
    values
}

/// The search for the nearest value on one side.
struct Walk<'w, 'p, M> {
    market: &'w M,
    at_rest: &'w AtRest<'w, 'p>,
    rail: &'w Rail,
    follows: Follows,
    lever: &'static Lever,
    from: Option<f64>,
    side: Side,
    probes: usize,
}

/// Where the checks of a candidate, its parts and values fixed, begin to hold.
#[derive(Debug, Clone, Copy)]
struct Solution {
    at: f64,
    check: Check,
}

/// A value that admits a candidate and, where the checks of that one can be solved for the key, the
/// solution.
#[derive(Debug, Clone, Copy)]
struct Found {
    value: f64,
    solution: Option<Solution>,
}

impl<M: Market> Walk<'_, '_, M> {
    fn moved(&self, value: f64) -> Rail {
        self.lever.moved(self.rail, value, self.follows)
    }

    /// Looks for any candidate at a value. Between it and `short`, at which nothing qualified, the
    /// candidate's checks are solved for the key.
    fn probe(&mut self, value: f64, short: Option<f64>) -> Option<Found> {
        self.probes += 1;
        let rail = self.moved(value);
        let look = |problem: &Problem<'_>| {
            let company = Company::new(problem);
            let known = self.at_rest.known(self.lever);
            let places = find_knowing(&company, &Limits::ALL, known)?;
            let solution = short.and_then(|short| {
                let fixed = Fixed::new(&company.chosen(&places)?, problem)?;
                self.solve(&fixed, short, value)
            });
            Some(Found { value, solution })
        };
        if self.lever.moves_eligibility {
            self.market.with_problem(&rail, look)
        } else {
            look(&Problem { rail: &rail, ..self.at_rest.company.problem.clone() })
        }
    }

    /// The figure nearest to `short` at which all checks hold; None where they hold at `short` too.
    fn solve(&self, fixed: &Fixed<'_>, short: f64, holds: f64) -> Option<Solution> {
        let (mut out, mut within) = (short, holds);
        let mut check = fixed.fails(&self.moved(out))?;
        loop {
            let middle = out + (within - out) / 2.0;
            if middle == out || middle == within {
                return Some(Solution { at: within, check });
            }
            match fixed.fails(&self.moved(middle)) {
                Some(fails) => (out, check) = (middle, fails),
                None => within = middle,
            }
        }
    }

    fn nearest(&mut self) -> Result<Option<Change>, SearchError> {
        let bounds = self.lever.bounds(self.rail, self.follows);
        // Nothing is nearer than the sheet's own value, at which nothing qualifies.
        let mut short = self.from.filter(|from| from.is_finite());
        for value in grid(self.lever, self.from, self.side, bounds) {
            if let Some(found) = self.probe(value, short) {
                let (value, threshold) = self.refine(found, short);
                return self.change(value, threshold);
            }
            short = Some(value);
        }
        Ok(None)
    }

    /// The nearer end between a value that admits a candidate and one that does not.
    fn refine(&mut self, mut found: Found, short: Option<f64>) -> (f64, Threshold) {
        // The least change there is: nothing lies between it and no limit at all.
        let Some(mut short) = short else {
            let threshold = Threshold::Bracket { short: self.from.unwrap_or(f64::INFINITY) };
            return (found.value, threshold);
        };
        while self.probes < MOST_PROBES {
            let lies_between =
                |s: &Solution| (s.at - short) * (found.value - short) > 0.0 || s.at == found.value;
            if let Some(solution) = found.solution.filter(lies_between) {
                // At 0 a share of the figure itself would be no step at all.
                let size = solution.at.abs().max((solution.at - short).abs());
                let before = solution.at + (short - solution.at).signum() * JUST_SHORT * size;
                let before =
                    if (before - short) * (solution.at - short) <= 0.0 { short } else { before };
                let nearer = if before == short { None } else { self.probe(before, Some(short)) };
                if let Some(nearer) = nearer {
                    found = nearer;
                    // Many candidates may begin to hold one just before the other.
                    self.halve(&mut found, &mut short);
                } else if solution.at == found.value || self.probe(solution.at, None).is_some() {
                    let Solution { at, check } = solution;
                    let threshold = Threshold::Exact { at, short: before, check };
                    return (self.rounded(at), threshold);
                } else {
                    // Other values are chosen between the solution and the candidate.
                    short = solution.at;
                    found.solution = None;
                }
                continue;
            }
            if (found.value - short).abs() <= NARROW * found.value.abs() {
                break;
            }
            self.halve(&mut found, &mut short);
        }
        (self.rounded(found.value), Threshold::Bracket { short })
    }

    /// Looks half-way between a value that admits a candidate and one that does not.
    fn halve(&mut self, found: &mut Found, short: &mut f64) {
        let middle = *short + (found.value - *short) / 2.0;
        if middle == *short || middle == found.value {
            return;
        }
        match self.probe(middle, Some(*short)) {
            Some(nearer) => *found = nearer,
            None => *short = middle,
        }
    }

    /// The change to a value, with the best candidate there.
    fn change(&self, value: f64, threshold: Threshold) -> Result<Option<Change>, SearchError> {
        let candidate = best(self.market, &self.moved(value))?;
        Ok(candidate.map(|candidate| Change { side: self.side, value, threshold, candidate }))
    }

    /// The value rounded away from the sheet's own as far as that still admits a candidate.
    fn rounded(&mut self, admits: f64) -> f64 {
        let bounds = self.lever.bounds(self.rail, self.follows);
        for digits in DIGITS {
            let value = round_away(admits, digits, self.side);
            if value == admits {
                break;
            }
            if bounds.contain(value) && self.probe(value, None).is_some() {
                return value;
            }
        }
        admits
    }
}

/// Rounds to so many significant digits, upwards or downwards.
pub(crate) fn round_toward(x: f64, digits: i32, upwards: bool) -> f64 {
    round_away(x, digits, if upwards { Side::Above } else { Side::Below })
}

/// Rounds to so many significant digits, on a side of a key: upwards or downwards.
fn round_away(x: f64, digits: i32, side: Side) -> f64 {
    if x == 0.0 || !x.is_finite() {
        return x;
    }
    let exponent = digits - 1 - x.abs().log10().floor() as i32;
    // A decimal text gives the very number that a person would write.
    let text = |whole: f64| format!("{whole}e{}", -exponent).parse().unwrap_or(x);
    let scaled = x * 10f64.powi(exponent);
    match side {
        Side::Above => [scaled.floor(), scaled.ceil(), scaled.ceil() + 1.0]
            .into_iter()
            .map(text)
            .find(|&rounded| rounded >= x)
            .unwrap_or(x),
        Side::Below => [scaled.ceil(), scaled.floor(), scaled.floor() - 1.0]
            .into_iter()
            .map(text)
            .find(|&rounded| rounded <= x)
            .unwrap_or(x),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn rounding_goes_to_the_side_that_holds() {
        assert_eq!(round_away(12.234_51, 4, Side::Above), 12.24);
        assert_eq!(round_away(12.234_51, 4, Side::Below), 12.23);
        assert_eq!(round_away(12.23, 4, Side::Above), 12.23);
        assert_eq!(round_away(-7.3218, 3, Side::Below), -7.33);
        assert_eq!(round_away(0.000_512_34, 4, Side::Below), 0.000_512_3);
    }
}
