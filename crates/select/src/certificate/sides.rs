//! The choices of each side that hold by themselves, and what they add.

use super::mark::{Mark, Names, together};
use crate::grove::Share;
use crate::problem::Ground;
use crate::sides::input_stress;
use crate::sides::reference::CompleteReference;
use circuit::amplifier::AmplifierAtRail;
use circuit::assembly::{amplifier_checks, choose_divider};
use circuit::check::{Check, WhileHolding};
use circuit::divider::nominal_current_a;
use circuit::pass::{CaseTemperatures, Mounted, PassFigures, Unmounted};
use circuit::reference::{ZenerAtRail, choose_rz};
use circuit::slot::Slot;
use rayon::prelude::*;

/// Names of some slots, by slot and place.
fn names(ground: &Ground<'_>, places: &[(Slot, Option<u32>)]) -> Names {
    Slot::BY_NAME.map(|slot| {
        let place = places.iter().find(|(s, _)| *s == slot).and_then(|(_, place)| *place);
        place.map_or(0, |place| ground.ranks.of(slot, place as usize))
    })
}

/// An amplifier that holds wherever no other part takes part.
pub(super) struct Amplifier {
    pub at_rail: AmplifierAtRail,
    pub share: Share,
    pub names: Names,
}

/// All amplifiers.
pub(super) struct Amplifiers {
    /// By place; None for one that is out.
    pub by_place: Vec<Option<Amplifier>>,
    /// All places, the smallest error first: what fails for an error fails for all behind it.
    pub order: Vec<u32>,
}

impl Amplifiers {
    pub fn new(ground: &Ground<'_>) -> Self {
        let rail = ground.rail();
        let parts = &ground.problem.amplifiers;
        let at_rail: Vec<_> = parts.iter().map(|p| AmplifierAtRail::new(p.figures, rail)).collect();
        let mut order: Vec<u32> = (0..parts.len() as u32).collect();
        let error = |place: &u32| at_rail[*place as usize].fixed_error_v;
        order.sort_by(|a, b| error(a).total_cmp(&error(b)).then(a.cmp(b)));
        let by_place = (0u32..)
            .zip(parts)
            .zip(&at_rail)
            .map(|((place, part), at_rail)| {
                let stress = WhileHolding::over(|t| amplifier_checks(at_rail, rail, t)).ok()?;
                Some(Amplifier {
                    at_rail: *at_rail,
                    share: Share { cost: part.price, current_a: part.figures.iq_max_a, stress },
                    names: names(ground, &[(Slot::Amplifier, Some(place))]),
                })
            })
            .collect();
        Self { by_place, order }
    }

    /// Those that are left.
    pub fn alive(&self) -> impl Iterator<Item = &Amplifier> {
        self.by_place.iter().flatten()
    }
}

/// A mounting on which a transistor holds.
pub(super) struct Mount {
    /// The heatsink's place; None: unmounted, or on the sheet's own sink.
    pub sink: Option<u32>,
    pub share: Share,
    pub names: Names,
}

/// A transistor with the mountings on which it holds.
pub(super) struct Pass {
    pub place: u32,
    pub figures: PassFigures,
    pub mounts: Vec<Mount>,
}

/// All power sides that hold.
pub(super) struct Powers {
    pub passes: Vec<Pass>,
}

impl Powers {
    pub fn new(ground: &Ground<'_>) -> Self {
        let (problem, rail, duty) = (ground.problem, ground.rail(), &ground.duty);
        let cases: Vec<CaseTemperatures> = problem
            .heatsinks
            .iter()
            .map(|sink| CaseTemperatures::on_heatsink(sink.part.figures, duty, rail))
            .collect();
        let passes = problem
            .transistors
            .par_iter()
            .enumerate()
            .map(|(place, transistor)| {
                let part = &transistor.part;
                let figures = PassFigures::new(part.figures, duty, rail);
                let mount = |mounted: Mounted, sink: Option<u32>| {
                    let stress =
                        WhileHolding::over(|t| figures.checks(&mounted, duty, rail, t)).ok()?;
                    let price = sink.map_or(0.0, |s| problem.heatsinks[s as usize].part.price);
                    let slots = [(Slot::Pass, Some(place as u32)), (Slot::Heatsink, sink)];
                    Some(Mount {
                        sink,
                        share: Share { cost: part.price + price, current_a: 0.0, stress },
                        names: names(ground, &slots),
                    })
                };
                let bare = match CaseTemperatures::on_own_sink(duty, rail) {
                    Some(case) => Some(Mounted::on(case, &figures, duty)),
                    None => problem
                        .can_go_unmounted(part.figures)
                        .then(|| Unmounted::new(part.figures, duty, rail))
                        .flatten()
                        .map(Mounted::from),
                };
                let mut mounts: Vec<Mount> =
                    bare.and_then(|mounted| mount(mounted, None)).into_iter().collect();
                if let Some(class) = ground.classes.of(place) {
                    mounts.extend(ground.classes.sinks[class as usize].iter().filter_map(
                        |&sink| {
                            mount(Mounted::on(cases[sink as usize], &figures, duty), Some(sink))
                        },
                    ));
                }
                Pass { place: place as u32, figures, mounts }
            })
            .filter(|pass| !pass.mounts.is_empty())
            .collect();
        Self { passes }
    }

    pub fn shares(&self) -> impl Iterator<Item = Share> {
        self.passes.iter().flat_map(|pass| pass.mounts.iter().map(|mount| mount.share))
    }

    /// Keeps the power sides that `stays` lets stay.
    pub fn retain(&mut self, stays: impl Fn(&Mount) -> bool) {
        for pass in &mut self.passes {
            pass.mounts.retain(&stays);
        }
        self.passes.retain(|pass| !pass.mounts.is_empty());
    }
}

/// A reference side with its values.
pub(super) struct Reference {
    pub complete: CompleteReference,
    pub share: Share,
    pub names: Names,
}

impl Reference {
    /// The places of the whole combination.
    pub fn places(
        &self,
        amplifier: u32,
        pass: u32,
        sink: Option<u32>,
    ) -> [Option<u32>; Slot::COUNT] {
        let mut places = [None; Slot::COUNT];
        places[Slot::Zener as usize] = Some(self.complete.zener);
        places[Slot::BiasLine as usize] = Some(self.complete.bias_line);
        places[Slot::Amplifier as usize] = Some(amplifier);
        places[Slot::DividerLine as usize] = Some(self.complete.divider_line);
        places[Slot::Pot as usize] = self.complete.pot;
        places[Slot::Pass as usize] = Some(pass);
        places[Slot::Heatsink as usize] = sink;
        places
    }
}

/// The check that fails between a reference side and an amplifier.
pub(super) fn failing_input(
    ground: &Ground<'_>,
    reference: &Reference,
    amp: &AmplifierAtRail,
) -> Option<Check> {
    input_stress(ground, &reference.complete, amp).err()
}

/// The reference sides that hold by themselves, that the best figures of all amplifiers suit, and
/// that do not surely rank after the last row.
///
/// They come zener by zener, for each zener by bias line, then by divider line, then by pot.
pub(super) fn references(
    ground: &Ground<'_>,
    mark: &Mark,
    (amplifiers, powers): (&[Share], &[Share]),
    best: Option<&AmplifierAtRail>,
) -> Vec<Reference> {
    let Some(best) = best else { return Vec::new() };
    let is_late = |share: Share, names| mark.is_after(&[share], amplifiers, powers, names);
    let problem = ground.problem;
    let lines = problem.divider_lines.len() as u32;
    let pots: Vec<Option<u32>> = if ground.rail().is_adjustable() {
        (0..problem.pots.len() as u32).map(Some).collect()
    } else {
        vec![None]
    };
    let price = |pot: Option<u32>| pot.map_or(0.0, |p| problem.pots[p as usize].price);
    let least_price = |prices: &mut dyn Iterator<Item = f64>| prices.fold(f64::INFINITY, f64::min);
    let cheapest_line = least_price(&mut problem.divider_lines.iter().map(|p| p.price));
    let cheapest_pot = least_price(&mut pots.iter().map(|pot| price(*pot)));

    let of_zener = |zener: u32| {
        let mut found = Vec::new();
        let part = &problem.zeners[zener as usize];
        let at_rail = ZenerAtRail::new(part.figures, ground.rail());
        for bias_line in 0..problem.bias_lines.len() as u32 {
            let line = &ground.bias_lines[bias_line as usize];
            let Some((bias, stress)) = choose_rz(&at_rail, line, ground.rail()) else { continue };
            let without = part.price + problem.bias_lines[bias_line as usize].price;
            let slots = [(Slot::Zener, Some(zener)), (Slot::BiasLine, Some(bias_line))];
            let biased_names = names(ground, &slots);
            // Before the divider is chosen: one piece of its line, and no current through it.
            let before = |line_price: f64, pot_price: f64, names| {
                let cost = without + line_price + pot_price;
                let share = Share { cost, current_a: bias.iz_nominal_a, stress };
                bias.vz_nominal_v >= 0.0 && is_late(share, names)
            };
            if before(cheapest_line, cheapest_pot, biased_names) {
                continue;
            }
            for divider_line in 0..lines {
                let line_price = problem.divider_lines[divider_line as usize].price;
                for &pot in &pots {
                    let slots = [(Slot::DividerLine, Some(divider_line)), (Slot::Pot, pot)];
                    let names = together(biased_names, names(ground, &slots));
                    if before(line_price, price(pot), names) {
                        continue;
                    }
                    let choice = choose_divider(
                        &ground.aim,
                        &bias,
                        &ground.divider_lines[divider_line as usize],
                        pot.map(|p| &ground.pots[p as usize]),
                        ground.rail(),
                    );
                    let Some(divider) = choice.divider() else { continue };
                    let pieces = if divider.upper.is_link() { 1.0 } else { 2.0 };
                    let complete =
                        CompleteReference { zener, bias_line, bias, divider_line, divider, pot };
                    let reference = Reference {
                        complete,
                        share: Share {
                            cost: without + pieces * line_price + price(pot),
                            current_a: bias.iz_nominal_a + nominal_current_a(&bias, &divider),
                            stress,
                        },
                        names,
                    };
                    if failing_input(ground, &reference, best).is_none()
                        && !is_late(reference.share, names)
                    {
                        found.push(reference);
                    }
                }
            }
        }
        found
    };
    (0..problem.zeners.len() as u32).into_par_iter().flat_map_iter(of_zener).collect()
}
