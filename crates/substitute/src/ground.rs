//! The parts that may be chosen, at the conditions of a rail.
//!
//! Made once for a sheet and shared by all designs that name it.

use circuit::amplifier::AmplifierAtRail;
use circuit::assembly::Aim;
use circuit::pass::{CaseTemperatures, Duty, PassFigures};
use circuit::rail::Rail;
use circuit::reference::ZenerAtRail;
use circuit::resistor::{LineAtRail, PotAtRail};
use circuit::slot::Slot;
use rayon::prelude::*;
use select::problem::Problem;

/// A line of resistors at a rail, with what is read of it again and again.
#[derive(Debug, Clone)]
pub struct Line {
    /// The line.
    pub at_rail: LineAtRail,
    /// (hi/lo)² of its values.
    pub spread: f64,
}

impl Line {
    /// A line at a rail.
    pub fn new(at_rail: LineAtRail) -> Self {
        let spread = at_rail.spread();
        Self { at_rail, spread }
    }
}

/// What may be chosen for a rail, every figure read where this rail works. The places are those of
/// the problem's lists.
#[derive(Debug)]
pub struct Ground<'a> {
    /// What may be chosen.
    pub problem: Problem<'a>,
    /// What the divider is asked.
    pub aim: Aim,
    /// The heaviest work of the rail.
    pub duty: Duty,
    /// Zeners.
    pub zeners: Vec<ZenerAtRail>,
    /// Lines for RZ.
    pub bias_lines: Vec<Line>,
    /// Amplifiers.
    pub amplifiers: Vec<AmplifierAtRail>,
    /// Lines for the divider.
    pub divider_lines: Vec<Line>,
    /// Pots.
    pub pots: Vec<PotAtRail>,
    /// Transistors.
    pub passes: Vec<PassFigures>,
    /// Cases on each heatsink.
    pub sinks: Vec<CaseTemperatures>,
}

impl<'a> Ground<'a> {
    /// Reads every part at the problem's rail.
    pub fn new(problem: Problem<'a>) -> Self {
        let rail = problem.rail;
        let duty = Duty::new(rail);
        let line = |figures| Line::new(LineAtRail::new(figures, rail));
        Self {
            aim: Aim::of(rail),
            duty,
            zeners: problem.zeners.par_iter().map(|p| ZenerAtRail::new(p.figures, rail)).collect(),
            bias_lines: problem.bias_lines.iter().map(|p| line(p.figures)).collect(),
            amplifiers: problem
                .amplifiers
                .par_iter()
                .map(|p| AmplifierAtRail::new(p.figures, rail))
                .collect(),
            divider_lines: problem.divider_lines.iter().map(|p| line(p.figures)).collect(),
            pots: problem.pots.iter().map(|p| PotAtRail::new(p.figures, rail)).collect(),
            passes: problem
                .transistors
                .par_iter()
                .map(|t| PassFigures::new(t.part.figures, &duty, rail))
                .collect(),
            sinks: problem
                .heatsinks
                .iter()
                .map(|s| CaseTemperatures::on_heatsink(s.part.figures, &duty, rail))
                .collect(),
            problem,
        }
    }

    /// The requirement.
    pub fn rail(&self) -> &'a Rail {
        self.problem.rail
    }

    /// How many parts may be chosen for a slot.
    pub fn rows(&self, slot: Slot) -> usize {
        let problem = &self.problem;
        match slot {
            Slot::Zener => problem.zeners.len(),
            Slot::BiasLine => problem.bias_lines.len(),
            Slot::Amplifier => problem.amplifiers.len(),
            Slot::DividerLine => problem.divider_lines.len(),
            Slot::Pot if problem.rail.is_adjustable() => problem.pots.len(),
            Slot::Pass => problem.transistors.len(),
            Slot::Heatsink if problem.rail.chooses_heatsink() => problem.heatsinks.len(),
            Slot::Pot | Slot::Heatsink => 0,
        }
    }

    /// Maker and name of the part at a place; None where there is none.
    pub fn name(&self, slot: Slot, place: u32) -> Option<(&'a str, &'a str)> {
        fn of<'a, F>(part: &select::problem::Part<'a, F>) -> (&'a str, &'a str) {
            (part.maker, part.part)
        }
        let problem = &self.problem;
        let place = place as usize;
        match slot {
            Slot::Zener => problem.zeners.get(place).map(of),
            Slot::BiasLine => problem.bias_lines.get(place).map(of),
            Slot::Amplifier => problem.amplifiers.get(place).map(of),
            Slot::DividerLine => problem.divider_lines.get(place).map(of),
            Slot::Pot => problem.pots.get(place).map(of),
            Slot::Pass => problem.transistors.get(place).map(|t| of(&t.part)),
            Slot::Heatsink => problem.heatsinks.get(place).map(|s| of(&s.part)),
        }
    }
}
