//! Published worked examples, in through sheet and catalogs and out through the program.
//!
//! `tests/published/README.md` tells what a case is; each names its source.

mod common;

use common::{repository, run};
use serde_json::Value;
use std::path::{Path, PathBuf};
use toml_edit::{DocumentMut, Item, Value as TomlValue};

/// The folders of the cases, in order of name.
fn cases() -> Vec<PathBuf> {
    let folders = std::fs::read_dir(repository("tests/published")).expect("the folder of cases");
    let mut cases: Vec<PathBuf> =
        folders.map(|entry| entry.expect("an entry").path()).filter(|path| path.is_dir()).collect();
    cases.sort();
    cases
}

/// A figure that a source prints.
struct Figure {
    of: String,
    published: f64,
    within: f64,
}

/// A run of the program, and what has to come of it.
struct Run {
    set: Vec<String>,
    figures: Vec<Figure>,
}

fn runs(case: &Path) -> Vec<Run> {
    let text = std::fs::read_to_string(case.join("published.toml")).expect("published.toml");
    let document: DocumentMut = text.parse().expect("published.toml is TOML");
    let runs = document["run"].as_array_of_tables().expect("[[run]]");
    runs.iter()
        .map(|run| Run {
            set: run
                .get("set")
                .and_then(Item::as_array)
                .into_iter()
                .flatten()
                .map(text_of)
                .collect(),
            figures: run["figures"].as_array().expect("figures").iter().map(figure).collect(),
        })
        .collect()
}

fn text_of(value: &TomlValue) -> String {
    value.as_str().expect("a text").to_owned()
}

fn figure(value: &TomlValue) -> Figure {
    let table = value.as_inline_table().expect("a figure");
    let number = |key: &str| {
        let value = table.get(key).expect(key);
        value.as_float().or_else(|| value.as_integer().map(|n| n as f64)).expect("a number")
    };
    let of = text_of(table.get("of").expect("of"));
    Figure { of, published: number("published"), within: number("within") }
}

/// The first candidate of the case's shortlist.
fn first_candidate(case: &Path, set: &[String]) -> Result<Value, String> {
    let out = tempfile::tempdir().expect("a folder for the output");
    let file = out.path().join("list.json");
    let file_name = file.to_str().expect("a plain path");
    let mut arguments =
        vec!["shortlist", "sheet.toml", "--catalogs", "catalogs", "--out", file_name];
    arguments.extend(set.iter().flat_map(|value| ["--set", value]));
    let ran = run(case, &arguments);
    if ran.status != 0 {
        return Err(format!("status {}: {}{}", ran.status, ran.err, ran.out));
    }
    let text = std::fs::read_to_string(&file).expect("the list was written");
    let list: Value = serde_json::from_str(&text).expect("the list is JSON");
    Ok(list["candidates"][0].clone())
}

/// A figure of a candidate by its name in the JSON output.
fn found(candidate: &Value, of: &str) -> Option<f64> {
    let mut names = of.split('.');
    let first = names.next()?;
    if first == "checks" {
        let (check, figure) = (names.next()?, names.next()?);
        let checks = candidate["checks"].as_array()?;
        return checks.iter().find(|c| c["name"] == check)?[figure].as_f64();
    }
    names.fold(&candidate[first], |value, name| &value[name]).as_f64()
}

#[test]
fn the_program_comes_to_what_the_sources_print() {
    let mut off = Vec::new();
    let mut compared = 0;
    for case in cases() {
        let name = case.file_name().unwrap_or_default().to_string_lossy().into_owned();
        for run in runs(&case) {
            let at = format!("{name} {}", run.set.join(" "));
            let candidate = match first_candidate(&case, &run.set) {
                Ok(candidate) => candidate,
                Err(told) => {
                    off.push(format!("{at}: {told}"));
                    continue;
                }
            };
            for Figure { of, published, within } in run.figures {
                let found = found(&candidate, &of);
                compared += 1;
                let near = |found: f64| (found - published).abs() <= within * published.abs();
                if !found.is_some_and(near) {
                    off.push(format!("{at}: {of} is {found:?}, published {published}"));
                }
            }
        }
    }
    assert!(off.is_empty(), "\n{}", off.join("\n"));
    assert!(compared > 80, "only {compared} figures were compared");
    println!("{compared} published figures");
}

#[test]
fn every_case_names_its_source_and_how_its_figures_are_known() {
    let cases = cases();
    assert!(cases.len() > 30, "the cases were not found");
    for case in cases {
        let text = std::fs::read_to_string(case.join("README.md")).expect("README.md");
        for begins in ["Source: ", "How the figures are known: "] {
            assert!(text.lines().any(|l| l.starts_with(begins)), "{}: {begins}", case.display());
        }
    }
}
