//! A shortage for people: designs that nothing can save first, then the others, then the fewest parts.

use super::tables::{BROKEN, broken, cover, designs, picks, within};
use super::{Broken, CoverFound, Shortage};
use crate::look::Look;
use crate::substitute::tables::{same_numbers, troubles};
use crate::substitute::terminal::how_far;
use crate::table::{Cell, Table, screen};

/// The whole text.
pub fn shortage(of: &Shortage, look: &Look) -> String {
    let mut text = look.heading(&format!("Shortage of {}", of.gone.join(", ")));
    text.push('\n');
    text += &look.paragraph(&read(of.read, &of.broken), 0, 2);
    let (lost, hit) = (of.designs.iter().filter(|d| d.is_lost()).count(), of.designs.len());
    let found = match hit {
        0 => "No design uses it.".to_owned(),
        hit => format!("{hit} {}; {}.", uses(hit), saved(of, lost)),
    };
    text += &look.paragraph(&found, 0, 2);
    // A reason that several designs of a sheet share is told once.
    let mut told: Vec<(&str, &str)> = Vec::new();
    for design in of.designs.iter().filter(|design| design.is_lost()) {
        text.push('\n');
        let heading = match design.looked.everything {
            true => format!("Can't be saved: {}", short(&design.file, of)),
            false => format!("Nothing found for {}", short(&design.file, of)),
        };
        text += &look.heading(&heading);
        text.push('\n');
        let looked = format!("{}; looked at: {}.", design.name, how_far(&design.looked));
        text += &look.paragraph(&looked, 2, 4);
        if let Some((_, like)) = told.iter().find(|(why, _)| *why == design.why_nothing) {
            text += &look.paragraph(&format!("For the same reason as {like}."), 2, 4);
            continue;
        }
        told.push((&design.why_nothing, short(&design.file, of)));
        for line in design.why_nothing.lines() {
            text += format!("  {}", look.text(line)).trim_end();
            text.push('\n');
        }
    }
    if hit > lost {
        let mut table = shortened(designs(of), &["goes in"]);
        let rank = table.place("rank").unwrap_or(0);
        table.rows.retain(|row| row.get(rank).is_some_and(|cell| *cell != Cell::Blank));
        // A design is named once, at its first replacement.
        let mut last = Cell::Blank;
        for row in &mut table.rows {
            if let Some(design) = row.first_mut() {
                if *design == last {
                    *design = Cell::Blank;
                } else {
                    last = design.clone();
                }
            }
        }
        text.push('\n');
        text += &look.heading("Best replacements");
        text.push('\n');
        let shown =
            ["design", "goes in", "also changes", "board", "cost", "stock", "weeks", "status"];
        text += &screen::table(&table, &shown, look);
        text += &remarks(of, look);
    }
    if let Some(found) = &of.cover {
        text.push('\n');
        text += &look.heading("Fewest new parts");
        text.push('\n');
        text += &look.paragraph(&in_words(found, of), 0, 2);
        text.push('\n');
        text += &screen::table(
            &cover(of),
            &["new part", "designs", "pieces", "stock", "weeks", "status"],
            look,
        );
        for part in found.parts.iter().filter(|part| !part.trouble.is_empty()) {
            let remark = format!("! {}: {}", part.part, part.trouble.join(", "));
            text += &look.paragraph(&remark, 0, 2);
        }
        text.push('\n');
        let shown = ["design", "takes", "also changes", "board", "cost"];
        text += &screen::table(&shortened(picks(of), &["takes"]), &shown, look);
    }
    if !of.broken.is_empty() {
        text.push('\n');
        text += &look.heading("Files at fault");
        text.push('\n');
        text += &screen::table(&broken(&of.broken), &BROKEN.map(|c| c.heading), look);
    }
    text
}

/// How many of the affected designs have a replacement.
fn saved(of: &Shortage, lost: usize) -> String {
    let surely = of.designs.iter().filter(|d| d.is_lost() && d.looked.everything).count();
    match (lost, lost - surely) {
        (0, _) => "each can be saved".to_owned(),
        (_, 0) => format!("{lost} of them can't be saved"),
        (_, open) => format!(
            "{surely} of them can't be saved, and for {open} nothing was found as far as it was looked"
        ),
    }
}

/// A design's file as seen from the folder, without its ending, which all have.
fn short<'f>(file: &'f str, of: &Shortage) -> &'f str {
    let file = within(file, &of.folder);
    file.strip_suffix(".toml").unwrap_or(file)
}

/// Leaves the ending of design files out, and of a maker's part the maker.
fn shortened(mut table: Table, names: &[&str]) -> Table {
    let files = table.place("design");
    let names: Vec<usize> = names.iter().filter_map(|name| table.place(name)).collect();
    for row in &mut table.rows {
        if let Some(Cell::Text(file)) = files.and_then(|place| row.get_mut(place))
            && let Some(stem) = file.strip_suffix(".toml")
        {
            *file = stem.to_owned();
        }
        for place in &names {
            if let Some(Cell::Text(name)) = row.get_mut(*place) {
                let parts =
                    name.split(" + ").map(|n| n.split_once('/').map_or(n, |(_, part)| part));
                *name = parts.collect::<Vec<_>>().join(" + ");
            }
        }
    }
    table
}

fn uses(designs: usize) -> &'static str {
    if designs == 1 { "design uses it" } else { "designs use it" }
}

/// How many files were read.
pub(super) fn read(designs: usize, broken: &[Broken]) -> String {
    let designs = if designs == 1 { "1 design".to_owned() } else { format!("{designs} designs") };
    match broken.len() {
        0 => format!("{designs} read"),
        1 => format!("{designs} read; 1 file is at fault"),
        n => format!("{designs} read; {n} files are at fault"),
    }
}

fn in_words(found: &CoverFound, of: &Shortage) -> String {
    let parts = match found.parts.len() {
        1 => "1 new part".to_owned(),
        n => format!("{n} new parts"),
    };
    let cost = match &of.currency {
        Some(currency) => format!("{:.2} {currency}", found.cost.0),
        None => format!("{:.2}", found.cost.0),
    };
    let designs = match found.picks.len() {
        1 => "the design".to_owned(),
        n => format!("all {n} designs"),
    };
    let proven = match found.exact {
        true => "no fewer do, and none as few cost less",
        false if of.designs.iter().any(|design| design.looked.paired_in_part) => {
            "not proven, for of some design not every pair of replacements was looked at"
        }
        false => "not proven, for the search gave up before it had shown that no fewer do",
    };
    let left_out = match found.left_out.as_slice() {
        [] => String::new(),
        files => {
            let files: Vec<&str> = files.iter().map(|file| short(file, of)).collect();
            format!(" The joint stock does not reach for {}.", files.join(", "))
        }
    };
    format!("{parts} for {designs}, {cost} for all boards: {proven}.{left_out}")
}

/// The same trouble again, and second sources; each told once.
fn remarks(of: &Shortage, look: &Look) -> String {
    let mut told: Vec<String> = Vec::new();
    for mend in of.designs.iter().flat_map(|design| &design.replacements) {
        for remark in same_numbers(mend).into_iter().chain(troubles(mend)) {
            if !told.contains(&remark) {
                told.push(remark);
            }
        }
    }
    told.iter().map(|remark| look.paragraph(&format!("! {remark}"), 0, 2)).collect()
}
