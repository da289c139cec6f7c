//! What ranks after what, and the bounds that follow.

use circuit::merit;
use circuit::rail::Rail;
use circuit::slot::Slot;
use quantity::digits::rounded;
use sheet::Weights;

/// Cost, current beside the load in A, and greatest utilisation of damage checks: what a choice of a
/// side adds, or at most what each of a group adds.
pub(crate) type Share = [f64; 3];

/// Places by name in the order of `Slot::BY_NAME`, from 1; 0 for no part.
pub(crate) type Names = [u32; Slot::COUNT];

/// Score, cost, stress and loss at ten digits, then names: the lesser ranks first.
pub(crate) type Key = ([f64; 4], Names);

/// The rule of a ranking, and the last row of a list that is as long as was asked for.
pub(crate) struct Bound<'r> {
    pub rail: &'r Rail,
    pub weights: &'r Weights,
    /// None for a shorter list: nothing ranks after it.
    pub last: Option<Key>,
}

impl Bound<'_> {
    /// Score, cost, stress and loss of three sides together. Each rises with every figure of a share,
    /// also in its last bit, for sums are made in one order.
    pub fn figures(&self, r: &Share, a: &Share, p: &Share) -> [f64; 4] {
        let (cost, stress) = (r[0] + a[0] + p[0], r[2].max(a[2]).max(p[2]));
        let loss = merit::loss(self.rail, r[1] + a[1] + p[1]);
        // 0^0 = 1.
        let power = |x: f64, weight: f64| match weight {
            0.0 => 1.0,
            1.0 => x.max(0.0),
            _ => x.max(0.0).powf(weight),
        };
        let Weights { cost: wc, loss: wl, stress: ws } = *self.weights;
        [power(cost, wc) * power(loss, wl) * power(stress, ws), cost, stress, loss]
    }

    /// Every combination ranks after the last row that adds at least one share of each list and whose
    /// parts come no sooner by name than `names`: its key is in no figure less than that of these
    /// shares with `names`, and of such two keys the former does not come first.
    pub fn is_after(&self, r: &[Share], a: &[Share], p: &[Share], names: Names) -> bool {
        let Some(last) = self.last else { return false };
        let far = last.0[0] * (1.0 + 1e-8);
        let after = |r, a, p| {
            let figures = self.figures(r, a, p);
            figures[0] > far || (figures.map(rounded), names) > last
        };
        r.iter().all(|r| a.iter().all(|a| p.iter().all(|p| after(r, a, p))))
    }
}
