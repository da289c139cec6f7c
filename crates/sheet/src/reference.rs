//! The reference of all keys, made from their declarations.

use std::fmt::Write;

use circuit::rail::Derating;

use crate::keys::{self, Applies, COLUMNS_SECTION, Key, POLICY_FIELDS, POLICY_SECTION};

/// The keys that stand under one heading.
#[derive(Debug, Clone)]
pub struct Section {
    /// The section as a sheet writes it: `[feed]`; words for the keys outside all sections.
    pub heading: String,
    /// A sentence or two on the section; may be empty.
    pub intro: String,
    /// Its keys in declared order.
    pub rows: Vec<Row>,
}

/// One key of the reference.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Row {
    /// The dotted name; a field's own name for policies.
    pub key: &'static str,
    /// The unit; empty where there is none.
    pub unit: &'static str,
    /// What it means, with when it applies.
    pub meaning: String,
    /// Range or kind.
    pub range: String,
    /// Default, or "required".
    pub default: String,
}

impl Row {
    fn of(key: &Key) -> Self {
        let when = match key.applies {
            Applies::Always => String::new(),
            Applies::FixedOutput => " (fixed output)".to_owned(),
            Applies::AdjustableOutput => " (adjustable output)".to_owned(),
            Applies::With(other) => format!(" (with `{}`)", other.name),
            Applies::Without(other) => format!(" (without `{}`)", other.name),
        };
        Row {
            key: key.name,
            unit: key.unit.symbol(),
            meaning: format!("{}{when}", key.meaning),
            range: key.range(),
            default: key.default_in_words(),
        }
    }
}

/// Every key: the sections of a sheet, the fields of a policy, and what only a shop file has.
pub fn reference() -> Vec<Section> {
    let mut sections: Vec<Section> = Vec::new();
    for key in keys::ALL {
        let heading = match key.section() {
            "" => "Outside all sections".to_owned(),
            section => format!("[{section}]"),
        };
        match sections.iter_mut().find(|section| section.heading == heading) {
            Some(section) => section.rows.push(Row::of(key)),
            None => {
                sections.push(Section { heading, intro: String::new(), rows: vec![Row::of(key)] })
            }
        }
    }
    let built_in = Derating::BUILT_IN.map(|(name, _)| format!("`{name}`"));
    sections.push(Section {
        heading: format!("[{POLICY_SECTION}.NAME] in a shop file, or `derating = {{ … }}`"),
        intro: format!(
            "Fractions say how much of a limit may be used. Built in: {}; a shop's policies have \
             other names.",
            built_in.join(", ")
        ),
        rows: POLICY_FIELDS.iter().map(|field| Row::of(&field.key)).collect(),
    });
    sections.push(Section {
        heading: "Only in a shop file".to_owned(),
        intro: "A shop file also takes every key of a sheet, as a default for all sheets."
            .to_owned(),
        rows: vec![
            Row::of(&keys::CURRENCY),
            Row {
                key: COLUMNS_SECTION,
                unit: "",
                meaning:
                    "column names of the shop's catalogs: `\"name in the file\" = \"name that \
                          the program knows\"`"
                        .to_owned(),
                range: "section of texts".to_owned(),
                default: "none".to_owned(),
            },
        ],
    });
    sections
}

/// The reference as Markdown: a heading and a table for each section, then the rules between keys.
pub fn reference_markdown() -> String {
    let mut page = String::new();
    for section in reference() {
        push_section(&mut page, &section);
    }
    page.push_str("### Rules between keys\n\n");
    for rule in keys::ORDER_RULES {
        let relation = if rule.strict { "below" } else { "at most" };
        // Writing to a String cannot fail.
        let _ = writeln!(page, "* `{}` is {relation} `{}`", rule.low.name, rule.high.name);
    }
    page
}

fn push_section(page: &mut String, section: &Section) {
    let _ = writeln!(page, "### {}\n", section.heading);
    if !section.intro.is_empty() {
        let _ = writeln!(page, "{}\n", section.intro);
    }
    page.push_str("| key | unit | meaning | range | default |\n|---|---|---|---|---|\n");
    for row in &section.rows {
        let cells = [row.unit, &row.meaning, &row.range, &row.default].map(escaped).join(" | ");
        let _ = writeln!(page, "| `{}` | {cells} |", row.key);
    }
    page.push('\n');
}

/// A `|` would end the cell.
fn escaped(cell: &str) -> String {
    cell.replace('|', "\\|")
}
