//! Necessary conditions: they say what their documentation says, and turn away nothing that holds.

use crate::parts::{Case, Dice};
use circuit::amplifier::{AmplifierAtRail, InputError};
use circuit::assembly::{Aim, Network, choose_divider, input_checks};
use circuit::check::{Finding, WhileHolding};
use circuit::divider::adjustable::AdjustableAim;
use circuit::divider::fixed::FixedAim;
use circuit::drive;
use circuit::pass::{Duty, PassFigures};
use circuit::reference::{ZenerAtRail, choose_rz};
use circuit::resistor::{LineAtRail, PotAtRail};

const CASES: u64 = 20_000;

/// Room that each condition leaves for comparison at ten digits.
const ROOM: f64 = 1e-8;

/// Bottom and top of the band that bounds a reference.
fn band(aim: &Aim) -> (f64, f64) {
    match aim {
        Aim::Fixed(FixedAim { voltage_v, tolerance }) => {
            (voltage_v * (1.0 - tolerance), voltage_v * (1.0 + tolerance))
        }
        Aim::Adjustable(AdjustableAim { from_v, low_stop_v, .. }) => (*low_stop_v, *from_v),
    }
}

#[test]
fn what_may_suit_lies_in_the_band_when_multiplied() {
    let (mut answers, mut followed) = ([0; 2], [0; 2]);
    for seed in 0..CASES {
        let (case, dice) = (Case::new(seed), &mut Dice::new(!seed));
        let aim = Aim::of(&case.rail);
        let (bottom, top) = band(&aim);
        let middle = top * dice.between(0.3, 1.05);
        let (lo, hi) = (middle * dice.between(0.9, 1.0), middle * dice.between(1.0, 1.1));
        let (error, spread) = (dice.between(0.0, 0.1), dice.between(1.0, 1.1));
        // At the edge of the band the last digits decide.
        let lo = if dice.chance(0.1) { error * dice.between(0.5, 1.0) } else { lo };
        let gain = (bottom / (lo - error)).max(1.0);
        let right =
            lo > error && (1.0 + (gain - 1.0) * spread) * (hi + error) <= top * (1.0 + ROOM);
        assert_eq!(aim.may_suit(lo, hi, error, spread), right, "seed {seed}");
        let wide = (spread * lo + error) * bottom <= top * (lo - error) * (1.0 + ROOM);
        let any = lo > error && wide && hi + error <= top * (1.0 + ROOM);
        assert_eq!(aim.may_suit_any(lo, hi, spread, error), any, "seed {seed}");
        let follows = hi <= top * (1.0 + ROOM) && lo >= bottom * (1.0 - ROOM);
        assert_eq!(aim.may_follow(lo, hi), follows, "seed {seed}");
        answers[usize::from(right)] += 1;
        followed[usize::from(follows)] += 1;
    }
    assert!(answers.iter().chain(&followed).all(|n| *n > 300), "{answers:?} {followed:?}");
}

#[test]
fn the_edges_of_the_band_leave_room_for_ten_digits() {
    let aim = Aim::Fixed(FixedAim { voltage_v: 10.0, tolerance: 0.1 });
    let (bottom, top) = band(&aim);
    for (by, is_in) in [(0.5 * ROOM, true), (2.0 * ROOM, false)] {
        assert_eq!(aim.may_follow(9.5, top * (1.0 + by)), is_in);
        assert_eq!(aim.may_follow(bottom * (1.0 - by), 9.5), is_in);
        assert_eq!(aim.may_suit(9.5, top * (1.0 + by), 0.0, 1.0), is_in);
        assert_eq!(aim.may_suit_any(9.5, top * (1.0 + by), 1.0, 0.0), is_in);
        assert_eq!(aim.may_suit_any(9.5, 9.5, top / bottom * (1.0 + by), 0.0), is_in);
    }
    assert!(!aim.may_suit(0.1, 0.2, 0.1, 1.0) && !aim.may_suit_any(0.1, 0.2, 1.0, 0.1));
    // Nothing is asked of the low end of a knob that may be turned to nothing.
    let knob = AdjustableAim { from_v: 5.0, to_v: 9.0, low_stop_v: 0.0, ceiling_v: None };
    assert!(Aim::Adjustable(knob).may_suit(2.0, 5.0, 0.0, 1.5));
    // But an error as large as the reference leaves none.
    assert!(!Aim::Adjustable(knob).may_suit(2.0, 2.0, 2.0, 1.5));
}

#[test]
fn a_pot_may_serve_where_its_track_lies_between_two_multiples_of_ri() {
    let mut answers = [0; 2];
    for seed in 0..CASES {
        let (case, dice) = (Case::new(seed), &mut Dice::new(!seed));
        let (rail, aim) = (&case.rail, Aim::of(&case.rail));
        let mut pot = PotAtRail::new(&case.pot, rail);
        let middle = dice.between(2.0, 7.0);
        let (lo, hi) = (middle * dice.between(0.93, 1.0), middle * dice.between(1.0, 1.07));
        let (error, spread) = (dice.between(0.0, 0.05), dice.between(1.0, 1.1));
        let span = aim.pot_span((lo, hi), error, &rail.divider, spread);
        let Aim::Adjustable(aim) = aim else {
            assert!(span.is_none(), "seed {seed}");
            continue;
        };
        let span = span.expect("a pot serves an adjustable output");
        let (least_v, most_v) = (lo - error, hi + error);
        let below = |a: f64, b: f64| a - b - ROOM * (a.abs() + b.abs());
        let above = |a: f64, b: f64| a - b + ROOM * (a.abs() + b.abs());
        let least = below(aim.to_v / least_v, aim.from_v / most_v).max(0.0);
        let most =
            aim.ceiling_v.map_or(f64::INFINITY, |c| above(c / most_v, aim.low_stop_v / least_v));
        let rules = &rail.divider;
        let least_ri = (hi + rules.allow_error_v) / (rules.max_a - rules.allow_bias_a);
        let most_ri = (lo - rules.allow_error_v) / (rules.min_a + rules.allow_bias_a);
        // Each condition is the one that decides now and then.
        let scale = |track: &mut circuit::resistor::Resistance, by: f64| {
            track.lo_ohm *= by;
            track.hi_ohm *= by;
        };
        match seed % 6 {
            0 => {
                let by = least * least_ri / pot.track.lo_ohm * dice.between(0.999, 1.001);
                scale(&mut pot.track, by);
            }
            1 if most.is_finite() => {
                let by = most * most_ri / pot.track.hi_ohm * dice.between(0.999, 1.001);
                scale(&mut pot.track, by);
            }
            2 if most.is_finite() => {
                pot.track.hi_ohm = pot.track.lo_ohm * most / (least * spread.sqrt());
                pot.track.hi_ohm *= dice.between(0.999, 1.001);
            }
            3 => {
                let heating = hi * least / pot.track.lo_ohm;
                pot.allowed_power_w =
                    heating * heating * pot.track.hi_ohm * dice.between(0.999, 1.001);
            }
            4 => {
                let across = hi * least / pot.track.lo_ohm * pot.track.hi_ohm;
                pot.allowed_voltage_v = Some(across * dice.between(0.999, 1.001));
            }
            _ => {}
        }
        let room = 1.0 + ROOM;
        let track = &pot.track;
        let heating = hi * least / track.lo_ohm;
        let right = track.hi_ohm * least * spread.sqrt() <= track.lo_ohm * most * room
            && least * least_ri <= track.lo_ohm * room
            && track.hi_ohm <= most * most_ri * room
            && heating * heating * track.hi_ohm <= pot.allowed_power_w * room
            && pot.allowed_voltage_v.is_none_or(|v| heating * track.hi_ohm <= v * room);
        assert_eq!(span.may_serve(&pot), right, "seed {seed}");
        answers[usize::from(right)] += 1;
        let current = (5.0 * least / track.lo_ohm * (1.0 - ROOM)).max(0.0);
        assert_eq!(span.least_current_a(5.0, track.lo_ohm), current, "seed {seed}");
        assert_eq!(span.least_current_a(-5.0, track.lo_ohm), 0.0, "seed {seed}");
    }
    assert!(answers.iter().all(|n| *n > 300), "{answers:?}");
}

#[test]
fn rz_lies_between_its_bounds_and_draws_its_least_current() {
    let mut holding = 0;
    for seed in 0..CASES {
        let case = Case::new(seed);
        let (rail, z) = (&case.rail, &case.zener);
        let at_rail = ZenerAtRail::new(z, rail);
        let v0 = at_rail.test_voltage(0.0, rail).hi_v;
        let largest = (rail.feed.min_v - v0) / z.iz_min_a * (1.0 + ROOM);
        assert_eq!(at_rail.largest_rz_ohm(rail), largest, "seed {seed}");
        let theta = (z.tj_max_c - 25.0) / z.pd_w;
        let tmax = rail.ambient.max_c;
        let left = ((z.tj_max_c - tmax) / (z.tj_max_c - 25.0)).clamp(0.0, 1.0);
        let rise = rail.derating.junction_c(z.tj_max_c) - tmax;
        let allowed = (rail.derating.zener_power * z.pd_w * left).min(rise / theta).max(0.0);
        let volts2 = v0 * (rail.feed.max_v - v0);
        let smallest = if volts2 > 0.0 { volts2 / allowed * (1.0 - ROOM) } else { 0.0 };
        assert_eq!(at_rail.smallest_rz_ohm(rail), smallest, "seed {seed}");
        let at = |r: f64| (rail.feed.nominal_v - z.vz_v + z.zzt_ohm * z.izt_a) / (r + z.zzt_ohm);
        let least = if at(largest.max(0.0)) >= 0.0 { at(largest.max(0.0)) } else { at(smallest) };
        assert_eq!(at_rail.least_nominal_current_a(rail), least, "seed {seed}");
        let line = LineAtRail::new(&case.bias_line, rail);
        for rz in &line.values {
            let bias = at_rail.bias(*rz, rail);
            if at_rail.verdict(&bias, &line).is_ok() {
                holding += 1;
                assert!(rz.hi_ohm <= largest && rz.lo_ohm >= smallest, "seed {seed}");
                assert!(bias.iz_nominal_a >= least, "seed {seed}");
            }
        }
    }
    assert!(holding > 1_000, "{holding}");
}

#[test]
fn the_least_current_of_a_feed_below_the_zener_is_that_of_the_smallest_rz() {
    let mut case = Case::new(1);
    case.zener.vz_v = 2.0 * case.rail.feed.max_v;
    case.zener.zzt_ohm = 5.0;
    // Heat takes the voltage down below the feed.
    case.zener.tc_min_v_per_c = -1.0;
    case.zener.tc_max_v_per_c = -1.0;
    case.rail.ambient.min_c = 59.0;
    case.rail.ambient.max_c = 60.0;
    let (rail, z) = (&case.rail, &case.zener);
    let at_rail = ZenerAtRail::new(z, rail);
    let at = |r: f64| (rail.feed.nominal_v - z.vz_v + z.zzt_ohm * z.izt_a) / (r + z.zzt_ohm);
    assert!(at(at_rail.largest_rz_ohm(rail).max(0.0)) < 0.0);
    assert_eq!(at_rail.least_nominal_current_a(rail), at(at_rail.smallest_rz_ohm(rail)));
}

/// Conditions that a candidate's parts meet whenever all its checks hold.
#[test]
fn nothing_that_holds_is_turned_away() {
    let mut met = [0; 2];
    for seed in 0..CASES {
        let case = Case::new(seed);
        let (rail, aim) = (&case.rail, Aim::of(&case.rail));
        let zener = ZenerAtRail::new(&case.zener, rail);
        let bias_line = LineAtRail::new(&case.bias_line, rail);
        let Some((bias, _)) = choose_rz(&zener, &bias_line, rail) else { continue };
        let line = LineAtRail::new(&case.divider_line, rail);
        let pot = PotAtRail::new(&case.pot, rail);
        let pot = rail.is_adjustable().then_some(&pot);
        let choice = choose_divider(&aim, &bias, &line, pot, rail);
        let Some(divider) = choice.divider() else { continue };
        let amp = AmplifierAtRail::new(&case.amplifier, rail);
        let network = Network { line: &line, divider, pot };
        let holds = WhileHolding::over(|t| input_checks(&amp, &bias, &network, &aim, rail, t));
        if holds.is_err() {
            continue;
        }
        met[usize::from(pot.is_some())] += 1;
        let InputError { error_v, .. } = amp.input_error(bias.vz_hi_v);
        let (lo, hi) = (bias.vz_lo_v, bias.vz_hi_v);
        assert!(aim.may_suit(lo, hi, error_v, line.spread()), "seed {seed}");
        assert!(aim.may_suit_any(lo, hi, hi / lo, error_v), "seed {seed}");
        assert!(!divider.upper.is_link() || aim.may_follow(lo, hi), "seed {seed}");
        if let Some(pot) = pot {
            let span = aim.pot_span((lo, hi), error_v, &rail.divider, line.spread());
            let span = span.expect("a pot serves an adjustable output");
            assert!(span.may_serve(pot), "seed {seed}");
            let current = bias.vz_nominal_v / divider.ri.ohm;
            assert!(span.least_current_a(bias.vz_nominal_v, pot.track.lo_ohm) <= current);
        }
    }
    assert!(met.iter().all(|n| *n > 20), "{met:?}");
}

#[test]
fn the_spread_of_a_line_is_that_of_its_values() {
    let case = Case::new(7);
    let mut line = LineAtRail::new(&case.bias_line, &case.rail);
    let value = line.values[0];
    let right = (value.hi_ohm / value.lo_ohm).powi(2);
    assert!((line.spread() / right - 1.0).abs() < 1e-12);
    line.values.clear();
    assert_eq!(line.spread(), f64::INFINITY);
}

/// Every finding between an amplifier and a reference or a transistor.
fn of_amplifier(amp: &AmplifierAtRail, case: &Case) -> Vec<Finding> {
    let rail = &case.rail;
    let mut found = Vec::new();
    let _ = drive::checks(
        amp,
        &PassFigures::new(&case.transistor, &Duty::new(rail), rail),
        rail,
        &mut found,
    );
    let zener = ZenerAtRail::new(&case.zener, rail);
    let line = LineAtRail::new(&case.divider_line, rail);
    let pot = PotAtRail::new(&case.pot, rail);
    let pot = rail.is_adjustable().then_some(&pot);
    let bias = zener.bias(LineAtRail::new(&case.bias_line, rail).values[5], rail);
    let choice = choose_divider(&Aim::of(rail), &bias, &line, pot, rail);
    if let Some(divider) = choice.divider() {
        let network = Network { line: &line, divider, pot };
        let _ = circuit::assembly::supply_checks(amp, rail, &mut found);
        let _ = input_checks(amp, &bias, &network, &Aim::of(rail), rail, &mut found);
    }
    found
}

#[test]
fn the_better_of_two_amplifiers_is_used_less_and_the_worse_more() {
    for seed in 0..CASES / 4 {
        let case = Case::new(seed);
        let mut other = Case::new(seed + CASES);
        // What is blank in one and given in the other is met too, in either order.
        other.amplifier.isc_max_a = case.amplifier.isc_max_a;
        let [a, b] = [&case, &other].map(|c| AmplifierAtRail::new(&c.amplifier, &case.rail));
        let (better, worse) = (a.better_of(&b), a.worse_of(&b));
        assert_eq!(b.better_of(&a).part.isink_a, better.part.isink_a, "seed {seed}");
        assert_eq!(b.worse_of(&a).part.isink_a, worse.part.isink_a, "seed {seed}");
        let (best, worst) = (of_amplifier(&better, &case), of_amplifier(&worse, &case));
        for one in [&a, &b] {
            let own = of_amplifier(one, &case);
            let used = |list: &[Finding], finding: &Finding| {
                list.iter().find(|f| f.check == finding.check).map(Finding::utilisation)
            };
            for finding in &own {
                let u = finding.utilisation();
                assert!(
                    used(&best, finding).is_none_or(|best| best <= u),
                    "seed {seed} {finding:?}"
                );
                assert!(
                    used(&worst, finding).is_some_and(|worst| worst >= u),
                    "seed {seed} {finding:?}"
                );
            }
            for finding in &best {
                assert!(used(&own, finding).is_some(), "seed {seed}: {finding:?} is not made");
            }
        }
        // Each figure is that of one of the two.
        let figures = |x: &AmplifierAtRail| {
            let p = &x.part;
            [
                p.vs_min_v,
                p.vs_max_v,
                p.vcm_low_v,
                p.vcm_high_v,
                p.swing_low_v,
                p.swing_high_v,
                p.iout_a,
                p.ib_max_a,
                p.iq_max_a,
                p.rth_ja_c_per_w,
                x.fixed_error_v,
                x.common_mode,
                x.allowed_rise_c,
                x.allowed_fault_rise_c,
                x.fault_rise_c,
            ]
        };
        let (x, y) = (figures(&a), figures(&b));
        for (i, (best, worst)) in figures(&better).into_iter().zip(figures(&worse)).enumerate() {
            assert_eq!((best.min(worst), best.max(worst)), (x[i].min(y[i]), x[i].max(y[i])));
        }
    }
}
