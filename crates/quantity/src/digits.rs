//! Comparison of figures rounded to ten significant digits.
//!
//! Two right programs may add the same figures in another order and differ in the last bits. Every
//! comparison that decides something (does a check hold, which value is nearest, which candidate is
//! first) is therefore made on figures rounded to [`DIGITS`] significant digits, to nearest on the
//! exact binary value, ties to even. Figures themselves are carried and reported in full.

use std::cmp::Ordering;

/// Significant decimal digits that take part in a comparison.
pub const DIGITS: usize = 10;

/// Figures that differ by more than this fraction cannot round to the same ten digits, nor change
/// places by rounding: one unit in the tenth digit is at most 1e-9 of the figure.
const SURELY_APART: f64 = 2e-9;

/// The figure rounded to ten significant digits: to nearest on its exact binary value, ties to even.
///
/// Zero, infinities and NaN come back unchanged.
///
/// ```
/// use quantity::digits::rounded;
/// assert_eq!(rounded(0.123456789049), 0.1234567890);
/// assert_eq!(rounded(1.0 + 1e-12), 1.0);
/// assert_eq!(rounded(12345678905.0), 12345678900.0); // a tie goes to the even digit
/// assert_eq!(rounded(12345678915.0), 12345678920.0);
/// ```
pub fn rounded(x: f64) -> f64 {
    quick(x).unwrap_or_else(|| spelled(x))
}

/// Orders two figures as rounded to ten significant digits. NaN sorts last, so that no figure that
/// went wrong can win a place.
///
/// ```
/// use quantity::digits::compare;
/// use std::cmp::Ordering::*;
/// assert_eq!(compare(1.0, 1.0 + 1e-13), Equal);
/// assert_eq!(compare(1.0, 1.0 + 1e-8), Less);
/// assert_eq!(compare(f64::INFINITY, 5.0), Greater);
/// ```
pub fn compare(a: f64, b: f64) -> Ordering {
    if a == b {
        return Ordering::Equal;
    }
    if a.is_nan() || b.is_nan() {
        return a.is_nan().cmp(&b.is_nan());
    }
    let apart = (a - b).abs() > SURELY_APART * a.abs().max(b.abs());
    if apart {
        // Rounding is monotone, so figures this far apart keep their order.
        return if a < b { Ordering::Less } else { Ordering::Greater };
    }
    rounded(a).partial_cmp(&rounded(b)).unwrap_or(Ordering::Equal)
}

/// True where `a` ≤ `b` at ten significant digits; false where either is NaN.
///
/// ```
/// use quantity::digits::at_most;
/// assert!(at_most(1.0 + 1e-12, 1.0));
/// assert!(!at_most(1.0 + 1e-8, 1.0));
/// ```
pub fn at_most(a: f64, b: f64) -> bool {
    !a.is_nan() && !b.is_nan() && compare(a, b) != Ordering::Greater
}

/// True where `a` < `b` at ten significant digits; false where either is NaN.
pub fn below(a: f64, b: f64) -> bool {
    !a.is_nan() && !b.is_nan() && compare(a, b) == Ordering::Less
}

/// The definition itself, by way of decimal text: correct for every finite figure, but slow.
fn spelled(x: f64) -> f64 {
    if !x.is_finite() || x == 0.0 {
        return x;
    }
    // Rust prints the exact binary value rounded half to even at the digits asked for.
    format!("{x:.*e}", DIGITS - 1).parse().unwrap_or(x)
}

/// The same for figures of ordinary size, without text. None where it cannot be sure.
///
/// x·10^p is formed together with its rounding error by a fused multiply, so the distance to the
/// nearest whole number, and thereby every tie, is known exactly. 10^p is exact up to p = 22.
fn quick(x: f64) -> Option<f64> {
    const POWERS: [f64; 23] = [
        1e0, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11, 1e12, 1e13, 1e14, 1e15, 1e16,
        1e17, 1e18, 1e19, 1e20, 1e21, 1e22,
    ];
    let size = x.abs();
    if !(1e-11..1e9).contains(&size) {
        return None;
    }
    // The power that brings the figure to 1e9 ≤ y < 1e10; the estimate may be one off. A figure of
    // binary exponent e has about e·lg 2 decimal digits before the point (lg 2 ≈ 1233/4096).
    let exponent = (size.to_bits() >> 52) as i32 - 1023;
    let mut p = (9 - ((exponent * 1233) >> 12)).clamp(1, 22) as usize;
    let mut y = size * POWERS[p];
    if y >= 1e10 {
        p -= 1;
        y = size * POWERS[p];
    } else if y < 1e9 && p < 22 {
        p += 1;
        y = size * POWERS[p];
    }
    if !(1e9..1e10 - 1.0).contains(&y) {
        return None;
    }
    let error = size.mul_add(POWERS[p], -y);
    let whole = y.floor();
    // Exactly: y ≥ 1e9 has at most 23 bits behind the point, so the subtraction has no error.
    let above = (y - whole) - 0.5;
    let up = match (above + error).partial_cmp(&0.0)? {
        Ordering::Greater => true,
        Ordering::Less => false,
        // A sum of two figures is zero only where it is exactly so.
        Ordering::Equal => whole as u64 % 2 == 1,
    };
    let units = if up { whole + 1.0 } else { whole };
    // Whole number below 2^53 over an exact power: the nearest binary figure, as parsing gives it.
    Some((units / POWERS[p]).copysign(x))
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn ordinary_figures_need_no_text() {
        for x in [0.964_331_161_2, 12.02, 680.0, 1e-6, 0.1, 5e8, 1.0, 1e-3] {
            assert_eq!(quick(x), Some(spelled(x)), "{x}");
        }
    }

    proptest! {
        #![proptest_config(ProptestConfig::with_cases(20_000))]

        #[test]
        fn quick_way_agrees_with_the_definition(mantissa in 1.0f64..10.0, exponent in -13i32..12) {
            let x = mantissa * 10f64.powi(exponent);
            if let Some(q) = quick(x) {
                prop_assert_eq!(q, spelled(x));
            }
        }

        #[test]
        fn quick_way_agrees_next_to_ties(units in 1_000_000_000u64..10_000_000_000, p in 0i32..20, nudge in -3i64..4) {
            // Figures a few bits beside units + ½ in the tenth digit.
            let tie = (units as f64 + 0.5) / 10f64.powi(p);
            let x = f64::from_bits((tie.to_bits() as i64 + nudge) as u64);
            if let Some(q) = quick(x) {
                prop_assert_eq!(q, spelled(x));
            }
            prop_assert_eq!(rounded(-x), -rounded(x));
        }

        #[test]
        fn comparison_is_that_of_the_rounded_figures(a in 1.0f64..2.0, step in -40i32..40) {
            let b = a + f64::from(step) * 1e-10;
            prop_assert_eq!(compare(a, b), spelled(a).partial_cmp(&spelled(b)).unwrap());
        }
    }
}
