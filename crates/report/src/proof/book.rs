//! The figures of a proof: each told once, with its formula and where it comes from.
//!
//! A formula is text in the symbols of the model page. Its numbers are put in by looking its symbols
//! up among the figures that were told before, so that nothing is calculated here a second time: the
//! value beside a formula is the circuit's own. Where the circuit keeps a figure to itself (the rounds
//! in which a zener heats itself), the calculator works it out from the same text.

use super::calculator::work_out;
use super::origin::KeyOrigin;
use crate::figure::Figure as Exact;
use circuit::slot::Slot;
use serde::Serialize;

/// Significant digits of a figure that others are worked out from.
const FIGURE_DIGITS: usize = 6;
/// Significant digits of what a check asks and allows.
const CHECK_DIGITS: usize = 5;
/// Digits that no figure has more of.
const MOST_DIGITS: usize = 17;

/// A figure of a proof.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Figure {
    /// Unique in the proof: the symbol, after its slot where it belongs to a part: `zener.tol`.
    pub id: String,
    /// The symbol of the model page.
    pub symbol: String,
    /// The slot whose part it belongs to.
    pub slot: Option<&'static str>,
    /// The value.
    pub value: Exact,
    /// Its unit; empty for a ratio.
    pub unit: &'static str,
    /// Where it comes from.
    pub origin: Origin,
    /// How it is worked out, or read from a curve.
    pub worked_out: Option<Expression>,
    /// Why this formula and no other.
    pub note: Option<String>,
}

/// Where a figure comes from.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[serde(rename_all = "kebab-case", tag = "from")]
pub enum Origin {
    /// A key of the sheet or shop.
    Key(KeyOrigin),
    /// A cell of the slot's part.
    Cell {
        /// The column.
        column: &'static str,
        /// The cell as it is written.
        text: String,
    },
    /// The cell is blank, and the column's default serves.
    ColumnDefault {
        /// The column.
        column: &'static str,
    },
    /// The cell is blank, and a stand-in of the sheet serves.
    StandIn {
        /// The column.
        column: &'static str,
        /// The stand-in.
        key: KeyOrigin,
    },
    /// A resistor as fitted.
    Fitted {
        /// Its key in the design.
        key: &'static str,
    },
    /// Worked out from other figures.
    Worked,
}

/// A formula with its numbers put in.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Expression {
    /// In the symbols of the model page.
    pub formula: String,
    /// In numbers, with as many digits as it takes to find the result again.
    pub numbers: String,
    /// The result as it is shown.
    pub result: String,
    /// The ids of the figures in it.
    pub figures: Vec<String>,
}

impl Expression {
    /// The numbers are a single one, which the result repeats.
    pub fn is_plain(&self) -> bool {
        !self.numbers.chars().any(|c| "+·/²^( ".contains(c))
    }
}

/// A piece of a formula.
enum Piece<'f> {
    Text(&'f str),
    Figure(usize),
}

/// The figures told so far.
#[derive(Debug, Clone, Default)]
pub struct Book {
    figures: Vec<Figure>,
}

impl Book {
    /// The figures, in the order in which they were told.
    pub fn figures(&self) -> &[Figure] {
        &self.figures
    }

    /// Keeps the figures with these ids, and those that they are worked out from.
    pub fn keep_only(&mut self, ids: impl Iterator<Item = String>) {
        let mut needed: Vec<String> = ids.collect();
        let mut next = 0;
        while let Some(id) = needed.get(next) {
            let of = self.figures.iter().find(|f| f.id == *id).and_then(|f| f.worked_out.as_ref());
            let more: Vec<String> = of.map(|e| e.figures.clone()).unwrap_or_default();
            for id in more {
                if !needed.contains(&id) {
                    needed.push(id);
                }
            }
            next += 1;
        }
        self.figures.retain(|f| needed.contains(&f.id));
    }

    /// Tells a figure that is given.
    pub fn given(
        &mut self,
        slot: Option<Slot>,
        symbol: &str,
        value: f64,
        unit: &'static str,
        origin: Origin,
    ) {
        self.tell(slot, symbol, value, unit, origin, None);
    }

    /// Tells a figure that is read from a curve, or comes from a cell by way of a formula.
    pub fn read_off(
        &mut self,
        slot: Slot,
        symbol: &str,
        value: f64,
        unit: &'static str,
        origin: Origin,
        formula: &str,
    ) {
        let expression = self.expression(Some(slot), formula, value, FIGURE_DIGITS);
        self.tell(Some(slot), symbol, value, unit, origin, Some(expression));
    }

    /// Tells a figure that is worked out; `value` is the circuit's own.
    pub fn worked(
        &mut self,
        slot: Option<Slot>,
        symbol: &str,
        unit: &'static str,
        formula: &str,
        value: f64,
    ) {
        let expression = self.expression(slot, formula, value, FIGURE_DIGITS);
        self.tell(slot, symbol, value, unit, Origin::Worked, Some(expression));
    }

    /// Tells a figure that the circuit keeps to itself, worked out from its formula; tells the value.
    pub fn from_formula(
        &mut self,
        slot: Option<Slot>,
        symbol: &str,
        unit: &'static str,
        formula: &str,
    ) -> f64 {
        let pieces = self.pieces(slot, formula);
        let value = work_out(&self.spelled_out(&pieces, MOST_DIGITS)).unwrap_or(f64::NAN);
        self.worked(slot, symbol, unit, formula, value);
        value
    }

    /// Adds to the last figure why this formula holds and no other.
    pub fn note(&mut self, note: impl Into<String>) {
        if let Some(last) = self.figures.last_mut() {
            last.note = Some(note.into());
        }
    }

    /// What a check asks or allows.
    pub fn side(&self, slot: Slot, formula: &str, value: f64) -> Expression {
        self.expression(Some(slot), formula, value, CHECK_DIGITS)
    }

    fn tell(
        &mut self,
        slot: Option<Slot>,
        symbol: &str,
        value: f64,
        unit: &'static str,
        origin: Origin,
        worked_out: Option<Expression>,
    ) {
        let slot = slot.map(Slot::name);
        let id = match slot {
            Some(slot) => format!("{slot}.{symbol}"),
            None => symbol.to_owned(),
        };
        let symbol = symbol.to_owned();
        let value = Exact(value);
        self.figures.push(Figure { id, symbol, slot, value, unit, origin, worked_out, note: None });
    }

    fn expression(
        &self,
        slot: Option<Slot>,
        formula: &str,
        value: f64,
        result_digits: usize,
    ) -> Expression {
        let pieces = self.pieces(slot, formula);
        let result = spelled(value, result_digits);
        let reproduces = |text: &String| {
            work_out(text).is_ok_and(|again| spelled(again, result_digits) == result)
        };
        // Digits that a subtraction swallows have to be there before it.
        let numbers = (FIGURE_DIGITS..=MOST_DIGITS)
            .map(|digits| self.spelled_out(&pieces, digits))
            .find(reproduces)
            .unwrap_or_else(|| self.spelled_out(&pieces, MOST_DIGITS));
        let mut figures: Vec<String> = Vec::new();
        for piece in &pieces {
            if let Piece::Figure(at) = piece
                && let Some(figure) = self.figures.get(*at)
                && !figures.contains(&figure.id)
            {
                figures.push(figure.id.clone());
            }
        }
        Expression { formula: formula.to_owned(), numbers, result, figures }
    }

    /// A formula with its numbers put in.
    fn spelled_out(&self, pieces: &[Piece<'_>], digits: usize) -> String {
        let mut text = String::new();
        for piece in pieces {
            match piece {
                Piece::Text(words) => text += words,
                Piece::Figure(at) => {
                    let value = self.figures.get(*at).map_or(f64::NAN, |f| f.value.0);
                    let number = spelled(value, digits);
                    // A sign within a sum or product needs its brackets.
                    let is_alone = pieces.len() == 1;
                    text += &match value < 0.0 && !is_alone {
                        true => format!("({number})"),
                        false => number,
                    };
                }
            }
        }
        text
    }

    /// The formula taken apart at its symbols. Of a symbol that several parts have, that of `slot` is
    /// meant; the longest symbol that fits is it.
    fn pieces<'f>(&self, slot: Option<Slot>, formula: &'f str) -> Vec<Piece<'f>> {
        let mut pieces = Vec::new();
        let (mut begin, mut at) = (0, 0);
        let mut before = ' ';
        while let Some(next) = formula.get(at..).and_then(|rest| rest.chars().next()) {
            let rest = formula.get(at..).unwrap_or_default();
            let found = if is_of_name(before) { None } else { self.symbol_at(slot, rest) };
            match found {
                Some((figure, length)) => {
                    pieces
                        .extend(formula.get(begin..at).filter(|t| !t.is_empty()).map(Piece::Text));
                    pieces.push(Piece::Figure(figure));
                    at += length;
                    begin = at;
                    before = ' ';
                }
                None => {
                    at += next.len_utf8();
                    before = next;
                }
            }
        }
        pieces.extend(formula.get(begin..).filter(|t| !t.is_empty()).map(Piece::Text));
        pieces
    }

    /// The figure whose symbol the text begins with, and the symbol's length.
    fn symbol_at(&self, slot: Option<Slot>, text: &str) -> Option<(usize, usize)> {
        let ends_there = |symbol: &str| {
            let rest = text.strip_prefix(symbol)?;
            let goes_on = rest.chars().next().is_some_and(is_of_name);
            (!goes_on).then_some(symbol.len())
        };
        let own = slot.map(Slot::name);
        self.figures
            .iter()
            .enumerate()
            .filter_map(|(at, figure)| {
                let length = ends_there(&figure.symbol)?;
                let is_own = figure.slot.is_some() && figure.slot == own;
                Some((length, is_own, at))
            })
            // Of equal ones the last: what was told nearest.
            .max()
            .map(|(length, _, at)| (at, length))
    }

    /// The value of a figure; NaN where it was not told.
    pub fn value(&self, symbol: &str) -> f64 {
        self.figures.iter().rfind(|f| f.symbol == symbol).map_or(f64::NAN, |f| f.value.0)
    }
}

/// A character that goes on with a symbol. A raised 2 does not.
fn is_of_name(c: char) -> bool {
    (c.is_alphanumeric() && c != '²') || c == '_' || c == '.'
}

/// A number to so many significant digits, without zeros that say nothing: `0.0005`, `9.59192`,
/// `5e-7`.
///
/// ```
/// use report::proof::book::spelled;
/// assert_eq!(spelled(9.591_923_4, 6), "9.59192");
/// assert_eq!(spelled(0.06 + 1e-17, 6), "0.06");
/// assert_eq!(spelled(-5e-7, 6), "−5e-7");
/// assert_eq!(spelled(1e6, 3), "1000000");
/// assert_eq!(spelled(f64::INFINITY, 6), "inf");
/// ```
pub fn spelled(value: f64, digits: usize) -> String {
    let size = value.abs();
    let sign = if value < 0.0 { "−" } else { "" };
    if !size.is_finite() || size == 0.0 {
        return if size == 0.0 { "0".to_owned() } else { format!("{sign}{size}") };
    }
    let scientific = format!("{size:.*e}", digits.max(1) - 1);
    let (mantissa, exponent) = scientific.split_once('e').unwrap_or((&scientific, "0"));
    let exponent: i32 = exponent.parse().unwrap_or(0);
    let without_zeros = |text: &str| match text.contains('.') {
        true => text.trim_end_matches('0').trim_end_matches('.').to_owned(),
        false => text.to_owned(),
    };
    if (-5..9).contains(&exponent) {
        let rounded: f64 = scientific.parse().unwrap_or(size);
        let places = usize::try_from(digits as i32 - 1 - exponent).unwrap_or(0);
        format!("{sign}{}", without_zeros(&format!("{rounded:.places$}")))
    } else {
        format!("{sign}{}e{exponent}", without_zeros(mantissa))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn fitted() -> Origin {
        Origin::Fitted { key: "rz_ohm" }
    }

    #[test]
    fn symbols_are_the_longest_that_fit_and_those_of_the_slot_first() {
        let mut book = Book::default();
        book.given(None, "Tmax", 45.0, "°C", fitted());
        book.given(Some(Slot::Zener), "tj_max", 175.0, "°C", fitted());
        book.given(Some(Slot::Pass), "tj_max", 150.0, "°C", fitted());
        book.given(None, "soa", 0.85, "", fitted());
        book.given(None, "soa_dc(v(i))", 2.0, "A", fitted());
        let numbers = |slot, formula: &str, value| book.side(slot, formula, value).numbers;
        assert_eq!(numbers(Slot::Zener, "tj_max − Tmax", 130.0), "175 − 45");
        assert_eq!(numbers(Slot::Pass, "tj_max − Tmax", 105.0), "150 − 45");
        assert_eq!(numbers(Slot::Pass, "soa·soa_dc(v(i))²", 3.4), "0.85·2²");
        assert_eq!(book.side(Slot::Zener, "soa·Tmax", 38.25).figures, ["soa", "Tmax"]);
    }

    #[test]
    fn digits_that_a_difference_swallows_are_shown() {
        let mut book = Book::default();
        book.given(None, "a", 12.000_123_4, "V", fitted());
        book.given(None, "b", -12.0, "V", fitted());
        let sum = book.side(Slot::Zener, "a + b", 12.000_123_4 - 12.0);
        assert_eq!(
            (sum.numbers.as_str(), sum.result.as_str()),
            ("12.0001234 + (−12)", "0.0001234")
        );
    }
}
