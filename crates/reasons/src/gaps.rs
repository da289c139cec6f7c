//! Blank cells that are worth filling: unproven parts that could reach the list, and what each blank
//! cell would have to hold for that.
//!
//! Cells are filled in one after another and the row is read as the catalog reads it; the search says
//! whether the part is then on the list. Nothing is concluded from one value to another but between
//! two neighbours of a grid, of which one lets the part on the list and one does not: there the end is
//! narrowed down, and is tried on both of its sides.

use crate::fill::{Fill, fills_of};
use crate::filled::{Cells, slots_of};
use crate::ranks::Standing;
use catalog::column::Column;
use catalog::{Kind, Shop};
use circuit::slot::Slot;
use eligible::{Eligible, UnprovenPart, eligible};
use rayon::prelude::*;
use select::SearchError;
use select::problem::Problem;

/// An unproven part that could reach the list.
#[derive(Debug, Clone, PartialEq)]
pub struct Gap {
    /// Its catalog.
    pub kind: Kind,
    /// The file within the folder.
    pub file: String,
    /// The line on which its row starts.
    pub line: u32,
    /// Its maker; may be empty.
    pub maker: String,
    /// Its name.
    pub part: String,
    /// The best rank that was found for it, from 1.
    pub rank: usize,
    /// What each blank cell would have to hold; with several blanks each with the others at
    /// the most favourable of the plausible values that were tried.
    pub cells: Vec<CellGap>,
}

/// A blank cell of a part that could reach the list.
#[derive(Debug, Clone, PartialEq)]
pub struct CellGap {
    /// The column.
    pub column: &'static str,
    /// What was filled in.
    pub fill: Fill,
    /// What the cell would have to hold.
    pub wanted: Wanted,
    /// The other blanks, each with the text that was filled in meanwhile.
    pub beside: Vec<(&'static str, String)>,
}

/// What a cell would have to hold.
#[derive(Debug, Clone, PartialEq)]
pub enum Wanted {
    /// Any of these texts; others that were tried do not do.
    OneOf(Vec<String>),
    /// A figure in one of these spans.
    Spans(Vec<Span>),
}

/// A span of figures that let a part on the list.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Span {
    /// The lower end; None: as low as is plausible.
    pub low: Option<SpanEnd>,
    /// The upper end; None: as high as is plausible.
    pub high: Option<SpanEnd>,
}

/// An end of a span.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SpanEnd {
    /// A figure with which the part is on the list, rounded.
    pub value: f64,
    /// The furthest figure with which it is.
    pub holds: f64,
    /// The nearest figure with which it is not: apart from `holds` by less than ten digits show.
    pub fails: f64,
}

/// What was found.
#[derive(Debug, Clone, PartialEq)]
pub struct Gaps {
    /// Rows of the list.
    pub top: usize,
    /// The parts that could reach it, by the best rank, then by file and line.
    pub gaps: Vec<Gap>,
    /// Unproven parts that were looked at.
    pub looked_at: usize,
    /// Those that no plausible value that was tried lets on the list.
    pub out_of_reach: usize,
    /// Those that status, stock, bans or pins bar all the same.
    pub barred: usize,
    /// Those that were not looked at, because there are more than [`MOST_PARTS`].
    pub left: usize,
}

/// At most so many unproven parts are looked at, in the order in which results list them.
pub const MOST_PARTS: usize = 400;

/// At most so many ways of filling several blanks are tried.
const MOST_WAYS: usize = 500;

/// The span between two values of a grid is taken apart in so many parts at once, so often at most.
const PARTS: u32 = 32;
const MOST_NARROWINGS: usize = 12;

/// The unproven parts of a sheet that could be among the first `top` of its list.
///
/// # Errors
/// What the search gives up with.
pub fn gaps(rows: &Eligible<'_>, top: usize) -> Result<Gaps, SearchError> {
    let problem = rows.problem();
    let standing = Standing::new(&problem, rows.sheet.boards, top)?;
    let mut found = Gaps {
        top,
        gaps: Vec::new(),
        looked_at: rows.unproven.len().min(MOST_PARTS),
        out_of_reach: 0,
        barred: 0,
        left: rows.unproven.len().saturating_sub(MOST_PARTS),
    };
    let mut open = Vec::new();
    for part in rows.unproven.iter().take(MOST_PARTS) {
        match Row::of(part, rows, &standing, &problem) {
            Some(row) if row.is_barred(rows) => found.barred += 1,
            Some(row) => open.push((part, row)),
            None => found.out_of_reach += 1,
        }
    }
    // All parts of a kind in one search: most of them are out of reach.
    let mut best: Vec<Option<(usize, Filling)>> = Vec::new();
    for of_kind in open.chunk_by(|(a, _), (b, _)| a.kind == b.kind) {
        let rows: Vec<&Row<'_, '_>> = of_kind.iter().map(|(_, row)| row).collect();
        best.extend(most_favourable(&rows)?);
    }
    let gap =
        |((part, row), best): (&(&UnprovenPart<'_>, Row<'_, '_>), &Option<(usize, Filling)>)| {
            match best {
                Some((rank, filling)) => row.gap(part, *rank, filling),
                None => Ok(None),
            }
        };
    let gaps: Result<Vec<Option<Gap>>, SearchError> = open.par_iter().zip(&best).map(gap).collect();
    for gap in gaps? {
        match gap {
            Some(gap) => found.gaps.push(gap),
            None => found.out_of_reach += 1,
        }
    }
    found
        .gaps
        .sort_by(|a, b| (a.rank, a.kind, &a.file, a.line).cmp(&(b.rank, b.kind, &b.file, b.line)));
    Ok(found)
}

/// A row with blanks, beside the list that it may reach.
struct Row<'r, 'p> {
    cells: Cells,
    slots: &'static [Slot],
    blanks: Vec<(&'static Column, Vec<Fill>)>,
    standing: &'r Standing<'r, 'p>,
}

/// Texts for the blanks, in the order of their columns.
type Filling = Vec<String>;

impl<'r, 'p> Row<'r, 'p> {
    /// None where a blank is one that nothing can be tried for.
    fn of(
        part: &UnprovenPart<'_>,
        rows: &Eligible<'_>,
        standing: &'r Standing<'r, 'p>,
        problem: &Problem<'p>,
    ) -> Option<Self> {
        let file = file_number(rows.shop, part)?;
        let blanks = part
            .lacks
            .iter()
            .map(|name| {
                let column = part.kind.column(name)?;
                let fills = fills_of(column, problem);
                (!fills.is_empty()).then_some((column, fills))
            })
            .collect::<Option<Vec<_>>>()?;
        Some(Self {
            cells: Cells::of(rows.shop, part.kind, file, part.line),
            slots: slots_of(part.kind),
            blanks,
            standing,
        })
    }

    /// The row with its blanks filled, as a shop that holds it alone.
    fn filled(&self, filling: &[String]) -> Option<Shop> {
        let mut cells = self.cells.clone();
        for ((column, _), text) in self.blanks.iter().zip(filling) {
            cells = cells.with(column.name, text);
        }
        cells.read()
    }

    /// Rules of the sheet bar the part whatever its blanks hold.
    fn is_barred(&self, rows: &Eligible<'_>) -> bool {
        let first: Filling = self
            .blanks
            .iter()
            .map(|(_, fills)| {
                let samples = fills.iter().flat_map(Fill::samples);
                samples.last().unwrap_or_default()
            })
            .collect();
        let Some(shop) = self.filled(&first) else { return false };
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

    /// The best rank of the part for each way of filling its blanks, from 1; None where it is not on
    /// the list.
    fn ranks(&self, fillings: &[Filling]) -> Result<Vec<Option<usize>>, SearchError> {
        let shops: Vec<Option<Shop>> = fillings.par_iter().map(|f| self.filled(f)).collect();
        match self.slots {
            [slot] => self.standing.ranks_in(*slot, &shops),
            // A line may serve in both of its slots at once, so each is asked for by itself.
            slots => shops
                .iter()
                .map(|shop| match shop {
                    Some(shop) => self.standing.rank_alone(slots, shop),
                    None => Ok(None),
                })
                .collect(),
        }
    }

    /// What each blank would have to hold, beside the filling with the best rank.
    fn gap(
        &self,
        part: &UnprovenPart<'_>,
        mut rank: usize,
        best: &[String],
    ) -> Result<Option<Gap>, SearchError> {
        let mut cells = Vec::new();
        for (n, (column, fills)) in self.blanks.iter().enumerate() {
            let mut beside: Vec<(&'static str, String)> = Vec::new();
            for (other, (column, _)) in self.blanks.iter().enumerate() {
                if other != n {
                    beside.push((column.name, best[other].clone()));
                }
            }
            for fill in fills {
                let Some(wanted) = self.wanted(n, fill, best, &mut rank)? else { continue };
                cells.push(CellGap { column: column.name, fill: fill.clone(), wanted, beside });
                break;
            }
        }
        Ok((!cells.is_empty()).then(|| Gap {
            kind: part.kind,
            file: part.file.to_owned(),
            line: part.line,
            maker: part.maker.to_owned(),
            part: part.part.to_owned(),
            rank,
            cells,
        }))
    }

    /// The ways of filling the blanks that are tried: with one blank every value of its grid, with
    /// several a few values of each.
    fn ways(&self) -> Vec<Filling> {
        let options: Vec<Vec<String>> = self
            .blanks
            .iter()
            .map(|(_, fills)| {
                let of = |fill: &Fill| {
                    if self.blanks.len() == 1 { fill.texts() } else { fill.samples() }
                };
                fills.iter().flat_map(of).collect()
            })
            .collect();
        ways(&options).take(MOST_WAYS).collect()
    }

    /// What the blank at a place would have to hold, the others as in `filling`.
    fn wanted(
        &self,
        place: usize,
        fill: &Fill,
        filling: &[String],
        best_rank: &mut usize,
    ) -> Result<Option<Wanted>, SearchError> {
        let mut on_list = |texts: &[String]| -> Result<Vec<bool>, SearchError> {
            let with = |text: &String| {
                let mut with = filling.to_vec();
                if let Some(cell) = with.get_mut(place) {
                    cell.clone_from(text);
                }
                with
            };
            let ranks = self.ranks(&texts.iter().map(with).collect::<Vec<_>>())?;
            *best_rank = ranks.iter().flatten().copied().fold(*best_rank, usize::min);
            Ok(ranks.iter().map(Option::is_some).collect())
        };
        let Some(grid) = fill.grid() else {
            let texts = fill.texts();
            let held = on_list(&texts)?;
            let held: Vec<String> =
                texts.into_iter().zip(held).filter(|(_, on)| *on).map(|(text, _)| text).collect();
            return Ok((!held.is_empty()).then_some(Wanted::OneOf(held)));
        };
        let mut at = |values: &[f64]| {
            on_list(&values.iter().map(|value| fill.text(*value)).collect::<Vec<_>>())
        };
        let known: Vec<(f64, bool)> = grid.iter().copied().zip(at(&grid)?).collect();
        let mut spans = Vec::new();
        let mut low: Option<Option<SpanEnd>> = known.first().filter(|(_, on)| *on).map(|_| None);
        for pair in known.windows(2) {
            let ((a, a_on), (b, b_on)) = (pair[0], pair[1]);
            match (a_on, b_on) {
                (false, true) => low = Some(Some(end(b, a, &mut at)?)),
                (true, false) => {
                    let high = Some(end(a, b, &mut at)?);
                    spans.extend(low.take().map(|low| Span { low, high }));
                }
                _ => {}
            }
        }
        spans.extend(low.map(|low| Span { low, high: None }));
        Ok((!spans.is_empty()).then_some(Wanted::Spans(spans)))
    }
}

/// For rows of one kind the filling with the best rank among those that are tried, and that rank.
fn most_favourable(rows: &[&Row<'_, '_>]) -> Result<Vec<Option<(usize, Filling)>>, SearchError> {
    let ways: Vec<Vec<Filling>> = rows.iter().map(|row| row.ways()).collect();
    let mut ranks = match rows.first() {
        Some(first) if first.slots.len() == 1 => {
            let all: Vec<(&&Row<'_, '_>, &Filling)> = rows
                .iter()
                .zip(&ways)
                .flat_map(|(row, ways)| ways.iter().map(move |w| (row, w)))
                .collect();
            let shops: Vec<Option<Shop>> =
                all.par_iter().map(|(row, way)| row.filled(way)).collect();
            first.standing.ranks_in(first.slots[0], &shops)?
        }
        _ => {
            let of_row = |(row, ways): (&&Row<'_, '_>, &Vec<Filling>)| row.ranks(ways);
            let each: Result<Vec<_>, SearchError> = rows.iter().zip(&ways).map(of_row).collect();
            each?.concat()
        }
    }
    .into_iter();
    let best = |ways: Vec<Filling>| {
        let mut best: Option<(usize, Filling)> = None;
        for way in ways {
            if let Some(rank) = ranks.next().flatten()
                && best.as_ref().is_none_or(|(known, _)| rank < *known)
            {
                best = Some((rank, way));
            }
        }
        best
    };
    Ok(ways.into_iter().map(best).collect())
}

/// The end of a span between a figure that holds and one that fails.
fn end(
    mut holds: f64,
    mut fails: f64,
    at: &mut impl FnMut(&[f64]) -> Result<Vec<bool>, SearchError>,
) -> Result<SpanEnd, SearchError> {
    for _ in 0..MOST_NARROWINGS {
        if (holds - fails).abs() <= 1e-10 * holds.abs().max(fails.abs()) {
            break;
        }
        let step = (fails - holds) / f64::from(PARTS);
        let between: Vec<f64> = (1..PARTS)
            .map(|n| holds + f64::from(n) * step)
            .filter(|x| *x != holds && *x != fails)
            .collect();
        // From the side that holds: on to the last figure before the first that fails.
        let on = at(&between)?;
        let place = on.iter().position(|on| !on).unwrap_or(on.len());
        let last = place.checked_sub(1).and_then(|n| between.get(n)).copied();
        let first = between.get(place).copied();
        if last.is_none() && first.is_none() {
            break;
        }
        (holds, fails) = (last.unwrap_or(holds), first.unwrap_or(fails));
    }
    let upwards = holds > fails;
    let rounded = [4, 6, 8].map(|digits| crate::change::round_toward(holds, digits, upwards));
    let on = at(&rounded)?;
    let value = rounded.into_iter().zip(on).find(|(_, on)| *on).map_or(holds, |(value, _)| value);
    Ok(SpanEnd { value, holds, fails })
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

/// The index of a part's file in its catalog.
fn file_number(shop: &Shop, part: &UnprovenPart<'_>) -> Option<u16> {
    let names: Vec<&str> = match part.kind {
        Kind::Zeners => shop.zeners.files.iter().map(|f| f.name.as_str()).collect(),
        Kind::Opamps => shop.opamps.files.iter().map(|f| f.name.as_str()).collect(),
        Kind::Transistors => shop.transistors.files.iter().map(|f| f.name.as_str()).collect(),
        Kind::Resistors => shop.resistors.files.iter().map(|f| f.name.as_str()).collect(),
        Kind::Pots => shop.pots.files.iter().map(|f| f.name.as_str()).collect(),
        Kind::Heatsinks => shop.heatsinks.files.iter().map(|f| f.name.as_str()).collect(),
    };
    u16::try_from(names.iter().position(|name| *name == part.file)?).ok()
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
