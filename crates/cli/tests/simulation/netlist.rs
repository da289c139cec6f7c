//! The circuit of a stage at a corner, as the simulator reads it.
//!
//! | element | how it is modelled |
//! |---|---|
//! | feed | a source; between no load and full load it falls in a straight line |
//! | zener | voltage and slope resistance; below its test current the impedance rises by the power of the current that its two printed impedances give; drift follows the junction, which it heats itself |
//! | amplifier | finite gain, offset with supply and common-mode rejection, input current, output clamped to its swing, supply current |
//! | transistor | base current from the gain curve, base-emitter voltage from its curve, both looked up by the simulator at the current that flows |
//! | heat | a network of thermal resistances: 1 V is 1 °C, 1 A is 1 W |

use crate::corner::{Corner, End};
use crate::stage::Stage;
use circuit::parts::{MeasuredAt, OverCurrent, ResistorLine};
use circuit::rail::Output;

/// Source: S. Franco, "Design with Operational Amplifiers and Analog Integrated Circuits", example 11.11:
/// −2 mV/°C for a silicon junction.
const VBE_V_PER_C: f64 = 0.002;

/// Source: T. R. Kuphaldt, "Lessons In Electric Circuits", vol. III, ch. 4: gain doubles from −55 °C to 85 °C.
const GAIN_DOUBLES_OVER_C: f64 = 140.0;

/// In place of a link, Ω: nothing beside resistors of some kΩ.
const LINK_OHM: f64 = 1e-6;

/// How the amplifier's output ends.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Swing {
    /// Nowhere: a point whose drive lies within the swing is one of the real circuit too.
    Unlimited,
    /// Where the row says.
    Limited,
}

/// The netlist of one corner, without commands.
pub fn of(stage: &Stage<'_>, corner: &Corner, swing: Swing) -> String {
    let rail = stage.rail;
    let full_a = stage.full_current_a();
    // The least feed is the valley under full load; the highest stands without load and falls with it.
    let (feed_v, falls_v) = match corner.feed {
        End::Low => (rail.feed.min_v, 0.0),
        End::Nominal => (rail.feed.nominal_v, 0.0),
        End::High => (rail.feed.max_v, rail.feed.max_v - rail.feed.max_loaded_v),
    };
    let load_a = if corner.load == End::Low { rail.load.min_a } else { rail.load.max_a };
    let ambient_c = match corner.ambient {
        End::Low => rail.ambient.min_c,
        End::Nominal => 25.0,
        End::High => rail.ambient.max_c,
    };
    let rz_ohm = line_ohm(stage, stage.rz_ohm, stage.bias_line, corner.rz);
    [
        format!("{corner:?}"),
        format!("Bfeed fs 0 V = {feed_v:e} - {falls_v:e}*min(1, i(Ve)/{full_a:e})"),
        "Vfeed fs f 0".to_owned(),
        format!("Rz f zi {rz_ohm:e}"),
        "Vz zi z 0".to_owned(),
        format!("Bz z 0 V = {}", zener(stage, corner, ambient_c)),
        amplifier(stage, corner, swing),
        pass(stage, ambient_c),
        divider(stage, corner),
        format!("Iload o 0 {load_a:e}"),
        heat(stage, ambient_c),
        ".options reltol=1e-7 vntol=1e-9 abstol=1e-12 itl1=500".to_owned(),
    ]
    .join("\n")
}

/// A resistor of a line at an end of tolerance and drift over the sheet's temperatures.
fn line_ohm(stage: &Stage<'_>, ohm: f64, line: &ResistorLine, end: End) -> f64 {
    ohm * ends(stage, line.tol, line.tempco_per_c, end)
}

fn ends(stage: &Stage<'_>, tol: f64, tempco_per_c: f64, end: End) -> f64 {
    let span_c =
        (stage.rail.ambient.min_c - 25.0).abs().max((stage.rail.ambient.max_c - 25.0).abs());
    (1.0 + end.sign() * tol) * (1.0 + end.sign() * tempco_per_c * span_c)
}

fn zener(stage: &Stage<'_>, corner: &Corner, ambient_c: f64) -> String {
    let z = stage.zener;
    let (izt, zzt) = (z.izt_a, z.zzt_ohm);
    // The solver begins at no current, where the knee has no end; no corner comes near this floor.
    let i = format!("max(i(Vz), {:e})", izt / 100.0);
    let slope = format!("{zzt:e}*(i(Vz) - {izt:e})");
    if corner.zener == End::Nominal {
        return format!("{:e} + {slope}", z.vz_v);
    }
    let v_25 = z.vz_v * (1.0 + corner.zener.sign() * z.tol);
    let theta = (z.tj_max_c - 25.0) / z.pd_w;
    let warm_c = if z.vz_at == MeasuredAt::Warm { v_25 * izt * theta } else { 0.0 };
    let rise_c = format!("({ambient_c:e} - 25 - {warm_c:e} + {theta:e}*v(z)*{i})");
    // Of all coefficients that the sheet allows the one that drifts further to this end.
    let (tc_min, tc_max) = (z.tc_min_v_per_c, z.tc_max_v_per_c);
    let further = if corner.zener == End::High { "max" } else { "min" };
    let drift = format!("{further}({tc_min:e}*{rise_c}, {tc_max:e}*{rise_c})");
    // The part with the greatest impedance goes furthest up; the one that goes furthest down has none
    // above its test current, and its knee below.
    let bend = if corner.zener == End::High {
        format!("max(0, {slope})")
    } else {
        let m = match (z.zzk_ohm, z.izk_a) {
            (Some(zzk), Some(izk)) if izk < izt && zzt > 0.0 => {
                ((zzk / zzt).ln() / (izt / izk).ln()).max(1.0)
            }
            _ => stage.rail.stand_ins.zener_knee,
        };
        let droop = if m - 1.0 < 1e-9 {
            format!("{:e}*ln({izt:e}/{i})", zzt * izt)
        } else {
            format!("{:e}*(exp({:e}*ln({izt:e}/{i})) - 1)", zzt * izt / (m - 1.0), m - 1.0)
        };
        format!("(0 - max(0, {droop}))")
    };
    format!("{v_25:e} + {drift} + {bend}")
}

fn amplifier(stage: &Stage<'_>, corner: &Corner, swing: Swing) -> String {
    let a = stage.amplifier;
    let stand_ins = &stage.rail.stand_ins;
    let ratio = |db: Option<f64>, stand_in: f64| 10f64.powf(db.unwrap_or(stand_in) / 20.0);
    let gain = ratio(a.gain_min_db, stand_ins.gain_db);
    let psrr = ratio(a.psrr_min_db, stand_ins.psrr_db);
    let cmrr = ratio(a.cmrr_min_db, stand_ins.cmrr_db);
    let vs_test_v = a.vs_test_v.unwrap_or(stand_ins.vs_test_v);
    let sign = corner.amplifier.sign();
    let offset = a.vos_max_v;
    let error =
        format!("{sign:e}*({offset:e} + abs(v(f) - {vs_test_v:e})/{psrr:e} + v(z)/{cmrr:e})");
    let driven = format!("{gain:e}*(v(z) - v(d) + {error})");
    let (low, high) = (a.swing_low_v, a.swing_high_v);
    let drive = match swing {
        Swing::Unlimited => driven,
        Swing::Limited => format!("min(max({driven}, {low:e}), v(f) - {high:e})"),
    };
    [
        format!("Ba a 0 V = {drive}"),
        "Vb a b 0".to_owned(),
        format!("Iin d 0 {:e}", sign * a.ib_max_a),
        format!("Bs f 0 I = {:e} + i(Vb)", a.iq_max_a),
    ]
    .join("\n")
}

fn pass(stage: &Stage<'_>, ambient_c: f64) -> String {
    let q = stage.pass;
    let junctions = f64::from(q.junctions);
    let off_c = ambient_c - 25.0;
    let gain_factor = match (q.hfe_tempco_per_c, off_c < 0.0) {
        (_, false) => 1.0,
        (Some(tempco), true) => 1.0 + tempco * off_c,
        (None, true) if q.junctions == 1 => {
            (off_c * std::f64::consts::LN_2 / GAIN_DOUBLES_OVER_C).exp()
        }
        // Two such junctions would lose up to 2.4 % more gain than the stand-in for a darlington says
        // (`docs/trust.md`); what is asked here is whether the tool does what its stand-in says.
        (None, true) => 1.0 + stage.rail.stand_ins.hfe_tempco_per_c(q.junctions) * off_c,
    };
    let ln_i = "ln(max(i(Ve), 1e-9))";
    let ln_gain = curve(ln_i, q.hfe_min.as_slice(), f64::ln);
    let vbe = match &q.vbe_max_v {
        OverCurrent::Number(v) => format!("{v:e}"),
        OverCurrent::Points(points) => curve(ln_i, points.as_slice(), |v| v),
    };
    [
        format!("Bbe b e V = {vbe} - {:e}", junctions * VBE_V_PER_C * off_c),
        "Vc f c 0".to_owned(),
        format!("Bh h 0 V = {gain_factor:e}*exp({ln_gain})"),
        "Bc c e I = i(Ve)*v(h)/(v(h) + 1)".to_owned(),
        "Ve e o 0".to_owned(),
    ]
    .join("\n")
}

/// A curve over the logarithm of the current; beyond its ends the value of the end.
fn curve(ln_i: &str, points: &[(f64, f64)], y: fn(f64) -> f64) -> String {
    let mut places: Vec<(f64, f64)> = points.iter().map(|(i, value)| (i.ln(), y(*value))).collect();
    let (first, last) = (places[0], places[places.len() - 1]);
    places.insert(0, (first.0 - 30.0, first.1));
    places.push((last.0 + 30.0, last.1));
    let list: Vec<String> = places.iter().map(|(x, y)| format!("{x:e}, {y:e}")).collect();
    format!("pwl({ln_i}, {})", list.join(", "))
}

fn divider(stage: &Stage<'_>, corner: &Corner) -> String {
    let fixed = line_ohm(stage, stage.upper_ohm, stage.divider_line, corner.upper);
    let ri = line_ohm(stage, stage.ri_ohm, stage.divider_line, corner.ri);
    let upper = (fixed + track_ohm(stage, corner)).max(LINK_OHM);
    format!("Vf o u 0\nRf u d {upper:e}\nRi d 0 {ri:e}")
}

/// What of the pot's track is in the circuit, Ω.
pub fn track_ohm(stage: &Stage<'_>, corner: &Corner) -> f64 {
    let Some(pot) = stage.pot else { return 0.0 };
    match (corner.knob, corner.upper) {
        (End::Low, End::High) => pot.end_ohm,
        (End::Low, _) => 0.0,
        (End::High, end) => pot.value_ohm * ends(stage, pot.tol, pot.tempco_per_c, end),
        (End::Nominal, _) => {
            // The knob is set by hand until the output is right: RF = RI·(V/VZ − 1) less the fixed part.
            let Output::Adjustable { to_v, .. } = stage.rail.output else { return 0.0 };
            let z = stage.zener;
            let feed_v = stage.rail.feed.nominal_v;
            let i = (feed_v - z.vz_v + z.zzt_ohm * z.izt_a) / (stage.rz_ohm + z.zzt_ohm);
            let vz = z.vz_v + z.zzt_ohm * (i - z.izt_a);
            stage.ri_ohm * (to_v / vz - 1.0) - stage.upper_ohm
        }
    }
}

/// Junction, case, sink and air as a network.
fn heat(stage: &Stage<'_>, ambient_c: f64) -> String {
    let thermal = &stage.rail.thermal;
    let sink = stage.heatsink.map(|sink| sink.rth_sa_c_per_w).or(thermal.sink_c_per_w);
    let path = match sink {
        Some(sink) => stage.pass.rth_jc_c_per_w + thermal.interface_c_per_w + sink,
        None => stage.pass.rth_ja_c_per_w.expect("an unmounted transistor gives rth_ja"),
    };
    [
        "Bheat 0 tj I = (v(f) - v(o))*i(Vc) + (v(b) - v(o))*i(Vb)".to_owned(),
        format!("Rheat tj ta {path:e}"),
        format!("Vair ta 0 {ambient_c:e}"),
    ]
    .join("\n")
}
