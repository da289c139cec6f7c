//! What a page (HTML) is made from: the proof and the pictures of each set of parts.

use crate::command::Fault;
use crate::desk::{Desk, OnDesk};
use crate::load::{Loaded, SHOP_FILE};
use crate::progress::watched;
use crate::screen::Screen;
use design::chosen;
use design::parts::Parts;
use eligible::{Eligible, eligible};
use notice::has_errors;
use picture::{FrontPoint, Subject};
use report::drawn::{front_of, front_with, points};
use report::page::{self, Set};
use report::proof::{DesignProof, Evidence, Verification};
use report::shortlist::{Files, Shortlist};
use select::candidate::Candidate;
use select::front::front;
use select::problem::Problem;
use std::collections::HashMap;

/// A list with what its rows stand for.
pub(crate) struct Listed<'a> {
    pub(crate) list: &'a Shortlist<'a>,
    /// The candidates of its rows, in their order.
    pub(crate) candidates: &'a [Candidate],
    pub(crate) eligible: &'a Eligible<'a>,
}

/// The page of a shortlist.
pub(crate) fn of_list(
    listed: &Listed<'_>,
    loaded: &Loaded,
    problem: &Problem<'_>,
    screen: &Screen,
) -> Result<Vec<u8>, Fault> {
    let Listed { list, candidates, eligible } = *listed;
    let (sheet_text, shop_text) = loaded.texts();
    let sheet_name = loaded.sheet_path.display().to_string();
    let evidence = Evidence {
        shop: eligible.shop,
        sheet: &loaded.sheet,
        sheet_file: (&sheet_name, sheet_text),
        shop_file: shop_text.map(|text| (SHOP_FILE, text)),
    };
    let parts: Option<Vec<Parts<'_>>> = candidates.iter().map(|c| chosen(eligible, c)).collect();
    let parts = parts.ok_or_else(|| Fault::Defect("a candidate without parts".to_owned()))?;
    let proof = |(row, parts): (&report::shortlist::Candidate<'_>, &Parts<'_>)| {
        DesignProof::of_parts(&row.id, parts, list.boards, &evidence)
    };
    let proofs: Vec<DesignProof> = list.candidates.iter().zip(&parts).map(proof).collect();
    let on_front = if candidates.is_empty() {
        None
    } else {
        front_points(loaded.files(), eligible, problem, Some(list), screen)?
    };
    let rows = list.candidates.iter().zip(&parts).zip(&proofs);
    let sets: Vec<Set<'_>> = rows
        .map(|((row, parts), proof)| Set {
            proof,
            subject: Subject::new(parts, &loaded.sheet.rail),
            front: on_front.as_ref().map(|points| front_of(points, list, row)),
        })
        .collect();
    Ok(page::shortlist(list, &sets).into_bytes())
}

/// The page of designs, those that could be read and those that could not.
pub(crate) fn of_designs(
    verification: &Verification,
    desk: &Desk<'_>,
    on_desk: &[Result<OnDesk, Option<String>>],
    screen: &Screen,
) -> Result<Vec<u8>, Fault> {
    let mut fronts = HashMap::new();
    let mut sets = Vec::with_capacity(on_desk.len());
    for (proof, read) in verification.designs.iter().zip(on_desk) {
        let mut set = Set { proof, subject: None, front: None };
        if let Ok(read) = read
            && let Some(evidence) = desk.evidence(read)
            // What is wrong with names has been told with the proof.
            && let Some(parts) =
                Parts::find(&read.design, evidence.shop, &evidence.sheet.rail, &mut Vec::new())
            && let Some(subject) = Subject::new(&parts, &evidence.sheet.rail)
        {
            let sheet = evidence.sheet_file.0;
            if !fronts.contains_key(sheet) {
                fronts.insert(sheet, front_of_sheet(&evidence, screen)?);
            }
            let boards = read.design.boards.unwrap_or(evidence.sheet.boards);
            let currency = desk.shop_file.currency.as_deref();
            let points = fronts.get(sheet).and_then(Option::as_deref);
            set.front = points.map(|points| front_with(points, &parts, &subject, boards, currency));
            set.subject = Some(subject);
        }
        sets.push(set);
    }
    Ok(page::verification(verification, &sets).into_bytes())
}

/// The front of a sheet that designs name; None where names in it are at fault or the search gives up.
pub(crate) fn front_of_sheet(
    evidence: &Evidence<'_>,
    screen: &Screen,
) -> Result<Option<Vec<FrontPoint>>, Fault> {
    let mut notices = Vec::new();
    let eligible = eligible(evidence.sheet, evidence.shop, true, &mut notices);
    if has_errors(&notices) {
        return Ok(None);
    }
    let shop = evidence.shop_file.map(|(name, text)| (name, text.as_bytes()));
    let files = Files { sheet: evidence.sheet_file.1.as_bytes(), shop };
    front_points(files, &eligible, &eligible.problem(), None, screen)
}

/// The front of a problem; None, and said so, where the search for it gives up. `list` tells the rows
/// that are shown; None: none are.
pub(crate) fn front_points(
    files: Files<'_>,
    eligible: &Eligible<'_>,
    problem: &Problem<'_>,
    list: Option<&Shortlist<'_>>,
    screen: &Screen,
) -> Result<Option<Vec<FrontPoint>>, Fault> {
    let whole = match watched("searching the front", screen.shows_progress(), |_| front(problem)) {
        Ok(whole) => whole,
        Err(error) => {
            screen.say(&format!("warning: the front is not drawn: {error}"));
            return Ok(None);
        }
    };
    let told = |candidates: &[Candidate]| {
        Shortlist::new(files, eligible, problem, candidates, None)
            .map_err(|e| Fault::Defect(e.to_string()))
    };
    let on_front = told(&whole)?;
    Ok(Some(match list {
        Some(list) => points(&on_front, list),
        None => points(&on_front, &told(&[])?),
    }))
}
