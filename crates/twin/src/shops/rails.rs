//! Random rails.

use super::dice::{Dice, figure};
use circuit::rail::{
    Ambient, Derating, DividerRules, Fault, Feed, Load, Output, Rail, StandIns, Thermal,
};
use select::problem::Weights;

/// A rail that plausible parts can often meet.
pub fn rail(dice: &mut Dice) -> Rail {
    let output = output(dice);
    let (lowest_v, highest_v) = ends(&output);
    let load = load(dice);
    let divider = divider_rules(dice);
    let feed = feed(dice, highest_v);
    let ambient = ambient(dice);
    let fault = fault(dice, load.max_a);
    let watts = (feed.max_v - lowest_v) * (load.max_a + divider.max_a);
    let fault_watts = fault.map_or(0.0, |f| f.limit_a * feed.max_v);
    let thermal = Thermal {
        interface_c_per_w: dice.pick([0.0, 0.2, 0.5, 1.0]) * (10.0 / watts).clamp(0.1, 2.0),
        sink_c_per_w: dice.maybe(0.2, |d| {
            // Cool enough for a silicon junction, more often than not.
            let room_c = 150.0 - ambient.max_c;
            figure(room_c / watts.max(0.7 * fault_watts) / d.log_between(1.0, 8.0))
        }),
    };
    let bias_a = dice.maybe(0.3, |d| figure(d.log_between(0.001, 0.02)));
    let derating = derating(dice);
    let stand_ins = stand_ins(dice);
    Rail { feed, output, load, ambient, fault, bias_a, divider, thermal, derating, stand_ins }
}

fn output(dice: &mut Dice) -> Output {
    if dice.chance(0.55) {
        let voltage_v = match dice.pick([0, 1]) {
            0 => dice.pick([3.3, 5.0, 9.0, 12.0, 15.0, 24.0]),
            _ => figure(dice.log_between(3.0, 30.0)),
        };
        return Output::Fixed {
            voltage_v,
            tolerance: dice.pick([0.04, 0.06, 0.08, 0.1, 0.1, 0.15]),
        };
    }
    let from_v = figure(dice.log_between(2.5, 10.0));
    let to_v = figure(from_v * dice.between(1.3, 3.5));
    let low_stop_v = match dice.whole(0, 9) {
        0..4 => 0.75 * from_v,
        4..9 => figure(from_v * dice.between(0.3, 0.9)),
        _ => from_v * dice.pick([0.93, 0.97, 1.0]),
    };
    let ceiling_v = dice.maybe(0.5, |d| figure(to_v * d.between(1.1, 2.0)).max(to_v));
    Output::Adjustable { from_v, to_v, low_stop_v, ceiling_v }
}

/// VLmin and VLmax.
fn ends(output: &Output) -> (f64, f64) {
    match *output {
        Output::Fixed { voltage_v, tolerance } => {
            (voltage_v * (1.0 - tolerance), voltage_v * (1.0 + tolerance))
        }
        Output::Adjustable { low_stop_v, to_v, .. } => (low_stop_v, to_v),
    }
}

fn load(dice: &mut Dice) -> Load {
    let (low, high) = dice.pick([(0.02, 0.15), (0.1, 1.5), (0.1, 1.5), (1.0, 6.0)]);
    Load {
        max_a: figure(dice.log_between(low, high)),
        min_a: dice.pick([0.0_f64, 0.0, 0.001, 0.01]).min(low),
    }
}

/// A feed with headroom over the highest output: stiff, or one that falls under load so far that the
/// hottest load lies below full load (2S > A).
fn feed(dice: &mut Dice, highest_v: f64) -> Feed {
    let headroom_v =
        if dice.chance(0.85) { dice.between(2.5, 6.0) } else { dice.between(0.2, 2.5) };
    let min_v = figure(highest_v + headroom_v).max(0.5);
    let nominal_v = min_v * dice.pick([1.0, 1.05, 1.1, 1.2]);
    if dice.chance(0.3) {
        let max_v = nominal_v * dice.between(1.2, 2.2);
        let max_loaded_v = nominal_v + (max_v - nominal_v) * dice.pick([0.0, 0.1, 0.3]);
        return Feed { min_v, nominal_v, max_v, max_loaded_v };
    }
    let max_v = nominal_v * dice.pick([1.0_f64, 1.1, 1.2, 1.3]);
    let max_loaded_v = dice.pick([max_v, max_v, nominal_v, (nominal_v + max_v) / 2.0]);
    Feed { min_v, nominal_v, max_v, max_loaded_v }
}

/// Usual, cold alone, cold and hot, hot alone, and no span at all.
fn ambient(dice: &mut Dice) -> Ambient {
    let (min_c, max_c) = dice.pick([
        (0.0, 45.0),
        (5.0, 35.0),
        (10.0, 40.0),
        (-20.0, 50.0),
        (-40.0, 70.0),
        (-55.0, -10.0),
        (30.0, 50.0),
        (25.0, 25.0),
    ]);
    Ambient { min_c, max_c }
}

/// The times of a short that the model treats in different ways, s.
pub const FAULT_TIMES_S: [f64; 7] = [0.001, 0.05, 0.5, 2.0, 5.0, 20.0, f64::INFINITY];

fn fault(dice: &mut Dice, load_a: f64) -> Option<Fault> {
    dice.chance(0.7).then(|| Fault {
        // Below the load only with foldback.
        limit_a: figure(load_a * dice.pick([0.3, 0.6, 1.0, 1.2, 1.5, 2.5])),
        lasts_s: dice.pick(FAULT_TIMES_S),
    })
}

fn divider_rules(dice: &mut Dice) -> DividerRules {
    if dice.chance(0.07) {
        // An input current well above the least divider current: on a coarse line the low output
        // then falls as RF rises.
        return DividerRules {
            min_a: figure(dice.log_between(1e-6, 1e-4)),
            max_a: dice.pick([0.005, 0.01]),
            allow_error_v: dice.pick([0.0, 0.05]),
            allow_bias_a: figure(dice.log_between(5e-4, 3e-3)),
        };
    }
    let (min_a, max_a) = dice.pick([
        (0.0005, 0.002),
        (0.0005, 0.002),
        (0.0005, 0.002),
        (0.0005, 0.003),
        (0.0001, 0.005),
        (0.0001, 0.005),
        (0.001, 0.01),
        // So narrow that some lines have no value inside.
        (0.0009, 0.0013),
        (0.001, 0.00115),
    ]);
    DividerRules {
        min_a,
        max_a,
        allow_error_v: dice.pick([0.05, 0.05, 0.02, 0.01, 0.0, 0.2]),
        allow_bias_a: dice.pick([1e-6, 1e-6, 0.0, 1e-4]),
    }
}

fn derating(dice: &mut Dice) -> Derating {
    match dice.pick([0, 0, 0, 0, 1, 2, 3, 3]) {
        0 => Derating::NONE,
        1 => Derating::BENCH,
        2 => Derating::CAUTIOUS,
        _ => {
            let mut share = || dice.pick([1.0, 1.0, 0.9, 0.75, 0.5]);
            Derating {
                collector_voltage: share(),
                collector_current: share(),
                pass_power: share(),
                soa: share(),
                soa_fault: share(),
                amp_supply: share(),
                amp_current: share(),
                zener_power: share(),
                resistor_power: share(),
                resistor_voltage: share(),
                junction_below_max_c: dice.pick([0.0, 10.0, 25.0, 50.0]),
                fault_junction_below_max_c: dice.pick([0.0, 0.0, 10.0, 30.0]),
                junction_cap_c: dice.maybe(0.4, |d| d.pick([60.0, 80.0, 110.0, 125.0])),
            }
        }
    }
}

fn stand_ins(dice: &mut Dice) -> StandIns {
    let usual = StandIns::default();
    if dice.chance(0.7) {
        return usual;
    }
    StandIns {
        hfe_tempco_per_c: dice.maybe(0.5, |d| d.pick([0.0, 0.006, 0.02])),
        gain_db: dice.pick([60.0, 80.0, 100.0]),
        psrr_db: dice.pick([50.0, 60.0, 80.0]),
        cmrr_db: dice.pick([50.0, 65.0, 80.0]),
        vs_test_v: dice.pick([5.0, 15.0, 30.0]),
        zener_knee: dice.pick([1.0, 1.2, 1.5, 2.5]),
    }
}

/// Weights of every kind: all alike, single ones, zeros, fractions.
pub fn weights(dice: &mut Dice) -> Weights {
    let (cost, loss, stress) = dice.pick([
        (1.0, 1.0, 1.0),
        (1.0, 1.0, 1.0),
        (1.0, 0.0, 0.0),
        (0.0, 1.0, 0.0),
        (0.0, 0.0, 1.0),
        (1.0, 0.0, 2.0),
        (0.5, 1.5, 0.25),
        (0.1, 0.0, 0.7),
    ]);
    Weights { cost, loss, stress }
}
