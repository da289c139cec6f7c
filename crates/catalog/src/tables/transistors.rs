//! `transistors.csv`: pass transistors.

use super::common::SHARED;
use super::*;
use crate::column::Axes;
use circuit::parts::{PulseCurves, Transistor};

/// The only polarity that the circuit takes.
const NPN: &[u8] = b"npn";

const GAIN: Axes =
    Axes { x: Unit::Ampere, y: Unit::Plain, x_is: "collector current", y_is: "current gain" };
const DROP: Axes =
    Axes { x: Unit::Ampere, y: Unit::Volt, x_is: "collector current", y_is: "voltage" };
const AREA: Axes = Axes {
    x: Unit::Volt,
    y: Unit::Ampere,
    x_is: "collector-emitter voltage",
    y_is: "collector current",
};

columns! {
    first crate::tables::common::COUNT, after SHARED;
    polarity: needed(Cell::Text, "`npn`, in any case; rows of any other polarity are left out");
    junctions: needed(Cell::Count(1, 2), "base-emitter junctions in series: 1, or 2 for a darlington");
    vceo_v: needed(RATED_VOLTS, "collector-emitter rating with open base")
        .plausible(5.0, 2000.0);
    ic_max_a: needed(AMPERES, "greatest continuous collector current")
        .plausible(0.01, 500.0);
    pd_w: needed(WATTS, "power rating at 25 °C case: the figure with a perfect heatsink, not the free-air one; (tj_max_c − 25)/rth_jc_c_per_w gives it")
        .plausible(0.1, 2000.0);
    tj_max_c: needed(JUNCTION, "greatest junction temperature")
        .plausible(85.0, 250.0);
    rth_jc_c_per_w: needed(number(Unit::CelsiusPerWatt, FROM_ZERO), "junction to case")
        .plausible(0.05, 200.0);
    hfe_min: needed(Cell::Points(GAIN), "least current gain over the collector current, as far as the sheet promises it; a gain at one current is one point `3:1000`")
        .plausible(2.0, 1e5);
    vbe_max_v: needed(Cell::NumberOrPoints(DROP), "largest base-emitter voltage: a number, good up to the last point of `hfe_min`, or points")
        .plausible(0.5, 5.0);
    vce_sat_v: needed(Cell::NumberOrPoints(DROP), "largest saturation voltage: a number, good up to the last point of `hfe_min`, or points")
        .plausible(0.02, 6.0);
    soa_dc: needed(Cell::Points(AREA), "safe operating area, DC, at 25 °C case: the corners of the curve");
    rth_ja_c_per_w: optional(THERMAL, "can't go unmounted", "junction to ambient without a heatsink")
        .plausible(5.0, 500.0);
    cth_j_per_c: optional(HEAT_CAPACITY, "unmounted, a short of more than 0.1 s counts as lasting for ever", "heat capacity of the case without a heatsink")
        .plausible(0.01, 100.0);
    hfe_tempco_pct_per_c: optional(number(Unit::PercentPerDegree, ANY), "`assume.hfe_tempco_pct_per_c`", "rise of the gain with temperature")
        .plausible(0.0, 2.0);
    ileak_max_a: optional(AMPERES_FROM_ZERO, "leakage is not checked", "largest collector leakage, hot")
        .plausible(1e-9, 0.1);
    soa_1s: optional(Cell::Points(AREA), "`soa_dc` serves", "safe operating area for pulses of 1 s, at 25 °C case");
    soa_100ms: optional(Cell::Points(AREA), "a longer curve serves", "the same for 100 ms");
    soa_10ms: optional(Cell::Points(AREA), "a longer curve serves", "the same for 10 ms");
    soa_1ms: optional(Cell::Points(AREA), "a longer curve serves", "the same for 1 ms");
    vebo_v: optional(RATED_VOLTS, "not stated", "reverse base-emitter rating; not checked")
        .plausible(1.0, 50.0);
    ft_hz: optional(HERTZ, "not stated", "transition frequency; stability is not checked")
        .plausible(1e3, 1e11);
}

impl Figures for Transistor {
    const KIND: Kind = Kind::Transistors;

    fn left_out<'r>(cells: &Cells<'r, '_>) -> Option<&'r [u8]> {
        let polarity = cells.raw(at::polarity);
        (!polarity.is_empty() && !polarity.eq_ignore_ascii_case(NPN)).then_some(polarity)
    }

    fn read(cells: &mut Cells<'_, '_>) -> Option<Self> {
        cells.needs_text(at::polarity);
        let junctions = cells.count(at::junctions);
        let vceo_v = cells.needed(at::vceo_v);
        let ic_max_a = cells.needed(at::ic_max_a);
        let pd_w = cells.needed(at::pd_w);
        let tj_max_c = cells.needed(at::tj_max_c);
        let rth_jc_c_per_w = cells.needed(at::rth_jc_c_per_w);
        let hfe_min = cells.points(at::hfe_min);
        let vbe_max_v = cells.number_or_points(at::vbe_max_v);
        let vce_sat_v = cells.number_or_points(at::vce_sat_v);
        let soa_dc = cells.points(at::soa_dc);
        let rth_ja_c_per_w = cells.optional(at::rth_ja_c_per_w);
        let cth_j_per_c = cells.optional(at::cth_j_per_c);
        let hfe_tempco_per_c = cells.optional(at::hfe_tempco_pct_per_c);
        let ileak_max_a = cells.optional(at::ileak_max_a);
        let soa_pulse = PulseCurves {
            s1: cells.points(at::soa_1s),
            ms100: cells.points(at::soa_100ms),
            ms10: cells.points(at::soa_10ms),
            ms1: cells.points(at::soa_1ms),
        };
        cells.only_check(at::vebo_v);
        cells.only_check(at::ft_hz);
        Some(Transistor {
            junctions: junctions?,
            vceo_v,
            ic_max_a,
            pd_w,
            tj_max_c,
            rth_jc_c_per_w,
            hfe_min: hfe_min?,
            vbe_max_v: vbe_max_v?,
            vce_sat_v: vce_sat_v?,
            soa_dc: soa_dc?,
            soa_pulse,
            rth_ja_c_per_w,
            cth_j_per_c,
            hfe_tempco_per_c,
            ileak_max_a,
        })
    }
}
