//! A design in a random shop, what is gone from it, and every way to mend it by plain enumeration:
//! every combination of parts, every triple of values, every check, a full sort.

// Each test takes what it needs.
#![allow(dead_code)]

use circuit::amplifier::AmplifierAtRail;
use circuit::assembly::{Assembly, Network};
use circuit::divider::Divider;
use circuit::parts::ResistorLine;
use circuit::pass::{CaseTemperatures, Duty, Mounted, PassFigures, Unmounted};
use circuit::reference::ZenerAtRail;
use circuit::resistor::{LineAtRail, PotAtRail, Resistance};
use circuit::slot::Slot;
use select::candidate::Proof;
use select::problem::{Part, Problem};
use std::collections::BTreeMap;
use substitute::built::{Built, BuiltSink, Case, Choice, Choices};
use substitute::change::{Board, Extent};
use substitute::ground::Ground;
use twin::plain::{Plain, PlainCandidate};
use twin::shops::{Dice, RandomShop, Row, Sizes};

/// So many values of a line are kept: plain enumeration tries every triple.
const FEW_VALUES: usize = 6;

/// A shop with few parts and few values, and a design that holds in it.
pub struct Scene {
    pub shop: RandomShop,
    pub design: PlainCandidate,
    pub gone: [bool; Slot::COUNT],
    pub line_gone_twice: bool,
    pub seed: u64,
}

impl Scene {
    /// None where nothing holds in the shop of this seed.
    pub fn new(seed: u64) -> Option<Self> {
        let mut dice = Dice::new(seed, 7_001, 0);
        let sizes = Sizes {
            zeners: 3,
            bias_lines: 2,
            amplifiers: dice.whole(2, 3),
            divider_lines: 2,
            pots: 2,
            transistors: 3,
            heatsinks: 2,
        };
        let mut shop = RandomShop::new(seed, sizes);
        let same_lines = dice.chance(0.3);
        if same_lines {
            shop.divider_lines = shop.bias_lines.clone();
        }
        let ranked = Plain::new(&shop.problem()).ranked;
        let mut design = *ranked.get(dice.whole(0, 20).min(ranked.len().checked_sub(1)?))?;
        if same_lines && dice.chance(0.5) {
            // The same line for bias and divider where one candidate has it.
            let both = |c: &&PlainCandidate| {
                c.places[Slot::BiasLine as usize] == c.places[Slot::DividerLine as usize]
            };
            design = *ranked.iter().find(both)?;
        }
        thin(&mut shop, &ranked, &design);
        // Now and then a value as it was trimmed on the bench: no line stocks it.
        if dice.chance(0.2) {
            design.rz_ohm *= 1.03;
        }
        if dice.chance(0.2) {
            design.ri_ohm *= 0.99;
        }
        let mut gone = [false; Slot::COUNT];
        let filled = Slot::ALL.into_iter().filter(|s| design.places[*s as usize].is_some());
        let filled: Vec<Slot> = filled.collect();
        gone[filled[dice.whole(0, filled.len() - 1)] as usize] = true;
        if dice.chance(0.2) {
            gone[filled[dice.whole(0, filled.len() - 1)] as usize] = true;
        }
        let [bias, divider] = [Slot::BiasLine, Slot::DividerLine].map(|s| s as usize);
        let one_line = same_lines && design.places[bias] == design.places[divider];
        if one_line && (gone[bias] || gone[divider]) {
            (gone[bias], gone[divider]) = (true, true);
        }
        let line_gone_twice = one_line && gone[bias];
        Some(Self { shop, design, gone, line_gone_twice, seed })
    }

    /// What a part does to the board: anything, but always the same.
    pub fn board(&self, slot: Slot, place: Option<u32>) -> Board {
        if slot == Slot::Heatsink {
            if place.is_none() {
                return Board::Removed;
            }
            if self.design.places[Slot::Heatsink as usize].is_none() {
                return Board::Added;
            }
        }
        let place = u64::from(place.unwrap_or(0)) * 16 + slot as u64;
        Dice::new(self.seed, 7_002, place).pick([
            Board::Same,
            Board::Same,
            Board::OtherPinout,
            Board::PinoutUnknown,
            Board::OtherPackage,
            Board::Unknown,
        ])
    }

    /// Places that may be chosen: all but those of what stands there and of what is gone.
    fn places(&self, slot: Slot) -> Vec<u32> {
        let problem = self.shop.problem();
        let rows = rows(&problem, slot);
        let gone_name = |maker: &str, part: &str| {
            Slot::ALL.into_iter().any(|s| {
                self.gone[s as usize]
                    && same_catalog(s, slot)
                    && self.design.places[s as usize]
                        .is_some_and(|p| name(&problem, s, p) == (maker, part))
            })
        };
        (0..rows)
            .filter(|place| {
                let (maker, part) = name(&problem, slot, *place);
                self.design.places[slot as usize] != Some(*place) && !gone_name(maker, part)
            })
            .map(|place| place as u32)
            .collect()
    }

    pub fn with_case<T>(&self, then: impl FnOnce(&Case<'_, '_>) -> T) -> T {
        let problem = self.shop.problem();
        let built = self.built(&problem);
        let ground = Ground::new(problem);
        let case = Case {
            ground: &ground,
            built,
            gone: self.gone,
            line_gone_twice: self.line_gone_twice,
            places: Slot::ALL.map(|slot| self.places(slot)),
            board: Box::new(|slot, place| self.board(slot, place)),
        };
        then(&case)
    }

    fn built<'p>(&self, problem: &Problem<'p>) -> Built<'p> {
        fn at<'p, F>(
            rows: &[Part<'p, F>],
            place: Option<usize>,
            gone: bool,
        ) -> Option<Part<'p, F>> {
            place.filter(|_| !gone).and_then(|p| rows.get(p)).copied()
        }
        let place = |slot: Slot| self.design.places[slot as usize];
        let gone = |slot: Slot| self.gone[slot as usize];
        Built {
            zener: at(&problem.zeners, place(Slot::Zener), gone(Slot::Zener)),
            bias_line: at(&problem.bias_lines, place(Slot::BiasLine), gone(Slot::BiasLine)),
            amplifier: at(&problem.amplifiers, place(Slot::Amplifier), gone(Slot::Amplifier)),
            divider_line: at(
                &problem.divider_lines,
                place(Slot::DividerLine),
                gone(Slot::DividerLine),
            ),
            pot: at(&problem.pots, place(Slot::Pot), gone(Slot::Pot)),
            pass: place(Slot::Pass).filter(|_| !gone(Slot::Pass)).map(|p| problem.transistors[p]),
            heatsink: match place(Slot::Heatsink) {
                None => BuiltSink::None,
                Some(_) if gone(Slot::Heatsink) => BuiltSink::CannotStay,
                Some(p) => BuiltSink::On(problem.heatsinks[p].clone()),
            },
            rz_ohm: self.design.rz_ohm,
            upper_ohm: self.design.upper_ohm,
            ri_ohm: self.design.ri_ohm,
        }
    }
}

/// Leaves each line a few values, those of the design and of the best candidates among them.
fn thin(shop: &mut RandomShop, ranked: &[PlainCandidate], design: &PlainCandidate) {
    let mut of_bias: Vec<f64> = vec![design.rz_ohm];
    let mut of_divider: Vec<f64> = vec![design.ri_ohm, design.upper_ohm];
    for candidate in ranked.iter().step_by(1 + ranked.len() / 4) {
        of_bias.push(candidate.rz_ohm);
        of_divider.extend([candidate.upper_ohm, candidate.ri_ohm]);
    }
    let cut = |rows: &mut Vec<Row<ResistorLine>>, wanted: &[f64]| {
        for row in rows {
            let values = &mut row.figures.values_ohm;
            let stocked: Vec<f64> = values.clone();
            let mut kept: Vec<f64> =
                wanted.iter().copied().filter(|v| stocked.contains(v)).collect();
            kept.extend(stocked.iter().step_by(1 + stocked.len() / 3));
            let mut few = Vec::new();
            for value in kept {
                if !few.contains(&value) && few.len() < FEW_VALUES {
                    few.push(value);
                }
            }
            few.sort_by(f64::total_cmp);
            *values = few;
        }
    };
    cut(&mut shop.bias_lines, &of_bias);
    cut(&mut shop.divider_lines, &of_divider);
}

fn same_catalog(a: Slot, b: Slot) -> bool {
    let is_line = |s: Slot| matches!(s, Slot::BiasLine | Slot::DividerLine);
    a == b || (is_line(a) && is_line(b))
}

fn rows(problem: &Problem<'_>, slot: Slot) -> usize {
    match slot {
        Slot::Zener => problem.zeners.len(),
        Slot::BiasLine => problem.bias_lines.len(),
        Slot::Amplifier => problem.amplifiers.len(),
        Slot::DividerLine => problem.divider_lines.len(),
        Slot::Pot => problem.pots.len(),
        Slot::Pass => problem.transistors.len(),
        Slot::Heatsink if problem.rail.chooses_heatsink() => problem.heatsinks.len(),
        Slot::Heatsink => 0,
    }
}

fn name<'p>(problem: &Problem<'p>, slot: Slot, place: usize) -> (&'p str, &'p str) {
    fn of<'p, F>(part: &Part<'p, F>) -> (&'p str, &'p str) {
        (part.maker, part.part)
    }
    match slot {
        Slot::Zener => of(&problem.zeners[place]),
        Slot::BiasLine => of(&problem.bias_lines[place]),
        Slot::Amplifier => of(&problem.amplifiers[place]),
        Slot::DividerLine => of(&problem.divider_lines[place]),
        Slot::Pot => of(&problem.pots[place]),
        Slot::Pass => of(&problem.transistors[place].part),
        Slot::Heatsink => of(&problem.heatsinks[place].part),
    }
}

/// A way to mend a design, as plain enumeration finds it.
#[derive(Debug, Clone, PartialEq)]
pub struct PlainMend {
    pub choices: Choices,
    pub extent: Extent,
    pub figures: Figures,
}

/// What ranks it, in the order of ranking.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Figures {
    pub score: f64,
    pub cost: f64,
    pub stress: f64,
    pub loss: f64,
}

impl Figures {
    pub fn order(&self, other: &Self) -> std::cmp::Ordering {
        let of = |f: &Self| [f.score, f.cost, f.stress, f.loss];
        let pairs = of(self).into_iter().zip(of(other));
        pairs
            .map(|(a, b)| quantity::digits::compare(a, b))
            .find(|o| o.is_ne())
            .unwrap_or(std::cmp::Ordering::Equal)
    }
}

/// The best way for each replacement, by its label.
pub fn plainly(scene: &Scene) -> BTreeMap<Choices, PlainMend> {
    let problem = scene.shop.problem();
    let mut best: BTreeMap<Choices, PlainMend> = BTreeMap::new();
    let options = |slot: Slot| {
        let mut options: Vec<Choice> = Vec::new();
        if !scene.gone[slot as usize] {
            options.push(Choice::Kept);
        }
        options.extend(scene.places(slot).into_iter().map(Choice::Row));
        if slot == Slot::Heatsink && scene.design.places[slot as usize].is_some() {
            options.push(Choice::Without);
        }
        options
    };
    let all = Slot::ALL.map(options);
    let [zeners, bias, amps, dividers, pots, passes, sinks] = &all;
    for z in zeners {
        for b in bias {
            for a in amps {
                for d in dividers {
                    for p in pots {
                        for q in passes {
                            for h in sinks {
                                let choices = [*z, *b, *a, *d, *p, *q, *h];
                                try_all_values(scene, &problem, &choices, &mut best);
                            }
                        }
                    }
                }
            }
        }
    }
    best
}

fn try_all_values(
    scene: &Scene,
    problem: &Problem<'_>,
    choices: &Choices,
    best: &mut BTreeMap<Choices, PlainMend>,
) {
    let rail = problem.rail;
    let at = |slot: Slot| match choices[slot as usize] {
        Choice::Row(place) => Some(place as usize),
        Choice::Kept => scene.design.places[slot as usize],
        Choice::Without => None,
    };
    let duty = Duty::new(rail);
    let span_c = rail.temperature_span_c();
    let (Some(z), Some(b), Some(a), Some(d), Some(q)) = (
        at(Slot::Zener),
        at(Slot::BiasLine),
        at(Slot::Amplifier),
        at(Slot::DividerLine),
        at(Slot::Pass),
    ) else {
        return;
    };
    let zener = ZenerAtRail::new(problem.zeners[z].figures, rail);
    let bias_row = problem.bias_lines[b].figures;
    let divider_row = problem.divider_lines[d].figures;
    let bias_line = LineAtRail::new(bias_row, rail);
    let divider_line = LineAtRail::new(divider_row, rail);
    let amplifier = AmplifierAtRail::new(problem.amplifiers[a].figures, rail);
    let pot = at(Slot::Pot).map(|p| PotAtRail::new(problem.pots[p].figures, rail));
    let pass_part = &problem.transistors[q];
    let pass = PassFigures::new(pass_part.part.figures, &duty, rail);
    let mut sink_cost = 0.0;
    let mounted: Mounted = match at(Slot::Heatsink) {
        Some(h) => {
            let sink = &problem.heatsinks[h];
            if !pass_part.package.is_some_and(|package| sink.fits.contains(&package)) {
                return;
            }
            sink_cost = sink.part.price;
            Mounted::on(CaseTemperatures::on_heatsink(sink.part.figures, &duty, rail), &pass, &duty)
        }
        None => {
            if choices[Slot::Heatsink as usize] == Choice::Without
                && !problem.can_go_unmounted(pass_part.part.figures)
            {
                return;
            }
            match CaseTemperatures::on_own_sink(&duty, rail) {
                Some(case) => Mounted::on(case, &pass, &duty),
                None => match Unmounted::new(pass_part.part.figures, &duty, rail) {
                    Some(unmounted) => unmounted.into(),
                    None => return,
                },
            }
        }
    };
    let of = |ohm: f64, row: &ResistorLine| Resistance::new(ohm, row.tol, row.tempco_per_c, span_c);
    // What a resistor may be: as built where its line stays or stocks the value, or any of the line.
    let values = |slot: Slot, built: f64, row: &ResistorLine, link: bool| {
        let mut values: Vec<f64> = row.values_ohm.clone();
        let stays = choices[slot as usize] == Choice::Kept;
        if stays && !values.contains(&built) {
            values.push(built);
        }
        if link && !values.contains(&0.0) {
            values.push(0.0);
        }
        values
    };
    let built = &scene.design;
    let rzs = values(Slot::BiasLine, built.rz_ohm, bias_row, false);
    let uppers = values(Slot::DividerLine, built.upper_ohm, divider_row, true);
    let ris: Vec<f64> = values(Slot::DividerLine, built.ri_ohm, divider_row, false)
        .into_iter()
        .filter(|ohm| *ohm > 0.0)
        .collect();
    let part_cost = problem.zeners[z].price
        + problem.bias_lines[b].price
        + problem.amplifiers[a].price
        + problem.divider_lines[d].price
        + at(Slot::Pot).map_or(0.0, |p| problem.pots[p].price)
        + pass_part.part.price
        + sink_cost;
    let parts_extent = extent_of_parts(scene, problem, choices);
    let label = label(scene, choices);
    for rz_ohm in &rzs {
        let rz = of(*rz_ohm, bias_row);
        let bias = zener.bias(rz, rail);
        for upper_ohm in &uppers {
            for ri_ohm in &ris {
                let divider =
                    Divider { upper: of(*upper_ohm, divider_row), ri: of(*ri_ohm, divider_row) };
                let network = Network { line: &divider_line, divider, pot: pot.as_ref() };
                let assembly = Assembly {
                    rail,
                    zener: &zener,
                    bias_line: &bias_line,
                    bias,
                    amplifier: &amplifier,
                    network,
                    pass: &pass,
                    mounted,
                    duty: &duty,
                };
                let proof = Proof::of(&assembly, rail);
                if !proof.findings.iter().all(|f| f.holds()) {
                    continue;
                }
                let changed = [
                    *rz_ohm != built.rz_ohm,
                    *upper_ohm != built.upper_ohm,
                    *ri_ohm != built.ri_ohm,
                ];
                let changed = changed.into_iter().filter(|c| *c).count() as u8;
                let piece = problem.divider_lines[d].price;
                let cost = part_cost + if *upper_ohm == 0.0 { 0.0 } else { piece };
                let stress = proof.stress.utilisation;
                let weights = &problem.weights;
                let score = cost.powf(weights.cost)
                    * proof.loss.powf(weights.loss)
                    * stress.powf(weights.stress);
                let figures = Figures { score, cost, stress, loss: proof.loss };
                let extent = parts_extent + Extent { values: changed, ..Extent::default() };
                let mend = PlainMend { choices: *choices, extent, figures };
                let better = best.get(&label).is_none_or(|held| {
                    mend.extent
                        .cmp(&held.extent)
                        .then_with(|| mend.figures.order(&held.figures))
                        .is_lt()
                });
                if better {
                    best.insert(label, mend);
                }
            }
        }
    }
}

fn extent_of_parts(scene: &Scene, problem: &Problem<'_>, choices: &Choices) -> Extent {
    let mut extent = Extent::default();
    for slot in Slot::ALL {
        let place = match choices[slot as usize] {
            Choice::Kept => continue,
            Choice::Row(place) => Some(place),
            Choice::Without => None,
        };
        extent.further_parts += u8::from(!scene.gone[slot as usize]);
        match scene.board(slot, place) {
            Board::Same => {}
            Board::OtherPinout | Board::PinoutUnknown => extent.other_pinouts += 1,
            _ => extent.other_packages += 1,
        }
    }
    let (bias, divider) = (choices[Slot::BiasLine as usize], choices[Slot::DividerLine as usize]);
    if scene.line_gone_twice
        && let (Choice::Row(b), Choice::Row(d)) = (bias, divider)
        && name(problem, Slot::BiasLine, b as usize) != name(problem, Slot::DividerLine, d as usize)
    {
        extent.further_parts += 1;
    }
    extent
}

fn label(scene: &Scene, choices: &Choices) -> Choices {
    let mut label = *choices;
    for (choice, gone) in label.iter_mut().zip(scene.gone) {
        if !gone {
            *choice = Choice::Kept;
        }
    }
    label
}
