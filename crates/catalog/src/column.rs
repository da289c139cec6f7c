//! What can be said about a column of a catalog.
//!
//! A declaration is plain data that can be read by anyone: the reader takes its ranges from it, the
//! reference page its text, and a generator of test catalogs the values that a cell may hold.

use quantity::digits::{at_most, below};
pub use quantity::notation::Unit;
use std::fmt;

/// A column of a catalog.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Column {
    /// The name in the header row.
    pub name: &'static str,
    /// What a cell holds.
    pub cell: Cell,
    /// Whether a cell may be blank.
    pub need: Need,
    /// One line of meaning, with advice on what to type where data sheets differ.
    pub meaning: &'static str,
    /// Where the values of real parts lie, in the unit of the cell; others are doubted by
    /// [`crate::plausible`] but read. None: no such bounds are known.
    pub plausible: Option<(f64, f64)>,
}

/// What a cell of a column holds.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Cell {
    /// Any text.
    Text,
    /// One of these words, in any case.
    Word(&'static [&'static str]),
    /// A figure.
    Number(Figure),
    /// A whole number from the first to the second.
    Count(u8, u8),
    /// A list of points `x:y;x:y`, x strictly rising.
    Points(Axes),
    /// One figure y, or a list of points `x:y;x:y`.
    NumberOrPoints(Axes),
    /// A price `0.42`, or price breaks `1:0.42;100:0.31`.
    Price,
    /// A list of figures `1k;2k2`.
    Numbers(Figure),
    /// A list of texts `TO-220;TO-247`.
    Texts,
}

impl Cell {
    /// The cell holds a figure, or a list of them.
    pub const fn holds_figures(&self) -> bool {
        match self {
            Cell::Text | Cell::Word(_) | Cell::Texts => false,
            Cell::Number(_)
            | Cell::Count(..)
            | Cell::Points(_)
            | Cell::NumberOrPoints(_)
            | Cell::Price
            | Cell::Numbers(_) => true,
        }
    }
}

/// A figure in a cell.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Figure {
    /// The unit that the cell is in.
    pub unit: Unit,
    /// What the cell may hold, in that unit.
    pub range: Range,
    /// What the cell is divided by on reading: 100 for percent, 1e6 for ppm, 1000 for mV.
    pub divisor: f64,
}

/// The two sides of the points in a cell; both are > 0.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Axes {
    /// The unit of the figure before the colon.
    pub x: Unit,
    /// The unit of the figure behind the colon.
    pub y: Unit,
    /// What x is.
    pub x_is: &'static str,
    /// What y is.
    pub y_is: &'static str,
}

impl Axes {
    /// What either side of a point, and a number in place of points, may be.
    pub const RANGE: Range = Range::ABOVE_ZERO;
}

/// Whether a cell may be blank.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Need {
    /// A row without it is an error.
    Always,
    /// A part without it is unproven.
    ToProve,
    /// A part without it is unproven where this holds.
    ToProveIf(&'static str),
    /// It may be blank; this then holds.
    Optional(&'static str),
    /// It may be blank; this figure then serves, in the unit of the cell.
    Default(f64),
}

/// One end of a range.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum End {
    /// The end itself belongs to the range.
    Closed(f64),
    /// The end itself does not belong to it.
    Open(f64),
    /// There is no end.
    None,
}

/// The figures that a cell may hold. Ends are compared at ten significant digits.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Range {
    /// The lower end.
    pub low: End,
    /// The upper end.
    pub high: End,
}

impl Range {
    /// Any finite figure.
    pub const ANY: Range = Range { low: End::None, high: End::None };
    /// > 0.
    pub const ABOVE_ZERO: Range = Range { low: End::Open(0.0), high: End::None };
    /// ≥ 0.
    pub const FROM_ZERO: Range = Range { low: End::Closed(0.0), high: End::None };

    /// The figure lies in the range.
    #[inline]
    pub fn holds(&self, figure: f64) -> bool {
        let above_low = match self.low {
            // Rounding makes nothing zero that isn't, so these need none.
            End::Closed(0.0) => figure >= 0.0,
            End::Open(0.0) => figure > 0.0,
            End::Closed(end) => at_most(end, figure),
            End::Open(end) => below(end, figure),
            End::None => true,
        };
        let below_high = match self.high {
            End::Closed(end) => at_most(figure, end),
            End::Open(end) => below(figure, end),
            End::None => true,
        };
        above_low && below_high
    }

    /// The range in words: `> 0`, `0 … < 100`; empty where it has no end.
    pub fn in_words(&self) -> String {
        match (self.low, self.high) {
            (End::None, End::None) => String::new(),
            (End::Closed(low), End::None) => format!("≥ {low}"),
            (End::Open(low), End::None) => format!("> {low}"),
            (End::None, End::Closed(high)) => format!("≤ {high}"),
            (End::None, End::Open(high)) => format!("< {high}"),
            (End::Closed(low), End::Closed(high)) => format!("{low} … {high}"),
            (End::Closed(low), End::Open(high)) => format!("{low} … < {high}"),
            (End::Open(low), End::Closed(high)) => format!("> {low} … {high}"),
            (End::Open(low), End::Open(high)) => format!("> {low} … < {high}"),
        }
    }
}

/// What a cell of this column holds, as a message tells it: `a voltage in V, > 0`.
impl fmt::Display for Cell {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Cell::Text => write!(f, "text"),
            Cell::Word(words) => write!(f, "one of {}", words.join(", ")),
            Cell::Number(figure) => write!(f, "{figure}"),
            Cell::Count(low, high) => write!(f, "{low} or {high}"),
            Cell::Points(axes) => write!(f, "points {axes}"),
            Cell::NumberOrPoints(axes) => {
                write!(f, "{} in {}, > 0, or points {axes}", axes.y.quantity(), axes.y.symbol())
            }
            Cell::Price => {
                write!(f, "a price ≥ 0, or price breaks `1:0.42;100:0.31` with quantities rising")
            }
            Cell::Numbers(figure) => write!(f, "a list `1k;2k2`, each {figure}"),
            Cell::Texts => write!(f, "a list `TO-220;TO-247`"),
        }
    }
}

impl fmt::Display for Figure {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}", self.unit.quantity())?;
        if self.unit != Unit::Plain {
            write!(f, " in {}", self.unit.symbol())?;
        }
        match self.range.in_words() {
            words if words.is_empty() => Ok(()),
            words => write!(f, ", {words}"),
        }
    }
}

impl fmt::Display for Axes {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let side = |is: &str, unit: Unit| match unit.symbol() {
            "" => is.to_owned(),
            symbol => format!("{is} in {symbol}"),
        };
        write!(
            f,
            "`x:y;x:y` with x = {}, rising, and y = {}, both > 0",
            side(self.x_is, self.x),
            side(self.y_is, self.y)
        )
    }
}

// ---- the words that tables are written in ----

pub(crate) const fn number(unit: Unit, range: Range) -> Cell {
    let divisor = match unit {
        Unit::Percent | Unit::PercentPerDegree => 100.0,
        Unit::PpmPerDegree => 1e6,
        Unit::MillivoltPerDegree => 1e3,
        _ => 1.0,
    };
    Cell::Number(Figure { unit, range, divisor })
}

impl Column {
    pub(crate) const fn needed(name: &'static str, cell: Cell, meaning: &'static str) -> Self {
        Self { name, cell, need: Need::ToProve, meaning, plausible: None }
    }

    pub(crate) const fn optional(
        name: &'static str,
        cell: Cell,
        blank: &'static str,
        meaning: &'static str,
    ) -> Self {
        Self { name, cell, need: Need::Optional(blank), meaning, plausible: None }
    }

    pub(crate) const fn defaulted(
        name: &'static str,
        cell: Cell,
        default: f64,
        meaning: &'static str,
    ) -> Self {
        Self { name, cell, need: Need::Default(default), meaning, plausible: None }
    }

    pub(crate) const fn plausible(mut self, low: f64, high: f64) -> Self {
        self.plausible = Some((low, high));
        self
    }

    pub(crate) const fn need(mut self, need: Need) -> Self {
        self.need = need;
        self
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn ends_belong_to_a_range_or_not_at_ten_digits() {
        let tolerance = Range { low: End::Closed(0.0), high: End::Open(100.0) };
        assert!(tolerance.holds(0.0));
        assert!(!tolerance.holds(-1e-30));
        assert!(!tolerance.holds(100.0));
        assert!(!tolerance.holds(99.999_999_999_99), "rounds to the open end");
        assert!(tolerance.holds(99.999));
        assert!(!Range::ABOVE_ZERO.holds(0.0));
        assert!(!Range::ABOVE_ZERO.holds(f64::NAN));
    }
}
