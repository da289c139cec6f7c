//! Files that people and machines damage: no panic, no hang, memory bounded, and the place is told.

mod common;

use catalog::Kind;
use catalog::column::{Cell, Column, Need};
use common::{Run, copy_of, program, run, told};
use std::path::Path;
use std::process::{Command, Stdio};
use std::time::{Duration, Instant};
use tempfile::TempDir;

/// What any run here may take, s. It only ends a run that hangs: some hundred times what the slowest takes.
const LONGEST: Duration = Duration::from_secs(300);

/// Runs the program with a limit on its address space, in MB, where the system has one.
fn run_within(folder: &Path, arguments: &[&str], megabytes: u64) -> Run {
    let mut command = if cfg!(target_os = "linux") {
        let mut shell = Command::new("sh");
        let limit = format!("ulimit -v {} && exec \"$0\" \"$@\"", megabytes * 1024);
        shell.args(["-c", &limit, env!("CARGO_BIN_EXE_railwright")]);
        // Each thread of a reader reserves a stack and an arena of its own.
        shell.env("RAYON_NUM_THREADS", "2").env("MALLOC_ARENA_MAX", "2");
        shell.current_dir(folder);
        shell
    } else {
        program(folder)
    };
    command.args(arguments);
    ended(command)
}

/// A run that ends, or is ended.
fn ended(mut command: Command) -> Run {
    let out = tempfile::tempfile().expect("a file");
    let err = tempfile::tempfile().expect("a file");
    let same = |file: &std::fs::File| Stdio::from(file.try_clone().expect("a handle"));
    command.stdin(Stdio::null()).stdout(same(&out)).stderr(same(&err));
    let mut child = command.spawn().expect("the program runs");
    let begin = Instant::now();
    let status = loop {
        if let Some(status) = child.try_wait().expect("a status") {
            break status;
        }
        if begin.elapsed() > LONGEST {
            child.kill().expect("the program is ended");
            panic!("the program hangs: {command:?}");
        }
        std::thread::sleep(Duration::from_millis(10));
    };
    let text = |mut file: std::fs::File| {
        use std::io::{Read, Seek};
        let mut bytes = Vec::new();
        file.rewind().expect("the beginning");
        file.read_to_end(&mut bytes).expect("what was said");
        bytes
    };
    told(std::process::Output { status, stdout: text(out), stderr: text(err) })
}

/// The input is refused for a reason that is told; nothing is shown as a result.
#[track_caller]
fn refused(run: &Run, told: &[&str]) {
    let short: String = run.err.chars().take(2000).collect();
    assert_eq!(run.status, 2, "{short}");
    assert!(!run.err.contains("panicked"), "{short}");
    for text in told {
        assert!(run.err.contains(text), "{text} in {short}");
    }
    assert!(run.err.len() < 1_000_000, "{} bytes of messages", run.err.len());
}

const SHORTLIST: [&str; 4] = ["shortlist", "sheet.toml", "--catalogs", "catalogs"];

fn shortlist(folder: &TempDir) -> Run {
    run_within(folder.path(), &SHORTLIST, 2000)
}

fn write(folder: &TempDir, file: &str, bytes: impl AsRef<[u8]>) {
    std::fs::write(folder.path().join(file), bytes).expect("a file");
}

fn read(folder: &TempDir, file: &str) -> String {
    std::fs::read_to_string(folder.path().join(file)).expect("a file")
}

// ---- size ----

#[test]
fn a_header_of_a_million_columns() {
    let folder = copy_of("fixed-12v");
    let zeners = read(&folder, "catalogs/zeners.csv");
    let (header, rows) = zeners.split_once('\n').expect("rows");
    // The catalog still stands in the first columns, so it serves.
    let more: String = (0..1_000_000).map(|n| format!(",c{n}")).collect();
    write(&folder, "catalogs/zeners.csv", format!("{header}{more}\n{rows}"));
    let run = shortlist(&folder);
    assert!(run.status == 0 || run.err.contains("row-ragged"), "{:.2000}", run.err);

    for name in [&b"x,"[..], b"vz_v,", b"\xff,"] {
        write(&folder, "catalogs/zeners.csv", name.repeat(1_000_000));
        refused(&shortlist(&folder), &["zeners.csv:1:"]);
    }
    write(&folder, "catalogs/zeners.csv", b",".repeat(1_000_000));
    let run = shortlist(&folder);
    assert!(run.status == 1 && run.err.contains("zeners.csv"), "no row is there: {}", run.err);
}

#[test]
fn a_cell_of_a_hundred_megabytes() {
    let folder = copy_of("fixed-12v");
    let zeners = read(&folder, "catalogs/zeners.csv");
    let (header, rows) = zeners.split_once('\n').expect("rows");
    let huge = "7".repeat(100_000_000);
    // As a number, in quotation marks over many lines, and in marks that are never closed.
    let many_lines = format!("\"{}\"", "7777777\n".repeat(12_500_000));
    for cell in [huge.clone(), many_lines, format!("\"{huge}")] {
        let row = rows.lines().next().expect("a row").replacen(",5.6,", &format!(",{cell},"), 1);
        write(&folder, "catalogs/zeners.csv", format!("{header}\n{row}\n"));
        refused(&shortlist(&folder), &["zeners.csv:2:"]);
    }
    // As the name of a part, which every table and message would carry.
    let row = rows.lines().next().expect("a row");
    write(&folder, "catalogs/zeners.csv", format!("{header}\n{huge}{row}\n"));
    refused(&shortlist(&folder), &["zeners.csv:2:", "cell-too-long"]);
}

#[test]
fn toml_of_great_depth() {
    let folder = copy_of("fixed-12v");
    let sheet = read(&folder, "sheet.toml");
    let deep = 200_000;
    let texts = [
        format!("x = {}", "[".repeat(deep)),
        format!("x = {}{}", "[".repeat(deep), "]".repeat(deep)),
        format!("x = {}1{}", "{a=".repeat(deep), "}".repeat(deep)),
        format!("{}a = 1", "a.".repeat(deep)),
        format!("[{}a]\n", "a.".repeat(deep)),
        format!("[[{}a]]\n", "a.".repeat(deep)),
        format!("x = \"\"\"{}", "\n".repeat(deep)),
        "[a]\n".repeat(deep),
        (0..deep).map(|n| format!("k{n} = {n}\n")).collect(),
    ];
    for text in texts {
        let shown: String = text.chars().take(20).collect();
        write(&folder, "sheet.toml", &text);
        refused(&shortlist(&folder), &["sheet.toml"]);
        write(&folder, "sheet.toml", &sheet);
        write(&folder, "catalogs/shop.toml", &text);
        refused(&shortlist(&folder), &["shop.toml"]);
        std::fs::remove_file(folder.path().join("catalogs/shop.toml")).expect("a file");
        write(&folder, "design.toml", &text);
        let run =
            run_within(folder.path(), &["verify", "design.toml", "--catalogs", "catalogs"], 2000);
        refused(&run, &["design.toml"]);
        let value = text.trim_start_matches("x = ").chars().take(100_000).collect::<String>();
        let set = format!("load.max_a={value}");
        let run = run_within(folder.path(), &[&SHORTLIST[..], &["--set", &set]].concat(), 2000);
        assert_eq!(run.status, 2, "{shown}: {:.2000}", run.err);
    }
}

#[test]
fn a_sheet_without_end() {
    if !Path::new("/dev/zero").exists() {
        eprintln!("skipped: a_sheet_without_end: there is no /dev/zero here");
        return;
    }
    let folder = copy_of("fixed-12v");
    let run =
        run_within(folder.path(), &["shortlist", "/dev/zero", "--catalogs", "catalogs"], 2000);
    refused(&run, &["/dev/zero"]);
}

// ---- bytes ----

#[test]
fn bytes_that_are_no_text() {
    for bytes in [&b"\0"[..], b"\xff\xfe", b"\xc3", b"\xed\xa0\x80", b"\x1b[31m", b"\0\0\0\0"] {
        let folder = copy_of("fixed-12v");
        for file in ["sheet.toml", "catalogs/shop.toml"] {
            let before = std::fs::read(folder.path().join(file)).unwrap_or_default();
            write(&folder, file, [bytes, before.as_slice()].concat());
            refused(&shortlist(&folder), &[file.rsplit('/').next().unwrap_or(file)]);
            match before.is_empty() {
                true => std::fs::remove_file(folder.path().join(file)).expect("a file"),
                false => write(&folder, file, before),
            }
        }
        let zeners = std::fs::read(folder.path().join("catalogs/zeners.csv")).expect("zeners");
        let place = zeners.windows(5).position(|w| w == b",5.6,").expect("5.6") + 1;
        let with = [&zeners[..place], bytes, &zeners[place..]].concat();
        write(&folder, "catalogs/zeners.csv", with);
        let run = shortlist(&folder);
        refused(&run, &["zeners.csv:2:"]);
        assert!(!run.err.contains(['\0', '\u{1b}']), "{:?}", run.err);
    }
}

// ---- figures ----

/// The columns that hold a figure, and whether the column takes this one.
fn number_columns(kind: Kind, figure: f64) -> Vec<(&'static Column, bool)> {
    let takes = |column: &Column| match column.cell {
        Cell::Number(cell) => cell.range.holds(figure),
        // Numbers of curves, counts and prices are above zero, or at zero for a price.
        Cell::Price => figure >= 0.0,
        _ => false,
    };
    let is_number = |c: &&Column| {
        !matches!(c.cell, Cell::Text | Cell::Word(_)) && c.name != "series" && c.name != "fits"
    };
    kind.columns().iter().filter(is_number).map(|column| (column, takes(column))).collect()
}

const FILES: [(Kind, &str); 6] = [
    (Kind::Zeners, "zeners.csv"),
    (Kind::Opamps, "opamps.csv"),
    (Kind::Transistors, "transistors.csv"),
    (Kind::Resistors, "resistors.csv"),
    (Kind::Pots, "pots.csv"),
    (Kind::Heatsinks, "heatsinks.csv"),
];

/// A catalog in which the n-th row holds the text in its n-th column of figures, and nothing else but what a
/// row can't do without: then whatever is said about a row is about that cell.
fn one_bad_cell_a_row(kind: Kind, columns: &[(&Column, bool)], text: &str) -> String {
    let names: Vec<&str> = kind.columns().iter().map(|c| c.name).collect();
    let mut catalog = names.join(",") + "\n";
    for (n, (bad, _)) in columns.iter().enumerate() {
        let cells = kind.columns().iter().map(|column| match column {
            c if c.name == bad.name => text.to_owned(),
            c if c.name == "part" => format!("P{n}"),
            c if c.need == Need::Always => "1".to_owned(),
            _ => String::new(),
        });
        catalog += &(cells.collect::<Vec<_>>().join(",") + "\n");
    }
    catalog
}

#[test]
fn no_column_takes_what_is_no_figure() {
    let texts = [
        "NaN",
        "nan",
        "inf",
        "-inf",
        "Infinity",
        "1e999",
        "-1e999",
        "1e-999999999999",
        "1e9999999999999999999",
        "0x10",
        "1_0",
        "--1",
        "1..2",
        "1e",
        "٣",
    ];
    for (kind, file) in FILES {
        let columns = number_columns(kind, f64::NAN);
        for text in texts {
            let folder = tempfile::tempdir().expect("a folder");
            write(&folder, file, one_bad_cell_a_row(kind, &columns, text));
            let run = run(folder.path(), &["catalog", "check", "--catalogs", "."]);
            assert_eq!(run.status, 2);
            for (line, (column, _)) in (2..).zip(&columns) {
                let place = format!("{file}:{line}:");
                assert!(run.err.contains(&place), "{text} passes as {} of {file}", column.name);
            }
        }
    }
}

#[test]
fn columns_refuse_what_lies_outside_their_range() {
    let mut refusals = 0;
    for (kind, file) in FILES {
        for (text, figure) in [("-1", -1.0), ("0", 0.0), ("-1e-300", -1e-300)] {
            let mut columns = number_columns(kind, figure);
            // Two temperatures are tied to each other by a rule of the row.
            columns.retain(|(column, _)| !column.name.contains("_power_"));
            let folder = tempfile::tempdir().expect("a folder");
            write(&folder, file, one_bad_cell_a_row(kind, &columns, text));
            let run = run(folder.path(), &["catalog", "check", "--catalogs", "."]);
            for (line, (column, takes)) in (2..).zip(&columns) {
                let place = format!("{file}:{line}:");
                let is_refused = run.err.contains(&place);
                assert_eq!(
                    is_refused, !takes,
                    "{text} as {} of {file}: {:.1500}",
                    column.name, run.err
                );
                refusals += usize::from(is_refused);
            }
        }
    }
    assert!(refusals > 100, "{refusals}");
}

#[test]
fn no_key_of_a_sheet_takes_what_is_no_figure() {
    let folder = copy_of("fixed-12v");
    for key in sheet::keys::ALL {
        if !matches!(
            key.kind,
            sheet::keys::Kind::Number(_)
                | sheet::keys::Kind::Duration(_)
                | sheet::keys::Kind::Count(_)
        ) {
            continue;
        }
        for text in ["nan", "inf", "-inf", "1e999", "'5 V'", "[]", "{}", "true", "1979-05-27"] {
            let set = format!("{}={text}", key.name);
            let run = run(folder.path(), &[&SHORTLIST[..], &["--set", &set]].concat());
            refused(&run, &[key.name]);
        }
    }
}

// ---- what is there twice, missing, or something else ----

#[test]
fn keys_and_parts_that_are_there_twice() {
    let folder = copy_of("fixed-12v");
    let sheet = read(&folder, "sheet.toml");
    write(&folder, "sheet.toml", format!("{sheet}\n[feed]\nmin_v = 1\n"));
    refused(&shortlist(&folder), &["sheet.toml:"]);
    write(&folder, "sheet.toml", sheet.replacen("min_v = ", "min_v = 1\nmin_v = ", 1));
    refused(&shortlist(&folder), &["sheet.toml:"]);
    write(&folder, "sheet.toml", &sheet);
    let zeners = read(&folder, "catalogs/zeners.csv");
    let row = zeners.lines().nth(1).expect("a row").to_owned();
    write(&folder, "catalogs/zeners.csv", format!("{zeners}{row}\n"));
    refused(&shortlist(&folder), &["row-duplicate"]);
    write(&folder, "catalogs/zeners.csv", zeners.replacen("vz_v", "tol_pct", 1));
    refused(&shortlist(&folder), &["column-duplicate"]);
    write(&folder, "catalogs/zeners.csv", zeners);
    write(&folder, "design.toml", "design = 1\ndesign = 1\nname = 'x'\n");
    refused(
        &run(folder.path(), &["verify", "design.toml", "--catalogs", "catalogs"]),
        &["design.toml:2:"],
    );
}

#[test]
fn designs_whose_sheet_is_no_sheet() {
    let folder = copy_of("fixed-12v");
    let kept =
        run(folder.path(), &[&SHORTLIST[..], &["--keep", "1", "--as", "design.toml"]].concat());
    assert_eq!(kept.status, 0, "{}", kept.err);
    let design = read(&folder, "design.toml");
    std::fs::create_dir(folder.path().join("folder")).expect("a folder");
    for (other, said) in [
        ("missing.toml", "missing.toml"),
        ("design.toml", "design.toml"),
        ("other.toml", "other.toml"),
        ("folder", "folder"),
        ("", "other.toml"),
        ("catalogs/zeners.csv", "zeners.csv"),
    ] {
        write(
            &folder,
            "other.toml",
            design.replacen("sheet = \"sheet.toml\"", &format!("sheet = \"{other}\""), 1),
        );
        let run = run(folder.path(), &["verify", "other.toml", "--catalogs", "catalogs"]);
        refused(&run, &[said]);
    }
}

#[test]
fn folders_in_place_of_files() {
    for file in
        ["sheet.toml", "catalogs/zeners.csv", "catalogs/heatsinks.csv", "catalogs/shop.toml"]
    {
        let folder = copy_of("fixed-12v");
        let path = folder.path().join(file);
        let _ = std::fs::remove_file(&path);
        std::fs::create_dir(&path).expect("a folder");
        refused(&shortlist(&folder), &[file.rsplit('/').next().unwrap_or(file)]);
    }
    let folder = copy_of("fixed-12v");
    refused(
        &run(folder.path(), &["shortlist", "sheet.toml", "--catalogs", "sheet.toml"]),
        &["sheet.toml"],
    );
    refused(&run(folder.path(), &["verify", "catalogs", "--catalogs", "catalogs"]), &["catalogs"]);
}

#[cfg(unix)]
#[test]
fn links_that_lead_to_themselves() {
    for file in
        ["sheet.toml", "catalogs/zeners.csv", "catalogs/heatsinks.csv", "catalogs/shop.toml"]
    {
        let folder = copy_of("fixed-12v");
        let path = folder.path().join(file);
        let _ = std::fs::remove_file(&path);
        std::os::unix::fs::symlink(&path, &path).expect("a link");
        refused(&shortlist(&folder), &[file.rsplit('/').next().unwrap_or(file)]);
    }
    let folder = copy_of("fixed-12v");
    std::os::unix::fs::symlink("loop", folder.path().join("loop")).expect("a link");
    refused(&run(folder.path(), &["shortlist", "sheet.toml", "--catalogs", "loop"]), &["loop"]);
}

/// A pipe that nobody writes into would be waited for without end.
#[cfg(unix)]
#[test]
fn a_pipe_in_place_of_a_catalog_is_refused() {
    for file in ["catalogs/zeners.csv", "catalogs/heatsinks.csv", "catalogs/shop.toml"] {
        let folder = copy_of("fixed-12v");
        let path = folder.path().join(file);
        let _ = std::fs::remove_file(&path);
        let made = Command::new("mkfifo").arg(&path).status();
        if !made.is_ok_and(|status| status.success()) {
            eprintln!("skipped: a_pipe_in_place_of_a_catalog_is_refused: there is no mkfifo here");
            return;
        }
        refused(&shortlist(&folder), &[file.rsplit('/').next().unwrap_or(file), "no regular file"]);
    }
}
