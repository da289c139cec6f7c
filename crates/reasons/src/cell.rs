//! Cells of a part's row that would let it in, its company staying as it is.

use crate::filled::{Cells, put};
use crate::part::NamedMiss;
use crate::probe::keep_only;
use crate::survey::Miss;
use catalog::Kind;
use catalog::column::{Cell, Column};
use circuit::slot::Slot;
use quantity::notation::{Unit, parse};
use select::SearchError;
use select::problem::Problem;
use select::ranking::{NO_SPREAD, shortlist};

/// A cell that would let a part in.
#[derive(Debug, Clone, PartialEq)]
pub struct CellCure {
    /// Its column.
    pub column: &'static str,
    /// The unit of its figures.
    pub unit: Unit,
    /// What it holds now.
    pub from: f64,
    /// The figure with which every check holds, in the unit of the cell.
    pub value: f64,
    /// The other parts.
    pub company: NamedMiss,
}

/// Columns that say nothing of the circuit.
const BESIDE_THE_CIRCUIT: [&str; 3] = ["stock", "lead_weeks", "cost"];

/// A figure is narrowed down by halving so often: to ten digits of the range it began with.
const HALVINGS: usize = 34;

/// For each column with a single figure, the figure nearest to the row's own with which the part,
/// beside the other parts of one of `misses`, would be a candidate, values chosen again. Of several
/// misses the one that asks least of the cell.
pub(crate) fn cures_in_company(
    cells: &Cells,
    kind: Kind,
    slot: Slot,
    problem: &Problem<'_>,
    misses: &[Miss],
    boards: u64,
) -> Result<Vec<CellCure>, SearchError> {
    let mut cures: Vec<CellCure> = Vec::new();
    for miss in misses {
        let company = NamedMiss::of(miss, problem);
        let mut alone = problem.clone();
        for slot in Slot::ALL {
            if let Some(name) = &company.parts[slot as usize] {
                keep_only(&mut alone, slot, &name.maker, &name.part);
            }
        }
        if company.parts[Slot::Heatsink as usize].is_none() {
            alone.heatsinks.clear();
            alone.may_go_unmounted = problem.may_go_unmounted;
        }
        for column in kind.columns() {
            let cell = CellIn { cells, column, slot, alone: &alone, boards };
            let Some(cure) = cell.cure(&company)? else { continue };
            let effort = |c: &CellCure| (c.value - c.from).abs();
            match cures.iter_mut().find(|known| known.column == cure.column) {
                Some(known) if effort(known) <= effort(&cure) => {}
                Some(known) => *known = cure,
                None => cures.push(cure),
            }
        }
    }
    Ok(cures)
}

struct CellIn<'c, 'p> {
    cells: &'c Cells,
    column: &'static Column,
    slot: Slot,
    alone: &'c Problem<'p>,
    boards: u64,
}

impl CellIn<'_, '_> {
    fn cure(&self, company: &NamedMiss) -> Result<Option<CellCure>, SearchError> {
        let Cell::Number(figure) = self.column.cell else { return Ok(None) };
        if BESIDE_THE_CIRCUIT.contains(&self.column.name) {
            return Ok(None);
        }
        let Ok(from) = parse(self.cells.text(self.column.name), figure.unit) else {
            return Ok(None);
        };
        let Some((low, high)) = self.column.plausible else { return Ok(None) };
        for end in [low, high] {
            if end == from || !figure.range.holds(end) || !self.admits(end)? {
                continue;
            }
            let (mut out, mut within) = (from, end);
            for _ in 0..HALVINGS {
                let middle = out + (within - out) / 2.0;
                if self.admits(middle)? { within = middle } else { out = middle }
            }
            let value = self.rounded(out, within)?;
            let (column, unit) = (self.column.name, figure.unit);
            return Ok(Some(CellCure { column, unit, from, value, company: company.clone() }));
        }
        Ok(None)
    }

    /// Few digits, on the side that holds.
    fn rounded(&self, out: f64, within: f64) -> Result<f64, SearchError> {
        for digits in 4..10 {
            let value = crate::change::round_toward(within, digits, within > out);
            if self.admits(value)? && (value - within).abs() <= 0.001 * within.abs() {
                return Ok(value);
            }
        }
        Ok(within)
    }

    fn admits(&self, value: f64) -> Result<bool, SearchError> {
        let row = self.cells.with(self.column.name, &format!("{value:?}")).read();
        let with =
            row.as_ref().and_then(|row| put(self.alone, self.slot, Some(0), row, self.boards));
        match with {
            Some(problem) => Ok(!shortlist(&problem, 1, &NO_SPREAD)?.is_empty()),
            None => Ok(false),
        }
    }
}
