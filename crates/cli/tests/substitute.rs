//! `substitute` and `shortage` on the sample shop: what they answer, write, and how they end.

mod common;

use common::{Run, repository, run};
use serde_json::Value;
use std::path::Path;

/// A copy of the sample shop, to be altered.
fn shop() -> tempfile::TempDir {
    let copy = tempfile::tempdir().expect("a folder");
    copy_folder(&repository("catalogs-sample"), copy.path());
    copy
}

fn copy_folder(from: &Path, to: &Path) {
    for entry in std::fs::read_dir(from).expect("the folder is there").flatten() {
        let target = to.join(entry.file_name());
        if entry.path().is_dir() {
            std::fs::create_dir(&target).expect("a folder");
            copy_folder(&entry.path(), &target);
        } else {
            std::fs::copy(entry.path(), target).expect("a copy");
        }
    }
}

/// Puts something else in place of a text that a file holds.
fn alter(shop: &Path, file: &str, from: &str, to: &str) {
    let path = shop.join(file);
    let text = std::fs::read_to_string(&path).expect("the file is there");
    assert!(text.contains(from), "{file} holds no {from}");
    std::fs::write(path, text.replace(from, to)).expect("written");
}

fn substitute(shop: &Path, design: &str, more: &[&str]) -> Run {
    let design = format!("designs/{design}.toml");
    run(shop, &[&["substitute", &design, "--catalogs", "."], more].concat())
}

fn shortage(shop: &Path, more: &[&str]) -> Run {
    run(shop, &[&["shortage", "--designs", "designs", "--catalogs", "."], more].concat())
}

/// What a run wrote as JSON, and the run.
fn as_json(shop: &Path, of: impl Fn(&[&str]) -> Run) -> (Value, Run) {
    let file = shop.join("x.json");
    let run = of(&["--out", "x.json", "--overwrite"]);
    let bytes = std::fs::read(&file).unwrap_or_else(|_| panic!("{}", run.err));
    (serde_json::from_slice(&bytes).expect("JSON"), run)
}

fn list<'v>(value: &'v Value, name: &str) -> &'v [Value] {
    value[name].as_array().unwrap_or_else(|| panic!("{name} is no list"))
}

/// The parts that go in for what is gone, in order of rank.
fn going_in(told: &Value) -> Vec<String> {
    let first = |mend: &Value| list(mend, "parts")[0]["is"].as_str().unwrap_or("-").to_owned();
    list(told, "replacements").iter().map(first).collect()
}

#[test]
fn a_substitute_is_proven_as_verify_proves_it() {
    let shop = shop();
    let more = ["--for", "QK9V1-2", "--with", "QK6V2-2"];
    let (told, ran) = as_json(shop.path(), |out| {
        substitute(shop.path(), "tide-gauge-kept", &[&more[..], out].concat())
    });
    assert_eq!(ran.status, 0, "{}", ran.err);
    assert_eq!(told["alone"]["holds"], false, "the zener alone is not enough");
    let mend = &list(&told, "replacements")[0];
    assert_eq!(mend["level"], "values");
    let [value] = list(mend, "values") else { panic!("one value changes: {mend}") };
    // The same change by hand, and verify's own proof of it.
    alter(shop.path(), "designs/tide-gauge-kept.toml", "Quillmere/QK9V1-2", "Quillmere/QK6V2-2");
    let was = format!("{} = {}", value["key"].as_str().unwrap_or_default(), value["was"]);
    let is = was.replace(&value["was"].to_string(), &value["is"].to_string());
    alter(
        shop.path(),
        "designs/tide-gauge-kept.toml",
        &was.replace(".0", ""),
        &is.replace(".0", ""),
    );
    let ran = run(
        shop.path(),
        &["verify", "designs/tide-gauge-kept.toml", "--catalogs", ".", "--out", "v.json"],
    );
    assert_eq!(ran.status, 0, "{}{}", ran.out, ran.err);
    let text = std::fs::read(shop.path().join("v.json")).expect("the proof");
    let proof: Value = serde_json::from_slice(&text).expect("JSON");
    let utilisations = |checks: &[Value]| -> Vec<(String, f64)> {
        let of = |c: &Value| (c["name"].to_string(), c["utilisation"].as_f64().unwrap_or(-1.0));
        checks.iter().map(of).collect()
    };
    assert_eq!(
        utilisations(list(&mend["after"], "checks")),
        utilisations(list(&list(&proof, "designs")[0], "checks"))
    );
}

#[test]
fn a_second_source_that_promises_less_is_not_offered_and_refused_by_name() {
    let shop = shop();
    let gone = ["--for", "Dunmarrow/DNW60-5D", "--top", "1000"];
    let (told, _) = as_json(shop.path(), |out| {
        substitute(shop.path(), "mast-kept", &[&gone[..], out].concat())
    });
    let offered = going_in(&told);
    assert!(!offered.is_empty() && !offered.contains(&"Ketterwick/DNW60-5D".to_owned()));
    let with = ["--for", "Dunmarrow/DNW60-5D", "--with", "DNW60-5D"];
    let refused = substitute(shop.path(), "mast-kept", &with);
    assert_eq!(refused.status, 1, "{}", refused.out);
    assert!(refused.out.contains("soa-fault"), "{}", refused.out);
    // By its number alone every maker's part is gone.
    let both = substitute(shop.path(), "mast-kept", &["--for", "DNW60-5D", "--with", "DNW60-5D"]);
    assert_eq!(both.status, 2);
    assert!(both.err.contains("is the part that is gone"), "{}", both.err);
}

#[test]
fn a_second_source_that_can_go_in_is_told_with_what_differs() {
    let shop = shop();
    // A rail so mild that the second source's smaller operating area is enough.
    let mild = ["--for", "Dunmarrow/DNW60-5D", "--with", "DNW60-5D", "--set", "fault.limit_a=0.45"];
    let (told, ran) = as_json(shop.path(), |out| {
        substitute(shop.path(), "mast-kept", &[&mild[..], out].concat())
    });
    assert_eq!(ran.status, 0, "{}", ran.out);
    let part = &list(&list(&told, "replacements")[0], "parts")[0];
    let differs: Vec<&str> = list(part, "same_number_differs")
        .iter()
        .filter_map(|difference| difference["column"].as_str())
        .collect();
    assert!(differs.contains(&"soa_dc"), "{differs:?}");
    assert!(ran.out.contains("has the number of the part before, but"), "{}", ran.out);
}

#[test]
fn a_line_that_serves_bias_and_divider_is_replaced_in_both() {
    let shop = shop();
    let (told, _) = as_json(shop.path(), |out| {
        substitute(shop.path(), "bench-kept", &[&["--for", "CSW-KIT"], out].concat())
    });
    let first = &list(&told, "replacements")[0];
    let slots: Vec<&str> = list(first, "parts").iter().filter_map(|p| p["slot"].as_str()).collect();
    assert_eq!(slots, ["bias_line", "divider_line"]);
    assert_eq!(list(first, "parts")[0]["is"], list(first, "parts")[1]["is"]);
}

#[test]
fn a_design_without_any_substitute_is_a_no() {
    let shop = shop();
    // The sheet pins the part that is gone, and nothing else may stand there.
    alter(
        shop.path(),
        "sheets/winch-15v.toml",
        r#"pass = ["DNW60-10DW", "DNW80-15DW", "KWD6012C", "KWD10012C", "HSK12D90", "HSK20D100"]"#,
        r#"pass = "DNW60-10DW""#,
    );
    let ran = substitute(shop.path(), "winch-kept", &["--for", "DNW60-10DW"]);
    assert_eq!(ran.status, 1, "{}", ran.out);
    assert!(ran.out.contains("Nothing can go in, whatever else changes."), "{}", ran.out);
}

#[test]
fn a_blank_package_is_never_the_same() {
    let shop = shop();
    let rank_of = |shop: &Path| {
        let (told, _) = as_json(shop, |out| {
            let gone = ["--for", "FNK314", "--top", "1000"];
            substitute(shop, "tide-gauge-kept", &[&gone[..], out].concat())
        });
        let mends = list(&told, "replacements").to_vec();
        let of = |m: &&Value| list(m, "parts")[0]["is"] == "Fenwrack/FNK312";
        let mend = mends.iter().find(of).cloned().expect("FNK312 can go in");
        (mend["rank"].as_u64(), list(&mend, "parts")[0]["board"].clone())
    };
    let (before, board) = rank_of(shop.path());
    assert_eq!(board, "same-package-and-pinout");
    let path = shop.path().join("opamps.csv");
    let text = std::fs::read_to_string(&path).expect("the catalog");
    let blank = |line: &str| match line.starts_with("FNK312,") {
        true => line.replace(",DIP-8,", ",,"),
        false => line.to_owned(),
    };
    let text: Vec<String> = text.lines().map(blank).collect();
    std::fs::write(path, text.join("\n") + "\n").expect("written");
    let (after, board) = rank_of(shop.path());
    assert_eq!(board, "unknown");
    assert!(after > before, "{after:?} is not behind {before:?}");
}

#[test]
fn the_change_note_says_what_to_measure_and_approves_nothing() {
    let shop = shop();
    let more = ["--for", "QK9V1-2", "--with", "QK6V2-2", "--out", "n.md"];
    assert_eq!(substitute(shop.path(), "tide-gauge-kept", &more).status, 0);
    let note = std::fs::read_to_string(shop.path().join("n.md")).expect("the note");
    for text in [
        "approves nothing",
        "Quillmere/QK9V1-2",
        "## Bench test",
        "voltage on the zener",
        "## Cautions",
        "## Names and dates",
        "| decided",
        "output-error",
    ] {
        assert!(note.contains(text), "{text}: {note}");
    }
    let none = substitute(
        shop.path(),
        "tide-gauge-kept",
        &["--for", "QK9V1-2", "--pick", "99", "--out", "m.md"],
    );
    assert_eq!(none.status, 1);
    assert!(!shop.path().join("m.md").exists() && none.err.contains("none of rank 99"));
}

#[test]
fn wrong_names_are_told_with_what_would_be_right() {
    let shop = shop();
    let unused = substitute(shop.path(), "tide-gauge-kept", &["--for", "FNK318"]);
    assert_eq!(unused.status, 2);
    assert!(unused.err.contains("it uses"), "{}", unused.err);
    let unknown =
        substitute(shop.path(), "tide-gauge-kept", &["--for", "FNK314", "--with", "FNK31B"]);
    assert_eq!(unknown.status, 2);
    assert!(unknown.err.contains("did you mean"), "{}", unknown.err);
    let other =
        substitute(shop.path(), "tide-gauge-kept", &["--for", "FNK314", "--with", "QK9V1-2"]);
    assert_eq!(other.status, 2);
    assert!(other.err.contains("is no part of opamps.csv"), "{}", other.err);
    let nowhere = shortage(shop.path(), &["FNK31B"]);
    assert_eq!(nowhere.status, 2);
    assert!(nowhere.err.contains("did you mean"), "{}", nowhere.err);
}

#[test]
fn a_broken_design_is_reported_and_does_not_stop_the_others() {
    let shop = shop();
    std::fs::write(shop.path().join("designs/torn.toml"), "design = 1\nname = ").expect("written");
    std::fs::write(shop.path().join("designs/notes.toml"), "reminder = 1\n").expect("written");
    let (told, ran) =
        as_json(shop.path(), |out| shortage(shop.path(), &[&["FNK318"], out].concat()));
    assert_eq!(ran.status, 2);
    assert_eq!(list(&told, "broken").len(), 1, "{told}");
    assert_eq!(told["broken"][0]["file"], "designs/torn.toml");
    assert_eq!(list(&told, "designs").len(), 5, "the others are looked at all the same");
    assert!(ran.err.contains("torn.toml"), "{}", ran.err);
}

#[test]
fn every_affected_design_takes_parts_of_the_cover_alone() {
    let shop = shop();
    let gone = ["DNW80-15DW", "CRP-20K"];
    let (told, ran) = as_json(shop.path(), |out| shortage(shop.path(), &[&gone[..], out].concat()));
    assert_eq!(ran.status, 0, "{}", ran.out);
    let cover = &told["cover"];
    let parts: Vec<&str> = list(cover, "parts").iter().filter_map(|p| p["part"].as_str()).collect();
    assert_eq!(cover["exact"], true);
    assert_eq!(list(cover, "picks").len(), list(&told, "designs").len());
    let mut cost = 0.0;
    for pick in list(cover, "picks") {
        for part in list(&pick["mend"], "parts") {
            let is = part["is"].as_str().unwrap_or_default();
            assert!(parts.contains(&is), "{is} is not among {parts:?}");
        }
        assert_eq!(pick["mend"]["after"]["holds"], true);
        let file = pick["file"].as_str().unwrap_or_default();
        let of = |d: &&Value| d["file"] == file;
        let design = list(&told, "designs").iter().find(of).expect("the design");
        let boards = design["boards"].as_f64().unwrap_or(0.0);
        cost += boards * pick["mend"]["after"]["cost"].as_f64().unwrap_or(f64::NAN);
    }
    // One design has a zener of its own without a price, so its cost is not told.
    assert!(cost.is_nan() || (cost - cover["cost"].as_f64().unwrap_or(0.0)).abs() < 1e-9);
}

#[test]
fn designs_that_nothing_can_save_come_first_with_the_reason() {
    let shop = shop();
    let gone = ["DNW60-10DW", "DNW80-15DW", "KWD6012C", "KWD10012C", "HSK12D90", "HSK20D100"];
    let (told, ran) = as_json(shop.path(), |out| shortage(shop.path(), &[&gone[..], out].concat()));
    assert_eq!(ran.status, 1);
    let lost: Vec<bool> =
        list(&told, "designs").iter().map(|d| list(d, "replacements").is_empty()).collect();
    assert!(lost[0] && lost.windows(2).all(|w| w[0] >= w[1]), "{lost:?}");
    let why = told["designs"][0]["why_nothing"].as_str().unwrap_or_default();
    assert!(why.contains("No part may be chosen for pass"), "{why}");
}

#[test]
fn joint_stock_is_not_given_twice() {
    let shop = shop();
    // Three designs of a sheet that takes parts from stock alone.
    let (told, _) = as_json(shop.path(), |out| shortage(shop.path(), &[&["VRNA30"], out].concat()));
    let picked = |told: &Value| -> Vec<(String, u64)> {
        list(&told["cover"], "parts")
            .iter()
            .map(|p| {
                (
                    p["part"].as_str().unwrap_or_default().to_owned(),
                    p["pieces"].as_u64().unwrap_or(0),
                )
            })
            .collect()
    };
    let [(part, pieces)] = picked(&told).try_into().expect("one part serves all");
    // With one piece less than all need that part can no longer serve every one.
    let path = shop.path().join("opamps.csv");
    let name = part.rsplit('/').next().unwrap_or_default();
    let text = std::fs::read_to_string(&path).expect("the catalog");
    let scarce: Vec<String> = text
        .lines()
        .map(|line| match line.starts_with(&format!("{name},")) {
            true => {
                let mut cells: Vec<String> = line.split(',').map(str::to_owned).collect();
                cells[3] = (pieces - 1).to_string();
                cells.join(",")
            }
            false => line.to_owned(),
        })
        .collect();
    std::fs::write(path, scarce.join("\n") + "\n").expect("written");
    let (told, _) = as_json(shop.path(), |out| shortage(shop.path(), &[&["VRNA30"], out].concat()));
    let again = picked(&told);
    let taken = again.iter().find(|(p, _)| *p == part).map_or(0, |(_, pieces)| *pieces);
    assert!(taken < pieces, "{taken} of {} pieces", pieces - 1);
}

#[test]
fn exposed_puts_parts_without_a_replacement_first() {
    let shop = shop();
    let (told, ran) =
        as_json(shop.path(), |out| shortage(shop.path(), &[&["--exposed"], out].concat()));
    assert_eq!(ran.status, 0, "{}", ran.err);
    let without: Vec<u64> =
        list(&told, "parts").iter().filter_map(|p| p["designs_without"].as_u64()).collect();
    assert!(without.windows(2).all(|w| w[0] >= w[1]), "{without:?}");
    // The count of a part and design is that of the list of replacements.
    let part =
        list(&told, "parts").iter().find(|p| p["part"] == "Fenwrack/FNK314").expect("a part");
    let kept = list(part, "designs").iter().find(|d| d["file"] == "designs/tide-gauge-kept.toml");
    let counted = kept.and_then(|d| d["replacements"].as_u64());
    let (listed, _) = as_json(shop.path(), |out| {
        let gone = ["--for", "FNK314", "--top", "1"];
        substitute(shop.path(), "tide-gauge-kept", &[&gone[..], out].concat())
    });
    assert_eq!(counted, listed["looked"]["found"].as_u64());
}

#[test]
fn every_format_is_written() {
    let shop = shop();
    for ending in ["csv", "xlsx", "json", "md"] {
        let file = format!("s.{ending}");
        assert_eq!(shortage(shop.path(), &["FNK318", "--out", &file]).status, 0);
        let first = std::fs::read(shop.path().join(&file)).expect("the file");
        assert_eq!(shortage(shop.path(), &["FNK318", "--out", &file, "--overwrite"]).status, 0);
        let again = std::fs::read(shop.path().join(&file)).expect("the file");
        assert!(!first.is_empty() && first == again, "{file} is the same each time");
        let file = format!("e.{ending}");
        assert_eq!(shortage(shop.path(), &["--exposed", "--out", &file]).status, 0);
        let file = format!("t.{ending}");
        let more = ["--for", "FNK314", "--out", &file];
        assert_eq!(substitute(shop.path(), "tide-gauge-kept", &more).status, 0);
    }
}
