//! What each check compares, with its numbers put in.
//!
//! The formulas are those that `circuit` declares with each check; only where a declaration speaks of a
//! choice between two is the one named that was made.

use super::book::{Book, Expression};
use crate::figure::Figure;
use circuit::check::{Check, Finding};
use circuit::rail::Rail;
use circuit::slot::Slot;
use serde::Serialize;

/// A check with both sides worked out.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct CheckLine {
    /// Its name.
    pub name: &'static str,
    /// `damage` or `function`.
    pub kind: &'static str,
    /// The slot whose part it protects.
    pub slot: &'static str,
    /// It holds.
    pub holds: bool,
    /// What is asked.
    pub asked: Figure,
    /// What is allowed.
    pub allowed: Figure,
    /// asked/allowed.
    pub utilisation: Figure,
    /// The unit of asked and allowed.
    pub unit: &'static str,
    /// How asked is worked out.
    pub asked_by: Expression,
    /// How allowed is worked out.
    pub allowed_by: Expression,
}

impl CheckLine {
    /// A finding with its formulas worked out in a book.
    pub(super) fn new(finding: &Finding, book: &Book, rail: &Rail, junctions: u8) -> Self {
        let check = finding.check;
        let slot = part_of(check);
        let (asked, allowed) = formulas(finding, rail, junctions);
        Self {
            name: check.name(),
            kind: check.kind().name(),
            slot: slot.name(),
            holds: finding.holds(),
            asked: Figure(finding.asked),
            allowed: Figure(finding.allowed),
            utilisation: Figure(finding.utilisation()),
            unit: check.unit(),
            asked_by: book.side(slot, asked, finding.asked),
            allowed_by: book.side(slot, allowed, finding.allowed),
        }
    }
}

/// The formulas of asked and allowed.
fn formulas(finding: &Finding, rail: &Rail, junctions: u8) -> (&'static str, &'static str) {
    let check = finding.check;
    let (asked, allowed) = (check.asked_formula(), check.allowed_formula());
    match check {
        // The side of the window that is used more.
        Check::DividerWindow => {
            let is_low = finding.asked == rail.divider.min_a;
            let side = |text: &'static str| match text.split_once(" | ") {
                Some((low, high)) => {
                    if is_low {
                        low
                    } else {
                        high
                    }
                }
                None => text,
            };
            (side(asked), side(allowed))
        }
        Check::CollectorCurrent if rail.fault.is_none() => ("IE", allowed),
        Check::NoLoad if junctions == 2 => ("ib + ileak", allowed),
        Check::NoLoad => ("ib", allowed),
        // The words behind the formula say which part's figures it means; the slot does so here.
        Check::PotPower | Check::PotVoltage => {
            (asked, allowed.strip_suffix(" (pot)").unwrap_or(allowed))
        }
        _ => (asked, allowed),
    }
}

/// The slot of the part that a check protects, or whose figures its formulas mean.
pub fn part_of(check: Check) -> Slot {
    match check {
        Check::ZenerBias | Check::ZenerPower | Check::ZenerJunction => Slot::Zener,
        Check::RzPower | Check::RzVoltage => Slot::BiasLine,
        Check::DividerWindow
        | Check::OutputError
        | Check::RfPower
        | Check::RfVoltage
        | Check::RiPower
        | Check::RxPower
        | Check::RxVoltage => Slot::DividerLine,
        Check::ReachHigh
        | Check::ReachLow
        | Check::LowStop
        | Check::Ceiling
        | Check::PotPower
        | Check::PotVoltage => Slot::Pot,
        Check::CollectorVoltage
        | Check::CollectorCurrent
        | Check::PassPower
        | Check::PassJunction
        | Check::SoaLoad
        | Check::SoaFault
        | Check::FaultJunction
        | Check::Dropout => Slot::Pass,
        Check::AmpSupplyHigh
        | Check::AmpSupplyLow
        | Check::AmpInputLow
        | Check::AmpInputHigh
        | Check::BaseDrive
        | Check::SwingHigh
        | Check::SwingLow
        | Check::AmpJunction
        | Check::AmpFault
        | Check::LeakageSink
        | Check::NoLoad => Slot::Amplifier,
    }
}
