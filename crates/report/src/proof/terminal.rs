//! Proofs for people: the whole of one design, or a line for each of many and then what fails.

use super::book::{Expression, Figure, Origin, spelled};
use super::checks::CheckLine;
use super::origin::{Giver, KeyOrigin};
use super::{Answer, ConditionLine, DesignProof, SlotLine, Verification};
use crate::look::Look;
use design::condition::Rule;
use quantity::notation::resistance;
use std::fmt::Write as _;

/// Columns by which the text below a heading is indented.
const INDENT: usize = 2;

/// Significant digits of a utilisation, a margin, a slack.
const SHARE_DIGITS: usize = 3;

/// Significant digits of both sides of a check that fails, and of what it is short by.
const SHORT_DIGITS: usize = 5;

/// The whole text.
pub fn verification(verification: &Verification, look: &Look) -> String {
    match verification.designs.as_slice() {
        [only] => whole(only, verification, look),
        many => {
            let mut text = with_set(verification, look);
            text += &overview(many, look);
            for design in many.iter().filter(|d| d.answer != Answer::Holds) {
                text.push('\n');
                text += &look.heading(&format!("{}: {}", design.file, design.answer));
                text.push('\n');
                text += &failures(design, look);
            }
            let changed = many.iter().filter(|d| d.answer == Answer::Holds).map(|d| {
                let changes = changes(d, look);
                let heading = look.heading(&format!("{}: changed since it was kept", d.file));
                if changes.is_empty() { changes } else { format!("\n{heading}\n{changes}") }
            });
            text + &changed.collect::<String>()
        }
    }
}

fn with_set(verification: &Verification, look: &Look) -> String {
    match verification.set.as_slice() {
        [] => String::new(),
        set => look.paragraph(&format!("with --set {}", set.join(", ")), 0, 2),
    }
}

// ---- many designs ----

/// A line for each design. A folder that all of them lie in is told once.
fn overview(designs: &[DesignProof], look: &Look) -> String {
    let folder = |design: &DesignProof| {
        design.file.rsplit_once('/').map(|(folder, _)| format!("{folder}/")).unwrap_or_default()
    };
    let mut shared = designs.first().map(folder).unwrap_or_default();
    if designs.iter().any(|design| folder(design) != shared) {
        shared.clear();
    }
    let mut text = match shared.as_str() {
        "" => String::new(),
        shared => look.paragraph(&format!("In {shared}"), 0, INDENT),
    };
    let mut rows = vec![["design", "answer", "margin", "slack", "bound by"].map(str::to_owned)];
    rows.extend(designs.iter().map(|design| {
        let summary = design.summary.as_ref();
        let share = |of: Option<f64>| of.map_or("-".to_owned(), |x| spelled(x, SHARE_DIGITS));
        let bound = summary.map_or(String::new(), |s| {
            let binding = [s.binding.damage, s.binding.function];
            binding.into_iter().flatten().collect::<Vec<_>>().join(", ")
        });
        [
            design.file.strip_prefix(&shared).unwrap_or(&design.file).to_owned(),
            design.answer.to_string(),
            share(summary.map(|s| s.margin.0)),
            share(summary.map(|s| s.slack.0)),
            bound,
        ]
    }));
    text += &aligned(&rows, look);
    text
}

/// Rows whose cells stand below each other; the last cell of a row is broken where it does not fit.
fn aligned<const N: usize>(rows: &[[String; N]], look: &Look) -> String {
    let shown: Vec<[String; N]> =
        rows.iter().map(|row| std::array::from_fn(|at| look.text(&row[at]))).collect();
    let width = |text: &str| textwrap::core::display_width(text);
    let widths: [usize; N] =
        std::array::from_fn(|at| shown.iter().map(|row| width(&row[at])).max().unwrap_or(0));
    let mut text = String::new();
    for row in &shown {
        let Some((last, first)) = row.split_last() else { continue };
        let mut line = String::new();
        for (cell, wide) in first.iter().zip(widths) {
            let gap = " ".repeat(wide - width(cell) + INDENT);
            let _ = write!(line, "{cell}{gap}");
        }
        let begin = width(&line);
        if begin + LEAST_CELL > look.width {
            // No room to break anything in: the terminal does it.
            text += format!("{line}{last}").trim_end();
            text.push('\n');
        } else {
            let cell = look.paragraph(last, begin, begin + INDENT);
            text += format!("{line}{}", cell.get(begin..).unwrap_or_default()).trim_end();
            text.push('\n');
        }
    }
    text
}

/// Columns below which a cell is not broken into lines.
const LEAST_CELL: usize = 16;

// ---- what fails ----

/// Every condition and check that fails, and what has changed.
fn failures(design: &DesignProof, look: &Look) -> String {
    let mut text = String::new();
    // The faults themselves have been told where notices go.
    if design.answer == Answer::Broken {
        let faults = match design.faults.len() {
            1 => "1 fault is told".to_owned(),
            n => format!("{n} faults are told"),
        };
        let line = format!("nothing is checked: {faults} on standard error");
        text += &look.paragraph(&line, INDENT, 2 * INDENT);
    }
    for condition in design.conditions.iter().filter(|c| !c.holds) {
        let of = named(design, condition.slot);
        let line = format!("{} fails for {of}: {}", condition.name, condition.told);
        text += &look.paragraph(&line, INDENT, 2 * INDENT);
    }
    for check in design.checks.iter().filter(|c| !c.holds) {
        text += &failed(check, design, look);
    }
    text + &changes(design, look)
}

/// Both sides of a check that fails, below each other, and the difference.
fn failed(check: &CheckLine, design: &DesignProof, look: &Look) -> String {
    let figure = |value: f64| format!("{} {}", spelled(value, SHORT_DIGITS), check.unit);
    let (asked, allowed) = (figure(check.asked.0), figure(check.allowed.0));
    let width = asked.chars().count().max(allowed.chars().count());
    let side = |name: &str, figure: &str, expression: &Expression| {
        let room = " ".repeat(width - figure.chars().count());
        let line = format!("{name:<9}{figure}{room}   {}", expression.formula);
        look.paragraph(line.replace("   ", "\u{a0}\u{a0}\u{a0}").trim_end(), 2 * INDENT, 6 * INDENT)
    };
    let heading = format!("{} fails for {}", check.name, named(design, check.slot));
    let mut text = look.paragraph(&heading, INDENT, 2 * INDENT);
    text += &side("asked", &asked, &check.asked_by);
    text += &side("allowed", &allowed, &check.allowed_by);
    let short = check.asked.0 - check.allowed.0;
    if short.is_finite() {
        text += &look.paragraph(&format!("short by {}", figure(short)), 2 * INDENT, 6 * INDENT);
    }
    text
}

/// A slot's part with the place that describes it.
fn named(design: &DesignProof, slot: &str) -> String {
    match design.slot(slot) {
        Some(part) => format!("{} ({}:{})", part.full_name(), part.file, part.line),
        None => slot.to_owned(),
    }
}

fn changes(design: &DesignProof, look: &Look) -> String {
    let mut text = String::new();
    for change in &design.changes {
        let cell = |cell: &Option<String>| cell.clone().unwrap_or_else(|| "blank".to_owned());
        let line = format!(
            "{} of {} was {} and is {}",
            change.column,
            named(design, change.slot),
            cell(&change.was),
            cell(&change.is)
        );
        text += &look.paragraph(&line, INDENT, 2 * INDENT);
    }
    text
}

// ---- one design ----

fn whole(design: &DesignProof, verification: &Verification, look: &Look) -> String {
    let mut text = look.heading(design.name.as_deref().unwrap_or(&design.file));
    text.push('\n');
    text += &look.paragraph(&answer(design), 0, 2);
    text += &with_set(verification, look);
    if let Some(sheet) = &design.sheet {
        text += &look.paragraph(&format!("Rail sheet {}{}", sheet.file, kept(sheet.changed)), 0, 2);
    }
    let mut section = |heading: &str, body: String| {
        if !body.is_empty() {
            let _ = write!(text, "\n{}\n{body}", look.heading(heading));
        }
    };
    let failing = DesignProof { changes: Vec::new(), ..design.clone() };
    section("What fails", failures(&failing, look));
    section("Changed since it was kept", changes(design, look));
    section("Parts", parts(design, look));
    section("Conditions", conditions(design, look));
    section("Checks", design.checks.iter().map(|c| check(c, look)).collect());
    for (heading, body) in figures(design, look) {
        section(&heading, body);
    }
    let items = |items: &[String]| match items {
        [] => String::new(),
        items => look.items(items, INDENT, 2 * INDENT),
    };
    section("Assumed", items(&design.assumed));
    section("Not checked", items(&design.not_checked));
    let cautions = design.cautions.iter().map(|c| look.paragraph(c, INDENT, 2 * INDENT));
    section("Cautions", cautions.collect());
    text
}

fn kept(changed: Option<bool>) -> &'static str {
    match changed {
        None => "",
        Some(false) => ", the same as when the design was kept",
        Some(true) => ", which has changed since the design was kept",
    }
}

fn answer(design: &DesignProof) -> String {
    let file = &design.file;
    match (&design.summary, design.answer) {
        (Some(s), answer) => {
            let by = |check: Option<&str>| check.map(|c| format!(" ({c})")).unwrap_or_default();
            let failures = match (answer, design.failures()) {
                (Answer::Fails, 1) => " in 1 point".to_owned(),
                (Answer::Fails, n) => format!(" in {n} points"),
                _ => String::new(),
            };
            format!(
                "{file} {answer}{failures}: margin {}{}, slack {}{}",
                spelled(s.margin.0, SHARE_DIGITS),
                by(s.binding.damage),
                spelled(s.slack.0, SHARE_DIGITS),
                by(s.binding.function),
            )
        }
        (None, Answer::Unproven) => {
            format!("{file} is unproven: checks could not be made, for figures are missing")
        }
        (None, answer) => format!("{file} is {answer}"),
    }
}

fn parts(design: &DesignProof, look: &Look) -> String {
    let mut rows: Vec<[String; 3]> = design
        .slots
        .iter()
        .map(|slot| {
            let place = format!("{}:{}", slot.file, slot.line);
            [format!("  {}", slot.slot), slot.full_name(), place]
        })
        .collect();
    rows.extend(design.values.0.iter().map(|(name, ohm)| {
        let shown = if ohm.0 == 0.0 { "a link".to_owned() } else { resistance(ohm.0) };
        [format!("  {name}"), shown, String::new()]
    }));
    aligned(&rows, look)
}

/// Conditions of one rule that tell the same.
pub(crate) struct Alike<'d> {
    pub(crate) rule: &'static str,
    pub(crate) holds: bool,
    pub(crate) told: &'d str,
    /// Their slots; empty where these are all the conditions of the rule.
    pub(crate) slots: Vec<&'static str>,
}

/// A line for each rule, or each part of a rule that tells different things of different parts.
pub(crate) fn alike(design: &DesignProof) -> Vec<Alike<'_>> {
    let mut rows = Vec::new();
    for rule in Rule::ALL {
        let lines: Vec<&ConditionLine> =
            design.conditions.iter().filter(|c| c.rule == rule).collect();
        let mut told: Vec<&str> = Vec::new();
        for line in &lines {
            if !told.contains(&line.told.as_str()) {
                told.push(&line.told);
            }
        }
        for what in told {
            let same: Vec<&&ConditionLine> = lines.iter().filter(|l| l.told == what).collect();
            let slots = if same.len() == lines.len() {
                Vec::new()
            } else {
                same.iter().map(|l| l.slot).collect()
            };
            let holds = same.iter().all(|l| l.holds);
            rows.push(Alike { rule: rule.name(), holds, told: what, slots });
        }
    }
    rows
}

fn conditions(design: &DesignProof, look: &Look) -> String {
    let row = |Alike { rule, holds, told, slots }: Alike<'_>| {
        let verdict = if holds { "holds" } else { "fails" };
        let slots = slots.join(", ");
        let of = if slots.is_empty() { String::new() } else { format!(" ({slots})") };
        [format!("  {rule}"), verdict.to_owned(), format!("{told}{of}")]
    };
    aligned(&alike(design).into_iter().map(row).collect::<Vec<_>>(), look)
}

fn check(check: &CheckLine, look: &Look) -> String {
    let verdict = if check.holds { "" } else { "   FAILS" };
    let u = utilisation(check);
    let heading = format!("{:<18}{:<9}u {u}{verdict}", check.name, check.kind);
    let mut text = format!("  {}\n", look.text(&heading));
    for (name, side) in [("asked", &check.asked_by), ("allowed", &check.allowed_by)] {
        let line = format!("{name:<9}{}", worked(side, check.unit)).replace("  ", "\u{a0}\u{a0}");
        text += &look.paragraph(&line, 2 * INDENT, 2 * INDENT + 9);
    }
    text
}

/// A utilisation to three digits; with more where these would hide that the check fails.
fn utilisation(check: &CheckLine) -> String {
    let u = check.utilisation.0;
    let short = spelled(u, SHARE_DIGITS);
    if !check.holds && short == "1" { spelled(u, quantity::digits::DIGITS) } else { short }
}

/// `formula = numbers = result`, without what would say the same twice.
pub(crate) fn worked(expression: &Expression, unit: &str) -> String {
    let Expression { formula, numbers, result, .. } = expression;
    let result = if unit.is_empty() { result.clone() } else { format!("{result}\u{a0}{unit}") };
    if formula == numbers {
        result
    } else if expression.is_plain() {
        format!("{formula} =\u{a0}{result}")
    } else {
        format!("{formula} = {numbers} =\u{a0}{result}")
    }
}

/// The figures: those that are given, by where they come from, then those that are worked out, by what
/// they belong to; headings with their lines.
fn figures(design: &DesignProof, look: &Look) -> Vec<(String, String)> {
    let sheet = design.sheet.as_ref().map_or("", |sheet| &sheet.file);
    let mut sections = vec![(
        format!("Given for the rail: {sheet}"),
        inputs(of(design, None, false), sheet, look),
    )];
    for slot in &design.slots {
        let SlotLine { slot: name, file, line, source, .. } = slot;
        let source = if source.is_empty() { "no source stated" } else { source };
        let heading = format!("Given for the {}: {}", spoken(name), slot.full_name());
        let place = look.paragraph(&format!("{file}:{line}; {source}"), INDENT, 2 * INDENT);
        sections.push((heading, place + &inputs(of(design, Some(name), false), sheet, look)));
    }
    let mut owners: Vec<Option<&str>> = vec![None];
    for figure in &design.figures {
        if !owners.contains(&figure.slot) {
            owners.push(figure.slot);
        }
    }
    // Figures build on each other in the order in which they were told, and so do their groups.
    for owner in owners {
        let lines = of(design, owner, true)
            .filter_map(|f| Some(line(f, f.worked_out.as_ref()?, look)))
            .collect();
        let heading = format!("Worked out for the {}", spoken(owner.unwrap_or("rail")));
        sections.push((heading, lines));
    }
    if design.figures.is_empty() { Vec::new() } else { sections }
}

/// The figures of a slot, or of the rail: those that are given, or those that are worked out.
fn of<'d>(
    design: &'d DesignProof,
    slot: Option<&'d str>,
    worked_out: bool,
) -> impl Iterator<Item = &'d Figure> {
    let wanted = move |f: &&Figure| f.slot == slot && f.worked_out.is_some() == worked_out;
    design.figures.iter().filter(wanted)
}

/// A slot's name in a sentence.
fn spoken(slot: &str) -> String {
    slot.replace('_', " ")
}

fn inputs<'f>(figures: impl Iterator<Item = &'f Figure>, sheet: &str, look: &Look) -> String {
    let row = |figure: &Figure| {
        let value = format!("{} {}", spelled(figure.value.0, 6), figure.unit);
        let origin = origin(&figure.origin, sheet);
        [format!("  {}", figure.symbol), value.trim_end().to_owned(), origin]
    };
    aligned(&figures.map(row).collect::<Vec<_>>(), look)
}

fn line(figure: &Figure, expression: &Expression, look: &Look) -> String {
    let mut text = format!("{} = {}", figure.symbol, worked(expression, figure.unit));
    let read_off = match &figure.origin {
        Origin::Cell { column, .. } => Some(format!("read from `{column}`")),
        _ => None,
    };
    let notes: Vec<String> = read_off.into_iter().chain(figure.note.clone()).collect();
    if !notes.is_empty() {
        let _ = write!(text, "; {}", notes.join(": "));
    }
    look.paragraph(&text, INDENT, 3 * INDENT)
}

/// Where a figure comes from, in words.
pub(crate) fn origin(origin: &Origin, sheet: &str) -> String {
    match origin {
        Origin::Key(key) => key_origin(key, sheet),
        Origin::Cell { column, text } if text.is_empty() => format!("{column} is blank"),
        Origin::Cell { column, text } => format!("{column} `{text}`"),
        Origin::ColumnDefault { column } => format!("{column} is blank: the column's default"),
        Origin::StandIn { column, key } => {
            format!("{column} is blank: {}", key_origin(key, sheet))
        }
        Origin::Fitted { key } => format!("{key}, as fitted"),
        Origin::Worked => String::new(),
    }
}

/// The key and who gives it; of the sheet itself the line alone.
fn key_origin(origin: &KeyOrigin, sheet: &str) -> String {
    let KeyOrigin { key, giver, file, line } = origin;
    match (giver, file, line) {
        (Giver::Set, ..) => format!("{key}, --set"),
        (Giver::BuiltIn, ..) => format!("{key}, built in"),
        (Giver::Default, ..) => format!("{key}, default"),
        (_, Some(file), Some(line)) if file == sheet => format!("{key}, line {line}"),
        (_, Some(file), Some(line)) => format!("{key}, {file}:{line}"),
        _ => key.clone(),
    }
}
