//! Every combination of parts, by nested loops over the slots.

use super::values::{PlainDivider, PlainRz, plain_divider, plain_rz};
use circuit::amplifier::AmplifierAtRail;
use circuit::assembly::{Aim, Assembly, Network, supply_checks};
use circuit::check::{Finding, Kind, Tally};
use circuit::divider::{Divider, NO_VALUE_IN_WINDOW};
use circuit::drive;
use circuit::merit;
use circuit::parts::ResistorLine;
use circuit::pass::{CaseTemperatures, Duty, Mounted, PassFigures, Unmounted};
use circuit::reference::ZenerAtRail;
use circuit::resistor::{LineAtRail, PotAtRail};
use circuit::slot::Slot;
use select::problem::{Part, PassPart, Problem};
use std::ops::ControlFlow;

/// One choice in every slot.
#[derive(Debug, Clone)]
pub struct Combination {
    /// For each slot the place of its part in the problem's list; None for no part.
    pub places: [Option<usize>; Slot::COUNT],
    /// The rest, where the transistor can be mounted like this; None: lost to `heatsink-fit`.
    pub fitted: Option<Fitted>,
}

/// A combination that can be built, with its values and what its checks find.
#[derive(Debug, Clone)]
pub struct Fitted {
    /// The zener with RZ.
    pub rz: PlainRz,
    /// The divider; None where no value lies in the window.
    pub divider: Option<Divider>,
    /// How the transistor is mounted.
    pub mounting: Mounting,
    /// Every check that the rail calls for, in page order.
    pub findings: Vec<Finding>,
    /// Cost of one board; a resistor of a divider that does not exist costs nothing.
    pub cost: f64,
    /// 1/η − 1; None without a divider.
    pub loss: Option<f64>,
}

impl Fitted {
    /// Every check holds.
    pub fn is_feasible(&self) -> bool {
        self.findings.iter().all(Finding::holds)
    }

    /// The greatest utilisation of the damage checks.
    pub fn stress(&self) -> f64 {
        self.findings
            .iter()
            .filter(|f| f.check.kind() == Kind::Damage)
            .map(Finding::utilisation)
            .fold(0.0, f64::max)
    }
}

/// How a transistor is mounted.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum Mounting {
    /// On the heatsink at this place of the problem's list.
    Heatsink(usize),
    /// In free air.
    Unmounted,
    /// On the sink that the sheet brings.
    OwnSink,
}

/// Visits every combination of a problem once.
pub fn each_combination(problem: &Problem<'_>, mut visit: impl FnMut(&Combination)) {
    let rail = problem.rail;
    let aim = Aim::of(rail);
    let duty = Duty::new(rail);
    let bias_lines = lines(problem, &problem.bias_lines);
    let divider_lines = lines(problem, &problem.divider_lines);
    let pots: Vec<PotAtRail> =
        problem.pots.iter().map(|p| PotAtRail::new(p.figures, rail)).collect();
    let amplifiers: Vec<AmplifierAtRail> =
        problem.amplifiers.iter().map(|a| AmplifierAtRail::new(a.figures, rail)).collect();
    let transistors: Vec<PassFigures> =
        problem.transistors.iter().map(|t| PassFigures::new(t.part.figures, &duty, rail)).collect();
    let pot_places: Vec<Option<usize>> =
        if rail.is_adjustable() { (0..pots.len()).map(Some).collect() } else { vec![None] };
    let mountings = mountings(problem);

    for (z, zener_part) in problem.zeners.iter().enumerate() {
        let zener = ZenerAtRail::new(zener_part.figures, rail);
        for (b, bias_line) in bias_lines.iter().enumerate() {
            let Some(rz) = plain_rz(&zener, bias_line, rail) else { continue };
            for (d, divider_line) in divider_lines.iter().enumerate() {
                for &p in &pot_places {
                    let pot = p.map(|p| &pots[p]);
                    let divider = plain_divider(&aim, &rz.bias, divider_line, pot, rail)
                        .map(|PlainDivider { divider, .. }| divider);
                    for (a, amplifier) in amplifiers.iter().enumerate() {
                        for (t, pass) in transistors.iter().enumerate() {
                            for &mounting in &mountings {
                                let mut places = [None; Slot::COUNT];
                                places[Slot::Zener as usize] = Some(z);
                                places[Slot::BiasLine as usize] = Some(b);
                                places[Slot::Amplifier as usize] = Some(a);
                                places[Slot::DividerLine as usize] = Some(d);
                                places[Slot::Pot as usize] = p;
                                places[Slot::Pass as usize] = Some(t);
                                places[Slot::Heatsink as usize] = match mounting {
                                    Mounting::Heatsink(h) => Some(h),
                                    Mounting::Unmounted | Mounting::OwnSink => None,
                                };
                                let fitted = mounted(problem, t, pass, mounting, &duty).map(|at| {
                                    let bench = Bench {
                                        problem,
                                        zener: &zener,
                                        bias_line,
                                        rz,
                                        amplifier,
                                        divider_line,
                                        divider,
                                        pot,
                                        pass,
                                        mounted: at,
                                        duty: &duty,
                                    };
                                    Fitted {
                                        rz,
                                        divider,
                                        mounting,
                                        findings: bench.findings(),
                                        cost: cost(problem, &places, divider),
                                        loss: bench.loss(),
                                    }
                                });
                                visit(&Combination { places, fitted });
                            }
                        }
                    }
                }
            }
        }
    }
}

fn lines(problem: &Problem<'_>, parts: &[Part<'_, ResistorLine>]) -> Vec<LineAtRail> {
    parts.iter().map(|p| LineAtRail::new(p.figures, problem.rail)).collect()
}

/// The choices of the heatsink slot: the sheet's own sink alone, or every heatsink and, where any
/// transistor may go without, none.
fn mountings(problem: &Problem<'_>) -> Vec<Mounting> {
    if problem.rail.thermal.sink_c_per_w.is_some() {
        return vec![Mounting::OwnSink];
    }
    let mut mountings: Vec<Mounting> =
        (0..problem.heatsinks.len()).map(Mounting::Heatsink).collect();
    let some_transistor_stands_alone =
        problem.transistors.iter().any(|t| t.part.figures.rth_ja_c_per_w.is_some());
    if problem.may_go_unmounted && some_transistor_stands_alone {
        mountings.push(Mounting::Unmounted);
    }
    mountings
}

/// The transistor's temperatures where it is mounted like this; None where it can't be.
fn mounted(
    problem: &Problem<'_>,
    transistor: usize,
    pass: &PassFigures,
    mounting: Mounting,
    duty: &Duty,
) -> Option<Mounted> {
    let rail = problem.rail;
    let PassPart { part, package } = &problem.transistors[transistor];
    match mounting {
        Mounting::OwnSink => {
            CaseTemperatures::on_own_sink(duty, rail).map(|case| Mounted::on(case, pass, duty))
        }
        Mounting::Unmounted => Unmounted::new(part.figures, duty, rail).map(Mounted::from),
        Mounting::Heatsink(h) => {
            let sink = &problem.heatsinks[h];
            let fits = package.is_some_and(|package| sink.fits.contains(&package));
            fits.then(|| {
                let case = CaseTemperatures::on_heatsink(sink.part.figures, duty, rail);
                Mounted::on(case, pass, duty)
            })
        }
    }
}

/// Σ unit prices: RZ, RF, RI, RX are one piece each, a link costs nothing.
fn cost(
    problem: &Problem<'_>,
    places: &[Option<usize>; Slot::COUNT],
    divider: Option<Divider>,
) -> f64 {
    let resistors = match divider {
        None => 0.0,
        Some(divider) if divider.upper.ohm == 0.0 => 1.0,
        Some(_) => 2.0,
    };
    let in_slot = |slot: Slot| {
        let Some(i) = places[slot as usize] else { return 0.0 };
        match slot {
            Slot::Zener => problem.zeners[i].price,
            Slot::BiasLine => problem.bias_lines[i].price,
            Slot::Amplifier => problem.amplifiers[i].price,
            Slot::DividerLine => resistors * problem.divider_lines[i].price,
            Slot::Pot => problem.pots[i].price,
            Slot::Pass => problem.transistors[i].part.price,
            Slot::Heatsink => problem.heatsinks[i].part.price,
        }
    };
    Slot::ALL.into_iter().map(in_slot).sum()
}

/// A set of parts laid out with its values, the divider perhaps missing.
struct Bench<'a> {
    problem: &'a Problem<'a>,
    zener: &'a ZenerAtRail,
    bias_line: &'a LineAtRail,
    rz: PlainRz,
    amplifier: &'a AmplifierAtRail,
    divider_line: &'a LineAtRail,
    divider: Option<Divider>,
    pot: Option<&'a PotAtRail>,
    pass: &'a PassFigures,
    mounted: Mounted,
    duty: &'a Duty,
}

impl Bench<'_> {
    fn assembly(&self) -> Option<Assembly<'_>> {
        let divider = self.divider?;
        Some(Assembly {
            rail: self.problem.rail,
            zener: self.zener,
            bias_line: self.bias_line,
            bias: self.rz.bias,
            amplifier: self.amplifier,
            network: Network { line: self.divider_line, divider, pot: self.pot },
            pass: self.pass,
            mounted: self.mounted,
            duty: self.duty,
        })
    }

    fn findings(&self) -> Vec<Finding> {
        let mut findings = Vec::new();
        let _ = match self.assembly() {
            Some(assembly) => assembly.checks(&mut findings),
            None => self.checks_without_divider(&mut findings),
        };
        findings
    }

    /// Every check in page order where no value lies in the window: of sections 4.3 and 4.4 only
    /// `divider-window` is left, and fails.
    fn checks_without_divider(&self, findings: &mut Vec<Finding>) -> ControlFlow<()> {
        let rail = self.problem.rail;
        self.zener.checks(&self.rz.bias, self.bias_line, findings)?;
        supply_checks(self.amplifier, rail, findings)?;
        findings.take(self.amplifier.amp_input_low(self.rz.bias.vz_lo_v))?;
        findings.take(self.amplifier.amp_input_high(self.rz.bias.vz_hi_v, rail))?;
        findings.take(NO_VALUE_IN_WINDOW)?;
        self.pass.checks(&self.mounted, self.duty, rail, findings)?;
        drive::checks(self.amplifier, self.pass, rail, findings)
    }

    fn loss(&self) -> Option<f64> {
        let side_a = self.assembly()?.side_current_a();
        Some(merit::loss(self.problem.rail, side_a))
    }
}
