//! Designs with their proofs as tables: answers, order lines, notes, every check and condition.

use super::left;
use super::notes::Notes;
use crate::figure::Figure;
use crate::proof::book::Expression;
use crate::proof::{DesignProof, Verification};
use crate::purchase::lines::{self, RailLines};
use crate::table::{Cell, Column, Document, Table};

/// The columns of the answers.
pub const ANSWER_COLUMNS: [Column; 13] = [
    Column::text("design", "what it is called"),
    Column::text("file", "its file"),
    Column::text("sheet", "its rail sheet"),
    Column::text("answer", "`holds`, `fails`, `unproven` or `broken`"),
    Column::whole("failures", "checks and conditions that fail"),
    Column::whole("boards", "to build"),
    Column::share("margin", "1 − the greatest utilisation of a damage check"),
    Column::share("slack", "1 − the greatest utilisation of a function check"),
    Column::text("set margin by", "the damage check used most"),
    Column::text("set slack by", "the function check used most"),
    Column::share("efficiency", "at the nominal feed and full load"),
    Column::number("lowest feed", "V", "with headroom for everything"),
    Column::number(
        "least gain",
        "",
        "current gain of the transistor with which the amplifier drives full load",
    ),
];

/// The columns of the checks.
pub const CHECK_COLUMNS: [Column; 12] = [
    Column::text("design", "what it is called"),
    Column::text("check", "as on the page of the model"),
    Column::text(
        "kind",
        "`damage`: past the limit a part is destroyed or ages; `function`: the rail fails to do its work",
    ),
    Column::text("slot", "whose part it protects"),
    Column::text("holds", "`yes` or `no`"),
    Column::number("asked", "", "in the unit of the row"),
    Column::number("allowed", "", "likewise"),
    Column::text("unit", "of asked and allowed"),
    Column::share("utilisation", "asked/allowed; the check holds up to 100 %"),
    Column::number("left", "", "allowed − asked, in the unit of the row"),
    Column::text("asked by", "how asked is worked out: the formula, then its numbers"),
    Column::text("allowed by", "how allowed is worked out"),
];

/// The columns of the conditions.
pub const CONDITION_COLUMNS: [Column; 5] = [
    Column::text("design", "what it is called"),
    Column::text("condition", "a demand that is not electrical"),
    Column::text("slot", "whose part it is made of"),
    Column::text("holds", "`yes` or `no`"),
    Column::text("found", "what was found, and of a failing one what is asked"),
];

/// Designs with their order lines, in the order of the designs.
pub fn document(verification: &Verification, lines: &[RailLines]) -> Document {
    let designs = &verification.designs;
    let title = match designs.as_slice() {
        [one] => one.name.clone().unwrap_or_else(|| one.file.clone()),
        several => format!("{} designs", several.len()),
    };
    Document {
        title,
        tables: vec![
            answers(designs),
            lines::table(lines, verification.currency.as_deref()),
            notes(verification),
            checks(designs),
            conditions(designs),
        ],
    }
}

/// What a design is called in every table: its name, or its file where it can't be read.
fn name(design: &DesignProof) -> &str {
    design.name.as_deref().unwrap_or(&design.file)
}

fn answers(designs: &[DesignProof]) -> Table {
    let mut table = Table::new("Designs", &ANSWER_COLUMNS);
    let row = |design: &DesignProof| -> Vec<Cell> {
        let summary = design.summary.as_ref();
        let figure = |of: fn(&crate::proof::Summary) -> Figure| summary.map(of);
        vec![
            name(design).into(),
            design.file.as_str().into(),
            design.sheet.as_ref().map(|sheet| sheet.file.as_str()).into(),
            design.answer.to_string().into(),
            design.failures().into(),
            design.boards.into(),
            figure(|s| s.margin).into(),
            figure(|s| s.slack).into(),
            summary.and_then(|s| s.binding.damage).into(),
            summary.and_then(|s| s.binding.function).into(),
            figure(|s| s.efficiency).into(),
            figure(|s| s.lowest_feed_v).into(),
            figure(|s| s.least_gain).into(),
        ]
    };
    table.rows = designs.iter().map(row).collect();
    table
}

fn yes_or_no(holds: bool) -> Cell {
    if holds { "yes" } else { "no" }.into()
}

fn checks(designs: &[DesignProof]) -> Table {
    let mut table = Table::new("Checks", &CHECK_COLUMNS);
    for design in designs {
        table.rows.extend(design.checks.iter().map(|check| -> Vec<Cell> {
            vec![
                name(design).into(),
                check.name.into(),
                check.kind.into(),
                check.slot.into(),
                yes_or_no(check.holds),
                check.asked.into(),
                check.allowed.into(),
                check.unit.into(),
                check.utilisation.into(),
                left(check.asked, check.allowed),
                worked(&check.asked_by).into(),
                worked(&check.allowed_by).into(),
            ]
        }));
    }
    table
}

/// A formula with its numbers put in.
fn worked(expression: &Expression) -> String {
    let Expression { formula, numbers, result, .. } = expression;
    if expression.is_plain() {
        format!("{formula} = {result}")
    } else {
        format!("{formula} = {numbers} = {result}")
    }
}

fn conditions(designs: &[DesignProof]) -> Table {
    let mut table = Table::new("Conditions", &CONDITION_COLUMNS);
    for design in designs {
        table.rows.extend(design.conditions.iter().map(|condition| -> Vec<Cell> {
            vec![
                name(design).into(),
                condition.name.into(),
                condition.slot.into(),
                yes_or_no(condition.holds),
                condition.told.as_str().into(),
            ]
        }));
    }
    table
}

fn notes(verification: &Verification) -> Table {
    let mut notes = Notes::new();
    notes.say_each("", "set for this run", &verification.set);
    for design in &verification.designs {
        let about = name(design);
        notes.say_each(about, "fault", &design.faults);
        for change in &design.changes {
            let cell = |text: &Option<String>| text.clone().unwrap_or_else(|| "blank".to_owned());
            let (was, is) = (cell(&change.was), cell(&change.is));
            let note = format!("{} of {}: was {was}, is {is}", change.column, change.slot);
            notes.say(about, "changed since kept", note);
        }
        if design.sheet.as_ref().is_some_and(|sheet| sheet.changed == Some(true)) {
            notes.say(about, "changed since kept", "the rail sheet");
        }
        notes.say_each(about, "assumed", &design.assumed);
        notes.say_each(about, "not checked", &design.not_checked);
    }
    let mut cautions: Vec<&str> = Vec::new();
    for caution in verification.designs.iter().flat_map(|design| &design.cautions) {
        if !cautions.contains(caution) {
            cautions.push(caution);
        }
    }
    notes.say_each("", "caution", &cautions);
    for design in &verification.designs {
        if let Some(sheet) = &design.sheet {
            notes.say(name(design), "SHA-256", format!("{}: {}", sheet.file, sheet.sha256));
        }
    }
    for (file, sha256) in &verification.catalogs_sha256.0 {
        notes.say("", "SHA-256", format!("{file}: {sha256}"));
    }
    notes.into_table()
}
