//! The reference: a zener fed from the unregulated feed through its bias resistor RZ.
//!
//! Model page, section 4.1. A zener's impedance `zzt` is a maximum: a part may have any impedance
//! from 0 to it at the test current and above, and below the test current the impedance rises as
//! (izt/i)^m up to the knee.

use crate::check::{Check, Finding, Tally, WhileHolding, Worst};
use crate::parts::{MeasuredAt, Zener};
use crate::rail::{RATED_AT_C, Rail};
use crate::resistor::{LineAtRail, Resistance};
use quantity::digits::{at_most, compare, rounded};
use std::cmp::Ordering;
use std::ops::ControlFlow::{self, Continue};

/// How often the zener's own heat is put back into its voltage; the page fixes it.
const HEAT_ROUNDS: usize = 3;

/// A zener at the temperatures of a rail: everything that does not depend on RZ.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ZenerAtRail {
    zener: Zener,
    /// m, the exponent of the impedance below the test current.
    knee: f64,
    /// θJA, °C/W.
    pub theta_ja_c_per_w: f64,
    /// δ at the cold end, °C against the temperature at which the voltage is stated.
    cold_c: f64,
    /// Warmth in which the voltage was stated, at the low end of the tolerance, °C.
    warm_lo_c: f64,
    /// Power that the zener may take at Tmax, W.
    allowed_power_w: f64,
    /// Tj(z) − Tmax, °C.
    allowed_rise_c: f64,
}

/// The zener's voltage at its test current, at the ends of tolerance and temperature, V.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct TestVoltage {
    /// V0lo.
    pub lo_v: f64,
    /// V0hi.
    pub hi_v: f64,
}

/// A zener with a chosen bias resistor: its voltages and currents at all corners.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Bias {
    /// RZ.
    pub rz: Resistance,
    /// V0hi, V.
    pub v0_hi_v: f64,
    /// VZlo: the least reference voltage, V.
    pub vz_lo_v: f64,
    /// VZhi: the greatest reference voltage, V.
    pub vz_hi_v: f64,
    /// VZn: the reference voltage of nominal parts at the nominal feed, V.
    pub vz_nominal_v: f64,
    /// IZlo: the least zener current, A.
    pub iz_lo_a: f64,
    /// IZhi: the greatest zener current, A.
    pub iz_hi_a: f64,
    /// IZn: the zener current of nominal parts at the nominal feed, A.
    pub iz_nominal_a: f64,
    /// Pe: the greatest dissipation of the zener, W.
    pub power_w: f64,
}

impl Zener {
    /// I(VU, V0, R): the current of a zener that has its full impedance, A.
    pub fn current_full_impedance_a(&self, feed_v: f64, v0_v: f64, r_ohm: f64) -> f64 {
        (feed_v - v0_v + self.zzt_ohm * self.izt_a) / (r_ohm + self.zzt_ohm)
    }

    /// J(VU, V0, R): the current of a zener without impedance, A.
    pub fn current_no_impedance_a(feed_v: f64, v0_v: f64, r_ohm: f64) -> f64 {
        (feed_v - v0_v) / r_ohm
    }

    /// m: the exponent with which the impedance rises below the test current, so that it is `zzk`
    /// at the knee current; the stand-in where the sheet does not give both.
    ///
    /// Source of the two impedances in use: 1N4728A family data sheets.
    pub fn knee_exponent(&self, stand_in: f64) -> f64 {
        match (self.zzk_ohm, self.izk_a) {
            (Some(zzk), Some(izk))
                if quantity::digits::below(izk, self.izt_a) && self.zzt_ohm > 0.0 && izk > 0.0 =>
            {
                ((zzk / self.zzt_ohm).ln() / (self.izt_a / izk).ln()).max(1.0)
            }
            _ => stand_in,
        }
    }

    /// The knee's stand-in is leaned on.
    pub fn leans_on_knee(&self) -> bool {
        !matches!((self.zzk_ohm, self.izk_a), (Some(_), Some(izk))
            if quantity::digits::below(izk, self.izt_a) && self.zzt_ohm > 0.0 && izk > 0.0)
    }

    /// W(i): how far the voltage droops when the current falls from the test current to `i`, V.
    ///
    /// The integral of zzt·(izt/i)^m from i to izt. ∞ for i ≤ 0.
    pub fn droop_v(&self, i_a: f64, knee: f64) -> f64 {
        if at_most(self.izt_a, i_a) {
            return 0.0;
        }
        if i_a <= 0.0 {
            return f64::INFINITY;
        }
        let depth = (self.izt_a / i_a).ln();
        let beyond = knee - 1.0;
        let at_test = self.zzt_ohm * self.izt_a;
        if at_test == 0.0 {
            // Also where the power below outgrows every figure.
            0.0
        } else if rounded(knee) == 1.0 {
            at_test * depth
        } else {
            // ((izt/i)^(m−1) − 1)/(m−1), without losing digits where m is close to 1.
            at_test * (beyond * depth).exp_m1() / beyond
        }
    }
}

impl ZenerAtRail {
    /// Puts a zener under a rail's conditions.
    pub fn new(zener: &Zener, rail: &Rail) -> Self {
        let theta_ja_c_per_w = (zener.tj_max_c - RATED_AT_C) / zener.pd_w;
        // Tw: what the voltage already contains where it was measured after warming up.
        let warm_c = match zener.vz_at {
            MeasuredAt::Warm => zener.vz_v * zener.izt_a * theta_ja_c_per_w,
            MeasuredAt::Pulse => 0.0,
        };
        let ambient = rail.ambient;
        let share = (zener.tj_max_c - ambient.max_c) / (zener.tj_max_c - RATED_AT_C);
        Self {
            zener: *zener,
            knee: zener.knee_exponent(rail.stand_ins.zener_knee),
            theta_ja_c_per_w,
            cold_c: ambient.min_c - RATED_AT_C - warm_c * (1.0 + zener.tol),
            warm_lo_c: warm_c * (1.0 - zener.tol),
            allowed_power_w: rail.derating.zener_power * zener.pd_w * share.clamp(0.0, 1.0),
            allowed_rise_c: rail.derating.junction_c(zener.tj_max_c) - ambient.max_c,
        }
    }

    /// The zener's own figures.
    pub fn zener(&self) -> &Zener {
        &self.zener
    }

    /// V0lo and V0hi while the zener takes `power_w`.
    ///
    /// V0hi never falls and V0lo never rises with the power, so at no power they bound both from
    /// inside: c·δ of the hot end moves outward for either sign of c.
    pub fn test_voltage(&self, power_w: f64, rail: &Rail) -> TestVoltage {
        let z = &self.zener;
        let own_heat_c = (power_w * self.theta_ja_c_per_w - self.warm_lo_c).max(0.0);
        let hot_c = rail.ambient.max_c - RATED_AT_C + own_heat_c;
        let drifts = [
            z.tc_min_v_per_c * self.cold_c,
            z.tc_min_v_per_c * hot_c,
            z.tc_max_v_per_c * self.cold_c,
            z.tc_max_v_per_c * hot_c,
        ];
        let d_hi = drifts.iter().copied().fold(f64::NEG_INFINITY, f64::max);
        let d_lo = drifts.iter().copied().fold(f64::INFINITY, f64::min);
        TestVoltage { lo_v: z.vz_v * (1.0 - z.tol) + d_lo, hi_v: z.vz_v * (1.0 + z.tol) + d_hi }
    }

    /// The reference with the bias resistor `rz`.
    pub fn bias(&self, rz: Resistance, rail: &Rail) -> Bias {
        let z = &self.zener;
        let feed = &rail.feed;
        let mut power_w = 0.0;
        let mut v0 = TestVoltage { lo_v: z.vz_v, hi_v: z.vz_v };
        let (mut vz_hi_v, mut iz_hi_a) = (0.0, 0.0);
        for _ in 0..HEAT_ROUNDS {
            v0 = self.test_voltage(power_w, rail);
            let most_a = z.current_full_impedance_a(feed.max_v, v0.hi_v, rz.lo_ohm);
            vz_hi_v = v0.hi_v + z.zzt_ohm * (most_a - z.izt_a).max(0.0);
            let stiff_a = Zener::current_no_impedance_a(feed.max_v, v0.lo_v, rz.lo_ohm);
            let vm_v = v0.lo_v - z.droop_v(stiff_a, self.knee);
            iz_hi_a = (feed.max_v - vm_v) / rz.lo_ohm;
            // V·(VUmax − V)/R is greatest at half the feed, or at the end of [Vm, VZhi] next to it.
            let vp_v = (feed.max_v / 2.0).max(vm_v).min(vz_hi_v);
            power_w = vp_v * (feed.max_v - vp_v) / rz.lo_ohm;
        }
        let stiff_a = Zener::current_no_impedance_a(feed.min_v, v0.lo_v, rz.hi_ohm);
        let least_full_a = z.current_full_impedance_a(feed.min_v, v0.hi_v, rz.hi_ohm);
        let least_stiff_a = Zener::current_no_impedance_a(feed.min_v, v0.hi_v, rz.hi_ohm);
        let iz_nominal_a = z.current_full_impedance_a(feed.nominal_v, z.vz_v, rz.ohm);
        Bias {
            rz,
            v0_hi_v: v0.hi_v,
            vz_lo_v: v0.lo_v - z.droop_v(stiff_a, self.knee),
            vz_hi_v,
            vz_nominal_v: z.vz_v + z.zzt_ohm * (iz_nominal_a - z.izt_a),
            iz_lo_a: least_full_a.min(least_stiff_a),
            iz_hi_a,
            iz_nominal_a,
            power_w,
        }
    }

    /// `zener-bias`: the zener keeps the least current at which it is trusted.
    pub fn zener_bias(&self, bias: &Bias) -> Finding {
        Finding { check: Check::ZenerBias, asked: self.zener.iz_min_a, allowed: bias.iz_lo_a }
    }

    /// `zener-power`: the dissipation against the rating left at Tmax.
    pub fn zener_power(&self, bias: &Bias) -> Finding {
        Finding { check: Check::ZenerPower, asked: bias.power_w, allowed: self.allowed_power_w }
    }

    /// `zener-junction`: the junction's rise above Tmax.
    pub fn zener_junction(&self, bias: &Bias) -> Finding {
        Finding {
            check: Check::ZenerJunction,
            asked: bias.power_w * self.theta_ja_c_per_w,
            allowed: self.allowed_rise_c,
        }
    }

    /// All checks of the reference, in page order.
    #[inline]
    pub fn checks(
        &self,
        bias: &Bias,
        line: &LineAtRail,
        tally: &mut impl Tally,
    ) -> ControlFlow<()> {
        tally.take(self.zener_bias(bias))?;
        tally.take(self.zener_power(bias))?;
        tally.take(self.zener_junction(bias))?;
        tally.take(rz_power(bias, line))?;
        tally.take(rz_voltage(bias, line))?;
        Continue(())
    }

    /// Stress of the reference where all its checks hold, else the first that fails.
    pub fn verdict(&self, bias: &Bias, line: &LineAtRail) -> Result<f64, Check> {
        WhileHolding::over(|t| self.checks(bias, line, t))
    }
}

/// `rz-power`: power in the bias resistor.
pub fn rz_power(bias: &Bias, line: &LineAtRail) -> Finding {
    Finding {
        check: Check::RzPower,
        asked: bias.iz_hi_a * bias.iz_hi_a * bias.rz.lo_ohm,
        allowed: line.allowed_power_w,
    }
}

/// `rz-voltage`: voltage on the bias resistor.
pub fn rz_voltage(bias: &Bias, line: &LineAtRail) -> Finding {
    Finding {
        check: Check::RzVoltage,
        asked: bias.iz_hi_a * bias.rz.lo_ohm,
        allowed: line.allowed_voltage_v,
    }
}

/// The bias resistor that was chosen for a zener and a line.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Chosen {
    /// All five checks hold; the stress among them.
    Holds(Bias, f64),
    /// No value of the line makes all five hold. The bias is that of the value whose greatest
    /// utilisation is least; the check is the first that fails with it.
    Fails(Bias, Check),
}

/// The bias resistor of `line` with which all five checks hold and the nominal current lies nearest
/// to the target, by |ln(IZn/target)|; on a tie the larger. None where no value makes all hold.
///
/// Walks outward from the target current, so that the first value that holds is the answer, and
/// only over values that necessary conditions leave.
pub fn choose_rz(zener: &ZenerAtRail, line: &LineAtRail, rail: &Rail) -> Option<(Bias, f64)> {
    let (low, high) = possible(zener, line, rail);
    let values = line.values.get(low..high)?;
    let target_a = rail.bias_a.unwrap_or(zener.zener.izt_a);
    let distance = |value: &Resistance| bias_distance(zener, value.ohm, target_a, rail);
    let holding = |value: &Resistance| {
        let bias = zener.bias(*value, rail);
        zener.verdict(&bias, line).ok().map(|stress| (bias, stress))
    };
    // IZn falls as RZ rises: smaller values lie on the side of more current.
    let split = values.partition_point(|v| {
        zener.zener.current_full_impedance_a(rail.feed.nominal_v, zener.zener.vz_v, v.ohm)
            >= target_a
    });
    let (mut smaller, mut larger) =
        (values[..split].iter().rev().peekable(), values[split..].iter().peekable());
    if smaller.peek().is_none() {
        // Where no current reaches the target the larger side may be infinitely far throughout, and
        // then the largest value that holds wins.
        if larger.peek().is_some_and(|v| distance(v) == f64::INFINITY) {
            return values.iter().rev().find_map(holding);
        }
    }
    loop {
        let from_larger = match (smaller.peek(), larger.peek()) {
            (None, None) => return None,
            (None, Some(_)) => true,
            (Some(_), None) => false,
            (Some(s), Some(l)) => compare(distance(l), distance(s)) != Ordering::Greater,
        };
        let value = if from_larger { larger.next() } else { smaller.next() }?;
        if let Some(found) = holding(value) {
            return Some(found);
        }
    }
}

/// |ln(IZn/target)|; infinite where no current flows.
pub fn bias_distance(zener: &ZenerAtRail, rz_ohm: f64, target_a: f64, rail: &Rail) -> f64 {
    let z = zener.zener();
    let iz = z.current_full_impedance_a(rail.feed.nominal_v, z.vz_v, rz_ohm);
    if iz <= 0.0 { f64::INFINITY } else { (iz / target_a).ln().abs() }
}

/// Where no value holds: the one whose greatest utilisation of the five checks is least, on a tie
/// the larger. None for a line without values.
pub fn least_bad_rz(zener: &ZenerAtRail, line: &LineAtRail, rail: &Rail) -> Option<Bias> {
    // V0hi never falls with the zener's own heat. Where the lowest feed does not exceed the cold one no
    // value lets current through, every utilisation of `zener-bias` is infinite, and all tie.
    let all_tie =
        rail.feed.min_v <= zener.test_voltage(0.0, rail).hi_v && zener.zener.iz_min_a > 0.0;
    let first = if all_tie { line.values.len().saturating_sub(1) } else { 0 };
    let mut best: Option<(f64, Bias)> = None;
    for value in &line.values[first..] {
        let bias = zener.bias(*value, rail);
        let worst = Worst::of(|t| zener.checks(&bias, line, t));
        let better = best.is_none_or(|(least, _)| compare(worst, least) != Ordering::Greater);
        if better {
            best = Some((worst, bias));
        }
    }
    best.map(|(_, bias)| bias)
}

/// The choice of RZ with its outcome, in all cases. None for a line without values.
pub fn chosen_rz(zener: &ZenerAtRail, line: &LineAtRail, rail: &Rail) -> Option<Chosen> {
    if let Some((bias, stress)) = choose_rz(zener, line, rail) {
        return Some(Chosen::Holds(bias, stress));
    }
    let bias = least_bad_rz(zener, line, rail)?;
    zener.verdict(&bias, line).err().map(|check| Chosen::Fails(bias, check))
}

/// Room left for rounding where a necessary condition cuts values away.
const ROUNDING_ROOM: f64 = 1e-8;

impl ZenerAtRail {
    /// No RZ above this, Ω, keeps `zener-bias`: IZlo ≤ (VUmin − V0hi(0))/RZhi.
    pub fn largest_rz_ohm(&self, rail: &Rail) -> f64 {
        let v0 = self.test_voltage(0.0, rail);
        (rail.feed.min_v - v0.hi_v) / self.zener.iz_min_a * (1.0 + ROUNDING_ROOM)
    }

    /// No RZ that measures below this, Ω, keeps `zener-power` and `zener-junction`: Pe is the
    /// greatest V·(VUmax − V)/RZlo over a span that holds V0hi(0).
    pub fn smallest_rz_ohm(&self, rail: &Rail) -> f64 {
        let v0_hi_v = self.test_voltage(0.0, rail).hi_v;
        let allowed_w =
            self.allowed_power_w.min(self.allowed_rise_c / self.theta_ja_c_per_w).max(0.0);
        let volts2 = v0_hi_v * (rail.feed.max_v - v0_hi_v);
        if volts2 > 0.0 { volts2 / allowed_w * (1.0 - ROUNDING_ROOM) } else { 0.0 }
    }

    /// At most the nominal zener current of any RZ with which all five checks may hold, A.
    ///
    /// Negative only where the nominal feed lies below the zener's voltage, and the checks may hold
    /// all the same because heat takes the voltage down.
    pub fn least_nominal_current_a(&self, rail: &Rail) -> f64 {
        let z = &self.zener;
        let at = |rz_ohm| z.current_full_impedance_a(rail.feed.nominal_v, z.vz_v, rz_ohm);
        let largest = at(self.largest_rz_ohm(rail).max(0.0));
        if largest >= 0.0 { largest } else { at(self.smallest_rz_ohm(rail)) }
    }
}

/// The places [from, to) of `line.values` outside which some check surely fails: see
/// [`ZenerAtRail::largest_rz_ohm`] and [`ZenerAtRail::smallest_rz_ohm`], and `rz-power`, since
/// IZhi·RZlo ≥ VUmax − V0lo(0).
fn possible(zener: &ZenerAtRail, line: &LineAtRail, rail: &Rail) -> (usize, usize) {
    let on_rz_v = (rail.feed.max_v - zener.test_voltage(0.0, rail).lo_v).max(0.0);
    let by_power = on_rz_v * on_rz_v / line.allowed_power_w * (1.0 - ROUNDING_ROOM);
    let (smallest, largest) = (zener.smallest_rz_ohm(rail), zener.largest_rz_ohm(rail));
    // A quotient 0/0 gives NaN, which cuts nothing away.
    let from = line.values.partition_point(|v| v.lo_ohm < smallest || v.lo_ohm < by_power);
    let to = line.values.partition_point(|v| v.hi_ohm <= largest);
    (from, to)
}
