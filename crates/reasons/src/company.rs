//! Every part of a problem at its rail, and what fails where parts meet.
//!
//! Resistor values are those that the circuit chooses, whatever checks are asked: a requirement that
//! is dropped moves no value.

use crate::check_set::Failing;
use circuit::amplifier::AmplifierAtRail;
use circuit::assembly::{Aim, Network, choose_divider, input_checks, supply_checks};
use circuit::check::{Finding, Tally};
use circuit::divider::{Divider, NO_VALUE_IN_WINDOW};
use circuit::drive;
use circuit::parts::{Amplifier, Heatsink, Zener};
use circuit::pass::{CaseTemperatures, Duty, Mounted, PassFigures, Unmounted};
use circuit::rail::Rail;
use circuit::reference::{Bias, Chosen, ZenerAtRail, choose_rz, chosen_rz};
use circuit::resistor::{LineAtRail, PotAtRail};
use circuit::slot::Slot;
use rayon::prelude::*;
use select::candidate::Candidate;
use select::problem::{Part, PassPart, Problem};
use std::collections::HashMap;
use std::ops::ControlFlow;
use std::sync::OnceLock;

/// By `Slot as usize`: the place of a part in the problem's list; None for no part.
pub type Places = [Option<u32>; Slot::COUNT];

/// A part in the problem's list for its slot, or none.
pub(crate) fn at(places: &Places, slot: Slot) -> Option<usize> {
    places[slot as usize].map(|place| place as usize)
}

/// A zener with the bias resistor that was chosen from a line.
pub(crate) struct Biased {
    pub zener: u32,
    pub line: u32,
    pub bias: Bias,
    /// What fails of section 4.1.
    pub failing: Failing,
}

/// A biased zener with the divider that was chosen from a line beside a pot.
pub(crate) struct Reference<'c> {
    pub biased: &'c Biased,
    pub line: u32,
    pub pot: Option<u32>,
    /// None where no value of the line lies in the window.
    pub divider: Option<Divider>,
}

/// The parts of a problem at its rail.
pub(crate) struct Company<'a> {
    pub problem: &'a Problem<'a>,
    pub aim: Aim,
    pub duty: Duty,
    /// Worked out when they are first asked for: not every question meets every side.
    zeners: OnceLock<Vec<ZenerAtRail>>,
    amplifiers: OnceLock<Vec<AmplifierAtRail>>,
    passes: OnceLock<Vec<PassFigures>>,
    pub bias_lines: Vec<LineAtRail>,
    pub divider_lines: Vec<LineAtRail>,
    pub pots: Vec<PotAtRail>,
    /// The case on each heatsink.
    cases: Vec<CaseTemperatures>,
    fitting: Fitting<'a>,
}

/// The heatsinks that take each package.
#[derive(Default)]
struct Fitting<'a> {
    all: HashMap<&'a str, Vec<u32>>,
    /// Without those to which another is as good: it is as cool, and it warms as slowly.
    best: HashMap<&'a str, Vec<u32>>,
}

impl<'a> Fitting<'a> {
    fn of(problem: &Problem<'a>) -> Self {
        let mut all: HashMap<&str, Vec<u32>> = HashMap::new();
        for (place, sink) in (0u32..).zip(&problem.heatsinks) {
            for &package in &sink.fits {
                let sinks = all.entry(package).or_default();
                if sinks.last() != Some(&place) {
                    sinks.push(place);
                }
            }
        }
        let figures = |place: &u32| problem.heatsinks.get(*place as usize).map(|s| s.part.figures);
        let is_as_good = |a: &Heatsink, b: &Heatsink| {
            let warms_as_slowly = match (a.cth_j_per_c, b.cth_j_per_c) {
                (Some(a), Some(b)) => a >= b,
                (a, b) => a.is_none() && b.is_none(),
            };
            a.rth_sa_c_per_w <= b.rth_sa_c_per_w && warms_as_slowly
        };
        let best_of = |sinks: &Vec<u32>| {
            let mut best: Vec<(u32, &Heatsink)> = Vec::new();
            for (place, sink) in sinks.iter().filter_map(|p| Some((*p, figures(p)?))) {
                if !best.iter().any(|(_, known)| is_as_good(known, sink)) {
                    best.retain(|(_, known)| !is_as_good(sink, known));
                    best.push((place, sink));
                }
            }
            best.into_iter().map(|(place, _)| place).collect()
        };
        let best = all.iter().map(|(package, sinks)| (*package, best_of(sinks))).collect();
        Self { all, best }
    }
}

impl<'a> Company<'a> {
    pub fn new(problem: &'a Problem<'a>) -> Self {
        let rail = problem.rail;
        let duty = Duty::new(rail);
        Self {
            problem,
            aim: Aim::of(rail),
            duty,
            zeners: OnceLock::new(),
            amplifiers: OnceLock::new(),
            passes: OnceLock::new(),
            bias_lines: problem
                .bias_lines
                .iter()
                .map(|l| LineAtRail::new(l.figures, rail))
                .collect(),
            divider_lines: problem
                .divider_lines
                .iter()
                .map(|l| LineAtRail::new(l.figures, rail))
                .collect(),
            pots: problem.pots.iter().map(|p| PotAtRail::new(p.figures, rail)).collect(),
            cases: problem
                .heatsinks
                .iter()
                .map(|s| CaseTemperatures::on_heatsink(s.part.figures, &duty, rail))
                .collect(),
            fitting: Fitting::of(problem),
        }
    }

    pub fn zeners(&self) -> &[ZenerAtRail] {
        let at_rail = |z: &Part<'_, Zener>| ZenerAtRail::new(z.figures, self.rail());
        self.zeners.get_or_init(|| self.problem.zeners.iter().map(at_rail).collect())
    }

    pub fn amplifiers(&self) -> &[AmplifierAtRail] {
        let at_rail = |a: &Part<'_, Amplifier>| AmplifierAtRail::new(a.figures, self.rail());
        self.amplifiers.get_or_init(|| self.problem.amplifiers.iter().map(at_rail).collect())
    }

    pub fn passes(&self) -> &[PassFigures] {
        let at_duty = |t: &PassPart<'_>| PassFigures::new(t.part.figures, &self.duty, self.rail());
        self.passes.get_or_init(|| self.problem.transistors.iter().map(at_duty).collect())
    }

    pub fn rail(&self) -> &'a Rail {
        self.problem.rail
    }

    /// Every zener on every bias line of which a value holds, in the order of the lists.
    pub fn biased_well(&self) -> Vec<Biased> {
        let on_line = |(zener, z): (u32, &ZenerAtRail)| -> Vec<Biased> {
            let lines = (0u32..).zip(&self.bias_lines);
            lines
                .filter_map(|(line, l)| {
                    let (bias, _) = choose_rz(z, l, self.rail())?;
                    Some(Biased { zener, line, bias, failing: Failing::default() })
                })
                .collect()
        };
        let zeners: Vec<(u32, &ZenerAtRail)> = (0u32..).zip(self.zeners()).collect();
        let by_zener: Vec<Vec<Biased>> = zeners.into_par_iter().map(on_line).collect();
        by_zener.into_iter().flatten().collect()
    }

    /// A zener on each bias line of which no value holds, with the value that fails least. These are
    /// dear to work out: every value is tried.
    pub fn biased_badly(&self, zener: u32) -> Vec<Biased> {
        let Some(z) = self.zeners().get(zener as usize) else { return Vec::new() };
        let lines = (0u32..).zip(&self.bias_lines);
        let failing = |(line, l): (u32, &LineAtRail)| match chosen_rz(z, l, self.rail())? {
            Chosen::Holds(..) => None,
            Chosen::Fails(bias, _) => {
                let failing = Failing::among(|t| z.checks(&bias, l, t));
                Some(Biased { zener, line, bias, failing })
            }
        };
        lines.filter_map(failing).collect()
    }

    /// The divider lines with the pots that may stand beside them.
    pub fn dividers(&self) -> impl Iterator<Item = (u32, Option<u32>)> {
        let pots: Vec<Option<u32>> = if self.rail().is_adjustable() {
            (0u32..).zip(&self.pots).map(|(p, _)| Some(p)).collect()
        } else {
            vec![None]
        };
        (0u32..)
            .zip(&self.divider_lines)
            .flat_map(move |(line, _)| pots.clone().into_iter().map(move |pot| (line, pot)))
    }

    pub fn reference<'c>(
        &self,
        biased: &'c Biased,
        line: u32,
        pot: Option<u32>,
    ) -> Option<Reference<'c>> {
        let at_rail = self.divider_lines.get(line as usize)?;
        let pot_at_rail = pot.and_then(|p| self.pots.get(p as usize));
        let choice = choose_divider(&self.aim, &biased.bias, at_rail, pot_at_rail, self.rail());
        Some(Reference { biased, line, pot, divider: choice.divider() })
    }

    /// The checks in which an amplifier meets a reference side.
    pub fn input_checks(
        &self,
        reference: &Reference<'_>,
        amp: &AmplifierAtRail,
        tally: &mut impl Tally,
    ) -> ControlFlow<()> {
        let bias = &reference.biased.bias;
        let line = self.divider_lines.get(reference.line as usize);
        match (reference.divider, line) {
            (Some(divider), Some(line)) => {
                let pot = reference.pot.and_then(|p| self.pots.get(p as usize));
                let network = Network { line, divider, pot };
                input_checks(amp, bias, &network, &self.aim, self.rail(), tally)
            }
            _ => {
                tally.take(amp.amp_input_low(bias.vz_lo_v))?;
                tally.take(amp.amp_input_high(bias.vz_hi_v, self.rail()))?;
                tally.take(NO_VALUE_IN_WINDOW)
            }
        }
    }

    /// What fails where an amplifier meets a reference side.
    pub fn input_failing(&self, reference: &Reference<'_>, amp: &AmplifierAtRail) -> Failing {
        Failing::among(|t| self.input_checks(reference, amp, t))
    }

    pub fn supply_failing(&self, amp: &AmplifierAtRail) -> Failing {
        Failing::among(|t| supply_checks(amp, self.rail(), t))
    }

    pub fn drive_failing(&self, amp: &AmplifierAtRail, pass: &PassFigures) -> Failing {
        Failing::among(|t| drive::checks(amp, pass, self.rail(), t))
    }

    /// Every way in which a transistor may be mounted, each with its heatsink.
    pub fn mountings(&self, transistor: usize) -> Vec<(Option<u32>, Mounted)> {
        self.mountings_among(transistor, &self.fitting.all)
    }

    /// The same without heatsinks to which another is as good: nothing fails on that one that does
    /// not fail on them.
    pub fn best_mountings(&self, transistor: usize) -> Vec<(Option<u32>, Mounted)> {
        self.mountings_among(transistor, &self.fitting.best)
    }

    fn mountings_among(
        &self,
        transistor: usize,
        fitting: &HashMap<&str, Vec<u32>>,
    ) -> Vec<(Option<u32>, Mounted)> {
        let (Some(part), Some(figures)) =
            (self.problem.transistors.get(transistor), self.passes().get(transistor))
        else {
            return Vec::new();
        };
        let (rail, duty) = (self.rail(), &self.duty);
        if let Some(case) = CaseTemperatures::on_own_sink(duty, rail) {
            return vec![(None, Mounted::on(case, figures, duty))];
        }
        let mut mountings = Vec::new();
        if self.problem.can_go_unmounted(part.part.figures) {
            let unmounted = Unmounted::new(part.part.figures, duty, rail);
            mountings.extend(unmounted.map(|u| (None, u.into())));
        }
        let sinks = part.package.and_then(|package| fitting.get(package));
        for &sink in sinks.into_iter().flatten() {
            if let Some(case) = self.cases.get(sink as usize) {
                mountings.push((Some(sink), Mounted::on(*case, figures, duty)));
            }
        }
        mountings
    }

    /// Every transistor that a heatsink takes, mounted on it.
    pub fn on_heatsink(&self, sink: u32) -> impl Iterator<Item = (&PassFigures, Mounted)> {
        let part = self.problem.heatsinks.get(sink as usize);
        let case = self.cases.get(sink as usize);
        let fits = move |t: &PassPart<'_>| {
            t.package.is_some_and(|p| part.is_some_and(|sink| sink.fits.contains(&p)))
        };
        let transistors = self.problem.transistors.iter().zip(self.passes());
        transistors
            .filter(move |(t, _)| fits(t))
            .filter_map(move |(_, pass)| Some((pass, Mounted::on(*case?, pass, &self.duty))))
    }

    pub fn mounted_failing(&self, pass: &PassFigures, mounted: &Mounted) -> Failing {
        Failing::among(|t| pass.checks(mounted, &self.duty, self.rail(), t))
    }

    /// The same parts, but each single transistor made a darlington: with a second base-emitter voltage
    /// as large as the first, and a saturation voltage that is higher by as much. Darlingtons are left
    /// without a rating.
    pub fn with_second_junction(problem: &'a Problem<'a>) -> Self {
        let this = Self::new(problem);
        let doubled = |pass: &PassFigures| match pass.junctions {
            1 => PassFigures {
                vbe_hi_v: 2.0 * pass.vbe_hi_v,
                vce_sat_v: pass.vce_sat_v + pass.vbe_hi_v,
                ..*pass
            },
            _ => PassFigures { vceo_v: 0.0, ..*pass },
        };
        let passes = OnceLock::from(this.passes().iter().map(doubled).collect::<Vec<_>>());
        Self { passes, ..this }
    }

    /// Every check of a combination, in page order. None where the places are not of this problem, or
    /// the transistor can't be mounted so.
    pub fn findings(&self, places: &Places) -> Option<Vec<Finding>> {
        let index = |slot| at(places, slot);
        let zener = self.zeners().get(index(Slot::Zener)?)?;
        let bias_line = self.bias_lines.get(index(Slot::BiasLine)?)?;
        let bias = match chosen_rz(zener, bias_line, self.rail())? {
            Chosen::Holds(bias, _) | Chosen::Fails(bias, _) => bias,
        };
        let biased = Biased { zener: 0, line: 0, bias, failing: Failing::default() };
        let line = places[Slot::DividerLine as usize]?;
        let reference = self.reference(&biased, line, places[Slot::Pot as usize])?;
        let amp = self.amplifiers().get(index(Slot::Amplifier)?)?;
        let transistor = index(Slot::Pass)?;
        let pass = self.passes().get(transistor)?;
        let sink = places[Slot::Heatsink as usize];
        let mountings = self.mountings(transistor);
        let (_, mounted) = mountings.iter().find(|(s, _)| *s == sink)?;
        let mut findings = Vec::new();
        // A list of findings never ends the asking.
        let _ = zener.checks(&bias, bias_line, &mut findings);
        let _ = supply_checks(amp, self.rail(), &mut findings);
        let _ = self.input_checks(&reference, amp, &mut findings);
        let _ = pass.checks(mounted, &self.duty, self.rail(), &mut findings);
        let _ = drive::checks(amp, pass, self.rail(), &mut findings);
        Some(findings)
    }
}

impl Company<'_> {
    /// The parts at these places with the values that are chosen for them, as far as they take part in
    /// checks: what ranks a candidate is left at 0.
    pub fn chosen(&self, places: &Places) -> Option<Candidate> {
        let zener = self.zeners().get(at(places, Slot::Zener)?)?;
        let bias_line = self.bias_lines.get(at(places, Slot::BiasLine)?)?;
        let bias = match chosen_rz(zener, bias_line, self.rail())? {
            Chosen::Holds(bias, _) | Chosen::Fails(bias, _) => bias,
        };
        let line = self.divider_lines.get(at(places, Slot::DividerLine)?)?;
        let pot = at(places, Slot::Pot).and_then(|p| self.pots.get(p));
        let divider = choose_divider(&self.aim, &bias, line, pot, self.rail()).divider()?;
        let rz = bias.rz;
        let (cost, loss, stress, score) = (0.0, 0.0, 0.0, 0.0);
        Some(Candidate { places: *places, rz, divider, cost, loss, stress, score })
    }
}

/// An amplifier that meets no reference side worse than any of these does: each figure that counts
/// there is the best of all.
pub(crate) fn best_at_input(amplifiers: &[AmplifierAtRail]) -> Option<AmplifierAtRail> {
    amplifiers.iter().copied().reduce(|mut best, amp| {
        best.part.vcm_low_v = best.part.vcm_low_v.min(amp.part.vcm_low_v);
        best.part.vcm_high_v = best.part.vcm_high_v.min(amp.part.vcm_high_v);
        best.part.ib_max_a = best.part.ib_max_a.min(amp.part.ib_max_a);
        best.fixed_error_v = best.fixed_error_v.min(amp.fixed_error_v);
        best.common_mode = best.common_mode.min(amp.common_mode);
        best
    })
}
