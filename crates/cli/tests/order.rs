//! `order`: joint quantities and prices, what is said of stock and of parts without a price.

mod common;

use common::{copy_of, repository, run};
use serde_json::Value;
use std::path::{Path, PathBuf};

fn design(name: &str) -> String {
    format!("catalogs-sample/designs/{name}.toml")
}

/// A copy of a sample design for so many boards.
fn for_boards(folder: &Path, name: &str, boards: u64) -> PathBuf {
    let text = std::fs::read_to_string(repository(&design(name))).expect("the design is there");
    let sheets = repository("catalogs-sample/sheets").canonicalize().expect("the sheets are there");
    let text = text.replace("../sheets", &sheets.display().to_string());
    let changed = |line: &str| match line.starts_with("boards = ") {
        true => format!("boards = {boards}"),
        false => line.to_owned(),
    };
    let text: Vec<String> = text.lines().map(changed).collect();
    let path = folder.join(format!("{name}-{boards}.toml"));
    std::fs::write(&path, text.join("\n")).expect("a file");
    path
}

/// The purchase list over designs as JSON, and the exit status.
fn list(designs: &[&str], more: &[&str]) -> (Value, i32) {
    let folder = tempfile::tempdir().expect("a folder");
    let file = folder.path().join("x.json").display().to_string();
    let common = ["--catalogs", "catalogs-sample", "--out", &file];
    let run = run(&repository(""), &[&["order"], designs, &common, more].concat());
    let bytes = std::fs::read(&file).unwrap_or_else(|_| panic!("{}", run.err));
    (serde_json::from_slice(&bytes).expect("JSON"), run.status)
}

fn line<'v>(list: &'v Value, part: &str) -> &'v Value {
    let lines = list["lines"].as_array().expect("lines");
    lines.iter().find(|line| line["part"] == part).unwrap_or_else(|| panic!("{part}: {lines:?}"))
}

#[test]
fn two_rails_that_share_a_part_reach_a_price_break_together() {
    let folder = tempfile::tempdir().unwrap();
    // The zener costs 0.09, from 25 on 0.08.
    let gauge = for_boards(folder.path(), "tide-gauge-kept", 15);
    let jetty = for_boards(folder.path(), "jetty-kept", 12);
    let [gauge, jetty] = [gauge, jetty].map(|path| path.display().to_string());
    let price = |designs: &[&str]| line(&list(designs, &[]).0, "QK9V1-2")["unit_price"].clone();
    assert_eq!((price(&[&gauge]), price(&[&jetty])), (0.09.into(), 0.09.into()));

    let (both, status) = list(&[&gauge, &jetty], &[]);
    assert_eq!(status, 0);
    let zener = line(&both, "QK9V1-2");
    assert_eq!((&zener["pieces"], &zener["unit_price"]), (&27.into(), &0.08.into()));
    assert_eq!(zener["line_total"], 2.16);
    assert_eq!(
        (&zener["uses"][0]["pieces"], &zener["uses"][1]["pieces"]),
        (&15.into(), &12.into())
    );
    assert_eq!(zener["next_break"]["from"], 100);
    for rail in both["rails"].as_array().unwrap() {
        assert!(rail["cost_together"].as_f64() < rail["cost_alone"].as_f64(), "{rail}");
    }
}

#[test]
fn line_totals_add_up_to_the_total_and_to_the_rails() {
    let designs = ["tide-gauge-kept", "mast-kept", "bench-kept", "sensor-kept"].map(design);
    let designs: Vec<&str> = designs.iter().map(String::as_str).collect();
    let (list, _) = list(&designs, &["--boards", "7"]);
    let cents = |value: &Value| (value.as_f64().unwrap() * 1e6).round() as i64;
    let sum = |key: &str, rows: &str| -> i64 {
        list[rows].as_array().unwrap().iter().map(|row| cents(&row[key])).sum()
    };
    assert_eq!(sum("line_total", "lines"), cents(&list["total"]));
    assert_eq!(sum("cost_together", "rails"), cents(&list["total"]));
    for line in list["lines"].as_array().unwrap() {
        let uses = line["uses"].as_array().unwrap();
        let pieces: u64 = uses.iter().map(|of| of["pieces"].as_u64().unwrap()).sum();
        assert_eq!(line["pieces"], pieces);
        assert!(uses.iter().all(|of| of["pieces"].as_u64().unwrap() % 7 == 0), "{line}");
    }
    assert_eq!((&list["format"], &list["boards"]), (&1.into(), &7.into()));
}

#[test]
fn a_stock_that_does_not_reach_is_marked() {
    let sinks = |boards: &str| {
        line(&list(&[&design("tide-gauge-kept")], &["--boards", boards]).0, "GDL-B5").clone()
    };
    assert_eq!(sinks("95")["short_by"], Value::Null);
    assert_eq!(sinks("100")["short_by"], 5.0);
    let arguments =
        ["order", &design("tide-gauge-kept"), "--catalogs", "catalogs-sample", "--boards", "100"];
    let run = run(&repository(""), &arguments);
    assert_eq!(run.status, 0, "a list is made: what is short can be ordered elsewhere");
    assert!(
        run.out.contains("Grindlemoor/GDL-B5: 100 needed, 95 in stock, short by 5"),
        "{}",
        run.out
    );
}

#[test]
fn a_part_that_no_catalog_holds_has_no_price_and_that_is_said() {
    let (list, status) = list(&[&design("pressure-bench")], &[]);
    assert_eq!(status, 0);
    let zener = line(&list, "WX-REF25");
    assert_eq!((&zener["unit_price"], &zener["line_total"]), (&Value::Null, &Value::Null));
    assert_eq!(list["unpriced"], 3, "the zener and two resistors");
    assert_eq!(zener["stock"], 4.0, "what the design does tell");
    let arguments = ["order", &design("pressure-bench"), "--catalogs", "catalogs-sample"];
    let run = run(&repository(""), &arguments);
    assert!(run.out.contains("price unknown: Wexcombe/WX-REF25"), "{}", run.out);
    let words: Vec<&str> = run.out.split_whitespace().collect();
    assert!(words.join(" ").contains("states no cost; not in the total"), "{}", run.out);
}

#[test]
fn an_own_part_with_a_cost_is_priced() {
    let folder = tempfile::tempdir().unwrap();
    let path = for_boards(folder.path(), "pressure-bench", 10);
    let text = std::fs::read_to_string(&path).unwrap();
    let text = text.replace("[inline.zener]\n", "[inline.zener]\ncost = \"1:1.20;10:0.95\"\n");
    std::fs::write(&path, text).unwrap();
    let (list, _) = list(&[&path.display().to_string()], &[]);
    let zener = line(&list, "WX-REF25");
    assert_eq!((&zener["unit_price"], &zener["line_total"]), (&0.95.into(), &9.5.into()));
}

#[test]
fn a_design_that_does_not_hold_is_bought_for_with_a_warning() {
    let (list, status) = list(&[&design("tide-gauge-1994"), &design("mast-kept")], &[]);
    assert_eq!(status, 1);
    let answers: Vec<&Value> =
        list["rails"].as_array().unwrap().iter().map(|r| &r["answer"]).collect();
    assert_eq!(answers, ["fails", "holds"]);
}

#[test]
fn a_list_that_would_lack_a_rail_is_not_written() {
    let folder = tempfile::tempdir().unwrap();
    let broken = folder.path().join("broken.toml");
    std::fs::write(&broken, "design = 1\nname = \"x\"\n").unwrap();
    let file = folder.path().join("x.csv");
    let [broken, out] = [&broken, &file].map(|path| path.display().to_string());
    let arguments =
        ["order", &design("mast-kept"), &broken, "--catalogs", "catalogs-sample", "--out", &out];
    let run = run(&repository(""), &arguments);
    assert_eq!((run.status, run.out.as_str()), (2, ""));
    assert!(run.err.contains("broken.toml"), "{}", run.err);
    assert!(!file.exists());
}

#[test]
fn a_part_of_which_needed_cells_are_blank_keeps_its_price() {
    let folder = copy_of("fixed-12v");
    let at = |name: &str| folder.path().join(name);
    let keep = ["shortlist", "sheet.toml", "--keep", "1", "--as", "kept.toml"];
    let kept = run(folder.path(), &keep);
    assert_eq!(kept.status, 0, "{}", kept.err);
    let order = ["order", "kept.toml", "--out", "x.csv", "--overwrite"];
    let before = run(folder.path(), &order);
    assert_eq!(before.status, 0, "{}", before.err);
    let priced = std::fs::read_to_string(at("x.csv")).unwrap();
    // Blank the first row's izt_a of whatever zener was chosen.
    let zeners = std::fs::read_to_string(at("catalogs/zeners.csv")).unwrap();
    let kept = std::fs::read_to_string(at("kept.toml")).unwrap();
    let header: Vec<&str> = zeners.lines().next().unwrap().split(',').collect();
    let place = header.iter().position(|name| *name == "izt_a").unwrap();
    let blanked: Vec<String> = zeners
        .lines()
        .map(|line| {
            let mut cells: Vec<&str> = line.split(',').collect();
            let is_chosen = cells.iter().any(|c| c.len() > 3 && kept.contains(&format!("/{c}\"")));
            if is_chosen {
                cells[place] = "";
            }
            cells.join(",")
        })
        .collect();
    assert_ne!(blanked.join("\n"), zeners.trim_end(), "a row was changed");
    std::fs::write(at("catalogs/zeners.csv"), blanked.join("\n")).unwrap();
    let after = run(folder.path(), &order);
    assert_eq!(after.status, 1, "its checks are open: {}", after.err);
    let zener = |text: &str| -> Vec<String> {
        let line = text.lines().find(|line| line.starts_with("zener,")).expect("the zener");
        line.split(',').map(str::to_owned).collect()
    };
    let price = |text: &str| zener(text)[9].clone();
    let after = std::fs::read_to_string(at("x.csv")).unwrap();
    assert!(!price(&after).is_empty());
    assert_eq!(price(&after), price(&priced));
}
