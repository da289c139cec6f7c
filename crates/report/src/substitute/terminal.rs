//! A substitution for people.

use super::fit::{Fit, row_holds};
use super::mend::Mend;
use super::tables::{also_changes, changes, checks, figures, narrow, same_numbers, troubles};
use super::{Looked, Substitution, slot_words};
use crate::look::Look;
use crate::shortlist::CheckRow;
use crate::table::screen;
use circuit::slot::Slot;
use quantity::notation::engineering;

/// Columns of the list on a terminal.
const SHOWN: [&str; 10] = [
    "rank",
    "goes in",
    "also changes",
    "board",
    "cost",
    "margin",
    "slack",
    "stock",
    "weeks",
    "status",
];

/// Columns of text from which on the list shows every column.
const WIDE: usize = 76;

/// Columns of the list that a narrow terminal goes without.
const LEFT_OUT: [&str; 3] = ["margin", "slack", "weeks"];

/// The whole text. One replacement, or one that was named, is told with every check.
pub fn substitution(of: &Substitution, look: &Look) -> String {
    let mut text = look.heading(&of.name);
    text.push('\n');
    text += &look.paragraph(&asked(of), 0, 2);
    text += &look.paragraph(&as_built(of.before.as_ref()), 0, 2);
    if let Some(with) = &of.with {
        text += &look.paragraph(&alone(with, of), 0, 2);
    }
    let one = match (of.with.is_some(), of.replacements.as_slice()) {
        (true, [first, ..]) | (false, [first]) => Some(first),
        _ => None,
    };
    match (one, of.replacements.is_empty()) {
        (Some(mend), _) => text += &whole(of, mend, look),
        (None, true) => text += &look.paragraph(&nothing(of), 0, 2),
        (None, false) => text += &list(of, look),
    }
    text
}

fn asked(of: &Substitution) -> String {
    let gone: Vec<String> = of
        .gone
        .iter()
        .map(|gone| {
            let slot = Slot::named(gone.slot).map_or(gone.slot, slot_words);
            format!("{} ({slot})", gone.part)
        })
        .collect();
    let set = match of.set.as_slice() {
        [] => String::new(),
        set => format!(", with --set {}", set.join(", ")),
    };
    let boards =
        if of.boards == 1 { "1 board".to_owned() } else { format!("{} boards", of.boards) };
    format!("In place of {}; {boards}, rail sheet {}{set}", gone.join(", "), of.sheet)
}

fn as_built(before: Option<&Fit>) -> String {
    match before {
        None => "As built: figures are not known that checks need.".to_owned(),
        Some(fit) if fit.holds => "As built: every check holds.".to_owned(),
        Some(fit) => format!("As built it does not hold already: {}.", failing(fit)),
    }
}

fn alone(with: &str, of: &Substitution) -> String {
    let not_stocked: Vec<String> =
        of.not_stocked.0.iter().map(|(key, ohm)| format!("{key} = {}", ohm.0)).collect();
    if !not_stocked.is_empty() {
        return format!("{with} does not stock {}.", not_stocked.join(", "));
    }
    match of.alone.as_ref() {
        None => format!("{with} and nothing else changed: figures are not known that checks need."),
        Some(fit) if fit.holds => format!("{with} and nothing else changed: every check holds."),
        Some(fit) => format!("{with} and nothing else changed does not hold: {}.", failing(fit)),
    }
}

/// What fails, with both sides.
fn failing(fit: &Fit) -> String {
    let check = |check: &CheckRow| {
        let side = |x: f64| engineering(x, check.unit, 4);
        format!("{} asked {}, allowed {}", check.name, side(check.asked.0), side(check.allowed.0))
    };
    let checks = fit.checks.iter().filter(|c| !row_holds(c)).map(check);
    checks.chain(fit.conditions.iter().cloned()).collect::<Vec<_>>().join("; ")
}

fn nothing(of: &Substitution) -> String {
    let what = of.with.as_deref().unwrap_or("Nothing");
    let negation = if of.with.is_some() { "can't" } else { "can" };
    match of.looked.everything {
        true => format!("{what} {negation} go in, whatever else changes."),
        false => {
            format!("{what} {negation} go in, as far as it was looked: {}.", how_far(&of.looked))
        }
    }
}

/// How far it was looked, as a clause.
pub(crate) fn how_far(looked: &Looked) -> String {
    let parts = match looked.further_parts {
        None => {
            return "nothing, for the parts that are gone make too many combinations".to_owned();
        }
        Some(0) => "with no further part changed".to_owned(),
        Some(1) => "with at most 1 further part changed".to_owned(),
        Some(n) => format!("with at most {n} further parts changed"),
    };
    let more = if looked.too_many { "; more make too many combinations" } else { "" };
    if looked.paired_in_part {
        return format!(
            "changes {parts}, but of the pairs of replacements for what is gone only those of the best \
             parts: a better pair may be missing{more}"
        );
    }
    format!("every change {parts}{more}")
}

fn list(of: &Substitution, look: &Look) -> String {
    let mut text = String::from("\n");
    // On a narrow terminal fewer columns, so that no word is broken; files hold them all.
    let shown = SHOWN.iter().filter(|c| look.width >= WIDE || !LEFT_OUT.contains(c)).copied();
    text += &screen::table(&narrow(of), &shown.collect::<Vec<_>>(), look);
    text.push('\n');
    let shown = of.replacements.len();
    let looked = how_far(&of.looked);
    let how = match of.looked.found.checked_sub(shown) {
        Some(more @ 1..) => {
            format!("{shown} shown of {} found; looked at: {looked}.", shown + more)
        }
        _ => format!("{shown} found; looked at: {looked}."),
    };
    text += &look.paragraph(&how, 0, 2);
    let order = "The smallest change comes first: further parts, then changed parts of another or \
                 unknown package, then of another or unknown pinout, then resistor values; equal changes \
                 by score.";
    text += &look.paragraph(order, 0, 2);
    text + &remarks(&of.replacements, look)
}

fn remarks(mends: &[Mend], look: &Look) -> String {
    let mut text = String::new();
    for mend in mends {
        for remark in same_numbers(mend).into_iter().chain(troubles(mend)) {
            text += &look.paragraph(&format!("{}: {remark}", mend.rank), 0, 2);
        }
    }
    text
}

/// One way to mend the design, with every check before and after.
fn whole(of: &Substitution, mend: &Mend, look: &Look) -> String {
    let also = match also_changes(mend) {
        also if also.is_empty() => "nothing else".to_owned(),
        also => also,
    };
    let mut text = look.paragraph(&format!("The least that has to change with it: {also}."), 0, 2);
    let mut section = |heading: &str, body: &str| {
        text.push('\n');
        text += &look.heading(heading);
        text.push('\n');
        text += body;
    };
    let currency = of.currency.as_ref();
    let shown = ["place", "was", "is", "board", "price", "stock", "weeks", "status"];
    section("Changes", &screen::table(&changes(mend, currency), &shown, look));
    let before = of.before.as_ref();
    let shown = ["figure", "before", "after"];
    section(
        "Before and after",
        &screen::table(&figures(before, &mend.after, currency.map(String::as_str)), &shown, look),
    );
    let shown = ["check", "kind", "used before", "used after", "note"];
    section("Checks", &screen::table(&checks(before, &mend.after), &shown, look));
    let remarks = remarks(std::slice::from_ref(mend), look);
    if !remarks.is_empty() {
        section("To be looked at", &remarks);
    }
    text.push('\n');
    text += &look.paragraph(&format!("Looked at: {}.", how_far(&of.looked)), 0, 2);
    text
}
