//! `verify`: designs kept as files that it must accept or refuse, and formulas that give what they say.
//!
//! The cases are folders under `tests/verify`; its README says what their names mean.

mod common;

use circuit::check::Check;
use common::{Run, case, copy_of, repository, run};
use report::proof::book::spelled;
use report::proof::calculator::work_out;
use serde_json::Value;
use std::path::{Path, PathBuf};

/// The folders of the cases, in order of name.
fn cases() -> Vec<(String, PathBuf)> {
    let folders = std::fs::read_dir(repository("tests/verify")).expect("the folder of cases");
    let mut cases: Vec<(String, PathBuf)> = folders
        .filter_map(Result::ok)
        .map(|entry| (entry.file_name().to_string_lossy().into_owned(), entry.path()))
        .filter(|(_, path)| path.join("design.toml").is_file())
        .collect();
    cases.sort();
    assert!(cases.len() > 50, "the cases were not found");
    cases
}

fn verify(folder: &Path, more: &[&str]) -> Run {
    run(folder, &[&["verify", "design.toml", "--catalogs", "../catalogs"], more].concat())
}

/// The proof of a case's design as JSON.
fn proof(folder: &Path) -> Value {
    let out = tempfile::tempdir().expect("a folder");
    let file = out.path().join("x.json");
    verify(folder, &["--out", file.to_str().expect("a plain path")]);
    read(&file)["designs"][0].clone()
}

fn read(path: &Path) -> Value {
    serde_json::from_slice(&std::fs::read(path).expect("the file is there")).expect("JSON")
}

fn failing(proof: &Value, list: &str) -> Vec<String> {
    let lines = proof[list].as_array().expect("a list");
    let fails = lines.iter().filter(|line| line["holds"] == Value::Bool(false));
    fails.map(|line| line["name"].as_str().unwrap_or_default().to_owned()).collect()
}

// ---- the cases ----

#[test]
fn every_case_says_what_it_is_expected_to() {
    let bless = std::env::var_os("BLESS").is_some();
    let mut differing = Vec::new();
    for (name, folder) in cases() {
        let Run { status, out, err } = verify(&folder, &[]);
        let told = format!("exit status {status}\n\n---- stdout\n{out}\n---- stderr\n{err}");
        let file = folder.join("expected.txt");
        if bless {
            std::fs::write(&file, &told).expect("it can be written");
        } else if std::fs::read_to_string(&file).unwrap_or_default() != told {
            differing.push(name);
        }
    }
    assert!(differing.is_empty(), "these differ from their expected.txt: {differing:?}");
}

#[test]
fn accepted_designs_hold_in_every_point() {
    for (name, folder) in cases().into_iter().filter(|(name, _)| name.starts_with("accept-")) {
        let proof = proof(&folder);
        assert_eq!(proof["answer"], "holds", "{name}");
        assert_eq!(failing(&proof, "checks"), Vec::<String>::new(), "{name}");
        assert_eq!(failing(&proof, "conditions"), Vec::<String>::new(), "{name}");
        assert_eq!(verify(&folder, &[]).status, 0, "{name}");
    }
}

#[test]
fn every_check_refuses_a_design_of_its_own() {
    let cases = cases();
    for check in Check::ALL {
        let name = format!("refuse-{}", check.name());
        let case = cases.iter().find(|(case, _)| *case == name);
        let (_, folder) = case.unwrap_or_else(|| panic!("there is no case {name}"));
        let proof = proof(folder);
        assert_eq!(proof["answer"], "fails", "{name}");
        let first = failing(&proof, "checks").into_iter().next();
        assert_eq!(first.as_deref(), Some(check.name()), "the first that fails");
        assert_eq!(failing(&proof, "conditions"), Vec::<String>::new(), "{name}");
        assert_eq!(verify(folder, &[]).status, 1, "{name}");
    }
    for (name, _) in cases {
        let refused = name.strip_prefix("refuse-");
        assert!(refused.is_none_or(|check| Check::named(check).is_some()), "{name}: no such check");
    }
}

#[test]
fn every_condition_refuses_a_design_of_its_own() {
    let cases = cases();
    for rule in design::condition::Rule::ALL {
        let name = format!("condition-{}", rule.name());
        let case = cases.iter().find(|(case, _)| *case == name);
        let (_, folder) = case.unwrap_or_else(|| panic!("there is no case {name}"));
        assert_eq!(failing(&proof(folder), "conditions"), [rule.name()]);
        assert_eq!(verify(folder, &[]).status, 1, "{name}");
    }
}

#[test]
fn broken_designs_end_with_status_2() {
    for (name, folder) in cases().into_iter().filter(|(name, _)| name.starts_with("broken-")) {
        assert_eq!(verify(&folder, &[]).status, 2, "{name}");
        assert_eq!(proof(&folder)["answer"], "broken", "{name}");
    }
}

#[test]
fn a_broken_design_does_not_stop_the_others() {
    let folder = repository("tests/verify");
    let designs =
        ["accept-fixed", "broken-names", "refuse-dropout"].map(|c| format!("{c}/design.toml"));
    let mut arguments = vec!["verify"];
    arguments.extend(designs.iter().map(String::as_str));
    arguments.extend(["--catalogs", "catalogs"]);
    let run = run(&folder, &arguments);
    assert_eq!(run.status, 2);
    for line in ["accept-fixed/design.toml    holds", "refuse-dropout/design.toml  fails"] {
        assert!(run.out.contains(line), "{}", run.out);
    }
    assert!(run.out.contains("dropout fails for Dunmarrow/DN60-DROPS"), "{}", run.out);
    assert!(run.err.contains("part-ambiguous"), "{}", run.err);
}

#[test]
fn text_is_narrow_and_plain_where_that_is_asked_for() {
    let folder = repository("tests/verify/refuse-soa-fault");
    let run = verify(&folder, &["--ascii"]);
    assert!(run.out.is_ascii(), "{}", run.out);
    let longest = run.out.lines().max_by_key(|line| line.len()).unwrap_or_default();
    assert!(longest.len() <= 80, "{longest}");
}

#[test]
fn a_sheet_and_values_can_be_put_in_place_of_the_designs_own() {
    let folder = repository("tests/verify/accept-fixed");
    let other = verify(&folder, &["--sheet", "../refuse-ceiling/sheet.toml"]);
    assert_eq!(other.status, 2, "an adjustable output asks for a pot");
    let hotter = verify(&folder, &["--set", "ambient.max_c=120"]);
    assert_eq!(hotter.status, 1);
    assert!(
        hotter.out.contains("Tmax                  120 °C    ambient.max_c, --set"),
        "{}",
        hotter.out
    );
}

// ---- formulas ----

/// Every formula of a proof, with its numbers put in, must give the figure beside it to the digits that
/// are shown; and a check's figures must be the check's own.
fn formulas_hold(proof: &Value, whose: &str) -> usize {
    let mut count = 0;
    let mut holds = |expression: &Value, value: &Value| {
        let numbers = expression["numbers"].as_str().expect("a text");
        let result = expression["result"].as_str().expect("a text");
        let again = work_out(numbers)
            .unwrap_or_else(|e| panic!("{whose}: {} = {numbers}: {e}", expression["formula"]));
        let value = number(value);
        let shown = [5, 6].into_iter().find(|digits| shows(result, value, *digits));
        let shown = shown.unwrap_or_else(|| panic!("{whose}: {result} stands beside {value}"));
        let formula = &expression["formula"];
        assert!(shows(result, again, shown), "{whose}: {formula} = {numbers} is {again}");
        count += 1;
    };
    for check in proof["checks"].as_array().expect("a list") {
        holds(&check["asked_by"], &check["asked"]);
        holds(&check["allowed_by"], &check["allowed"]);
    }
    for figure in proof["figures"].as_array().expect("a list") {
        if !figure["worked_out"].is_null() {
            holds(&figure["worked_out"], &figure["value"]);
        }
    }
    count
}

/// The text shows the value to so many digits. Where the value lies between two texts, its last bit,
/// which a reader of JSON may lose, does not decide.
fn shows(text: &str, value: f64, digits: usize) -> bool {
    [1.0, 1.0 - 1e-14, 1.0 + 1e-14].iter().any(|nudge| spelled(value * nudge, digits) == text)
}

fn number(value: &Value) -> f64 {
    match value.as_str() {
        Some("inf") => f64::INFINITY,
        Some("-inf") => f64::NEG_INFINITY,
        _ => value.as_f64().expect("a number"),
    }
}

#[test]
fn formulas_with_their_numbers_give_the_figures_beside_them() {
    for (name, folder) in cases().into_iter().filter(|(name, _)| !name.starts_with("broken-")) {
        let proof = proof(&folder);
        let count = formulas_hold(&proof, &name);
        assert!(count > 80 || proof["answer"] == "unproven", "{name}: {count} formulas");
    }
}

/// Candidates of the worked cases: the formulas give the figures of an independent implementation.
#[test]
fn formulas_give_the_figures_of_the_worked_cases() {
    /// Two right programs may add in another order; this much, relatively, they may differ by.
    const TOLERANCE: f64 = 1e-9;
    let mut seen = 0;
    for name in ["fixed-12v", "adjustable-5-15v", "soft-feed", "shop-rules"] {
        let folder = copy_of(name);
        let expected = read(&case(name).join("expected.json"));
        let candidates = expected["candidates"].as_array().expect("a list");
        for rank in [1, candidates.len() / 2, candidates.len()] {
            let sheet = ["shortlist", "sheet.toml", "--catalogs", "catalogs", "--top", "20"];
            let rank_text = rank.to_string();
            let keep = ["--keep", &rank_text, "--as", "d.toml", "--overwrite"];
            assert_eq!(run(folder.path(), &[&sheet[..], &keep].concat()).status, 0);
            let verify = ["verify", "d.toml", "--catalogs", "catalogs", "--out", "x.json"];
            let run = run(folder.path(), &[&verify[..], &["--overwrite"]].concat());
            assert_eq!(run.status, 0, "{name} {rank}: {}{}", run.out, run.err);
            let proof = read(&folder.path().join("x.json"))["designs"][0].clone();
            formulas_hold(&proof, &format!("{name} {rank}"));
            let (found, wanted) = (&proof["checks"], &candidates[rank - 1]["checks"]);
            assert_eq!(found.as_array().map(Vec::len), wanted.as_array().map(Vec::len));
            for (found, wanted) in found.as_array().unwrap().iter().zip(wanted.as_array().unwrap())
            {
                assert_eq!(found["name"], wanted["name"]);
                for side in ["asked", "allowed"] {
                    let (found, wanted) = (number(&found[side]), number(&wanted[side]));
                    let apart = (found - wanted).abs() / wanted.abs().max(1e-12);
                    assert!(found == wanted || apart < TOLERANCE, "{name} {rank} {side}");
                }
                seen += 1;
            }
        }
    }
    assert!(seen > 200, "{seen} checks");
}

// ---- designs that were kept ----

#[test]
fn a_kept_design_holds_and_its_sheet_is_the_same() {
    let folder = copy_of("fixed-12v");
    let keep =
        ["shortlist", "sheet.toml", "--catalogs", "catalogs", "--keep", "1", "--as", "d.toml"];
    run(folder.path(), &keep);
    let verify = ["verify", "d.toml", "--catalogs", "catalogs"];
    let told = run(folder.path(), &verify);
    assert_eq!(told.status, 0, "{}", told.out);
    assert!(told.out.contains("the same as when the design was kept"), "{}", told.out);
    assert!(!told.out.contains("Changed since it was kept"), "{}", told.out);

    let sheet = folder.path().join("sheet.toml");
    let text = std::fs::read_to_string(&sheet).unwrap();
    std::fs::write(&sheet, format!("# moved\n{text}")).unwrap();
    let told = run(folder.path(), &verify);
    assert!(told.out.contains("which has changed since the design was kept"), "{}", told.out);
}

#[test]
fn sample_designs_do_what_their_page_says() {
    let arguments = ["verify", "--catalogs", "catalogs-sample"].map(str::to_owned);
    let folder = repository("catalogs-sample/designs");
    let entries = std::fs::read_dir(folder).expect("the folder of samples");
    let names = entries.filter_map(|e| e.ok()?.file_name().into_string().ok());
    let mut designs: Vec<String> = names.filter(|n| n.ends_with(".toml")).collect();
    designs.sort();
    assert_eq!(designs.len(), 29);
    let designs = designs.iter().map(|name| format!("catalogs-sample/designs/{name}"));
    let arguments: Vec<String> = arguments.into_iter().chain(designs).collect();
    let arguments: Vec<&str> = arguments.iter().map(String::as_str).collect();
    let told = run(&repository(""), &arguments);
    assert_eq!(told.status, 1, "{}", told.err);
    assert_eq!(told.out.matches(" holds ").count(), 27, "{}", told.out);
    for fact in [
        "jetty-first-build.toml  fails",
        "banned by `parts.ban`",
        "output-error fails for Oldbarrow/carbon",
        "soa_dc of Dunmarrow/DNW60-5D (transistors.csv:18) was 13:5;20:3.4;60:0.3",
    ] {
        assert!(told.out.contains(fact), "{fact}: {}", told.out);
    }
}

#[test]
fn pins_and_bans_that_mean_nothing_are_told_and_fail_no_design() {
    let sample = repository("");
    let design = "catalogs-sample/designs/tide-gauge-kept.toml";
    let set = ["--set", "parts.ban=Nowhere/NONE-1", "--set", "parts.use.zener=QK9V1-22"];
    let run =
        run(&sample, &[&["verify", design, "--catalogs", "catalogs-sample"], &set[..]].concat());
    assert!(run.err.contains("warning[banned-part-unknown]"), "{}", run.err);
    assert!(run.err.contains("warning[pinned-part-unknown]"), "{}", run.err);
    assert!(!run.err.contains("error["), "{}", run.err);
}
