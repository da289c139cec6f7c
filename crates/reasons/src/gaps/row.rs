//! A row with blanks, and the ways of filling them that are tried.

use crate::cell::is_monotone;
use crate::fill::{Fill, fills_of};
use crate::filled::{Cells, slots_of};
use catalog::column::Column;
use catalog::{Kind, Shop};
use circuit::rail::Rail;
use circuit::slot::Slot;
use eligible::{Eligible, UnprovenPart, eligible};
use select::problem::Problem;
use std::collections::BTreeSet;

/// At most so many ways of filling several blanks are tried.
const MOST_WAYS: usize = 500;

/// Texts for the blanks, in the order of their columns.
pub(super) type Filling = Vec<String>;

/// A row with blanks.
pub(super) struct Row {
    cells: Cells,
    /// The slots that it may fill.
    pub slots: &'static [Slot],
    /// The blanks, each with what can be tried for it, the least demanding first.
    pub blanks: Vec<(&'static Column, Vec<Fill>)>,
}

impl Row {
    /// None where a blank is one that nothing can be tried for.
    pub fn of(
        part: &UnprovenPart<'_>,
        rows: &Eligible<'_>,
        rail: &Rail,
        packages: &[String],
    ) -> Option<Self> {
        let file = file_number(rows.shop, part)?;
        let blanks = part
            .lacks
            .iter()
            .map(|name| {
                let column = part.kind.column(name)?;
                let fills = fills_of(column, rail, packages);
                (!fills.is_empty()).then_some((column, fills))
            })
            .collect::<Option<Vec<_>>>()?;
        let cells = Cells::of(rows.shop, part.kind, file, part.line);
        Some(Self { cells, slots: slots_of(part.kind), blanks })
    }

    /// The row with its blanks filled, as a shop that holds it alone.
    pub fn filled(&self, filling: &[String]) -> Option<Shop> {
        let mut cells = self.cells.clone();
        for ((column, _), text) in self.blanks.iter().zip(filling) {
            cells = cells.with(column.name, text);
        }
        cells.read()
    }

    /// Rules of the sheet bar the part whatever its blanks hold.
    pub fn is_barred(&self, rows: &Eligible<'_>) -> bool {
        let last = |(_, fills): &(_, Vec<Fill>)| {
            fills.iter().flat_map(Fill::samples).last().unwrap_or_default()
        };
        let filling: Filling = self.blanks.iter().map(last).collect();
        let Some(shop) = self.filled(&filling) else { return false };
        // The shop holds no other part: names that mean nothing in it mean others.
        let alone = eligible(rows.sheet, &shop, true, &mut Vec::new());
        let counts = [
            alone.zeners.len(),
            alone.bias_lines.len(),
            alone.amplifiers.len(),
            alone.divider_lines.len(),
            alone.pots.len(),
            alone.transistors.len(),
            alone.heatsinks.len(),
        ];
        counts.iter().all(|n| *n == 0) && alone.unproven.is_empty()
    }

    /// The ways of filling the blanks that are tried: a few values of each, the ends among them; with one
    /// blank whose best value may lie anywhere, every value of its grid.
    pub fn ways(&self) -> Vec<Filling> {
        // Where checks are monotone the best value of a blank is an end of what is plausible.
        let is_best_at_an_end = self.slots.iter().all(|slot| is_monotone(*slot));
        let whole_grid = self.blanks.len() == 1 && !is_best_at_an_end;
        let of = |fill: &Fill| if whole_grid { fill.texts() } else { fill.samples() };
        let options: Vec<Vec<String>> =
            self.blanks.iter().map(|(_, fills)| fills.iter().flat_map(of).collect()).collect();
        ways(&options).take(MOST_WAYS).collect()
    }
}

/// Every choice of one text of each list, the last list changing fastest.
fn ways(options: &[Vec<String>]) -> impl Iterator<Item = Filling> {
    let count = options.iter().map(Vec::len).fold(1usize, usize::saturating_mul);
    (0..count).map(move |mut n| {
        let mut way: Filling = options
            .iter()
            .rev()
            .filter_map(|texts| {
                let text = texts.get(n % texts.len())?.clone();
                n /= texts.len();
                Some(text)
            })
            .collect();
        way.reverse();
        way
    })
}

/// Every package that a transistor of the problem has or a heatsink of it fits.
pub(super) fn packages(problem: &Problem<'_>) -> Vec<String> {
    let of_transistors = problem.transistors.iter().filter_map(|t| t.package);
    let of_sinks = problem.heatsinks.iter().flat_map(|s| s.fits.iter().copied());
    let all: BTreeSet<&str> = of_transistors.chain(of_sinks).collect();
    all.into_iter().map(str::to_owned).collect()
}

/// The index of a part's file in its catalog.
fn file_number(shop: &Shop, part: &UnprovenPart<'_>) -> Option<u16> {
    let files = match part.kind {
        Kind::Zeners => &shop.zeners.files,
        Kind::Opamps => &shop.opamps.files,
        Kind::Transistors => &shop.transistors.files,
        Kind::Resistors => &shop.resistors.files,
        Kind::Pots => &shop.pots.files,
        Kind::Heatsinks => &shop.heatsinks.files,
    };
    u16::try_from(files.iter().position(|file| file.name == part.file)?).ok()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_way_comes_once() {
        let list = |texts: &[&str]| texts.iter().map(|t| (*t).to_owned()).collect::<Vec<_>>();
        let all: Vec<String> =
            ways(&[list(&["a", "b"]), list(&["1", "2", "3"])]).map(|w| w.concat()).collect();
        assert_eq!(all, ["a1", "a2", "a3", "b1", "b2", "b3"]);
        assert_eq!(ways(&[list(&["a"]), Vec::new()]).count(), 0);
    }
}
