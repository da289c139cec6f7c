//! The range of a number.

use std::fmt;

use quantity::digits::{at_most, below};

/// One end of a range.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum End {
    /// The figure itself is allowed.
    Closed(f64),
    /// The figure itself is not allowed.
    Open(f64),
}

/// The range that a number must lie in. Figures are compared at ten significant digits, as the
/// checks of the circuit are.
///
/// ```
/// use sheet::bounds::Bounds;
/// let fraction = Bounds::ANY.above(0.0).at_most(1.0);
/// assert!(fraction.contain(1.0) && !fraction.contain(0.0));
/// assert_eq!(fraction.to_string(), "above 0, at most 1");
/// ```
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Bounds {
    /// The lower end; None: as low as one likes.
    pub low: Option<End>,
    /// The upper end; None: as high as one likes.
    pub high: Option<End>,
}

impl Bounds {
    /// Every finite number.
    pub const ANY: Bounds = Bounds { low: None, high: None };

    /// The same range, begun above `figure`.
    #[must_use]
    pub const fn above(self, figure: f64) -> Self {
        Bounds { low: Some(End::Open(figure)), ..self }
    }

    /// The same range, begun at `figure`.
    #[must_use]
    pub const fn at_least(self, figure: f64) -> Self {
        Bounds { low: Some(End::Closed(figure)), ..self }
    }

    /// The same range, ended at `figure`.
    #[must_use]
    pub const fn at_most(self, figure: f64) -> Self {
        Bounds { high: Some(End::Closed(figure)), ..self }
    }

    /// True where `figure` is finite and lies in the range.
    pub fn contain(&self, figure: f64) -> bool {
        let above_low = match self.low {
            None => true,
            Some(End::Closed(low)) => at_most(low, figure),
            Some(End::Open(low)) => below(low, figure),
        };
        let below_high = match self.high {
            None => true,
            Some(End::Closed(high)) => at_most(figure, high),
            Some(End::Open(high)) => below(figure, high),
        };
        figure.is_finite() && above_low && below_high
    }
}

impl fmt::Display for Bounds {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self.low {
            None if self.high.is_none() => return f.write_str("any"),
            None => {}
            Some(End::Closed(low)) => write!(f, "at least {}", figure(low))?,
            Some(End::Open(low)) => write!(f, "above {}", figure(low))?,
        }
        if self.low.is_some() && self.high.is_some() {
            f.write_str(", ")?;
        }
        match self.high {
            None => Ok(()),
            Some(End::Closed(high)) => write!(f, "at most {}", figure(high)),
            Some(End::Open(high)) => write!(f, "below {}", figure(high)),
        }
    }
}

/// A number as one would write it in a sheet: `20`, `0.0005`, `1e-6`.
pub(crate) fn figure(x: f64) -> String {
    // `Debug` is the shortest text that reads back as the same number, in exponent form where the
    // plain form would be long.
    let text = format!("{x:?}");
    text.strip_suffix(".0").map(str::to_owned).unwrap_or(text)
}
