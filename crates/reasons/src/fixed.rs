//! A candidate whose parts and values stay while a key of the sheet moves.

use circuit::check::{Check, Finding};
use circuit::divider::Divider;
use circuit::parts::ResistorLine;
use circuit::rail::Rail;
use circuit::resistor::Resistance;
use circuit::slot::Slot;
use select::candidate::Candidate;
use select::problem::Problem;

/// A candidate by itself.
pub(crate) struct Fixed<'a> {
    /// The parts of the candidate alone.
    parts: Problem<'a>,
    candidate: Candidate,
}

impl<'a> Fixed<'a> {
    /// None where the candidate's places are not of this problem.
    pub fn new(candidate: &Candidate, problem: &Problem<'a>) -> Option<Self> {
        let place = |slot| candidate.place(slot);
        let parts = Problem {
            rail: problem.rail,
            weights: problem.weights,
            zeners: vec![*problem.zeners.get(place(Slot::Zener)?)?],
            bias_lines: vec![*problem.bias_lines.get(place(Slot::BiasLine)?)?],
            amplifiers: vec![*problem.amplifiers.get(place(Slot::Amplifier)?)?],
            divider_lines: vec![*problem.divider_lines.get(place(Slot::DividerLine)?)?],
            pots: match place(Slot::Pot) {
                Some(p) => vec![*problem.pots.get(p)?],
                None => Vec::new(),
            },
            transistors: vec![*problem.transistors.get(place(Slot::Pass)?)?],
            heatsinks: match place(Slot::Heatsink) {
                Some(h) => vec![problem.heatsinks.get(h)?.clone()],
                None => Vec::new(),
            },
            may_go_unmounted: problem.may_go_unmounted,
        };
        let places = candidate.places.map(|place| place.map(|_| 0));
        Some(Self { parts, candidate: Candidate { places, ..*candidate } })
    }

    /// Every check on another rail, in page order.
    pub fn findings(&self, rail: &Rail) -> Option<Vec<Finding>> {
        let measured = |ohm: f64, line: &ResistorLine| match ohm {
            0.0 => Resistance::LINK,
            ohm => Resistance::new(ohm, line.tol, line.tempco_per_c, rail.temperature_span_c()),
        };
        let bias_line = self.parts.bias_lines.first()?.figures;
        let divider_line = self.parts.divider_lines.first()?.figures;
        let Candidate { rz, divider, .. } = self.candidate;
        let moved = Candidate {
            rz: measured(rz.ohm, bias_line),
            divider: Divider {
                upper: measured(divider.upper.ohm, divider_line),
                ri: measured(divider.ri.ohm, divider_line),
            },
            ..self.candidate
        };
        let problem = Problem { rail, ..self.parts.clone() };
        moved.prove(&problem).map(|proof| proof.findings)
    }

    /// The first check that fails on another rail; None where all hold.
    pub fn fails(&self, rail: &Rail) -> Option<Check> {
        let findings = self.findings(rail)?;
        findings.iter().find(|finding| !finding.holds()).map(|finding| finding.check)
    }
}
