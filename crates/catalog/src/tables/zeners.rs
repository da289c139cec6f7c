//! `zeners.csv`: reference zeners.

use super::common::SHARED;
use super::*;
use circuit::parts::{MeasuredAt, Zener};

const TEMPCO: Cell = number(Unit::MillivoltPerDegree, ANY);

columns! {
    first crate::tables::common::COUNT, after SHARED;
    vz_v: needed(RATED_VOLTS, "nominal voltage at `izt_a`")
        .plausible(1.0, 400.0);
    tol_pct: needed(TOLERANCE, "tolerance of `vz_v` either way")
        .plausible(0.01, 20.0);
    izt_a: needed(AMPERES, "test current at which `vz_v` and `zzt_ohm` are stated")
        .plausible(1e-6, 5.0);
    zzt_ohm: needed(OHMS_FROM_ZERO, "largest impedance at `izt_a`")
        .plausible(0.0, 5e3);
    iz_min_a: needed(AMPERES, "least current at which you trust the zener; the knee current where the sheet gives no other")
        .plausible(1e-7, 1.0);
    pd_w: needed(WATTS, "power rating at 25 °C ambient. Where the sheet gives θJA, type (tj_max_c − 25)/θJA; where it rates at another temperature T, type pd·(tj_max_c − 25)/(tj_max_c − T); the model takes θJA = (tj_max_c − 25)/pd_w")
        .plausible(0.05, 100.0);
    tj_max_c: needed(JUNCTION, "greatest junction temperature")
        .plausible(85.0, 250.0);
    tc_min_mv_per_c: needed(TEMPCO, "least temperature coefficient; from one in %/°C: vz_v·10·that. Where the sheet gives one limit only, leave the other blank")
        .plausible(-20.0, 300.0);
    tc_max_mv_per_c: needed(TEMPCO, "greatest temperature coefficient, likewise")
        .plausible(-20.0, 300.0);
    zzk_ohm: optional(OHMS_FROM_ZERO, "`assume.zener_knee`", "largest impedance at the knee current `izk_a`")
        .plausible(0.0, 20e3);
    izk_a: optional(AMPERES, "`assume.zener_knee`", "knee current at which `zzk_ohm` is stated")
        .plausible(1e-7, 1.0);
    vz_at: optional(Cell::Word(&["pulse", "warm"]), "pulse", "`warm` where the sheet states `vz_v` after warming up at `izt_a`, `pulse` where the junction is at 25 °C");
}

impl Figures for Zener {
    const KIND: Kind = Kind::Zeners;

    fn read(cells: &mut Cells<'_, '_>) -> Option<Self> {
        Some(Zener {
            vz_v: cells.needed(at::vz_v),
            tol: cells.needed(at::tol_pct),
            izt_a: cells.needed(at::izt_a),
            zzt_ohm: cells.needed(at::zzt_ohm),
            iz_min_a: cells.needed(at::iz_min_a),
            pd_w: cells.needed(at::pd_w),
            tj_max_c: cells.needed(at::tj_max_c),
            tc_min_v_per_c: cells.needed(at::tc_min_mv_per_c),
            tc_max_v_per_c: cells.needed(at::tc_max_mv_per_c),
            zzk_ohm: cells.optional(at::zzk_ohm),
            izk_a: cells.optional(at::izk_a),
            vz_at: match cells.word(at::vz_at) {
                Some(1) => MeasuredAt::Warm,
                _ => MeasuredAt::Pulse,
            },
        })
    }
}
