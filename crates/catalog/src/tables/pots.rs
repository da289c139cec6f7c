//! `pots.csv`: potentiometers, wired as rheostats.

use super::common::SHARED;
use super::*;
use circuit::parts::Pot;

columns! {
    first crate::tables::common::COUNT, after SHARED;
    value_ohm: needed(OHMS, "resistance of the whole track")
        .plausible(1.0, 1e8);
    tol_pct: needed(TOLERANCE, "tolerance either way")
        .plausible(0.1, 30.0);
    end_ohm: needed(OHMS_FROM_ZERO, "most resistance left at the end stop; from a percentage: value_ohm·that")
        .plausible(0.0, 1e4);
    tempco_ppm: needed(PPM, "temperature coefficient; its size is taken")
        .plausible(-5000.0, 5000.0);
    power_w: needed(WATTS, "power rating of the whole track")
        .plausible(0.01, 1000.0);
    vmax_v: optional(RATED_VOLTS, "`pot-voltage` is not checked", "greatest voltage across the track")
        .plausible(5.0, 5e3);
    full_power_to_c: defaulted(DEGREES, 70.0, "full power up to this ambient temperature")
        .plausible(25.0, 200.0);
    zero_power_at_c: defaulted(DEGREES, 125.0, "no power from this ambient temperature on; above `full_power_to_c`")
        .plausible(70.0, 400.0);
}

impl Figures for Pot {
    const KIND: Kind = Kind::Pots;

    fn read(cells: &mut Cells<'_, '_>) -> Option<Self> {
        let value_ohm = cells.needed(at::value_ohm);
        let tol = cells.needed(at::tol_pct);
        let end_ohm = cells.needed(at::end_ohm);
        let tempco_per_c = cells.needed(at::tempco_ppm).abs();
        let power_w = cells.needed(at::power_w);
        let vmax_v = cells.optional(at::vmax_v);
        let rating = resistors::rating(cells, power_w, at::full_power_to_c, at::zero_power_at_c);
        Some(Pot { value_ohm, tol, end_ohm, tempco_per_c, rating, vmax_v })
    }
}
