//! The checks by name, what a check finds, and what is done with findings.

use quantity::digits::at_most;
use std::ops::ControlFlow;

/// What happens to the user when a limit is crossed.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Kind {
    /// A limit whose crossing destroys or ages a part.
    Damage,
    /// A limit whose crossing makes the rail fail to do its work.
    Function,
}

impl Kind {
    /// The word used in results.
    pub const fn name(self) -> &'static str {
        match self {
            Kind::Damage => "damage",
            Kind::Function => "function",
        }
    }
}

/// Declares the checks once: variant, name, kind, unit, section of the model page, and in words what
/// is asked of what.
macro_rules! checks {
    ($($(#[$doc:meta])* $variant:ident, $name:literal, $kind:ident, $unit:literal, $section:literal,
       $asked:literal, $allowed:literal;)*) => {
        /// A check of the model, in the order of the model page.
        #[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
        pub enum Check { $($(#[$doc])* $variant,)* }

        impl Check {
            /// Every check, in the order of the model page.
            pub const ALL: [Check; [$(Check::$variant),*].len()] = [$(Check::$variant),*];

            /// The name used in results.
            pub const fn name(self) -> &'static str {
                match self { $(Check::$variant => $name,)* }
            }

            /// Damage or function.
            pub const fn kind(self) -> Kind {
                match self { $(Check::$variant => Kind::$kind,)* }
            }

            /// The unit of asked and allowed.
            pub const fn unit(self) -> &'static str {
                match self { $(Check::$variant => $unit,)* }
            }

            /// The section of the model page that defines it.
            pub const fn section(self) -> &'static str {
                match self { $(Check::$variant => $section,)* }
            }

            /// What is asked, in the symbols of the model page.
            pub const fn asked_formula(self) -> &'static str {
                match self { $(Check::$variant => $asked,)* }
            }

            /// What is allowed, in the symbols of the model page.
            pub const fn allowed_formula(self) -> &'static str {
                match self { $(Check::$variant => $allowed,)* }
            }
        }
    };
}

checks! {
    /// The zener keeps its least current.
    ZenerBias, "zener-bias", Function, "A", "4.1", "iz_min", "IZlo";
    /// The zener's dissipation at ambient.
    ZenerPower, "zener-power", Damage, "W", "4.1", "Pe",
        "zener_power·pd·clamp((tj_max − Tmax)/(tj_max − 25), 0, 1)";
    /// The zener's junction above ambient.
    ZenerJunction, "zener-junction", Damage, "°C", "4.1", "Pe·θJA", "Tj(z) − Tmax";
    /// Power in the bias resistor.
    RzPower, "rz-power", Damage, "W", "4.1", "IZhi²·RZlo", "resistor_power·power_w·D";
    /// Voltage on the bias resistor.
    RzVoltage, "rz-voltage", Damage, "V", "4.1", "IZhi·RZlo", "resistor_voltage·vmax_v";
    /// The feed against the amplifier's greatest supply.
    AmpSupplyHigh, "amp-supply-high", Damage, "V", "4.2", "VUmax", "amp_supply·vs_max";
    /// The feed against the amplifier's least supply.
    AmpSupplyLow, "amp-supply-low", Function, "V", "4.2", "vs_min", "VUmin";
    /// The reference lies above the bottom of the input range.
    AmpInputLow, "amp-input-low", Function, "V", "4.2", "vcm_low", "VZlo";
    /// The reference lies below the top of the input range.
    AmpInputHigh, "amp-input-high", Function, "V", "4.2", "VZhi + vcm_high", "VUmin";
    /// The divider current stays in its window.
    DividerWindow, "divider-window", Function, "A", "4.2", "divider.min_a | IDhi",
        "IDlo | divider.max_a";
    /// The output stays within its tolerance.
    OutputError, "output-error", Function, "V", "4.3", "max(VLhi − V, V − VLlo)", "τ·V";
    /// Power in RF.
    RfPower, "rf-power", Damage, "W", "4.3", "IDhi²·RFhi", "resistor_power·power_w·D";
    /// The knob reaches the top of the range.
    ReachHigh, "reach-high", Function, "V", "4.4", "adjust_to", "Vreach";
    /// The knob reaches the bottom of the range.
    ReachLow, "reach-low", Function, "V", "4.4", "Vfloor", "adjust_from";
    /// The knob can't be turned below the low stop.
    LowStop, "low-stop", Function, "V", "4.4", "low_stop", "Vlow";
    /// The knob can't be turned above the ceiling.
    Ceiling, "ceiling", Function, "V", "4.4", "Vtop", "ceiling";
    /// Power in the fixed part RX.
    RxPower, "rx-power", Damage, "W", "4.4", "IDhi²·RXhi", "resistor_power·power_w·D";
    /// Power in RI.
    RiPower, "ri-power", Damage, "W", "4.3, 4.4", "IDhi²·RIlo", "resistor_power·power_w·D";
    /// Voltage on RF.
    RfVoltage, "rf-voltage", Damage, "V", "4.3", "IDhi·RFhi", "resistor_voltage·vmax_v";
    /// Voltage on the fixed part RX.
    RxVoltage, "rx-voltage", Damage, "V", "4.4", "IDhi·RXhi", "resistor_voltage·vmax_v";
    /// Power in the whole track.
    PotPower, "pot-power", Damage, "W", "4.4", "IDhi²·phi", "resistor_power·power_w·D (pot)";
    /// Voltage on the whole track.
    PotVoltage, "pot-voltage", Damage, "V", "4.4", "IDhi·phi", "resistor_voltage·vmax_v (pot)";
    /// The feed against VCEO.
    CollectorVoltage, "collector-voltage", Damage, "V", "4.5", "VUmax", "collector_voltage·vceo";
    /// Full load or fault current against the greatest collector current.
    CollectorCurrent, "collector-current", Damage, "A", "4.5", "max(IE, IF)",
        "collector_current·ic_max";
    /// The hottest load against the power rating at the case temperature.
    PassPower, "pass-power", Damage, "W", "4.5", "P", "pass_power·pd·d(TC)";
    /// The transistor's junction above ambient.
    PassJunction, "pass-junction", Damage, "°C", "4.5", "TJ − Tmax", "Tj(q) − Tmax";
    /// The hardest load against the DC safe operating area.
    SoaLoad, "soa-load", Damage, "A", "4.5", "i", "soa·soa_dc(v(i))·d(TC)";
    /// The fault current against the safe operating area for its time.
    SoaFault, "soa-fault", Damage, "A", "4.5", "IF", "soa_fault·soa_t(VUmax)·d(TF)";
    /// The transistor's junction at the end of a fault.
    FaultJunction, "fault-junction", Damage, "°C", "4.5", "TF + PF·θJC − Tmax", "TjF(q) − Tmax";
    /// Headroom for the transistor's saturation voltage.
    Dropout, "dropout", Function, "V", "4.5", "VLmax + vce_sat(IE)", "VUmin";
    /// The amplifier can drive the base.
    BaseDrive, "base-drive", Function, "A", "4.6", "IB", "amp_current·iout";
    /// The amplifier's output reaches high enough.
    SwingHigh, "swing-high", Function, "V", "4.6", "VLmax + VBEhi + swing_high", "VUmin";
    /// The amplifier's output reaches low enough.
    SwingLow, "swing-low", Function, "V", "4.6", "swing_low", "VLmin";
    /// The amplifier's junction above ambient.
    AmpJunction, "amp-junction", Damage, "°C", "4.6",
        "(VUmax·iq + max(P·IB/IE, A·IB0))·θJA", "Tj(a) − Tmax";
    /// The amplifier's junction while its output is shorted.
    AmpFault, "amp-fault", Damage, "°C", "4.6", "VUmax·(iq + isc)·θJA", "TjF(a) − Tmax";
    /// The amplifier can sink the transistor's leakage.
    LeakageSink, "leakage-sink", Function, "A", "4.6", "ileak", "amp_current·isink";
    /// Divider and least load take what leaks past the amplifier.
    NoLoad, "no-load", Function, "A", "4.6", "ib + (junctions = 2: ileak)",
        "load.min_a + divider.min_a";
}

impl Check {
    /// The check of this name.
    pub fn named(name: &str) -> Option<Check> {
        Check::ALL.into_iter().find(|c| c.name() == name)
    }
}

/// What a check found for one set of figures.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Finding {
    /// Which check.
    pub check: Check,
    /// What is asked, in the check's unit.
    pub asked: f64,
    /// What is allowed, in the check's unit.
    pub allowed: f64,
}

impl Finding {
    /// u = asked/allowed; 0 where nothing is asked, infinite where something is asked of nothing.
    ///
    /// ```
    /// use circuit::check::{Check, Finding};
    /// let f = |asked, allowed| Finding { check: Check::SwingLow, asked, allowed };
    /// assert_eq!(f(1.0, 4.0).utilisation(), 0.25);
    /// assert_eq!(f(0.0, -1.0).utilisation(), 0.0);
    /// assert_eq!(f(1.0, 0.0).utilisation(), f64::INFINITY);
    /// assert_eq!(f(1.0, f64::NAN).utilisation(), f64::INFINITY);
    /// ```
    #[inline]
    pub fn utilisation(&self) -> f64 {
        if self.asked <= 0.0 {
            0.0
        } else if self.allowed <= 0.0 || self.asked == f64::INFINITY {
            f64::INFINITY
        } else {
            let u = self.asked / self.allowed;
            // A figure that went wrong holds nothing.
            if u.is_nan() { f64::INFINITY } else { u }
        }
    }

    /// The check holds: u ≤ 1 at ten significant digits.
    #[inline]
    pub fn holds(&self) -> bool {
        at_most(self.utilisation(), 1.0)
    }
}

/// Somebody who takes findings, and may stop asking for more.
pub trait Tally {
    /// Takes the next finding in page order; Break ends the asking.
    fn take(&mut self, finding: Finding) -> ControlFlow<()>;
}

/// Keeps every finding.
impl Tally for Vec<Finding> {
    fn take(&mut self, finding: Finding) -> ControlFlow<()> {
        self.push(finding);
        ControlFlow::Continue(())
    }
}

/// Follows the greatest utilisation of damage checks, and stops at the first check that fails.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct WhileHolding {
    /// Greatest utilisation of the damage checks so far.
    pub stress: f64,
    /// The check that failed, if any did.
    pub failed: Option<Check>,
}

impl Tally for WhileHolding {
    #[inline]
    fn take(&mut self, finding: Finding) -> ControlFlow<()> {
        let u = finding.utilisation();
        if !at_most(u, 1.0) {
            self.failed = Some(finding.check);
            return ControlFlow::Break(());
        }
        if finding.check.kind() == Kind::Damage {
            self.stress = self.stress.max(u);
        }
        ControlFlow::Continue(())
    }
}

impl WhileHolding {
    /// Runs checks and tells their stress, or the first check that fails.
    #[inline]
    pub fn over(checks: impl FnOnce(&mut WhileHolding) -> ControlFlow<()>) -> Result<f64, Check> {
        let mut tally = WhileHolding::default();
        let _ = checks(&mut tally);
        tally.failed.map_or(Ok(tally.stress), Err)
    }
}

/// Follows the greatest utilisation of all checks, whatever their kind.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct Worst(pub f64);

impl Tally for Worst {
    #[inline]
    fn take(&mut self, finding: Finding) -> ControlFlow<()> {
        self.0 = self.0.max(finding.utilisation());
        ControlFlow::Continue(())
    }
}

impl Worst {
    /// The greatest utilisation among the checks.
    #[inline]
    pub fn of(checks: impl FnOnce(&mut Worst) -> ControlFlow<()>) -> f64 {
        let mut worst = Worst::default();
        let _ = checks(&mut worst);
        worst.0
    }
}
