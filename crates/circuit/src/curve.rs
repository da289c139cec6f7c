//! Straight lines between the points of a data sheet's curves.
//!
//! Gain and safe operating area are read on (ln, ln) axes, voltages over current on (ln, linear)
//! ones, as data sheets print them. Model page, section 3.

use crate::parts::OverCurrent;
use quantity::digits::at_most;
use quantity::points::{Place, Points};

/// A figure that stands for "the curve says nothing here": whatever needs it is infinite too.
pub const NO_VALUE: f64 = f64::INFINITY;

/// The value at `x` on straight lines in (ln x, ln y) between two points.
fn log_log((x0, y0): (f64, f64), (x1, y1): (f64, f64), x: f64) -> f64 {
    let share = (x.ln() - x0.ln()) / (x1.ln() - x0.ln());
    (y0.ln() + share * (y1.ln() - y0.ln())).exp()
}

/// The value at `x` on straight lines in (ln x, y) between two points.
fn log_linear((x0, y0): (f64, f64), (x1, y1): (f64, f64), x: f64) -> f64 {
    y0 + (x.ln() - x0.ln()) / (x1.ln() - x0.ln()) * (y1 - y0)
}

/// Least current gain at the collector current `i_a`; None above the last point.
///
/// Below the first point the first gain is given, which the model never uses (see
/// [`crate::pass::PassFigures`]).
///
/// ```
/// use circuit::curve::gain;
/// use quantity::points::Points;
/// // 2N3055: at least 20 at 4 A, 5 at 10 A. Source: ON Semiconductor 2N3055/MJ2955 data sheet.
/// let hfe = Points::new([(4.0, 20.0), (10.0, 5.0)]).unwrap();
/// assert!((gain(&hfe, 5.0).unwrap() - 14.2696).abs() < 1e-4);
/// assert_eq!(gain(&hfe, 10.1), None);
/// ```
pub fn gain(curve: &Points, i_a: f64) -> Option<f64> {
    match curve.place(i_a) {
        Place::UpToFirst(y) => Some(y),
        Place::Between(left, right) => Some(log_log(left, right, i_a)),
        Place::Beyond => None,
    }
}

/// Current that a safe operating area allows at the collector voltage `v_v`, A; 0 above the last
/// point.
///
/// ```
/// use circuit::curve::safe_current_a;
/// use quantity::points::Points;
/// // Two points on 115 W: straight lines on log-log axes keep the power hyperbola.
/// let soa = Points::new([(115.0 / 15.0, 15.0), (60.0, 115.0 / 60.0)]).unwrap();
/// assert!((safe_current_a(&soa, 20.0) - 5.75).abs() < 1e-9);
/// assert_eq!(safe_current_a(&soa, 61.0), 0.0);
/// ```
pub fn safe_current_a(curve: &Points, v_v: f64) -> f64 {
    match curve.place(v_v) {
        Place::UpToFirst(y) => y,
        Place::Between(left, right) => log_log(left, right, v_v),
        Place::Beyond => 0.0,
    }
}

/// A voltage given over the collector current, V; [`NO_VALUE`] above the last point. A plain number
/// is good up to `number_good_to_a`.
pub fn voltage_v(figure: &OverCurrent, i_a: f64, number_good_to_a: f64) -> f64 {
    match figure {
        OverCurrent::Number(v) if at_most(i_a, number_good_to_a) => *v,
        OverCurrent::Number(_) => NO_VALUE,
        OverCurrent::Points(points) => match points.place(i_a) {
            Place::UpToFirst(y) => y,
            Place::Between(left, right) => log_linear(left, right, i_a),
            Place::Beyond => NO_VALUE,
        },
    }
}

/// A product in which an infinite part makes the whole infinite, also beside a zero or a negative
/// figure: what has no value has no product.
pub fn product(a: f64, b: f64) -> f64 {
    if a.is_infinite() || b.is_infinite() { NO_VALUE } else { a * b }
}
