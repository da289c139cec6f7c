//! What may be chosen: parts by slot, with the price that ranks them.

use circuit::assembly::Aim;
use circuit::parts::{Amplifier, Heatsink, Pot, ResistorLine, Transistor, Zener};
use circuit::pass::Duty;
use circuit::rail::Rail;
use circuit::resistor::{LineAtRail, PotAtRail};
use circuit::slot::Slot;
use num_bigint::BigUint;
use rayon::prelude::*;
use std::collections::HashMap;

/// The weights of the score cost^wc · loss^wl · stress^ws; each ≥ 0.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Weights {
    /// wc.
    pub cost: f64,
    /// wl.
    pub loss: f64,
    /// ws.
    pub stress: f64,
}

/// A part that may be chosen.
#[derive(Debug)]
pub struct Part<'a, F> {
    /// Who makes it; may be empty.
    pub maker: &'a str,
    /// Its name; together with the maker unique in its slot.
    pub part: &'a str,
    /// Price of one piece.
    pub price: f64,
    /// The caller's own handle, handed back in candidates.
    pub row: u32,
    /// Its figures.
    pub figures: &'a F,
}

impl<F> Clone for Part<'_, F> {
    fn clone(&self) -> Self {
        *self
    }
}

impl<F> Copy for Part<'_, F> {}

/// A transistor with the package that a heatsink must fit.
#[derive(Debug, Clone, Copy)]
pub struct PassPart<'a> {
    /// The transistor.
    pub part: Part<'a, Transistor>,
    /// Its package; None where the row does not tell.
    pub package: Option<&'a str>,
}

/// A heatsink with the packages that it fits.
#[derive(Debug, Clone)]
pub struct SinkPart<'a> {
    /// The heatsink.
    pub part: Part<'a, Heatsink>,
    /// Packages that it fits.
    pub fits: Vec<&'a str>,
}

/// What may be chosen for a rail, and by what it is ranked.
///
/// Every part here is proven and allowed; its slot holds no two parts of the same maker and name.
#[derive(Debug, Clone)]
pub struct Problem<'a> {
    /// The requirement.
    pub rail: &'a Rail,
    /// The weights of the score.
    pub weights: Weights,
    /// References.
    pub zeners: Vec<Part<'a, Zener>>,
    /// Lines for RZ.
    pub bias_lines: Vec<Part<'a, ResistorLine>>,
    /// Amplifiers.
    pub amplifiers: Vec<Part<'a, Amplifier>>,
    /// Lines for RF, RI and RX.
    pub divider_lines: Vec<Part<'a, ResistorLine>>,
    /// Pots; read only where the output is adjustable.
    pub pots: Vec<Part<'a, Pot>>,
    /// Transistors.
    pub transistors: Vec<PassPart<'a>>,
    /// Heatsinks; read only where the sheet brings no sink of its own.
    pub heatsinks: Vec<SinkPart<'a>>,
    /// Transistors whose row gives rth_ja may go without a heatsink (no pin rules it out).
    pub may_go_unmounted: bool,
}

impl Problem<'_> {
    /// The transistor at this place may go without a heatsink.
    pub fn can_go_unmounted(&self, transistor: &Transistor) -> bool {
        self.may_go_unmounted && self.rail.chooses_heatsink() && transistor.rth_ja_c_per_w.is_some()
    }

    /// Choices in the heatsink slot: the heatsinks, and one more where any transistor may go
    /// without; 1 where the sheet brings its own sink.
    pub fn heatsink_choices(&self) -> usize {
        if !self.rail.chooses_heatsink() {
            return 1;
        }
        let unmounted = self.transistors.iter().any(|t| self.can_go_unmounted(t.part.figures));
        self.heatsinks.len() + usize::from(unmounted)
    }

    /// *covered*: the product over the slots of what may be chosen; an empty slot counts 1.
    pub fn covered(&self) -> BigUint {
        let pots = if self.rail.is_adjustable() { self.pots.len() } else { 1 };
        [
            self.zeners.len(),
            self.bias_lines.len(),
            self.amplifiers.len(),
            self.divider_lines.len(),
            pots,
            self.transistors.len(),
            self.heatsink_choices(),
        ]
        .into_iter()
        .map(BigUint::from)
        .product()
    }
}

/// A problem with everything worked out that the search reads again and again.
pub(crate) struct Ground<'a> {
    pub problem: &'a Problem<'a>,
    pub aim: Aim,
    pub duty: Duty,
    pub bias_lines: Vec<LineAtRail>,
    pub divider_lines: Vec<LineAtRail>,
    pub pots: Vec<PotAtRail>,
    /// The least (hi/lo)² of the divider lines: how far tolerance alone spreads a ratio.
    pub least_line_spread: f64,
    pub ranks: Ranks,
    /// Package classes: the sinks that fit each.
    pub classes: Classes,
}

impl<'a> Ground<'a> {
    pub fn new(problem: &'a Problem<'a>) -> Self {
        let rail = problem.rail;
        let lines = |parts: &[Part<'_, ResistorLine>]| {
            parts.iter().map(|p| LineAtRail::new(p.figures, rail)).collect::<Vec<_>>()
        };
        let divider_lines = lines(&problem.divider_lines);
        Self {
            problem,
            aim: Aim::of(rail),
            duty: Duty::new(rail),
            bias_lines: lines(&problem.bias_lines),
            least_line_spread: divider_lines
                .iter()
                .map(LineAtRail::spread)
                .fold(f64::INFINITY, f64::min),
            divider_lines,
            pots: problem.pots.iter().map(|p| PotAtRail::new(p.figures, rail)).collect(),
            ranks: Ranks::new(problem),
            classes: Classes::new(problem),
        }
    }

    pub fn rail(&self) -> &'a Rail {
        self.problem.rail
    }
}

/// The place of every part in its slot when sorted by maker, then part, from 1; 0 is no part.
pub(crate) struct Ranks([Vec<u32>; Slot::COUNT]);

impl Ranks {
    fn new(problem: &Problem<'_>) -> Self {
        // The three long lists side by side; the others are short.
        let (zeners, (amplifiers, transistors)) = rayon::join(
            || places(problem.zeners.iter().map(name)),
            || {
                rayon::join(
                    || places(problem.amplifiers.iter().map(name)),
                    || places(problem.transistors.iter().map(|t| name(&t.part))),
                )
            },
        );
        let mut ranks: [Vec<u32>; Slot::COUNT] = Default::default();
        ranks[Slot::Zener as usize] = zeners;
        ranks[Slot::BiasLine as usize] = places(problem.bias_lines.iter().map(name));
        ranks[Slot::Amplifier as usize] = amplifiers;
        ranks[Slot::DividerLine as usize] = places(problem.divider_lines.iter().map(name));
        ranks[Slot::Pot as usize] = places(problem.pots.iter().map(name));
        ranks[Slot::Pass as usize] = transistors;
        ranks[Slot::Heatsink as usize] = places(problem.heatsinks.iter().map(|s| name(&s.part)));
        Self(ranks)
    }

    pub fn of(&self, slot: Slot, index: usize) -> u32 {
        self.0[slot as usize][index]
    }
}

fn name<'a, F>(part: &Part<'a, F>) -> (&'a str, &'a str) {
    (part.maker, part.part)
}

/// Each name's place when all are sorted by maker, then part, from 1. Bytes of UTF-8 sort as Unicode
/// code points do.
///
/// Comparing texts is what takes the time, so makers, of which there are few, are sorted first, and a
/// part is compared by the number that its first bytes make; only equal numbers need the whole text.
fn places<'a>(names: impl Iterator<Item = (&'a str, &'a str)>) -> Vec<u32> {
    let names: Vec<(&str, &str)> = names.collect();
    let mut makers: Vec<&str> = Vec::new();
    let mut numbers: HashMap<&str, u32> = HashMap::new();
    for (maker, _) in &names {
        numbers.entry(maker).or_insert_with(|| {
            makers.push(maker);
            0
        });
    }
    makers.sort_unstable();
    for (number, maker) in (0..).zip(makers) {
        numbers.insert(maker, number);
    }
    let mut sorted: Vec<(u32, u128, u32)> = (0u32..)
        .zip(&names)
        .map(|(i, (maker, part))| (numbers[maker], first_bytes(part), i))
        .collect();
    sorted.par_sort_unstable_by(|(m, p, i), (n, q, j)| {
        (m, p).cmp(&(n, q)).then_with(|| names[*i as usize].cmp(&names[*j as usize]))
    });
    let mut places = vec![0; sorted.len()];
    for (place, (_, _, i)) in (1u32..).zip(sorted) {
        places[i as usize] = place;
    }
    places
}

/// The first sixteen bytes of a text as a number that orders as they do.
fn first_bytes(text: &str) -> u128 {
    let mut bytes = [0; 16];
    let length = text.len().min(16);
    bytes[..length].copy_from_slice(&text.as_bytes()[..length]);
    u128::from_be_bytes(bytes)
}

/// The packages of the transistors, each with the heatsinks that fit it.
pub(crate) struct Classes {
    by_transistor: Vec<Option<u32>>,
    /// For each class the places of its sinks in `problem.heatsinks`.
    pub sinks: Vec<Vec<u32>>,
}

impl Classes {
    fn new(problem: &Problem<'_>) -> Self {
        let mut numbers: HashMap<&str, u32> = HashMap::new();
        let by_transistor = problem
            .transistors
            .iter()
            .map(|t| {
                let next = numbers.len() as u32;
                t.package.map(|package| *numbers.entry(package).or_insert(next))
            })
            .collect();
        let mut sinks = vec![Vec::new(); numbers.len()];
        if problem.rail.chooses_heatsink() {
            for (place, sink) in (0u32..).zip(&problem.heatsinks) {
                let mut classes: Vec<u32> =
                    sink.fits.iter().filter_map(|p| numbers.get(p).copied()).collect();
                classes.sort_unstable();
                classes.dedup();
                for class in classes {
                    sinks[class as usize].push(place);
                }
            }
        }
        Self { by_transistor, sinks }
    }

    /// The class of the transistor at this place; None where its package is not told.
    pub fn of(&self, transistor: usize) -> Option<u32> {
        self.by_transistor[transistor]
    }
}
