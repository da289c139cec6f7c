//! Faults of sheets and catalogs as they are told: place, mark, advice.

mod common;

use common::{Run, copy_of, repository, run};
use std::path::Path;

/// Replaces a text in a file of the case.
fn alter(folder: &Path, file: &str, from: &str, to: &str) {
    let path = folder.join(file);
    let text = std::fs::read_to_string(&path).unwrap();
    assert!(text.contains(from), "{file} holds {from}");
    std::fs::write(path, text.replacen(from, to, 1)).unwrap();
}

fn shortlist(folder: &Path, more: &[&str]) -> Run {
    let all = [&["shortlist", "sheet.toml", "--catalogs", "catalogs"], more].concat();
    run(folder, &all)
}

fn check(folder: &Path, more: &[&str]) -> Run {
    run(folder, &[&["catalog", "check"], more].concat())
}

#[test]
fn all_faults_of_all_files_are_told_at_once() {
    let folder = copy_of("fixed-12v");
    alter(folder.path(), "catalogs/zeners.csv", "Brindlow,", "Brindlow,dear");
    alter(folder.path(), "sheet.toml", "min_v = 18", "min_volts = 18");
    let run = shortlist(folder.path(), &[]);
    assert_eq!((run.status, run.out.as_str()), (2, ""));
    assert!(run.err.contains("zeners.csv:2:18"), "{}", run.err);
    assert!(run.err.contains("sheet.toml:7:1"), "{}", run.err);
    assert!(run.err.contains("did you mean `feed.min_v`?"), "{}", run.err);
    assert!(run.err.ends_with("2 errors\n"), "{}", run.err);
}

#[test]
fn the_cell_at_fault_is_underlined_with_found_expected_and_mend() {
    let folder = copy_of("fixed-12v");
    alter(folder.path(), "catalogs/zeners.csv", "axial,5.6,", "axial,\"5,6\",");
    let run = shortlist(folder.path(), &["--ascii"]);
    let lines: Vec<&str> = run.err.lines().collect();
    let shown = lines.iter().position(|line| line.starts_with("2 |")).expect("the line is shown");
    let cell = lines[shown].find("5,6").unwrap();
    let mark = lines[shown + 1];
    assert_eq!((mark.find('^'), mark.matches('^').count()), (Some(cell), 3), "{}", run.err);
    for told in ["found     `5,6`", "expected  a voltage in V, > 0", "mend      try `5.6`"] {
        assert!(run.err.contains(told), "{told} in {}", run.err);
    }
}

#[test]
fn broken_rows_can_be_skipped() {
    let folder = copy_of("fixed-12v");
    alter(folder.path(), "catalogs/zeners.csv", "axial,5.6,", "axial,lots,");
    let run = shortlist(folder.path(), &["--skip-broken-rows"]);
    assert_eq!(run.status, 0, "{}", run.err);
    assert!(run.err.contains("warning[") && !run.err.contains("error["), "{}", run.err);
    assert!(!run.out.contains("ZQ5V6-2"), "{}", run.out);
}

#[test]
fn a_pinned_part_that_is_nowhere_stops_the_run() {
    let folder = copy_of("fixed-12v");
    let run = shortlist(folder.path(), &["--set", "parts.use.pass=PN-999"]);
    assert_eq!(run.status, 2);
    assert!(run.err.contains("PN-999"), "{}", run.err);
}

#[test]
fn a_faulty_shop_file_is_told_and_stops_the_run() {
    let folder = copy_of("shop-rules");
    alter(folder.path(), "catalogs/shop.toml", "currency = \"EUR\"", "currency = EUR");
    let run = shortlist(folder.path(), &[]);
    assert_eq!(run.status, 2);
    assert!(run.err.contains("shop.toml:2:"), "{}", run.err);
    assert!(!run.err.contains("sheet.toml"), "the sheet is not blamed: {}", run.err);
}

#[test]
fn a_sheet_that_is_no_utf_8_is_told_with_its_line() {
    let folder = copy_of("fixed-12v");
    std::fs::write(folder.path().join("sheet.toml"), b"[rail]\nname = \"12 V \xb1\"\n").unwrap();
    let run = shortlist(folder.path(), &[]);
    assert_eq!(run.status, 2);
    assert!(run.err.contains("sheet.toml:2: the file is not in UTF-8"), "{}", run.err);
}

// ---- catalog check ----

#[test]
fn the_sample_catalogs_have_no_fault() {
    let run = check(&repository(""), &["--catalogs", "catalogs-sample"]);
    assert_eq!(run.status, 0, "{}", run.err);
    assert!(run.out.contains("transistors.csv:33 Ketterwick/KWD8006B lacks soa_dc"), "{}", run.out);
    let transistors = run.out.lines().find(|line| line.starts_with("transistors.csv ")).unwrap();
    let counts: Vec<&str> = transistors.split_whitespace().skip(1).take(4).collect();
    assert_eq!(counts, ["68", "1", "3", "0"], "rows, unproven, left out, broken");
}

#[test]
fn faults_are_summed_up_and_end_in_status_2() {
    let folder = copy_of("fixed-12v");
    alter(folder.path(), "catalogs/zeners.csv", "axial,5.6,", "axial,lots,");
    let run = check(folder.path(), &[]);
    assert_eq!(run.status, 2);
    assert!(run.err.contains("zeners.csv:2:"), "{}", run.err);
    let zeners = run.out.lines().find(|line| line.starts_with("zeners.csv")).unwrap();
    let counts: Vec<&str> = zeners.split_whitespace().skip(4).take(2).collect();
    assert_eq!(counts, ["1", "1"], "broken, errors: {zeners}");
    assert_eq!(check(folder.path(), &["--skip-broken-rows"]).status, 0);
}

#[test]
fn doubts_alone_are_no_fault() {
    let folder = copy_of("fixed-12v");
    alter(folder.path(), "catalogs/zeners.csv", "vz_v", "vz_volt");
    let run = check(folder.path(), &[]);
    assert_eq!(run.status, 0, "{}", run.err);
    assert!(run.err.contains("zeners.csv:1:"), "a near-miss column has its place: {}", run.err);
    assert!(run.err.contains("`vz_v`"), "{}", run.err);
}

#[test]
fn a_value_that_can_hardly_be_meant_is_a_doubt() {
    let folder = copy_of("fixed-12v");
    alter(folder.path(), "catalogs/zeners.csv", "axial,5.6,", "axial,2M,");
    let run = check(folder.path(), &[]);
    assert_eq!(run.status, 0, "{}", run.err);
    assert!(
        run.err.contains("zeners.csv:2:") && run.err.contains("value-implausible"),
        "{}",
        run.err
    );
}

#[test]
fn a_column_that_shop_toml_means_must_be_one() {
    let folder = copy_of("fixed-12v");
    let shop = folder.path().join("catalogs/shop.toml");
    let before = std::fs::read_to_string(&shop).unwrap_or_default();
    std::fs::write(&shop, format!("{before}\n[columns]\n\"price each\" = \"costs\"\n")).unwrap();
    let wrong = check(folder.path(), &[]);
    assert_eq!(wrong.status, 2);
    assert!(wrong.err.contains("error[unknown-column]"), "{}", wrong.err);
    assert!(wrong.err.contains("\"price each\" is to be read as `costs`"), "{}", wrong.err);
    assert!(wrong.err.contains("did you mean `cost`?"), "{}", wrong.err);

    alter(folder.path(), "catalogs/shop.toml", "costs", "cost");
    let unused = check(folder.path(), &[]);
    assert_eq!(unused.status, 0, "{}", unused.err);
    assert!(unused.err.contains("warning[unused-column]"), "{}", unused.err);

    alter(folder.path(), "catalogs/zeners.csv", "cost", "price each");
    let used = check(folder.path(), &[]);
    assert!(!used.err.contains("unused-column"), "{}", used.err);
}

#[test]
fn several_files_of_a_kind_are_told_one_by_one() {
    let folder = copy_of("fixed-12v");
    let catalogs = folder.path().join("catalogs");
    std::fs::create_dir(catalogs.join("zeners")).unwrap();
    std::fs::rename(catalogs.join("zeners.csv"), catalogs.join("zeners/old.csv")).unwrap();
    let header = "part,maker,cost,vz_v\nZZ,Brindlow,0.1,5.6\n";
    std::fs::write(catalogs.join("zeners/new.csv"), header).unwrap();
    let run = check(folder.path(), &[]);
    assert_eq!(run.status, 0, "{}", run.err);
    let row = |file: &str| run.out.lines().find(|l| l.starts_with(file)).unwrap_or_default();
    let words = |file: &str| row(file).split_whitespace().skip(1).collect::<Vec<_>>().join(" ");
    assert_eq!(words("zeners/new.csv "), "0 1 0 0 0 8", "{}", run.out);
    assert_eq!(words("zeners/old.csv "), "3 1 0 0 0 0", "{}", run.out);
    assert!(run.out.contains("zeners/new.csv:2 Brindlow/ZZ lacks"), "{}", run.out);
    let list = shortlist(folder.path(), &["--out", "x.json"]);
    assert_eq!(list.status, 0, "{}", list.err);
    let json = std::fs::read_to_string(folder.path().join("x.json")).unwrap();
    assert!(json.contains("\"file\": \"zeners/old.csv\""), "{json}");
    assert!(json.contains("\"zeners/new.csv\": \""), "the hash of each: {json}");
}
