//! How far each check may go: held as it is, up to a utilisation, or not asked at all.

use crate::check_set::CheckSet;
use circuit::assembly::Aim;
use circuit::check::{Check, Finding, Tally};
use circuit::divider::adjustable::AdjustableAim;
use circuit::divider::fixed::FixedAim;
use circuit::resistor::PotAtRail;
use std::ops::ControlFlow;

/// What a combination must keep to pass.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Limits {
    /// These checks must hold.
    asked: CheckSet,
    /// These may go up to a utilisation of `most`; all others may find anything.
    strained: CheckSet,
    most: f64,
}

impl Limits {
    /// These checks must hold; no other is asked.
    pub const fn asking(asked: CheckSet) -> Self {
        Self { asked, strained: CheckSet::EMPTY, most: f64::INFINITY }
    }

    /// Every check must hold.
    pub const ALL: Limits = Limits::asking(CheckSet::ALL);

    /// These checks may go up to a utilisation above 1, all others must hold.
    pub const fn straining(strained: CheckSet, most: f64) -> Self {
        Self { asked: CheckSet::ALL.without(strained), strained, most }
    }

    /// The checks of which not everything is let through.
    pub const fn bounded(&self) -> CheckSet {
        self.asked.and(self.strained)
    }

    /// The checks that must hold.
    pub const fn asked_to_hold(&self) -> CheckSet {
        self.asked
    }

    /// What a check found is let through.
    pub fn lets(&self, finding: &Finding) -> bool {
        if self.asked.contains(finding.check) {
            finding.holds()
        } else {
            !self.strained.contains(finding.check) || finding.utilisation() <= self.most
        }
    }

    /// Everything that some checks find is let through.
    pub fn let_all(&self, checks: impl FnOnce(&mut Within<'_>) -> ControlFlow<()>) -> bool {
        checks(&mut Within(self)).is_continue()
    }

    /// By how much the limit of a check is wider than its own; infinite where it is not asked.
    fn factor(&self, check: Check) -> f64 {
        if self.asked.contains(check) {
            1.0
        } else if self.strained.contains(check) {
            // A hair more, so that a bound made of it never cuts what [`Limits::lets`] lets through.
            self.most * (1.0 + 1e-12)
        } else {
            f64::INFINITY
        }
    }

    /// An aim that asks no more of a divider than these limits do: for bounds. None where they do not
    /// bound a fixed output.
    pub fn aim(&self, aim: &Aim) -> Option<Aim> {
        match *aim {
            Aim::Fixed(FixedAim { voltage_v, tolerance }) => {
                let tolerance = tolerance * self.factor(Check::OutputError);
                tolerance.is_finite().then_some(Aim::Fixed(FixedAim { voltage_v, tolerance }))
            }
            Aim::Adjustable(AdjustableAim { from_v, to_v, low_stop_v, ceiling_v }) => {
                let ceiling = self.factor(Check::Ceiling);
                Some(Aim::Adjustable(AdjustableAim {
                    from_v: from_v * self.factor(Check::ReachLow),
                    to_v: to_v / self.factor(Check::ReachHigh),
                    low_stop_v: low_stop_v / self.factor(Check::LowStop),
                    ceiling_v: ceiling_v.map(|v| v * ceiling).filter(|v| v.is_finite()),
                }))
            }
        }
    }

    /// A pot of which these limits ask no less than of this one: for bounds.
    pub fn pot(&self, pot: &PotAtRail) -> PotAtRail {
        let voltage = self.factor(Check::PotVoltage);
        PotAtRail {
            allowed_power_w: if pot.allowed_power_w > 0.0 {
                pot.allowed_power_w * self.factor(Check::PotPower)
            } else if self.asked.contains(Check::PotPower) {
                pot.allowed_power_w
            } else {
                f64::INFINITY
            },
            allowed_voltage_v: pot
                .allowed_voltage_v
                .map(|v| v * voltage)
                .filter(|_| voltage.is_finite()),
            ..*pot
        }
    }
}

/// Asks until something is found that limits do not let through.
pub struct Within<'l>(&'l Limits);

impl Tally for Within<'_> {
    #[inline]
    fn take(&mut self, finding: Finding) -> ControlFlow<()> {
        if self.0.lets(&finding) { ControlFlow::Continue(()) } else { ControlFlow::Break(()) }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn what_is_asked_must_hold_and_what_is_strained_may_go_so_far() {
        let found = |check, asked| Finding { check, asked, allowed: 1.0 };
        let limits = Limits::straining(CheckSet::of(&[Check::Dropout]), 1.5);
        assert!(limits.lets(&found(Check::Dropout, 1.5)));
        assert!(!limits.lets(&found(Check::Dropout, 1.6)));
        assert!(!limits.lets(&found(Check::SwingHigh, 1.1)));
        let dropped = Limits::asking(CheckSet::of(&[Check::SwingHigh]));
        assert!(dropped.lets(&found(Check::Dropout, f64::INFINITY)));
        assert!(!dropped.let_all(|t| {
            t.take(found(Check::Dropout, 2.0))?;
            t.take(found(Check::SwingHigh, 2.0))
        }));
    }
}
