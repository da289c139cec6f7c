//! The proof of a design as one typed value: every check with its formula, numbers and sources.
//!
//! | module | what it holds |
//! |---|---|
//! | [`book`] | figures, each told once, and formulas with their numbers put in |
//! | [`calculator`] | reads such a text again, as a pocket calculator would |
//! | [`origin`] | who gave a key of the sheet its value |
//! | [`checks`] | what each check compares |
//! | `teller` and one module a section of the model page | which figures there are, and their formulas |
//! | `told` | conditions and changes in words |
//! | [`terminal`] | it for people |
//!
//! # JSON, format 1
//!
//! [`Verification`] is written as it stands: `format`, `currency`, `set`, `catalogs_sha256` and a list
//! `designs`, in the order of the command line. Of each design:
//!
//! * `file`, `name`; `answer`: `holds`, `fails`, `unproven` (a blank cell or a wrong polarity leaves
//!   checks open) or `broken` (the file, its sheet or a name in it is at fault: see `faults`; every
//!   list is then empty and the rest null).
//! * `sheet` (`file`, `sha256`, `kept_sha256`, `changed`; null where the design doesn't say), `boards`,
//!   `summary` (`margin`, `slack`, `binding`, `efficiency`, `lowest_feed_v`, `least_gain`).
//! * `slots`: `slot`, `part`, `maker`, `file`, `line`, `inline`, `source`. `values`: resistances in Ω.
//! * `conditions`: `name`, `slot`, `holds`, `told`. `changes`: `slot`, `column`, `was`, `is`.
//! * `checks`: as in a shortlist, and `slot`, `holds`, `asked_by`, `allowed_by`, each with `formula`,
//!   `numbers`, `result` and the ids of the `figures` in it.
//! * `figures`: `id`, `symbol`, `slot`, `value`, `unit`, `origin`, `worked_out`, `note`. `origin.from` is
//!   `key`, `cell`, `column-default`, `stand-in`, `fitted` or `worked`.
//! * `assumed`, `not_checked`, `cautions`: texts.
//!
//! Numbers are full precision, an infinite one is the text `inf` or `-inf`.

mod amplifier;
pub mod book;
pub mod calculator;
pub mod checks;
mod divider;
pub mod origin;
mod pass;
mod reference;
mod teller;
pub mod terminal;
pub(crate) mod told;

use crate::figure::{Figure as Exact, Pairs};
use crate::hash::HashOf;
use crate::remark;
use book::{Book, Figure, Origin};
use catalog::Shop;
use checks::CheckLine;
use circuit::rail::Rail;
use design::Design;
use design::change::{Change, changes};
use design::condition::{Rule, Verdict, conditions};
use design::keys::Resistor;
use design::parts::{PartPlace, Parts};
use design::proof::{AtRail, Fitted};
use notice::Notice;
use origin::{Giver, Origins};
use serde::Serialize;
use sheet::Sheet;
use std::fmt;
use teller::Teller;

/// The format that these types write.
pub const FORMAT: u32 = 1;

/// Designs with what was found of each.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Verification {
    /// [`FORMAT`].
    pub format: u32,
    /// The currency of the shop.
    pub currency: Option<String>,
    /// What `--set` changed.
    pub set: Vec<String>,
    /// Hashes of the catalogs, and of the shop file where there is one.
    pub catalogs_sha256: Pairs<String, String>,
    /// The designs, in the order in which they were named.
    pub designs: Vec<DesignProof>,
}

/// What was found of a design.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize)]
#[serde(rename_all = "kebab-case")]
pub enum Answer {
    /// Every check and every condition holds.
    Holds,
    /// A check or condition fails.
    Fails,
    /// Something is not known that checks need, so that not all of them could be made.
    Unproven,
    /// The file, its sheet or a name in it is at fault.
    Broken,
}

impl fmt::Display for Answer {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(match self {
            Answer::Holds => "holds",
            Answer::Fails => "fails",
            Answer::Unproven => "unproven",
            Answer::Broken => "broken",
        })
    }
}

/// A design with its proof.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct DesignProof {
    /// Its file, as the user named it.
    pub file: String,
    /// What it is called; None where its file can't be read.
    pub name: Option<String>,
    /// What was found.
    pub answer: Answer,
    /// What is wrong with a broken one, a line each.
    pub faults: Vec<String>,
    /// The rail sheet.
    pub sheet: Option<SheetUsed>,
    /// Boards to build.
    pub boards: Option<u64>,
    /// The figures that sum it up; None where not every check could be made.
    pub summary: Option<Summary>,
    /// Its parts.
    pub slots: Vec<SlotLine>,
    /// Its resistors, Ω.
    pub values: Pairs<&'static str, Exact>,
    /// The demands that are not electrical.
    pub conditions: Vec<ConditionLine>,
    /// Cells that have changed since it was kept.
    pub changes: Vec<ChangeLine>,
    /// Every check that the rail calls for, in page order.
    pub checks: Vec<CheckLine>,
    /// The figures that the checks rest on.
    pub figures: Vec<Figure>,
    /// Defaults and stand-ins among the figures.
    pub assumed: Vec<String>,
    /// What is not checked.
    pub not_checked: Vec<String>,
    /// Cautions that apply.
    pub cautions: Vec<&'static str>,
}

/// The rail sheet of a design.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct SheetUsed {
    /// Its file.
    pub file: String,
    /// SHA-256 of the file as read.
    pub sha256: String,
    /// SHA-256 when the design was kept, where it says so.
    pub kept_sha256: Option<String>,
    /// The two differ; None where the design doesn't say.
    pub changed: Option<bool>,
}

/// What sums a proof up.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Summary {
    /// 1 − the greatest utilisation of the damage checks.
    pub margin: Exact,
    /// 1 − the greatest utilisation of the function checks but `divider-window`.
    pub slack: Exact,
    /// The checks that set the two.
    pub binding: Binding,
    /// η.
    pub efficiency: Exact,
    /// The lowest feed with headroom, V.
    pub lowest_feed_v: Exact,
    /// The least current gain with which the amplifier drives full load.
    pub least_gain: Exact,
}

/// The checks that bind.
#[derive(Debug, Clone, Copy, PartialEq, Serialize)]
pub struct Binding {
    /// The damage check used most.
    pub damage: Option<&'static str>,
    /// The function check used most.
    pub function: Option<&'static str>,
}

/// The part of a slot.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct SlotLine {
    /// The slot.
    pub slot: &'static str,
    /// The part.
    pub part: String,
    /// Its maker; may be empty.
    pub maker: String,
    /// The file that describes it: a catalog, or the design itself.
    pub file: String,
    /// The line in that file.
    pub line: u32,
    /// The design's own cells describe it.
    pub inline: bool,
    /// Where its figures come from, as its row says; may be empty.
    pub source: String,
}

impl SlotLine {
    fn new(place: &PartPlace<'_>) -> Self {
        let source = place.cells().into_iter().find(|(column, _)| column == "source");
        let (file, line) = match place.inline {
            Some(inline) => (inline.mark.place.file.clone(), inline.mark.place.line),
            None => (place.file_name().to_owned(), place.line),
        };
        Self {
            slot: place.slot.name(),
            part: place.part.to_owned(),
            maker: place.maker.to_owned(),
            file,
            line,
            inline: place.inline.is_some(),
            source: source.map(|(_, text)| text).unwrap_or_default(),
        }
    }

    /// `maker/part`, or the part alone.
    pub fn full_name(&self) -> String {
        match self.maker.as_str() {
            "" => self.part.clone(),
            maker => format!("{maker}/{}", self.part),
        }
    }
}

/// A demand that is not electrical, made of one part.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct ConditionLine {
    /// Its name.
    pub name: &'static str,
    /// The slot.
    pub slot: &'static str,
    /// It holds.
    pub holds: bool,
    /// What was found, and of a failing one what is asked.
    pub told: String,
    /// The rule behind it.
    #[serde(skip)]
    pub rule: Rule,
}

/// A cell that has changed since the design was kept; None: blank.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct ChangeLine {
    /// The slot.
    pub slot: &'static str,
    /// The column.
    pub column: String,
    /// The cell then.
    pub was: Option<String>,
    /// The cell now.
    pub is: Option<String>,
}

/// The files that a design is checked with.
#[derive(Clone, Copy)]
pub struct Evidence<'a> {
    /// The catalogs.
    pub shop: &'a Shop,
    /// The rail sheet.
    pub sheet: &'a Sheet,
    /// The rail sheet's name and text.
    pub sheet_file: (&'a str, &'a str),
    /// The shop file's name and text, where there is one.
    pub shop_file: Option<(&'a str, &'a str)>,
}

impl DesignProof {
    /// A design that can't be checked, with the reasons among `notices`.
    pub fn broken(file: &str, name: Option<&str>, notices: &[Notice]) -> Self {
        Self {
            file: file.to_owned(),
            name: name.map(str::to_owned),
            answer: Answer::Broken,
            faults: notices
                .iter()
                .filter(|n| n.severity == notice::Severity::Error)
                .map(Notice::to_string)
                .collect(),
            sheet: None,
            boards: None,
            summary: None,
            slots: Vec::new(),
            values: Pairs(Vec::new()),
            conditions: Vec::new(),
            changes: Vec::new(),
            checks: Vec::new(),
            figures: Vec::new(),
            assumed: Vec::new(),
            not_checked: Vec::new(),
            cautions: Vec::new(),
        }
    }

    /// Checks a design with its own parts and values.
    ///
    /// # Errors
    /// A broken one where a name means nothing, or a slot or value does not go with the sheet: the
    /// faults are in `notices`.
    pub fn new(design: &Design, evidence: &Evidence<'_>, notices: &mut Vec<Notice>) -> Self {
        let sheet = evidence.sheet;
        let rail = &sheet.rail;
        let mut found = Vec::new();
        let parts = Parts::find(design, evidence.shop, rail, &mut found);
        let mut proof = match parts {
            Some(parts) => Self {
                name: Some(design.name.clone()),
                changes: parts
                    .places()
                    .iter()
                    .flat_map(|p| changes(design, p))
                    .map(change_line)
                    .collect(),
                ..Self::of_parts(
                    &design.file,
                    &parts,
                    design.boards.unwrap_or(sheet.boards),
                    evidence,
                )
            },
            None => Self::broken(&design.file, Some(&design.name), &found),
        };
        notices.append(&mut found);
        let (file, text) = evidence.sheet_file;
        let sha256 = HashOf(text.as_bytes()).hex();
        let changed = design.sheet_sha256.as_ref().map(|kept| *kept != sha256);
        let kept_sha256 = design.sheet_sha256.clone();
        proof.sheet = Some(SheetUsed { file: file.to_owned(), sha256, kept_sha256, changed });
        proof
    }

    /// Checks parts that no design file names: `id` stands where the file's name would.
    pub fn of_parts(id: &str, parts: &Parts<'_>, boards: u64, evidence: &Evidence<'_>) -> Self {
        let sheet = evidence.sheet;
        let rail = &sheet.rail;
        let places = parts.places();
        let verdicts = conditions(parts, sheet, boards);
        let fitted = Fitted::new(parts, rail);
        let at_rail = fitted.and_then(|fitted| Some((fitted, AtRail::new(&fitted, parts, rail)?)));
        let origins = Origins::new(sheet, evidence.sheet_file, evidence.shop_file);
        let worked = at_rail.as_ref().map(|(fitted, at)| worked_out(fitted, at, &places, &origins));
        let (summary, checks, figures) = match worked {
            Some(worked) => (Some(worked.summary), worked.checks, worked.figures),
            None => (None, Vec::new(), Vec::new()),
        };
        let holds = verdicts.iter().all(|v| v.holds) && checks.iter().all(|c| c.holds);
        let answer = match summary {
            None => Answer::Unproven,
            Some(_) if holds => Answer::Holds,
            Some(_) => Answer::Fails,
        };
        Self {
            answer,
            boards: Some(boards),
            summary,
            slots: places.iter().map(SlotLine::new).collect(),
            values: Pairs(values(parts, rail)),
            conditions: verdicts.iter().map(|v| condition_line(v, sheet)).collect(),
            checks,
            assumed: assumed(&figures),
            figures,
            not_checked: not_checked(rail, parts),
            cautions: remark::cautions(rail),
            ..Self::broken(id, None, &[])
        }
    }

    /// The checks and conditions that fail.
    pub fn failures(&self) -> usize {
        self.checks.iter().filter(|c| !c.holds).count()
            + self.conditions.iter().filter(|c| !c.holds).count()
    }

    /// What a slot holds.
    pub fn slot(&self, name: &str) -> Option<&SlotLine> {
        self.slots.iter().find(|slot| slot.slot == name)
    }
}

/// The nominal output of a fixed rail: what it is built for, though no check asks for it.
const NOMINAL_OUTPUT: &str = "divider_line.VLn";

/// The electrical half of a proof.
struct Worked {
    summary: Summary,
    checks: Vec<CheckLine>,
    figures: Vec<Figure>,
}

fn worked_out(
    fitted: &Fitted<'_>,
    at_rail: &AtRail<'_>,
    places: &[PartPlace<'_>],
    origins: &Origins<'_>,
) -> Worked {
    let assembly = at_rail.assembly();
    let proof = at_rail.prove();
    let mut teller = Teller::new(&assembly, fitted, places, origins);
    teller.requirement();
    teller.reference();
    teller.amplifier();
    teller.divider();
    teller.duty();
    teller.pass();
    let mut book: Book = teller.book;
    let line = |finding| CheckLine::new(finding, &book, at_rail.rail, fitted.pass.junctions);
    let checks: Vec<CheckLine> = proof.findings.iter().map(line).collect();
    let sides = checks.iter().flat_map(|c| c.asked_by.figures.iter().chain(&c.allowed_by.figures));
    book.keep_only(sides.cloned().chain([NOMINAL_OUTPUT.to_owned()]));
    Worked {
        summary: Summary {
            margin: Exact(1.0 - proof.stress.utilisation),
            slack: Exact(1.0 - proof.tightness.utilisation),
            binding: Binding {
                damage: proof.stress.check.map(|c| c.name()),
                function: proof.tightness.check.map(|c| c.name()),
            },
            efficiency: Exact(proof.efficiency),
            lowest_feed_v: Exact(proof.lowest_feed_v),
            least_gain: Exact(proof.least_gain),
        },
        checks,
        figures: book.figures().to_vec(),
    }
}

fn values(parts: &Parts<'_>, rail: &Rail) -> Vec<(&'static str, Exact)> {
    let upper = if rail.is_adjustable() { Resistor::Rx } else { Resistor::Rf };
    vec![
        (Resistor::Rz.key(), Exact(parts.rz_ohm)),
        (upper.key(), Exact(parts.upper_ohm)),
        (Resistor::Ri.key(), Exact(parts.ri_ohm)),
    ]
}

fn condition_line(verdict: &Verdict, sheet: &Sheet) -> ConditionLine {
    ConditionLine {
        name: verdict.rule.name(),
        slot: verdict.slot.name(),
        holds: verdict.holds,
        told: told::fact(verdict, sheet),
        rule: verdict.rule,
    }
}

fn change_line(change: Change) -> ChangeLine {
    let Change { slot, column, was, is } = change;
    ChangeLine { slot: slot.name(), column, was, is }
}

/// Defaults and stand-ins among the figures, each as `key = value`, in the units of the key.
fn assumed(figures: &[Figure]) -> Vec<String> {
    let with_unit = |value: f64, unit: &str| {
        let number = book::spelled(value, 6);
        if unit.is_empty() { number } else { format!("{number} {unit}") }
    };
    let of_key = |name: &str, figure: &Figure| {
        // What a derating policy leaves out is no assumption: the limit counts in full.
        let key = sheet::keys::named(name)?;
        let written = figure.value.0 / key.scaled(1.0);
        Some(format!("{name} = {}", with_unit(written, key.unit.symbol())))
    };
    let line = |figure: &Figure| match &figure.origin {
        Origin::Key(key) if key.giver == Giver::Default => of_key(&key.key, figure),
        Origin::StandIn { column, key } => {
            Some(format!("{}, for a blank {column}", of_key(&key.key, figure)?))
        }
        Origin::ColumnDefault { column } => {
            let slot = figure.slot.unwrap_or_default();
            Some(format!("{column} of {slot} = {}", with_unit(figure.value.0, figure.unit)))
        }
        _ => None,
    };
    figures.iter().filter_map(line).collect()
}

fn not_checked(rail: &Rail, parts: &Parts<'_>) -> Vec<String> {
    let mut list = remark::not_checked(rail);
    let leakage = parts.pass.row().map(|row| row.figures.ileak_max_a);
    let sinks = parts.amplifier.row().map(|row| row.figures.isink_a);
    match (leakage, sinks) {
        (Some(None), _) => list.push("leakage: ileak_max_a of the transistor is blank".to_owned()),
        (Some(Some(_)), Some(None)) => {
            list.push("leakage-sink: isink_a of the amplifier is blank".to_owned());
        }
        _ => {}
    }
    let pot_voltage = parts.pot.and_then(|pot| pot.row()).map(|row| row.figures.vmax_v);
    if pot_voltage == Some(None) {
        list.push("pot-voltage: vmax_v of the pot is blank".to_owned());
    }
    list
}

/// The text of a JSON file: indented, ending in a line break.
///
/// # Errors
/// As serde_json does; values of this crate give it no reason to.
pub fn json(verification: &Verification) -> Result<Vec<u8>, serde_json::Error> {
    let mut text = serde_json::to_vec_pretty(verification)?;
    text.push(b'\n');
    Ok(text)
}
