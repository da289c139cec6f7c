//! The score of a candidate.

use crate::problem::Weights;

/// cost^wc · loss^wl · stress^ws, less is better; 0^0 = 1.
///
/// ```
/// use select::problem::Weights;
/// use select::score::score;
/// let even = Weights { cost: 1.0, loss: 1.0, stress: 1.0 };
/// assert_eq!(score(&even, 4.0, 0.5, 0.25), 0.5);
/// assert_eq!(score(&Weights { cost: 1.0, loss: 0.0, stress: 0.0 }, 4.0, 0.5, 0.0), 4.0);
/// ```
pub fn score(weights: &Weights, cost: f64, loss: f64, stress: f64) -> f64 {
    power(cost, weights.cost) * power(loss, weights.loss) * power(stress, weights.stress)
}

/// x^w; the usual weights without a rounding of their own. Nothing here is below 0 but a loss that
/// no feasible candidate has, and that counts as 0.
fn power(x: f64, weight: f64) -> f64 {
    if weight == 0.0 {
        1.0
    } else if weight == 1.0 {
        x.max(0.0)
    } else {
        x.max(0.0).powf(weight)
    }
}
