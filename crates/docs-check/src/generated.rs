//! The parts of pages that are made from declarations.
//!
//! A part stands between `<!-- made from the code: NAME -->` and `<!-- end of NAME -->`, each on a
//! line of its own. `cargo run -p docs-check -- renew` writes what belongs there.

use crate::code::{self, Source};
use crate::page::{self, Page};
use circuit::check::Check;
use circuit::rail::Derating;
use std::fmt::Write as _;
use std::io;
use std::path::Path;

const BEGINNING: &str = "<!-- made from the code: ";
const END: &str = " -->";

/// What stands in the way of making a part.
fn fault(what: String) -> io::Error {
    io::Error::new(io::ErrorKind::InvalidData, what)
}

/// The pages as they should be, in the order of [`page::all`].
///
/// # Errors
/// Where a page can't be read, a part has no end or a name that nobody knows, or a check has no
/// function of its name.
pub fn renewed(root: &Path) -> io::Result<Vec<(Page, String)>> {
    let sources = code::sources(root, "circuit", "circuit")?;
    page::all(root)?
        .into_iter()
        .map(|page| {
            let text = filled(&page.text, |name| part(name, &sources))
                .map_err(|error| fault(format!("{}: {error}", page.name)))?;
            Ok((page, text))
        })
        .collect()
}

/// The text with every marked part replaced by what `part` makes of its name.
fn filled(text: &str, part: impl Fn(&str) -> io::Result<String>) -> io::Result<String> {
    let mut made = String::with_capacity(text.len());
    let mut rest = text;
    while let Some((before, after)) = rest.split_once(BEGINNING) {
        let (name, after) =
            after.split_once(END).ok_or_else(|| fault("a marker has no end".to_owned()))?;
        let closing = format!("<!-- end of {name} -->");
        let (_, after) =
            after.split_once(&closing).ok_or_else(|| fault(format!("`{closing}` is missing")))?;
        let body = part(name)?;
        let _ = write!(made, "{before}{BEGINNING}{name}{END}\n\n{}\n\n{closing}", body.trim());
        rest = after;
    }
    made.push_str(rest);
    Ok(made)
}

fn part(name: &str, sources: &[Source]) -> io::Result<String> {
    match name {
        "columns of the catalogs" => Ok(one_level_down(&catalog::reference::reference_markdown())),
        "keys of sheets" => Ok(sheet::reference_markdown()),
        "built-in policies" => Ok(policies()),
        "the library example" => library_example(),
        _ if name.starts_with("columns of ") => {
            let table = name.trim_start_matches("columns of ");
            report::reference::columns_markdown(table)
                .ok_or_else(|| fault(format!("no file has a table by the name `{table}`")))
        }
        _ => match name.strip_prefix("checks of ") {
            Some(section) => checks(section, sources),
            None => Err(fault(format!("nothing is known by the name `{name}`"))),
        },
    }
}

/// The source of the example that uses the crates without the command line.
fn library_example() -> io::Result<String> {
    const FILE: &str = "crates/report/examples/rail_in_code.rs";
    let source = std::fs::read_to_string(crate::root().join(FILE))?;
    Ok(format!("`{FILE}`:\n\n```rust\n{source}```\n"))
}

/// Headings one level further down, so that a page can stand inside another.
fn one_level_down(page: &str) -> String {
    page.lines().fold(String::new(), |mut text, line| {
        if line.starts_with('#') {
            text.push('#');
        }
        text.push_str(line);
        text.push('\n');
        text
    })
}

/// The checks of a section: name, kind, what is compared, and the function that makes it.
fn checks(section: &str, sources: &[Source]) -> io::Result<String> {
    let mut table = String::from(
        "| check | kind | asked | allowed | unit | function |\n|---|---|---|---|---|---|\n",
    );
    let of_section = |check: &Check| check.section().split(", ").any(|s| s == section);
    let mut any = false;
    for check in Check::ALL.into_iter().filter(of_section) {
        any = true;
        let _ = writeln!(
            table,
            "| `{}` | {} | {} | {} | {} | `{}` |",
            check.name(),
            check.kind().name(),
            escaped(check.asked_formula()),
            escaped(check.allowed_formula()),
            check.unit(),
            function(check, sources)?,
        );
    }
    if any { Ok(table) } else { Err(fault(format!("no check belongs to section {section}"))) }
}

/// A `|` would end the cell, a `*` begin slanted letters.
fn escaped(formula: &str) -> String {
    formula.replace('|', "\\|").replace('*', "\\*")
}

/// The one function that makes a check: it has the check's name, with underscores.
///
/// # Errors
/// Where no source file, or more than one, declares it.
pub fn function(check: Check, sources: &[Source]) -> io::Result<String> {
    let name = check.name().replace('-', "_");
    let declares = |source: &&Source| source.text.contains(&format!("fn {name}("));
    let mut found = sources.iter().filter(declares);
    match (found.next(), found.next()) {
        (Some(source), None) => Ok(format!("{}::{name}", source.module)),
        (None, _) => Err(fault(format!("no function `{name}` makes the check"))),
        (Some(_), Some(_)) => Err(fault(format!("several functions are called `{name}`"))),
    }
}

/// The built-in derating policies, field by field.
fn policies() -> String {
    let mut table = String::from("| field |");
    for (name, _) in Derating::BUILT_IN {
        let _ = write!(table, " `{name}` |");
    }
    table.push_str("\n|---|");
    table.push_str(&"---|".repeat(Derating::BUILT_IN.len()));
    table.push('\n');
    let columns = Derating::BUILT_IN.map(|(_, policy)| fields(&policy));
    let Some(first) = columns.first() else { return table };
    for (row, (field, _)) in first.iter().enumerate() {
        let _ = write!(table, "| `{field}` |");
        for column in &columns {
            if let Some((_, figure)) = column.get(row) {
                let _ = write!(table, " {figure} |");
            }
        }
        table.push('\n');
    }
    table
}

/// The fields of a policy as a table shows them. Taken apart by name, so that a new field can't be
/// forgotten here.
fn fields(policy: &Derating) -> [(&'static str, String); 13] {
    let Derating {
        collector_voltage,
        collector_current,
        pass_power,
        soa,
        soa_fault,
        amp_supply,
        amp_current,
        zener_power,
        resistor_power,
        resistor_voltage,
        junction_below_max_c,
        fault_junction_below_max_c,
        junction_cap_c,
    } = *policy;
    let degrees = |x: f64| format!("{x} °C");
    [
        ("collector_voltage", collector_voltage.to_string()),
        ("collector_current", collector_current.to_string()),
        ("pass_power", pass_power.to_string()),
        ("soa", soa.to_string()),
        ("soa_fault", soa_fault.to_string()),
        ("amp_supply", amp_supply.to_string()),
        ("amp_current", amp_current.to_string()),
        ("zener_power", zener_power.to_string()),
        ("resistor_power", resistor_power.to_string()),
        ("resistor_voltage", resistor_voltage.to_string()),
        ("junction_below_max_c", degrees(junction_below_max_c)),
        ("fault_junction_below_max_c", degrees(fault_junction_below_max_c)),
        ("junction_cap_c", junction_cap_c.map_or("no cap".to_owned(), degrees)),
    ]
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_part_is_replaced_and_the_rest_stays() {
        let page = "a\n<!-- made from the code: x -->\nold\n<!-- end of x -->\nb\n";
        let made = filled(page, |name| Ok(format!("new {name}\n"))).expect("a sound page");
        assert_eq!(made, "a\n<!-- made from the code: x -->\n\nnew x\n\n<!-- end of x -->\nb\n");
        assert_eq!(filled(&made, |name| Ok(format!("new {name}"))).expect("as before"), made);
    }

    #[test]
    fn a_part_without_end_or_meaning_is_refused() {
        let made = |_: &str| Ok(String::new());
        assert!(filled("<!-- made from the code: x -->\n", made).is_err());
        assert!(part("x", &[]).is_err());
        assert!(part("checks of 9.9", &[]).is_err());
    }

    #[test]
    fn every_field_of_a_policy_is_one_that_a_sheet_may_give() {
        let names = fields(&Derating::NONE).map(|(name, _)| name);
        let known: Vec<&str> = sheet::keys::POLICY_FIELDS.iter().map(|f| f.key.name).collect();
        assert_eq!(names.as_slice(), known.as_slice());
    }
}
