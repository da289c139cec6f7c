//! Sums of money, exact to the last decimal.

use bigdecimal::BigDecimal;
use std::iter::Sum;
use std::ops::{Add, Sub};
use std::str::FromStr;

/// An amount of money in the currency of the shop.
///
/// A price is read as a binary number, as every figure of a catalog; its shortest decimal is what the
/// cell says. From there on amounts are decimal: ten pieces at 0.1 are 1, not 0.9999….
#[derive(Debug, Clone, PartialEq, Eq, PartialOrd, Ord)]
pub struct Money(BigDecimal);

impl Money {
    /// A price of a catalog. None where it is not finite.
    ///
    /// ```
    /// use purchase::money::Money;
    /// let price = Money::new(0.1).unwrap();
    /// assert_eq!(price.times(3).amount(), 0.3); // 0.1 + 0.1 + 0.1 in binary is 0.30000000000000004
    /// assert!(Money::new(f64::INFINITY).is_none());
    /// ```
    pub fn new(price: f64) -> Option<Self> {
        if !price.is_finite() {
            return None;
        }
        BigDecimal::from_str(&price.to_string()).ok().map(Self)
    }

    /// Nothing.
    pub fn zero() -> Self {
        Self(BigDecimal::from(0))
    }

    /// So many pieces at this price.
    pub fn times(&self, pieces: u64) -> Self {
        Self(&self.0 * BigDecimal::from(pieces))
    }

    /// The binary number nearest to the amount: for outputs. Infinite where the amount is beyond it.
    pub fn amount(&self) -> f64 {
        // The text of a decimal number is always one that can be read.
        self.0.to_string().parse().unwrap_or(f64::NAN)
    }
}

impl Add for Money {
    type Output = Money;

    fn add(self, other: Money) -> Money {
        Money(self.0 + other.0)
    }
}

impl Sub for Money {
    type Output = Money;

    fn sub(self, other: Money) -> Money {
        Money(self.0 - other.0)
    }
}

impl Sum for Money {
    fn sum<I: Iterator<Item = Money>>(amounts: I) -> Money {
        amounts.fold(Money::zero(), Add::add)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn sums_are_decimal() {
        let cents = std::iter::repeat_n(Money::new(0.01).unwrap(), 100_000);
        assert_eq!(cents.sum::<Money>().amount(), 1000.0);
        let binary: f64 = std::iter::repeat_n(0.01, 100_000).sum();
        assert_ne!(binary, 1000.0, "what this type is for");
    }

    #[test]
    fn no_amount_is_too_large_or_too_small() {
        let large = Money::new(1e308).unwrap();
        assert_eq!(large.times(u64::MAX).amount(), f64::INFINITY);
        assert_eq!(Money::new(5e-324).unwrap().times(2).amount(), 1e-323);
        assert_eq!((large.clone() - large).amount(), 0.0);
    }
}
