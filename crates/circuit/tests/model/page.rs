//! The formulas of the model page, written down once more as the page has them: one long sum after
//! another, with its symbols, and without a function of the crate.

use super::parts::Case;
use circuit::parts::{MeasuredAt, OverCurrent, ResistorRating};
use circuit::rail::Output;
use quantity::points::Points;

const INF: f64 = f64::INFINITY;

/// A marked value with the ends of what it may measure.
#[derive(Debug, Clone, Copy)]
pub struct R {
    pub ohm: f64,
    pub lo: f64,
    pub hi: f64,
}

pub fn r(case: &Case, ohm: f64, tol: f64, tempco: f64) -> R {
    let dt = (case.rail.ambient.min_c - 25.0).abs().max((case.rail.ambient.max_c - 25.0).abs());
    R {
        ohm,
        lo: ohm * (1.0 - tol) * (1.0 - tempco * dt),
        hi: ohm * (1.0 + tol) * (1.0 + tempco * dt),
    }
}

/// resistor_power·power_w·D.
pub fn allowed_w(case: &Case, rating: &ResistorRating) -> f64 {
    let d = (rating.zero_power_at_c - case.rail.ambient.max_c)
        / (rating.zero_power_at_c - rating.full_power_to_c);
    case.rail.derating.resistor_power * rating.power_w * d.clamp(0.0, 1.0)
}

/// Section 4.1: the reference with a value of RZ.
#[derive(Debug, Clone, Copy)]
pub struct Reference {
    pub v0_hi: f64,
    pub vz_lo: f64,
    pub vz_hi: f64,
    pub vz_n: f64,
    pub iz_lo: f64,
    pub iz_hi: f64,
    pub iz_n: f64,
    pub pe: f64,
}

pub fn reference(case: &Case, rz: &R) -> Reference {
    let (z, feed, ambient) = (&case.zener, &case.rail.feed, &case.rail.ambient);
    let m = match (z.zzk_ohm, z.izk_a) {
        (Some(zzk), Some(izk)) if izk < z.izt_a && z.zzt_ohm > 0.0 => {
            ((zzk / z.zzt_ohm).ln() / (z.izt_a / izk).ln()).max(1.0)
        }
        _ => case.rail.stand_ins.zener_knee,
    };
    let w = |i: f64| {
        if i >= z.izt_a {
            0.0
        } else if i <= 0.0 {
            INF
        } else if m == 1.0 {
            z.zzt_ohm * z.izt_a * (z.izt_a / i).ln()
        } else {
            z.zzt_ohm * z.izt_a * ((z.izt_a / i).powf(m - 1.0) - 1.0) / (m - 1.0)
        }
    };
    let i = |vu: f64, v0: f64, r: f64| (vu - v0 + z.zzt_ohm * z.izt_a) / (r + z.zzt_ohm);
    let j = |vu: f64, v0: f64, r: f64| (vu - v0) / r;
    let theta = (z.tj_max_c - 25.0) / z.pd_w;
    let tw = if z.vz_at == MeasuredAt::Warm { z.vz_v * z.izt_a * theta } else { 0.0 };
    let (mut pe, mut v0_lo, mut v0_hi, mut vz_hi, mut iz_hi) = (0.0, 0.0, 0.0, 0.0, 0.0);
    for _ in 0..3 {
        let cold = ambient.min_c - 25.0 - tw * (1.0 + z.tol);
        let hot = ambient.max_c - 25.0 + f64::max(0.0, pe * theta - tw * (1.0 - z.tol));
        let d = [
            z.tc_min_v_per_c * cold,
            z.tc_min_v_per_c * hot,
            z.tc_max_v_per_c * cold,
            z.tc_max_v_per_c * hot,
        ];
        v0_hi = z.vz_v * (1.0 + z.tol) + d.into_iter().fold(-INF, f64::max);
        v0_lo = z.vz_v * (1.0 - z.tol) + d.into_iter().fold(INF, f64::min);
        vz_hi = v0_hi + z.zzt_ohm * f64::max(0.0, i(feed.max_v, v0_hi, rz.lo) - z.izt_a);
        let vm = v0_lo - w(j(feed.max_v, v0_lo, rz.lo));
        iz_hi = (feed.max_v - vm) / rz.lo;
        let vp = (feed.max_v / 2.0).max(vm).min(vz_hi);
        pe = vp * (feed.max_v - vp) / rz.lo;
    }
    let iz_n = i(feed.nominal_v, z.vz_v, rz.ohm);
    Reference {
        v0_hi,
        vz_lo: v0_lo - w(j(feed.min_v, v0_lo, rz.hi)),
        vz_hi,
        vz_n: z.vz_v + z.zzt_ohm * (iz_n - z.izt_a),
        iz_lo: i(feed.min_v, v0_hi, rz.hi).min(j(feed.min_v, v0_hi, rz.hi)),
        iz_hi,
        iz_n,
        pe,
    }
}

/// Name, asked and allowed of a check.
pub type Row = (&'static str, f64, f64);

/// Tj(p).
fn tj(case: &Case, tj_max: f64) -> f64 {
    let d = &case.rail.derating;
    (tj_max - d.junction_below_max_c).min(d.junction_cap_c.unwrap_or(INF))
}

/// Section 4.1.
pub fn reference_rows(case: &Case, rz: &R) -> Vec<Row> {
    let (z, tmax) = (&case.zener, case.rail.ambient.max_c);
    let f = reference(case, rz);
    let theta = (z.tj_max_c - 25.0) / z.pd_w;
    let left = ((z.tj_max_c - tmax) / (z.tj_max_c - 25.0)).clamp(0.0, 1.0);
    vec![
        ("zener-bias", z.iz_min_a, f.iz_lo),
        ("zener-power", f.pe, case.rail.derating.zener_power * z.pd_w * left),
        ("zener-junction", f.pe * theta, tj(case, z.tj_max_c) - tmax),
        ("rz-power", f.iz_hi * f.iz_hi * rz.lo, allowed_w(case, &case.bias_line.rating)),
        (
            "rz-voltage",
            f.iz_hi * rz.lo,
            case.rail.derating.resistor_voltage * case.bias_line.vmax_v,
        ),
    ]
}

/// εa of the amplifier beside a reference.
pub fn error_v(case: &Case, vz_hi: f64) -> f64 {
    let (a, s, feed) = (&case.amplifier, &case.rail.stand_ins, &case.rail.feed);
    let ratio = |db: f64| 10f64.powf(db / 20.0);
    let test = a.vs_test_v.unwrap_or(s.vs_test_v);
    a.vos_max_v
        + feed.min_v / ratio(a.gain_min_db.unwrap_or(s.gain_db))
        + (feed.max_v - test).abs().max((feed.min_v - test).abs())
            / ratio(a.psrr_min_db.unwrap_or(s.psrr_db))
        + vz_hi / ratio(a.cmrr_min_db.unwrap_or(s.cmrr_db))
}

/// Vreach, Vfloor, Vlow, Vtop; of a fixed output VLlo and VLhi stand for the last two.
pub fn outputs(case: &Case, f: &Reference, upper: &R, ri: &R, e: f64, ib: f64) -> [f64; 4] {
    let (lo, hi) = (f.vz_lo - e, f.vz_hi + e);
    if let Output::Fixed { .. } = case.rail.output {
        let vl_lo = (1.0 + upper.lo / ri.hi) * lo - ib * upper.hi;
        let vl_hi = (1.0 + upper.hi / ri.lo) * hi + ib * upper.hi;
        return [0.0, 0.0, vl_lo, vl_hi];
    }
    let p = r(case, case.pot.value_ohm, case.pot.tol, case.pot.tempco_per_c);
    let (max_lo, max_hi, end) = (upper.lo + p.lo, upper.hi + p.hi, upper.hi + case.pot.end_ohm);
    [
        (1.0 + max_lo / ri.hi) * lo - ib * max_lo,
        (1.0 + end / ri.lo) * hi + ib * end,
        (1.0 + upper.lo / ri.hi) * lo - ib * upper.lo,
        (1.0 + max_hi / ri.lo) * hi + ib * max_hi,
    ]
}

/// Sections 4.3 and 4.4 with an error and an input current.
pub fn divider_rows(case: &Case, f: &Reference, upper: &R, ri: &R, e: f64, ib: f64) -> Vec<Row> {
    let out = outputs(case, f, upper, ri, e, ib);
    let id_hi = (f.vz_hi + e) / ri.lo + ib;
    let d = &case.rail.derating;
    let (w, v) =
        (allowed_w(case, &case.divider_line.rating), d.resistor_voltage * case.divider_line.vmax_v);
    match case.rail.output {
        Output::Fixed { voltage_v, tolerance } => vec![
            ("output-error", (out[3] - voltage_v).max(voltage_v - out[2]), tolerance * voltage_v),
            ("rf-power", id_hi * id_hi * upper.hi, w),
            ("ri-power", id_hi * id_hi * ri.lo, w),
            ("rf-voltage", id_hi * upper.hi, v),
        ],
        Output::Adjustable { from_v, to_v, low_stop_v, ceiling_v } => {
            let p = r(case, case.pot.value_ohm, case.pot.tol, case.pot.tempco_per_c);
            let mut rows = vec![
                ("reach-high", to_v, out[0]),
                ("reach-low", out[1], from_v),
                ("low-stop", low_stop_v, out[2]),
            ];
            rows.extend(ceiling_v.map(|ceiling| ("ceiling", out[3], ceiling)));
            rows.extend([
                ("rx-power", id_hi * id_hi * upper.hi, w),
                ("ri-power", id_hi * id_hi * ri.lo, w),
                ("rx-voltage", id_hi * upper.hi, v),
                ("pot-power", id_hi * id_hi * p.hi, allowed_w(case, &case.pot.rating)),
            ]);
            let limit = case.pot.vmax_v.map(|v| d.resistor_voltage * v);
            rows.extend(limit.map(|limit| ("pot-voltage", id_hi * p.hi, limit)));
            rows
        }
    }
}

/// asked/allowed.
pub fn u(asked: f64, allowed: f64) -> f64 {
    if asked <= 0.0 {
        0.0
    } else if allowed <= 0.0 || asked == INF {
        INF
    } else {
        asked / allowed
    }
}

/// Section 4.2 with 4.3 and 4.4.
pub fn input_rows(case: &Case, f: &Reference, upper: &R, ri: &R) -> Vec<Row> {
    let (a, rail) = (&case.amplifier, &case.rail);
    let (e, ib) = (error_v(case, f.vz_hi), a.ib_max_a);
    let id_lo = (f.vz_lo - e) / ri.hi - ib;
    let id_hi = (f.vz_hi + e) / ri.lo + ib;
    let window = if u(id_hi, rail.divider.max_a) > u(rail.divider.min_a, id_lo) {
        (id_hi, rail.divider.max_a)
    } else {
        (rail.divider.min_a, id_lo)
    };
    let mut rows = vec![
        ("amp-supply-high", rail.feed.max_v, rail.derating.amp_supply * a.vs_max_v),
        ("amp-supply-low", a.vs_min_v, rail.feed.min_v),
        ("amp-input-low", a.vcm_low_v, f.vz_lo),
        ("amp-input-high", f.vz_hi + a.vcm_high_v, rail.feed.min_v),
        ("divider-window", window.0, window.1),
    ];
    rows.extend(divider_rows(case, f, upper, ri, e, ib));
    rows
}

fn log_log(curve: &Points, x: f64) -> Option<f64> {
    let points = curve.as_slice();
    if x <= points[0].0 {
        return Some(points[0].1);
    }
    points.windows(2).find(|p| x <= p[1].0).map(|p| {
        let ((x0, y0), (x1, y1)) = (p[0], p[1]);
        (y0.ln() + (x / x0).ln() / (x1 / x0).ln() * (y1 / y0).ln()).exp()
    })
}

fn volts(figure: &OverCurrent, hfe: &Points, i: f64) -> f64 {
    match figure {
        OverCurrent::Number(v) if i <= hfe.last().0 => *v,
        OverCurrent::Number(_) => INF,
        OverCurrent::Points(curve) => {
            let points = curve.as_slice();
            if i <= points[0].0 {
                return points[0].1;
            }
            points.windows(2).find(|p| i <= p[1].0).map_or(INF, |p| {
                let ((x0, y0), (x1, y1)) = (p[0], p[1]);
                y0 + (i / x0).ln() / (x1 / x0).ln() * (y1 - y0)
            })
        }
    }
}

/// VLmin and VLmax.
pub fn ends(case: &Case) -> (f64, f64) {
    match case.rail.output {
        Output::Fixed { voltage_v, tolerance } => {
            (voltage_v * (1.0 - tolerance), voltage_v * (1.0 + tolerance))
        }
        Output::Adjustable { low_stop_v, to_v, .. } => (low_stop_v, to_v),
    }
}

/// Section 4.5: figures of the transistor that other parts need too.
pub struct Pass {
    pub ie: f64,
    pub a: f64,
    pub p: f64,
    pub ib: f64,
    pub ib0: f64,
    pub vbe: f64,
    pub sat: f64,
}

pub fn pass(case: &Case) -> Pass {
    let (q, rail) = (&case.transistor, &case.rail);
    let ie = rail.load.max_a + rail.divider.max_a;
    let a = rail.feed.max_v - ends(case).0;
    let s = rail.feed.max_v - rail.feed.max_loaded_v;
    let p = if 2.0 * s > a && a > 0.0 { a * a * ie / (4.0 * s) } else { (a - s) * ie };
    let alpha = q.hfe_tempco_per_c.or(rail.stand_ins.hfe_tempco_per_c);
    let alpha = alpha.unwrap_or(if q.junctions == 2 { 0.008 } else { 0.005 });
    let share = (1.0 + alpha * (rail.ambient.min_c.min(25.0) - 25.0)).max(0.2);
    let base = |i: f64| log_log(&q.hfe_min, i).map_or(INF, |hfe| i / (hfe * share + 1.0));
    let first = q.hfe_min.first().0;
    let loads = q.hfe_min.as_slice().iter().map(|point| point.0).filter(|i| *i < ie);
    let ib = if ie < first { base(first) } else { loads.chain([ie]).map(base).fold(0.0, f64::max) };
    let cold = (25.0 - rail.ambient.min_c).max(0.0);
    Pass {
        ie,
        a,
        p,
        ib,
        ib0: base(first),
        vbe: volts(&q.vbe_max_v, &q.hfe_min, ie) + f64::from(q.junctions) * 0.0025 * cold,
        sat: volts(&q.vce_sat_v, &q.hfe_min, ie),
    }
}

/// Section 4.5. None where the transistor can't be mounted so.
pub fn pass_rows(case: &Case) -> Option<Vec<Row>> {
    let (q, rail) = (&case.transistor, &case.rail);
    let Pass { ie, a, p, sat, .. } = pass(case);
    let (d, tmax, cs) = (&rail.derating, rail.ambient.max_c, rail.thermal.interface_c_per_w);
    let s = rail.feed.max_v - rail.feed.max_loaded_v;
    let fault = rail.fault;
    let (i_f, t_f) = fault.map_or((0.0, 0.0), |f| (f.limit_a, f.lasts_s));
    let pf = rail.feed.max_v * i_f;
    let pm = p.max(pf);
    let unmounted = rail.thermal.sink_c_per_w.is_none() && case.unmounted;
    let (tc, tj_service, t_fault);
    if unmounted {
        let (ja, jc) = (q.rth_ja_c_per_w?, q.rth_jc_c_per_w);
        tj_service = tmax + p * ja;
        tc = tj_service - p * jc;
        let ever = tmax + pm * (ja - jc);
        t_fault = if t_f > 10.0 {
            ever
        } else if let Some(cth) = q.cth_j_per_c {
            (tc + pf * t_f / cth).min(ever)
        } else if t_f <= 0.1 {
            tc
        } else {
            ever
        };
    } else {
        let own = rail.thermal.sink_c_per_w;
        let sa = own.unwrap_or(case.heatsink.rth_sa_c_per_w);
        let cth = if own.is_some() { None } else { case.heatsink.cth_j_per_c };
        tc = tmax + p * (cs + sa);
        tj_service = tc + p * q.rth_jc_c_per_w;
        let warmed = cth.map_or(pf * sa * t_f / 50.0, |cth| pf * t_f / cth);
        t_fault = if t_f > 10.0 {
            tmax + pm * (cs + sa)
        } else {
            tmax + pm * cs + (p * sa + warmed).min(pm * sa)
        };
    }
    let left = |t: f64| ((q.tj_max_c - t) / (q.tj_max_c - 25.0)).clamp(0.0, 1.0);
    // The hardest load, by trying IE, the points of the curve, and the flat place of each piece.
    let points = q.soa_dc.as_slice();
    let mut hardest = if a > q.soa_dc.last().0 {
        (ie, 0.0)
    } else {
        (ie, log_log(&q.soa_dc, a - s).unwrap_or(0.0))
    };
    if s > 0.0 && a <= q.soa_dc.last().0 {
        let flat = points.windows(2).filter_map(|w| {
            let n = -(w[1].1 / w[0].1).ln() / (w[1].0 / w[0].0).ln();
            let v = a * n / (1.0 + n);
            (n > 0.0 && w[0].0 <= v && v <= w[1].0).then_some(v)
        });
        for v in points.iter().map(|point| point.0).chain(flat) {
            let i = (a - v) * ie / s;
            let allowed = log_log(&q.soa_dc, v).unwrap_or(0.0);
            if i > 0.0 && i <= ie && i / allowed > hardest.0 / hardest.1 * (1.0 + 1e-9) {
                hardest = (i, allowed);
            }
        }
    }
    let mut rows = vec![
        ("collector-voltage", rail.feed.max_v, d.collector_voltage * q.vceo_v),
        ("collector-current", ie.max(i_f), d.collector_current * q.ic_max_a),
        ("pass-power", p, d.pass_power * q.pd_w * left(tc)),
        ("pass-junction", tj_service - tmax, tj(case, q.tj_max_c) - tmax),
        ("soa-load", hardest.0, d.soa * hardest.1 * left(tc)),
    ];
    if fault.is_some() {
        let pulse = &q.soa_pulse;
        let timed =
            [(1.0, &pulse.s1), (0.1, &pulse.ms100), (0.01, &pulse.ms10), (0.001, &pulse.ms1)];
        let of = |curve: &Points| log_log(curve, rail.feed.max_v).unwrap_or(0.0);
        let allowed = timed
            .into_iter()
            .filter(|(time, _)| *time >= t_f)
            .filter_map(|(_, curve)| curve.as_ref())
            .map(of)
            .fold(of(&q.soa_dc), f64::max);
        rows.push(("soa-fault", i_f, d.soa_fault * allowed * left(t_fault)));
        if t_f > 1.0 {
            let allowed = q.tj_max_c - d.fault_junction_below_max_c - tmax;
            rows.push(("fault-junction", t_fault + pf * q.rth_jc_c_per_w - tmax, allowed));
        }
    }
    rows.push(("dropout", ends(case).1 + sat, rail.feed.min_v));
    Some(rows)
}

/// Section 4.6.
pub fn drive_rows(case: &Case) -> Vec<Row> {
    let (amp, rail, q) = (&case.amplifier, &case.rail, &case.transistor);
    let Pass { ie, a, p, ib, ib0, vbe, .. } = pass(case);
    let (d, tmax) = (&rail.derating, rail.ambient.max_c);
    // A product with an infinite part is infinite.
    let in_service = if ib == INF { INF } else { p * ib / ie };
    let heat = rail.feed.max_v * amp.iq_max_a + in_service.max(a * ib0);
    let mut rows = vec![
        ("base-drive", ib, d.amp_current * amp.iout_a),
        ("swing-high", ends(case).1 + vbe + amp.swing_high_v, rail.feed.min_v),
        ("swing-low", amp.swing_low_v, ends(case).0),
        ("amp-junction", heat * amp.rth_ja_c_per_w, tj(case, amp.tj_max_c) - tmax),
    ];
    if rail.fault.is_some_and(|f| f.lasts_s > 1.0) {
        let short = amp.iq_max_a + amp.isc_max_a.unwrap_or(INF);
        let allowed = amp.tj_max_c - d.fault_junction_below_max_c - tmax;
        rows.push(("amp-fault", rail.feed.max_v * short * amp.rth_ja_c_per_w, allowed));
    }
    if let Some(ileak) = q.ileak_max_a {
        rows.extend(amp.isink_a.map(|isink| ("leakage-sink", ileak, d.amp_current * isink)));
        let past = if q.junctions == 2 { ileak } else { 0.0 };
        rows.push(("no-load", amp.ib_max_a + past, rail.load.min_a + rail.divider.min_a));
    }
    rows
}
