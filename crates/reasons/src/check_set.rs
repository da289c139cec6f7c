//! Sets of checks, and the set that fails for a combination.

use circuit::check::{Check, Finding, Tally};
use std::ops::ControlFlow;

/// A set of checks.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash, Default)]
pub struct CheckSet(u64);

// Each check is one bit.
const _: () = assert!(Check::ALL.len() <= u64::BITS as usize);

impl CheckSet {
    /// No check.
    pub const EMPTY: CheckSet = CheckSet(0);
    /// Every check of the model.
    pub const ALL: CheckSet = CheckSet::of(&Check::ALL);
    /// The checks of the divider, of either form of output.
    pub const DIVIDER: CheckSet = CheckSet::of(&[
        Check::DividerWindow,
        Check::OutputError,
        Check::RfPower,
        Check::ReachHigh,
        Check::ReachLow,
        Check::LowStop,
        Check::Ceiling,
        Check::RxPower,
        Check::RiPower,
        Check::RfVoltage,
        Check::RxVoltage,
        Check::PotPower,
        Check::PotVoltage,
    ]);

    /// These checks.
    pub const fn of(checks: &[Check]) -> Self {
        let mut bits = 0;
        let mut i = 0;
        while i < checks.len() {
            bits |= 1 << checks[i] as u64;
            i += 1;
        }
        Self(bits)
    }

    /// Both together.
    #[must_use]
    pub const fn and(self, other: Self) -> Self {
        Self(self.0 | other.0)
    }

    /// The checks of this set that are in the other too.
    #[must_use]
    pub const fn in_both(self, other: Self) -> Self {
        Self(self.0 & other.0)
    }

    /// The checks of this set that are not in the other.
    #[must_use]
    pub const fn without(self, other: Self) -> Self {
        Self(self.0 & !other.0)
    }

    /// Holds no check.
    pub const fn is_empty(self) -> bool {
        self.0 == 0
    }

    /// How many checks it holds.
    pub const fn len(self) -> usize {
        self.0.count_ones() as usize
    }

    /// Holds this check.
    pub const fn contains(self, check: Check) -> bool {
        self.0 & (1 << check as u64) != 0
    }

    /// Every check of this set is in the other.
    pub const fn is_within(self, other: Self) -> bool {
        self.0 & !other.0 == 0
    }

    /// Some check is in both.
    pub const fn meets(self, other: Self) -> bool {
        self.0 & other.0 != 0
    }

    /// Its checks in page order.
    pub fn iter(self) -> impl Iterator<Item = Check> {
        Check::ALL.into_iter().filter(move |&check| self.contains(check))
    }
}

impl FromIterator<Check> for CheckSet {
    fn from_iter<I: IntoIterator<Item = Check>>(checks: I) -> Self {
        checks.into_iter().fold(Self::EMPTY, |set, check| set.and(Self::of(&[check])))
    }
}

/// The checks that fail, and the greatest utilisation among them: 0 where none fails.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct Failing {
    /// The checks.
    pub set: CheckSet,
    /// The greatest utilisation, above 1 where a check fails.
    pub worst: f64,
}

impl Failing {
    /// What fails among some checks.
    pub fn among(checks: impl FnOnce(&mut Failing) -> ControlFlow<()>) -> Self {
        let mut failing = Self::default();
        // It never ends the asking.
        let _ = checks(&mut failing);
        failing
    }

    /// What fails of two lists of checks.
    #[must_use]
    pub fn and(self, other: Self) -> Self {
        Self { set: self.set.and(other.set), worst: self.worst.max(other.worst) }
    }
}

impl Tally for Failing {
    #[inline]
    fn take(&mut self, finding: Finding) -> ControlFlow<()> {
        if !finding.holds() {
            self.set = self.set.and(CheckSet::of(&[finding.check]));
            self.worst = self.worst.max(finding.utilisation());
        }
        ControlFlow::Continue(())
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_set_lists_what_was_put_in_once_and_in_page_order() {
        let set: CheckSet = [Check::NoLoad, Check::ZenerBias, Check::NoLoad].into_iter().collect();
        assert_eq!(set.iter().collect::<Vec<_>>(), [Check::ZenerBias, Check::NoLoad]);
        assert_eq!(set.len(), 2);
        assert!(set.is_within(CheckSet::ALL) && !CheckSet::ALL.is_within(set));
        assert_eq!(CheckSet::ALL.len(), Check::ALL.len());
    }

    #[test]
    fn failing_keeps_what_fails_and_the_worst_of_it() {
        let found = |check, asked| Finding { check, asked, allowed: 1.0 };
        let failing = Failing::among(|t| {
            t.take(found(Check::Dropout, 1.0))?;
            t.take(found(Check::SwingHigh, 1.5))?;
            t.take(found(Check::BaseDrive, 1.25))
        });
        assert_eq!(failing.set, CheckSet::of(&[Check::SwingHigh, Check::BaseDrive]));
        assert_eq!(failing.worst, 1.5);
    }
}
