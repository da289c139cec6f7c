//! Why nothing qualifies, told in words.

use super::words::{self, Currency};
use crate::look::{Look, grouped};
use quantity::notation::Unit;
use reasons::conflict::Conflict;
use reasons::losses::SlotLosses;
use reasons::nothing::Nothing;
use reasons::remedy::Remedy;
use reasons::requirement::Requirement;
use reasons::survey::{MOST_FAILING, Miss};
use select::problem::Problem;
use sheet::Sheet;

/// Columns by which the text below a heading is indented.
const INDENT: usize = words::INDENT;

/// Why nothing qualifies for a sheet: losses, conflict, single changes, remedies.
pub fn nothing(reasons: &Nothing, sheet: &Sheet, problem: &Problem<'_>, look: &Look) -> String {
    let mut text = look.heading(&format!("{}: nothing qualifies", sheet.name));
    text.push('\n');
    let covered = problem.covered().to_string();
    let first = match covered.as_str() {
        "0" => format!(
            "No part may be chosen for {}. `railwright whynot SHEET PART` tells what bars a part.",
            empty_slots(reasons)
        ),
        n => format!("None of {} combinations holds every check.", grouped(n)),
    };
    text += &look.paragraph(&first, 0, 2);
    let mut section = |heading: &str, body: String| {
        if !body.is_empty() {
            text += &format!("\n{}\n{body}", look.heading(heading));
        }
    };
    section(
        "Parts that one check alone rules out",
        reasons.losses.iter().map(|row| slot(row, look)).collect(),
    );
    section(
        "A smallest conflict",
        reasons.conflict.iter().map(|found| conflict(found, problem, look)).collect(),
    );
    section("Nearest combinations", misses(reasons, problem, look));
    let currency = Currency(sheet.currency.as_deref());
    let mut changes = words::key_changes(&reasons.keys, problem.rail, &currency, INDENT, look);
    if covered != "0" {
        if changes.is_empty() {
            changes = look.paragraph("No single change was found.", INDENT, 2 * INDENT);
        }
        changes += &words::keys_in_vain(&reasons.keys, look);
        changes += &words::how_changes_are_found(&reasons.keys, look);
    }
    section("Smallest single changes that admit a candidate", changes);
    section("What would help", remedies(&reasons.remedies, look));
    text
}

/// The slots that have no part, by name.
fn empty_slots(reasons: &Nothing) -> String {
    let rows = reasons.losses.iter();
    let empty: Vec<&str> = rows.filter(|row| row.parts == 0).map(|row| row.slot.name()).collect();
    if empty.is_empty() { "some slot".to_owned() } else { empty.join(", ") }
}

/// That something does qualify, and what to ask instead.
pub fn something(sheet: &Sheet, look: &Look) -> String {
    let mut text = look.heading(&format!("{}: there are candidates", sheet.name));
    text.push('\n');
    text + &look.paragraph(
        "`railwright shortlist` ranks them. Name a part behind the sheet to be told where it stands, or \
         why it is not on the list.",
        0,
        2,
    )
}

/// `zener  66 parts, 60 left; lost to zener-bias 4, output-error 2`.
fn slot(row: &SlotLosses, look: &Look) -> String {
    let mut told = format!("{:<12} {} of {} left", row.slot.name(), row.left, row.parts);
    let mut lost: Vec<String> = Vec::new();
    if row.misfits > 0 {
        lost.push(format!("heatsink-fit {}", row.misfits));
    }
    lost.extend(row.lost.iter().map(|(check, parts)| format!("{} {parts}", check.name())));
    if !lost.is_empty() {
        told += &format!("; lost to {}", lost.join(", "));
    }
    look.paragraph(&told.replacen("  ", "\u{a0}\u{a0}", 8), INDENT, 2 * INDENT)
}

fn conflict(conflict: &Conflict, problem: &Problem<'_>, look: &Look) -> String {
    let named = |r: Requirement| format!("{} ({})", r.keys().join(", "), r.demand());
    let all: Vec<String> = conflict.requirements().into_iter().map(named).collect();
    let sentence = match all.as_slice() {
        [] => "No requirement is to blame: no combination can be built, whatever is asked of it. A slot \
               is empty, or no heatsink fits."
            .to_owned(),
        [one] => format!("No combination meets {one}, whatever else is asked."),
        all => format!(
            "No combination meets these together, whatever else is asked: {}. Without any one of \
             them there is a combination that does.",
            all.join("; ")
        ),
    };
    let mut text = look.paragraph(&sentence, INDENT, INDENT);
    for member in &conflict.members {
        let miss = &member.without_it;
        let keys = member.requirement.keys().join(", ");
        let own = miss
            .failures()
            .filter(|f| Requirement::of(f.check, problem.rail) == member.requirement)
            .map(words::failed);
        let mut others: Vec<String> = miss
            .failures()
            .map(|f| Requirement::of(f.check, problem.rail))
            .filter(|r| !conflict.requirements().contains(r))
            .flat_map(|r| r.keys().iter().map(|key| (*key).to_owned()))
            .collect();
        others.sort();
        others.dedup();
        let mut told = format!(
            "Without {keys}: {}, which fails {}.",
            words::parts_of_miss(miss, problem),
            own.collect::<Vec<_>>().join("; ")
        );
        if !others.is_empty() {
            told += &format!(" It also fails checks for {}.", others.join(", "));
        }
        text += &look.paragraph(&told, INDENT, 2 * INDENT);
    }
    text
}

/// Combinations that fail in fewest checks, but for those that the conflict has told.
fn misses(reasons: &Nothing, problem: &Problem<'_>, look: &Look) -> String {
    let told = |miss: &&Miss| {
        let members = reasons.conflict.iter().flat_map(|conflict| &conflict.members);
        members.map(|member| member.without_it.failing).any(|failing| failing == miss.failing)
    };
    let tell = |miss: &Miss| {
        let parts = words::parts_of_miss(miss, problem);
        let told = format!("{parts}, which fails {}.", words::failures(miss.failures()));
        look.paragraph(&told, INDENT, 2 * INDENT)
    };
    // One that fails in more is near to nothing.
    let is_near = |miss: &&Miss| miss.failing.len() <= MOST_FAILING;
    reasons.nearest.iter().filter(is_near).filter(|miss| !told(miss)).map(tell).collect()
}

fn remedies(remedies: &[Remedy], look: &Look) -> String {
    remedies
        .iter()
        .map(|remedy| look.paragraph(&remedy_in_words(remedy), INDENT, 2 * INDENT))
        .collect()
}

pub(super) fn remedy_in_words(remedy: &Remedy) -> String {
    match *remedy {
        Remedy::TighterZener { tol_pct } => format!(
            "A tighter zener: one of the catalog's, selected to ±{}, would be in a candidate.",
            words::figure(tol_pct, Unit::Percent)
        ),
        Remedy::TrimmedOutput => {
            "A trimmed output: the tolerances of zener and divider are all that \
                                  is in the way, and a trimmer takes them out. This tool does not \
                                  check trimmed outputs."
                .to_owned()
        }
        Remedy::Darlington => {
            "A darlington: the base current of a single transistor is all that is in \
                               the way."
                .to_owned()
        }
        Remedy::LargerSink { at_most_c_per_w } => format!(
            "A larger heatsink: one of {} or less would do.",
            words::figure(at_most_c_per_w, Unit::CelsiusPerWatt)
        ),
        Remedy::LowerFeed { at_most_v } => {
            format!("A lower feed: {} at most.", words::figure(at_most_v, Unit::Volt))
        }
        Remedy::HigherValley { at_least_v } => format!(
            "A feed whose valley is higher, by a larger reservoir or another winding: {} at least.",
            words::figure(at_least_v, Unit::Volt)
        ),
    }
}
