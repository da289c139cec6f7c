//! What can stand on the reference side: zener, lines of resistors, pot, and the values from the lines.

use crate::built::{Case, Choice, Choices, Standing};
use crate::change::Extent;
use crate::ground::Line;
use crate::values::{Beside, HeldRz, ValueFit, held_rz, may_serve};
use circuit::amplifier::AmplifierAtRail;
use circuit::reference::ZenerAtRail;
use circuit::resistor::{PotAtRail, Resistance};
use circuit::slot::Slot;
use rayon::prelude::*;
use std::sync::OnceLock;

/// The slots of this side.
const SLOTS: [Slot; 4] = [Slot::Zener, Slot::BiasLine, Slot::DividerLine, Slot::Pot];

/// More combinations than this are looked through side by side.
const MANY: usize = 64;

/// A reference side with which every check holds that it has a part in.
#[derive(Debug, Clone)]
pub struct ReferenceFit {
    /// What stands in the slots of this side; elsewhere all is kept.
    pub choices: Choices,
    /// How much changes.
    pub extent: Extent,
    /// What its parts cost, resistors by the piece.
    pub cost: f64,
    /// The values with fewest changes that nothing beats.
    pub values: Vec<ValueFit>,
}

/// A choice of parts for this side.
pub(crate) struct Combination {
    /// What stands in the slots of this side; elsewhere all is kept.
    pub choices: Choices,
    /// Every RZ that holds. It depends on no amplifier, so it is found once, and only when some
    /// amplifier asks for it.
    held: OnceLock<Box<[HeldRz]>>,
}

/// The parts of one combination.
struct Parts<'s> {
    zener: &'s ZenerAtRail,
    bias_line: &'s Line,
    divider_line: &'s Line,
    pot: Option<&'s PotAtRail>,
}

/// The reference side of a case.
pub(crate) struct References<'s, 'c, 'a> {
    pub case: &'s Case<'c, 'a>,
    pub standing: &'s Standing,
}

impl<'s> References<'s, '_, '_> {
    /// Every choice of parts with so many further ones, whether it holds or not.
    pub fn combinations(&self, further: u8) -> Vec<Combination> {
        let mut found = vec![(crate::built::ALL_KEPT, 0u8)];
        for slot in SLOTS {
            let case = self.case;
            let gone = case.is_gone(slot);
            let may_stay = !gone && self.stands(slot);
            let mut next = Vec::new();
            for (choices, so_far) in found {
                if may_stay {
                    next.push((choices, so_far));
                }
                if !gone && so_far == further {
                    continue;
                }
                for place in case.places(slot) {
                    let mut choices = choices;
                    choices[slot as usize] = Choice::Row(*place);
                    // One part goes in wherever the one that is gone was; another beside it is a
                    // further part.
                    let second = case.line_gone_twice
                        && slot == Slot::DividerLine
                        && self.line_name(Slot::BiasLine, choices[Slot::BiasLine as usize])
                            != self.line_name(slot, Choice::Row(*place));
                    let so_far = so_far + u8::from(!gone || second);
                    if so_far <= further {
                        next.push((choices, so_far));
                    }
                }
            }
            found = next;
        }
        found.retain(|(_, so_far)| *so_far == further);
        let found = found.into_iter();
        found.map(|(choices, _)| Combination { choices, held: OnceLock::new() }).collect()
    }

    /// At least how many combinations there are with so many further parts; to judge the work.
    pub fn count(&self, further: u8) -> f64 {
        // The coefficients of the product over the slots of (may stay + places·x).
        let mut counts = vec![1.0];
        for slot in SLOTS {
            let gone = self.case.is_gone(slot);
            let stays = if !gone && self.stands(slot) { 1.0 } else { 0.0 };
            let places = self.case.places(slot).len() as f64;
            let mut next = vec![0.0; counts.len() + 1];
            for (power, count) in counts.iter().enumerate() {
                if let Some(same) = next.get_mut(power) {
                    *same += count * if gone { places } else { stays };
                }
                if let Some(one_more) = next.get_mut(power + 1)
                    && !gone
                {
                    *one_more += count * places;
                }
            }
            counts = next;
        }
        counts.get(usize::from(further)).copied().unwrap_or(0.0)
    }

    /// Every reference side with so many further parts that holds beside an amplifier.
    pub fn holding(
        &self,
        combinations: &[Combination],
        amplifier: &AmplifierAtRail,
    ) -> Vec<ReferenceFit> {
        let fit = |combination: &Combination| self.fit(combination, amplifier);
        if combinations.len() > MANY {
            combinations.par_iter().filter_map(fit).collect()
        } else {
            combinations.iter().filter_map(fit).collect()
        }
    }

    /// Some values hold with these parts.
    pub fn some_values_hold(&self, of: &Combination, amplifier: &AmplifierAtRail) -> bool {
        let parts = self.parts(&of.choices);
        let beside = parts.and_then(|parts| self.beside(of, &parts, amplifier));
        beside.is_some_and(|beside| beside.some_hold())
    }

    fn fit(&self, of: &Combination, amplifier: &AmplifierAtRail) -> Option<ReferenceFit> {
        let choices = of.choices;
        let parts = self.parts(&choices)?;
        let values = self.beside(of, &parts, amplifier)?.fewest_changes();
        let changed = values.first()?.changed;
        let extent = SLOTS
            .into_iter()
            .map(|slot| self.case.extent(slot, choices[slot as usize]))
            .fold(Extent::of_values(changed), |sum, extent| sum + extent);
        let second = self.case.line_gone_twice
            && self.line_name(Slot::BiasLine, choices[Slot::BiasLine as usize])
                != self.line_name(Slot::DividerLine, choices[Slot::DividerLine as usize]);
        let further_parts = extent.further_parts + u8::from(second);
        let cost = self.cost(&choices)?;
        Some(ReferenceFit { choices, extent: Extent { further_parts, ..extent }, cost, values })
    }

    /// What zener, RZ, RI and pot cost.
    fn cost(&self, choices: &Choices) -> Option<f64> {
        let problem = &self.case.ground.problem;
        let built = &self.case.built;
        let zener = match choices[Slot::Zener as usize] {
            Choice::Row(z) => problem.zeners.get(z as usize)?.price,
            _ => built.zener.as_ref()?.price,
        };
        let rz = match choices[Slot::BiasLine as usize] {
            Choice::Row(b) => problem.bias_lines.get(b as usize)?.price,
            _ => built.bias_line.as_ref()?.price,
        };
        let pot = match choices[Slot::Pot as usize] {
            Choice::Row(p) => problem.pots.get(p as usize)?.price,
            _ => built.pot.as_ref().map_or(0.0, |p| p.price),
        };
        Some(zener + rz + pot + self.divider_price(choices)?)
    }

    /// What one piece of the divider's line costs.
    pub fn divider_price(&self, choices: &Choices) -> Option<f64> {
        match choices[Slot::DividerLine as usize] {
            Choice::Row(l) => Some(self.case.ground.problem.divider_lines.get(l as usize)?.price),
            _ => Some(self.case.built.divider_line.as_ref()?.price),
        }
    }

    /// The part of a slot may stay.
    fn stands(&self, slot: Slot) -> bool {
        match slot {
            Slot::Zener => self.standing.zener.is_some(),
            Slot::BiasLine => self.standing.bias_line.is_some(),
            Slot::DividerLine => self.standing.divider_line.is_some(),
            Slot::Pot => self.standing.pot.is_some() || !self.case.ground.rail().is_adjustable(),
            _ => false,
        }
    }

    fn line_name(&self, slot: Slot, choice: Choice) -> Option<(&str, &str)> {
        match choice {
            Choice::Row(place) => self.case.ground.name(slot, place),
            Choice::Kept | Choice::Without => None,
        }
    }

    fn parts(&self, choices: &Choices) -> Option<Parts<'s>> {
        let (ground, standing) = (self.case.ground, self.standing);
        fn at<'s, T>(choice: Choice, rows: &'s [T], kept: &'s Option<T>) -> Option<&'s T> {
            match choice {
                Choice::Row(place) => rows.get(place as usize),
                Choice::Kept => kept.as_ref(),
                Choice::Without => None,
            }
        }
        Some(Parts {
            zener: at(choices[Slot::Zener as usize], &ground.zeners, &standing.zener)?,
            bias_line: at(
                choices[Slot::BiasLine as usize],
                &ground.bias_lines,
                &standing.bias_line,
            )?,
            divider_line: at(
                choices[Slot::DividerLine as usize],
                &ground.divider_lines,
                &standing.divider_line,
            )?,
            pot: at(choices[Slot::Pot as usize], &ground.pots, &standing.pot),
        })
    }

    /// None where a necessary condition tells that no values do.
    fn beside<'r>(
        &'r self,
        of: &'r Combination,
        parts: &Parts<'r>,
        amplifier: &'r AmplifierAtRail,
    ) -> Option<Beside<'r>> {
        let (built, choices) = (&self.case.built, &of.choices);
        let (rail, aim) = (self.case.ground.rail(), &self.case.ground.aim);
        if !may_serve(parts.zener, amplifier, (aim, parts.divider_line.spread), rail) {
            return None;
        }
        let stocked = |line: &Line, ohm: f64| {
            line.at_rail.values.iter().find(|v| crate::built::same_ohm(v.ohm, ohm)).copied()
        };
        let as_built = |slot: Slot, line: &Line, ohm: f64, kept: Option<Resistance>| match choices
            [slot as usize]
        {
            Choice::Kept => kept,
            _ if ohm == 0.0 => Some(Resistance::LINK),
            _ => stocked(line, ohm),
        };
        let Standing { rz, upper, ri, .. } = *self.standing;
        let held = of.held.get_or_init(|| {
            let rz = as_built(Slot::BiasLine, parts.bias_line, built.rz_ohm, rz);
            held_rz(parts.zener, parts.bias_line, rz, built.rz_ohm, rail)
        });
        (!held.is_empty()).then_some(Beside {
            rail,
            aim,
            zener: parts.zener,
            bias_line: parts.bias_line,
            divider_line: parts.divider_line,
            pot: parts.pot,
            amplifier,
            held,
            upper: as_built(Slot::DividerLine, parts.divider_line, built.upper_ohm, upper),
            ri: as_built(Slot::DividerLine, parts.divider_line, built.ri_ohm, ri),
            built_ohm: [built.upper_ohm, built.ri_ohm],
        })
    }
}
