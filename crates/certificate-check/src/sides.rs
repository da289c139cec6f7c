//! Each choice of a side under the rail's conditions: whether it holds by itself, and what it adds.

use crate::rank::{Names, Share};
use catalog::{Row, Sink};
use circuit::amplifier::AmplifierAtRail;
use circuit::assembly::{self, Aim, Network, amplifier_checks, choose_divider};
use circuit::check::{Tally, WhileHolding};
use circuit::divider::{Divider, nominal_current_a};
use circuit::pass::{Duty, Mounted, PassFigures};
use circuit::rail::Rail;
use circuit::reference::{Bias, ZenerAtRail};
use circuit::resistor::{LineAtRail, PotAtRail};
use circuit::slot::Slot;
use eligible::Eligible;
use std::ops::ControlFlow;

/// Parts by slot, each by its place in its file; None where no part is chosen.
pub(crate) type Parts = [Option<usize>; Slot::COUNT];

pub(crate) fn parts<const N: usize>(chosen: [(Slot, Option<usize>); N]) -> Parts {
    let mut parts = [None; Slot::COUNT];
    chosen.into_iter().for_each(|(slot, place)| parts[slot as usize] = place);
    parts
}

pub(crate) fn biased(zener: usize, bias_line: usize) -> Parts {
    parts([(Slot::Zener, Some(zener)), (Slot::BiasLine, Some(bias_line))])
}

pub(crate) fn together(a: &Parts, b: &Parts) -> Parts {
    std::array::from_fn(|slot| a[slot].or(b[slot]))
}

/// One choice of a side.
#[derive(Clone, Copy)]
pub(crate) struct Side {
    /// The place of its amplifier, transistor or divider line.
    pub main: usize,
    pub parts: Parts,
    pub share: Share,
}

/// A reference side with its values.
pub(crate) struct Reference {
    pub side: Side,
    pub bias: Bias,
    pub divider: Divider,
}

/// The rows that may be chosen, under the rail's conditions.
pub(crate) struct Shop<'a> {
    pub rows: &'a Eligible<'a>,
    pub rail: &'a Rail,
    pub zeners: Vec<ZenerAtRail>,
    pub bias_lines: Vec<LineAtRail>,
    divider_lines: Vec<LineAtRail>,
    pots: Vec<PotAtRail>,
    pub amplifiers: Vec<AmplifierAtRail>,
    pub transistors: Vec<PassFigures>,
    aim: Aim,
    duty: Duty,
    /// Maker and name by slot and place, and the place by name.
    pub names: [Vec<[&'a str; 2]>; Slot::COUNT],
    ranks: [Vec<u32>; Slot::COUNT],
}

impl<'a> Shop<'a> {
    pub fn new(rows: &'a Eligible<'a>) -> Self {
        fn each<T, U>(rows: &[&Row<T>], at_rail: impl Fn(&T) -> U) -> Vec<U> {
            rows.iter().map(|row| at_rail(&row.figures)).collect()
        }
        fn names<'a, T>(rows: &[&'a Row<T>]) -> Vec<[&'a str; 2]> {
            rows.iter().map(|row| [row.maker.as_str(), row.part.as_str()]).collect()
        }
        let rail = &rows.sheet.rail;
        let duty = Duty::new(rail);
        let names = Slot::ALL.map(|slot| match slot {
            Slot::Zener => names(&rows.zeners),
            Slot::BiasLine => names(&rows.bias_lines),
            Slot::Amplifier => names(&rows.amplifiers),
            Slot::DividerLine => names(&rows.divider_lines),
            Slot::Pot => names(&rows.pots),
            Slot::Pass => names(&rows.transistors),
            Slot::Heatsink => names(&rows.heatsinks),
        });
        let ranks = names.each_ref().map(|names| {
            let mut sorted = names.clone();
            sorted.sort_unstable();
            names.iter().map(|name| sorted.partition_point(|n| n <= name) as u32).collect()
        });
        Self {
            rows,
            rail,
            zeners: each(&rows.zeners, |part| ZenerAtRail::new(part, rail)),
            bias_lines: each(&rows.bias_lines, |part| LineAtRail::new(part, rail)),
            divider_lines: each(&rows.divider_lines, |part| LineAtRail::new(part, rail)),
            pots: each(&rows.pots, |part| PotAtRail::new(part, rail)),
            amplifiers: each(&rows.amplifiers, |part| AmplifierAtRail::new(part, rail)),
            transistors: each(&rows.transistors, |part| PassFigures::new(part, &duty, rail)),
            aim: Aim::of(rail),
            duty,
            names,
            ranks,
        }
    }

    /// Parts in words.
    pub fn spell(&self, parts: &Parts) -> String {
        let name =
            |slot: Slot| Some(self.names[slot as usize].get(parts[slot as usize]?)?.join("/"));
        Slot::ALL.into_iter().filter_map(name).collect::<Vec<_>>().join(" + ")
    }

    /// Places by name of parts, and in the other slots the least that there is.
    pub fn by_name(&self, parts: &Parts) -> Names {
        Slot::BY_NAME.map(|slot| match (parts[slot as usize], slot) {
            (Some(place), _) => self.ranks[slot as usize][place],
            (None, Slot::Heatsink) => 0,
            (None, Slot::Pot) => u32::from(self.rail.is_adjustable()),
            (None, _) => 1,
        })
    }

    /// What one piece costs at the quantity of all boards.
    pub fn price<T>(&self, row: &Row<T>) -> f64 {
        row.price.at(self.rows.sheet.boards)
    }

    /// Each choice of a pot with its price: one without a pot for a fixed output.
    pub fn pots(&self) -> Vec<(Option<usize>, f64)> {
        let none = (!self.rail.is_adjustable()).then_some((None, 0.0));
        let pots = self.rows.pots.iter().enumerate();
        none.into_iter().chain(pots.map(|(at, row)| (Some(at), self.price(row)))).collect()
    }

    /// The reference side with the divider that is chosen for it; None where there is none.
    pub fn reference(
        &self,
        [zener, bias_line, line]: [usize; 3],
        (pot, pot_price): (Option<usize>, f64),
        &(bias, stress): &(Bias, f64),
    ) -> Option<Reference> {
        let rows = self.rows;
        let (on, track) = (&self.divider_lines[line], pot.map(|pot| &self.pots[pot]));
        let divider = choose_divider(&self.aim, &bias, on, track, self.rail).divider()?;
        let pieces = if divider.upper.is_link() { 1.0 } else { 2.0 };
        let before = self.price(rows.zeners[zener]) + self.price(rows.bias_lines[bias_line]);
        let cost = before + pieces * self.price(rows.divider_lines[line]) + pot_price;
        let share = [cost, bias.iz_nominal_a + nominal_current_a(&bias, &divider), stress];
        let divider_parts = parts([(Slot::DividerLine, Some(line)), (Slot::Pot, pot)]);
        let parts = together(&biased(zener, bias_line), &divider_parts);
        Some(Reference { side: Side { main: line, parts, share }, bias, divider })
    }

    /// The checks in which an amplifier meets a reference side.
    pub fn input_checks(
        &self,
        Reference { side, bias, divider }: &Reference,
        amp: &AmplifierAtRail,
        tally: &mut impl Tally,
    ) -> ControlFlow<()> {
        let pot = side.parts[Slot::Pot as usize].map(|pot| &self.pots[pot]);
        let network = Network { line: &self.divider_lines[side.main], divider: *divider, pot };
        assembly::input_checks(amp, bias, &network, &self.aim, self.rail, tally)
    }

    /// The amplifier; None where it fails by itself.
    pub fn amplifier(&self, main: usize) -> Option<Side> {
        let (row, amp) = (self.rows.amplifiers[main], &self.amplifiers[main]);
        let stress = WhileHolding::over(|t| amplifier_checks(amp, self.rail, t)).ok()?;
        let share = [self.price(row), row.figures.iq_max_a, stress];
        Some(Side { main, parts: parts([(Slot::Amplifier, Some(main))]), share })
    }

    /// The transistor where it is mounted; None where it can't be, or fails by itself.
    pub fn power(&self, main: usize, sink: Option<usize>) -> Option<Side> {
        let (row, figures) = (self.rows.transistors[main], &self.transistors[main]);
        let (rail, duty) = (self.rail, &self.duty);
        let sink_row = sink.map(|sink| self.rows.heatsinks[sink]);
        let fits = |s: &Row<Sink>| row.package.as_ref().is_some_and(|p| s.figures.fits.contains(p));
        // A pin of the heatsink slot rules out a transistor without one.
        let is_pinned = self.rows.sheet.parts.pins[Slot::Heatsink as usize].is_some();
        if !sink_row.map_or(!is_pinned || !rail.chooses_heatsink(), fits) {
            return None;
        }
        let on = sink_row.map(|sink| &sink.figures.figures);
        let mounted = Mounted::new(&row.figures, figures, on, duty, rail)?;
        let stress = WhileHolding::over(|t| figures.checks(&mounted, duty, rail, t)).ok()?;
        let cost = self.price(row) + sink_row.map_or(0.0, |sink| self.price(sink));
        let parts = parts([(Slot::Pass, Some(main)), (Slot::Heatsink, sink)]);
        Some(Side { main, parts, share: [cost, 0.0, stress] })
    }
}
