//! The error amplifier: supply, input range, and the error it adds at its input.
//!
//! Model page, section 4.2. The amplifier runs from the feed and ground.

use crate::check::{Check, Finding};
use crate::parts::Amplifier;
use crate::rail::Rail;

/// An amplifier at a rail: everything that does not depend on the reference or the transistor.
///
/// Against a fixed reference side and a fixed power side an amplifier counts by these few figures.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct AmplifierAtRail {
    /// Its own figures.
    pub part: Amplifier,
    /// The part of εa that no reference changes: vos + VUmin/A + max(|VU − vs_test|)/K, V.
    pub fixed_error_v: f64,
    /// 1/C: the part of the reference voltage that common-mode rejection lets through.
    pub common_mode: f64,
    /// Tj(a) − Tmax, °C.
    pub allowed_rise_c: f64,
    /// TjF(a) − Tmax, °C.
    pub allowed_fault_rise_c: f64,
    /// VUmax·(iq + isc)·θJA, °C: the rise while the output is shorted; 0 without a fault that heats
    /// junctions.
    pub fault_rise_c: f64,
}

/// What the amplifier does to the voltage and current at the divider node.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct InputError {
    /// ε: error voltage either way, V.
    pub error_v: f64,
    /// ib: input current, A.
    pub bias_a: f64,
}

impl InputError {
    /// εd and ibd: the allowances that a divider is chosen for, whatever the amplifier.
    pub fn allowance(rail: &Rail) -> Self {
        Self { error_v: rail.divider.allow_error_v, bias_a: rail.divider.allow_bias_a }
    }
}

/// A ratio given in dB of voltage: 10^(dB/20).
fn ratio(db: f64) -> f64 {
    10f64.powf(db / 20.0)
}

impl AmplifierAtRail {
    /// Puts an amplifier under a rail's conditions; blank optional cells are filled by the rail's
    /// stand-ins. A blank `isc_max_a` counts as an infinite current where it is needed.
    pub fn new(part: &Amplifier, rail: &Rail) -> Self {
        let stand_ins = &rail.stand_ins;
        let gain = ratio(part.gain_min_db.unwrap_or(stand_ins.gain_db));
        let psrr = ratio(part.psrr_min_db.unwrap_or(stand_ins.psrr_db));
        let cmrr = ratio(part.cmrr_min_db.unwrap_or(stand_ins.cmrr_db));
        let vs_test = part.vs_test_v.unwrap_or(stand_ins.vs_test_v);
        let feed = &rail.feed;
        let off_test_v = (feed.max_v - vs_test).abs().max((feed.min_v - vs_test).abs());
        let fault_heats = rail.fault.is_some_and(|f| f.heats_junctions());
        let fault_rise_c = if fault_heats {
            let isc = part.isc_max_a.unwrap_or(f64::INFINITY);
            feed.max_v * (part.iq_max_a + isc) * part.rth_ja_c_per_w
        } else {
            0.0
        };
        Self {
            part: *part,
            fixed_error_v: part.vos_max_v + feed.min_v / gain + off_test_v / psrr,
            common_mode: 1.0 / cmrr,
            allowed_rise_c: rail.derating.junction_c(part.tj_max_c) - rail.ambient.max_c,
            allowed_fault_rise_c: rail.derating.fault_junction_c(part.tj_max_c)
                - rail.ambient.max_c,
            fault_rise_c,
        }
    }

    /// εa and ib beside a reference whose voltage reaches `vz_hi_v`.
    ///
    /// εa = vos_max + VUmin/A + max(|VUmax − vs_test|, |VUmin − vs_test|)/K + VZhi/C, where A, K and
    /// C are gain, supply and common-mode rejection as ratios.
    pub fn input_error(&self, vz_hi_v: f64) -> InputError {
        InputError {
            error_v: self.fixed_error_v + vz_hi_v * self.common_mode,
            bias_a: self.part.ib_max_a,
        }
    }

    /// `amp-supply-high`: the highest feed against the greatest supply.
    pub fn amp_supply_high(&self, rail: &Rail) -> Finding {
        Finding {
            check: Check::AmpSupplyHigh,
            asked: rail.feed.max_v,
            allowed: rail.derating.amp_supply * self.part.vs_max_v,
        }
    }

    /// `amp-supply-low`: the least supply against the lowest feed.
    pub fn amp_supply_low(&self, rail: &Rail) -> Finding {
        Finding { check: Check::AmpSupplyLow, asked: self.part.vs_min_v, allowed: rail.feed.min_v }
    }

    /// `amp-input-low`: the lowest reference voltage lies above the bottom of the input range.
    pub fn amp_input_low(&self, vz_lo_v: f64) -> Finding {
        Finding { check: Check::AmpInputLow, asked: self.part.vcm_low_v, allowed: vz_lo_v }
    }

    /// `amp-input-high`: the highest reference voltage lies below the top of the input range.
    pub fn amp_input_high(&self, vz_hi_v: f64, rail: &Rail) -> Finding {
        Finding {
            check: Check::AmpInputHigh,
            asked: vz_hi_v + self.part.vcm_high_v,
            allowed: rail.feed.min_v,
        }
    }

    /// An amplifier at least as good as both in every check: each figure the better of the two, for
    /// every check is monotone in each figure of an amplifier.
    pub fn better_of(&self, other: &Self) -> Self {
        // Where the sinking current is not given, it is not checked: nothing is better than that.
        let isink = |x: Option<f64>, y: Option<f64>| x.zip(y).map(|(x, y)| x.max(y));
        self.each_figure(other, f64::min, f64::max, isink)
    }

    /// An amplifier no better than either in any check: each figure the worse of the two.
    pub fn worse_of(&self, other: &Self) -> Self {
        let isink = |x: Option<f64>, y: Option<f64>| match (x, y) {
            (Some(x), Some(y)) => Some(x.min(y)),
            (one, other) => one.or(other),
        };
        self.each_figure(other, f64::max, f64::min, isink)
    }

    /// Joins two amplifiers figure by figure: `less` where less is better, `more` where more is.
    fn each_figure(
        &self,
        other: &Self,
        less: fn(f64, f64) -> f64,
        more: fn(f64, f64) -> f64,
        isink: impl Fn(Option<f64>, Option<f64>) -> Option<f64>,
    ) -> Self {
        let (p, q) = (&self.part, &other.part);
        let part = Amplifier {
            vs_min_v: less(p.vs_min_v, q.vs_min_v),
            vs_max_v: more(p.vs_max_v, q.vs_max_v),
            vcm_low_v: less(p.vcm_low_v, q.vcm_low_v),
            vcm_high_v: less(p.vcm_high_v, q.vcm_high_v),
            swing_low_v: less(p.swing_low_v, q.swing_low_v),
            swing_high_v: less(p.swing_high_v, q.swing_high_v),
            iout_a: more(p.iout_a, q.iout_a),
            ib_max_a: less(p.ib_max_a, q.ib_max_a),
            iq_max_a: less(p.iq_max_a, q.iq_max_a),
            rth_ja_c_per_w: less(p.rth_ja_c_per_w, q.rth_ja_c_per_w),
            isink_a: isink(p.isink_a, q.isink_a),
            // The others work through the figures at the rail below.
            ..*p
        };
        Self {
            part,
            fixed_error_v: less(self.fixed_error_v, other.fixed_error_v),
            common_mode: less(self.common_mode, other.common_mode),
            allowed_rise_c: more(self.allowed_rise_c, other.allowed_rise_c),
            allowed_fault_rise_c: more(self.allowed_fault_rise_c, other.allowed_fault_rise_c),
            fault_rise_c: less(self.fault_rise_c, other.fault_rise_c),
        }
    }

    /// The names of the stand-ins that this amplifier leans on.
    pub fn stand_ins_used(&self) -> impl Iterator<Item = &'static str> + use<> {
        let p = &self.part;
        [
            (p.gain_min_db.is_none(), "assume.gain_db"),
            (p.psrr_min_db.is_none(), "assume.psrr_db"),
            (p.cmrr_min_db.is_none(), "assume.cmrr_db"),
            (p.vs_test_v.is_none(), "assume.vs_test_v"),
        ]
        .into_iter()
        .filter_map(|(blank, key)| blank.then_some(key))
    }
}
