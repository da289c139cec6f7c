//! The figures of parts, as a data sheet promises them. No prices, no names.
//!
//! Fields bear the names of the catalog columns. Percentages, ppm and mV/°C are plain fractions and
//! V/°C here. Where a field is an `Option`, a blank is allowed and a stand-in of the rail serves.

use quantity::points::Points;

/// How a zener's voltage was measured.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum MeasuredAt {
    /// By a pulse, junction at 25 °C.
    #[default]
    Pulse,
    /// After warming up at the test current.
    Warm,
}

/// A zener or shunt reference.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Zener {
    /// Nominal voltage at `izt_a`, V, > 0.
    pub vz_v: f64,
    /// Tolerance as a fraction, 0 ≤ tol < 1.
    pub tol: f64,
    /// Test current, A, > 0.
    pub izt_a: f64,
    /// Largest impedance at the test current, Ω, ≥ 0.
    pub zzt_ohm: f64,
    /// Least current at which it is trusted, A, > 0.
    pub iz_min_a: f64,
    /// Power rating at 25 °C ambient, W, > 0.
    pub pd_w: f64,
    /// Greatest junction temperature, °C, > 25.
    pub tj_max_c: f64,
    /// Least temperature coefficient, V/°C.
    pub tc_min_v_per_c: f64,
    /// Greatest temperature coefficient, V/°C.
    pub tc_max_v_per_c: f64,
    /// Largest impedance at the knee current, Ω.
    pub zzk_ohm: Option<f64>,
    /// Knee current, A.
    pub izk_a: Option<f64>,
    /// How the voltage was measured.
    pub vz_at: MeasuredAt,
}

/// An operational amplifier, run from the feed and ground.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Amplifier {
    /// Least whole supply, V.
    pub vs_min_v: f64,
    /// Greatest whole supply, V.
    pub vs_max_v: f64,
    /// The input range begins this far above ground, V.
    pub vcm_low_v: f64,
    /// The input range ends this far below the supply, V; may be negative.
    pub vcm_high_v: f64,
    /// The output stops this far above ground, V.
    pub swing_low_v: f64,
    /// The output stops this far below the supply at `iout_a`, V.
    pub swing_high_v: f64,
    /// Least sourcing current over temperature, A, > 0.
    pub iout_a: f64,
    /// Largest offset over temperature, V, ≥ 0.
    pub vos_max_v: f64,
    /// Largest input current, A, ≥ 0.
    pub ib_max_a: f64,
    /// Largest supply current, A, ≥ 0.
    pub iq_max_a: f64,
    /// Greatest junction temperature, °C, > 25.
    pub tj_max_c: f64,
    /// Junction to ambient, °C/W, > 0.
    pub rth_ja_c_per_w: f64,
    /// Largest current out of a shorted output, A, ≥ 0. Needed where a fault heats junctions.
    pub isc_max_a: Option<f64>,
    /// Least sinking current, A, ≥ 0.
    pub isink_a: Option<f64>,
    /// Least open-loop gain, dB.
    pub gain_min_db: Option<f64>,
    /// Least supply rejection, dB.
    pub psrr_min_db: Option<f64>,
    /// Least common-mode rejection, dB.
    pub cmrr_min_db: Option<f64>,
    /// Supply at which the offset is stated, V.
    pub vs_test_v: Option<f64>,
}

/// A figure that a data sheet gives as one number or as points over the collector current.
#[derive(Debug, Clone, PartialEq)]
pub enum OverCurrent {
    /// One number, good up to the last point of `hfe_min`.
    Number(f64),
    /// Points (A, V).
    Points(Points),
}

/// An NPN power transistor or darlington.
#[derive(Debug, Clone, PartialEq)]
pub struct Transistor {
    /// Base-emitter junctions in series: 1, or 2 for a darlington.
    pub junctions: u8,
    /// Collector-emitter rating with open base, V, > 0.
    pub vceo_v: f64,
    /// Greatest collector current, A, > 0.
    pub ic_max_a: f64,
    /// Power rating at 25 °C case, W, > 0.
    pub pd_w: f64,
    /// Greatest junction temperature, °C, > 25.
    pub tj_max_c: f64,
    /// Junction to case, °C/W, ≥ 0.
    pub rth_jc_c_per_w: f64,
    /// Least current gain over the collector current: points (A, gain).
    pub hfe_min: Points,
    /// Largest base-emitter voltage.
    pub vbe_max_v: OverCurrent,
    /// Largest saturation voltage.
    pub vce_sat_v: OverCurrent,
    /// Safe operating area, DC, at 25 °C case: points (V, A).
    pub soa_dc: Points,
    /// Safe operating area for pulses, at 25 °C case.
    pub soa_pulse: PulseCurves,
    /// Junction to ambient, unmounted, °C/W.
    pub rth_ja_c_per_w: Option<f64>,
    /// Heat capacity of the case, unmounted, J/°C.
    pub cth_j_per_c: Option<f64>,
    /// Rise of the gain per °C, as a fraction.
    pub hfe_tempco_per_c: Option<f64>,
    /// Largest collector leakage, hot, A, ≥ 0.
    pub ileak_max_a: Option<f64>,
}

/// Safe operating areas for pulses: points (V, A) for each time that the sheet gives.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct PulseCurves {
    /// For 1 s.
    pub s1: Option<Points>,
    /// For 100 ms.
    pub ms100: Option<Points>,
    /// For 10 ms.
    pub ms10: Option<Points>,
    /// For 1 ms.
    pub ms1: Option<Points>,
}

impl PulseCurves {
    /// The curves that are given, each with the time of its pulse in s.
    pub fn given(&self) -> impl Iterator<Item = (f64, &Points)> {
        [(1.0, &self.s1), (0.1, &self.ms100), (0.01, &self.ms10), (0.001, &self.ms1)]
            .into_iter()
            .filter_map(|(time_s, curve)| curve.as_ref().map(|c| (time_s, c)))
    }
}

/// A heatsink.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Heatsink {
    /// Sink to ambient, °C/W, > 0.
    pub rth_sa_c_per_w: f64,
    /// Heat capacity, J/°C, > 0.
    pub cth_j_per_c: Option<f64>,
}

/// A line of fixed resistors: every value of it costs the same and has the same ratings.
#[derive(Debug, Clone, PartialEq)]
pub struct ResistorLine {
    /// The values that are stocked, Ω, > 0, rising.
    pub values_ohm: Vec<f64>,
    /// Tolerance as a fraction, 0 ≤ tol < 1.
    pub tol: f64,
    /// Size of the temperature coefficient per °C, ≥ 0.
    pub tempco_per_c: f64,
    /// Power and voltage ratings.
    pub rating: ResistorRating,
    /// Greatest voltage, V, > 0.
    pub vmax_v: f64,
}

/// A potentiometer, wired as a rheostat.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Pot {
    /// Track resistance, Ω, > 0.
    pub value_ohm: f64,
    /// Tolerance as a fraction, 0 ≤ tol < 1.
    pub tol: f64,
    /// Most resistance left at the end stop, Ω, ≥ 0.
    pub end_ohm: f64,
    /// Size of the temperature coefficient per °C, ≥ 0.
    pub tempco_per_c: f64,
    /// Power rating of the track.
    pub rating: ResistorRating,
    /// Greatest voltage across the track, V.
    pub vmax_v: Option<f64>,
}

/// A power rating that falls in a straight line with ambient temperature.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ResistorRating {
    /// Full power, W, > 0.
    pub power_w: f64,
    /// Full power up to here, °C.
    pub full_power_to_c: f64,
    /// No power from here on, °C; above `full_power_to_c`.
    pub zero_power_at_c: f64,
}
