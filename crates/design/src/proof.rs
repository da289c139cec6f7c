//! The parts and values of a design at a rail: every check of the circuit.

use crate::parts::Parts;
use circuit::amplifier::AmplifierAtRail;
use circuit::assembly::{Aim, Assembly, Network};
use circuit::divider::Divider;
use circuit::parts::{Amplifier, Heatsink, Pot, ResistorLine, Transistor, Zener};
use circuit::pass::{CaseTemperatures, Duty, Mounted, PassFigures, Unmounted};
use circuit::rail::Rail;
use circuit::reference::ZenerAtRail;
use circuit::resistor::{LineAtRail, PotAtRail, Resistance};
use select::candidate::Proof;

/// How the transistor's heat leaves it.
#[derive(Debug, Clone, Copy)]
pub enum Cooling<'a> {
    /// On the design's heatsink.
    Heatsink(&'a Heatsink),
    /// On the sink that the sheet brings, °C/W.
    OwnSink(f64),
    /// In free air; θJA of the transistor, °C/W.
    Unmounted(f64),
}

/// The figures of a design's parts, complete enough for every check.
#[derive(Debug, Clone, Copy)]
pub struct Fitted<'a> {
    /// The zener.
    pub zener: &'a Zener,
    /// The line of RZ.
    pub bias_line: &'a ResistorLine,
    /// The amplifier.
    pub amplifier: &'a Amplifier,
    /// The line of the divider.
    pub divider_line: &'a ResistorLine,
    /// The pot of an adjustable output.
    pub pot: Option<&'a Pot>,
    /// The transistor.
    pub pass: &'a Transistor,
    /// Where its heat goes.
    pub cooling: Cooling<'a>,
}

impl<'a> Fitted<'a> {
    /// The figures; None where a blank cell or another polarity leaves a part without them: see
    /// [`crate::condition`].
    pub fn new(parts: &Parts<'a>, rail: &Rail) -> Option<Self> {
        let pass = &parts.pass.row()?.figures;
        let cooling = match (&parts.heatsink, rail.thermal.sink_c_per_w) {
            (Some(sink), _) => Cooling::Heatsink(&sink.row()?.figures.figures),
            (None, Some(sink_c_per_w)) => Cooling::OwnSink(sink_c_per_w),
            (None, None) => Cooling::Unmounted(pass.rth_ja_c_per_w?),
        };
        Some(Self {
            zener: &parts.zener.row()?.figures,
            bias_line: &parts.bias_line.row()?.figures,
            amplifier: &parts.amplifier.row()?.figures,
            divider_line: &parts.divider_line.row()?.figures,
            pot: match &parts.pot {
                Some(pot) => Some(&pot.row()?.figures),
                None => None,
            },
            pass,
            cooling,
        })
    }
}

/// The resistors of a set of parts, Ω.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Ohms {
    /// RZ.
    pub rz: f64,
    /// RF of a fixed output, RX of an adjustable one; 0 for a link.
    pub upper: f64,
    /// RI.
    pub ri: f64,
}

/// A design under the conditions of a rail: what every check reads.
#[derive(Debug, Clone)]
pub struct AtRail<'a> {
    /// The requirement.
    pub rail: &'a Rail,
    /// What the divider is asked.
    pub aim: Aim,
    /// The heaviest work of the rail.
    pub duty: Duty,
    /// The zener.
    pub zener: ZenerAtRail,
    /// The line of RZ.
    pub bias_line: LineAtRail,
    /// RZ.
    pub rz: Resistance,
    /// The amplifier.
    pub amplifier: AmplifierAtRail,
    /// The line of the divider.
    pub divider_line: LineAtRail,
    /// The resistors of the divider.
    pub divider: Divider,
    /// The pot.
    pub pot: Option<PotAtRail>,
    /// The transistor.
    pub pass: PassFigures,
    /// Its temperatures.
    pub mounted: Mounted,
}

impl<'a> AtRail<'a> {
    /// Puts the parts and values of a design under a rail's conditions. None only where an unmounted
    /// transistor gives no rth_ja, which [`Fitted::new`] rules out.
    pub fn new(fitted: &Fitted<'_>, parts: &Parts<'_>, rail: &'a Rail) -> Option<Self> {
        Self::with(fitted, parts.ohms(), rail)
    }

    /// The same for any parts and values.
    pub fn with(fitted: &Fitted<'_>, ohms: Ohms, rail: &'a Rail) -> Option<Self> {
        let duty = Duty::new(rail);
        let span_c = rail.temperature_span_c();
        let of_line = |ohm: f64, line: &ResistorLine| {
            Resistance::new(ohm, line.tol, line.tempco_per_c, span_c)
        };
        let pass = PassFigures::new(fitted.pass, &duty, rail);
        let mounted = match fitted.cooling {
            Cooling::Heatsink(sink) => {
                Mounted::on(CaseTemperatures::on_heatsink(sink, &duty, rail), &pass, &duty)
            }
            Cooling::OwnSink(_) => {
                Mounted::on(CaseTemperatures::on_own_sink(&duty, rail)?, &pass, &duty)
            }
            Cooling::Unmounted(_) => Unmounted::new(fitted.pass, &duty, rail)?.into(),
        };
        Some(Self {
            rail,
            aim: Aim::of(rail),
            duty,
            zener: ZenerAtRail::new(fitted.zener, rail),
            bias_line: LineAtRail::new(fitted.bias_line, rail),
            rz: of_line(ohms.rz, fitted.bias_line),
            amplifier: AmplifierAtRail::new(fitted.amplifier, rail),
            divider_line: LineAtRail::new(fitted.divider_line, rail),
            divider: Divider {
                upper: of_line(ohms.upper, fitted.divider_line),
                ri: of_line(ohms.ri, fitted.divider_line),
            },
            pot: fitted.pot.map(|pot| PotAtRail::new(pot, rail)),
            pass,
            mounted,
        })
    }

    /// The parts put together.
    pub fn assembly(&self) -> Assembly<'_> {
        Assembly {
            rail: self.rail,
            zener: &self.zener,
            bias_line: &self.bias_line,
            bias: self.zener.bias(self.rz, self.rail),
            amplifier: &self.amplifier,
            network: Network {
                line: &self.divider_line,
                divider: self.divider,
                pot: self.pot.as_ref(),
            },
            pass: &self.pass,
            mounted: self.mounted,
            duty: &self.duty,
        }
    }

    /// Every check that the rail calls for.
    pub fn prove(&self) -> Proof {
        Proof::of(&self.assembly(), self.rail)
    }
}
