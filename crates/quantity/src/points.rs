//! Curves given by points: pairs of positive figures whose first members strictly rise.

use std::fmt;

/// A list of points (x, y), x strictly rising, all figures positive and finite, at least one point.
#[derive(Debug, Clone, PartialEq)]
pub struct Points(Box<[(f64, f64)]>);

/// Why a list of pairs is no [`Points`].
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum PointsError {
    /// There is no point at all.
    Empty,
    /// The point at this index (from 0) holds a figure that is not positive and finite.
    NotPositive(usize),
    /// The x of the point at this index (from 0) does not lie above the one before it.
    NotRising(usize),
}

impl fmt::Display for PointsError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Empty => write!(f, "the list holds no point"),
            Self::NotPositive(i) => write!(f, "point {} is not positive on both sides", i + 1),
            Self::NotRising(i) => {
                write!(f, "the first figure of point {} does not lie above the one before", i + 1)
            }
        }
    }
}

impl std::error::Error for PointsError {}

/// Where a figure lies among the points of a curve.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Place {
    /// At or below the first point, whose y this is.
    UpToFirst(f64),
    /// In the piece between two points (left, right), x of the right one included.
    Between((f64, f64), (f64, f64)),
    /// Above the last point: a curve says nothing there.
    Beyond,
}

impl Points {
    /// Takes pairs in rising order of x.
    ///
    /// # Errors
    /// Names the first point that is not positive and finite or does not rise.
    ///
    /// ```
    /// use quantity::points::{Points, PointsError};
    /// assert!(Points::new([(4.0, 20.0), (10.0, 5.0)]).is_ok());
    /// assert_eq!(Points::new([(4.0, 20.0), (4.0, 5.0)]), Err(PointsError::NotRising(1)));
    /// ```
    pub fn new(pairs: impl Into<Box<[(f64, f64)]>>) -> Result<Self, PointsError> {
        let pairs = pairs.into();
        if pairs.is_empty() {
            return Err(PointsError::Empty);
        }
        let positive = |v: f64| v > 0.0 && v.is_finite();
        for (i, &(x, y)) in pairs.iter().enumerate() {
            if !positive(x) || !positive(y) {
                return Err(PointsError::NotPositive(i));
            }
            if i > 0 && x <= pairs[i - 1].0 {
                return Err(PointsError::NotRising(i));
            }
        }
        Ok(Self(pairs))
    }

    /// The points, at least one.
    pub fn as_slice(&self) -> &[(f64, f64)] {
        &self.0
    }

    /// The first point.
    pub fn first(&self) -> (f64, f64) {
        self.0[0]
    }

    /// The last point.
    pub fn last(&self) -> (f64, f64) {
        self.0[self.0.len() - 1]
    }

    /// Where `x` lies; the ends are compared at ten significant digits.
    pub fn place(&self, x: f64) -> Place {
        use crate::digits::at_most;
        if at_most(x, self.first().0) {
            return Place::UpToFirst(self.first().1);
        }
        self.0
            .windows(2)
            .find(|w| at_most(x, w[1].0))
            .map_or(Place::Beyond, |w| Place::Between(w[0], w[1]))
    }
}
