//! Cells of a part's row that would let it in, whatever stands beside it.

use crate::company::Company;
use crate::filled::{Cells, put};
use crate::limits::Limits;
use crate::part::NamedMiss;
use crate::probe::name_at;
use crate::scout::find;
use catalog::Kind;
use catalog::column::{Cell, Column};
use circuit::slot::Slot;
use quantity::notation::{Unit, parse};
use rayon::prelude::*;
use select::problem::Problem;

/// A cell that would let a part in.
#[derive(Debug, Clone, PartialEq)]
pub struct CellCure {
    /// Its column.
    pub column: &'static str,
    /// The unit of its figures.
    pub unit: Unit,
    /// What it holds now.
    pub from: f64,
    /// The figure with which every check holds, in the unit of the cell, rounded to the side that holds.
    pub value: f64,
    /// No figure that is nearer does. Elsewhere a narrow range that is nearer may be missed.
    pub is_nearest: bool,
    /// The parts of a candidate that it would then be in.
    pub company: NamedMiss,
}

/// Columns that say nothing of the circuit.
const BESIDE_THE_CIRCUIT: [&str; 3] = ["stock", "lead_weeks", "cost"];

/// A figure is narrowed down by halving so often: to ten digits of the range it began with.
const HALVINGS: usize = 34;

/// Every check, cost, loss and stress is monotone in each figure of the slot's part by itself (model page,
/// section 6). The figures of other parts move the values that are chosen.
pub(crate) const fn is_monotone(slot: Slot) -> bool {
    matches!(slot, Slot::Amplifier | Slot::Pass | Slot::Heatsink)
}

/// For each column with a single figure, a figure on the way from the row's own to an end of what is
/// plausible with which the part would be in a candidate, values chosen again, and short of which it
/// would not.
///
/// Where checks are monotone in the figure it is the nearest there is. Elsewhere a narrow range that is
/// nearer may be missed.
pub(crate) fn cell_cures(
    cells: &Cells,
    kind: Kind,
    slot: Slot,
    pinned: &Problem<'_>,
    boards: u64,
) -> Vec<CellCure> {
    let columns: Vec<&'static Column> = kind.columns().iter().collect();
    let cure = |column: &&'static Column| CellIn { cells, column, slot, pinned, boards }.cure();
    columns.par_iter().filter_map(cure).collect()
}

struct CellIn<'c, 'p> {
    cells: &'c Cells,
    column: &'static Column,
    slot: Slot,
    pinned: &'c Problem<'p>,
    boards: u64,
}

impl CellIn<'_, '_> {
    fn cure(&self) -> Option<CellCure> {
        let Cell::Number(figure) = self.column.cell else { return None };
        if BESIDE_THE_CIRCUIT.contains(&self.column.name) {
            return None;
        }
        let from = parse(self.cells.text(self.column.name), figure.unit).ok()?;
        let (low, high) = self.column.plausible?;
        for end in [low, high] {
            if end == from || !figure.range.holds(end) || self.admits(end).is_none() {
                continue;
            }
            let (mut out, mut within) = (from, end);
            for _ in 0..HALVINGS {
                let middle = out + (within - out) / 2.0;
                if self.admits(middle).is_some() { within = middle } else { out = middle }
            }
            let (value, company) = self.rounded(out, within)?;
            let (column, unit) = (self.column.name, figure.unit);
            let is_nearest = is_monotone(self.slot);
            return Some(CellCure { column, unit, from, value, is_nearest, company });
        }
        None
    }

    /// Few digits, on the side that holds.
    fn rounded(&self, out: f64, within: f64) -> Option<(f64, NamedMiss)> {
        for digits in 4..10 {
            let value = crate::change::round_toward(within, digits, within > out);
            if (value - within).abs() <= 0.001 * within.abs()
                && let Some(company) = self.admits(value)
            {
                return Some((value, company));
            }
        }
        Some((within, self.admits(within)?))
    }

    /// A candidate with the part, its cell holding this figure.
    fn admits(&self, value: f64) -> Option<NamedMiss> {
        let row = self.cells.with(self.column.name, &format!("{value:?}")).read()?;
        let problem = put(self.pinned, self.slot, Some(0), &row, self.boards)?;
        let places = find(&Company::new(&problem), &Limits::ALL)?;
        let name = |slot: Slot| name_at(&problem, slot, places[slot as usize]? as usize);
        Some(NamedMiss { parts: Slot::ALL.map(name), failures: Vec::new() })
    }
}
