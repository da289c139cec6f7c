//! Workbooks and Markdown: what a spreadsheet program and a reader find in them.

mod common;

use common::sheets::{Read, column, formulas, numbers, sheets, texts};
use common::{Run, repository, run, tool};
use serde_json::Value;
use std::path::{Path, PathBuf};
use std::process::{Command, Stdio};

const SHEET: &str = "catalogs-sample/sheets/tide-gauge-12v.toml";

/// Runs a command on the sample catalogs and writes files into a folder.
fn written(folder: &Path, command: &[&str], files: &[&str]) -> Run {
    let mut arguments: Vec<String> = command.iter().map(|a| (*a).to_owned()).collect();
    arguments.extend(["--catalogs".to_owned(), "catalogs-sample".to_owned()]);
    for file in files {
        arguments.extend(["--out".to_owned(), folder.join(file).display().to_string()]);
    }
    let arguments: Vec<&str> = arguments.iter().map(String::as_str).collect();
    run(&repository(""), &arguments)
}

fn json(path: &Path) -> Value {
    serde_json::from_slice(&std::fs::read(path).expect("the file is there")).expect("JSON")
}

fn close(a: f64, b: f64) -> bool {
    (a - b).abs() <= 1e-12 * a.abs().max(b.abs())
}

fn assert_close(found: &[f64], expected: &[f64], what: &str) {
    assert_eq!(found.len(), expected.len(), "{what}");
    for (a, b) in found.iter().zip(expected) {
        assert!(close(*a, *b), "{what}: {a} and {b}");
    }
}

/// A design of the sample shop with another zener, which its own cells describe.
fn with_zener(folder: &Path, name: &str, zener: &str) -> PathBuf {
    let path = repository("catalogs-sample/designs/tide-gauge-kept.toml");
    let text = std::fs::read_to_string(path).expect("the design is there");
    let sheet = repository(SHEET).canonicalize().expect("the sheet is there");
    let text = text.split("[proven.zener]").next().expect("a beginning");
    let text = text
        .replace("../sheets/tide-gauge-12v.toml", &sheet.display().to_string())
        .replace("\"Quillmere/QK9V1-2\"", &format!("'''{zener}'''"));
    let cells = "vz_v = 9.1\ntol_pct = 2\nizt_a = \"5m\"\nzzt_ohm = 14\niz_min_a = \"0.5m\"\npd_w = 0.5\n\
                 tj_max_c = 175\ntc_min_mv_per_c = 3.9\ntc_max_mv_per_c = 6.9\n";
    let file = folder.join(name);
    std::fs::write(&file, format!("{text}[inline.zener]\n{cells}")).expect("a file");
    file
}

/// Names that would do harm where they are not taken as texts.
const HOSTILE: [&str; 5] = [
    "=HYPERLINK(\"http://x.example/\",\"click\")",
    "+1+1|cmd",
    "-2|<script>alert(1)</script>",
    "@SUM(A1)![p](http://x.example/p.png)",
    "<img src=x onerror=alert(1)> [l](javascript:x) `c` | a | b",
];

// ---- in a spreadsheet program ----

/// The same workbooks after a spreadsheet program has read them, worked every formula out again and
/// written them in its own format.
fn by_a_spreadsheet_program(test: &str, books: &[PathBuf]) -> Option<Vec<PathBuf>> {
    let program = tool::program(test, &["soffice", "libreoffice"])?;
    let folder = books.first()?.parent()?.to_owned();
    let profile = folder.join("profile/user");
    std::fs::create_dir_all(&profile).expect("a folder");
    // Of files that other programs wrote it would take the values as they stand.
    let always = "<?xml version=\"1.0\" encoding=\"UTF-8\"?>\n\
        <oor:items xmlns:oor=\"http://openoffice.org/2001/registry\">\
        <item oor:path=\"/org.openoffice.Office.Calc/Formula/Load\">\
        <prop oor:name=\"OOXMLRecalcMode\" oor:op=\"fuse\"><value>0</value></prop></item></oor:items>\n";
    std::fs::write(profile.join("registrymodifications.xcu"), always).expect("a file");
    let mut command = Command::new(program);
    command.arg(format!("-env:UserInstallation=file://{}", folder.join("profile").display()));
    command.args(["--headless", "--convert-to", "ods", "--outdir"]).arg(folder.join("read"));
    let status = command.args(books).stdout(Stdio::null()).stderr(Stdio::null()).status();
    assert!(status.expect("it runs").success());
    let read = |book: &PathBuf| {
        folder.join("read").join(book.file_name().expect("a name")).with_extension("ods")
    };
    Some(books.iter().map(read).collect())
}

#[test]
fn a_spreadsheet_program_reads_every_workbook_and_comes_to_the_same_figures() {
    let test = "a_spreadsheet_program_reads_every_workbook_and_comes_to_the_same_figures";
    let folder = tempfile::tempdir().unwrap();
    let at = |name: &str| folder.path().join(name);
    written(folder.path(), &["shortlist", SHEET], &["list.xlsx"]);
    let kept = "catalogs-sample/designs/tide-gauge-kept.toml";
    let old = "catalogs-sample/designs/tide-gauge-1994.toml";
    written(folder.path(), &["verify", kept, old], &["proof.xlsx"]);
    written(folder.path(), &["order", kept, old, "--boards", "40"], &["order.xlsx"]);
    let hostile = HOSTILE.iter().enumerate();
    let designs: Vec<String> = hostile
        .map(|(n, name)| with_zener(folder.path(), &format!("h{n}.toml"), name))
        .map(|path| path.display().to_string())
        .collect();
    let order: Vec<&str> =
        ["order"].into_iter().chain(designs.iter().map(String::as_str)).collect();
    written(folder.path(), &order, &["hostile.xlsx"]);
    let books = ["list.xlsx", "proof.xlsx", "order.xlsx", "hostile.xlsx"].map(at);
    let Some(read) = by_a_spreadsheet_program(test, &books) else { return };

    for (ours, theirs) in books.iter().zip(&read) {
        let (ours, theirs) = (sheets(ours), sheets(theirs));
        assert!(ours.keys().eq(theirs.keys()), "{:?} {:?}", ours.keys(), theirs.keys());
        for (name, rows) in &ours {
            let other = theirs.get(name).unwrap();
            for (row, cells) in rows.iter().enumerate() {
                for (place, cell) in cells.iter().enumerate() {
                    let found = other.get(row).and_then(|r| r.get(place)).unwrap_or(&Read::Blank);
                    let same = match (cell, found) {
                        // A spreadsheet program shows fifteen digits.
                        (Read::Number(a), Read::Number(b)) => close(*a, *b),
                        (a, b) => a == b,
                    };
                    assert!(same, "{name}, row {row}, column {place}: {cell:?} and {found:?}");
                }
            }
        }
    }
    let lines = sheets(&read[3]).remove("Lines").unwrap();
    let parts = texts(&lines, "part");
    for name in HOSTILE {
        // A stroke parts maker and name.
        let part = name.split_once('/').map_or(name, |(_, part)| part);
        assert!(parts.iter().any(|p| p == part), "{name} is not a text as it was: {parts:?}");
    }
}

// ---- the workbook itself ----

#[test]
fn the_workbook_holds_the_figures_of_the_json() {
    let folder = tempfile::tempdir().unwrap();
    let run = written(folder.path(), &["shortlist", SHEET], &["x.xlsx", "x.json"]);
    assert_eq!(run.status, 0, "{}", run.err);
    let list = json(&folder.path().join("x.json"));
    let book = sheets(&folder.path().join("x.xlsx"));
    let names: Vec<&str> = book.keys().map(String::as_str).collect();
    assert_eq!(names, ["Checks", "Notes", "Order lines", "Ranking"]);

    let candidates = list["candidates"].as_array().unwrap();
    let ranking = &book["Ranking"];
    let of =
        |key: &str| -> Vec<f64> { candidates.iter().map(|c| c[key].as_f64().unwrap()).collect() };
    for key in ["rank", "score", "cost", "efficiency", "loss", "margin", "slack"] {
        assert_close(&numbers(ranking, key), &of(key), key);
    }
    let checks = &book["Checks"];
    let each = |key: &str| -> Vec<f64> {
        let checks = candidates.iter().flat_map(|c| c["checks"].as_array().unwrap());
        checks.map(|check| check[key].as_f64().unwrap()).collect()
    };
    assert!(each("asked").len() > 200, "every check of ten candidates");
    for key in ["asked", "allowed", "utilisation"] {
        assert_close(&numbers(checks, key), &each(key), key);
    }
    let notes = texts(&book["Notes"], "note");
    for text in
        list["cautions"].as_array().unwrap().iter().chain(list["assumed"].as_array().unwrap())
    {
        assert!(notes.iter().any(|note| note == text.as_str().unwrap()), "{text}");
    }
}

#[test]
fn order_lines_add_up_and_their_formulas_say_how() {
    let folder = tempfile::tempdir().unwrap();
    written(folder.path(), &["shortlist", SHEET], &["x.xlsx", "x.json"]);
    let file = folder.path().join("x.xlsx");
    let list = json(&folder.path().join("x.json"));
    let rows = sheets(&file).remove("Order lines").unwrap();
    let (rows, total) = rows.split_at(rows.len() - 1);
    let [pieces, price, line_total, ranked, per_board, quantity] = [
        "pieces",
        "order price",
        "line total",
        "ranked price",
        "pieces per board",
        "price quantity",
    ]
    .map(|heading| numbers(rows, heading));
    for row in 0..pieces.len() {
        assert!(close(line_total[row], pieces[row] * price[row]), "row {row}");
        assert!(close(pieces[row], 25.0 * per_board[row]), "row {row}");
    }
    let used = texts(rows, "used as");
    let of = |name: &str| used.iter().position(|u| u == name).unwrap();
    assert_eq!((quantity[of("RF")], quantity[of("RI")], quantity[of("zener")]), (50.0, 50.0, 25.0));
    // The ranking counts every piece at the price of as many pieces as boards.
    let cost: f64 = ranked.iter().zip(&per_board).map(|(price, pieces)| price * pieces).sum();
    assert!(close(cost, list["candidates"][0]["cost"].as_f64().unwrap()));
    let sum: f64 = line_total.iter().sum();
    let place =
        rows[0].iter().position(|c| matches!(c, Read::Text(t) if t.starts_with("line total")));
    let Read::Number(total) = total[0][place.unwrap()] else { panic!("a sum") };
    assert!(close(total, sum), "{total} and {sum}");
    let formulas = formulas(&file, "Order lines");
    assert_eq!(formulas.len(), pieces.len() + 1, "{formulas:?}");
    assert!(formulas.iter().any(|f| f.starts_with("SUM(")), "{formulas:?}");
}

#[test]
fn pick_says_which_candidate_is_ordered_for() {
    let folder = tempfile::tempdir().unwrap();
    written(folder.path(), &["shortlist", SHEET], &["x.json"]);
    let list = json(&folder.path().join("x.json"));
    let fourth = &list["candidates"][3];
    let id = fourth["id"].as_str().unwrap();
    let zener = fourth["slots"][0]["part"].as_str().unwrap();
    assert_ne!(list["candidates"][0]["slots"][0]["part"].as_str().unwrap(), zener);
    for (name, file) in [("4", "rank.xlsx"), (id, "id.xlsx")] {
        let run = written(folder.path(), &["shortlist", SHEET, "--pick", name], &[file]);
        assert_eq!(run.status, 0, "{}", run.err);
        let rows = sheets(&folder.path().join(file)).remove("Order lines").unwrap();
        assert!(texts(&rows, "part").iter().any(|part| part == zener));
    }
    let files = ["none.xlsx", "none.csv"];
    let run = written(folder.path(), &["shortlist", SHEET, "--pick", "99"], &files);
    assert_eq!(run.status, 1);
    assert!(
        run.err.contains("none.xlsx is not written") && run.err.contains("`99`"),
        "{}",
        run.err
    );
    assert!(!folder.path().join("none.xlsx").exists(), "order lines for no candidate");
    assert!(folder.path().join("none.csv").exists(), "the ranking has no order lines");
}

#[test]
fn the_same_run_gives_the_same_bytes() {
    let folder = tempfile::tempdir().unwrap();
    for format in ["xlsx", "md"] {
        let files = [format!("a.{format}"), format!("b.{format}")];
        for file in &files {
            written(folder.path(), &["shortlist", SHEET], &[file]);
        }
        let [a, b] = files.map(|file| std::fs::read(folder.path().join(file)).unwrap());
        assert_eq!(a, b, "{format}");
    }
}

#[test]
fn a_list_without_candidates_is_written_all_the_same() {
    let folder = tempfile::tempdir().unwrap();
    let sheet = "catalogs-sample/sheets/impossible-10v.toml";
    let run = written(folder.path(), &["shortlist", sheet], &["x.xlsx", "x.md"]);
    assert_eq!(run.status, 1, "{}", run.err);
    let book = sheets(&folder.path().join("x.xlsx"));
    assert_eq!(book["Ranking"].len(), 1, "the headings alone");
    let text = std::fs::read_to_string(folder.path().join("x.md")).unwrap();
    assert!(text.contains("## Order lines\n\nNone.\n"), "{text}");
}

#[test]
fn a_designs_workbook_tells_answers_checks_and_order_lines() {
    let folder = tempfile::tempdir().unwrap();
    let designs =
        ["tide-gauge-kept", "tide-gauge-1994"].map(|n| format!("catalogs-sample/designs/{n}.toml"));
    let files = ["x.xlsx", "x.json"];
    let run = written(folder.path(), &["verify", &designs[0], &designs[1]], &files);
    assert_eq!(run.status, 1, "{}", run.err);
    let proofs = json(&folder.path().join("x.json"));
    let book = sheets(&folder.path().join("x.xlsx"));
    assert_eq!(texts(&book["Designs"], "answer"), ["holds", "fails"]);
    let told = proofs["designs"].as_array().unwrap().iter();
    let told = told.flat_map(|d| d["checks"].as_array().unwrap());
    let allowed: Vec<f64> = told.map(|check| check["allowed"].as_f64().unwrap()).collect();
    assert_close(&numbers(&book["Checks"], "allowed"), &allowed, "allowed");
    let holds = texts(&book["Checks"], "holds");
    assert!(holds.contains(&"no".to_owned()) && holds.contains(&"yes".to_owned()));
    let lines = &book["Order lines"];
    let own = texts(lines, "part").iter().position(|part| part == "OB-6V2").expect("the own zener");
    assert_eq!(column(lines, "order price")[own], Read::Blank, "nobody says what it costs");
    let last = texts(lines, "rail").pop().unwrap();
    assert_eq!(last, "total without 3 lines of unknown price");
}

// ---- Markdown ----

#[test]
fn nothing_from_a_file_means_anything_to_markdown() {
    let folder = tempfile::tempdir().unwrap();
    for (n, name) in HOSTILE.iter().enumerate() {
        let design = with_zener(folder.path(), &format!("h{n}.toml"), name);
        let file = format!("h{n}.md");
        written(folder.path(), &["order", &design.display().to_string()], &[&file]);
        let text = std::fs::read_to_string(folder.path().join(&file)).unwrap();
        assert!(!text.contains("<script") && !text.contains("<img"), "{text}");
        // A bracket or a mark of code without a backslash would open a link, a picture or code.
        let mut before = ' ';
        for c in text.chars() {
            assert!(!(matches!(c, '[' | '`') && before != '\\'), "{name}: {text}");
            before = c;
        }
        let strokes = |line: &str| line.replace("\\|", "").matches('|').count();
        let lines = text.lines().skip_while(|line| *line != "## Lines").skip(2);
        let table: Vec<&str> = lines.take_while(|line| !line.is_empty()).collect();
        assert!(table.len() > 7, "{text}");
        let [first, ..] = table.as_slice() else { panic!("a table") };
        assert!(table.iter().all(|line| strokes(line) == strokes(first)), "{text}");
    }
}
