//! The worked cases: results of an independent implementation, field by field.
//!
//! What is compared, and what is not, is said in the README of the cases. A new case is a new folder;
//! an `expected-<what>.json` beside its `expected.json` needs its arguments in [`VARIANTS`].

mod common;

use common::{case, run};
use serde_json::Value;

/// Every case.
const CASES: [&str; 5] =
    ["fixed-12v", "adjustable-5-15v", "soft-feed", "nothing-qualifies", "shop-rules"];

/// The arguments that belong to each kind of expectation.
const VARIANTS: [(&str, &[&str]); 3] = [
    ("expected.json", &["--top", "20", "--count"]),
    ("expected-front.json", &["--front", "--count"]),
    ("expected-spread.json", &["--spread", "pass=1", "--top", "20", "--count"]),
];

/// Two right programs may add in another order; this much, relatively, they may differ by.
const TOLERANCE: f64 = 1e-9;

#[test]
fn fixed_output() {
    compare_all("fixed-12v");
}

#[test]
fn adjustable_output() {
    compare_all("adjustable-5-15v");
}

#[test]
fn soft_feed() {
    compare_all("soft-feed");
}

#[test]
fn nothing_qualifies() {
    compare_all("nothing-qualifies");
}

#[test]
fn shop_rules() {
    compare_all("shop-rules");
}

/// A folder that no test names would never be compared.
#[test]
fn every_case_is_compared() {
    let folders = std::fs::read_dir(case("")).unwrap().filter_map(Result::ok);
    let mut folders: Vec<String> = folders
        .filter(|entry| entry.path().is_dir())
        .map(|entry| entry.file_name().into_string().unwrap())
        .collect();
    folders.sort();
    let mut cases = CASES;
    cases.sort_unstable();
    assert_eq!(folders, cases);
}

/// A comparison that found nothing amiss in an altered result would be worth nothing.
#[test]
fn the_comparison_sees_a_difference() {
    let expected = read(&case("fixed-12v").join("expected.json"));
    assert_eq!(difference(&expected, &expected, ""), None);
    let altered = |pointer: &str, value: Value| {
        let mut found = expected.clone();
        *found.pointer_mut(pointer).unwrap() = value;
        difference(&expected, &found, "").unwrap_or_default()
    };
    let told = altered("/candidates/3/checks/5/asked", Value::from(25.000_001));
    assert!(told.starts_with(".candidates[3].checks[5].asked: expected 25"), "{told}");
    assert!(altered("/candidates/0/slots/0/part", Value::from("QQ")).contains("slots[0].part"));
    assert!(altered("/combinations/feasible", Value::from("91")).contains("feasible"));
    assert!(altered("/candidates/0/binding", Value::Null).contains("binding"));
    assert_eq!(altered("/candidates/0/id", Value::from("k0000000")), "");
}

fn compare_all(name: &str) {
    let folder = case(name);
    let mut compared = 0;
    for (file, arguments) in VARIANTS {
        if !folder.join(file).exists() {
            continue;
        }
        compared += 1;
        let written = tempfile::tempdir().unwrap();
        let out = written.path().join("x.json");
        let mut all = vec!["shortlist", "sheet.toml", "--catalogs", "catalogs"];
        all.extend(arguments);
        all.extend(["--out", out.to_str().unwrap()]);
        let run = run(&folder, &all);
        let (expected, found) = (read(&folder.join(file)), read(&out));
        if let Some(told) = difference(&expected, &found, "") {
            panic!("{name}/{file} differs at {told}");
        }
        let qualifies = expected["candidates"].as_array().is_some_and(|rows| !rows.is_empty());
        assert_eq!(run.status, i32::from(!qualifies), "{name}/{file}: {}", run.err);
    }
    let expectations = std::fs::read_dir(&folder).unwrap().filter_map(Result::ok);
    let expectations = expectations.filter(|e| e.path().extension().is_some_and(|x| x == "json"));
    assert_eq!(expectations.count(), compared, "{name} holds an expectation without arguments");
}

fn read(path: &std::path::Path) -> Value {
    let text = std::fs::read_to_string(path).unwrap_or_else(|e| panic!("{}: {e}", path.display()));
    serde_json::from_str(&text).unwrap_or_else(|e| panic!("{}: {e}", path.display()))
}

/// Fields of which each program has its own: hashes, ids, units as written.
const OWN: [&str; 4] = ["sheet_sha256", "catalogs_sha256", "id", "unit"];

/// Lists of which only the wording is each program's own.
const WORDED: [&str; 3] = ["assumed", "not_checked", "cautions"];

/// The first difference, with the path to it.
fn difference(expected: &Value, found: &Value, path: &str) -> Option<String> {
    let differ = || Some(format!("{path}: expected {expected}, found {found}"));
    match (expected, found) {
        (Value::Object(e), Value::Object(f)) => {
            let (names, found_names) = (e.keys().collect::<Vec<_>>(), f.keys().collect::<Vec<_>>());
            if names != found_names {
                return Some(format!(
                    "{path}: expected the fields {names:?}, found {found_names:?}"
                ));
            }
            e.iter().zip(f.values()).find_map(|((name, e), f)| {
                let path = format!("{path}.{name}");
                match name.as_str() {
                    own if OWN.contains(&own) => None,
                    worded if WORDED.contains(&worded) => other_words(e, f, &path),
                    "unproven" => list_difference(&by_place(e), &by_place(f), &path),
                    _ => difference(e, f, &path),
                }
            })
        }
        (Value::Array(e), Value::Array(f)) => list_difference(e, f, path),
        (Value::Number(e), Value::Number(f)) => {
            let (e, f) = (e.as_f64()?, f.as_f64()?);
            if (e - f).abs() <= TOLERANCE * e.abs().max(f.abs()) { None } else { differ() }
        }
        _ if expected == found => None,
        _ => differ(),
    }
}

fn list_difference(expected: &[Value], found: &[Value], path: &str) -> Option<String> {
    let first = expected.iter().zip(found).enumerate();
    let first = first.map(|(n, (e, f))| difference(e, f, &format!("{path}[{n}]")));
    first.flatten().next().or_else(|| {
        let (e, f) = (expected.len(), found.len());
        (e != f).then(|| format!("{path}: expected {e} entries, found {f}"))
    })
}

/// Lists whose wording may differ still name the same sheet keys and checks, in any order.
fn other_words(expected: &Value, found: &Value, path: &str) -> Option<String> {
    let names = |list: &Value| -> Vec<String> {
        let texts = list.as_array().into_iter().flatten().filter_map(Value::as_str);
        let first_words = texts.filter_map(|text| text.split([' ', ':']).next());
        let mut names: Vec<String> = first_words
            .filter(|word| word.contains('.') || word.contains('-'))
            .map(str::to_owned)
            .collect();
        names.sort();
        names
    };
    let is_candidate = path.contains("candidates");
    let (expected, found) = (names(expected), names(found));
    let differs = is_candidate && expected != found;
    differs.then(|| format!("{path}: expected {expected:?}, found {found:?}"))
}

fn by_place(list: &Value) -> Vec<Value> {
    let mut list = list.as_array().cloned().unwrap_or_default();
    list.sort_by_key(|part| (part["file"].to_string(), part["line"].as_u64()));
    list
}
