//! Figures that are meant to be hard for a search. Each part has a *place* (a, b) in the unit square;
//! a figure gets better with a or b, and so does the price go up, along smooth curves.

use super::Hard;
use super::dice::Dice;
use super::transistors::{Area, printed};
use circuit::parts::{
    Amplifier, Heatsink, MeasuredAt, OverCurrent, Pot, PulseCurves, ResistorRating, Transistor,
    Zener,
};
use quantity::points::PointsError;

/// Figures with their price.
pub struct Priced<F> {
    /// What the sheet promises.
    pub figures: F,
    /// Price of one piece.
    pub price: f64,
}

/// Where a part lies in its slot.
#[derive(Clone, Copy)]
pub struct Place {
    /// 0 to 1.
    pub a: f64,
    /// 0 to 1.
    pub b: f64,
    /// Every second part.
    pub is_odd: bool,
}

impl Place {
    /// Places that fill the square evenly and hardly ever coincide.
    pub fn of(seed: u64, stream: u64, row: usize) -> Self {
        let mut dice = Dice::new(seed, stream, row as u64);
        Self { a: dice.share(), b: dice.share(), is_odd: row % 2 == 1 }
    }

    /// The place that counts: in a shop of ties the middle for all.
    fn in_shop(self, kind: Hard) -> Self {
        match kind {
            Hard::Ties => Self { a: 0.5, b: 0.5, is_odd: false },
            _ => self,
        }
    }

    /// A price that rises with both, so that of two parts the better in all is the dearer.
    fn price(self, least: f64) -> f64 {
        least * (1.0 + self.a * self.a + 0.7 * self.b * self.b)
    }
}

/// A figure from `worst` at 0 to `best` at 1.
fn along(share: f64, worst: f64, best: f64) -> f64 {
    worst + share * (best - worst)
}

/// A reference of 4.7 V, which suits every sheet. In one-check shops the tolerance decides, elsewhere
/// power and test current differ.
pub fn zener(kind: Hard, place: &Place) -> Priced<Zener> {
    let place = place.in_shop(kind);
    let tol = match kind {
        Hard::OneCheck => along(place.b, 0.06, 0.005),
        _ => 0.01,
    };
    let izt_a = match kind {
        Hard::OneCheck => 0.005,
        _ => along(place.b, 0.008, 0.003),
    };
    let figures = Zener {
        vz_v: 4.7,
        tol,
        izt_a,
        zzt_ohm: 8.0,
        iz_min_a: 0.0005,
        pd_w: along(place.a, 0.4, 1.5),
        tj_max_c: 175.0,
        tc_min_v_per_c: -0.5e-3,
        tc_max_v_per_c: 0.5e-3,
        zzk_ohm: Some(80.0),
        izk_a: Some(0.0005),
        vz_at: MeasuredAt::Pulse,
    };
    Priced { figures, price: place.price(0.05) }
}

/// An amplifier whose supply rating (stress) and own current (loss) cost money.
pub fn amplifier(kind: Hard, place: &Place) -> Priced<Amplifier> {
    let place = place.in_shop(kind);
    let vos_max_v = match kind {
        Hard::OneCheck => along(place.b, 0.045, 0.0005),
        _ => 0.001,
    };
    let iout_a = match kind {
        // Enough for any darlington here, too little for a single transistor.
        Hard::MixedReasons => along(place.b, 0.004, 0.005),
        _ => 0.02,
    };
    let figures = Amplifier {
        vs_min_v: 3.0,
        vs_max_v: along(place.a, 30.0, 60.0),
        vcm_low_v: 0.0,
        vcm_high_v: 1.5,
        swing_low_v: 0.05,
        swing_high_v: 1.0,
        iout_a,
        vos_max_v,
        ib_max_a: 50e-9,
        iq_max_a: along(place.b, 0.003, 0.0005),
        tj_max_c: 150.0,
        rth_ja_c_per_w: 100.0,
        isc_max_a: Some(0.025),
        isink_a: Some(0.01),
        gain_min_db: Some(100.0),
        psrr_min_db: Some(80.0),
        cmrr_min_db: Some(80.0),
        vs_test_v: Some(15.0),
    };
    Priced { figures, price: place.price(0.3) }
}

/// A darlington (a single transistor for every second part of mixed shops) whose power and gain cost
/// money. Where nothing may hold it leaks more than a divider carries away.
pub fn transistor(kind: Hard, place: &Place) -> Result<Priced<Transistor>, PointsError> {
    let place = place.in_shop(kind);
    let is_single = kind == Hard::MixedReasons && place.is_odd;
    let gain = if is_single { along(place.b, 15.0, 22.0) } else { along(place.b, 900.0, 3000.0) };
    let ileak_max_a = match kind {
        Hard::LastCheck | Hard::MixedReasons => along(place.b, 0.003, 0.002),
        _ => 1e-5,
    };
    let (pd_w, tj_max_c) = (along(place.a, 90.0, 200.0), 175.0);
    let area = Area { pd_w, ic_max_a: 12.0, vceo_v: 80.0, breakdown_v: 40.0 };
    let figures = Transistor {
        junctions: if is_single { 1 } else { 2 },
        vceo_v: 80.0,
        ic_max_a: 12.0,
        pd_w,
        tj_max_c,
        rth_jc_c_per_w: (tj_max_c - 25.0) / pd_w,
        hfe_min: printed(&[(0.05, 0.7 * gain), (3.0, gain), (12.0, 0.3 * gain)])?,
        vbe_max_v: OverCurrent::Number(2.0),
        vce_sat_v: OverCurrent::Number(1.5),
        soa_dc: area.curve(1.8)?,
        soa_pulse: PulseCurves {
            ms10: Some(area.longer(2.6).curve(1.8)?),
            ..PulseCurves::default()
        },
        rth_ja_c_per_w: None,
        cth_j_per_c: None,
        hfe_tempco_per_c: Some(0.006),
        ileak_max_a: Some(ileak_max_a),
    };
    Ok(Priced { figures, price: place.price(0.8) })
}

/// A heatsink whose size costs money.
pub fn heatsink(kind: Hard, place: &Place) -> Priced<Heatsink> {
    let place = place.in_shop(kind);
    let figures = Heatsink {
        rth_sa_c_per_w: along(place.a, 3.5, 0.8),
        cth_j_per_c: Some(along(place.b, 40.0, 200.0)),
    };
    Priced { figures, price: place.price(1.2) }
}

/// A pot whose power and least end resistance cost money.
pub fn pot(kind: Hard, place: &Place) -> Priced<Pot> {
    let place = place.in_shop(kind);
    let figures = Pot {
        value_ohm: 10e3,
        tol: 0.1,
        end_ohm: along(place.b, 40.0, 2.0),
        tempco_per_c: 100e-6,
        rating: ResistorRating {
            power_w: along(place.a, 0.25, 1.0),
            full_power_to_c: 70.0,
            zero_power_at_c: 125.0,
        },
        vmax_v: Some(200.0),
    };
    Priced { figures, price: place.price(0.9) }
}
