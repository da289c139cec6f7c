//! Preferred number series of IEC 60063.
//!
//! Source: IEC 60063 (E3 to E192). E48, E96 and E192 follow round(100·10^(n/N)) with one exception
//! in E192 (919 reads 920); E3 to E24 are older and depart from the geometric row in eight places of
//! E24, so they are listed.

use std::fmt;
use std::str::FromStr;

/// A series of preferred numbers.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Series {
    /// 3 values a decade.
    E3,
    /// 6 values a decade, usual at 20 %.
    E6,
    /// 12 values a decade, usual at 10 %.
    E12,
    /// 24 values a decade, usual at 5 %.
    E24,
    /// 48 values a decade, usual at 2 %.
    E48,
    /// 96 values a decade, usual at 1 %.
    E96,
    /// 192 values a decade, usual at 0.5 % and less.
    E192,
}

/// Source: IEC 60063, series E24, two significant digits.
const E24: [u16; 24] = [
    10, 11, 12, 13, 15, 16, 18, 20, 22, 24, 27, 30, 33, 36, 39, 43, 47, 51, 56, 62, 68, 75, 82, 91,
];

impl Series {
    /// Every series, the coarsest first.
    pub const ALL: [Series; 7] =
        [Series::E3, Series::E6, Series::E12, Series::E24, Series::E48, Series::E96, Series::E192];

    /// How many values a decade holds.
    pub fn per_decade(self) -> usize {
        match self {
            Self::E3 => 3,
            Self::E6 => 6,
            Self::E12 => 12,
            Self::E24 => 24,
            Self::E48 => 48,
            Self::E96 => 96,
            Self::E192 => 192,
        }
    }

    /// The n-th value of a decade as a whole number from 100 to 999.
    ///
    /// ```
    /// use quantity::preferred::Series;
    /// assert_eq!(Series::E24.hundreds(10), 270); // rounding 10^(10/24) would give 260
    /// assert_eq!(Series::E192.hundreds(185), 920); // rounding would give 919
    /// ```
    pub fn hundreds(self, n: usize) -> u32 {
        let per_decade = self.per_decade();
        let n = n % per_decade;
        if per_decade <= 24 {
            return u32::from(E24[n * (24 / per_decade)]) * 10;
        }
        if self == Self::E192 && n == 185 {
            return 920;
        }
        (100.0 * 10f64.powf(n as f64 / per_decade as f64)).round() as u32
    }

    /// All values of the series from `low` to `high` (both included), rising, in the unit of the
    /// ends. Empty where none lies between or an end is not positive and finite.
    ///
    /// ```
    /// use quantity::preferred::Series;
    /// assert_eq!(Series::E24.between(10.0, 1e6).len(), 121);
    /// assert_eq!(Series::E3.between(1e3, 1e4), [1000.0, 2200.0, 4700.0, 10000.0]);
    /// ```
    pub fn between(self, low: f64, high: f64) -> Vec<f64> {
        let ends_are_sound = low > 0.0 && high.is_finite() && low <= high;
        if !ends_are_sound {
            return Vec::new();
        }
        let first_decade = low.log10().floor() as i32 - 1;
        let last_decade = high.log10().floor() as i32 + 1;
        (first_decade..=last_decade)
            .flat_map(|decade| (0..self.per_decade()).map(move |n| (decade, n)))
            .map(|(decade, n)| scaled(self.hundreds(n), decade - 2))
            .filter(|&v| crate::digits::at_most(low, v) && crate::digits::at_most(v, high))
            .collect()
    }
}

/// digits·10^exponent as the binary figure that its decimal text stands for: 4.7 kΩ is 4700 and
/// 0.47 Ω the same as the text `0.47`, whatever the decade.
fn scaled(digits: u32, exponent: i32) -> f64 {
    format!("{digits}e{exponent}").parse().unwrap_or(f64::NAN)
}

impl fmt::Display for Series {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "E{}", self.per_decade())
    }
}

/// A text that names no series of IEC 60063.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct UnknownSeries;

impl fmt::Display for UnknownSeries {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "no series of IEC 60063: one of E3, E6, E12, E24, E48, E96, E192")
    }
}

impl std::error::Error for UnknownSeries {}

impl FromStr for Series {
    type Err = UnknownSeries;

    /// Reads `E24` in any case.
    fn from_str(text: &str) -> Result<Self, UnknownSeries> {
        Self::ALL
            .into_iter()
            .find(|s| s.to_string().eq_ignore_ascii_case(text.trim()))
            .ok_or(UnknownSeries)
    }
}
