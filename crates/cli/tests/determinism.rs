//! The same question has the same answer, byte for byte: however many threads there are, and whatever
//! order the rows of the catalogs are in.
//!
//! Asked of the sample shop and of small shops made from seeds, with parts as they are sold and with
//! parts that tie in everything but their names.

mod common;

use bench::large::{Hard, Order, Sizes, write_shop};
use common::{program, repository, run, told};
use serde_json::Value;
use std::collections::BTreeMap;
use std::path::{Path, PathBuf};

/// A rail sheet with the folder of the catalogs that it is asked of.
struct Question {
    sheet: PathBuf,
    catalogs: PathBuf,
}

/// The rail sheets of the sample.
fn of_the_sample() -> Vec<Question> {
    let catalogs = repository("catalogs-sample");
    let sheets = std::fs::read_dir(catalogs.join("sheets")).expect("the sample's sheets");
    let question = |sheet: PathBuf| Question { sheet, catalogs: catalogs.clone() };
    let mut questions: Vec<Question> =
        sheets.map(|entry| question(entry.expect("an entry").path())).collect();
    questions.sort_by(|a, b| a.sheet.cmp(&b.sheet));
    assert!(questions.len() > 3);
    questions
}

/// Made-up shops, each in a folder of its own below this one, with three of their rail sheets.
fn made_up(below: &Path) -> Vec<Question> {
    let kinds = [(None, 3), (None, 4), (Some(Hard::Ties), 1), (Some(Hard::Undominated), 1)];
    let shop = |(number, (hard, seed)): (usize, (Option<Hard>, u64))| {
        let rows = if hard.is_some() { 16 } else { 60 };
        let catalogs = below.join(number.to_string());
        write_shop(&catalogs, &Order { sizes: Sizes::alike(rows), seed, hard }).expect("a shop");
        ["fixed-12v", "adjustable-5-15v", "impossible"].map(|name| Question {
            sheet: catalogs.join(name).with_extension("toml"),
            catalogs: catalogs.clone(),
        })
    };
    kinds.into_iter().enumerate().flat_map(shop).collect()
}

/// Everything that the program says to a question, by what was asked, and the files that it writes.
fn answers(question: &Question, threads: usize) -> BTreeMap<String, String> {
    let mut answers = BTreeMap::new();
    let asked = [
        ("list", ["shortlist"].as_slice(), ["--top", "25", "--count"].as_slice()),
        ("front", &["shortlist"], &["--front"]),
        ("spread", &["shortlist"], &["--top", "25", "--spread", "pass=1", "--spread", "zener=2"]),
        ("whynot", &["whynot"], &[]),
    ];
    for (name, command, options) in asked {
        let folder = tempfile::tempdir().expect("a folder");
        let mut program = program(folder.path());
        program.env("RAYON_NUM_THREADS", threads.to_string());
        program.args(command).arg(&question.sheet).arg("--catalogs").arg(&question.catalogs);
        program.args(options);
        let files: &[&str] = if name == "whynot" { &[] } else { &["x.json", "x.csv"] };
        files.iter().for_each(|file| {
            program.args(["--out", file]);
        });
        let run = told(program.output().expect("the program runs"));
        assert!(run.status < 2, "{name} of {}: {run:?}", question.sheet.display());
        answers.insert(name.to_owned(), run.out);
        answers.insert(format!("{name}, standard error"), run.err);
        for file in files {
            let text = std::fs::read_to_string(folder.path().join(file)).expect("it is written");
            answers.insert(format!("{name}, {file}"), text);
        }
    }
    answers
}

fn assert_same(what: &str, left: &BTreeMap<String, String>, right: &BTreeMap<String, String>) {
    assert!(left.keys().eq(right.keys()));
    for (name, text) in left {
        assert_eq!(text, &right[name], "{what}: {name}");
    }
}

fn assert_threads_do_not_matter(questions: &[Question]) {
    for question in questions {
        let alone = answers(question, 1);
        for threads in [2, 3, 7] {
            let what = format!("{}, {threads} threads", question.sheet.display());
            assert_same(&what, &alone, &answers(question, threads));
        }
    }
}

#[test]
fn any_number_of_threads_gives_the_same_bytes_for_the_sample() {
    assert_threads_do_not_matter(&of_the_sample());
}

#[test]
fn any_number_of_threads_gives_the_same_bytes_for_made_up_shops() {
    let shops = tempfile::tempdir().expect("a folder");
    assert_threads_do_not_matter(&made_up(shops.path()));
}

/// A copy of a folder of catalogs whose rows are in another order.
fn shuffled(catalogs: &Path, seed: u64) -> tempfile::TempDir {
    let copy = tempfile::tempdir().expect("a folder");
    for entry in std::fs::read_dir(catalogs).expect("the catalogs") {
        let path = entry.expect("an entry").path();
        let target = copy.path().join(path.file_name().expect("a name"));
        match path.extension().and_then(|ending| ending.to_str()) {
            Some("csv") => {
                let text = std::fs::read_to_string(&path).expect("a catalog");
                std::fs::write(target, with_rows_shuffled(&text, seed)).expect("a copy");
            }
            Some("toml") => {
                std::fs::copy(&path, target).expect("a copy");
            }
            _ => {}
        }
    }
    copy
}

/// The header stays where it is. The shops here have a record a line.
fn with_rows_shuffled(text: &str, seed: u64) -> String {
    let mut rows: Vec<&str> = text.lines().skip(1).collect();
    assert!(rows.iter().all(|row| row.matches('"').count().is_multiple_of(2)));
    // A linear congruential generator modulo 2^64; multiplier of Knuth's MMIX.
    let mut state = seed;
    for place in (1..rows.len()).rev() {
        state = state.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1);
        rows.swap(place, (state >> 33) as usize % (place + 1));
    }
    let header = text.lines().next().unwrap_or_default();
    [header].iter().chain(&rows).map(|line| format!("{line}\n")).collect()
}

/// Takes out what the order of rows may change: line numbers, hashes, the order of the unproven.
fn without_places(answers: BTreeMap<String, String>) -> BTreeMap<String, String> {
    let plain = |(name, text): (String, String)| {
        let text = if name.ends_with(".json") { json_without_places(&text) } else { text };
        let text = if name.ends_with("standard error") { sorted(&text) } else { text };
        (name, without_unproven(&without_lines(&text)))
    };
    answers.into_iter().map(plain).collect()
}

/// Notices come in the order of the rows.
fn sorted(text: &str) -> String {
    let mut lines: Vec<String> = text.lines().map(without_lines).collect();
    lines.sort();
    lines.join("\n")
}

/// `zeners.csv:12` becomes `zeners.csv:`.
fn without_lines(text: &str) -> String {
    let mut parts = text.split(".csv:");
    let mut plain = parts.next().unwrap_or_default().to_owned();
    for part in parts {
        plain.push_str(".csv:");
        plain.push_str(part.trim_start_matches(|c: char| c.is_ascii_digit()));
    }
    plain
}

/// The section of unproven parts goes; JSON holds all of them in any order.
fn without_unproven(terminal: &str) -> String {
    let mut inside = false;
    let is_outside = |line: &&str| {
        inside = line.starts_with("Unproven parts") || inside && line.starts_with(' ');
        !inside
    };
    terminal.lines().filter(is_outside).collect::<Vec<_>>().join("\n")
}

fn json_without_places(text: &str) -> String {
    let mut list: Value = serde_json::from_str(text).expect("JSON");
    list["catalogs_sha256"] = Value::Null;
    let strip = |row: &mut Value| row["line"] = Value::Null;
    let unproven = list["unproven"].as_array_mut().expect("unproven parts");
    unproven.iter_mut().for_each(strip);
    unproven.sort_by_key(Value::to_string);
    for candidate in list["candidates"].as_array_mut().expect("candidates") {
        candidate["slots"].as_array_mut().expect("slots").iter_mut().for_each(strip);
    }
    format!("{list:#}")
}

fn assert_row_order_does_not_matter(questions: &[Question]) {
    for question in questions {
        let as_it_is = without_places(answers(question, 2));
        for seed in [1, 2] {
            let copy = shuffled(&question.catalogs, seed);
            let sheet = question.sheet.clone();
            let other = Question { sheet, catalogs: copy.path().to_owned() };
            let what = format!("{}, rows shuffled by {seed}", question.sheet.display());
            assert_same(&what, &as_it_is, &without_places(answers(&other, 2)));
        }
    }
}

#[test]
fn the_order_of_rows_does_not_matter_for_the_sample() {
    assert_row_order_does_not_matter(&of_the_sample());
}

#[test]
fn the_order_of_rows_does_not_matter_for_made_up_shops() {
    let shops = tempfile::tempdir().expect("a folder");
    assert_row_order_does_not_matter(&made_up(shops.path()));
}

#[test]
fn shuffling_changes_the_files() {
    let catalogs = repository("catalogs-sample");
    let copy = shuffled(&catalogs, 1);
    for name in ["zeners.csv", "opamps.csv", "transistors.csv", "heatsinks.csv"] {
        let read = |folder: &Path| std::fs::read_to_string(folder.join(name)).expect("a catalog");
        let (before, after) = (read(&catalogs), read(copy.path()));
        assert_ne!(before, after, "{name}");
        let rows = |text: &str| text.lines().map(str::to_owned).collect::<Vec<_>>();
        let (mut before, mut after) = (rows(&before), rows(&after));
        assert_eq!(before.first(), after.first());
        before.sort();
        after.sort();
        assert_eq!(before, after, "{name}");
    }
    let checked = run(copy.path(), &["catalog", "check", "--catalogs", "."]);
    assert_eq!(checked.status, 0, "{checked:?}");
}
