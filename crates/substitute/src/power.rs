//! What can stand on the power side: the transistor and its heatsink.

use crate::built::{ALL_KEPT, BuiltSink, Case, Choice, Choices, Standing};
use crate::change::Extent;
use circuit::check::WhileHolding;
use circuit::pass::{CaseTemperatures, Mounted, PassFigures, Unmounted};
use circuit::slot::Slot;
use select::problem::PassPart;

/// A transistor with its cooling with which every check of its own holds.
#[derive(Debug, Clone, Copy)]
pub struct PowerFit {
    /// What stands in the slots of this side; elsewhere all is kept.
    pub choices: Choices,
    /// How much changes.
    pub extent: Extent,
    /// The transistor at the rail.
    pub figures: PassFigures,
    /// What the two cost.
    pub cost: f64,
    /// Greatest utilisation of their damage checks.
    pub stress: f64,
}

/// The power side of a case.
pub(crate) struct Powers<'s, 'c, 'a> {
    pub case: &'s Case<'c, 'a>,
    pub standing: &'s Standing,
}

impl<'a> Powers<'_, '_, 'a> {
    /// At most how many combinations there are with so many further parts; to judge the work.
    pub fn count(&self, further: u8) -> f64 {
        let choices = |slot: Slot, more: usize| {
            let places = (self.case.places(slot).len() + more) as f64;
            if self.case.is_gone(slot) { [places, 0.0] } else { [1.0, places] }
        };
        let (pass, sink) = (choices(Slot::Pass, 0), choices(Slot::Heatsink, 1));
        match further {
            0 => pass[0] * sink[0],
            1 => pass[0] * sink[1] + pass[1] * sink[0],
            2 => pass[1] * sink[1],
            _ => 0.0,
        }
    }

    /// Every choice with so many further parts that holds.
    pub fn holding(&self, further: u8) -> Vec<PowerFit> {
        let case = self.case;
        let mut found = Vec::new();
        let gone = case.is_gone(Slot::Pass);
        if !gone && let (Some(part), Some(figures)) = (&case.built.pass, &self.standing.pass) {
            self.on_each_sink(Choice::Kept, part, figures, further, &mut found);
        }
        let left = match further.checked_sub(u8::from(!gone)) {
            Some(left) => left,
            None => return found,
        };
        for place in case.places(Slot::Pass) {
            let at = *place as usize;
            let ground = case.ground;
            let (Some(part), Some(figures)) =
                (ground.problem.transistors.get(at), ground.passes.get(at))
            else {
                continue;
            };
            self.on_each_sink(Choice::Row(*place), part, figures, left, &mut found);
        }
        found
    }

    /// A transistor on every choice for the heatsink with so many further parts there.
    fn on_each_sink(
        &self,
        pass: Choice,
        part: &PassPart<'a>,
        figures: &PassFigures,
        further: u8,
        found: &mut Vec<PowerFit>,
    ) {
        let case = self.case;
        let ground = case.ground;
        let rail = ground.rail();
        let duty = &ground.duty;
        let gone = case.is_gone(Slot::Heatsink);
        let mut take = |sink: Choice, mounted: Mounted, sink_cost: f64| {
            let checked = WhileHolding::over(|t| figures.checks(&mounted, duty, rail, t));
            let Ok(stress) = checked else { return };
            let mut choices = ALL_KEPT;
            choices[Slot::Pass as usize] = pass;
            choices[Slot::Heatsink as usize] = sink;
            found.push(PowerFit {
                choices,
                extent: case.extent(Slot::Pass, pass) + case.extent(Slot::Heatsink, sink),
                figures: *figures,
                cost: part.part.price + sink_cost,
                stress,
            });
        };
        if further == 0 && !gone {
            match (&case.built.heatsink, self.standing.sink) {
                (BuiltSink::On(sink), Some(on_it)) if fits(part, &sink.fits) => {
                    take(Choice::Kept, Mounted::on(on_it, figures, duty), sink.part.price);
                }
                (BuiltSink::None, _) => {
                    let own = CaseTemperatures::on_own_sink(duty, rail)
                        .map(|on_it| Mounted::on(on_it, figures, duty));
                    let in_air =
                        || Unmounted::new(part.part.figures, duty, rail).map(Mounted::from);
                    if let Some(mounted) = own.or_else(in_air) {
                        take(Choice::Kept, mounted, 0.0);
                    }
                }
                _ => {}
            }
            return;
        }
        if further != u8::from(!gone) || !rail.chooses_heatsink() {
            return;
        }
        for place in case.places(Slot::Heatsink) {
            let at = *place as usize;
            if let (Some(sink), Some(on_it)) =
                (ground.problem.heatsinks.get(at), ground.sinks.get(at))
                && fits(part, &sink.fits)
            {
                take(Choice::Row(*place), Mounted::on(*on_it, figures, duty), sink.part.price);
            }
        }
        let had_one = !matches!(case.built.heatsink, BuiltSink::None);
        if had_one
            && ground.problem.can_go_unmounted(part.part.figures)
            && let Some(unmounted) = Unmounted::new(part.part.figures, duty, rail)
        {
            take(Choice::Without, unmounted.into(), 0.0);
        }
    }
}

fn fits(part: &PassPart<'_>, packages: &[&str]) -> bool {
    part.package.is_some_and(|package| packages.contains(&package))
}
