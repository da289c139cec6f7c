//! A candidate: one choice for every slot, with its values and its proof.

use crate::problem::Problem;
use circuit::amplifier::AmplifierAtRail;
use circuit::assembly::{Assembly, Network, OutputFigures};
use circuit::check::{Finding, Kind};
use circuit::divider::Divider;
use circuit::merit::{self, Binding};
use circuit::pass::{CaseTemperatures, Duty, Mounted, PassFigures, Unmounted};
use circuit::rail::Rail;
use circuit::reference::ZenerAtRail;
use circuit::resistor::{LineAtRail, PotAtRail, Resistance};
use circuit::slot::Slot;

/// A feasible choice of parts and values.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Candidate {
    /// By `Slot as usize`: the part's place in the problem's list for that slot; None where the slot
    /// has no part.
    pub places: [Option<u32>; Slot::COUNT],
    /// RZ.
    pub rz: Resistance,
    /// RF and RI, or RX and RI.
    pub divider: Divider,
    /// Cost of one board.
    pub cost: f64,
    /// 1/η − 1.
    pub loss: f64,
    /// Greatest utilisation of the damage checks.
    pub stress: f64,
    /// cost^wc · loss^wl · stress^ws.
    pub score: f64,
}

impl Candidate {
    /// The place of the slot's part in the problem's list for it.
    pub fn place(&self, slot: Slot) -> Option<usize> {
        self.places[slot as usize].map(|p| p as usize)
    }

    /// Makes every check again, one after another, from the parts' own figures. None where a place
    /// does not belong to this problem.
    pub fn prove(&self, problem: &Problem<'_>) -> Option<Proof> {
        let rail = problem.rail;
        let duty = Duty::new(rail);
        let place = |slot| self.place(slot);
        let zener = ZenerAtRail::new(problem.zeners.get(place(Slot::Zener)?)?.figures, rail);
        let bias_line =
            LineAtRail::new(problem.bias_lines.get(place(Slot::BiasLine)?)?.figures, rail);
        let amplifier =
            AmplifierAtRail::new(problem.amplifiers.get(place(Slot::Amplifier)?)?.figures, rail);
        let divider_line =
            LineAtRail::new(problem.divider_lines.get(place(Slot::DividerLine)?)?.figures, rail);
        let pot = match place(Slot::Pot) {
            Some(p) => Some(PotAtRail::new(problem.pots.get(p)?.figures, rail)),
            None => None,
        };
        let transistor = problem.transistors.get(place(Slot::Pass)?)?.part.figures;
        let pass = PassFigures::new(transistor, &duty, rail);
        let mounted = match place(Slot::Heatsink) {
            Some(p) => {
                let sink = problem.heatsinks.get(p)?.part.figures;
                Mounted::on(CaseTemperatures::on_heatsink(sink, &duty, rail), &pass, &duty)
            }
            None => match CaseTemperatures::on_own_sink(&duty, rail) {
                Some(case) => Mounted::on(case, &pass, &duty),
                None => Unmounted::new(transistor, &duty, rail)?.into(),
            },
        };
        let assembly = Assembly {
            rail,
            zener: &zener,
            bias_line: &bias_line,
            bias: zener.bias(self.rz, rail),
            amplifier: &amplifier,
            network: Network { line: &divider_line, divider: self.divider, pot: pot.as_ref() },
            pass: &pass,
            mounted,
            duty: &duty,
        };
        Some(Proof::of(&assembly, rail))
    }
}

/// Every check of a set of parts and values, with what a designer asks beside them.
#[derive(Debug, Clone, PartialEq)]
pub struct Proof {
    /// Every check that the rail calls for, in page order.
    pub findings: Vec<Finding>,
    /// The greatest utilisation of the damage checks.
    pub stress: Binding,
    /// The greatest utilisation of the function checks but `divider-window`.
    pub tightness: Binding,
    /// η.
    pub efficiency: f64,
    /// 1/η − 1.
    pub loss: f64,
    /// The output at the corners.
    pub output: OutputFigures,
    /// The lowest feed with headroom, V.
    pub lowest_feed_v: f64,
    /// The least current gain with which the amplifier drives full load.
    pub least_gain: f64,
}

impl Proof {
    /// Makes every check of an assembly.
    pub fn of(assembly: &Assembly<'_>, rail: &Rail) -> Self {
        let mut findings = Vec::with_capacity(32);
        // A list of findings never ends the asking.
        let _ = assembly.checks(&mut findings);
        let side_a = assembly.side_current_a();
        Self {
            stress: merit::binding(&findings, Kind::Damage),
            tightness: merit::binding(&findings, Kind::Function),
            findings,
            efficiency: merit::efficiency(rail, side_a),
            loss: merit::loss(rail, side_a),
            output: assembly.output(),
            lowest_feed_v: assembly.lowest_feed_v(),
            least_gain: assembly.least_gain(),
        }
    }
}
