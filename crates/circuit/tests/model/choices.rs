//! The values that are chosen are those that trying every value finds.

use crate::parts::{Case, Dice};
use circuit::amplifier::InputError;
use circuit::assembly::{Aim, choose_divider, may_hold};
use circuit::check::{Finding, WhileHolding, Worst};
use circuit::divider::adjustable::{self, AdjustableAim};
use circuit::divider::fixed::{self, FixedAim};
use circuit::divider::{Choice, Divider, DividerCurrent};
use circuit::rail::Rail;
use circuit::reference::{
    Bias, Chosen, ZenerAtRail, bias_distance, choose_rz, chosen_rz, least_bad_rz,
};
use circuit::resistor::{LineAtRail, PotAtRail, Resistance};
use quantity::digits::{at_most, compare, rounded};
use std::cmp::Ordering;

const CASES: u64 = 6_000;

/// Zeners, lines and pots at a rail; now and then a line of one value, or none.
struct Built {
    rail: Rail,
    zener: ZenerAtRail,
    bias_line: LineAtRail,
    divider_line: LineAtRail,
    pot: PotAtRail,
}

impl Built {
    fn new(seed: u64) -> Self {
        let case = Case::new(seed);
        let mut bias_line = LineAtRail::new(&case.bias_line, &case.rail);
        if seed.is_multiple_of(50) {
            bias_line.values.truncate(usize::from(seed.is_multiple_of(100)));
        }
        Self {
            zener: ZenerAtRail::new(&case.zener, &case.rail),
            divider_line: LineAtRail::new(&case.divider_line, &case.rail),
            pot: PotAtRail::new(&case.pot, &case.rail),
            bias_line,
            rail: case.rail,
        }
    }
}

/// How often each outcome was met.
#[derive(Debug, Default)]
struct Met {
    holds: u32,
    fails: u32,
    outside: u32,
}

#[test]
fn rz_is_the_nearest_that_holds() {
    let mut met = Met::default();
    for seed in 0..CASES {
        let Built { rail, zener, bias_line, .. } = Built::new(seed);
        let target = rail.bias_a.unwrap_or(zener.zener().izt_a);
        let biases = bias_line.values.iter().map(|rz| zener.bias(*rz, &rail));
        let worst = |bias: &Bias| Worst::of(|t| zener.checks(bias, &bias_line, t));
        let larger = |a: &Bias, b: &Bias| compare(b.rz.ohm, a.rz.ohm);
        let off = |bias: &Bias| match bias.iz_nominal_a {
            a if a > 0.0 => (a / target).ln().abs(),
            _ => f64::INFINITY,
        };
        for bias in biases.clone() {
            assert_eq!(bias_distance(&zener, bias.rz.ohm, target, &rail), off(&bias));
        }
        let holding = biases.clone().filter(|bias| zener.verdict(bias, &bias_line).is_ok());
        let nearest = holding.min_by(|a, b| compare(off(a), off(b)).then(larger(a, b)));
        let least_bad = biases.min_by(|a, b| compare(worst(a), worst(b)).then(larger(a, b)));
        let chosen = choose_rz(&zener, &bias_line, &rail);
        assert_eq!(chosen.map(|(bias, _)| bias), nearest, "seed {seed}");
        assert_eq!(least_bad_rz(&zener, &bias_line, &rail), least_bad, "seed {seed}");
        match (chosen_rz(&zener, &bias_line, &rail), nearest, least_bad) {
            (Some(Chosen::Holds(bias, stress)), Some(nearest), _) => {
                met.holds += 1;
                assert_eq!(bias, nearest, "seed {seed}");
                assert_eq!(Ok(stress), zener.verdict(&bias, &bias_line), "seed {seed}");
            }
            (Some(Chosen::Fails(bias, check)), None, Some(least_bad)) => {
                met.fails += 1;
                assert_eq!(bias, least_bad, "seed {seed}");
                assert_eq!(Err(check), zener.verdict(&bias, &bias_line), "seed {seed}");
            }
            (None, None, None) => met.outside += 1,
            other => panic!("seed {seed}: {other:?}"),
        }
    }
    assert!(met.holds > 500 && met.fails > 500 && met.outside > 50, "{met:?}");
}

/// The divider's checks of either form of output.
fn checks(
    aim: &Aim,
    bias: &Bias,
    divider: &Divider,
    built: &Built,
    input: InputError,
) -> Vec<Finding> {
    let mut found = Vec::new();
    let line = &built.divider_line;
    let _ = match aim {
        Aim::Fixed(aim) => fixed::checks(aim, bias, divider, line, input, &mut found),
        Aim::Adjustable(aim) => {
            adjustable::checks(aim, bias, divider, line, &built.pot, input, &mut found)
        }
    };
    found
}

/// What makes one pair that holds better than another, and what breaks ties before the values.
fn figures(aim: &Aim, bias: &Bias, divider: &Divider, built: &Built) -> (f64, f64) {
    let input = InputError::allowance(&built.rail);
    match aim {
        Aim::Fixed(FixedAim { voltage_v: v, tolerance }) => {
            let out = fixed::output(bias, divider, input);
            let error = (out.hi_v - v).max(v - out.lo_v) / (tolerance * v);
            (error.max(0.0), (rounded(out.nominal_v) - rounded(*v)).abs())
        }
        Aim::Adjustable(AdjustableAim { from_v, to_v, .. }) => {
            let out = adjustable::output(bias, divider, &built.pot, input);
            ((out.top_v - to_v) / to_v + (from_v - out.low_v) / from_v, 0.0)
        }
    }
}

/// Every pair of the line whose RI lies in the window with the allowances.
fn pairs<'b>(bias: &'b Bias, built: &'b Built) -> impl Iterator<Item = Divider> + Clone + 'b {
    let (input, rules) = (InputError::allowance(&built.rail), &built.rail.divider);
    let in_window = move |ri: &&Resistance| {
        let lo = (bias.vz_lo_v - input.error_v) / ri.hi_ohm - input.bias_a;
        let hi = (bias.vz_hi_v + input.error_v) / ri.lo_ohm + input.bias_a;
        let current = DividerCurrent::new(bias, ri, input);
        assert_eq!((current.lo_a, current.hi_a), (lo, hi));
        at_most(rules.min_a, lo) && at_most(hi, rules.max_a)
    };
    built.divider_line.values.iter().filter(in_window).flat_map(|&ri| {
        let uppers = std::iter::once(Resistance::LINK).chain(built.divider_line.values.clone());
        uppers.map(move |upper| Divider { upper, ri })
    })
}

/// A reference that the output may suit: RZ at random, its voltage moved near the output.
fn reference(built: &Built, seed: u64) -> Option<Bias> {
    let dice = &mut Dice::new(!seed);
    let values = &built.bias_line.values;
    let rz = values.get((dice.share() * values.len() as f64) as usize)?;
    let mut bias = built.zener.bias(*rz, &built.rail);
    if dice.chance(0.7) {
        // A tight reference, so that many pairs hold and few decide.
        bias.vz_lo_v = bias.vz_nominal_v * dice.between(0.97, 0.999);
        bias.vz_hi_v = bias.vz_nominal_v * dice.between(1.001, 1.03);
    }
    (bias.vz_lo_v > 0.0).then_some(bias)
}

#[test]
fn the_divider_is_the_best_of_all_pairs() {
    let mut met = [Met::default(), Met::default()];
    for seed in 0..CASES {
        let built = Built::new(seed);
        let Some(bias) = reference(&built, seed) else { continue };
        let aim = Aim::of(&built.rail);
        let input = InputError::allowance(&built.rail);
        let tie = |a: &Divider, b: &Divider| {
            let off = |d: &Divider| figures(&aim, &bias, d, &built).1;
            compare(off(a), off(b))
                .then_with(|| compare(b.ri.ohm, a.ri.ohm))
                .then_with(|| compare(b.upper.ohm, a.upper.ohm))
        };
        let found = |d: &Divider| checks(&aim, &bias, d, &built, input);
        let worst = |d: &Divider| found(d).iter().map(Finding::utilisation).fold(0.0, f64::max);
        let figure = |d: &Divider| figures(&aim, &bias, d, &built).0;
        let by = |f: &dyn Fn(&Divider) -> f64, a: &Divider, b: &Divider| -> Ordering {
            compare(f(a), f(b)).then_with(|| tie(a, b))
        };
        let holding = pairs(&bias, &built).filter(|d| found(d).iter().all(Finding::holds));
        let best = holding.min_by(|a, b| by(&figure, a, b));
        let least_strained = pairs(&bias, &built).min_by(|a, b| by(&worst, a, b));
        let right = match (best, least_strained) {
            (Some(best), _) => Choice::Holds(best),
            (None, Some(least)) => Choice::Strained(least),
            (None, None) => Choice::OutsideWindow,
        };
        let pot = built.rail.is_adjustable().then_some(&built.pot);
        let choice = choose_divider(&aim, &bias, &built.divider_line, pot, &built.rail);
        assert_eq!(choice, right, "seed {seed}");
        let met = &mut met[usize::from(built.rail.is_adjustable())];
        match right {
            Choice::Holds(_) => met.holds += 1,
            Choice::Strained(_) => met.fails += 1,
            Choice::OutsideWindow => met.outside += 1,
        }
        assert_eq!(choice.divider(), best.or(least_strained), "seed {seed}");
        if built.rail.is_adjustable() {
            let none = choose_divider(&aim, &bias, &built.divider_line, None, &built.rail);
            assert_eq!(none, Choice::OutsideWindow, "seed {seed}");
        }
    }
    for met in met {
        assert!(met.holds > 30 && met.fails > 300 && met.outside > 5, "{met:?}");
    }
}

#[test]
fn some_pair_may_hold_where_one_does() {
    let (mut yes, mut no) = (0, 0);
    for seed in 0..CASES {
        let built = Built::new(seed);
        let Some(bias) = reference(&built, seed) else { continue };
        let (aim, dice) = (Aim::of(&built.rail), &mut Dice::new(seed ^ 0xABCD));
        let input = InputError {
            error_v: dice.between(0.0, 0.02),
            bias_a: dice.pick([0.0, 1e-7, 1e-5, 5e-4]),
        };
        let pot = built.rail.is_adjustable().then_some(&built.pot);
        let may = may_hold(&aim, &bias, &built.divider_line, pot, input, &built.rail);
        if pot.is_none() {
            assert!(may, "seed {seed}: of a fixed output nothing is told beforehand");
            continue;
        }
        let some = pairs(&bias, &built)
            .any(|d| checks(&aim, &bias, &d, &built, input).iter().all(Finding::holds));
        assert_eq!(may, some, "seed {seed}");
        *if may { &mut yes } else { &mut no } += 1;
    }
    assert!(yes > 30 && no > 300, "{yes} may hold and {no} may not");
}

#[test]
fn checks_of_the_reference_stop_at_the_first_that_fails() {
    for seed in 0..CASES {
        let Built { rail, zener, bias_line, .. } = Built::new(seed);
        for rz in &bias_line.values {
            let bias = zener.bias(*rz, &rail);
            let mut found = Vec::new();
            let _ = zener.checks(&bias, &bias_line, &mut found);
            let failing = found.iter().find(|f| !f.holds()).map(|f| f.check);
            let over = WhileHolding::over(|t| zener.checks(&bias, &bias_line, t));
            assert_eq!((over.err(), zener.verdict(&bias, &bias_line).err()), (failing, failing));
        }
    }
}
