//! Order lines of one rail: of a candidate, or of a design.

use crate::desk::{Desk, OnDesk};
use design::parts::Parts;
use design::proof::Ohms;
use eligible::{Eligible, eligible};
use purchase::order::{Need, Order};
use purchase::piece;
use purchase::second_source::{Rows, second_sources};
use report::purchase::lines::RailLines;
use select::candidate::Candidate;

/// The order lines of a candidate. None where it is not one of these rows.
pub(crate) fn of_candidate(eligible: &Eligible<'_>, candidate: &Candidate) -> Option<RailLines> {
    let boards = eligible.sheet.boards;
    let ohms = Ohms {
        rz: candidate.rz.ohm,
        upper: candidate.divider.upper.ohm,
        ri: candidate.divider.ri.ohm,
    };
    let place = |slot| candidate.place(slot);
    let pieces = piece::of_candidate(eligible, place, ohms)?;
    let rows = Rows::of_candidate(eligible, place, ohms)?;
    let others = second_sources(&rows, eligible);
    let order = Order::new(&[Need { boards, pieces }]);
    Some(RailLines::new(&eligible.sheet.name, &order, boards, others.as_ref()))
}

/// The order lines of a design that has been read. None where a name in it means nothing: its proof
/// tells that.
pub(crate) fn of_design(design: &OnDesk, desk: &Desk<'_>) -> Option<RailLines> {
    let evidence = desk.evidence(design)?;
    let design = &design.design;
    // What is wrong with its names or those of its sheet has been told with its proof.
    let mut told = Vec::new();
    let parts = Parts::find(design, evidence.shop, &evidence.sheet.rail, &mut told)?;
    // Stock is asked for as many boards as the design is for.
    let boards = design.boards.unwrap_or(evidence.sheet.boards);
    let mut sheet = evidence.sheet.clone();
    sheet.boards = boards;
    // Rows whose resistance may vanish are left out here: others are counted without them.
    let allowed = eligible(&sheet, evidence.shop, true, &mut told);
    let rows = Rows::of_design(&parts);
    let others = rows.and_then(|rows| second_sources(&rows, &allowed));
    let pieces = piece::of_design(&parts, sheet.rail.is_adjustable(), 0);
    let order = Order::new(&[Need { boards, pieces }]);
    Some(RailLines::new(&design.name, &order, boards, others.as_ref()))
}
