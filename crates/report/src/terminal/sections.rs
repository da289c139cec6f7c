//! The paragraphs round the table.

use crate::figure::Pairs;
use crate::look::{Look, grouped};
use crate::shortlist::Shortlist;
use circuit::rail::{Output, Rail};
use quantity::notation::engineering;

/// At most so many unproven parts are named.
const MOST_UNPROVEN: usize = 8;

/// Columns by which the text below a heading is indented.
const INDENT: usize = 2;

/// What is asked for: the rail's name and its main figures.
pub(super) fn request(list: &Shortlist<'_>, look: &Look) -> String {
    let mut text = look.heading(list.rail);
    text.push('\n');
    text += &look.paragraph(&asked(list).join(", "), 0, 2);
    if !list.set.is_empty() {
        text += &look.paragraph(&format!("with --set {}", list.set.join(", ")), 0, 2);
    }
    text
}

/// The main figures of what is asked for.
pub(crate) fn asked(list: &Shortlist<'_>) -> Vec<String> {
    let rail = &list.sheet.rail;
    let boards = match list.boards {
        1 => "1 board".to_owned(),
        n => format!("{} boards", grouped(&n.to_string())),
    };
    vec![output(rail), load(rail), feed(rail), boards]
}

fn output(rail: &Rail) -> String {
    match rail.output {
        Output::Fixed { voltage_v, tolerance } => {
            format!("{} ± {} %", volts(voltage_v), trimmed(tolerance * 100.0))
        }
        Output::Adjustable { from_v, to_v, .. } => format!("{} to {}", volts(from_v), volts(to_v)),
    }
}

fn load(rail: &Rail) -> String {
    engineering(rail.load.max_a, "A", 4)
}

fn feed(rail: &Rail) -> String {
    format!("from a feed of {} to {}", volts(rail.feed.min_v), volts(rail.feed.max_v))
}

fn volts(v: f64) -> String {
    engineering(v, "V", 4)
}

/// A figure without the last bits that a division by 100 left behind.
fn trimmed(x: f64) -> f64 {
    quantity::digits::rounded(x)
}

/// How many combinations there are, and what became of them.
pub(super) fn combinations(list: &Shortlist<'_>, look: &Look) -> String {
    let mut text = look.paragraph(&covered(list), 0, 2);
    if let Some(lost) = &list.combinations.lost {
        text += &lost_first_to(lost, look);
    }
    text
}

/// How many combinations there are, and how many hold where they were counted.
pub(crate) fn covered(list: &Shortlist<'_>) -> String {
    let combinations = &list.combinations;
    let covered = grouped(&combinations.covered);
    match &combinations.feasible {
        Some(feasible) => {
            format!("{covered} combinations covered, {} of them hold.", grouped(feasible))
        }
        None => format!("{covered} combinations covered; --count says how many of them hold."),
    }
}

fn lost_first_to(lost: &Pairs<&'static str, String>, look: &Look) -> String {
    if lost.0.is_empty() {
        return String::new();
    }
    let counts: Vec<String> =
        lost.0.iter().map(|(check, count)| format!("{check} {}", grouped(count))).collect();
    look.paragraph(&format!("Lost first to: {}.", counts.join(", ")), 0, 2)
}

/// That nothing qualifies, and what the combinations were lost to as far as that is known.
pub(super) fn nothing_qualifies(
    list: &Shortlist<'_>,
    lost: Option<&Pairs<&'static str, String>>,
    look: &Look,
) -> String {
    let covered = &list.combinations.covered;
    let sentence = if covered == "0" {
        "Nothing qualifies: a slot has no part that may be chosen for this sheet.".to_owned()
    } else {
        format!("Nothing qualifies: none of {} combinations holds every check.", grouped(covered))
    };
    let mut text = look.heading(look.paragraph(&sentence, 0, 0).trim_end());
    text.push('\n');
    match list.combinations.lost.as_ref().or(lost) {
        Some(lost) => text += &lost_first_to(lost, look),
        None => text += &look.paragraph("--count says which checks they are lost to.", 0, 2),
    }
    text
}

/// What was assumed, what was not checked, unproven parts, cautions.
pub(super) fn trust(list: &Shortlist<'_>, look: &Look) -> String {
    let mut text = String::new();
    let mut section = |heading: &str, body: String| {
        if !body.is_empty() {
            text += &format!("\n{}\n{body}", look.heading(heading));
        }
    };
    let lines = |lines: Vec<String>| -> String {
        lines.iter().map(|line| look.paragraph(line, INDENT, 2 * INDENT)).collect()
    };
    let items = |items: &[String]| match items {
        [] => String::new(),
        items => look.items(items, INDENT, 2 * INDENT),
    };
    section("Assumed", items(&list.assumed) + &lines(leaned_on(list)));
    section("Not checked", items(&list.not_checked));
    section(&unproven_heading(list), lines(unproven(list)));
    section("Cautions", lines(list.cautions.iter().map(|c| (*c).to_owned()).collect()));
    text
}

/// Each stand-in that rows lean on, with their ranks.
pub(crate) fn leaned_on(list: &Shortlist<'_>) -> Vec<String> {
    let mut stand_ins: Vec<&str> = Vec::new();
    for stand_in in list.candidates.iter().flat_map(|c| &c.assumed) {
        if !stand_ins.contains(stand_in) {
            stand_ins.push(stand_in);
        }
    }
    let line = |stand_in: &str| {
        let rows = list.candidates.iter().filter(|c| c.assumed.contains(&stand_in));
        let ranks: Vec<usize> = rows.map(|c| c.rank).collect();
        if ranks.len() == list.candidates.len() {
            format!("every row leans on this: {stand_in}")
        } else {
            format!("{} on this: {stand_in}", leaning(&ranks))
        }
    };
    stand_ins.into_iter().map(line).collect()
}

/// `row 3 leans`, `rows 1 to 4, 7 lean`.
fn leaning(ranks: &[usize]) -> String {
    let mut runs: Vec<(usize, usize)> = Vec::new();
    for &rank in ranks {
        match runs.last_mut() {
            Some((_, last)) if *last + 1 == rank => *last = rank,
            _ => runs.push((rank, rank)),
        }
    }
    let runs: Vec<String> = runs
        .into_iter()
        .map(|(a, b)| if a == b { a.to_string() } else { format!("{a} to {b}") })
        .collect();
    let runs = runs.join(", ");
    if ranks.len() == 1 { format!("row {runs} leans") } else { format!("rows {runs} lean") }
}

fn unproven_heading(list: &Shortlist<'_>) -> String {
    format!("Unproven parts, never chosen ({})", list.unproven.len())
}

fn unproven(list: &Shortlist<'_>) -> Vec<String> {
    let mut lines: Vec<String> = list
        .unproven
        .iter()
        .take(MOST_UNPROVEN)
        .map(|u| {
            let maker = if u.maker.is_empty() { String::new() } else { format!("{}/", u.maker) };
            format!("{}:{} {maker}{} lacks {}", u.file, u.line, u.part, u.lacks.join(", "))
        })
        .collect();
    let more = list.unproven.len().saturating_sub(MOST_UNPROVEN);
    if more > 0 {
        lines.push(format!(
            "and {} more; `railwright catalog check` names all",
            grouped(&more.to_string())
        ));
    }
    lines
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn ranks_in_runs() {
        assert_eq!(leaning(&[3]), "row 3 leans");
        assert_eq!(leaning(&[1, 2, 3, 5, 8, 9]), "rows 1 to 3, 5, 8 to 9 lean");
    }
}
