//! Blank cells that are worth filling: unproven parts that could reach the list, and what each blank
//! cell would have to hold for that.
//!
//! Cells are filled in and the row is read as the catalog reads it; the search says whether the part is
//! then on the list. Nothing is concluded from one value to another but between two neighbours of a
//! grid, of which one lets the part on the list and one does not: there the end is narrowed down, and
//! is tried on both of its sides.
//!
//! | module | what it holds |
//! |---|---|
//! | `row` | a row with blanks, and the ways of filling them that are tried |
//! | `narrow` | what each blank would have to hold |
//!
//! Rows of one kind are always tried together, in one search that ends where the list does: most are out
//! of reach, and to see that costs no more than the bounds of the search.

mod narrow;
mod row;

use crate::fill::Fill;
use crate::ranks::Standing;
use catalog::Kind;
use eligible::{Eligible, UnprovenPart};
use narrow::Reached;
use rayon::prelude::*;
use row::{Filling, Row};
use select::SearchError;

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
}

/// The unproven parts of a sheet that could be among the first `top` of its list.
///
/// # Errors
/// What the search gives up with.
pub fn gaps<'r>(rows: &Eligible<'r>, top: usize) -> Result<Gaps, SearchError> {
    let problem = rows.problem();
    let standing = Standing::new(&problem, rows.sheet.boards, top)?;
    let packages = row::packages(&problem);
    let looked_at = rows.unproven.len();
    let mut found = Gaps { top, gaps: Vec::new(), looked_at, out_of_reach: 0, barred: 0 };
    for of_kind in rows.unproven.chunk_by(|a, b| a.kind == b.kind) {
        let read = |part: &UnprovenPart<'r>| {
            let row = Row::of(part, rows, problem.rail, &packages)?;
            Some((part.clone(), row.is_barred(rows), row))
        };
        let read: Vec<(UnprovenPart<'r>, bool, Row)> =
            of_kind.par_iter().filter_map(read).collect();
        found.barred += read.iter().filter(|(_, is_barred, _)| *is_barred).count();
        let open: Vec<(UnprovenPart<'r>, Row)> = read
            .into_iter()
            .filter(|(_, is_barred, _)| !is_barred)
            .map(|(part, _, row)| (part, row))
            .collect();
        let best = most_favourable(&open, &standing)?;
        let reached = open
            .into_iter()
            .zip(best)
            .filter_map(|((part, row), best)| Some(Reached::new(part, row, best?)))
            .collect();
        found.gaps.extend(narrow::gaps_of(reached, &standing)?);
    }
    found.out_of_reach = looked_at - found.barred - found.gaps.len();
    found
        .gaps
        .sort_by(|a, b| (a.rank, a.kind, &a.file, a.line).cmp(&(b.rank, b.kind, &b.file, b.line)));
    Ok(found)
}

/// For rows of one kind the filling with the best rank among those that are tried, with that rank; None
/// where none lets the part on the list.
fn most_favourable(
    open: &[(UnprovenPart<'_>, Row)],
    standing: &Standing<'_, '_>,
) -> Result<Vec<Option<(usize, Filling)>>, SearchError> {
    let Some((_, first)) = open.first() else { return Ok(Vec::new()) };
    let ways: Vec<Vec<Filling>> = open.iter().map(|(_, row)| row.ways()).collect();
    let each: Vec<(&Row, &Filling)> = open
        .iter()
        .zip(&ways)
        .flat_map(|((_, row), ways)| ways.iter().map(move |way| (row, way)))
        .collect();
    let read = |n: usize| each.get(n).and_then(|(row, way)| row.filled(way));
    let mut ranks = standing.ranks(first.slots, each.len(), read)?.into_iter();
    let best = |ways: &Vec<Filling>| {
        let ranked = ways.iter().zip(ranks.by_ref());
        // Of equal ranks the first.
        let best =
            ranked.filter_map(|(way, rank)| Some((rank?, way))).min_by_key(|(rank, _)| *rank);
        best.map(|(rank, way)| (rank, way.clone()))
    };
    Ok(ways.iter().map(best).collect())
}
