//! What a resistor may measure, and what it may stand, at the rail's temperatures.
//!
//! Model page, section 4: Rlo = R(1−tol)(1−tempco·ΔT) … Rhi = R(1+tol)(1+tempco·ΔT);
//! D = clamp((zero_power_at − Tmax)/(zero_power_at − full_power_to), 0, 1).

use crate::parts::{Pot, ResistorLine, ResistorRating};
use crate::rail::Rail;

/// A resistance with the ends of what it may measure, Ω.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Resistance {
    /// As marked.
    pub ohm: f64,
    /// The least that it may measure.
    pub lo_ohm: f64,
    /// The most that it may measure.
    pub hi_ohm: f64,
}

impl Resistance {
    /// A link: no resistor at all.
    pub const LINK: Resistance = Resistance { ohm: 0.0, lo_ohm: 0.0, hi_ohm: 0.0 };

    /// A marked value with its tolerance and the size of its tempco over a temperature span.
    pub fn new(ohm: f64, tol: f64, tempco_per_c: f64, span_c: f64) -> Self {
        let drift = tempco_per_c * span_c;
        Self {
            ohm,
            lo_ohm: ohm * (1.0 - tol) * (1.0 - drift),
            hi_ohm: ohm * (1.0 + tol) * (1.0 + drift),
        }
    }

    /// No resistor is fitted.
    pub fn is_link(&self) -> bool {
        self.ohm == 0.0
    }
}

/// D: the share of its power rating that a resistor has left at `ambient_c`, 0 … 1.
///
/// ```
/// use circuit::parts::ResistorRating;
/// use circuit::resistor::power_left;
/// // Metal film: full power to 70 °C, none at 155 °C. Source: Yageo MFR data sheet.
/// let film = ResistorRating { power_w: 0.4, full_power_to_c: 70.0, zero_power_at_c: 155.0 };
/// assert_eq!(power_left(&film, 112.5), 0.5);
/// assert_eq!(power_left(&film, 25.0), 1.0);
/// ```
pub fn power_left(rating: &ResistorRating, ambient_c: f64) -> f64 {
    let ResistorRating { full_power_to_c, zero_power_at_c, .. } = *rating;
    ((zero_power_at_c - ambient_c) / (zero_power_at_c - full_power_to_c)).clamp(0.0, 1.0)
}

/// A line of resistors at the temperatures and under the derating of a rail.
#[derive(Debug, Clone, PartialEq)]
pub struct LineAtRail {
    /// The values stocked, rising.
    pub values: Vec<Resistance>,
    /// Power that one of them may take, W.
    pub allowed_power_w: f64,
    /// Voltage that one of them may take, V.
    pub allowed_voltage_v: f64,
}

impl LineAtRail {
    /// Puts a line under a rail's conditions.
    pub fn new(line: &ResistorLine, rail: &Rail) -> Self {
        let span = rail.temperature_span_c();
        let values = line
            .values_ohm
            .iter()
            .map(|&ohm| Resistance::new(ohm, line.tol, line.tempco_per_c, span))
            .collect();
        Self {
            values,
            allowed_power_w: rail.derating.resistor_power
                * line.rating.power_w
                * power_left(&line.rating, rail.ambient.max_c),
            allowed_voltage_v: rail.derating.resistor_voltage * line.vmax_v,
        }
    }
}

impl LineAtRail {
    /// (hi/lo)², the same for all values but for rounding: how far tolerance and temperature spread a
    /// ratio of two of them. Infinite for a line without values.
    pub fn spread(&self) -> f64 {
        let ratios = self.values.iter().map(|v| v.hi_ohm / v.lo_ohm);
        ratios.fold(f64::INFINITY, f64::min).powi(2)
    }
}

/// A pot at the temperatures and under the derating of a rail.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct PotAtRail {
    /// The whole track.
    pub track: Resistance,
    /// Most resistance left at the end stop, Ω.
    pub end_ohm: f64,
    /// Power that the track may take, W.
    pub allowed_power_w: f64,
    /// Voltage that the track may take, V; None where the pot gives no limit.
    pub allowed_voltage_v: Option<f64>,
}

impl PotAtRail {
    /// Puts a pot under a rail's conditions.
    pub fn new(pot: &Pot, rail: &Rail) -> Self {
        Self {
            track: Resistance::new(
                pot.value_ohm,
                pot.tol,
                pot.tempco_per_c,
                rail.temperature_span_c(),
            ),
            end_ohm: pot.end_ohm,
            allowed_power_w: rail.derating.resistor_power
                * pot.rating.power_w
                * power_left(&pot.rating, rail.ambient.max_c),
            allowed_voltage_v: pot.vmax_v.map(|v| rail.derating.resistor_voltage * v),
        }
    }
}
