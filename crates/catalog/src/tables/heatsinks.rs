//! `heatsinks.csv`: heatsinks for pass transistors.

use super::common::SHARED;
use super::*;
use crate::shop::Sink;
use circuit::parts::Heatsink;

columns! {
    first crate::tables::common::COUNT, after SHARED;
    rth_sa_c_per_w: needed(THERMAL, "sink to ambient as it will be mounted, in still air or in your airflow")
        .plausible(0.02, 100.0);
    fits: needed(Cell::Texts, "the packages it takes, `TO-220;TO-247`, written as in `transistors.csv`");
    cth_j_per_c: optional(HEAT_CAPACITY, "a time constant of 50 s is taken", "heat capacity; from its mass in g: 0.9 J/°C for each gram of aluminium")
        .plausible(0.1, 1e5);
}

impl Figures for Sink {
    const KIND: Kind = Kind::Heatsinks;

    fn read(cells: &mut Cells<'_, '_>) -> Option<Self> {
        let rth_sa_c_per_w = cells.needed(at::rth_sa_c_per_w);
        let fits = cells.texts(at::fits);
        let cth_j_per_c = cells.optional(at::cth_j_per_c);
        Some(Sink { figures: Heatsink { rth_sa_c_per_w, cth_j_per_c }, fits })
    }
}
