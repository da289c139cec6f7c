//! What each blank of the parts that could reach the list would have to hold.
//!
//! In three steps, each one search for all blanks of a kind: every value of a grid; then, where of two
//! neighbours one lets the part on the list and one does not, values between the two, until ten digits
//! don't tell them apart; then the figure that does, rounded.

use super::row::{Filling, Row};
use super::{CellGap, Gap, Span, SpanEnd, Wanted};
use crate::change::round_toward;
use crate::fill::Fill;
use crate::ranks::Standing;
use eligible::UnprovenPart;
use select::SearchError;

/// The span between two values is taken apart in so many parts at once, so often at most.
const PARTS: u32 = 32;
const MOST_NARROWINGS: usize = 12;

/// Two figures are one where they differ by less than this share.
const APART: f64 = 1e-10;

/// Digits to which ends are rounded; more where fewer would leave the span.
const DIGITS: [i32; 3] = [4, 6, 8];

/// A part that some filling lets on the list.
pub(super) struct Reached<'e> {
    part: UnprovenPart<'e>,
    row: Row,
    /// The best rank so far.
    rank: usize,
    /// The filling with which it was found.
    filling: Filling,
}

impl<'e> Reached<'e> {
    /// With the best rank and its filling.
    pub fn new(part: UnprovenPart<'e>, row: Row, (rank, filling): (usize, Filling)) -> Self {
        Self { part, row, rank, filling }
    }
}

/// A blank of a part, with one thing that can be tried for it.
struct Blank {
    /// The place of the part among those that reach the list.
    part: usize,
    /// The place among the part's blanks.
    place: usize,
    fill: Fill,
    wanted: Found,
}

/// What a blank would have to hold, before ends are narrowed down.
enum Found {
    Texts(Vec<String>),
    Spans(Vec<OpenSpan>),
}

/// A span with ends that lie between two figures; None: all that is plausible.
struct OpenSpan {
    low: Option<Between>,
    high: Option<Between>,
}

/// An end lies between a figure that holds and one that fails.
#[derive(Clone, Copy)]
struct Between {
    holds: f64,
    fails: f64,
}

impl Between {
    fn is_narrow(self) -> bool {
        (self.holds - self.fails).abs() <= APART * self.holds.abs().max(self.fails.abs())
    }

    /// Figures between the two, from the one that holds on.
    fn steps(self) -> Vec<f64> {
        let step = (self.fails - self.holds) / f64::from(PARTS);
        let between = (1..PARTS).map(|n| self.holds + f64::from(n) * step);
        between.filter(|x| *x != self.holds && *x != self.fails).collect()
    }

    /// Nearer together by what was found for its steps: on to the last figure before the first that fails.
    fn narrowed(self, steps: &[f64], on: &[bool]) -> Self {
        let first_failing = on.iter().position(|on| !on).unwrap_or(steps.len());
        let last_holding = first_failing.checked_sub(1).and_then(|n| steps.get(n));
        Self {
            holds: last_holding.copied().unwrap_or(self.holds),
            fails: steps.get(first_failing).copied().unwrap_or(self.fails),
        }
    }
}

/// What the blanks of parts of one kind would have to hold; parts of which no blank by itself is told are
/// left out.
pub(super) fn gaps_of(
    mut parts: Vec<Reached<'_>>,
    standing: &Standing<'_, '_>,
) -> Result<Vec<Gap>, SearchError> {
    let mut blanks = on_grids(&mut parts, standing)?;
    narrow(&mut blanks, &mut parts, standing)?;
    let mut ends = rounded(&blanks, &mut parts, standing)?.into_iter();
    let mut cells: Vec<Vec<CellGap>> = parts.iter().map(|_| Vec::new()).collect();
    for Blank { part, place, fill, wanted } in blanks {
        let (Some(of_part), Some(reached)) = (cells.get_mut(part), parts.get(part)) else {
            continue;
        };
        let wanted = match wanted {
            Found::Texts(texts) => Wanted::OneOf(texts),
            Found::Spans(spans) => {
                let mut end = |open: Option<Between>| open.and_then(|_| ends.next());
                let closed = |s: OpenSpan| Span { low: end(s.low), high: end(s.high) };
                Wanted::Spans(spans.into_iter().map(closed).collect())
            }
        };
        let columns: Vec<&'static str> = reached.row.blanks.iter().map(|(c, _)| c.name).collect();
        let Some(&column) = columns.get(place) else { continue };
        let others = columns.iter().zip(&reached.filling).enumerate();
        let beside =
            others.filter(|(n, _)| *n != place).map(|(_, (c, text))| (*c, text.clone())).collect();
        of_part.push(CellGap { column, fill, wanted, beside });
    }
    let gap = |(Reached { part, rank, .. }, cells): (Reached<'_>, Vec<CellGap>)| {
        (!cells.is_empty()).then(|| Gap {
            kind: part.kind,
            file: part.file.to_owned(),
            line: part.line,
            maker: part.maker.to_owned(),
            part: part.part.to_owned(),
            rank,
            cells,
        })
    };
    Ok(parts.into_iter().zip(cells).filter_map(gap).collect())
}

/// A text for a blank, the others as in the filling that was found.
struct Question {
    part: usize,
    place: usize,
    text: String,
}

/// Whether each text lets its part on the list; the best ranks of the parts are kept up to date.
fn ask(
    questions: &[Question],
    parts: &mut [Reached<'_>],
    standing: &Standing<'_, '_>,
) -> Result<Vec<bool>, SearchError> {
    let Some(slots) = parts.first().map(|reached| reached.row.slots) else { return Ok(Vec::new()) };
    let read = |n: usize| {
        let Question { part, place, text } = questions.get(n)?;
        let reached = parts.get(*part)?;
        let mut filling = reached.filling.clone();
        filling.get_mut(*place)?.clone_from(text);
        reached.row.filled(&filling)
    };
    let ranks = standing.ranks(slots, questions.len(), read)?;
    for (Question { part, .. }, rank) in questions.iter().zip(&ranks) {
        if let (Some(reached), Some(rank)) = (parts.get_mut(*part), rank) {
            reached.rank = reached.rank.min(*rank);
        }
    }
    Ok(ranks.iter().map(Option::is_some).collect())
}

/// Every blank with the first of its fills of which some value does.
fn on_grids(
    parts: &mut [Reached<'_>],
    standing: &Standing<'_, '_>,
) -> Result<Vec<Blank>, SearchError> {
    let mut tried: Vec<(usize, usize, Fill)> = Vec::new();
    for (part, reached) in parts.iter().enumerate() {
        for (place, (_, fills)) in reached.row.blanks.iter().enumerate() {
            tried.extend(fills.iter().map(|fill| (part, place, fill.clone())));
        }
    }
    let texts_of = |(part, place, fill): &(usize, usize, Fill)| {
        let (part, place) = (*part, *place);
        fill.texts().into_iter().map(move |text| Question { part, place, text })
    };
    let questions: Vec<Question> = tried.iter().flat_map(texts_of).collect();
    let mut answers = ask(&questions, parts, standing)?.into_iter();
    let mut blanks: Vec<Blank> = Vec::new();
    for (part, place, fill) in tried {
        let texts = fill.texts();
        let on: Vec<bool> = answers.by_ref().take(texts.len()).collect();
        let is_told = blanks.iter().any(|b| (b.part, b.place) == (part, place));
        if is_told || !on.contains(&true) {
            continue;
        }
        let wanted = match fill.grid() {
            Some(grid) => Found::Spans(spans(&grid, &on)),
            None => {
                let held = texts.into_iter().zip(on).filter(|(_, on)| *on);
                Found::Texts(held.map(|(text, _)| text).collect())
            }
        };
        blanks.push(Blank { part, place, fill, wanted });
    }
    Ok(blanks)
}

/// The spans of a grid that let a part on the list.
fn spans(grid: &[f64], on: &[bool]) -> Vec<OpenSpan> {
    let known: Vec<(f64, bool)> = grid.iter().copied().zip(on.iter().copied()).collect();
    let mut spans = Vec::new();
    // None outside a span.
    let mut low: Option<Option<Between>> = known.first().filter(|(_, on)| *on).map(|_| None);
    for pair in known.windows(2) {
        let [(a, a_on), (b, b_on)] = *pair else { continue };
        match (a_on, b_on) {
            (false, true) => low = Some(Some(Between { holds: b, fails: a })),
            (true, false) => {
                let high = Some(Between { holds: a, fails: b });
                spans.extend(low.take().map(|low| OpenSpan { low, high }));
            }
            _ => {}
        }
    }
    spans.extend(low.map(|low| OpenSpan { low, high: None }));
    spans
}

/// The ends of all spans of all blanks, each with its blank's part, place and fill.
fn ends_of(blanks: &mut [Blank]) -> impl Iterator<Item = (usize, usize, &Fill, &mut Between)> {
    blanks.iter_mut().flat_map(|Blank { part, place, fill, wanted }| {
        let (part, place, fill) = (*part, *place, &*fill);
        let spans = match wanted {
            Found::Spans(spans) => spans.as_mut_slice(),
            Found::Texts(_) => &mut [],
        };
        let ends = spans.iter_mut().flat_map(|span| [&mut span.low, &mut span.high]).flatten();
        ends.map(move |end| (part, place, fill, end))
    })
}

/// Brings the two figures of every end together.
fn narrow(
    blanks: &mut [Blank],
    parts: &mut [Reached<'_>],
    standing: &Standing<'_, '_>,
) -> Result<(), SearchError> {
    for _ in 0..MOST_NARROWINGS {
        let mut questions: Vec<Question> = Vec::new();
        let mut steps: Vec<Vec<f64>> = Vec::new();
        for (part, place, fill, end) in ends_of(blanks) {
            let of_end = if end.is_narrow() { Vec::new() } else { end.steps() };
            let with = |x: &f64| Question { part, place, text: fill.text(*x) };
            questions.extend(of_end.iter().map(with));
            steps.push(of_end);
        }
        if questions.is_empty() {
            break;
        }
        let mut answers = ask(&questions, parts, standing)?.into_iter();
        for ((.., end), steps) in ends_of(blanks).zip(&steps) {
            let on: Vec<bool> = answers.by_ref().take(steps.len()).collect();
            *end = end.narrowed(steps, &on);
        }
    }
    Ok(())
}

/// Every end with a rounded figure that does, in the order of [`ends_of`].
fn rounded(
    blanks: &[Blank],
    parts: &mut [Reached<'_>],
    standing: &Standing<'_, '_>,
) -> Result<Vec<SpanEnd>, SearchError> {
    let mut questions: Vec<Question> = Vec::new();
    let mut figures: Vec<(Between, [f64; DIGITS.len()])> = Vec::new();
    for Blank { part, place, fill, wanted } in blanks {
        let Found::Spans(spans) = wanted else { continue };
        for end in spans.iter().flat_map(|span| [span.low, span.high]).flatten() {
            let rounded = DIGITS.map(|n| round_toward(end.holds, n, end.holds > end.fails));
            let with = |x: f64| Question { part: *part, place: *place, text: fill.text(x) };
            questions.extend(rounded.map(with));
            figures.push((end, rounded));
        }
    }
    let mut answers = ask(&questions, parts, standing)?.into_iter();
    let end = |(Between { holds, fails }, rounded): (Between, [f64; DIGITS.len()])| {
        let on: Vec<bool> = answers.by_ref().take(rounded.len()).collect();
        let does = rounded.into_iter().zip(on).find(|(_, on)| *on);
        SpanEnd { value: does.map_or(holds, |(value, _)| value), holds, fails }
    };
    Ok(figures.into_iter().map(end).collect())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn spans_begin_and_end_between_neighbours() {
        let grid = [1.0, 2.0, 3.0, 4.0];
        let told = |on: [bool; 4]| -> Vec<(Option<f64>, Option<f64>)> {
            let ends = |s: OpenSpan| (s.low.map(|e| e.holds), s.high.map(|e| e.holds));
            spans(&grid, &on).into_iter().map(ends).collect()
        };
        assert_eq!(told([true; 4]), [(None, None)]);
        assert_eq!(told([false; 4]), []);
        assert_eq!(told([true, false, true, true]), [(None, Some(1.0)), (Some(3.0), None)]);
        assert_eq!(told([false, true, true, false]), [(Some(2.0), Some(3.0))]);
    }

    #[test]
    fn an_end_goes_on_to_the_last_figure_before_the_first_that_fails() {
        let end = Between { holds: 1.0, fails: 5.0 };
        let steps = [2.0, 3.0, 4.0];
        let after = |on: [bool; 3]| {
            let Between { holds, fails } = end.narrowed(&steps, &on);
            (holds, fails)
        };
        assert_eq!(after([true, true, true]), (4.0, 5.0));
        assert_eq!(after([true, false, true]), (2.0, 3.0));
        assert_eq!(after([false, false, false]), (1.0, 2.0));
    }
}
