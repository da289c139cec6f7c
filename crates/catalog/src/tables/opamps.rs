//! `opamps.csv`: error amplifiers.

use super::common::SHARED;
use super::*;
use circuit::parts::Amplifier;

columns! {
    first crate::tables::common::COUNT, after SHARED;
    vs_min_v: needed(VOLTS, "least whole supply, from the negative to the positive pin")
        .plausible(0.9, 40.0);
    vs_max_v: needed(VOLTS, "greatest whole supply: ±18 V is 36")
        .plausible(1.5, 500.0);
    vcm_low_v: needed(VOLTS, "the input range begins this far above ground (the negative pin); negative where it reaches below")
        .plausible(-5.0, 10.0);
    vcm_high_v: needed(VOLTS, "the input range ends this far below the supply; negative where it reaches above")
        .plausible(-5.0, 10.0);
    swing_low_v: needed(VOLTS, "the output stops this far above ground")
        .plausible(0.0, 10.0);
    swing_high_v: needed(VOLTS, "the output stops this far below the supply while it sources `iout_a`")
        .plausible(0.0, 10.0);
    iout_a: needed(AMPERES, "least current that the output sources over temperature; not the typical figure")
        .plausible(1e-5, 15.0);
    vos_max_v: needed(number(Unit::Volt, FROM_ZERO), "largest offset over temperature")
        .plausible(1e-7, 0.05);
    ib_max_a: needed(AMPERES_FROM_ZERO, "largest input current over temperature")
        .plausible(0.0, 1e-4);
    iq_max_a: needed(AMPERES_FROM_ZERO, "largest supply current of all that shares the package, output unloaded")
        .plausible(1e-7, 0.2);
    tj_max_c: needed(JUNCTION, "greatest junction temperature")
        .plausible(70.0, 250.0);
    rth_ja_c_per_w: needed(THERMAL, "junction to ambient on your board")
        .plausible(5.0, 500.0);
    isc_max_a: optional(AMPERES_FROM_ZERO, "not stated", "largest current out of a shorted output: the largest, not the typical figure")
        .need(Need::ToProveIf("the sheet gives a fault that lasts more than 1 s"))
        .plausible(1e-4, 30.0);
    isink_a: optional(AMPERES_FROM_ZERO, "`leakage-sink` is not checked", "least current that the output sinks")
        .plausible(1e-6, 15.0);
    gain_min_db: optional(DECIBELS, "`assume.gain_db`", "least open-loop gain; from V/mV: 60 + 20·log10")
        .plausible(40.0, 180.0);
    psrr_min_db: optional(DECIBELS, "`assume.psrr_db`", "least supply rejection")
        .plausible(30.0, 180.0);
    cmrr_min_db: optional(DECIBELS, "`assume.cmrr_db`", "least common-mode rejection")
        .plausible(30.0, 180.0);
    vs_test_v: optional(VOLTS, "`assume.vs_test_v`", "whole supply at which `vos_max_v` is stated")
        .plausible(0.9, 500.0);
    gbw_hz: optional(HERTZ, "not stated", "gain-bandwidth product; stability is not checked")
        .plausible(1e3, 1e11);
}

impl Figures for Amplifier {
    const KIND: Kind = Kind::Opamps;

    fn read(cells: &mut Cells<'_, '_>) -> Option<Self> {
        let figures = Amplifier {
            vs_min_v: cells.needed(at::vs_min_v),
            vs_max_v: cells.needed(at::vs_max_v),
            vcm_low_v: cells.needed(at::vcm_low_v),
            vcm_high_v: cells.needed(at::vcm_high_v),
            swing_low_v: cells.needed(at::swing_low_v),
            swing_high_v: cells.needed(at::swing_high_v),
            iout_a: cells.needed(at::iout_a),
            vos_max_v: cells.needed(at::vos_max_v),
            ib_max_a: cells.needed(at::ib_max_a),
            iq_max_a: cells.needed(at::iq_max_a),
            tj_max_c: cells.needed(at::tj_max_c),
            rth_ja_c_per_w: cells.needed(at::rth_ja_c_per_w),
            isc_max_a: cells.optional(at::isc_max_a),
            isink_a: cells.optional(at::isink_a),
            gain_min_db: cells.optional(at::gain_min_db),
            psrr_min_db: cells.optional(at::psrr_min_db),
            cmrr_min_db: cells.optional(at::cmrr_min_db),
            vs_test_v: cells.optional(at::vs_test_v),
        };
        cells.only_check(at::gbw_hz);
        Some(figures)
    }
}
