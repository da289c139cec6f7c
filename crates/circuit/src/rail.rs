//! What is asked of a rail. Every figure is final here: defaults and stand-ins are filled in.

use quantity::digits::{at_most, below};

/// The requirement for one rail, checked and complete.
#[derive(Debug, Clone, PartialEq)]
pub struct Rail {
    /// The unregulated feed.
    pub feed: Feed,
    /// The output that is wanted.
    pub output: Output,
    /// What the load draws.
    pub load: Load,
    /// The air around every part.
    pub ambient: Ambient,
    /// The short that has to be survived; None: no fault check is made.
    pub fault: Option<Fault>,
    /// The zener current to aim for, A; None: each zener's own test current.
    pub bias_a: Option<f64>,
    /// The rules by which a divider is chosen.
    pub divider: DividerRules,
    /// How heat leaves the pass transistor's case.
    pub thermal: Thermal,
    /// How much of each limit may be used.
    pub derating: Derating,
    /// Figures that stand in for blank optional cells.
    pub stand_ins: StandIns,
}

/// The unregulated feed VU, V: 0 < min ≤ nominal ≤ max, nominal ≤ max_loaded ≤ max.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Feed {
    /// VUmin: valley of the ripple at low mains and full load.
    pub min_v: f64,
    /// VUnom: the feed at which efficiency is stated.
    pub nominal_v: f64,
    /// VUmax: high mains, no load.
    pub max_v: f64,
    /// VUL: the highest mean feed at full load.
    pub max_loaded_v: f64,
}

/// The output that is wanted.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Output {
    /// One voltage within a tolerance either way.
    Fixed {
        /// V, volts.
        voltage_v: f64,
        /// τ as a fraction (0.05 for 5 %).
        tolerance: f64,
    },
    /// A range set by a knob.
    Adjustable {
        /// The lowest output that must be reached, V.
        from_v: f64,
        /// The highest output that must be reached, V.
        to_v: f64,
        /// The lowest output that the knob may be turned to, V.
        low_stop_v: f64,
        /// Never exceeded however far the knob is turned, V; None: not checked.
        ceiling_v: Option<f64>,
    },
}

/// What the load draws, A.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Load {
    /// IL: drawn anywhere in the output range; the load may draw anything up to it.
    pub max_a: f64,
    /// The load that is always there.
    pub min_a: f64,
}

/// The air around every part, °C.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Ambient {
    /// Tmin.
    pub min_c: f64,
    /// Tmax.
    pub max_c: f64,
}

/// A shorted output, its current limited by something outside this circuit.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Fault {
    /// IF: the current that flows into the short, A.
    pub limit_a: f64,
    /// tF: how long it may last, s; infinite for ever.
    pub lasts_s: f64,
}

impl Fault {
    /// A short longer than this counts as one that lasts for ever, s.
    pub const LONGEST_S: f64 = 10.0;
    /// Up to this a short heats nothing enough to check junctions, s.
    pub const BRIEF_S: f64 = 1.0;

    /// The short counts as lasting for ever.
    pub fn is_lasting(&self) -> bool {
        below(Self::LONGEST_S, self.lasts_s)
    }

    /// The short lasts long enough (over 1 s) that the junctions of transistor and amplifier are
    /// checked for it.
    pub fn heats_junctions(&self) -> bool {
        below(Self::BRIEF_S, self.lasts_s)
    }

    /// A curve given for pulses of `time_s` covers this short.
    pub fn is_covered_by(&self, time_s: f64) -> bool {
        at_most(self.lasts_s, time_s)
    }
}

/// The window for the divider current and the amplifier allowances that a divider is chosen for.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct DividerRules {
    /// Least divider current, A.
    pub min_a: f64,
    /// Greatest divider current, A.
    pub max_a: f64,
    /// εd: the amplifier error that the divider is chosen for, V.
    pub allow_error_v: f64,
    /// ibd: the amplifier input current that the divider is chosen for, A.
    pub allow_bias_a: f64,
}

/// How heat leaves the pass transistor's case.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Thermal {
    /// θCS, case to sink, °C/W.
    pub interface_c_per_w: f64,
    /// θSA of a sink that is there already, °C/W; None: a heatsink is chosen.
    pub sink_c_per_w: Option<f64>,
}

/// How much of each limit may be used: fractions in (0, 1], and degrees kept below junction limits.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Derating {
    /// Of the transistor's VCEO.
    pub collector_voltage: f64,
    /// Of its greatest collector current.
    pub collector_current: f64,
    /// Of its power rating.
    pub pass_power: f64,
    /// Of its safe operating area in service.
    pub soa: f64,
    /// Of its safe operating area during a fault.
    pub soa_fault: f64,
    /// Of the amplifier's greatest supply.
    pub amp_supply: f64,
    /// Of the amplifier's output currents.
    pub amp_current: f64,
    /// Of the zener's power rating.
    pub zener_power: f64,
    /// Of resistor and pot power ratings.
    pub resistor_power: f64,
    /// Of resistor and pot voltage ratings.
    pub resistor_voltage: f64,
    /// Kept below every junction limit in service, °C.
    pub junction_below_max_c: f64,
    /// Kept below junction limits during a fault, °C.
    pub fault_junction_below_max_c: f64,
    /// No junction above this in service, °C; None: no cap.
    pub junction_cap_c: Option<f64>,
}

impl Derating {
    /// Every limit may be used in full.
    pub const NONE: Derating = Derating {
        collector_voltage: 1.0,
        collector_current: 1.0,
        pass_power: 1.0,
        soa: 1.0,
        soa_fault: 1.0,
        amp_supply: 1.0,
        amp_current: 1.0,
        zener_power: 1.0,
        resistor_power: 1.0,
        resistor_voltage: 1.0,
        junction_below_max_c: 0.0,
        fault_junction_below_max_c: 0.0,
        junction_cap_c: None,
    };

    /// A house rule for bench equipment; no standard.
    pub const BENCH: Derating = Derating {
        collector_voltage: 0.8,
        collector_current: 0.8,
        pass_power: 0.7,
        soa: 0.8,
        soa_fault: 1.0,
        amp_supply: 0.9,
        amp_current: 0.8,
        zener_power: 0.6,
        resistor_power: 0.6,
        resistor_voltage: 0.8,
        junction_below_max_c: 25.0,
        ..Self::NONE
    };

    /// A house rule for equipment that nobody can reach; no standard.
    pub const CAUTIOUS: Derating = Derating {
        collector_voltage: 0.7,
        collector_current: 0.7,
        pass_power: 0.5,
        soa: 0.7,
        soa_fault: 0.9,
        amp_supply: 0.8,
        amp_current: 0.7,
        zener_power: 0.5,
        resistor_power: 0.5,
        resistor_voltage: 0.7,
        junction_below_max_c: 40.0,
        ..Self::NONE
    };

    /// The built-in policies by name.
    pub const BUILT_IN: [(&'static str, Derating); 3] =
        [("none", Self::NONE), ("bench", Self::BENCH), ("cautious", Self::CAUTIOUS)];

    /// Tj(p): the junction temperature allowed in service for a part whose limit is `tj_max_c`, °C.
    pub fn junction_c(&self, tj_max_c: f64) -> f64 {
        let below = tj_max_c - self.junction_below_max_c;
        self.junction_cap_c.map_or(below, |cap| below.min(cap))
    }

    /// TjF(p): the junction temperature allowed during a fault, °C.
    pub fn fault_junction_c(&self, tj_max_c: f64) -> f64 {
        tj_max_c - self.fault_junction_below_max_c
    }
}

/// Figures that stand in for blank optional cells; each candidate says which it leans on.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct StandIns {
    /// Fall of hFE per °C below 25 °C as a fraction; None: by the number of junctions.
    pub hfe_tempco_per_c: Option<f64>,
    /// Open-loop gain, dB.
    pub gain_db: f64,
    /// Supply rejection, dB.
    pub psrr_db: f64,
    /// Common-mode rejection, dB.
    pub cmrr_db: f64,
    /// Supply at which the offset is stated, V.
    pub vs_test_v: f64,
    /// Exponent with which a zener's impedance rises below its test current, ≥ 1.
    pub zener_knee: f64,
}

impl StandIns {
    /// Gain rises with temperature: about 0.5 %/°C for one junction, 0.8 for a darlington.
    /// Common practice. The first is on the safe side of a gain that doubles from −55 to 85 °C; two such
    /// junctions lose up to 2.4 % more than the second says between 25 and −25 °C, and less below.
    pub fn hfe_tempco_per_c(&self, junctions: u8) -> f64 {
        self.hfe_tempco_per_c.unwrap_or(if junctions == 2 { 0.008 } else { 0.005 })
    }
}

impl Default for StandIns {
    fn default() -> Self {
        Self {
            hfe_tempco_per_c: None,
            gain_db: 80.0,
            psrr_db: 60.0,
            cmrr_db: 65.0,
            vs_test_v: 5.0,
            zener_knee: 1.5,
        }
    }
}

/// Temperature at which ratings and tolerances are stated, °C.
pub const RATED_AT_C: f64 = 25.0;

impl Rail {
    /// ΔT: the furthest that ambient goes from 25 °C, °C.
    pub fn temperature_span_c(&self) -> f64 {
        let Ambient { min_c, max_c } = self.ambient;
        (min_c - RATED_AT_C).abs().max((max_c - RATED_AT_C).abs())
    }

    /// VLmin: the lowest output in service, V.
    pub fn lowest_output_v(&self) -> f64 {
        match self.output {
            Output::Fixed { voltage_v, tolerance } => voltage_v * (1.0 - tolerance),
            Output::Adjustable { low_stop_v, .. } => low_stop_v,
        }
    }

    /// VLmax: the highest output at which full load must be delivered, V.
    pub fn highest_output_v(&self) -> f64 {
        match self.output {
            Output::Fixed { voltage_v, tolerance } => voltage_v * (1.0 + tolerance),
            Output::Adjustable { to_v, .. } => to_v,
        }
    }

    /// The output at which efficiency is stated, V.
    pub fn rated_output_v(&self) -> f64 {
        match self.output {
            Output::Fixed { voltage_v, .. } => voltage_v,
            Output::Adjustable { to_v, .. } => to_v,
        }
    }

    /// The output is set by a knob.
    pub fn is_adjustable(&self) -> bool {
        matches!(self.output, Output::Adjustable { .. })
    }

    /// IE: the greatest emitter current, load and divider together, A.
    pub fn emitter_current_a(&self) -> f64 {
        self.load.max_a + self.divider.max_a
    }

    /// A heatsink is chosen for this rail (the sheet brings none of its own).
    pub fn chooses_heatsink(&self) -> bool {
        self.thermal.sink_c_per_w.is_none()
    }
}
