//! The pass transistor, on its heatsink or unmounted.
//!
//! Model page, section 4.5.

use crate::check::{Check, Finding, Tally};
use crate::curve::{gain, safe_current_a, voltage_v};
use crate::parts::{Heatsink, Transistor};
use crate::rail::{RATED_AT_C, Rail};
use quantity::digits::{at_most, below, compare};
use quantity::points::Points;
use std::cmp::Ordering;
use std::ops::ControlFlow::{self, Continue};

/// Source: common practice; VBE falls by 2.0 to 2.5 mV/°C (S. Franco, "Design with Operational
/// Amplifiers and Analog Integrated Circuits", uses 2). The end that needs more headroom is taken.
const VBE_DRIFT_V_PER_C: f64 = 0.0025;

/// No transistor keeps less than this share of its gain in the cold.
const LEAST_GAIN_SHARE: f64 = 0.2;

/// Time in which a sink of unknown heat capacity is taken to warm up, s.
const UNKNOWN_SINK_S: f64 = 50.0;

/// Up to this an unmounted case of unknown heat capacity stays as it was, s.
const UNKNOWN_CASE_S: f64 = 0.1;

/// The heaviest work that the feed and the load can put on any transistor of this rail.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Duty {
    /// IE: the greatest emitter current, A.
    pub ie_a: f64,
    /// A: collector voltage at no load, VUmax − VLmin, V.
    pub open_v: f64,
    /// S: how far the feed falls to full load, VUmax − VUL, V.
    pub sag_v: f64,
    /// P: dissipation at the hottest load, W.
    pub power_w: f64,
    /// PF: dissipation into a short, VUmax·IF, W; 0 without a fault.
    pub fault_power_w: f64,
}

impl Duty {
    /// The duty of a rail.
    ///
    /// The feed falls in a straight line with the load, so (A − S·x)·x·IE is greatest at full load,
    /// or at x = A/2S where that lies below full load.
    ///
    /// ```
    /// # use circuit::pass::hottest_load_w;
    /// assert_eq!(hottest_load_w(13.96, 2.0, 0.802), (13.96 - 2.0) * 0.802);
    /// assert_eq!(hottest_load_w(20.0, 20.0, 1.0), 5.0);
    /// ```
    pub fn new(rail: &Rail) -> Self {
        let ie_a = rail.emitter_current_a();
        let open_v = rail.feed.max_v - rail.lowest_output_v();
        let sag_v = rail.feed.max_v - rail.feed.max_loaded_v;
        Self {
            ie_a,
            open_v,
            sag_v,
            power_w: hottest_load_w(open_v, sag_v, ie_a),
            fault_power_w: rail.fault.map_or(0.0, |f| rail.feed.max_v * f.limit_a),
        }
    }

    /// v(i): the collector voltage at the load `i_a`, V.
    pub fn collector_v(&self, i_a: f64) -> f64 {
        self.open_v - self.sag_v * i_a / self.ie_a
    }
}

/// P: dissipation at the hottest load, W.
pub fn hottest_load_w(open_v: f64, sag_v: f64, ie_a: f64) -> f64 {
    let below_full_load = below(open_v, 2.0 * sag_v) && open_v > 0.0;
    if below_full_load { open_v * open_v * ie_a / (4.0 * sag_v) } else { (open_v - sag_v) * ie_a }
}

/// Temperatures of a case, °C.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct CaseTemperatures {
    /// TC: in service.
    pub service_c: f64,
    /// TF: at the end of a fault; as in service without one.
    pub fault_c: f64,
}

impl CaseTemperatures {
    /// The case of a transistor on a chosen heatsink.
    pub fn on_heatsink(sink: &Heatsink, duty: &Duty, rail: &Rail) -> Self {
        Self::on_sink(sink.rth_sa_c_per_w, sink.cth_j_per_c, duty, rail)
    }

    /// The case on the sink that the sheet brings; None where it brings none.
    pub fn on_own_sink(duty: &Duty, rail: &Rail) -> Option<Self> {
        rail.thermal.sink_c_per_w.map(|rth_sa| Self::on_sink(rth_sa, None, duty, rail))
    }

    fn on_sink(rth_sa: f64, cth: Option<f64>, duty: &Duty, rail: &Rail) -> Self {
        let rth_cs = rail.thermal.interface_c_per_w;
        let tmax = rail.ambient.max_c;
        let service_c = tmax + duty.power_w * (rth_cs + rth_sa);
        let Some(fault) = rail.fault else {
            return Self { service_c, fault_c: service_c };
        };
        let pf = duty.fault_power_w;
        let pm = duty.power_w.max(pf);
        let fault_c = if fault.is_lasting() {
            tmax + pm * (rth_cs + rth_sa)
        } else {
            let warmed = match cth {
                Some(cth) => pf * fault.lasts_s / cth,
                None => pf * rth_sa * fault.lasts_s / UNKNOWN_SINK_S,
            };
            tmax + pm * rth_cs + (duty.power_w * rth_sa + warmed).min(pm * rth_sa)
        };
        Self { service_c, fault_c }
    }
}

/// Temperatures of an unmounted transistor.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Unmounted {
    /// TJ, °C.
    pub junction_c: f64,
    /// Its case.
    pub case: CaseTemperatures,
}

impl Unmounted {
    /// A transistor in free air; None where its row gives no rth_ja or the sheet brings a sink.
    pub fn new(part: &Transistor, duty: &Duty, rail: &Rail) -> Option<Self> {
        if !rail.chooses_heatsink() {
            return None;
        }
        let rth_ja = part.rth_ja_c_per_w?;
        let tmax = rail.ambient.max_c;
        let junction_c = tmax + duty.power_w * rth_ja;
        let service_c = junction_c - duty.power_w * part.rth_jc_c_per_w;
        let fault_c = rail.fault.map_or(service_c, |fault| {
            let pf = duty.fault_power_w;
            let for_ever = tmax + duty.power_w.max(pf) * (rth_ja - part.rth_jc_c_per_w);
            if fault.is_lasting() {
                return for_ever;
            }
            match part.cth_j_per_c {
                Some(cth) => (service_c + pf * fault.lasts_s / cth).min(for_ever),
                None if at_most(fault.lasts_s, UNKNOWN_CASE_S) => service_c,
                None => for_ever,
            }
        });
        Some(Self { junction_c, case: CaseTemperatures { service_c, fault_c } })
    }
}

/// The hardest load against the safe operating area: current and what the curve allows, A.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct HardestLoad {
    /// i.
    pub asked_a: f64,
    /// soa_dc(v(i)), at 25 °C case.
    pub curve_a: f64,
}

impl HardestLoad {
    fn ratio(&self) -> f64 {
        if self.curve_a > 0.0 { self.asked_a / self.curve_a } else { f64::INFINITY }
    }
}

/// The load i in 0 < i ≤ IE at which i/soa_dc(v(i)) is greatest; the larger i where equal.
///
/// It is IE, a point of the curve, or within a piece of slope −n (in ln v, ln I; n > 0) the place
/// v = A·n/(1 + n), where the derivative of (A − v)·v^n vanishes.
pub fn hardest_load(curve: &Points, duty: &Duty) -> HardestLoad {
    let full = |asked_a| HardestLoad {
        asked_a,
        curve_a: safe_current_a(curve, duty.collector_v(asked_a)),
    };
    if below(curve.last().0, duty.open_v) {
        return HardestLoad { asked_a: duty.ie_a, curve_a: 0.0 };
    }
    let mut hardest = full(duty.ie_a);
    if duty.sag_v <= 0.0 {
        return hardest;
    }
    let mut consider = |v_v: f64| {
        let i_a = (duty.open_v - v_v) * duty.ie_a / duty.sag_v;
        if i_a > 0.0 && at_most(i_a, duty.ie_a) {
            let load = HardestLoad { asked_a: i_a, curve_a: safe_current_a(curve, v_v) };
            let harder = compare(load.ratio(), hardest.ratio())
                .then_with(|| compare(load.asked_a, hardest.asked_a))
                == Ordering::Greater;
            if harder {
                hardest = load;
            }
        }
    };
    for &(v_v, _) in curve.as_slice() {
        consider(v_v);
    }
    for piece in curve.as_slice().windows(2) {
        let ((v0, i0), (v1, i1)) = (piece[0], piece[1]);
        let n = (i0 / i1).ln() / (v1 / v0).ln();
        if n > 0.0 {
            let v_v = duty.open_v * n / (1.0 + n);
            if at_most(v0, v_v) && at_most(v_v, v1) {
                consider(v_v);
            }
        }
    }
    hardest
}

/// Base currents that the amplifier must deliver, A.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct BaseCurrents {
    /// IB: the greatest of any load up to IE.
    pub most_a: f64,
    /// IB0: at the first point of the gain curve; the base current is never taken to be less.
    pub first_point_a: f64,
}

/// IB and IB0 of a transistor on a rail; infinite where the gain is not promised.
///
/// hFE(i) = hfe_min(i)·max(0.2, 1 + αβ·(min(Tmin, 25) − 25)); IB is the greatest of i/(hFE + 1) at
/// IE and at the points of the curve below it.
pub fn base_currents(part: &Transistor, duty: &Duty, rail: &Rail) -> BaseCurrents {
    let tempco =
        part.hfe_tempco_per_c.unwrap_or_else(|| rail.stand_ins.hfe_tempco_per_c(part.junctions));
    let cold = rail.ambient.min_c.min(RATED_AT_C) - RATED_AT_C;
    let share = (1.0 + tempco * cold).max(LEAST_GAIN_SHARE);
    let base = |i_a: f64, hfe: f64| i_a / (hfe * share + 1.0);
    let (first_a, first_hfe) = part.hfe_min.first();
    let first_point_a = base(first_a, first_hfe);
    if below(duty.ie_a, first_a) {
        return BaseCurrents { most_a: first_point_a, first_point_a };
    }
    let at_full_load =
        gain(&part.hfe_min, duty.ie_a).map_or(f64::INFINITY, |hfe| base(duty.ie_a, hfe));
    let most_a = part
        .hfe_min
        .as_slice()
        .iter()
        .filter(|(i, _)| below(*i, duty.ie_a))
        .map(|&(i, hfe)| base(i, hfe))
        .fold(at_full_load, f64::max);
    BaseCurrents { most_a, first_point_a }
}

/// soa_t: the greatest current that any curve for a time of at least tF gives at VUmax, A.
pub fn fault_safe_current_a(part: &Transistor, rail: &Rail) -> f64 {
    let Some(fault) = rail.fault else { return 0.0 };
    part.soa_pulse
        .given()
        .filter(|&(time_s, _)| fault.is_covered_by(time_s))
        .map(|(_, curve)| safe_current_a(curve, rail.feed.max_v))
        .fold(safe_current_a(&part.soa_dc, rail.feed.max_v), f64::max)
}

/// A transistor at a rail: its curves read where this rail works, so that every check is plain
/// arithmetic. Everything here is independent of the heatsink.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct PassFigures {
    /// Base-emitter junctions in series.
    pub junctions: u8,
    /// Collector-emitter rating, V.
    pub vceo_v: f64,
    /// Greatest collector current, A.
    pub ic_max_a: f64,
    /// Power rating at 25 °C case, W.
    pub pd_w: f64,
    /// Greatest junction temperature, °C.
    pub tj_max_c: f64,
    /// Junction to case, °C/W.
    pub rth_jc_c_per_w: f64,
    /// The hardest load against the safe operating area.
    pub hardest_load: HardestLoad,
    /// soa_t(VUmax), A.
    pub fault_curve_a: f64,
    /// vce_sat(IE), V; infinite where not promised.
    pub vce_sat_v: f64,
    /// VBEhi, V; infinite where not promised.
    pub vbe_hi_v: f64,
    /// Base currents.
    pub base: BaseCurrents,
    /// The amplifier's dissipation while it drives the base: max(P·IB/IE, A·IB0), W.
    pub drive_power_w: f64,
    /// Collector leakage, A; None where the sheet gives none.
    pub ileak_a: Option<f64>,
}

impl PassFigures {
    /// Reads a transistor's curves at a rail's duty.
    pub fn new(part: &Transistor, duty: &Duty, rail: &Rail) -> Self {
        let good_to_a = part.hfe_min.last().0;
        let base = base_currents(part, duty, rail);
        let colder_c = (RATED_AT_C - rail.ambient.min_c).max(0.0);
        let drift_v = f64::from(part.junctions) * VBE_DRIFT_V_PER_C * colder_c;
        let in_service_w = crate::curve::product(duty.power_w, base.most_a) / duty.ie_a;
        Self {
            junctions: part.junctions,
            vceo_v: part.vceo_v,
            ic_max_a: part.ic_max_a,
            pd_w: part.pd_w,
            tj_max_c: part.tj_max_c,
            rth_jc_c_per_w: part.rth_jc_c_per_w,
            hardest_load: hardest_load(&part.soa_dc, duty),
            fault_curve_a: fault_safe_current_a(part, rail),
            vce_sat_v: voltage_v(&part.vce_sat_v, duty.ie_a, good_to_a),
            vbe_hi_v: voltage_v(&part.vbe_max_v, duty.ie_a, good_to_a) + drift_v,
            base,
            drive_power_w: in_service_w.max(duty.open_v * base.first_point_a),
            ileak_a: part.ileak_max_a,
        }
    }

    /// d(T): the share of its power and safe operating area that the transistor has left at the case
    /// temperature `case_c`, 0 … 1.
    ///
    /// ```
    /// # use circuit::pass::derated;
    /// // 2N3055: 115 W at 25 °C, none at 200 °C; 65.71 W at 100 °C.
    /// // Source: ON Semiconductor 2N3055/MJ2955 data sheet, 0.657 W/°C.
    /// assert!((115.0 * derated(200.0, 100.0) - 65.714).abs() < 1e-3);
    /// ```
    pub fn derated(&self, case_c: f64) -> f64 {
        derated(self.tj_max_c, case_c)
    }

    /// `collector-voltage`: the highest feed against VCEO.
    pub fn collector_voltage(&self, rail: &Rail) -> Finding {
        Finding {
            check: Check::CollectorVoltage,
            asked: rail.feed.max_v,
            allowed: rail.derating.collector_voltage * self.vceo_v,
        }
    }

    /// `collector-current`: full load or fault current.
    pub fn collector_current(&self, duty: &Duty, rail: &Rail) -> Finding {
        Finding {
            check: Check::CollectorCurrent,
            asked: rail.fault.map_or(duty.ie_a, |f| duty.ie_a.max(f.limit_a)),
            allowed: rail.derating.collector_current * self.ic_max_a,
        }
    }

    /// `pass-power`: the hottest load against the power left at the case temperature.
    pub fn pass_power(&self, mounted: &Mounted, duty: &Duty, rail: &Rail) -> Finding {
        Finding {
            check: Check::PassPower,
            asked: duty.power_w,
            allowed: rail.derating.pass_power * self.pd_w * self.derated(mounted.case.service_c),
        }
    }

    /// `pass-junction`: the junction's rise above Tmax.
    pub fn pass_junction(&self, mounted: &Mounted, rail: &Rail) -> Finding {
        Finding {
            check: Check::PassJunction,
            asked: mounted.junction_c - rail.ambient.max_c,
            allowed: rail.derating.junction_c(self.tj_max_c) - rail.ambient.max_c,
        }
    }

    /// `soa-load`: the hardest load against the derated DC safe operating area.
    pub fn soa_load(&self, mounted: &Mounted, rail: &Rail) -> Finding {
        Finding {
            check: Check::SoaLoad,
            asked: self.hardest_load.asked_a,
            allowed: self.service_area_a(self.hardest_load.curve_a, mounted, rail),
        }
    }

    /// What is left in service of a current that the DC curve gives at 25 °C case: soa·I·d(TC), A.
    pub fn service_area_a(&self, curve_a: f64, mounted: &Mounted, rail: &Rail) -> f64 {
        rail.derating.soa * curve_a * self.derated(mounted.case.service_c)
    }

    /// What is left at the end of a fault of a current that a curve gives at 25 °C case:
    /// soa_fault·I·d(TF), A.
    pub fn fault_area_a(&self, curve_a: f64, mounted: &Mounted, rail: &Rail) -> f64 {
        rail.derating.soa_fault * curve_a * self.derated(mounted.case.fault_c)
    }

    /// `soa-fault`: the fault current against the derated safe operating area for its time; None
    /// without a fault.
    pub fn soa_fault(&self, mounted: &Mounted, rail: &Rail) -> Option<Finding> {
        let fault = rail.fault?;
        Some(Finding {
            check: Check::SoaFault,
            asked: fault.limit_a,
            allowed: self.fault_area_a(self.fault_curve_a, mounted, rail),
        })
    }

    /// `fault-junction`: the junction at the end of a fault; None without a fault over 1 s.
    pub fn fault_junction(&self, mounted: &Mounted, duty: &Duty, rail: &Rail) -> Option<Finding> {
        let fault = rail.fault?;
        fault.heats_junctions().then(|| Finding {
            check: Check::FaultJunction,
            asked: mounted.case.fault_c + duty.fault_power_w * self.rth_jc_c_per_w
                - rail.ambient.max_c,
            allowed: rail.derating.fault_junction_c(self.tj_max_c) - rail.ambient.max_c,
        })
    }

    /// `dropout`: headroom for the saturation voltage.
    pub fn dropout(&self, rail: &Rail) -> Finding {
        Finding {
            check: Check::Dropout,
            asked: rail.highest_output_v() + self.vce_sat_v,
            allowed: rail.feed.min_v,
        }
    }

    /// All checks of the transistor on its sink, in page order.
    #[inline]
    pub fn checks(
        &self,
        mounted: &Mounted,
        duty: &Duty,
        rail: &Rail,
        tally: &mut impl Tally,
    ) -> ControlFlow<()> {
        tally.take(self.collector_voltage(rail))?;
        tally.take(self.collector_current(duty, rail))?;
        tally.take(self.pass_power(mounted, duty, rail))?;
        tally.take(self.pass_junction(mounted, rail))?;
        tally.take(self.soa_load(mounted, rail))?;
        if let Some(finding) = self.soa_fault(mounted, rail) {
            tally.take(finding)?;
        }
        if let Some(finding) = self.fault_junction(mounted, duty, rail) {
            tally.take(finding)?;
        }
        tally.take(self.dropout(rail))?;
        Continue(())
    }
}

/// d(T) for a junction limit.
pub fn derated(tj_max_c: f64, case_c: f64) -> f64 {
    ((tj_max_c - case_c) / (tj_max_c - RATED_AT_C)).clamp(0.0, 1.0)
}

/// A transistor where it is mounted: its temperatures.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Mounted {
    /// TJ in service, °C.
    pub junction_c: f64,
    /// The case.
    pub case: CaseTemperatures,
}

impl Mounted {
    /// On a chosen heatsink, on the sink that the sheet brings, or in free air. None where a heatsink is
    /// chosen beside the sheet's own, or the transistor can't go without one.
    pub fn new(
        part: &Transistor,
        figures: &PassFigures,
        sink: Option<&Heatsink>,
        duty: &Duty,
        rail: &Rail,
    ) -> Option<Self> {
        match (sink, CaseTemperatures::on_own_sink(duty, rail)) {
            (None, Some(case)) => Some(Self::on(case, figures, duty)),
            (None, None) => Unmounted::new(part, duty, rail).map(Self::from),
            (Some(sink), None) => {
                Some(Self::on(CaseTemperatures::on_heatsink(sink, duty, rail), figures, duty))
            }
            (Some(_), Some(_)) => None,
        }
    }

    /// On a sink: TJ = TC + P·θJC.
    pub fn on(case: CaseTemperatures, figures: &PassFigures, duty: &Duty) -> Self {
        Self { junction_c: case.service_c + duty.power_w * figures.rth_jc_c_per_w, case }
    }
}

impl From<Unmounted> for Mounted {
    fn from(unmounted: Unmounted) -> Self {
        Self { junction_c: unmounted.junction_c, case: unmounted.case }
    }
}
