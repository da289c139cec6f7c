//! What the command line promises: statuses, files, streams, widths.

mod common;

use common::{Run, case, copy_of, program, repository, run, told};
use serde_json::Value;
use std::path::Path;
use std::process::Stdio;

const SHORTLIST: [&str; 4] = ["shortlist", "sheet.toml", "--catalogs", "catalogs"];

fn shortlist(folder: &Path, more: &[&str]) -> Run {
    run(folder, &[&SHORTLIST[..], more].concat())
}

fn json(folder: &Path, name: &str) -> Value {
    serde_json::from_slice(&std::fs::read(folder.join(name)).unwrap()).unwrap()
}

// ---- exit statuses ----

#[test]
fn status_0_where_something_holds() {
    assert_eq!(shortlist(&case("fixed-12v"), &[]).status, 0);
}

#[test]
fn status_1_where_nothing_does_and_the_counts_say_why() {
    let run = shortlist(&case("nothing-qualifies"), &[]);
    assert_eq!(run.status, 1);
    assert!(run.out.contains("Nothing qualifies: none of 2 880 combinations"), "{}", run.out);
    assert!(run.out.contains("heatsink-fit 1 008, zener-bias 312"), "{}", run.out);
}

#[test]
fn status_2_where_input_or_command_line_is_at_fault() {
    let folder = case("fixed-12v");
    assert_eq!(run(&folder, &["shortlist", "none.toml", "--catalogs", "catalogs"]).status, 2);
    assert_eq!(run(&folder, &["shortlist", "sheet.toml", "--catalogs", "nowhere"]).status, 2);
    assert_eq!(shortlist(&folder, &["--top", "0"]).status, 2);
    assert_eq!(shortlist(&folder, &["--keep", "1"]).status, 2, "--keep needs --as");
    assert_eq!(shortlist(&folder, &["--set", "load.max_a=lots"]).status, 2);
    assert_eq!(run(&folder, &[]).status, 2);
}

#[test]
fn misspelt_words_are_answered_with_the_nearest() {
    let folder = case("fixed-12v");
    let told = |arguments: &[&str]| {
        let run = run(&folder, arguments);
        assert_eq!(run.status, 2);
        run.err
    };
    assert!(told(&["shortlst"]).contains("'shortlist'"));
    assert!(told(&["shortlist", "sheet.toml", "--catalog", "x"]).contains("'--catalogs'"));
    let slot = told(&["shortlist", "sheet.toml", "--spread", "pas=1"]);
    assert!(slot.contains("did you mean `pass`?"), "{slot}");
    let key = told(&[&SHORTLIST[..], &["--set", "load.mx_a=1"]].concat());
    assert!(key.contains("load.max_a"), "{key}");
}

// ---- what a run can change ----

#[test]
fn set_changes_a_value_and_is_recorded() {
    let folder = copy_of("fixed-12v");
    let run = shortlist(folder.path(), &["--set", "load.max_a=0.5", "--out", "x.json"]);
    assert_eq!(run.status, 0, "{}", run.err);
    let list = json(folder.path(), "x.json");
    assert_eq!(list["set"], Value::from(vec!["load.max_a=0.5"]));
    let checks = list["candidates"][0]["checks"].as_array().unwrap();
    let soa = checks.iter().find(|c| c["name"] == "soa-load").unwrap();
    assert_eq!(soa["asked"], 0.502, "load and divider current");
}

#[test]
fn by_ranks_by_one_criterion_and_says_so() {
    let folder = copy_of("fixed-12v");
    for (by, field) in [("cost", "cost"), ("loss", "loss"), ("stress", "stress")] {
        let run = shortlist(folder.path(), &["--by", by, "--out", "x.json", "--overwrite"]);
        assert_eq!(run.status, 0, "{}", run.err);
        let list = json(folder.path(), "x.json");
        let figures: Vec<f64> = list["candidates"]
            .as_array()
            .unwrap()
            .iter()
            .map(|c| c[field].as_f64().unwrap())
            .collect();
        assert!(figures.windows(2).all(|w| w[0] <= w[1] * (1.0 + 1e-9)), "{by}: {figures:?}");
        assert!(run.out.contains(&format!("rank.{by} = 1 (by --by)")), "{}", run.out);
        assert!(!run.out.contains(&format!("rank.{by} = 1;")), "{}", run.out);
    }
}

#[test]
fn spread_limits_the_front_too() {
    let folder = copy_of("fixed-12v");
    let front = |more: &[&str]| {
        let all = [&["--front", "--out", "x.json", "--overwrite"], more].concat();
        assert_eq!(shortlist(folder.path(), &all).status, 0);
        json(folder.path(), "x.json")["candidates"].as_array().unwrap().clone()
    };
    let part = |row: &Value| row["slots"][5]["part"].clone();
    let whole = front(&[]);
    let spread = front(&["--spread", "pass=1"]);
    let mut passed: Vec<Value> = Vec::new();
    let expected: Vec<&Value> = whole
        .iter()
        .filter(|row| {
            let is_new = !passed.contains(&part(row));
            passed.push(part(row));
            is_new
        })
        .collect();
    let ids = |rows: &[&Value]| rows.iter().map(|r| r["id"].clone()).collect::<Vec<_>>();
    assert_eq!(ids(&spread.iter().collect::<Vec<_>>()), ids(&expected));
    assert!(spread.len() < whole.len(), "the case has a front with one transistor twice");
    assert_eq!(front(&["--top", "1"]).len(), 1);
}

#[test]
fn counts_are_null_unless_asked_for() {
    let folder = copy_of("nothing-qualifies");
    let run = shortlist(folder.path(), &["--out", "x.json"]);
    assert_eq!(run.status, 1);
    let list = json(folder.path(), "x.json");
    assert_eq!(list["combinations"]["covered"], "2880");
    assert_eq!(list["combinations"]["feasible"], Value::Null);
    assert_eq!(list["combinations"]["lost"], Value::Null);
    assert_eq!(list["candidates"], Value::from(Vec::<Value>::new()));
}

// ---- files ----

#[test]
fn a_file_is_replaced_only_when_told() {
    let folder = copy_of("fixed-12v");
    let there = folder.path().join("x.json");
    std::fs::write(&there, "precious").unwrap();
    let refused = shortlist(folder.path(), &["--out", "x.json"]);
    assert_eq!(refused.status, 2);
    assert!(refused.err.contains("--overwrite"), "{}", refused.err);
    assert!(refused.out.is_empty(), "refused before any work is done");
    assert_eq!(std::fs::read_to_string(&there).unwrap(), "precious");
    assert_eq!(shortlist(folder.path(), &["--out", "x.json", "--overwrite"]).status, 0);
    assert_eq!(json(folder.path(), "x.json")["format"], 1);
}

#[test]
fn file_names_at_fault_are_told_with_advice() {
    let folder = copy_of("fixed-12v");
    let told = |more: &[&str]| {
        let run = shortlist(folder.path(), more);
        assert_eq!(run.status, 2);
        run.err
    };
    assert!(told(&["--out", "x.yaml"]).contains(".json or .csv"));
    assert!(told(&["--out", "deep/x.json"]).contains("no folder deep"));
    assert!(told(&["--out", "x.json", "--out", "x.json"]).contains("two outputs"));
    assert!(!folder.path().join("x.json").exists());
}

#[test]
fn two_outputs_tell_the_same_list() {
    let folder = copy_of("adjustable-5-15v");
    let run = shortlist(folder.path(), &["--out", "x.json", "--out", "x.csv", "--top", "5"]);
    assert_eq!(run.status, 0, "{}", run.err);
    let list = json(folder.path(), "x.json");
    let text = std::fs::read_to_string(folder.path().join("x.csv")).unwrap();
    let lines: Vec<Vec<&str>> = text.lines().map(|l| l.split(',').collect()).collect();
    assert_eq!(
        lines[0].join(","),
        "rank,id,score,cost,efficiency,margin,slack,binding_damage,binding_function,\
         zener_part,zener_maker,bias_line_part,bias_line_maker,amplifier_part,amplifier_maker,\
         divider_line_part,divider_line_maker,pot_part,pot_maker,pass_part,pass_maker,\
         heatsink_part,heatsink_maker,rz_ohm,rf_ohm,ri_ohm,rx_ohm,low_v,floor_v,reach_v,top_v"
    );
    assert_eq!(lines.len(), 6);
    let column = |name: &str| lines[0].iter().position(|n| *n == name).unwrap();
    for (line, row) in lines[1..].iter().zip(list["candidates"].as_array().unwrap()) {
        assert_eq!(line[column("id")], row["id"]);
        let exact = |name: &str| line[column(name)].parse::<f64>().unwrap();
        assert_eq!(exact("cost"), row["cost"].as_f64().unwrap());
        assert_eq!(exact("top_v"), row["output"]["top_v"].as_f64().unwrap());
        assert_eq!(exact("rx_ohm"), row["values"]["rx_ohm"].as_f64().unwrap());
        assert_eq!(line[column("rf_ohm")], "", "no RF in an adjustable output");
    }
}

#[test]
fn names_that_look_like_formulas_stay_text() {
    let folder = copy_of("fixed-12v");
    let zeners = folder.path().join("catalogs/zeners.csv");
    let text = std::fs::read_to_string(&zeners).unwrap();
    std::fs::write(&zeners, text.replace("ZQ5V6-2,Brindlow", "=1+1,@Brindlow")).unwrap();
    assert_eq!(shortlist(folder.path(), &["--out", "x.csv"]).status, 0);
    let csv = std::fs::read_to_string(folder.path().join("x.csv")).unwrap();
    assert!(csv.contains(",'=1+1,'@Brindlow,"), "{csv}");
    assert!(!csv.contains(",=") && !csv.contains(",@"), "{csv}");
}

// ---- designs ----

#[test]
fn rank_and_id_keep_the_same_design() {
    let folder = copy_of("adjustable-5-15v");
    std::fs::create_dir(folder.path().join("designs")).unwrap();
    let by_rank =
        shortlist(folder.path(), &["--keep", "2", "--as", "designs/a.toml", "--out", "x.json"]);
    assert_eq!(by_rank.status, 0, "{}", by_rank.err);
    let second = json(folder.path(), "x.json")["candidates"][1].clone();
    let id = second["id"].as_str().unwrap();
    assert_eq!(shortlist(folder.path(), &["--keep", id, "--as", "designs/b.toml"]).status, 0);
    let design = |name: &str| std::fs::read_to_string(folder.path().join(name)).unwrap();
    let text = design("designs/a.toml");
    assert_eq!(text, design("designs/b.toml"));

    let design: toml_edit::DocumentMut = text.parse().unwrap();
    assert_eq!(design["design"].as_integer(), Some(1));
    assert_eq!(design["sheet"].as_str(), Some("../sheet.toml"));
    for slot in second["slots"].as_array().unwrap() {
        let (name, maker, part) = (slot["slot"].as_str().unwrap(), &slot["maker"], &slot["part"]);
        let full = format!("{}/{}", maker.as_str().unwrap(), part.as_str().unwrap());
        assert_eq!(design["slots"][name].as_str(), Some(full.as_str()));
    }
    let ohms = |name: &str| design["values"][name].as_integer().map(|ohm| ohm as f64);
    assert_eq!(ohms("rx_ohm"), second["values"]["rx_ohm"].as_f64());
    assert_eq!(ohms("ri_ohm"), second["values"]["ri_ohm"].as_f64());
    assert!(design["values"].get("rf_ohm").is_none(), "an adjustable output has no RF");
    assert!(design["proven"]["zener"]["vz_v"].is_value());
    assert!(design["proven"]["zener"].get("cost").is_none(), "a price proves nothing");

    let again = shortlist(folder.path(), &["--keep", "1", "--as", "designs/a.toml"]);
    assert_eq!(again.status, 2);
    assert!(again.err.contains("--overwrite"), "{}", again.err);
}

#[test]
fn a_row_that_is_not_there_is_not_kept() {
    let folder = copy_of("fixed-12v");
    for name in ["11", "k0000000"] {
        let run = shortlist(folder.path(), &["--keep", name, "--as", "d.toml"]);
        assert_eq!(run.status, 1, "{}", run.err);
        assert!(run.err.contains(&format!("`{name}`")), "{}", run.err);
        assert!(!folder.path().join("d.toml").exists());
    }
}

/// The same parts and values have the same id whatever stands beside them in the list.
#[test]
fn ids_do_not_depend_on_the_list() {
    let folder = copy_of("fixed-12v");
    let first = |more: &[&str]| {
        let all = [&["--out", "x.json", "--overwrite"], more].concat();
        assert_eq!(shortlist(folder.path(), &all).status, 0);
        json(folder.path(), "x.json")["candidates"][0].clone()
    };
    let whole = first(&[]);
    assert_eq!(whole["slots"][5]["part"], "PN-140");
    assert_eq!(whole["id"], first(&["--set", "parts.use.pass=PN-140", "--top", "1"])["id"]);

    let zeners = folder.path().join("catalogs/zeners.csv");
    let text = std::fs::read_to_string(&zeners).unwrap();
    std::fs::write(&zeners, text.replace("Brindlow,0.09,", "Brindlow,0.01,")).unwrap();
    let cheaper = first(&[]);
    assert_eq!(whole["id"], cheaper["id"]);
    assert_ne!(whole["cost"], cheaper["cost"]);
}

// ---- streams and widths ----

#[test]
fn a_closed_pipe_is_a_normal_end() {
    let sample = repository("");
    let mut command = program(&sample);
    command.args(["shortlist", "catalogs-sample/sheets/tide-gauge-12v.toml"]);
    command.args(["--catalogs", "catalogs-sample"]);
    let mut child = command.stdout(Stdio::piped()).stderr(Stdio::piped()).spawn().unwrap();
    drop(child.stdout.take());
    let run = told(child.wait_with_output().unwrap());
    assert_eq!((run.status, run.err.as_str()), (0, ""));
}

#[test]
fn quiet_leaves_nothing_on_standard_error_and_the_data_as_it_was() {
    let folder = copy_of("fixed-12v");
    let set = ["--set", "fault.limit_a=0.7"];
    let usual = shortlist(folder.path(), &[&set[..], &["--out", "x.json"]].concat());
    assert!(usual.err.contains("warning[fault-below-load]"), "{}", usual.err);
    assert!(usual.err.contains("wrote x.json"), "{}", usual.err);
    let out = ["--out", "x.json", "--overwrite", "--quiet"];
    let quiet = shortlist(folder.path(), &[&set[..], &out].concat());
    assert_eq!((quiet.status, quiet.err.as_str()), (0, ""));
    assert_eq!(quiet.out, usual.out);
    let fault =
        run(folder.path(), &["shortlist", "none.toml", "--catalogs", "catalogs", "--quiet"]);
    assert!(fault.err.contains("none.toml"), "errors are not quieted");
}

#[test]
fn ascii_means_ascii() {
    let sample = repository("");
    for sheet in ["bench-5-15v", "impossible-10v"] {
        let sheet = format!("catalogs-sample/sheets/{sheet}.toml");
        let run = run(&sample, &["shortlist", &sheet, "--catalogs", "catalogs-sample", "--ascii"]);
        assert!(run.out.is_ascii() && run.err.is_ascii(), "{}{}", run.out, run.err);
    }
    let check = run(&sample, &["catalog", "check", "--catalogs", "catalogs-sample", "--ascii"]);
    assert!(check.out.is_ascii() && check.err.is_ascii(), "{}{}", check.out, check.err);
}

#[test]
fn a_pipe_gets_80_columns_unless_told_otherwise() {
    let sample = repository("");
    let widest = |text: &str| text.lines().map(|line| line.chars().count()).max().unwrap_or(0);
    for sheet in ["tide-gauge-12v", "bench-5-15v", "winch-15v", "sensor-5v", "impossible-10v"] {
        let sheet = format!("catalogs-sample/sheets/{sheet}.toml");
        let arguments = ["shortlist", &sheet, "--catalogs", "catalogs-sample", "--count"];
        let usual = run(&sample, &arguments);
        assert!(widest(&usual.out) <= 80, "{}", usual.out);
        let wide = program(&sample).args(arguments).env("COLUMNS", "200").output().unwrap();
        let wide = told(wide);
        assert!(widest(&wide.out) <= 200, "{}", wide.out);
        if usual.status == 0 {
            assert!(usual.out.contains("Columns left out: "), "{}", usual.out);
            assert!(widest(&wide.out) > 100, "a wide terminal is used: {}", wide.out);
            assert!(wide.out.lines().count() < usual.out.lines().count());
        }
    }
}

#[test]
fn a_narrow_terminal_gets_paragraphs() {
    let sample = repository("");
    let arguments = ["shortlist", "catalogs-sample/sheets/bench-5-15v.toml"];
    let narrow = program(&sample)
        .args(arguments)
        .args(["--catalogs", "catalogs-sample"])
        .env("COLUMNS", "44")
        .output()
        .unwrap();
    let narrow = told(narrow);
    assert!(narrow.out.lines().all(|line| line.chars().count() <= 44), "{}", narrow.out);
    let ranks = narrow.out.lines().filter(|line| line.starts_with("rank ")).count();
    assert_eq!(ranks, 10, "{}", narrow.out);
}

#[test]
fn a_narrow_terminal_is_told_of_catalogs_a_paragraph_a_file() {
    let arguments = ["catalog", "check", "--catalogs", "catalogs-sample"];
    let narrow = program(&repository("")).args(arguments).env("COLUMNS", "44").output().unwrap();
    let narrow = told(narrow);
    assert!(narrow.out.lines().all(|line| line.chars().count() <= 44), "{}", narrow.out);
    assert!(narrow.out.starts_with("zeners.csv: rows 64, "), "{}", narrow.out);
}

#[test]
fn no_escape_sequences_leave_the_program_but_on_a_terminal() {
    let folder = copy_of("fixed-12v");
    let zeners = folder.path().join("catalogs/zeners.csv");
    let text = std::fs::read_to_string(&zeners).unwrap();
    std::fs::write(&zeners, text.replace("ZQ5V6-2", "ZQ\u{1b}[31m5V6")).unwrap();
    for no_color in ["", "1"] {
        let run =
            program(folder.path()).args(SHORTLIST).env("NO_COLOR", no_color).output().unwrap();
        let run = told(run);
        assert_eq!(run.status, 0, "{}", run.err);
        assert!(run.out.contains("5V6") && !run.out.contains('\u{1b}'), "{}", run.out);
    }
}
