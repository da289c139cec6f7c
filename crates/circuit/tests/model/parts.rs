//! Random rails and parts around a small bench supply. No part is meant to be good: checks fail as
//! often as they hold.

use circuit::parts::{
    Amplifier, Heatsink, MeasuredAt, OverCurrent, Pot, PulseCurves, ResistorLine, ResistorRating,
    Transistor, Zener,
};
use circuit::rail::{
    Ambient, Derating, DividerRules, Fault, Feed, Load, Output, Rail, StandIns, Thermal,
};
use quantity::points::Points;

/// A source of figures that are the same for a seed for ever.
///
/// Source: G. Marsaglia, "Xorshift RNGs" (2003), the triple 13, 7, 17.
pub struct Dice(u64);

impl Dice {
    pub fn new(seed: u64) -> Self {
        let mut dice = Self(seed.wrapping_mul(0x9e37_79b9_7f4a_7c15) | 1);
        (0..8).for_each(|_| _ = dice.share());
        dice
    }

    pub fn share(&mut self) -> f64 {
        self.0 ^= self.0 << 13;
        self.0 ^= self.0 >> 7;
        self.0 ^= self.0 << 17;
        (self.0 >> 11) as f64 / (1u64 << 53) as f64
    }

    pub fn between(&mut self, low: f64, high: f64) -> f64 {
        low + (high - low) * self.share()
    }

    pub fn chance(&mut self, share: f64) -> bool {
        self.share() < share
    }

    pub fn pick<T: Copy, const N: usize>(&mut self, choices: [T; N]) -> T {
        choices[(self.share() * N as f64) as usize]
    }

    pub fn maybe(&mut self, share: f64, low: f64, high: f64) -> Option<f64> {
        let x = self.between(low, high);
        self.chance(share).then_some(x)
    }
}

/// Everything that a candidate is made of.
#[derive(Debug, Clone)]
pub struct Case {
    pub rail: Rail,
    pub zener: Zener,
    pub bias_line: ResistorLine,
    pub amplifier: Amplifier,
    pub divider_line: ResistorLine,
    pub pot: Pot,
    pub transistor: Transistor,
    pub heatsink: Heatsink,
    /// The transistor goes without a heatsink where the rail brings none.
    pub unmounted: bool,
}

impl Case {
    pub fn new(seed: u64) -> Self {
        let d = &mut Dice::new(seed);
        let rail = rail(d);
        Self {
            zener: zener(d),
            bias_line: line(d, 200.0, 12),
            amplifier: amplifier(d),
            divider_line: line(d, 700.0, 10),
            pot: pot(d),
            transistor: transistor(d),
            heatsink: Heatsink {
                rth_sa_c_per_w: d.between(0.5, 12.0),
                cth_j_per_c: d.maybe(0.5, 10.0, 200.0),
            },
            unmounted: d.chance(0.4),
            rail,
        }
    }
}

fn rail(d: &mut Dice) -> Rail {
    let output = if d.chance(0.5) {
        Output::Fixed { voltage_v: d.between(6.0, 14.0), tolerance: d.between(0.02, 0.15) }
    } else {
        let from_v = d.between(5.0, 8.0);
        Output::Adjustable {
            from_v,
            to_v: d.between(9.0, 14.0),
            low_stop_v: from_v * d.between(0.5, 0.95),
            ceiling_v: d.maybe(0.6, 15.0, 22.0),
        }
    };
    let min_v = d.between(13.0, 20.0);
    let nominal_v = min_v + d.between(0.0, 3.0);
    let max_v = nominal_v + d.between(0.0, 8.0);
    let fraction = |d: &mut Dice| d.between(0.5, 1.0);
    Rail {
        feed: Feed { min_v, nominal_v, max_v, max_loaded_v: d.between(nominal_v, max_v) },
        output,
        load: Load { max_a: d.between(0.1, 1.5), min_a: d.pick([0.0, 0.002]) },
        ambient: Ambient { min_c: d.between(-20.0, 30.0), max_c: d.between(30.0, 60.0) },
        fault: d.chance(0.7).then(|| Fault {
            limit_a: d.between(0.1, 3.0),
            lasts_s: d.pick([0.005, 0.05, 0.5, 1.0, 3.0, 10.0, 30.0, f64::INFINITY]),
        }),
        bias_a: d.maybe(0.4, 0.002, 0.01),
        divider: DividerRules {
            min_a: d.between(0.0002, 0.001),
            max_a: d.between(0.002, 0.01),
            allow_error_v: d.between(0.0, 0.03),
            allow_bias_a: d.pick([0.0, 1e-7, 1e-5, 4e-4]),
        },
        thermal: Thermal {
            interface_c_per_w: d.between(0.0, 1.5),
            sink_c_per_w: d.maybe(0.3, 0.5, 8.0),
        },
        derating: Derating {
            collector_voltage: fraction(d),
            collector_current: fraction(d),
            pass_power: fraction(d),
            soa: fraction(d),
            soa_fault: fraction(d),
            amp_supply: fraction(d),
            amp_current: fraction(d),
            zener_power: fraction(d),
            resistor_power: fraction(d),
            resistor_voltage: fraction(d),
            junction_below_max_c: d.between(0.0, 30.0),
            fault_junction_below_max_c: d.between(0.0, 30.0),
            junction_cap_c: d.maybe(0.3, 90.0, 140.0),
        },
        stand_ins: StandIns {
            hfe_tempco_per_c: d.maybe(0.3, 0.0, 0.03),
            gain_db: d.between(60.0, 100.0),
            psrr_db: d.between(40.0, 80.0),
            cmrr_db: d.between(40.0, 80.0),
            vs_test_v: d.between(5.0, 30.0),
            zener_knee: d.pick([1.0, 1.5, 2.0]),
        },
    }
}

fn zener(d: &mut Dice) -> Zener {
    let izt_a = d.between(0.002, 0.02);
    let tc = d.between(-0.003, 0.003);
    Zener {
        vz_v: d.between(3.0, 7.0),
        tol: d.between(0.0, 0.05),
        izt_a,
        zzt_ohm: d.pick([0.0, 5.0, 20.0, 60.0]),
        iz_min_a: izt_a * d.between(0.05, 0.5),
        pd_w: d.between(0.2, 1.0),
        tj_max_c: d.between(120.0, 200.0),
        tc_min_v_per_c: tc - d.between(0.0, 0.001),
        tc_max_v_per_c: tc + d.between(0.0, 0.001),
        zzk_ohm: d.maybe(0.6, 30.0, 800.0),
        izk_a: d.maybe(0.6, 0.0002, 0.004),
        vz_at: d.pick([MeasuredAt::Pulse, MeasuredAt::Warm]),
    }
}

fn rating(d: &mut Dice) -> ResistorRating {
    ResistorRating {
        power_w: d.between(0.05, 0.5),
        full_power_to_c: d.between(25.0, 70.0),
        zero_power_at_c: d.between(75.0, 155.0),
    }
}

fn line(d: &mut Dice, from_ohm: f64, count: usize) -> ResistorLine {
    let mut ohm = from_ohm;
    let values_ohm = (0..count)
        .map(|_| {
            ohm *= d.between(1.15, 1.6);
            ohm.round()
        })
        .collect();
    ResistorLine {
        values_ohm,
        tol: d.between(0.001, 0.05),
        tempco_per_c: d.between(0.0, 0.0003),
        rating: rating(d),
        vmax_v: d.between(5.0, 100.0),
    }
}

fn pot(d: &mut Dice) -> Pot {
    let value_ohm = d.between(1000.0, 20_000.0);
    Pot {
        value_ohm,
        tol: d.between(0.05, 0.2),
        end_ohm: value_ohm * d.between(0.0, 0.03),
        tempco_per_c: d.between(0.0, 0.0003),
        rating: rating(d),
        vmax_v: d.maybe(0.5, 3.0, 100.0),
    }
}

fn amplifier(d: &mut Dice) -> Amplifier {
    Amplifier {
        vs_min_v: d.between(3.0, 15.0),
        vs_max_v: d.between(20.0, 40.0),
        vcm_low_v: d.between(-0.2, 4.0),
        vcm_high_v: d.between(-0.2, 10.0),
        swing_low_v: d.between(-0.1, 6.0),
        swing_high_v: d.between(0.1, 4.0),
        iout_a: d.between(0.005, 0.1),
        vos_max_v: d.between(0.0001, 0.02),
        ib_max_a: d.pick([0.0, 1e-7, 1e-6, 2e-4]),
        iq_max_a: d.between(0.0005, 0.01),
        tj_max_c: d.between(100.0, 150.0),
        rth_ja_c_per_w: d.between(60.0, 220.0),
        isc_max_a: d.maybe(0.8, 0.01, 0.1),
        isink_a: d.maybe(0.6, 1e-4, 0.01),
        gain_min_db: d.maybe(0.6, 60.0, 110.0),
        psrr_min_db: d.maybe(0.6, 50.0, 90.0),
        cmrr_min_db: d.maybe(0.6, 50.0, 90.0),
        vs_test_v: d.maybe(0.5, 5.0, 30.0),
    }
}

/// A curve through points of rising x, whose y falls for the most part.
fn curve(d: &mut Dice, x: f64, y: f64) -> Points {
    let (mut x, mut y) = (x, y);
    let count = 1 + (d.share() * 4.0) as usize;
    let pairs: Vec<(f64, f64)> = (0..count)
        .map(|_| {
            x *= d.between(1.3, 3.0);
            y *= d.between(0.3, 1.05);
            (x, y)
        })
        .collect();
    Points::new(pairs).expect("a curve rises in x and lies above zero")
}

fn over_current(d: &mut Dice, low_v: f64, high_v: f64) -> OverCurrent {
    if d.chance(0.5) {
        return OverCurrent::Number(d.between(low_v, high_v));
    }
    let (x, y) = (d.between(0.05, 0.5), d.between(low_v, high_v));
    OverCurrent::Points(curve(d, x, y))
}

fn transistor(d: &mut Dice) -> Transistor {
    let mut soa = |least: f64, most: f64| {
        let (x, y) = (d.between(2.0, 6.0), d.between(least, most));
        curve(d, x, y)
    };
    let soa_dc = soa(3.0, 20.0);
    let curves = [soa(3.0, 30.0), soa(3.0, 30.0), soa(3.0, 30.0), soa(3.0, 30.0)];
    let [s1, ms100, ms10, ms1] = curves.map(Some);
    let mut given = |curve: Option<Points>| curve.filter(|_| d.chance(0.6));
    let soa_pulse =
        PulseCurves { s1: given(s1), ms100: given(ms100), ms10: given(ms10), ms1: given(ms1) };
    let (first_a, first_gain) = (d.between(0.01, 1.0), d.between(20.0, 300.0));
    Transistor {
        junctions: d.pick([1, 2]),
        vceo_v: d.between(25.0, 100.0),
        ic_max_a: d.between(1.0, 10.0),
        pd_w: d.between(10.0, 120.0),
        tj_max_c: d.between(125.0, 200.0),
        rth_jc_c_per_w: d.between(0.5, 4.0),
        hfe_min: curve(d, first_a, first_gain),
        vbe_max_v: over_current(d, 0.7, 2.5),
        vce_sat_v: over_current(d, 0.3, 2.0),
        soa_dc,
        soa_pulse,
        rth_ja_c_per_w: d.maybe(0.8, 20.0, 80.0),
        cth_j_per_c: d.maybe(0.5, 0.5, 10.0),
        hfe_tempco_per_c: d.maybe(0.5, 0.002, 0.02),
        ileak_max_a: d.maybe(0.7, 1e-5, 0.01),
    }
}
