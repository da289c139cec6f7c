//! Blank cells that are worth filling: unproven parts that could reach the list, and what each blank
//! cell would have to hold for that.
//!
//! Cells are filled in one after another and the row is read as the catalog reads it; the search says
//! whether the part is then on the list. Nothing is concluded from one value to another but between
//! two neighbours of a grid, of which one lets the part on the list and one does not: there the end is
//! narrowed down by halving, and is tried on both of its sides.

use crate::fill::{Fill, fills_of};
use crate::filled::{Cells, put, slots_of};
use crate::probe::keep_only;
use catalog::column::Column;
use catalog::{Kind, Shop};
use circuit::slot::Slot;
use eligible::{Eligible, UnprovenPart, eligible};
use select::SearchError;
use select::problem::Problem;
use select::ranking::{NO_SPREAD, shortlist};

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

/// Halvings of the span between two values of a grid.
const HALVINGS: usize = 60;

/// The unproven parts of a sheet that could be among the first `top` of its list.
///
/// # Errors
/// What the search gives up with.
pub fn gaps(rows: &Eligible<'_>, top: usize) -> Result<Gaps, SearchError> {
    let problem = rows.problem();
    let list = shortlist(&problem, top, &NO_SPREAD)?;
    // A part on the list has a score no worse than the last row's.
    let worst_score = (list.len() == top).then(|| list.last().map(|c| c.score)).flatten();
    let mut found = Gaps {
        top,
        gaps: Vec::new(),
        looked_at: rows.unproven.len().min(MOST_PARTS),
        out_of_reach: 0,
        barred: 0,
        left: rows.unproven.len().saturating_sub(MOST_PARTS),
    };
    for part in rows.unproven.iter().take(MOST_PARTS) {
        let Some(row) = Row::of(part, rows, &problem, top, worst_score) else {
            found.out_of_reach += 1;
            continue;
        };
        if row.is_barred(rows) {
            found.barred += 1;
            continue;
        }
        match row.gap(part)? {
            Some(gap) => found.gaps.push(gap),
            None => found.out_of_reach += 1,
        }
    }
    found
        .gaps
        .sort_by(|a, b| (a.rank, a.kind, &a.file, a.line).cmp(&(b.rank, b.kind, &b.file, b.line)));
    Ok(found)
}

/// A row with blanks, beside what may be chosen.
struct Row<'r, 'p> {
    cells: Cells,
    slots: &'static [Slot],
    blanks: Vec<(&'static Column, Vec<Fill>)>,
    problem: &'r Problem<'p>,
    boards: u64,
    top: usize,
    worst_score: Option<f64>,
}

/// Texts for the blanks, in the order of their columns.
type Filling = Vec<String>;

impl<'r, 'p> Row<'r, 'p> {
    /// None where a blank is one that nothing can be tried for.
    fn of(
        part: &UnprovenPart<'_>,
        rows: &Eligible<'_>,
        problem: &'r Problem<'p>,
        top: usize,
        worst_score: Option<f64>,
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
            problem,
            boards: rows.sheet.boards,
            top,
            worst_score,
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

    /// The best rank of the part with its blanks filled, from 1; None where it is not on the list.
    fn rank(&self, filling: &[String]) -> Result<Option<usize>, SearchError> {
        let Some(shop) = self.filled(filling) else { return Ok(None) };
        let mut with = self.problem.clone();
        for &slot in self.slots {
            let Some(put) = put(&with, slot, None, &shop, self.boards) else { return Ok(None) };
            with = put;
        }
        let place_in = |slot: Slot| match slot {
            Slot::Zener => with.zeners.len(),
            Slot::BiasLine => with.bias_lines.len(),
            Slot::Amplifier => with.amplifiers.len(),
            Slot::DividerLine => with.divider_lines.len(),
            Slot::Pot => with.pots.len(),
            Slot::Pass => with.transistors.len(),
            Slot::Heatsink => with.heatsinks.len(),
        };
        if !self.may_reach(&with, &shop)? {
            return Ok(None);
        }
        let list = shortlist(&with, self.top, &NO_SPREAD)?;
        let uses_it = |candidate: &select::candidate::Candidate| {
            self.slots.iter().any(|&slot| candidate.place(slot) == place_in(slot).checked_sub(1))
        };
        Ok(list.iter().position(uses_it).map(|place| place + 1))
    }

    /// The best candidate with the part has a score with which it may be on the list. Much is seen
    /// here without searching among everything.
    fn may_reach(&self, with: &Problem<'_>, shop: &Shop) -> Result<bool, SearchError> {
        let Some(worst_score) = self.worst_score else { return Ok(true) };
        for &slot in self.slots {
            let mut pinned = with.clone();
            let (maker, part) = names_in(shop, slot);
            keep_only(&mut pinned, slot, maker, part);
            let best = shortlist(&pinned, 1, &NO_SPREAD)?;
            if best.first().is_some_and(|best| best.score <= worst_score * (1.0 + 1e-9)) {
                return Ok(true);
            }
        }
        Ok(false)
    }

    fn gap(&self, part: &UnprovenPart<'_>) -> Result<Option<Gap>, SearchError> {
        let Some((mut rank, best)) = self.most_favourable()? else { return Ok(None) };
        let mut cells = Vec::new();
        for (n, (column, fills)) in self.blanks.iter().enumerate() {
            let mut beside: Vec<(&'static str, String)> = Vec::new();
            for (other, (column, _)) in self.blanks.iter().enumerate() {
                if other != n {
                    beside.push((column.name, best[other].clone()));
                }
            }
            for fill in fills {
                let Some(wanted) = self.wanted(n, fill, &best, &mut rank)? else { continue };
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

    /// The filling with the best rank among those that are tried, and that rank. With one blank every
    /// value of its grid is tried, with several a few values of each.
    fn most_favourable(&self) -> Result<Option<(usize, Filling)>, SearchError> {
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
        let mut best: Option<(usize, Filling)> = None;
        for way in ways(&options).take(MOST_WAYS) {
            if let Some(rank) = self.rank(&way)?
                && best.as_ref().is_none_or(|(known, _)| rank < *known)
            {
                best = Some((rank, way));
            }
        }
        Ok(best)
    }

    /// What the blank at a place would have to hold, the others as in `filling`.
    fn wanted(
        &self,
        place: usize,
        fill: &Fill,
        filling: &[String],
        best_rank: &mut usize,
    ) -> Result<Option<Wanted>, SearchError> {
        let mut on_list = |text: String| -> Result<bool, SearchError> {
            let mut with = filling.to_vec();
            if let Some(cell) = with.get_mut(place) {
                *cell = text;
            }
            let rank = self.rank(&with)?;
            *best_rank = rank.map_or(*best_rank, |rank| rank.min(*best_rank));
            Ok(rank.is_some())
        };
        let Some(grid) = fill.grid() else {
            let mut held = Vec::new();
            for text in fill.texts() {
                if on_list(text.clone())? {
                    held.push(text);
                }
            }
            return Ok((!held.is_empty()).then_some(Wanted::OneOf(held)));
        };
        let mut at = |value: f64| on_list(fill.text(value));
        let known: Vec<(f64, bool)> = grid
            .iter()
            .map(|&value| Ok((value, at(value)?)))
            .collect::<Result<_, SearchError>>()?;
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

/// The end of a span between a figure that holds and one that fails.
fn end(
    mut holds: f64,
    mut fails: f64,
    at: &mut impl FnMut(f64) -> Result<bool, SearchError>,
) -> Result<SpanEnd, SearchError> {
    for _ in 0..HALVINGS {
        let middle = holds + (fails - holds) / 2.0;
        if (holds - fails).abs() <= 1e-10 * holds.abs().max(fails.abs()) || middle == holds {
            break;
        }
        if at(middle)? { holds = middle } else { fails = middle }
    }
    let upwards = holds > fails;
    for digits in [4, 6, 8] {
        let value = crate::change::round_toward(holds, digits, upwards);
        if at(value)? {
            return Ok(SpanEnd { value, holds, fails });
        }
    }
    Ok(SpanEnd { value: holds, holds, fails })
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

/// Maker and part of the one row that a shop holds for a slot.
fn names_in(shop: &Shop, slot: Slot) -> (&str, &str) {
    macro_rules! of {
        ($catalog:ident) => {
            shop.$catalog.rows.first().map(|r| (r.maker.as_str(), r.part.as_str()))
        };
    }
    let names = match slot {
        Slot::Zener => of!(zeners),
        Slot::BiasLine | Slot::DividerLine => of!(resistors),
        Slot::Amplifier => of!(opamps),
        Slot::Pot => of!(pots),
        Slot::Pass => of!(transistors),
        Slot::Heatsink => of!(heatsinks),
    };
    names.unwrap_or_default()
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
