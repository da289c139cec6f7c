//! Every replacement of what is gone, each with the least that changes with it.
//!
//! # Why nothing smaller is overlooked
//!
//! The amplifier is all that the reference side and the power side see of each other, so beside a
//! given amplifier the two are chosen apart, and what changes on both adds up. Extents are compared
//! item by item, and such an order is kept by adding: the least of the whole is the sum of the least
//! of each side. Further parts are allowed one after another: all changes with none, then all with
//! one, and so on; within a number every combination is looked at, and every set of values of the
//! lines that necessary conditions leave. Of choices with the least extent only those are kept that
//! no other equals or beats in cost, current and stress, from which score, cost, stress and loss never
//! fall as one of them rises.

use crate::built::{ALL_KEPT, Case, Choice, Choices, Standing};
use crate::change::Extent;
use crate::power::{PowerFit, Powers};
use crate::reference::{Combination, ReferenceFit, References};
use crate::values::ValueFit;
use circuit::amplifier::AmplifierAtRail;
use circuit::assembly::supply_checks;
use circuit::check::WhileHolding;
use circuit::drive;
use circuit::merit;
use circuit::slot::Slot;
use quantity::digits::compare;
use rayon::prelude::*;
use select::score::score;
use std::cmp::Ordering;
use std::collections::HashMap;

/// A way to mend a design.
#[derive(Debug, Clone, PartialEq)]
pub struct Replacement {
    /// What stands in each slot, by `Slot as usize`.
    pub choices: Choices,
    /// RZ, Ω.
    pub rz_ohm: f64,
    /// RF or RX, Ω; 0 for a link.
    pub upper_ohm: f64,
    /// RI, Ω.
    pub ri_ohm: f64,
    /// How much changes.
    pub extent: Extent,
    /// Cost of one board.
    pub cost: f64,
    /// 1/η − 1.
    pub loss: f64,
    /// Greatest utilisation of the damage checks.
    pub stress: f64,
    /// cost^wc · loss^wl · stress^ws.
    pub score: f64,
}

/// What was found for a case.
#[derive(Debug, Clone, Default)]
pub struct Replacements {
    /// The replacements in order: by extent, score, cost, stress, loss, then names. Each part that can
    /// replace what is gone stands once, with the least that changes with it.
    pub list: Vec<Replacement>,
    /// All changes with at most so many further parts were looked at. None: not even those with none, for
    /// the parts that are gone make too many combinations.
    pub looked_further: Option<u8>,
    /// More further parts were left out because they make too many combinations.
    pub too_many: bool,
    /// Several parts are gone, and their replacements make so many pairs that only some were looked at:
    /// the best of each side, and the best amplifiers. Then a better pair may be missing.
    pub paired_in_part: bool,
}

impl Replacements {
    /// The list holds every replacement there is.
    pub fn nothing_else_helps(&self) -> bool {
        !self.too_many && !self.paired_in_part && self.looked_further == Some(MOST_FURTHER)
    }
}

/// All slots but one may change beside the one that is gone.
pub const MOST_FURTHER: u8 = 6;

/// Combinations that are looked through for one number of further parts while nothing is found.
const MOST_COMBINATIONS: f64 = 2e8;

/// The same once something is found, and more only lengthens the list.
const MOST_FOR_MORE: f64 = 2e6;

/// A combination on the reference side takes as long as so many elsewhere: values are tried there.
const WEIGHT_OF_VALUES: f64 = 300.0;

/// Where several parts are gone, so many pairs of replacements are looked at.
const MOST_PAIRS: usize = 200_000;

/// Where the amplifier and other parts are gone, work for so many amplifiers is done, by the measure of
/// [`Finder::combinations`].
const MOST_BESIDE_AMPLIFIERS: f64 = 3e7;

/// How far to look.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Until {
    /// Until there are so many replacements.
    Found(usize),
    /// This number of further parts, whatever is found.
    Further(u8),
}

/// Finds replacements with ever more further parts until there are enough.
pub fn replacements(case: &Case<'_, '_>, until: Until) -> Replacements {
    let standing = Standing::new(case);
    let mut finder = Finder::new(case, &standing);
    let mut found = Replacements::default();
    let mut best: HashMap<Choices, Replacement> = HashMap::new();
    for further in 0..=MOST_FURTHER {
        let most = if best.is_empty() { MOST_COMBINATIONS } else { MOST_FOR_MORE };
        if finder.combinations(further) > most && !(further == 0 && finder.can_thin()) {
            found.too_many = true;
            break;
        }
        finder.level(further, &mut best, &mut found.paired_in_part);
        found.looked_further = Some(further);
        let enough = match until {
            Until::Found(many) => best.len() >= many,
            Until::Further(most) => further >= most,
        };
        if enough {
            break;
        }
    }
    found.list = best.into_values().collect();
    found.list.sort_by(|a, b| order(case, a, b));
    found
}

/// The order of replacements.
pub fn order(case: &Case<'_, '_>, a: &Replacement, b: &Replacement) -> Ordering {
    let names = |r: &Replacement| {
        Slot::BY_NAME.map(|slot| match r.choices[slot as usize] {
            Choice::Row(place) => case.ground.name(slot, place),
            Choice::Kept | Choice::Without => None,
        })
    };
    by_figures(a, b)
        .then_with(|| names(a).cmp(&names(b)))
        .then_with(|| a.choices.cmp(&b.choices))
        // Of equals the one with larger resistors, which waste less.
        .then_with(|| b.rz_ohm.total_cmp(&a.rz_ohm))
        .then_with(|| b.ri_ohm.total_cmp(&a.ri_ohm))
        .then_with(|| b.upper_ohm.total_cmp(&a.upper_ohm))
}

fn by_figures(a: &Replacement, b: &Replacement) -> Ordering {
    a.extent
        .cmp(&b.extent)
        .then_with(|| compare(a.score, b.score))
        .then_with(|| compare(a.cost, b.cost))
        .then_with(|| compare(a.stress, b.stress))
        .then_with(|| compare(a.loss, b.loss))
}

/// One reference side with one set of values.
#[derive(Clone, Copy)]
struct ReferencePoint {
    choices: Choices,
    values: ValueFit,
    cost: f64,
}

/// What the sides offer under one label: the least extent, and all that nothing beats there.
struct Offers<T> {
    extent: Extent,
    points: Vec<T>,
}

struct Finder<'s, 'c, 'a> {
    case: &'s Case<'c, 'a>,
    standing: &'s Standing,
    references: References<'s, 'c, 'a>,
    powers: Powers<'s, 'c, 'a>,
    /// By number of further parts: looked up once.
    power_fits: Vec<Vec<PowerFit>>,
    reference_combinations: Vec<Vec<Combination>>,
}

impl<'s, 'c, 'a> Finder<'s, 'c, 'a> {
    fn new(case: &'s Case<'c, 'a>, standing: &'s Standing) -> Self {
        Self {
            case,
            standing,
            references: References { case, standing },
            powers: Powers { case, standing },
            power_fits: Vec::new(),
            reference_combinations: Vec::new(),
        }
    }

    /// How many combinations a number of further parts makes, weighed by the work.
    fn combinations(&self, further: u8) -> f64 {
        let amplifiers = self.case.places(Slot::Amplifier).len() as f64;
        if self.case.is_gone(Slot::Amplifier) {
            return amplifiers * self.of_sides(further);
        }
        let changed = further.checked_sub(1).map_or(0.0, |rest| amplifiers * self.of_sides(rest));
        changed + if self.standing.amplifier.is_some() { self.of_sides(further) } else { 0.0 }
    }

    /// The work beside one amplifier with so many further parts.
    fn of_sides(&self, further: u8) -> f64 {
        let pairs = (0..=further).map(|r| {
            let (r, p) = (self.references.count(r), self.powers.count(further - r));
            // The sides are looked through one after the other.
            if r == 0.0 || p == 0.0 { 0.0 } else { r * WEIGHT_OF_VALUES + p }
        });
        pairs.sum()
    }

    /// How many replacements the other parts that are gone have at most beside one amplifier.
    fn others(&self) -> f64 {
        let gone = Slot::ALL.into_iter().filter(|slot| self.case.is_gone(*slot));
        let rest = gone.filter(|slot| *slot != Slot::Amplifier);
        rest.map(|slot| self.case.places(slot).len().max(1) as f64).product()
    }

    /// The amplifier is gone and others as well, so that the work can be kept to some amplifiers.
    fn can_thin(&self) -> bool {
        let sides_alone = self.of_sides(0) <= MOST_BESIDE_AMPLIFIERS;
        self.case.is_gone(Slot::Amplifier) && self.others() > 1.0 && sides_alone
    }

    /// The amplifiers that are tried: where it is gone with other parts and all pairs would be too many,
    /// those that change least, of equals the cheapest.
    fn amplifiers(&self, further: u8) -> Vec<u32> {
        let (case, rail) = (self.case, self.case.ground.rail());
        let places = case.places(Slot::Amplifier);
        if !self.can_thin() {
            return places.to_vec();
        }
        let by_work = MOST_BESIDE_AMPLIFIERS / self.of_sides(further).max(1.0);
        let most = by_work.min(MOST_PAIRS as f64 / self.others()).max(1.0);
        if places.len() as f64 <= most {
            return places.to_vec();
        }
        let of = |place: &u32| {
            let amplifier = case.ground.amplifiers.get(*place as usize)?;
            WhileHolding::over(|t| supply_checks(amplifier, rail, t)).ok()?;
            let powers = self.power_fits.first()?;
            let drives = |fit: &PowerFit| {
                WhileHolding::over(|t| drive::checks(amplifier, &fit.figures, rail, t)).is_ok()
            };
            let price = case.ground.problem.amplifiers.get(*place as usize)?.price;
            let extent = case.extent(Slot::Amplifier, Choice::Row(*place));
            powers.iter().any(drives).then_some((extent, price, *place))
        };
        let mut able: Vec<(Extent, f64, u32)> = places.par_iter().filter_map(of).collect();
        able.sort_by(|a, b| a.0.cmp(&b.0).then(compare(a.1, b.1)).then(a.2.cmp(&b.2)));
        able.truncate(most as usize);
        able.into_iter().map(|(_, _, place)| place).collect()
    }

    /// Adds the replacements that take exactly so many further parts.
    fn level(
        &mut self,
        further: u8,
        best: &mut HashMap<Choices, Replacement>,
        paired_in_part: &mut bool,
    ) {
        for more in self.power_fits.len()..=usize::from(further) {
            let more = u8::try_from(more).unwrap_or(MOST_FURTHER);
            self.power_fits.push(self.powers.holding(more));
            self.reference_combinations.push(self.references.combinations(more));
        }
        let gone = self.case.is_gone(Slot::Amplifier);
        let mut level: Vec<Replacement> = Vec::new();
        let solved: &HashMap<Choices, Replacement> = best;
        if !gone && let Some(amplifier) = &self.standing.amplifier {
            let price = self.case.built.amplifier.as_ref().map_or(0.0, |a| a.price);
            let beside = Amplified { choice: Choice::Kept, amplifier, price };
            let (found, cut) = self.beside(&beside, further, solved);
            level.extend(found);
            *paired_in_part |= cut;
        }
        if let Some(rest) = further.checked_sub(u8::from(!gone)) {
            let beside = |place: &u32| {
                let at = *place as usize;
                let amplifier = self.case.ground.amplifiers.get(at)?;
                let price = self.case.ground.problem.amplifiers.get(at)?.price;
                let beside = Amplified { choice: Choice::Row(*place), amplifier, price };
                Some(self.beside(&beside, rest, solved))
            };
            let places = self.amplifiers(rest);
            *paired_in_part |= places.len() < self.case.places(Slot::Amplifier).len() && gone;
            let found: Vec<_> = places.par_iter().filter_map(beside).collect();
            for (found, cut) in found {
                level.extend(found);
                *paired_in_part |= cut;
            }
        }
        for replacement in level {
            let label = self.case.label(&replacement.choices);
            match best.entry(label) {
                std::collections::hash_map::Entry::Vacant(entry) => {
                    entry.insert(replacement);
                }
                std::collections::hash_map::Entry::Occupied(mut entry) => {
                    if order(self.case, &replacement, entry.get()) == Ordering::Less {
                        entry.insert(replacement);
                    }
                }
            }
        }
    }

    /// The best of each replacement beside one amplifier, with so many further parts on both sides;
    /// and whether pairs were left out.
    fn beside(
        &self,
        beside: &Amplified<'_>,
        further: u8,
        solved: &HashMap<Choices, Replacement>,
    ) -> (Vec<Replacement>, bool) {
        let (case, rail) = (self.case, self.case.ground.rail());
        let Ok(supply_stress) = WhileHolding::over(|t| supply_checks(beside.amplifier, rail, t))
        else {
            return (Vec::new(), false);
        };
        let mut found: HashMap<Choices, Replacement> = HashMap::new();
        let mut cut = false;
        for on_reference in 0..=further {
            let on_power = further - on_reference;
            let none = Vec::new();
            let powers = self.power_fits.get(usize::from(on_power)).unwrap_or(&none);
            let powers = self.driven(powers, beside.amplifier);
            if powers.is_empty() {
                continue;
            }
            let none = Vec::new();
            let combinations =
                self.reference_combinations.get(usize::from(on_reference)).unwrap_or(&none);
            let references = self.references.holding(combinations, beside.amplifier);
            let mut references = self.best_references(references);
            let mut powers = best_powers(case, powers);
            if references.len().saturating_mul(powers.len()) > MOST_PAIRS {
                cut = true;
                let keep = (MOST_PAIRS as f64).sqrt() as usize;
                let least =
                    |costs: &mut dyn Iterator<Item = f64>| costs.fold(f64::INFINITY, f64::min);
                keep_best(&mut references, keep, |r| least(&mut r.iter().map(|p| p.cost)));
                keep_best(&mut powers, keep, |p| least(&mut p.iter().map(|(fit, _)| fit.cost)));
            }
            let of_amplifier = case.extent(Slot::Amplifier, beside.choice);
            for (reference_label, reference) in &references {
                for (power_label, power) in &powers {
                    let mut label = joined(reference_label, power_label);
                    if case.is_gone(Slot::Amplifier) {
                        label[Slot::Amplifier as usize] = beside.choice;
                    }
                    if solved.contains_key(&label) {
                        continue;
                    }
                    let extent = of_amplifier + reference.extent + power.extent;
                    for r in &reference.points {
                        for (p, drive_stress) in &power.points {
                            let stress =
                                supply_stress.max(r.values.stress).max(p.stress).max(*drive_stress);
                            let with = self.replacement(beside, r, p, stress, extent);
                            match found.get_mut(&label) {
                                Some(held) if order(case, &with, held) != Ordering::Less => {}
                                Some(held) => *held = with,
                                None => {
                                    found.insert(label, with);
                                }
                            }
                        }
                    }
                }
            }
        }
        (found.into_values().collect(), cut)
    }

    /// The power sides that an amplifier drives, each with the stress of that.
    fn driven(&self, powers: &[PowerFit], amplifier: &AmplifierAtRail) -> Vec<(PowerFit, f64)> {
        let rail = self.case.ground.rail();
        let drives = |fit: &PowerFit| {
            let stress = WhileHolding::over(|t| drive::checks(amplifier, &fit.figures, rail, t));
            Some((*fit, stress.ok()?))
        };
        powers.iter().filter_map(drives).collect()
    }

    /// By label the reference sides with the least extent that nothing beats.
    fn best_references(&self, fits: Vec<ReferenceFit>) -> Vec<(Choices, Offers<ReferencePoint>)> {
        let mut best: HashMap<Choices, Offers<ReferencePoint>> = HashMap::new();
        for fit in fits {
            let piece = self.references.divider_price(&fit.choices).unwrap_or(0.0);
            let label = self.case.label(&fit.choices);
            let Some(offers) = least(&mut best, label, fit.extent) else { continue };
            for values in &fit.values {
                let upper = if values.divider.upper.is_link() { 0.0 } else { piece };
                let point = ReferencePoint {
                    choices: fit.choices,
                    values: *values,
                    cost: fit.cost + upper,
                };
                keep_front(&mut offers.points, point, |a, b| {
                    a.cost <= b.cost
                        && a.values.stress <= b.values.stress
                        && a.values.current_a <= b.values.current_a
                });
            }
        }
        best.into_iter().collect()
    }

    fn replacement(
        &self,
        beside: &Amplified<'_>,
        reference: &ReferencePoint,
        power: &PowerFit,
        stress: f64,
        extent: Extent,
    ) -> Replacement {
        let mut choices = joined(&reference.choices, &power.choices);
        choices[Slot::Amplifier as usize] = beside.choice;
        let side_a = reference.values.current_a + beside.amplifier.part.iq_max_a;
        let loss = merit::loss(self.case.ground.rail(), side_a);
        let cost = reference.cost + beside.price + power.cost;
        Replacement {
            choices,
            rz_ohm: reference.values.rz.ohm,
            upper_ohm: reference.values.divider.upper.ohm,
            ri_ohm: reference.values.divider.ri.ohm,
            extent,
            cost,
            loss,
            stress,
            score: score(&self.case.ground.problem.weights, cost, loss, stress),
        }
    }
}

/// An amplifier with its place and price.
struct Amplified<'s> {
    choice: Choice,
    amplifier: &'s AmplifierAtRail,
    price: f64,
}

/// By label the power sides with the least extent that nothing beats.
fn best_powers(
    case: &Case<'_, '_>,
    fits: Vec<(PowerFit, f64)>,
) -> Vec<(Choices, Offers<(PowerFit, f64)>)> {
    let mut best: HashMap<Choices, Offers<(PowerFit, f64)>> = HashMap::new();
    for (fit, drive_stress) in fits {
        let label = case.label(&fit.choices);
        let Some(offers) = least(&mut best, label, fit.extent) else { continue };
        keep_front(&mut offers.points, (fit, drive_stress), |(a, a_drive), (b, b_drive)| {
            a.cost <= b.cost && a.stress.max(*a_drive) <= b.stress.max(*b_drive)
        });
    }
    best.into_iter().collect()
}

/// Keeps so many labels: those that change least, of equal ones the cheapest.
fn keep_best<T>(
    sides: &mut Vec<(Choices, Offers<T>)>,
    keep: usize,
    least_cost: impl Fn(&[T]) -> f64,
) {
    sides.sort_by(|(a_label, a), (b_label, b)| {
        a.extent
            .cmp(&b.extent)
            .then_with(|| least_cost(&a.points).total_cmp(&least_cost(&b.points)))
            .then_with(|| a_label.cmp(b_label))
    });
    sides.truncate(keep);
}

/// The offers of a label where an extent is no more than theirs; larger ones are thrown away first.
fn least<T>(
    best: &mut HashMap<Choices, Offers<T>>,
    label: Choices,
    extent: Extent,
) -> Option<&mut Offers<T>> {
    let offers = best.entry(label).or_insert_with(|| Offers { extent, points: Vec::new() });
    match extent.cmp(&offers.extent) {
        Ordering::Greater => return None,
        Ordering::Less => *offers = Offers { extent, points: Vec::new() },
        Ordering::Equal => {}
    }
    Some(offers)
}

/// Adds a point unless one is as good, and takes those away that it is as good as.
fn keep_front<T>(front: &mut Vec<T>, point: T, is_as_good: impl Fn(&T, &T) -> bool) {
    if !front.iter().any(|kept| is_as_good(kept, &point)) {
        front.retain(|kept| !is_as_good(&point, kept));
        front.push(point);
    }
}

/// The choices of two sides together; each keeps the slots of the other.
fn joined(a: &Choices, b: &Choices) -> Choices {
    let mut both = ALL_KEPT;
    for ((both, a), b) in both.iter_mut().zip(a).zip(b) {
        *both = if *a == Choice::Kept { *b } else { *a };
    }
    both
}
